"""
Task network: earliest and latest times, float and the critical path, counted in working days.

Time 0 is the morning of the first working day of the plan. A task of n working days that starts at time s
takes the days s to s + n - 1 and ends at s + n, the morning on which the next task may start.
"""

import graphlib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass

NO_FLOORS: Mapping[str, int] = {}


@dataclass(frozen=True)
class Task:
    """Something to do: how long it takes, and which tasks must end before it starts."""

    id: str
    working_days: int
    waits_for: tuple[str, ...] = ()
    title: str = ""
    owner: str = ""
    phase: str = ""
    done_when: str = ""


@dataclass(frozen=True)
class Times:
    """When a task can and must take place, in working days from the beginning of the plan."""

    earliest_start_working_days: int
    earliest_finish_working_days: int
    latest_start_working_days: int
    latest_finish_working_days: int
    free_float_working_days: int

    @property
    def float_working_days(self) -> int:
        """Return by how much the task can slip without moving the end of the plan."""
        return self.latest_start_working_days - self.earliest_start_working_days

    @property
    def critical(self) -> bool:
        """Return whether any slip of the task moves the end of the plan."""
        return self.float_working_days == 0


def circle(*, tasks: Sequence[Task]) -> tuple[str, ...]:
    """
    Return a circle of tasks that wait for each other: each for the next one, the last for the first.

    Args:
        tasks: The tasks; what they wait for outside the list is left aside.

    Returns:
        Ids, beginning with the alphabetically first of the circle; empty if there is no circle.

    Raises:
        ValueError: If two tasks have one id.

    Valid for: any network.
    Assumes: nothing.
    Source: definition (derived).
    """
    known = tasks_by_id(tasks=tasks)
    graph = {task.id: [other for other in task.waits_for if other in known] for task in tasks}
    try:
        graphlib.TopologicalSorter(graph).prepare()
    except graphlib.CycleError as error:
        waiting = list(reversed(error.args[1][1:]))  # given as: each is waited for by the next
        start = waiting.index(min(waiting))
        return tuple(waiting[start:] + waiting[:start])
    return ()


def network_times(*, tasks: Sequence[Task], not_before: Mapping[str, int] = NO_FLOORS) -> dict[str, Times]:
    """
    Return the earliest and latest times and floats of every task.

    forward: start = latest finish of what it waits for
    backward: finish = earliest of the latest starts of what waits for it

    Args:
        tasks: The tasks.
        not_before: For some tasks, the first working day on which they can start.

    Returns:
        The times by task id, in the order given.

    Raises:
        ValueError: If ids repeat, a task waits for an unknown one, tasks wait for each other in a circle
            (it is printed), or a task takes negative time.

    Valid for: tasks that start when all they wait for has ended; people and rooms are not shared out.
    Assumes: whole working days.
    Source: kelley-walker-1959, critical path (memory).
    """
    known = checked_network(tasks=tasks)
    order = list(graphlib.TopologicalSorter({task.id: task.waits_for for task in tasks}).static_order())
    start: dict[str, int] = {}
    finish: dict[str, int] = {}
    for name in order:
        ready = (finish[other] for other in known[name].waits_for)
        start[name] = max([0, not_before.get(name, 0), *ready])
        finish[name] = start[name] + known[name].working_days
    end = max(finish.values(), default=0)
    latest, next_start = dict.fromkeys(known, end), dict.fromkeys(known, end)
    for name in reversed(order):
        for other in known[name].waits_for:
            latest[other] = min(latest[other], latest[name] - known[name].working_days)
            next_start[other] = min(next_start[other], start[name])
    return {
        name: Times(
            earliest_start_working_days=start[name],
            earliest_finish_working_days=finish[name],
            latest_start_working_days=latest[name] - task.working_days,
            latest_finish_working_days=latest[name],
            free_float_working_days=next_start[name] - finish[name],
        )
        for name, task in known.items()
    }


def length_working_days(*, tasks: Sequence[Task], not_before: Mapping[str, int] = NO_FLOORS) -> int:
    """
    Return how long the whole network takes.

    Args:
        tasks: The tasks.
        not_before: For some tasks, the first working day on which they can start.

    Returns:
        Time at which the last task ends; 0 without tasks. [working days]

    Raises:
        ValueError: As network_times.

    Valid for: as network_times.
    Assumes: whole working days.
    Source: kelley-walker-1959, critical path (memory).
    """
    times = network_times(tasks=tasks, not_before=not_before)
    return max((entry.earliest_finish_working_days for entry in times.values()), default=0)


def critical_path(*, tasks: Sequence[Task], not_before: Mapping[str, int] = NO_FLOORS) -> tuple[str, ...]:
    """
    Return one chain of tasks that decides how long the network takes.

    Args:
        tasks: The tasks.
        not_before: For some tasks, the first working day on which they can start.

    Returns:
        Ids from the first to the last task; of chains equally long the first by id, seen from the end.

    Raises:
        ValueError: As network_times.

    Valid for: as network_times; where several chains are critical, shortening one does not help.
    Assumes: whole working days.
    Source: kelley-walker-1959, critical path (memory).
    """
    times = network_times(tasks=tasks, not_before=not_before)
    known = tasks_by_id(tasks=tasks)
    end = max((entry.earliest_finish_working_days for entry in times.values()), default=0)
    candidates = [name for name, entry in times.items() if entry.earliest_finish_working_days == end]
    chain: list[str] = []
    while candidates:
        chain.append(min(candidates))
        begin = times[chain[-1]].earliest_start_working_days
        candidates = [
            other for other in known[chain[-1]].waits_for
            if times[other].earliest_finish_working_days == begin
        ]  # fmt: skip
    return tuple(reversed(chain))


def tasks_by_id(*, tasks: Sequence[Task]) -> dict[str, Task]:
    """
    Return the tasks by id.

    Args:
        tasks: The tasks.

    Returns:
        The tasks by id, in the order given.

    Raises:
        ValueError: If two tasks have one id.

    Valid for: any tasks.
    Assumes: nothing.
    Source: definition (derived).
    """
    known: dict[str, Task] = {}
    for task in tasks:
        if task.id in known:
            raise ValueError(f"two tasks have the id {task.id!r}")
        known[task.id] = task
    return known


def checked_network(*, tasks: Sequence[Task]) -> dict[str, Task]:
    """
    Return the tasks by id, once their network makes sense.

    Args:
        tasks: The tasks.

    Returns:
        The tasks by id, in the order given.

    Raises:
        ValueError: As network_times.

    Valid for: any tasks.
    Assumes: nothing.
    Source: definition (derived).
    """
    known = tasks_by_id(tasks=tasks)
    for task in tasks:
        if task.working_days < 0:
            raise ValueError(f"task {task.id!r} cannot take {task.working_days} working days")
        for other in task.waits_for:
            if other not in known:
                raise ValueError(f"task {task.id!r} waits for {other!r}, which is not a task")
    found = circle(tasks=tasks)
    if found:
        raise ValueError(f"tasks wait for each other in a circle: {circle_in_words(circle=found)}")
    return known


def circle_in_words(*, circle: Sequence[str]) -> str:
    """
    Return a circle of tasks as a sentence.

    Args:
        circle: Ids, each waiting for the next one and the last for the first.

    Returns:
        The circle in words.

    Raises:
        ValueError: If there is no circle.

    Valid for: any circle.
    Assumes: nothing.
    Source: definition (derived).
    """
    if not circle:
        raise ValueError("there is no circle")
    if len(circle) == 1:
        return f"{circle[0]} waits for itself"
    return ", which waits for ".join([f"{circle[0]} waits for {circle[1]}", *circle[2:], circle[0]])
