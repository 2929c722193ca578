"""People one by one: trained, competent, recorded; and how many there are of each profession."""

from collections.abc import Callable, Sequence
from datetime import date

from readiness.assessment.definition import Definition, derived
from readiness.assessment.values.naming import named
from readiness.errors import OutsideValidity
from readiness.quantities import Table

COUNTED = ("therapist", "nurse")  # the others are judged
RECORD = "competency-record"
NOBODY = "nobody"


def trained_by(*, trained_on: Sequence[date | None], as_of_date: date) -> int:
    """Return how many people are trained."""
    return sum(day is not None and day <= as_of_date for day in trained_on)


def listed(*, people: Sequence[str]) -> int:
    """Return how many people there are."""
    return len(people)


def competency_holds(*, competency_on: date, intervals_months: Sequence[float], as_of_date: date) -> bool:
    """Return whether a competency check was made and its interval has not passed."""
    if not intervals_months:
        raise OutsideValidity("State competency interval (months) of training in staffing.yaml.")
    months = competency_on.year * 12 + competency_on.month - 1 + round(min(intervals_months))
    end = (months // 12, months % 12 + 1, competency_on.day)
    return competency_on <= as_of_date and (as_of_date.year, as_of_date.month, as_of_date.day) <= end


def qualification_missing(
    *, licensed: bool, trained_on: date, competency_holds: bool, papers: Sequence[str], as_of_date: date
) -> str:
    """Return what a person still needs before taking part."""
    found = {
        "licence": licensed,
        "training": trained_on <= as_of_date,
        "a competency check in force": competency_holds,
        "its record on file": RECORD in papers,
    }
    return named(words for words, there in found.items() if not there)


def without_record(*, people: Table) -> str:
    """Return the people of whom no competency record is on file."""
    missing = [str(row["id"]) for row in people.records() if RECORD not in _types(row["papers"])]
    return ", ".join(missing) or NOBODY


def _types(papers: object) -> tuple[str, ...]:
    return papers if isinstance(papers, tuple) else ()


def undecided(people: Table, professions: Sequence[str]) -> dict[str, float]:
    """Return the people of whom it is not known whether they are qualified, with their stated time."""
    return {
        str(row["person"]): float(row["fte"] or 0.0)
        for row in people.records()
        if row["profession"] in professions and row["person"] is not None and row["qualified"] is None
    }


def not_known(people: Sequence[str]) -> OutsideValidity:
    """Return why nothing can be said while records of these people are missing."""
    return OutsideValidity(
        f"It is not known whether {', '.join(people)} can be counted as qualified: state licence, training "
        "and competency check in staffing.yaml."
    )


def enough(*, known: int, asked: float, open_people: Sequence[str]) -> int:
    """Return how many are qualified, unless that hangs on people of whom it is not known."""
    if known < asked <= known + len(open_people):
        raise not_known(open_people)
    return known


def _count(people: Table, profession: str) -> int:
    return sum(row["profession"] == profession and row["qualified"] is True for row in people.records())


def _qualified_of(profession: str) -> Callable[..., int]:
    def count(*, people: Table) -> int:
        """Return how many of the profession are known to be qualified."""
        return _count(people, profession)

    return count


def qualified_oncologists(*, people: Table, asked_persons: float) -> int:
    """Return how many radiation oncologists are qualified, where that is known."""
    known = _count(people, "oncologist")
    return enough(known=known, asked=asked_persons, open_people=list(undecided(people, ["oncologist"])))


def qualified_physicists(*, people: Table, asked_persons: float) -> int:
    """Return how many physicists are qualified, where that is known."""
    known = _count(people, "physicist")
    return enough(known=known, asked=asked_persons, open_people=list(undecided(people, ["physicist"])))


DEFINITIONS: tuple[Definition, ...] = (
    derived(
        "person.competency_holds",
        "The last competency check was signed and its interval has not passed.",
        competency_holds,
        {
            "competency_on": "person.competency_on",
            "intervals_months": "each training.competency_interval_months",
            "as_of_date": "program.as_of_date",
        },
    ),
    derived(
        "person.qualification_missing",
        "What the person still needs before taking part.",
        qualification_missing,
        {
            "licensed": "person.licensed",
            "trained_on": "person.trained_on",
            "competency_holds": "person.competency_holds",
            "papers": "person.papers",
            "as_of_date": "program.as_of_date",
        },
    ),
    derived(
        "program.people_trained",
        "Number of people with a date of training for this program.",
        trained_by,
        {"trained_on": "each person.trained_on?", "as_of_date": "program.as_of_date"},
    ),
    derived(
        "program.people_listed", "Number of people in the program.", listed, {"people": "each person.id"}
    ),
    derived(
        "program.people_without_record",
        "People of whom no competency record in force is on file.",
        without_record,
        {"people": "rows person: id papers"},
    ),
    *(
        derived(
            f"program.qualified_{profession}s",
            f"Number of {profession}s who are licensed, trained and have a competency check in force.",
            _qualified_of(profession),
            {"people": "program.people"},
        )
        for profession in COUNTED
    ),
    derived(
        "program.qualified_oncologists",
        "Number of radiation oncologists who are licensed, trained and have a competency check in force.",
        qualified_oncologists,
        {"people": "program.people", "asked_persons": "criterion.oncologists_persons"},
    ),
    derived(
        "program.qualified_physicists",
        "Number of physicists who are licensed, trained and have a competency check in force.",
        qualified_physicists,
        {"people": "program.people", "asked_persons": "criterion.physicists_persons"},
    ),
)
