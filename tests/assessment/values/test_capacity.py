"""Patients at once, room hours, places and waits of a small program."""

import math
from typing import Any

import pytest

from readiness.assessment.records import PROGRAM, Gone, Value
from readiness.assessment.values import capacity, patient_flow
from readiness.program.items import Program
from tests.assessment.small import graph, item, program

DEFINITIONS = (*patient_flow.DEFINITIONS, *capacity.DEFINITIONS)
LONG: dict[str, Any] = {
    "patients_per_year": 5.0, "cycles": 18, "sessions_per_cycle": 2, "sessions_per_week": 4, "break_weeks": 1.0,
}  # fmt: skip
SHORT: dict[str, Any] = {**LONG, "patients_per_year": 3.0, "cycles": 6, "break_weeks": 0.0}
STATED: dict[str, Any] = {
    "peak_patients": 2, "session_room_min": 60.0, "free_room_hours_per_week_h": 10.0, "first_cycle_extra_min": 60.0,
    "reached_waiting_time_weeks": 4.0, "share_started_in_time_percent": 90.0, "treatment_days_per_year": 176.0,
    "daily_check_room_min": 30.0, "other_room_hours_per_year_h": 40.0, "ordinary_appointment_min": 15.0,
}  # fmt: skip


def described(*, long: dict[str, Any] | None = None, **changes: Any) -> Program:
    """Return the program with its two courses, changed as asked; None leaves a field out."""
    whole = {name: value for name, value in {**STATED, **changes}.items() if value is not None}
    own = {name: value for name, value in {**LONG, **(long or {})}.items() if value is not None}
    return program(item("course", "long", **own), item("course", "short", **SHORT), **whole)


def value(of: Program, name: str) -> Value:
    """Return a value of the program."""
    got = graph(of, *DEFINITIONS).get(f"program.{name}", PROGRAM)
    assert isinstance(got, Value), got
    return got


def gone(of: Program, name: str) -> Gone:
    """Return why a value cannot be had."""
    got = graph(of, *DEFINITIONS).get(f"program.{name}", PROGRAM)
    assert isinstance(got, Gone), got
    return got


def test_the_mean_number_of_patients_follows_littles_law() -> None:
    """Five patients for ten weeks and three for three weeks a year are 59 patient weeks, 1.13 at once."""
    of = described()
    assert 59.0 == value(of, "patient_weeks_per_year").value
    assert pytest.approx(59 / (365.25 / 7), rel=1e-5) == value(of, "patients_at_once_patients").value


def test_sessions_of_a_year_and_of_the_busiest_week() -> None:
    """8 patients bring 216 sessions a year, 16 of them of first cycles; two at once have 8 in a week."""
    of = described()
    names = ("expected_patients_per_year", "sessions_per_year", "first_cycle_sessions_per_year",
             "busiest_sessions_per_week")  # fmt: skip
    assert [8.0, 216.0, 16.0, 8.0] == [value(of, name).value for name in names]


def test_room_hours_left_can_be_negative() -> None:
    """Eight sessions of an hour leave 2 of 10 free hours, and 6 hours are 2 too few."""
    assert 2.0 == value(described(), "free_room_hours_left_h").value
    assert -2.0 == value(described(free_room_hours_per_week_h=6.0), "free_room_hours_left_h").value


def test_displaced_hours_close_by_hand() -> None:
    """216 h of sessions, 16 h of first cycles, 88 h of checks and 40 h of other work are 360 h, 1,440 appointments."""
    of = described()
    assert 360.0 == value(of, "displaced_room_hours_per_year_h").value
    assert 1440.0 == value(of, "displaced_appointments_per_year").value


def test_treatment_days_that_nobody_counted_are_predicted() -> None:
    """A stated number stands; without one the days follow from the patient flow and are named a prediction."""
    stated, predicted = (
        value(described(treatment_days_per_year=days), "treatment_days_per_year") for days in (176.0, None)
    )
    assert (176.0, "stated") == (stated.value, stated.basis)
    expected = 4 * 365.25 / 7 * (1 - math.exp(-59 / (365.25 / 7)))
    assert (pytest.approx(expected, rel=1e-5), "predicted") == (predicted.value, predicted.basis)


def test_the_room_may_hold_fewer_places_than_are_wanted() -> None:
    """Seven free hours hold one patient with four sessions of an hour a week."""
    assert 2 == value(described(), "usable_places").value
    assert 1 == value(described(free_room_hours_per_week_h=7.0), "usable_places").value


def test_a_wait_that_grows_without_end_is_told_in_words() -> None:
    """One place cannot bear 1.13 patients at once: there is no mean wait, and nobody counts as started in time."""
    of = described(peak_patients=1)
    assert "grows without end" in gone(of, "wait_weeks").causes[0].words
    assert 0.0 == value(of, "started_in_time_percent").value


def test_without_a_place_nobody_is_borne() -> None:
    """Room hours for no patient mean no wait and no patient, not an error."""
    of = described(free_room_hours_per_week_h=1.0)
    assert 0.0 == value(of, "patients_borne_per_year").value
    assert 0.0 == value(of, "started_in_time_percent").value
    assert gone(of, "wait_weeks")


def test_more_places_bear_more_patients_and_waits_are_predictions() -> None:
    """A third place shortens the wait and raises what the program bears; both are simulated."""
    two, three = described(), described(peak_patients=3, free_room_hours_per_week_h=12.0)
    assert value(two, "wait_weeks").value > value(three, "wait_weeks").value
    assert value(two, "patients_borne_per_year").value < value(three, "patients_borne_per_year").value
    assert "predicted" == value(two, "wait_weeks").basis
    assert (value(two, "wait_weeks").sd or 0.0) > 0


def test_places_needed_are_the_first_with_which_the_wanted_part_starts_in_time() -> None:
    """At the places needed the wanted part starts in time; with one fewer it does not."""
    of = described()
    needed = value(of, "places_needed").value
    share = {
        row["places"]: row["share_started_in_time"] for row in value(of, "waits_by_places").value.records()
    }
    assert share[needed] >= 0.9 > share[needed - 1]


def test_sensitivity_begins_with_the_program_as_stated() -> None:
    """The first row of the sensitivity is the stated program, with the patients it bears."""
    of = described()
    first = next(value(of, "capacity_sensitivity").value.records())
    assert ("as stated", value(of, "patients_borne_per_year").value) == (
        first["change"], first["patients_borne_per_year"],
    )  # fmt: skip


@pytest.mark.parametrize("field", ["peak_patients", "session_room_min", "free_room_hours_per_week_h",
                                   "reached_waiting_time_weeks", "share_started_in_time_percent"])  # fmt: skip
def test_what_the_program_bears_names_each_thing_that_is_missing(field: str) -> None:
    """Whatever is left out is the one cause."""
    assert [f"program.{field}"] == [
        cause.what for cause in gone(described(**{field: None}), "patients_borne_per_year").causes
    ]


def test_a_course_without_its_patients_leaves_the_flow_unknown() -> None:
    """A course whose patients a year nobody states is not a course without patients."""
    of = described(long={"patients_per_year": None})
    assert ["course.patients_per_year"] == [cause.what for cause in gone(of, "sessions_per_year").causes]
