"""People one by one, and how many of each profession are qualified."""

from datetime import date, timedelta
from typing import Any

from readiness.assessment.records import PROGRAM, Gone, Ref, Value
from readiness.assessment.values import papers, people, staff_time
from readiness.program.items import Item, Program
from tests.assessment.small import DAY, graph, item, program

WANTED = {"person.qualified", "program.people"}
DEFINITIONS = (
    *papers.DEFINITIONS, *people.DEFINITIONS, *(each for each in staff_time.DEFINITIONS if each.name in WANTED),
)  # fmt: skip
P1 = Ref("person", "P1")


def got(of: Program, name: str, ref: Ref = PROGRAM) -> Any:
    """Return a value, or why there is none."""
    found = graph(of, *DEFINITIONS).get(name, ref)
    return found.value if isinstance(found, Value) else found


WHOLE: dict[str, Any] = {"licensed": True, "trained_on": date(2026, 5, 1), "competency_on": date(2026, 6, 1)}


def person(name: str, **fields: Any) -> Item:
    """Return a physicist."""
    return item("person", name, {"role": "physicists"}, role="physicists", **fields)


def staff(*more: Item, months: float = 12.0) -> Program:
    """Return people with their role and training."""
    role = item("role", "physicists", profession="physicist", available_fte=0.2)
    return program(role, item("training", competency_interval_months=months), *more, lists=("evidence", "person"))


def test_competency_until_the_day_a_year_later() -> None:
    """A check of 1 December 2025 holds on 1 December 2026, one of the day before does not; a future one neither."""
    for checked, holds in ((date(2025, 12, 1), True), (date(2025, 11, 30), False), (date(2026, 12, 2), False)):
        assert holds is got(staff(person("P1", competency_on=checked)), "person.competency_holds", P1)


def test_a_longer_interval_holds_longer() -> None:
    """With two years between checks the same date still holds."""
    of = staff(person("P1", competency_on=date(2025, 1, 1)), months=24.0)
    assert got(of, "person.competency_holds", P1) is True


def test_people_trained_and_listed() -> None:
    """Two of three are trained; training planned for tomorrow does not count."""
    of = staff(
        person("P1", trained_on=date(2026, 5, 1)), person("P2", trained_on=date(2026, 12, 1)),
        person("P3", trained_on=date(2026, 12, 2)), person("P4"),
    )  # fmt: skip
    assert 2 == got(of, "program.people_trained")
    assert 4 == got(of, "program.people_listed")


def test_people_without_a_record_on_file() -> None:
    """Who is not named by a competency record in force is named here."""
    record = item(
        "evidence", "record", type="competency-record", file="evidence/p1.pdf", approved_by="chief physicist",
        approved_on=date(2026, 6, 1), covers=("P1",),
    )  # fmt: skip
    assert "P2" == got(staff(person("P1"), person("P2"), record), "program.people_without_record")
    assert "nobody" == got(staff(person("P1"), record), "program.people_without_record")


def test_qualified_of_a_profession() -> None:
    """Who lacks licence, training or competency is not counted."""
    off = {"licensed": False}
    of = staff(person("P1", **WHOLE), person("P2", **{**WHOLE, **off}))
    assert 1 == got(of, "program.qualified_physicists")
    assert 0 == got(of, "program.qualified_nurses")


def test_a_missing_record_is_not_known_where_it_decides() -> None:
    """Of two physicists that are asked one is qualified: a third without dates leaves it open, and is named."""
    of = staff(person("P1", **WHOLE), person("P2", **{**WHOLE, "licensed": False}), person("P3", licensed=True))
    found = graph(of, *DEFINITIONS).get("program.qualified_physicists", PROGRAM)
    assert isinstance(found, Gone)
    assert ["P3 can be counted as qualified" in cause.words for cause in found.causes] == [True]


def test_a_missing_record_decides_nothing_where_there_are_enough() -> None:
    """Two are qualified and two are asked, whatever a third is; none is enough if even all would not do."""
    enough = staff(person("P1", **WHOLE), person("P2", **WHOLE), person("P3", licensed=True))
    assert 2 == got(enough, "program.qualified_physicists")
    assert 0 == got(staff(person("P1", licensed=True)), "program.qualified_physicists")


def test_unknown_people_are_asked_for() -> None:
    """A list of people that nobody wrote has no number of trained ones."""
    found = got(program(), "program.people_trained")
    assert isinstance(found, Gone)
    assert ["person"] == [cause.what for cause in found.causes]


def test_what_a_person_still_needs() -> None:
    """Licence, training, competency and record are named one by one."""
    good = {"licensed": True, "trained_on": DAY, "competency_holds": True, "papers": ("competency-record",), "as_of_date": DAY}
    assert "none" == people.qualification_missing(**good)  # type: ignore[arg-type]
    bare = {**good, "licensed": False, "trained_on": DAY + timedelta(days=1), "competency_holds": False, "papers": ()}
    assert "licence, training, a competency check in force, its record on file" == people.qualification_missing(**bare)  # type: ignore[arg-type]
