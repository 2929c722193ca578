"""
Levelling: sharing out the hours of each person, so that nobody works on two tasks at one time.

A task waits until everybody it needs has the hours it takes, and lasts longer than its lead time where the
hours of a working day do not suffice. The rule is a simple one (the task with the earliest latest start goes
first) and need not give the shortest plan.
"""

import math
from collections.abc import Mapping, Sequence
from dataclasses import replace

from readiness.calculations.task_network import NO_FLOORS, Task, network_times
from readiness.errors import OutsideValidity
from readiness.quantities import Table

WORK = ("task", "who", "work_h")
CAPACITY = ("who", "free_h_per_day")
LONGEST_PLAN_WORKING_DAYS = 5_000
SAME_H = 1e-9
Used = dict[tuple[str, int], float]  # hours taken, by who and day


def levelled_network(
    *, tasks: Sequence[Task], work: Table, capacity: Table, not_before: Mapping[str, int] = NO_FLOORS
) -> tuple[Task, ...]:
    """
    Return the tasks as they follow each other once everybody's hours are shared out.

    days = max(lead time, hours of work / hours a day, for each person); hours are spread evenly over the days

    Args:
        tasks: The tasks.
        work: Hours of work, by task and by who does it (a person or a role); columns of WORK.
        capacity: Hours that each of them has in a working day; columns of CAPACITY.
        not_before: For some tasks, the first working day on which they can start.

    Returns:
        The tasks with the days they take; a task that has to wait for somebody's hours also waits for the
        tasks whose end sets them free, so that float and critical path run through people too.

    Raises:
        ValueError: As task_network.network_times, or if hours are negative or of a task that is not there.
        OutsideValidity: If a task needs hours of somebody who has none, or the plan takes twenty years.

    Valid for: work that can be spread evenly over its task, without interruption.
    Assumes: that a role is one pool of hours; hours of a person cannot be carried over to another day.
    Source: kelley-1963, serial schedule by latest start (memory).
    """
    hours = _hours_by_task(tasks, work)
    free = {str(row["who"]): float(row["free_h_per_day"] or 0.0) for row in capacity.records()}
    waiting = {task.id: replace(task, working_days=_days(task, hours[task.id], free)) for task in tasks}
    times = network_times(tasks=tuple(waiting.values()), not_before=not_before)
    used: Used = {}
    ends: dict[str, int] = {}
    placed: dict[str, Task] = {}
    while waiting:
        ready = [task for task in waiting.values() if all(other in ends for other in task.waits_for)]
        task = min(ready, key=lambda entry: (times[entry.id].latest_start_working_days, entry.id))
        earliest = max([0, not_before.get(task.id, 0), *(ends[other] for other in task.waits_for)])
        start = _first_fit(task, earliest, hours[task.id], free, used)
        if start > earliest:
            freed = (other for other, end in ends.items() if end == start and _share(hours, other, task.id))
            task = replace(task, waits_for=tuple(dict.fromkeys([*task.waits_for, *freed])))
        ends[task.id] = start + task.working_days
        placed[task.id] = task
        del waiting[task.id]
    return tuple(placed[task.id] for task in tasks)


def _share(hours: dict[str, dict[str, float]], one: str, other: str) -> bool:
    """Return whether two tasks need hours of the same person."""
    return any(amount > 0 and hours[other].get(who, 0.0) > 0 for who, amount in hours[one].items())


def _hours_by_task(tasks: Sequence[Task], work: Table) -> dict[str, dict[str, float]]:
    """Return the hours of work of each task, by who does it."""
    hours: dict[str, dict[str, float]] = {task.id: {} for task in tasks}
    for row in work.records():
        name, amount = str(row["task"]), row["work_h"]
        if name not in hours:
            raise ValueError(f"hours of work are stated for {name!r}, which is not a task")
        if isinstance(amount, bool | str) or amount is None or not 0 <= amount < math.inf:
            raise ValueError(f"task {name!r} cannot take {amount} hours of work")
        who = str(row["who"])
        hours[name][who] = hours[name].get(who, 0.0) + float(amount)
    return hours


def _days(task: Task, hours: dict[str, float], free: dict[str, float]) -> int:
    """Return the working days that a task takes with the hours people have in a day."""
    days = task.working_days
    for who, amount in hours.items():
        if amount > 0:
            if free.get(who, 0.0) <= 0:
                raise OutsideValidity(f"task {task.id} needs {amount:g} h of the {who}, who has no hours")
            days = max(days, math.ceil(amount / free[who] - SAME_H))
    if days > LONGEST_PLAN_WORKING_DAYS:
        raise OutsideValidity(f"task {task.id} would take {days} working days, which is no plan")
    return days


def _first_fit(task: Task, start: int, hours: dict[str, float], free: dict[str, float], used: Used) -> int:
    """Return the first start at which everybody has the hours on each day, and take them."""
    daily = {who: amount / task.working_days for who, amount in hours.items() if amount > 0}
    if not daily:
        return start
    while True:
        days = range(start, start + task.working_days)
        full = [
            day for day in days
            if any(used.get((who, day), 0.0) + share > free[who] + SAME_H for who, share in daily.items())
        ]  # fmt: skip
        if not full:
            break
        start = full[-1] + 1
        if start > LONGEST_PLAN_WORKING_DAYS:
            raise OutsideValidity("the plan would take more than twenty years with the hours there are")
    for day in days:
        for who, share in daily.items():
            used[who, day] = used.get((who, day), 0.0) + share
    return start
