"""
The road to the first patient: the task network laid on the working days, with what is done already.

The first patient can be treated on the first working day after the last task before phase operate has ended.
"""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from datetime import date

from readiness.calculations.levelling import CAPACITY, WORK, levelled_network
from readiness.calculations.network_changes import what_moves_it
from readiness.calculations.task_network import (
    Task,
    Times,
    checked_network,
    critical_path,
    length_working_days,
    network_times,
)
from readiness.calculations.task_progress import Progress, Remaining, remaining_network
from readiness.calculations.working_days import WorkingDays
from readiness.quantities import Scalar, Table

NO_WORK = Table(WORK, ())
NO_CAPACITY = Table(CAPACITY, ())
OPERATE = "operate"
FINISHED, UNDER_WAY, TO_DO = "finished", "under way", "to do"
SCHEDULE = (
    "task", "title", "owner", "phase", "state", "start", "finish", "latest_start", "latest_finish",
    "float_working_days", "critical",
)  # fmt: skip


@dataclass(frozen=True)
class ScheduledTask:
    """One task with its dates; ``finish`` is its last day of work. No latest dates once it has ended."""

    task: Task
    state: str
    start: date | None
    finish: date
    latest_start: date | None
    latest_finish: date | None
    float_working_days: int | None
    critical: bool


@dataclass(frozen=True)
class Road:
    """The dates of all tasks and of the first patient."""

    tasks: tuple[ScheduledTask, ...]
    critical_path: tuple[str, ...]
    first_patient: date
    length_working_days: int
    late_working_days: int | None
    out_of_order: tuple[str, ...]
    levelled: bool


def road_to_first_patient(
    *,
    tasks: Sequence[Task],
    progress: Sequence[Progress],
    calendar: WorkingDays,
    as_of: date,
    target: date | None,
    work: Table = NO_WORK,
    capacity: Table = NO_CAPACITY,
) -> Road:
    """
    Return earliest and latest dates, floats, the critical path and the date of the first patient.

    Args:
        tasks: All tasks; those of phase operate come after the first patient and are left aside.
        progress: Actual dates of tasks.
        calendar: The working days.
        as_of: The day on which the plan is made.
        target: The date wanted for the first patient, if there is one.
        work: Hours of work that tasks take (columns of levelling.WORK); without any the plan is not levelled.
        capacity: Hours that each person or role has in a working day (columns of levelling.CAPACITY).

    Returns:
        The road; ``levelled`` says whether the hours of each person were shared out among the tasks.

    Raises:
        ValueError: As remaining_network, or if a task before the first patient waits for one after it.
        OutsideValidity: If a task needs hours of somebody who has none.

    Valid for: tasks that start when all they wait for has ended.
    Assumes: whole working days; if not levelled, that nobody is wanted by two tasks on one day.
    Source: kelley-walker-1959, critical path (memory).
    """
    before = tasks_before_first_patient(tasks=tasks)
    entries = _progress_before_first_patient(tasks, progress)
    left = remaining_network(tasks=before, progress=entries, calendar=calendar, as_of=as_of)
    if work.rows:
        left = _levelled(left, _work_of(tasks, left.tasks, work), capacity)
    times = network_times(tasks=left.tasks, not_before=left.not_before_working_days)
    length = max((entry.earliest_finish_working_days for entry in times.values()), default=0)
    today = calendar.open_on_or_after(as_of)
    done = {entry.task: entry for entry in entries}
    first = calendar.add(today, length)
    return Road(
        tasks=tuple(_dated(task, done.get(task.id), times.get(task.id), calendar, today) for task in before),
        critical_path=critical_path(tasks=left.tasks, not_before=left.not_before_working_days),
        first_patient=first,
        length_working_days=length,
        late_working_days=None if target is None else calendar.count(target, first),
        out_of_order=left.out_of_order,
        levelled=bool(work.rows),
    )


def what_moves_first_patient(
    *,
    tasks: Sequence[Task],
    progress: Sequence[Progress],
    calendar: WorkingDays,
    as_of: date,
    shortened_by_working_days: int,
) -> Table:
    """
    Return, for each critical task, how much earlier the first patient can come if it is shortened.

    Args:
        tasks: All tasks; those of phase operate are left aside.
        progress: Actual dates of tasks.
        calendar: The working days.
        as_of: The day on which the plan is made.
        shortened_by_working_days: By how much each task in turn is shortened. [working days]

    Returns:
        The rows of network_changes.what_moves_it, largest gain first, with the date of the first patient if
        the task were shortened and if it took no time.

    Raises:
        ValueError: As road_to_first_patient, or if the shortening is not positive.

    Valid for: one task at a time, by recalculation; a plan that is not levelled.
    Assumes: whole working days.
    Source: kelley-walker-1959, critical path (memory).
    """
    before = tasks_before_first_patient(tasks=tasks)
    entries = _progress_before_first_patient(tasks, progress)
    left = remaining_network(tasks=before, progress=entries, calendar=calendar, as_of=as_of)
    floors = left.not_before_working_days
    length = length_working_days(tasks=left.tasks, not_before=floors)
    movers = what_moves_it(
        tasks=left.tasks, shortened_by_working_days=shortened_by_working_days, not_before=floors
    )
    rows: list[tuple[Scalar, ...]] = []
    for row in movers.rows:
        gains = (int(gain or 0) for gain in row[-2:])
        dates = (calendar.add(as_of, length - gain).isoformat() for gain in gains)
        rows.append((*row, *dates))
    return Table.of((*movers.columns, "first_patient_if_shortened", "first_patient_if_no_time"), rows)


def tasks_before_first_patient(*, tasks: Sequence[Task]) -> tuple[Task, ...]:
    """
    Return the tasks that must end before the first patient: all but those of phase operate.

    Args:
        tasks: All tasks.

    Returns:
        The tasks, in the order given.

    Raises:
        ValueError: As task_network.network_times, or if one of them waits for a task of phase operate.

    Valid for: any network.
    Assumes: that a task without a phase comes before the first patient.
    Source: definition (derived).
    """
    known = checked_network(tasks=tasks)
    for task in tasks:
        for other in task.waits_for:
            if task.phase != OPERATE and known[other].phase == OPERATE:
                raise ValueError(f"task {task.id!r} waits for {other!r}, which comes after the first patient")
    return tuple(task for task in tasks if task.phase != OPERATE)


def phase_weeks(*, road: Road) -> Table:
    """
    Return how long each phase of the road lasts, from the start of its first task to the end of its last.

    Args:
        road: The road.

    Returns:
        Columns phase and weeks, in order of first appearance; weeks are calendar weeks.

    Raises:
        ValueError: Never.

    Valid for: phases with at least one task whose start is known.
    Assumes: that the work of a phase can lie anywhere in it.
    Source: definition (derived).
    """
    spans: dict[str, tuple[date, date]] = {}
    for row in road.tasks:
        start = row.start or row.finish
        first, last = spans.get(row.task.phase, (start, row.finish))
        spans[row.task.phase] = (min(first, start), max(last, row.finish))
    rows = [(phase, ((last - first).days + 1) / 7) for phase, (first, last) in spans.items()]
    return Table.of(("phase", "weeks"), rows)


def _progress_before_first_patient(tasks: Sequence[Task], progress: Sequence[Progress]) -> list[Progress]:
    """Return the actual dates without those of tasks that come after the first patient."""
    after = {task.id for task in tasks if task.phase == OPERATE}
    return [entry for entry in progress if entry.task not in after]


def _work_of(tasks: Sequence[Task], left: Sequence[Task], work: Table) -> Table:
    """Return the hours of the tasks that are left; hours of a task that does not exist are refused."""
    known, names = {task.id for task in tasks}, {task.id for task in left}
    for name in work.column("task"):
        if name not in known:
            raise ValueError(f"hours of work are stated for {name!r}, which is not a task")
    return Table(work.columns, tuple(row for row in work.rows if row[work.columns.index("task")] in names))


def _levelled(left: Remaining, work: Table, capacity: Table) -> Remaining:
    """Return what is left of the network once the hours of each person are shared out."""
    tasks = levelled_network(
        tasks=left.tasks, work=work, capacity=capacity, not_before=left.not_before_working_days
    )
    return replace(left, tasks=tasks)


def _dated(
    task: Task, begun: Progress | None, when: Times | None, calendar: WorkingDays, today: date
) -> ScheduledTask:
    """Return one task with its dates."""
    if begun is not None and begun.finished is not None:
        return ScheduledTask(task, FINISHED, begun.started, begun.finished, None, None, None, False)
    if when is None:
        raise ValueError(f"task {task.id!r} is neither finished nor planned")
    started = None if begun is None else begun.started

    def last_day(start: int, finish: int) -> date:
        return calendar.add(today, max(start, finish - 1))

    return ScheduledTask(
        task=task,
        state=TO_DO if started is None else UNDER_WAY,
        start=started or calendar.add(today, when.earliest_start_working_days),
        finish=last_day(when.earliest_start_working_days, when.earliest_finish_working_days),
        latest_start=None if started else calendar.add(today, when.latest_start_working_days),
        latest_finish=last_day(when.latest_start_working_days, when.latest_finish_working_days),
        float_working_days=when.float_working_days,
        critical=when.critical,
    )
