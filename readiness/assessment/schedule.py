"""
The road to the first patient: open gaps as tasks in a network, on working days.

Beside values/ this is the other place that calls calculations: a schedule needs findings, which values
cannot know.
"""

from collections.abc import Collection, Iterator, Mapping, Sequence
from dataclasses import replace
from datetime import date
from functools import cache

from readiness.assessment.records import Gap, Schedule, ScheduledTask, WeekOfWork
from readiness.calculations.first_patient import (
    NO_CAPACITY,
    NO_WORK,
    Road,
    road_to_first_patient,
    what_moves_first_patient,
)
from readiness.calculations.levelling import CAPACITY
from readiness.calculations.network_changes import reduced_network
from readiness.calculations.project_hours import hours_by_week, work_of_phase
from readiness.calculations.staff_hours import COMMISSION, PROJECT
from readiness.calculations.task_library import OwnTask, library_tasks, with_own_tasks
from readiness.calculations.task_network import Task
from readiness.calculations.task_progress import Progress
from readiness.calculations.working_days import WorkingDays, working_days
from readiness.program.items import Program
from readiness.quantities import Table
from readiness.units import rounded

_NO_DATE = "No date of a first patient can be given while no arrangement is known to be possible."
_NOT_SHARED = (
    "The date is the earliest the order of tasks allows; people's hours are not shared out among tasks."
)
_NOT_STATED = (
    "For the hours of commissioning by week state minutes per commissioning, the hours that each role can "
    "give to it, and commissioning_weeks."
)
_WEEKDAYS = ("monday", "tuesday", "wednesday", "thursday", "friday")


@cache
def shipped_tasks() -> Mapping[str, Task]:
    """Return the tasks that ship with the tool, by id."""
    return {task.id: task for task in library_tasks()}


def program_tasks(program: Program) -> tuple[Task, ...]:
    """Return the shipped tasks with the department's own lead times and additions."""
    own = tuple(
        OwnTask(
            id=item.id,
            working_days=None if item.get("working_days") is None else round(float(item.get("working_days"))),  # type: ignore[arg-type]
            waits_for=item.get("waits_for"),  # type: ignore[arg-type]
            title=item.get("title"),  # type: ignore[arg-type]
            owner=item.get("owner"),  # type: ignore[arg-type]
            phase=item.get("phase"),  # type: ignore[arg-type]
        )
        for item in program.of_kind("task")
    )
    return with_own_tasks(tasks=library_tasks(), own=own)


def plan_road(
    program: Program, gaps: tuple[Gap, ...], as_of: date, *, possible: bool
) -> tuple[Schedule, tuple[Gap, ...]]:
    """
    Return the schedule of everything that open gaps need, and the gaps with what they wait for.

    Lead times are the department's where it states them, else common practice. The road holds the tasks of
    open gaps, the department's own tasks and the release; what is left out hands on what it waited for.
    No date of a first patient is given unless an arrangement is known to be possible.
    """
    tasks = program_tasks(program)
    own = {item.id for item in program.of_kind("task")}
    own_times = {item.id for item in program.of_kind("task") if item.get("working_days") is not None}
    wanted = {gap.task for gap in gaps} | own | {"release-program"}
    tasks = reduced_network(tasks=tasks, keep={task.id for task in tasks if task.id in wanted})
    progress, ahead = actual_dates(program, {task.id for task in tasks}, as_of)
    root = program.find("program", "program")
    target = root.get("target_first_patient_date") if root else None
    target = target if isinstance(target, date) else None
    calendar = working_calendar(program)
    states = {entry.task: _state(entry) for entry in progress}
    finished = {entry.task for entry in progress if entry.finished}
    work, capacity = commissioning_work(program, [task for task in tasks if task.id not in finished])
    road = road_to_first_patient(
        tasks=tasks, progress=progress, calendar=calendar, as_of=as_of, target=target
    )
    moves = what_moves_first_patient(
        tasks=tasks, progress=progress, calendar=calendar, as_of=as_of, shortened_by_working_days=5
    )
    gaps_of: dict[str, list[str]] = {}
    for gap in gaps:
        gaps_of.setdefault(gap.task, []).append(gap.id)
    scheduled = tuple(
        ScheduledTask(
            id=each.task.id, title=each.task.title, owner=each.task.owner, phase=each.task.phase,
            working_days=each.task.working_days, waits_for=each.task.waits_for,
            gaps=tuple(gaps_of.get(each.task.id, ())), start=each.start or each.finish, finish=each.finish,
            latest_finish=each.latest_finish or each.finish, float_days=float(each.float_working_days or 0),
            critical=each.critical, done=each.state == "finished",
            lead_time="department's own" if each.task.id in own_times else "default, common practice",
            state=states.get(each.task.id, ""),
        )
        for each in road.tasks
    )  # fmt: skip
    movers = tuple(
        (str(row["task"]), float(row["gain_if_no_time_working_days"]))
        for row in moves.records()
        if row["gain_if_no_time_working_days"]
    )[:5]
    if not possible:
        return Schedule(scheduled, None, target, None, (), (_NO_DATE,)), gaps
    by_week = _weeks(road, work, capacity, calendar, as_of) if work.rows else ()
    schedule = Schedule(
        scheduled, road.first_patient, target, road.late_working_days, movers,
        (*_remarks(road, by_week), *_progress_words(scheduled, ahead)), by_week,
    )  # fmt: skip
    return schedule, tuple(_dated(gap, scheduled) for gap in gaps)


def commissioning_work(program: Program, tasks: Sequence[Task]) -> tuple[Table, Table]:
    """
    Return the hours of commissioning by task and profession, and the hours a day that each has for them.

    Hours are those of the department's minutes per commissioning, laid on the tasks of the phase in
    proportion to their days. Both tables are empty where hours, what roles can give, or weeks are not stated.
    """
    root = program.find("program", "program")
    weeks = root.get("commissioning_weeks") if root else None
    needed: dict[str, float] = {}
    for item in program.of_kind("staff_task"):
        minutes, persons = item.get("minutes_min"), item.get("persons")
        known = isinstance(minutes, (int, float)) and isinstance(persons, (int, float))
        if item.get("per") == PROJECT and known:
            who = str(item.get("profession"))
            needed[who] = needed.get(who, 0.0) + float(minutes) * float(persons) / 60  # type: ignore[arg-type]
    given: dict[str, float] = {}
    for item in program.of_kind("role"):
        hours = item.get("commissioning_hours_h")
        if isinstance(hours, (int, float)):
            who = str(item.get("profession"))
            given[who] = given.get(who, 0.0) + hours
    days = any(task.phase == COMMISSION and task.working_days for task in tasks)
    if not (needed and isinstance(weeks, (int, float)) and given.keys() >= needed.keys() and days):
        return NO_WORK, NO_CAPACITY
    hours_of = Table.of(("who", "work_h"), list(needed.items()))
    daily = [(who, hours / (weeks * len(_WEEKDAYS))) for who, hours in given.items()]
    return work_of_phase(tasks=tasks, phase=COMMISSION, hours=hours_of), Table.of(CAPACITY, daily)


def working_calendar(program: Program) -> WorkingDays:
    """Return the department's working days."""
    root = program.find("program", "program")
    closed = root.get("closed_dates") if root else None
    country = root.get("holidays_country") if root else None
    return working_days(
        weekdays=_WEEKDAYS,
        closed_dates=closed if isinstance(closed, tuple) else (),  # type: ignore[arg-type]
        country=str(country or ""),
    )


def actual_dates(
    program: Program, tasks: Collection[str], as_of: date
) -> tuple[tuple[Progress, ...], tuple[str, ...]]:
    """Return the actual dates of tasks of the road up to a day, and the tasks that have dates after it."""
    entries: list[Progress] = []
    ahead: list[str] = []
    for item in program.of_kind("progress"):
        task, started, finished = (item.get(name) for name in ("task", "started_on", "finished_on"))
        begun, ended = (
            day if isinstance(day, date) and day <= as_of else None for day in (started, finished)
        )
        if (begun, ended) != (started, finished):
            ahead.append(str(task))
        if str(task) in tasks and (begun or ended):
            entries.append(Progress(str(task), begun, ended))
    return tuple(entries), tuple(ahead)


def _state(entry: Progress) -> str:
    """Return the actual dates of a task in words."""
    if entry.finished:
        return f"recorded as done on {entry.finished.isoformat()}"
    return f"under way since {entry.started.isoformat()}" if entry.started else ""


def _progress_words(scheduled: Sequence[ScheduledTask], ahead: Sequence[str]) -> Iterator[str]:
    """Return what is recorded as done although gaps of it are open, and the dates that lie ahead."""
    open_ones = [f"{task.title} ({len(task.gaps)})" for task in scheduled if task.done and task.gaps]
    if open_ones:
        yield (
            "Recorded as done in progress.csv, yet gaps of it are open; the date takes the record at its "
            f"word: {'; '.join(open_ones)}."
        )
    if ahead:
        yield f"Dates in progress.csv after the day of this assessment are left out: {', '.join(ahead)}."


def _remarks(road: Road, by_week: tuple[WeekOfWork, ...]) -> tuple[str, ...]:
    remarks = [_NOT_SHARED, _hours_words(by_week)]
    remarks.append(
        "A default lead time is common practice; state the department's own under tasks in program.yaml."
    )
    if road.out_of_order:
        remarks.append(f"Out of order: {'; '.join(road.out_of_order)}.")
    return tuple(remarks)


def _weeks(
    road: Road, work: Table, capacity: Table, calendar: WorkingDays, as_of: date
) -> tuple[WeekOfWork, ...]:
    table = hours_by_week(road=road, work=work, capacity=capacity, calendar=calendar, as_of=as_of)
    return tuple(
        WeekOfWork(
            date.fromisoformat(str(week)), str(who), rounded(float(str(needed))), rounded(float(str(free))),
            rounded(float(str(missing))), tuple(str(tasks).split(", ")),
        )
        for week, who, needed, free, missing, tasks in table.rows
    )  # fmt: skip


def _hours_words(by_week: tuple[WeekOfWork, ...]) -> str:
    """Return in which weeks somebody is wanted for more hours of commissioning than there are."""
    if not by_week:
        return _NOT_STATED
    short = [each for each in by_week if each.missing_h]
    if not short:
        return "In no week does commissioning want more hours than there are."
    said = ", ".join(
        f"{each.who} in the week of {each.week_of.isoformat()} ({each.missing_h:.0f} h missing)"
        for each in short
    )
    return f"Commissioning wants more hours than there are: {said}."


def _dated(gap: Gap, scheduled: tuple[ScheduledTask, ...]) -> Gap:
    task = next((each for each in scheduled if each.id == gap.task), None)
    if task is None:
        return gap
    earliest = None if task.done else task.finish  # what is open although its task has ended has no date
    return replace(gap, waits_for=task.waits_for, earliest=earliest, progress=task.state)
