"""Hours of staff: what the program takes, who there is for it, and who is left when one is away."""

from collections.abc import Callable, Sequence
from datetime import date

from readiness.assessment.definition import Definition, derived
from readiness.assessment.values.naming import named
from readiness.assessment.values.people import enough, not_known, undecided
from readiness.calculations.staff_cover import (
    cover_with_one_away,
    qualified_at_console,
    qualified_at_console_with_one_away,
)
from readiness.calculations.staff_hours import (
    COMMISSION,
    LISTED,
    OPERATE,
    ROLES,
    TASKS,
    people_with_fte,
    profession_fte_needed,
    profession_fte_qualified,
    staffing_balance,
    task_hours,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

ALWAYS_NEEDED = ("oncologist", "physicist", "therapist")
SHORT_OF_TIME = ("oncologist", "physicist", "therapist", "nurse")
PROFESSIONS = ("oncologist", "physicist", "therapist", "nurse", "dosimetrist")
NO_INTERVAL = "State competency interval (months) of training in staffing.yaml."
_TASKS = "rows staff_task: id profession per minutes_min persons"


def people_of_program(*, roles: Table, people: Table, intervals_months: Sequence[float]) -> Table:
    """Return who there is, with time and qualification, once it is known how long a check holds."""
    if not intervals_months:
        raise OutsideValidity(NO_INTERVAL)
    return people_with_fte(roles=Table(ROLES, roles.rows), people=Table(LISTED, people.rows))


def hours_of_tasks(
    *,
    tasks: Table,
    sessions_per_year: float,
    first_cycle_sessions_per_year: float,
    treatment_days_per_year: float,
    expected_patients_per_year: float,
    patient_weeks_per_year: float,
) -> Table:
    """Return the hours of each task in a year, or once."""
    return task_hours(
        tasks=Table(TASKS, tasks.rows),
        sessions_per_year=sessions_per_year,
        first_cycle_sessions_per_year=first_cycle_sessions_per_year,
        tse_days_per_year=treatment_days_per_year,
        patients_per_year=expected_patients_per_year,
        patient_weeks_per_year=patient_weeks_per_year,
    )


def balance_of_staff(
    *, hours: Table, people: Table, commissioning_weeks: float | None, hours_per_fte_h: float
) -> Table:
    """Return needed against available time, by phase and profession."""
    weeks = Table.of(("phase", "weeks"), [(COMMISSION, commissioning_weeks)])
    return staffing_balance(hours=hours, people=people, phase_weeks=weeks, hours_per_fte_h=hours_per_fte_h)


def cover_of_staff(*, tasks: Table, people: Table, balance: Table) -> Table:
    """Return what is left of each profession when one person is away."""
    return cover_with_one_away(tasks=Table(TASKS, tasks.rows), people=people, balance=balance)


def professions_without_cover(*, cover: Table, people: Table) -> str:
    """Return the professions in which an absence leaves too few qualified people, where that is known."""
    short = dict.fromkeys(
        str(row["profession"]) for row in cover.records() if row["session_covered"] is not True
    )
    open_people = {who: list(undecided(people, [who])) for who in short}
    known = [who for who in short if not open_people[who]]
    if short and not known:
        raise not_known([person for one in open_people.values() for person in one])
    return named(known)


def console_persons(*, people: Table, console_professions: Sequence[str], asked_persons: float) -> int:
    """Return how many may stand at the console, where that is known."""
    return enough(
        known=qualified_at_console(people=people, console_professions=console_professions),
        asked=asked_persons,
        open_people=list(undecided(people, console_professions)),
    )


def _has_task(hours: Table, phase: str, profession: str) -> bool:
    return any(row["phase"] == phase and row["profession"] == profession for row in hours.records())


def commissioning_hours_needed(*, hours: Table) -> float:
    """Return the physicists' hours of commissioning, which no program is without."""
    if not _has_task(hours, COMMISSION, "physicist"):
        raise OutsideValidity("List the physicist's minutes per commissioning in staffing.yaml.")
    return sum(
        float(row["total_h"] or 0.0)
        for row in hours.records()
        if row["phase"] == COMMISSION and row["profession"] == "physicist"
    )


def commissioning_hours_available(*, roles: Table) -> float:
    """Return the hours that physicists can give to commissioning."""
    given = [row for row in roles.records() if row["profession"] == "physicist"]
    for row in given:
        if row["commissioning_hours_h"] is None:
            raise OutsideValidity(f"State commissioning hours (h) of role {row['id']} in staffing.yaml.")
    return sum(float(row["commissioning_hours_h"] or 0.0) for row in given)


def person_is_qualified(
    *,
    licensed: bool,
    trained_on: date,
    competency_on: date,
    intervals_months: Sequence[float],
    as_of_date: date,
) -> bool:
    """Return whether a person is licensed, trained, and has a competency check that is still in force."""
    if not intervals_months:
        raise OutsideValidity(NO_INTERVAL)
    months = competency_on.year * 12 + competency_on.month - 1 + round(min(intervals_months))
    ends = (months // 12, months % 12 + 1, competency_on.day)
    today = (as_of_date.year, as_of_date.month, as_of_date.day)
    return licensed and trained_on <= as_of_date and competency_on <= as_of_date and today <= ends


def short_of_time(
    *,
    oncologist_needed_fte: float, oncologist_fte: float, physicist_needed_fte: float, physicist_fte: float,
    therapist_needed_fte: float, therapist_fte: float, nurse_needed_fte: float, nurse_fte: float,
    people: Table,
) -> str:  # fmt: skip
    """
    Return the professions whose qualified people have less time than the program takes.

    A profession is short if it would be short even if everybody whose records are missing were qualified;
    if only those records decide, nothing is known.
    """
    time = {
        "oncologist": (oncologist_fte, oncologist_needed_fte),
        "physicist": (physicist_fte, physicist_needed_fte),
        "therapist": (therapist_fte, therapist_needed_fte),
        "nurse": (nurse_fte, nurse_needed_fte),
    }
    open_people = {who: undecided(people, [who]) for who in time}
    short = {who: there + sum(open_people[who].values()) < needed for who, (there, needed) in time.items()
             if there < needed}  # fmt: skip
    if short and not any(short.values()):
        raise not_known([person for who in short for person in open_people[who]])
    return named(
        f"{who} ({time[who][0]:.3g} of {time[who][1]:.3g} full-time equivalents)"
        for who, known in short.items()
        if known
    )


def _needed(profession: str) -> Callable[..., float]:
    def fte_needed(*, hours: Table, hours_per_fte_h: float) -> float:
        """Return what the running program needs of the profession; the core ones have tasks."""
        if profession in ALWAYS_NEEDED and not _has_task(hours, OPERATE, profession):
            raise OutsideValidity(f"List the {profession}'s tasks with their minutes in staffing.yaml.")
        return profession_fte_needed(hours=hours, profession=profession, hours_per_fte_h=hours_per_fte_h)

    return fte_needed


def _qualified(profession: str) -> Callable[..., float]:
    def fte_qualified(*, people: Table) -> float:
        """Return the full-time equivalents of those of the profession who are stated to be qualified."""
        return profession_fte_qualified(people=people, profession=profession)

    return fte_qualified


def _of_profession(profession: str) -> tuple[Definition, Definition]:
    return (
        derived(
            f"program.{profession}_needed_fte",
            f"Full-time equivalents of the {profession} that the running program takes.",
            _needed(profession),
            {"hours": "program.task_hours", "hours_per_fte_h": "program.hours_per_fte_h"},
        ),
        derived(
            f"program.{profession}_qualified_fte",
            f"Full-time equivalents of the {profession} with a competency check in force.",
            _qualified(profession),
            {"people": "program.people"},
        ),
    )


DEFINITIONS: tuple[Definition, ...] = (
    derived(
        "person.qualified",
        "The person is licensed, trained for this program, and has a competency check in force.",
        person_is_qualified,
        {
            "licensed": "person.licensed",
            "trained_on": "person.trained_on",
            "competency_on": "person.competency_on",
            "intervals_months": "each training.competency_interval_months",
            "as_of_date": "program.as_of_date",
        },
    ),
    derived(
        "program.people",
        "People with their time for the program; only those known to be qualified count as such.",
        people_of_program,
        {
            "roles": "rows role: id profession available_fte",
            "people": "rows person: id role qualified? available_fte?",
            "intervals_months": "each training.competency_interval_months",
        },
    ),
    derived(
        "program.task_hours",
        "Hours of each task in a year of operation, or once in commissioning.",
        hours_of_tasks,
        {
            "tasks": _TASKS,
            "sessions_per_year": "program.sessions_per_year",
            "first_cycle_sessions_per_year": "program.first_cycle_sessions_per_year",
            "treatment_days_per_year": "program.treatment_days_per_year",
            "expected_patients_per_year": "program.expected_patients_per_year",
            "patient_weeks_per_year": "program.patient_weeks_per_year",
        },
    ),
    derived(
        "program.staffing_balance",
        "Hours and full-time equivalents needed against available, by phase and profession.",
        balance_of_staff,
        {
            "hours": "program.task_hours",
            "people": "program.people",
            "commissioning_weeks": "program.commissioning_weeks?",
            "hours_per_fte_h": "program.hours_per_fte_h",
        },
    ),
    derived(
        "program.staff_cover",
        "What is left of each profession when one of its people is away.",
        cover_of_staff,
        {"tasks": _TASKS, "people": "program.people", "balance": "program.staffing_balance"},
    ),
    derived(
        "program.professions_without_cover",
        "Professions in which an absence leaves too few qualified people for a session, or none.",
        professions_without_cover,
        {"cover": "program.staff_cover", "people": "program.people"},
    ),
    derived(
        "program.console_qualified_persons",
        "People who are qualified and of a profession that may stand at the console.",
        console_persons,
        {
            "people": "program.people",
            "console_professions": "program.console_professions",
            "asked_persons": "criterion.console_persons",
        },
    ),
    derived(
        "program.console_qualified_with_one_away_persons",
        "The same, with one of them away.",
        qualified_at_console_with_one_away,
        {"people": "program.people", "console_professions": "program.console_professions"},
    ),
    derived(
        "program.professions_short_of_time",
        "Professions whose qualified people have less time than the program takes.",
        short_of_time,
        {
            keyword: name
            for who in SHORT_OF_TIME
            for keyword, name in (
                (f"{who}_needed_fte", f"program.{who}_needed_fte"),
                (f"{who}_fte", f"program.{who}_qualified_fte"),
            )
        }
        | {"people": "program.people"},
    ),
    derived(
        "program.commissioning_needed_h",
        "Hours that commissioning takes of the physicists.",
        commissioning_hours_needed,
        {"hours": "program.task_hours"},
    ),
    derived(
        "program.commissioning_available_h",
        "Hours that the physicists can give to commissioning.",
        commissioning_hours_available,
        {"roles": "rows role: id profession commissioning_hours_h?"},
    ),
    *(definition for profession in PROFESSIONS for definition in _of_profession(profession)),
)
