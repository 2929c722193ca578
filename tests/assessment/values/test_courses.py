"""Courses of a small program: doses, days, boosts and shields."""

from datetime import date
from typing import Any

import pytest

from readiness.assessment.records import Gone, Ref, Value
from readiness.assessment.values import courses
from readiness.program.items import Program
from readiness.quantities import Table
from tests.assessment.small import graph, item, program

STANDARD = Ref("course", "standard")
WEEKDAYS = ("monday", "tuesday", "wednesday", "thursday")
COURSE: dict[str, Any] = {
    "total_dose_gy": 36.0, "dose_per_cycle_gy": 2.0, "cycles": 18, "sessions_per_cycle": 2, "sessions_per_week": 4,
    "break_after_cycle": 10, "break_weeks": 1.0,
    "boosts": Table(("site", "dose_per_session_gy", "sessions", "first_cycle"), (("soles", 1.0, 6, 4),)),
    "shields": Table(("organ", "first_cycle", "last_cycle"), (("eyes-external", 1, None), ("nails", 1, 9))),
}  # fmt: skip
PROGRAM: dict[str, Any] = {
    "techniques": ("six-position",), "target_first_patient_date": date(2027, 5, 17), "treatment_weekdays": WEEKDAYS,
    "closed_dates": (date(2027, 5, 31),), "service_dates": (),
}  # fmt: skip


def described(*, course: dict[str, Any] | None = None, **changes: Any) -> Program:
    """Return the program with one course, changed as asked; None leaves a field out."""
    whole = {name: value for name, value in {**PROGRAM, **changes}.items() if value is not None}
    own = {name: value for name, value in {**COURSE, **(course or {})}.items() if value is not None}
    return program(item("course", "standard", **own), **whole)


def value(of: Program, name: str) -> Value:
    """Return a value of the standard course."""
    got = graph(of, *courses.DEFINITIONS).get(name, STANDARD)
    assert isinstance(got, Value), got
    return got


def missing(of: Program, name: str) -> list[str]:
    """Return the roots for which a value cannot be had."""
    got = graph(of, *courses.DEFINITIONS).get(name, STANDARD)
    assert isinstance(got, Gone), got
    return [cause.what for cause in got.causes]


def test_cycles_make_the_dose() -> None:
    """18 cycles of 2 Gy make 36 Gy, two cycles and 4 Gy a week, in ten weeks with the break."""
    of = described()
    names = (
        "dose_from_cycles_gy",
        "cycles_per_week",
        "dose_per_week_gy",
        "undisturbed_weeks",
        "session_count",
    )
    assert [36.0, 2, 4.0, 10.0, 36] == [value(of, f"course.{name}").value for name in names]


def test_the_course_begins_with_the_first_patient_and_ends_after_its_break() -> None:
    """Ten weeks from Monday 17 May end on Thursday 22 July; one closed Monday moves that to 27 July."""
    of = described()
    assert date(2027, 5, 17) == value(of, "course.first_date").value
    assert date(2027, 7, 22) == value(described(closed_dates=()), "course.end_date").value
    assert date(2027, 7, 27) == value(of, "course.end_date").value


def test_a_cycle_is_never_split() -> None:
    """The two days of each cycle follow each other, whatever days are closed."""
    assert 1 == value(described(), "course.longest_gap_days").value


def test_six_positions_are_shared_over_the_two_days() -> None:
    """Day 1 has its three positions, day 2 the other three; the dose of complete cycles counts."""
    first, second = list(value(described(), "course.calendar").value.records())[:2]
    assert ("AP, RPO, LPO", "PA, RAO, LAO") == (first["fields"], second["fields"])
    assert (0.0, 2.0) == (first["complete_cycles_dose_gy"], second["complete_cycles_dose_gy"])


@pytest.mark.parametrize(
    ("technique", "fields"), [("rotating-platform", "all angles"), ("moving-couch", "front, left")]
)
def test_other_techniques_have_their_own_fields(technique: str, fields: str) -> None:
    """A turning patient gets all angles each session, a lying one the department's incidences."""
    of = described(techniques=(technique,), lying_incidences=("front", "left", "back", "right"))
    assert fields == next(value(of, "course.calendar").value.records())["fields"]


def test_the_chosen_technique_counts_before_the_first_considered() -> None:
    """Once an arrangement is chosen its technique decides the fields."""
    chosen = Table(("technique",), (("rotating-platform",),))
    assert (
        "rotating-platform" == value(described(chosen_arrangement=chosen), "program.planned_technique").value
    )


def test_a_lying_course_without_incidences_contradicts_itself() -> None:
    """A moving couch needs its list of incidences; without it the course has no calendar."""
    of = described(techniques=("moving-couch",))
    got = graph(of, *courses.DEFINITIONS).get("course.calendar", STANDARD)
    assert isinstance(got, Gone)
    assert "incidences" in got.causes[0].words


@pytest.mark.parametrize(
    "field", ["closed_dates", "service_dates", "treatment_weekdays", "target_first_patient_date"]
)
def test_the_end_is_not_known_without_the_days_off(field: str) -> None:
    """Without closed days, service days, weekdays or a start no end date is told, and that one is named."""
    assert [f"program.{field}"] == missing(described(**{field: None}), "course.end_date")


def test_a_list_of_days_off_of_another_year_is_seen() -> None:
    """The course lies in 2027; closed days of 2025 alone leave one year without any."""
    assert 0 == value(described(), "course.years_without_days_off").value
    assert 1 == value(described(closed_dates=(date(2025, 12, 25),)), "course.years_without_days_off").value
    of = described(closed_dates=(), holidays_country="US")
    assert 0 == value(of, "course.years_without_days_off").value


def test_boosts_fall_on_days_that_complete_a_cycle() -> None:
    """Six boosts of 1 Gy from cycle 4 on end with cycle 9 and 6 Gy, within the course."""
    of = described()
    rows = list(value(of, "course.boost_calendar").value.records())
    assert [4, 5, 6, 7, 8, 9] == [row["cycle"] for row in rows]
    assert 6.0 == rows[-1]["site_dose_after_gy"]
    assert value(of, "course.end_date").value == value(of, "course.complete_date").value


def test_boosts_that_are_not_listed_are_unknown_and_none_is_none() -> None:
    """Without a list the day of completion is unknown; an empty list means no boost."""
    empty = Table(("site", "dose_per_session_gy", "sessions", "first_cycle"), ())
    assert ["course.boosts"] == missing(described(course={"boosts": None}), "course.complete_date")
    assert () == value(described(course={"boosts": empty}), "course.boost_calendar").value.rows


def test_shields_of_each_session_and_what_they_leave_open() -> None:
    """Nails are covered in cycles 1 to 9; the prescription of the other nine is 18 Gy."""
    of = described()
    days = list(value(of, "course.shield_calendar").value.records())
    assert "eyes-external, nails" == days[0]["shields"]
    assert "eyes-external" == days[18]["shields"]
    use = {row["organ"]: row["open_dose_gy"] for row in value(of, "course.shield_use").value.records()}
    assert {"eyes-external": 0.0, "nails": 18.0} == use


def test_a_missed_day_is_made_up_before_anything_else() -> None:
    """Tuesday missed: Wednesday gets the day-2 fields of cycle 1, and cycle 2 waits for a pair of days."""
    of = described(course={"missed_dates": (date(2027, 5, 18),)})
    second, third = list(value(of, "course.calendar").value.records())[1:3]
    assert ("2027-05-19", 1, "PA, RAO, LAO", True) == tuple(
        second[name] for name in ("date", "cycle", "fields", "made_up")
    )
    assert ("2027-05-24", 2, "AP, RPO, LPO") == tuple(third[name] for name in ("date", "cycle", "fields"))
    assert 1 == value(of, "course.made_up_sessions").value
    assert 0 == value(described(), "course.made_up_sessions").value


def test_no_boost_on_a_missed_day() -> None:
    """Without the missed day a boost would stand on it."""
    day = date(2027, 5, 27)
    assert day.isoformat() in value(described(), "course.boost_calendar").value.column("date")
    moved = described(course={"missed_dates": (day,)})
    assert day.isoformat() not in value(moved, "course.boost_calendar").value.column("date")
