"""What if: the task network with tasks shortened, or with some of its tasks only."""

import graphlib
from collections.abc import Collection, Mapping, Sequence
from dataclasses import replace

from readiness.calculations.task_network import (
    NO_FLOORS,
    Task,
    checked_network,
    length_working_days,
    network_times,
)
from readiness.quantities import Table

MOVERS = (
    "task", "title", "owner", "working_days", "gain_if_shortened_working_days",
    "gain_if_no_time_working_days",
)  # fmt: skip


def what_moves_it(
    *, tasks: Sequence[Task], shortened_by_working_days: int, not_before: Mapping[str, int] = NO_FLOORS
) -> Table:
    """
    Return, for each critical task, how much nearer the end comes if it is shortened or takes no time.

    Args:
        tasks: The tasks.
        shortened_by_working_days: By how much each task in turn is shortened. [working days]
        not_before: For some tasks, the first working day on which they can start.

    Returns:
        One row per critical task, largest gain first. A gain smaller than the shortening shows that another
        chain takes over.

    Raises:
        ValueError: As network_times, or if the shortening is not positive.

    Valid for: one task at a time, by recalculation.
    Assumes: whole working days.
    Source: kelley-walker-1959, critical path (memory).
    """
    if shortened_by_working_days < 1:
        raise ValueError("a task is shortened by at least one working day")
    times = network_times(tasks=tasks, not_before=not_before)
    now = length_working_days(tasks=tasks, not_before=not_before)
    rows: list[tuple[str, str, str, int, int, int]] = []
    for task in tasks:
        if not times[task.id].critical or task.working_days == 0:
            continue
        shorter = max(0, task.working_days - shortened_by_working_days)
        gain, most = (
            now - length_working_days(tasks=_with_days(tasks, task.id, days), not_before=not_before)
            for days in (shorter, 0)
        )
        rows.append((task.id, task.title, task.owner, task.working_days, gain, most))
    rows.sort(key=lambda row: (-row[5], -row[4], row[0]))
    return Table.of(MOVERS, rows)


def reduced_network(*, tasks: Sequence[Task], keep: Collection[str]) -> tuple[Task, ...]:
    """
    Return the network with some of its tasks only; what was left out hands on what it waited for.

    Args:
        tasks: All tasks.
        keep: Ids of the tasks that are needed.

    Returns:
        The needed tasks in the order given. If a waits for b, b for c, and b is left out, a waits for c.

    Raises:
        ValueError: As network_times, or if a needed task is not in the network.

    Valid for: any network without circles.
    Assumes: that a task which is left out takes no time but does not dissolve an order.
    Source: definition (derived).
    """
    known = checked_network(tasks=tasks)
    for name in sorted(set(keep) - known.keys()):
        raise ValueError(f"task {name!r} is needed but not in the network")
    kept = set(keep)
    handed: dict[str, tuple[str, ...]] = {}
    for name in graphlib.TopologicalSorter({task.id: task.waits_for for task in tasks}).static_order():
        found: dict[str, None] = {}
        for other in known[name].waits_for:
            found.update(dict.fromkeys([other] if other in kept else handed[other]))
        handed[name] = tuple(found)
    return tuple(replace(task, waits_for=handed[task.id]) for task in tasks if task.id in kept)


def _with_days(tasks: Sequence[Task], name: str, working_days: int) -> list[Task]:
    """Return the tasks with one duration replaced."""
    return [replace(task, working_days=working_days) if task.id == name else task for task in tasks]
