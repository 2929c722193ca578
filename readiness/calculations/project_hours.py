"""Hours of the project inside their weeks: who is wanted for more hours in a week than there are."""

from collections.abc import Iterator, Sequence
from datetime import date, timedelta

from readiness.calculations.first_patient import FINISHED, Road, ScheduledTask
from readiness.calculations.levelling import WORK
from readiness.calculations.task_network import Task
from readiness.calculations.working_days import WorkingDays
from readiness.quantities import Scalar, Table

SAME_H = 1e-9
BY_WEEK = ("week_of", "who", "needed_h", "free_h", "missing_h", "tasks")


def work_of_phase(*, tasks: Sequence[Task], phase: str, hours: Table) -> Table:
    """
    Return hours that are stated for a whole phase as hours of its tasks, in proportion to their working days.

    Args:
        tasks: The tasks.
        phase: The phase that the hours belong to ("commission").
        hours: Columns who and work_h: hours of each person, role or profession in the whole phase.

    Returns:
        Hours of work by task and by who does it; columns of levelling.WORK.

    Raises:
        ValueError: If the phase has no task that takes time.

    Valid for: planning, until somebody states the hours of each task.
    Assumes: that each working day of the phase's tasks takes the same hours of everybody.
    Source: practice.
    """
    members = [task for task in tasks if task.phase == phase]
    days = sum(task.working_days for task in members)
    if days == 0:
        raise ValueError(f"phase {phase!r} has no task that takes time, and hours are stated for it")
    rows: list[tuple[Scalar, ...]] = []
    for entry in hours.records():
        total = float(entry["work_h"] or 0.0)
        rows += [(task.id, entry["who"], total * task.working_days / days) for task in members]
    return Table.of(WORK, rows)


def hours_by_week(*, road: Road, work: Table, capacity: Table, calendar: WorkingDays, as_of: date) -> Table:
    """
    Return the hours that each person or role is wanted for in each week of the road, against those there are.

    Args:
        road: The road to the first patient.
        work: Hours of work that remain of each task; columns of levelling.WORK.
        capacity: Hours that each person or role has in a working day; columns of levelling.CAPACITY.
        calendar: The working days.
        as_of: The day on which the plan is made; a task under way spreads its hours from here.

    Returns:
        One row per week (the date of its Monday) and person with hours in it: needed, free, missing, and the
        tasks that want them.

    Raises:
        ValueError: If hours are stated for a task that is not on the road, or are not a number.

    Valid for: the dates of the road as it stands; of a road that is not levelled, tasks overlap.
    Assumes: hours spread evenly over the working days of their task; somebody without stated hours has none.
    Source: definition (derived).
    """
    scheduled = {row.task.id: row for row in road.tasks}
    needed: dict[tuple[date, str], float] = {}
    wanted_by: dict[tuple[date, str], dict[str, None]] = {}
    for entry in work.records():
        name, who, hours = str(entry["task"]), str(entry["who"]), entry["work_h"]
        if name not in scheduled:
            raise ValueError(f"hours of work are stated for {name!r}, which is not on the road")
        if isinstance(hours, bool | str) or hours is None or hours < 0:
            raise ValueError(f"task {name!r} cannot take {hours} hours of work")
        for week, share in _spread(scheduled[name], calendar, as_of):
            needed[week, who] = needed.get((week, who), 0.0) + hours * share
            wanted_by.setdefault((week, who), {})[name] = None
    daily = {str(row["who"]): float(row["free_h_per_day"] or 0.0) for row in capacity.records()}
    rows: list[tuple[Scalar, ...]] = []
    for week, who in sorted(needed):
        open_days = len(list(calendar.open_days(max(week, as_of), week + timedelta(days=6))))
        free = daily.get(who, 0.0) * open_days
        total = needed[week, who]
        names = ", ".join(wanted_by[week, who])
        missing = total - free if total - free > SAME_H else 0.0
        rows.append((week.isoformat(), who, total, free, missing, names))
    return Table.of(BY_WEEK, rows)


def _spread(task: ScheduledTask, calendar: WorkingDays, as_of: date) -> Iterator[tuple[date, float]]:
    """Yield the Monday of each week a task falls into with the share of its hours."""
    if task.state == FINISHED or task.start is None:
        return
    days = list(calendar.open_days(max(task.start, as_of), task.finish))
    for day in days:
        yield day - timedelta(days=day.weekday()), 1 / len(days)
