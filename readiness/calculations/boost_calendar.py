"""
Boosts over a course: on which days they are given and how the dose of each site grows.

A boost is given on the day that completes a cycle, from a stated cycle on, once a cycle. What is left when
the course ends follows on the next treatment days.
"""

from collections.abc import Collection
from datetime import date, timedelta

from readiness.calculations.treatment_days import TreatmentDays
from readiness.quantities import Scalar, Table

COLUMNS = ("date", "site", "cycle", "session_of_site", "dose_gy", "site_dose_after_gy")


def boost_calendar(
    *, sessions: Table, boosts: Table, days: TreatmentDays, missed_days: Collection[date] = ()
) -> Table:
    """
    Return the days of all boosts.

    Args:
        sessions: Sessions of the course: columns date, cycle, completes_cycle.
        boosts: Columns site, dose_per_session_gy, sessions, first_cycle.
        days: The treatment days.
        missed_days: Dates on which no session could be given.

    Returns:
        One row per boost, in order of date: site, cycle (none after the course), dose, boost dose so far.

    Raises:
        ValueError: If the course has no sessions, or a boost has no dose, no session or no first cycle.
        OutsideValidity: If no treatment day is left after the course.

    Valid for: boosts once a cycle.
    Assumes: sites are boosted on the same day without a limit on their number.
    Source: definition (derived); sites and doses are the physician's.
    """
    course = [
        (date.fromisoformat(str(session["date"])), int(session["cycle"] or 0))
        for session in sessions.records()
        if session["completes_cycle"]
    ]
    if not course:
        raise ValueError("boosts are planned on a course that has sessions")
    missed = frozenset(missed_days)
    rows: list[tuple[Scalar, ...]] = []
    for boost in boosts.records():
        rows += _site(boost, course, days, missed)
    return Table.of(COLUMNS, sorted(rows, key=lambda row: (str(row[0]), str(row[1]))))


def last_day(*, sessions: Table, boosts: Table) -> date:
    """
    Return the day on which course and boosts are complete.

    Args:
        sessions: Sessions of the course: column date.
        boosts: Planned boosts: column date; may have no rows.

    Returns:
        The last day.

    Raises:
        ValueError: If the course has no sessions.

    Valid for: any course.
    Assumes: dates as in ISO 8601.
    Source: definition (derived).
    """
    if not sessions.rows:
        raise ValueError("a course without sessions has no last day")
    return max(date.fromisoformat(str(day)) for day in sessions.column("date") + boosts.column("date"))


def _site(
    boost: dict[str, Scalar], course: list[tuple[date, int]], days: TreatmentDays, missed: frozenset[date]
) -> list[tuple[Scalar, ...]]:
    """Return the boosts of one site."""
    site, dose_gy = str(boost["site"]), float(boost["dose_per_session_gy"] or 0)
    count, first_cycle = int(boost["sessions"] or 0), int(boost["first_cycle"] or 0)
    if not dose_gy > 0 or count < 1 or first_cycle < 1:
        raise ValueError(f"{site}: a boost has a dose, at least one session and a first cycle")
    given: list[tuple[date, int | None]] = [(day, cycle) for day, cycle in course if cycle >= first_cycle]
    day = course[-1][0]
    while len(given) < count:
        day = days.on_or_after(day + timedelta(days=1), missed)
        given.append((day, None))
    return [
        (day.isoformat(), site, cycle, number, dose_gy, number * dose_gy)
        for number, (day, cycle) in enumerate(given[:count], start=1)
    ]
