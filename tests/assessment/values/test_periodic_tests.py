"""Periodic tests: what is covered, and whether a test is in time."""

from datetime import date
from typing import Any

import pytest

from readiness.assessment.records import PROGRAM, Gone, Ref, Value
from readiness.assessment.values import periodic_tests
from readiness.program.items import Item, Program
from tests.assessment.small import graph, item, program

ONE = Ref("periodic_test", "one")


def check_of(quantity: str, frequency: str, name: str | None = None, **fields: Any) -> Item:
    """Return a test."""
    given = {"quantity": quantity, "frequency": frequency, "in_mode": False, **fields}
    return item("periodic_test", name or f"{frequency}-{quantity}", **given)


def got(of: Program, name: str, ref: Ref = PROGRAM) -> Any:
    """Return a value, or why there is none."""
    found = graph(of, *periodic_tests.DEFINITIONS).get(name, ref)
    return found.value if isinstance(found, Value) else found


def test_what_is_tested_how_often() -> None:
    """Each frequency lists its own quantities once, in order; only those in the mode count as such."""
    of = program(
        check_of("safety", "treatment-day"), check_of("output", "treatment-day", in_mode=True),
        check_of("output", "treatment-day", "again"), check_of("output", "month"), check_of("degrader", "year"),
    )  # fmt: skip
    assert ("output", "safety") == got(of, "program.treatment_day_tests")
    assert ("output",) == got(of, "program.treatment_day_tests_in_mode")
    assert ("output",) == got(of, "program.month_tests")
    assert () == got(of, "program.month_tests_in_mode")
    assert ("degrader",) == got(of, "program.year_tests")
    assert () == got(of, "program.after_change_tests")


def test_no_tests_and_unknown_tests() -> None:
    """An empty list covers nothing; one that nobody wrote is asked for."""
    assert () == got(program(lists=("periodic_test",)), "program.month_tests")
    found = got(program(), "program.month_tests")
    assert isinstance(found, Gone)
    assert ["periodic_test"] == [cause.what for cause in found.causes]


@pytest.mark.parametrize(
    ("frequency", "done", "in_time"),
    [
        ("month", date(2026, 10, 27), True), ("month", date(2026, 10, 26), False), ("month", date(2026, 12, 2), False),
        ("year", date(2025, 11, 30), True), ("year", date(2025, 11, 29), False),
    ],
)  # fmt: skip
def test_done_in_time(frequency: str, done: date, in_time: bool) -> None:
    """A month has 35 days and a year 366; a test of tomorrow is not done."""
    of = program(check_of("output", frequency, "one", last_done_on=done))
    assert in_time is got(of, "periodic_test.done_in_time", ONE)


COMPLETE: dict[str, Any] = {
    "baseline": "annual report", "baseline_on": date(2026, 2, 12), "action_level": "stop", "release_role": "physicist",
}  # fmt: skip


def test_a_tolerance_in_any_unit_completes_a_test() -> None:
    """Per cent, millimetres or degrees will do; none of them is missing."""
    name = "periodic_test.particulars_missing"
    for field in ("tolerance_percent", "tolerance_mm", "tolerance_deg"):
        assert "nothing" == got(program(check_of("output", "month", "one", **COMPLETE, **{field: 2.0})), name, ONE)
    assert "tolerance" == got(program(check_of("output", "month", "one", **COMPLETE)), name, ONE)


def test_a_test_of_function_needs_no_baseline() -> None:
    """An interlock works or does not; who releases must still be written."""
    name = "periodic_test.particulars_missing"
    assert "who may release" == got(program(check_of("safety", "treatment-day", "one", action_level="stop")), name, ONE)


def test_a_baseline_of_tomorrow_is_none() -> None:
    """A baseline with a date in the future was not taken."""
    of = program(check_of("output", "month", "one", **{**COMPLETE, "baseline_on": date(2026, 12, 2)}, tolerance_percent=2.0))
    assert "date of the baseline" == got(of, "periodic_test.particulars_missing", ONE)


@pytest.mark.parametrize(
    ("quantity", "frequency", "stated", "ratio"),
    [
        ("output", "treatment-day", {"tolerance_percent": 3.0}, 1.0), ("output", "month", {"tolerance_percent": 3.0}, 1.5),
        ("monitor", "month", {"tolerance_percent": 2.0}, 1.0), ("profile", "month", {"tolerance_percent": 2.0}, 2.0),
        ("energy", "month", {"tolerance_mm": 2.0}, 1.0), ("output", "year", {"tolerance_percent": 2.0}, 1.0),
        ("energy", "year", {"tolerance_mm": 2.0}, 2.0), ("distance", "treatment-day", {"tolerance_mm": 20.0}, 1.0),
        ("stand", "year", {"tolerance_deg": 4.0}, 2.0), ("degrader", "year", {"tolerance_mm": 0.2}, 1.0),
    ],
)  # fmt: skip
def test_a_tolerance_against_the_one_expected(
    quantity: str, frequency: str, stated: dict[str, float], ratio: float
) -> None:
    """Each test of which guidance or practice gives a tolerance is held against it, in its own unit."""
    of = program(check_of(quantity, frequency, "one", **stated))
    assert got(of, "periodic_test.tolerance_is_known", ONE) is True
    assert ratio == pytest.approx(got(of, "periodic_test.tolerance_ratio", ONE))


def test_a_tolerance_in_another_unit_is_asked_for() -> None:
    """A monthly output in millimetres is not judged; a test without a known tolerance is left alone."""
    found = got(program(check_of("output", "month", "one", tolerance_mm=2.0)), "periodic_test.tolerance_ratio", ONE)
    assert isinstance(found, Gone)
    assert "state its tolerance in %" in found.causes[0].words
    assert got(program(check_of("xray", "year", "one")), "periodic_test.tolerance_is_known", ONE) is False


def test_every_known_tolerance_has_a_number() -> None:
    """The list of known tolerances and their numbers do not drift apart."""
    for (quantity, frequency), unit in periodic_tests.TOLERANCES.items():
        field = {"%": "tolerance_percent", "mm": "tolerance_mm", "°": "tolerance_deg"}[unit]
        found = got(program(check_of(quantity, frequency, "one", **{field: 1.0})), "periodic_test.tolerance_ratio", ONE)
        assert found > 0


def test_the_external_audit() -> None:
    """An audit of 2026-03-19 is 257 days old; a departure counts either way."""
    of = program(
        item("reference_dosimetry", external_audit_on=date(2026, 3, 19), external_audit_percent=-2.4)
    )
    ref = Ref("reference_dosimetry", "reference_dosimetry")
    assert 257 == got(of, "reference_dosimetry.days_since_audit_days", ref)
    assert 2.4 == got(of, "reference_dosimetry.audit_departure_percent", ref)


def test_days_since_the_last_patient() -> None:
    """A month without a patient is 30 days from the first of November."""
    assert 30 == got(program(last_patient_on=date(2026, 11, 1)), "program.days_since_patient_days")
