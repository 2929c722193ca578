"""Hours of staff needed and available, qualification and cover, in a small program."""

from datetime import date
from typing import Any

import pytest

from readiness.assessment.records import PROGRAM, Gone, Ref, Value
from readiness.assessment.values import patient_flow, staff_time
from readiness.calculations.staff_hours import PEOPLE
from readiness.errors import OutsideValidity
from readiness.program.items import Item, Program
from readiness.quantities import Table
from tests.assessment.small import graph, item, program

DEFINITIONS = (*patient_flow.DEFINITIONS, *staff_time.DEFINITIONS)
QUALIFIED: dict[str, Any] = {
    "licensed": True, "trained_on": date(2026, 1, 10), "competency_on": date(2026, 2, 1),
}  # fmt: skip


def person(name: str, role: str, **fields: Any) -> Item:
    """Return a person of a role."""
    return item("person", name, {"role": role}, role=role, **fields)


def task(
    name: str, profession: str, per: str, minutes: float, persons: int | None = 1, **changes: Any
) -> Item:
    """Return a task of staff."""
    fields = {"profession": profession, "per": per, "minutes_min": minutes, "persons": persons, **changes}
    return item("staff_task", name, **{key: value for key, value in fields.items() if value is not None})


def described(*changed: Item, without: tuple[str, ...] = (), **changes: Any) -> Program:
    """Return a department with two physicists, four therapists and a nurse's role; items by id replaced."""
    items = [
        item("course", "long", patients_per_year=5.0, cycles=18, sessions_per_cycle=2, sessions_per_week=4, break_weeks=1.0),
        item("course", "short", patients_per_year=3.0, cycles=6, sessions_per_cycle=2, sessions_per_week=4, break_weeks=0.0),
        item("role", "physicists", profession="physicist", available_fte=0.15, commissioning_hours_h=200.0),
        item("role", "therapists", profession="therapist", available_fte=0.40),
        item("role", "nurses", profession="nurse", available_fte=0.05),
        person("P1", "physicists", available_fte=0.10, **QUALIFIED),
        person("P2", "physicists"),
        *(person(f"T{number}", "therapists", **QUALIFIED) for number in (1, 2, 3)),
        person("T4", "therapists", licensed=True),
        item("training", competency_interval_months=12.0),
        task("session", "therapist", "session", 60.0, 2),
        task("first", "therapist", "first-cycle-session", 60.0, 3),
        task("placement", "physicist", "first-cycle-session", 120.0),
        task("daily", "physicist", "treatment-day", 30.0),
        task("read-out", "physicist", "patient", 360.0),
        task("chart", "physicist", "patient-week", 30.0),
        task("monthly", "physicist", "month", 180.0),
        task("annual", "physicist", "year", 1440.0),
        task("training", "therapist", "year", 2880.0),
        task("project", "physicist", "commissioning", 240 * 60.0),
    ]  # fmt: skip
    whole = {
        "treatment_days_per_year": 176.0,
        "hours_per_fte_h": 1650.0,
        "console_professions": ("therapist",),
        **changes,
    }
    new = {(each.kind, each.id): each for each in changed}
    kept = [new.pop((each.kind, each.id), each) for each in items if each.id not in without]
    return program(
        *kept, *new.values(), **{name: value for name, value in whole.items() if value is not None}
    )


def value(of: Program, name: str, ref: Ref = PROGRAM) -> Any:
    """Return a value."""
    got = graph(of, *DEFINITIONS).get(name, ref)
    assert isinstance(got, Value), got
    return got.value


def causes(of: Program, name: str, ref: Ref = PROGRAM) -> list[str]:
    """Return the roots for which a value cannot be had."""
    got = graph(of, *DEFINITIONS).get(name, ref)
    assert isinstance(got, Gone), got
    return [cause.what for cause in got.causes]


def test_full_time_equivalents_close_by_hand() -> None:
    """The physicists' 257.5 h are 0.156 FTE at 1,650 h, the therapists' 528 h 0.32; nurses have no task."""
    of = described()
    assert pytest.approx(257.5 / 1650, rel=1e-5) == value(of, "program.physicist_needed_fte")
    assert pytest.approx(528 / 1650, rel=1e-5) == value(of, "program.therapist_needed_fte")
    assert 0.0 == value(of, "program.nurse_needed_fte")


def test_a_profession_without_a_task_is_not_one_without_work() -> None:
    """No oncologist's task is listed, so that the need is not known; commissioning takes hours too."""
    found = graph(described(), *DEFINITIONS).get("program.oncologist_needed_fte", PROGRAM)
    assert isinstance(found, Gone)
    assert "oncologist's tasks" in found.causes[0].words
    without = graph(described(without=("project",)), *DEFINITIONS).get(
        "program.commissioning_needed_h", PROGRAM
    )
    assert isinstance(without, Gone)


def test_only_those_known_to_be_qualified_count() -> None:
    """Of 0.15 and 0.40 FTE the trained physicist has 0.10, the three checked therapists 0.30."""
    of = described()
    assert 0.10 == value(of, "program.physicist_qualified_fte")
    assert pytest.approx(0.30) == value(of, "program.therapist_qualified_fte")


@pytest.mark.parametrize(
    ("changes", "qualified"),
    [
        ({}, True),
        ({"licensed": False}, False),
        ({"competency_on": date(2025, 12, 1)}, True),
        ({"competency_on": date(2025, 11, 30)}, False),
        ({"trained_on": date(2026, 12, 2)}, False),
    ],
)
def test_a_competency_check_holds_for_its_interval(changes: dict[str, Any], qualified: bool) -> None:
    """On 1 December 2026 a check of 1 December 2025 still holds for twelve months, one of the day before no more."""
    of = described(person("P1", "physicists", **{**QUALIFIED, **changes}))
    assert qualified is value(of, "person.qualified", Ref("person", "P1"))


def test_what_is_missing_of_a_qualification_is_named() -> None:
    """A person without dates is neither qualified nor not; the missing records are told."""
    missing = ["person.competency_on", "person.licensed", "person.trained_on"]
    assert missing == causes(described(), "person.qualified", Ref("person", "P2"))


def test_the_console_needs_people_who_may_stand_there() -> None:
    """Three qualified therapists are two when one is away; physicists count once their profession may."""
    of = described()
    assert 3 == value(of, "program.console_qualified_persons")
    assert 2 == value(of, "program.console_qualified_with_one_away_persons")
    both = described(console_professions=("therapist", "physicist"))
    assert 4 == value(both, "program.console_qualified_persons")


def test_cover_is_judged_by_the_qualified_who_are_left() -> None:
    """Two therapists are left for a session of two; a session of three is not covered, and the profession is named."""
    assert "none" == value(described(), "program.professions_without_cover")
    three = task("session", "therapist", "session", 60.0, 3)
    unlicensed = person("T4", "therapists", **{**QUALIFIED, "licensed": False})
    assert "therapist" == value(described(three, unlicensed), "program.professions_without_cover")


def test_cover_is_not_known_while_a_record_is_missing_that_decides_it() -> None:
    """The fourth therapist, of whom dates are missing, could be the third one left."""
    of = described(task("session", "therapist", "session", 60.0, 3))
    found = graph(of, *DEFINITIONS).get("program.professions_without_cover", PROGRAM)
    assert isinstance(found, Gone)
    assert any("T4" in cause.words for cause in found.causes)


def test_commissioning_hours_stand_against_those_available() -> None:
    """240 h are needed of the physicists, 200 can be given."""
    of = described()
    assert (240.0, 200.0) == (
        value(of, "program.commissioning_needed_h"),
        value(of, "program.commissioning_available_h"),
    )
    blank = described(item("role", "physicists", profession="physicist", available_fte=0.15))
    got = graph(blank, *DEFINITIONS).get("program.commissioning_available_h", PROGRAM)
    assert isinstance(got, Gone)
    assert "State commissioning hours (h) of role physicists" in got.causes[0].words


def test_commissioning_within_its_weeks_needs_more_people() -> None:
    """240 h in 20 weeks of a year are 0.38 FTE; without the weeks the line is blank."""
    balance = value(described(commissioning_weeks=20.0), "program.staffing_balance")
    row = next(row for row in balance.records() if row["phase"] == "commission")
    assert pytest.approx(240 / (1650 * 20 / (365.25 / 7)), rel=1e-4) == row["needed_fte"]
    blank = next(
        row
        for row in value(described(), "program.staffing_balance").records()
        if row["phase"] == "commission"
    )
    assert blank["needed_fte"] is None


@pytest.mark.parametrize(
    ("of", "name", "root"),
    [
        (described(hours_per_fte_h=None), "program.physicist_needed_fte", "program.hours_per_fte_h"),
        (described(task("daily", "physicist", "treatment-day", 30.0, persons=None)), "program.physicist_needed_fte",
         "staff_task.persons"),
        (described(item("role", "nurses", profession="nurse")), "program.physicist_qualified_fte", "role.available_fte"),
        (described(item("training")), "program.physicist_qualified_fte", "training.competency_interval_months"),
        (described(console_professions=None), "program.console_qualified_persons", "program.console_professions"),
    ],
)  # fmt: skip
def test_what_is_missing_is_named_and_never_taken_for_zero(of: Program, name: str, root: str) -> None:
    """A blank of hours, persons, time or professions is the cause."""
    assert [root] == causes(of, name)


def test_professions_short_of_time_are_named_with_both_numbers() -> None:
    """A physicist with 0.1 of 0.156 is short; a nurse of whom nothing is needed is not."""
    time = {
        "oncologist_needed_fte": 0.05, "oncologist_fte": 0.1, "physicist_needed_fte": 0.156, "physicist_fte": 0.1,
        "therapist_needed_fte": 0.3, "therapist_fte": 0.3, "nurse_needed_fte": 0.0, "nurse_fte": 0.0,
    }  # fmt: skip
    nobody = Table(PEOPLE, ())
    assert "physicist (0.1 of 0.156 full-time equivalents)" == staff_time.short_of_time(**time, people=nobody)
    assert "none" == staff_time.short_of_time(**{**time, "physicist_fte": 0.2}, people=nobody)
    newcomer = Table(PEOPLE, (("P2", "physicist", 0.1, None),))
    with pytest.raises(OutsideValidity, match="P2"):
        staff_time.short_of_time(**time, people=newcomer)
    small = Table(PEOPLE, (("P2", "physicist", 0.05, None),))
    assert staff_time.short_of_time(**time, people=small).startswith("physicist")
