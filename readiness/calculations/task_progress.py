"""Progress: what is left of the task network once some of its tasks have begun or ended."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import date

from readiness.calculations.task_network import Task, checked_network
from readiness.calculations.working_days import WorkingDays


@dataclass(frozen=True)
class Progress:
    """Actual dates of one task; the days that remain replace the planned ones when somebody states them."""

    task: str
    started: date | None = None
    finished: date | None = None
    remaining_working_days: int | None = None


@dataclass(frozen=True)
class Remaining:
    """What is left of a network on a day: tasks with their remaining days, and the earliest start of some."""

    tasks: tuple[Task, ...]
    not_before_working_days: dict[str, int]
    out_of_order: tuple[str, ...]


def remaining_network(
    *, tasks: Sequence[Task], progress: Sequence[Progress], calendar: WorkingDays, as_of: date
) -> Remaining:
    """
    Return what is left of the network on a day.

    Args:
        tasks: The tasks before the first patient.
        progress: Actual dates.
        calendar: The working days.
        as_of: The day on which the plan is made; time 0 is its morning, or the next working day's.

    Returns:
        Tasks that are not finished. One that has begun waits for nothing more; it has the days left that
        somebody stated, or the planned days less those gone by, and at least one.

    Raises:
        ValueError: As task_network.network_times, or if progress repeats or contradicts itself.

    Valid for: actual dates up to the day of the plan.
    Assumes: that a task finished on the day of the plan lets the next start on the working day after.
    Source: definition (derived).
    """
    known = checked_network(tasks=tasks)
    done = _checked_progress(known, progress, as_of)
    today = calendar.open_on_or_after(as_of)
    finished = {name for name, entry in done.items() if entry.finished is not None}
    ended_today = {name for name in finished if done[name].finished == today}
    left, floors, odd = [], {}, []
    for task in tasks:
        begun = done.get(task.id)
        early = [other for other in task.waits_for if other not in finished]
        if begun is not None and (begun.started or begun.finished) and early:
            have = "has" if len(early) == 1 else "have"
            odd.append(f"{task.id} has begun although {' and '.join(early)} {have} not ended")
        if task.id in finished:
            continue
        if begun is not None and begun.started is not None:
            left.append(replace(task, working_days=_days_left(task, begun, calendar, today), waits_for=()))
            continue
        if any(other in ended_today for other in task.waits_for):
            floors[task.id] = 1
        left.append(replace(task, waits_for=tuple(early)))
    return Remaining(tuple(left), floors, tuple(odd))


def _days_left(task: Task, begun: Progress, calendar: WorkingDays, today: date) -> int:
    """Return the working days that a task under way still takes, today included."""
    if begun.remaining_working_days is not None:
        return begun.remaining_working_days
    gone = calendar.count(begun.started or today, today)
    return max(1, task.working_days - gone)


def _checked_progress(
    known: dict[str, Task], progress: Sequence[Progress], as_of: date
) -> dict[str, Progress]:
    """Return the actual dates by task once they make sense."""
    entries: dict[str, Progress] = {}
    for entry in progress:
        name = entry.task
        if name not in known:
            raise ValueError(f"progress is reported for {name!r}, which is not a task")
        if name in entries:
            raise ValueError(f"progress of task {name!r} is reported twice")
        for day in (entry.started, entry.finished):
            if day is not None and day > as_of:
                raise ValueError(f"task {name!r}: {day} is no actual date on {as_of}")
        if entry.started and entry.finished and entry.finished < entry.started:
            raise ValueError(f"task {name!r} was finished on {entry.finished}, before it started")
        days = entry.remaining_working_days
        if days is not None and (days < 1 or entry.finished is not None or entry.started is None):
            raise ValueError(f"task {name!r}: days remain only of a task that has started and not ended")
        entries[name] = entry
    return entries
