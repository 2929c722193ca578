"""
Staff hours: what each task takes, summed by profession and phase, against the people there are.

Tasks come as a table with the columns of :data:`TASKS`, people with the columns of :data:`PEOPLE`. What
nobody stated stays blank and is counted; it is never taken for zero.
"""

import math

from readiness.calculations.patient_flow import WEEKS_PER_YEAR
from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table

TASKS = ("task", "profession", "per", "minutes_min", "persons")
ROLES = ("role", "profession", "available_fte")
LISTED = ("person", "role", "qualified", "available_fte")
PEOPLE = ("person", "profession", "fte", "qualified")
TASK_HOURS = ("task", "profession", "phase", "per", "times", "persons", "minutes_min", "total_h")
BALANCE = (
    "phase", "profession", "needed_h", "tasks_without_minutes", "within_weeks", "needed_fte", "stated_fte",
    "qualified_fte", "missing_fte",
)  # fmt: skip
RECURRING = (
    "session", "first-cycle-session", "treatment-day", "patient", "patient-week", "week", "month", "year",
)  # fmt: skip
PROJECT = "commissioning"
COMMISSION, OPERATE = "commission", "operate"


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
    Return the hours that each task takes: in a year, or once if it belongs to commissioning.

    hours = times * persons * minutes / 60

    Args:
        tasks: What is done, by whom, how often; columns of TASKS. "per" is a word of RECURRING or
            "commissioning".
        sessions_per_year: Sessions, first cycles included. [per year]
        first_cycle_sessions_per_year: Sessions of first cycles. [per year]
        tse_days_per_year: Days with at least one session. [per year]
        patients_per_year: Patients who start. [per year]
        patient_weeks_per_year: Weeks under treatment, summed over patients. [per year]

    Returns:
        One row per task, in the order given; hours are blank where minutes or persons are. What recurs
        belongs to phase operate, commissioning to phase commission.

    Raises:
        ValueError: If a number is negative or "per" is not known.

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
        minutes, persons = _amount(row, "minutes_min"), _amount(row, "persons")
        hours = None if minutes is None or persons is None else times[per] * persons * minutes / 60
        phase = COMMISSION if per == PROJECT else OPERATE
        rows.append((row["task"], row["profession"], phase, per, times[per], persons, minutes, hours))
    return Table.of(TASK_HOURS, rows)


def people_with_fte(*, roles: Table, people: Table) -> Table:
    """
    Return the people with the time that each has for the program.

    Args:
        roles: Roles with their professions and full-time equivalents; columns of ROLES.
        people: People with their roles and their own time, blank where it is not stated; columns of LISTED.

    Returns:
        One row per person, columns of PEOPLE; a role of which nobody is listed has a row without a person.

    Raises:
        ValueError: If an FTE is negative, a person has a role that is not listed, or the people of a role
            have more time than the role.

    Valid for: the day for which the qualifications were judged.
    Assumes: that those without a time of their own share equally what the others leave of the role's.
    Source: definition (derived).
    """
    members: dict[str, list[dict[str, Scalar]]] = {str(role): [] for role in roles.column("role")}
    for person in people.records():
        role_id = str(person["role"])
        if role_id not in members:
            raise ValueError(f"person {person['person']!r} has the role {role_id!r}, which is not listed")
        members[role_id].append(person)
    rows: list[tuple[Scalar, ...]] = []
    for role in roles.records():
        crew = members[str(role["role"])]
        times = _times(role, crew)
        rows += [
            (person["person"], role["profession"], fte, person["qualified"])
            for person, fte in zip(crew, times, strict=True)
        ]
        if not crew:
            rows.append((None, role["profession"], _amount(role, "available_fte"), False))
    return Table.of(PEOPLE, rows)


def staffing_balance(*, hours: Table, people: Table, phase_weeks: Table, hours_per_fte_h: float) -> Table:
    """
    Return hours and full-time equivalents needed against available, by phase and profession.

    needed = hours / (hours per FTE and year * weeks / weeks of a year)

    Args:
        hours: What task_hours returned.
        people: Who there is; columns of PEOPLE. Only people stated as qualified count as qualified.
        phase_weeks: Columns phase and weeks: how long phase commission lasts.
        hours_per_fte_h: Hours that one full-time person works in a year. [h]

    Returns:
        One row per phase and profession that has a task, in order of first appearance. Needed FTE is blank
        where the length of the phase is not known; missing FTE also where minutes of a task or somebody's
        time are.

    Raises:
        ValueError: If an amount is negative or a phase lasts no time.

    Valid for: work spread evenly over its phase; the busiest week needs more.
    Assumes: that all stated FTE are free for this program.
    Source: definition (derived).
    """
    if hours_per_fte_h <= 0:
        raise ValueError("a full-time person works some hours a year")
    stated = _fte_by_profession(people, qualified_only=False)
    qualified = _fte_by_profession(people, qualified_only=True)
    weeks_of = {str(row["phase"]): _amount(row, "weeks") for row in phase_weeks.records()}
    weeks_of[OPERATE] = WEEKS_PER_YEAR
    rows: list[tuple[Scalar, ...]] = []
    for (phase, profession), (needed_h, blanks) in _hours_by_phase_and_profession(hours).items():
        weeks = weeks_of.get(phase)
        if weeks == 0:
            raise ValueError(f"phase {phase} lasts no time, and work is planned in it")
        fte = None if weeks is None else needed_h / (hours_per_fte_h * weeks / WEEKS_PER_YEAR)
        able = qualified.get(profession, 0.0)
        missing = None if fte is None or able is None or blanks else max(0.0, fte - able)
        there = stated.get(profession, 0.0)
        rows.append((phase, profession, needed_h, blanks, weeks, fte, there, able, missing))
    return Table.of(BALANCE, rows)


def profession_fte_needed(*, hours: Table, profession: str, hours_per_fte_h: float) -> float:
    """
    Return the full-time equivalents that the running program needs of a profession.

    Args:
        hours: What task_hours returned.
        profession: The profession.
        hours_per_fte_h: Hours that one full-time person works in a year. [h]

    Returns:
        Full-time equivalents; 0 for a profession without a recurring task. [FTE]

    Raises:
        ValueError: If a full-time person works no hours.
        OutsideValidity: If minutes or persons of one of its tasks are not stated.

    Valid for: phase operate, averaged over the year.
    Assumes: work spread evenly over the year.
    Source: definition (derived).
    """
    if hours_per_fte_h <= 0:
        raise ValueError("a full-time person works some hours a year")
    needed_h, blanks = _hours_by_phase_and_profession(hours).get((OPERATE, profession), (0.0, 0))
    if blanks:
        raise OutsideValidity(f"minutes or persons are not stated for tasks of the {profession}: {blanks}")
    return needed_h / hours_per_fte_h


def profession_fte_qualified(*, people: Table, profession: str) -> float:
    """
    Return the full-time equivalents of those of a profession who are stated to be qualified.

    Args:
        people: Who there is; columns of PEOPLE.
        profession: The profession.

    Returns:
        Full-time equivalents; 0 if nobody of the profession is qualified. [FTE]

    Raises:
        ValueError: If an FTE is negative.
        OutsideValidity: If the time of one of them is not stated.

    Valid for: the day for which the qualifications were judged.
    Assumes: that all stated FTE are free for this program; an unknown qualification does not count.
    Source: definition (derived).
    """
    fte = _fte_by_profession(people, qualified_only=True).get(profession, 0.0)
    if fte is None:
        raise OutsideValidity(f"the time of a qualified {profession} for the program is not stated")
    return fte


def _times(role: dict[str, Scalar], crew: list[dict[str, Scalar]]) -> list[float | None]:
    """Return the time of each person of a role: the person's own, or a share of what the others leave."""
    own = [_amount(person, "available_fte") for person in crew]
    whole, sharing = _amount(role, "available_fte"), own.count(None)
    left = None if whole is None else whole - sum(fte for fte in own if fte is not None)
    if left is not None and left < -1e-9:
        raise ValueError(f"the people of role {role['role']!r} have {-left:g} FTE more than the role")
    share = None if left is None or not sharing else max(0.0, left) / sharing
    return [share if fte is None else fte for fte in own]


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


def _hours_by_phase_and_profession(hours: Table) -> dict[tuple[str, str], tuple[float, int]]:
    """Return the sum of the hours, and how many tasks have none, for each phase and profession."""
    sums: dict[tuple[str, str], tuple[float, int]] = {}
    for row in hours.records():
        key = (str(row["phase"]), str(row["profession"]))
        total, blanks = sums.get(key, (0.0, 0))
        amount = _amount(row, "total_h")
        sums[key] = (total, blanks + 1) if amount is None else (total + amount, blanks)
    return sums


def _fte_by_profession(people: Table, *, qualified_only: bool) -> dict[str, float | None]:
    """Return the summed FTE of each profession; None where the time of one of its people is blank."""
    sums: dict[str, float | None] = {}
    for row in people.records():
        if not qualified_only or row["qualified"] is True:
            profession, fte = str(row["profession"]), _amount(row, "fte")
            before = sums.get(profession, 0.0)
            sums[profession] = None if fte is None or before is None else before + fte
    return sums
