"""
The calendar of one course: sessions day by day, with their fields and the dose after each.

A cycle is a unit. It is planned on consecutive treatment days of one week, so that no weekend, holiday or
service day falls inside it, and it is complete before the next begins. A day that is missed in mid-cycle is
made up on the next possible day, before anything else.
"""

from collections import Counter
from collections.abc import Collection, Sequence
from dataclasses import dataclass
from datetime import date, timedelta

from readiness.calculations.course_numbers import cycles_per_week
from readiness.calculations.treatment_days import TreatmentDays
from readiness.calculations.working_days import LONGEST_CLOSURE_DAYS, WEEKDAYS
from readiness.errors import OutsideValidity
from readiness.quantities import Table

FIRST_DAY_FIELDS = ("AP", "RPO", "LPO")  # six positions, aapm-23 (memory), practice
SECOND_DAY_FIELDS = ("PA", "RAO", "LAO")
COLUMNS = (
    "session",
    "date",
    "weekday",
    "cycle",
    "session_of_cycle",
    "fields",
    "completes_cycle",
    "made_up",
    "in_vivo",
    "hold",
    "chart_check",
    "mean_dose_after_gy",
    "complete_cycles_dose_gy",
)


@dataclass(frozen=True)
class Session:
    """One planned session: its day, its place in the course, and whether it makes up a missed day."""

    day: date
    cycle: int
    of_cycle: int
    made_up: bool


@dataclass(frozen=True)
class CourseCalendar:
    """A course day by day."""

    sessions: Table
    first_date: date
    end_date: date
    session_count: int
    total_dose_gy: float
    duration_weeks: float
    made_up_sessions: int
    longest_gap_days: int


def field_sets(
    *, technique: str, sessions_per_cycle: int, incidences: Sequence[str] = ()
) -> tuple[tuple[str, ...], ...]:
    """
    Return the fields of each session of a cycle.

    Args:
        technique: "six-position", "rotating-platform" or "moving-couch".
        sessions_per_cycle: Sessions that make one cycle. [1]
        incidences: The department's own incidences, in their order; moving couch only.

    Returns:
        One tuple of field names per session of the cycle.

    Raises:
        ValueError: If the technique is not known, or a moving couch has no incidences.
        OutsideValidity: If the fields cannot be shared out over that many sessions.

    Valid for: the three techniques; six positions in one or two sessions.
    Assumes: incidences of a moving couch are shared out in their stated order, equally over the sessions.
    Source: aapm-23 (memory), practice.
    """
    if sessions_per_cycle < 1:
        raise ValueError(f"a cycle has at least one session, not {sessions_per_cycle}")
    if technique == "rotating-platform":
        return (("all angles",),) * sessions_per_cycle
    if technique == "six-position":
        if sessions_per_cycle > 2:
            raise OutsideValidity(
                f"six positions are treated in one or two sessions a cycle, not {sessions_per_cycle}"
            )
        both = FIRST_DAY_FIELDS + SECOND_DAY_FIELDS
        return (both,) if sessions_per_cycle == 1 else (FIRST_DAY_FIELDS, SECOND_DAY_FIELDS)
    if technique != "moving-couch":
        raise ValueError(f"technique {technique!r} is not six-position, rotating-platform or moving-couch")
    if not incidences:
        raise ValueError("a moving couch needs the department's own list of incidences")
    each, left_over = divmod(len(incidences), sessions_per_cycle)
    if left_over:
        raise OutsideValidity(
            f"{len(incidences)} incidences cannot be shared equally over {sessions_per_cycle} sessions"
        )
    return tuple(tuple(incidences[i * each : (i + 1) * each]) for i in range(sessions_per_cycle))


def course_calendar(
    *,
    first_day: date,
    days: TreatmentDays,
    fields: tuple[tuple[str, ...], ...],
    cycles: int,
    sessions_per_week: int,
    dose_per_cycle_gy: float,
    break_after_cycle: int,
    break_weeks: float,
    missed_days: Collection[date] = (),
    in_vivo_cycles: Collection[int] = (1,),
) -> CourseCalendar:
    """
    Return the calendar of a course that starts as early as it can.

    Args:
        first_day: Day before which the course does not start.
        days: The treatment days.
        fields: Fields of each session of a cycle, as :func:`field_sets` returns them.
        cycles: Cycles of the course. [1]
        sessions_per_week: Highest number of sessions in one week. [per week]
        dose_per_cycle_gy: Prescribed dose of one complete cycle. [Gy]
        break_after_cycle: Cycle after which the planned break lies; 0 for none. [1]
        break_weeks: Length of the planned break, free of sessions. [weeks]
        missed_days: Dates on which a planned session was not given (unplanned; the cycle is completed first).
        in_vivo_cycles: Cycles in which skin dose is measured on the patient.

    Returns:
        The sessions, the end date, and the longest gap in days between two days of a cycle.

    Raises:
        ValueError: If a number is impossible or the break lies outside the course.
        OutsideValidity: If the treatment days never hold a complete cycle.

    Valid for: cycles that fit into one week.
    Assumes: the mean skin dose grows equally with each session of a cycle; single sites differ until the
        cycle is complete.
    Source: practice; aapm-23 (memory) for the six positions.
    """
    _refuse_impossible(cycles, dose_per_cycle_gy, break_after_cycle, break_weeks)
    pause = timedelta(days=round(7 * break_weeks))
    quota = len(fields) * cycles_per_week(sessions_per_cycle=len(fields), sessions_per_week=sessions_per_week)
    missed = frozenset(missed_days)
    given: list[Session] = []
    in_week: Counter[int] = Counter()
    earliest = first_day
    for cycle in range(1, cycles + 1):
        start = _cycle_start(earliest, len(fields), days, quota, in_week)
        while start in missed:  # the cycle has not begun: plan it again as a whole
            start = _cycle_start(start + timedelta(days=1), len(fields), days, quota, in_week)
        cycle_sessions = _cycle(cycle, start, len(fields), days, missed)
        given += cycle_sessions
        in_week.update(days.week(session.day) for session in cycle_sessions)
        earliest = given[-1].day + timedelta(days=1) + (pause if cycle == break_after_cycle else timedelta())
    return _record(given, fields, days, dose_per_cycle_gy, frozenset(in_vivo_cycles))


def _refuse_impossible(cycles: int, dose_per_cycle_gy: float, break_after: int, break_weeks: float) -> None:
    """Refuse a course that nobody can mean."""
    if cycles < 1:
        raise ValueError(f"a course has at least one cycle, not {cycles}")
    if not dose_per_cycle_gy > 0:
        raise ValueError(f"the dose per cycle must be more than 0 Gy, not {dose_per_cycle_gy}")
    if not 0 <= break_after < cycles:
        raise ValueError(f"a break after cycle {break_after} does not lie inside a course of {cycles} cycles")
    if not 0 <= break_weeks <= 52:
        raise ValueError(f"a planned break lasts 0 to 52 weeks, not {break_weeks}")


def _cycle_start(earliest: date, length: int, days: TreatmentDays, quota: int, in_week: Counter[int]) -> date:
    """Return the first day from which a whole cycle fits on consecutive treatment days of one week."""
    for ahead in range(LONGEST_CLOSURE_DAYS):
        start = earliest + timedelta(days=ahead)
        run = [start + timedelta(days=index) for index in range(length)]
        one_week = days.week(run[0]) == days.week(run[-1])
        if one_week and in_week[days.week(start)] + length <= quota and all(map(days.can_treat, run)):
            return start
    raise OutsideValidity(
        f"the treatment days never hold {length} sessions on consecutive days within one week; "
        "a cycle is not split over a weekend, a holiday or a service day"
    )


def _cycle(
    cycle: int, start: date, length: int, days: TreatmentDays, missed: frozenset[date]
) -> list[Session]:
    """Return the sessions of one cycle; after a missed day the rest follows on the next possible days."""
    sessions: list[Session] = []
    day = start
    for index in range(length):
        day = days.on_or_after(day, missed)
        sessions.append(Session(day, cycle, index + 1, made_up=day != start + timedelta(days=index)))
        day += timedelta(days=1)
    return sessions


def _record(
    given: list[Session],
    fields: tuple[tuple[str, ...], ...],
    days: TreatmentDays,
    dose_per_cycle_gy: float,
    in_vivo_cycles: frozenset[int],
) -> CourseCalendar:
    """Return the planned sessions as a table with dose, measurements and checks."""
    length = len(fields)
    gaps = [
        (later.day - earlier.day).days
        for earlier, later in zip(given, given[1:], strict=False)
        if later.cycle == earlier.cycle
    ]
    rows = [
        (
            index + 1,
            session.day.isoformat(),
            WEEKDAYS[session.day.weekday()],
            session.cycle,
            session.of_cycle,
            ", ".join(fields[session.of_cycle - 1]),
            session.of_cycle == length,
            session.made_up,
            session.cycle in in_vivo_cycles,
            _hold(session, in_vivo_cycles),
            _chart_check(index, given, days),
            dose_per_cycle_gy * (index + 1) / length,
            dose_per_cycle_gy * ((index + 1) // length),
        )
        for index, session in enumerate(given)
    ]
    return CourseCalendar(
        sessions=Table.of(COLUMNS, rows),
        first_date=given[0].day,
        end_date=given[-1].day,
        session_count=len(given),
        total_dose_gy=dose_per_cycle_gy * given[-1].cycle,
        duration_weeks=((given[-1].day - given[0].day).days + 1) / 7,
        made_up_sessions=sum(session.made_up for session in given),
        longest_gap_days=max(gaps, default=0),
    )


def _hold(session: Session, in_vivo_cycles: frozenset[int]) -> str:
    """Return what must be seen and signed before a session begins: the readings of the cycle before."""
    if session.of_cycle > 1 or session.cycle - 1 not in in_vivo_cycles:
        return ""
    return f"until the readings of cycle {session.cycle - 1} are seen and signed"


def _chart_check(index: int, given: list[Session], days: TreatmentDays) -> str:
    """Return which chart check falls on a session: before the first, the last of each week, at the end."""
    if index == len(given) - 1:
        return "before start, end of course" if index == 0 else "end of course"
    if index == 0:
        return "before start"
    return "weekly" if days.week(given[index].day) != days.week(given[index + 1].day) else ""
