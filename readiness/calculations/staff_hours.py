"""
Staff hours: what each task takes, summed by role and phase, against the people there are.

Tasks come as a table with the columns of :data:`TASKS`, people as a table with the columns of :data:`PEOPLE`.
Minutes that nobody stated stay blank and are counted; they are never taken for zero.
"""

import math

from readiness.calculations.patient_flow import WEEKS_PER_YEAR
from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table

TASKS = ("task", "role", "phase", "per", "task_min", "persons")
PEOPLE = ("person", "role", "fte", "qualified")
TASK_HOURS = ("task", "role", "phase", "per", "times", "persons", "task_min", "total_h")
BALANCE = (
    "phase", "role", "needed_h", "tasks_without_minutes", "within_weeks", "needed_fte", "stated_fte",
    "qualified_fte", "missing_fte",
)  # fmt: skip
RECURRING = (
    "session", "first-cycle session", "TSE day", "patient", "patient week", "week", "month", "year",
)  # fmt: skip
PROJECT = "project"
OPERATE = "operate"


def task_hours(
    *,
    tasks: Table,
    sessions_per_year: float,
    first_cycle_sessions_per_year: float,
    tse_days_per_year: float,
    patients_per_year: float,
    patient_weeks_per_year: float,
) -> Table:
    """
    Return the hours that each task takes: in a year, or once if it belongs to the project.

    hours = times * persons * minutes / 60

    Args:
        tasks: What is done, by whom, how often; columns of TASKS. "per" is one of RECURRING or "project".
        sessions_per_year: Sessions, first cycles included. [per year]
        first_cycle_sessions_per_year: Sessions of first cycles. [per year]
        tse_days_per_year: Days with at least one session. [per year]
        patients_per_year: Patients who start. [per year]
        patient_weeks_per_year: Weeks under treatment, summed over patients. [per year]

    Returns:
        One row per task, in the order given; hours are blank where minutes or persons are.

    Raises:
        ValueError: If a number is negative, "per" is not known, or a recurring task is not in phase operate.

    Valid for: a year with these volumes.
    Assumes: that every week and month of the year is worked.
    Source: definition (derived).
    """
    volumes = (
        sessions_per_year, first_cycle_sessions_per_year, tse_days_per_year, patients_per_year,
        patient_weeks_per_year,
    )  # fmt: skip
    if min(volumes) < 0:
        raise ValueError("volumes of a year cannot be negative")
    times = dict(zip(RECURRING, (*volumes, WEEKS_PER_YEAR, 12.0, 1.0), strict=True)) | {PROJECT: 1.0}
    rows: list[tuple[Scalar, ...]] = []
    for row in tasks.records():
        per = str(row["per"])
        if per not in times:
            raise ValueError(f"task {row['task']!r}: per {per!r} is not one of {', '.join(times)}")
        if (per == PROJECT) == (row["phase"] == OPERATE):
            raise ValueError(
                f"task {row['task']!r}: work per {per} does not belong to phase {row['phase']!r}; "
                f"phase {OPERATE} holds what recurs, the phases before it hold the project"
            )
        minutes, persons = _amount(row, "task_min"), _amount(row, "persons")
        hours = None if minutes is None or persons is None else times[per] * persons * minutes / 60
        rows.append((row["task"], row["role"], row["phase"], per, times[per], persons, minutes, hours))
    return Table.of(TASK_HOURS, rows)


def staffing_balance(
    *, hours: Table, people: Table, phase_weeks: Table, h_per_fte_per_year: float
) -> Table:
    """
    Return hours and full-time equivalents needed against available, by phase and role.

    needed = hours / (hours per FTE and year * weeks / weeks of a year)

    Args:
        hours: What task_hours returned.
        people: Who there is; columns of PEOPLE. Only people stated as qualified count as qualified.
        phase_weeks: Columns phase and weeks: how long each phase of the project lasts.
        h_per_fte_per_year: Hours that one full-time person works in a year. [h/year]

    Returns:
        One row per phase and role that has a task, in order of first appearance. Needed FTE is blank where
        the length of the phase is not known; missing FTE is blank as well where minutes of a task are.

    Raises:
        ValueError: If an amount is negative or a phase lasts no time.

    Valid for: work spread evenly over its phase; the busiest week needs more.
    Assumes: that all stated FTE are free for this program.
    Source: definition (derived).
    """
    if h_per_fte_per_year <= 0:
        raise ValueError("a full-time person works some hours a year")
    stated = _fte_by_role(people, qualified_only=False)
    qualified = _fte_by_role(people, qualified_only=True)
    weeks_of = {str(row["phase"]): _amount(row, "weeks") for row in phase_weeks.records()}
    weeks_of[OPERATE] = WEEKS_PER_YEAR
    rows: list[tuple[Scalar, ...]] = []
    for (phase, role), (needed_h, blanks) in _hours_by_phase_and_role(hours).items():
        weeks = weeks_of.get(phase)
        if weeks == 0:
            raise ValueError(f"phase {phase} lasts no time, and work is planned in it")
        fte = None if weeks is None else needed_h / (h_per_fte_per_year * weeks / WEEKS_PER_YEAR)
        able = qualified.get(role, 0.0)
        missing = None if fte is None or blanks else max(0.0, fte - able)
        rows.append((phase, role, needed_h, blanks, weeks, fte, stated.get(role, 0.0), able, missing))
    return Table.of(BALANCE, rows)


def role_fte_needed(*, hours: Table, role: str, h_per_fte_per_year: float) -> float:
    """
    Return the full-time equivalents that the running program needs of a role.

    Args:
        hours: What task_hours returned.
        role: The role.
        h_per_fte_per_year: Hours that one full-time person works in a year. [h/year]

    Returns:
        Full-time equivalents; 0 for a role without a recurring task. [FTE]

    Raises:
        ValueError: If a full-time person works no hours.
        OutsideValidity: If minutes or persons of one of the role's tasks are not stated.

    Valid for: phase operate, averaged over the year.
    Assumes: work spread evenly over the year.
    Source: definition (derived).
    """
    if h_per_fte_per_year <= 0:
        raise ValueError("a full-time person works some hours a year")
    needed_h, blanks = _hours_by_phase_and_role(hours).get((OPERATE, role), (0.0, 0))
    if blanks:
        raise OutsideValidity(f"minutes or persons of {blanks} task(s) of the {role} are not stated")
    return needed_h / h_per_fte_per_year


def role_fte_qualified(*, people: Table, role: str) -> float:
    """
    Return the full-time equivalents of a role whose people are stated to be qualified.

    Args:
        people: Who there is; columns of PEOPLE.
        role: The role.

    Returns:
        Full-time equivalents; 0 if nobody of the role is qualified. [FTE]

    Raises:
        ValueError: If an FTE is negative.

    Valid for: the day for which the qualifications were judged.
    Assumes: that all stated FTE are free for this program; an unknown qualification does not count.
    Source: definition (derived).
    """
    return _fte_by_role(people, qualified_only=True).get(role, 0.0)


def _amount(row: dict[str, Scalar], column: str) -> float | None:
    """Return an amount of a row, None for a blank."""
    amount = row[column]
    if amount is None:
        return None
    if isinstance(amount, bool | str) or not math.isfinite(amount):
        raise ValueError(f"{column.replace('_', ' ')} of {next(iter(row.values()))!r} is not a number")
    if amount < 0:
        raise ValueError(f"{column.replace('_', ' ')} of {next(iter(row.values()))!r} cannot be {amount}")
    return float(amount)


def _hours_by_phase_and_role(hours: Table) -> dict[tuple[str, str], tuple[float, int]]:
    """Return the sum of the hours, and how many tasks have none, for each phase and role."""
    sums: dict[tuple[str, str], tuple[float, int]] = {}
    for row in hours.records():
        key = (str(row["phase"]), str(row["role"]))
        total, blanks = sums.get(key, (0.0, 0))
        amount = _amount(row, "total_h")
        sums[key] = (total, blanks + 1) if amount is None else (total + amount, blanks)
    return sums


def _fte_by_role(people: Table, *, qualified_only: bool) -> dict[str, float]:
    """Return the summed FTE of each role; a blank FTE adds nothing."""
    sums: dict[str, float] = {}
    for row in people.records():
        if not qualified_only or row["qualified"] is True:
            sums[str(row["role"])] = sums.get(str(row["role"]), 0.0) + (_amount(row, "fte") or 0.0)
    return sums
