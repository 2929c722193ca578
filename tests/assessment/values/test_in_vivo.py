"""In-vivo dosimetry of a small program: the plan in numbers, and readings of a cycle."""

from datetime import date
from typing import Any

import pytest

from readiness.assessment.records import Gone, Ref, Value
from readiness.assessment.values import in_vivo, patient_flow
from readiness.calculations.in_vivo_readings import WITHIN
from readiness.program.items import Item, Program
from readiness.quantities import Table
from tests.assessment.small import graph, item, program

PLAN: dict[str, Any] = {
    "sites": ("umbilicus", "chest", "back", "perineum", "sole"), "readings_per_site": 2,
    "readings_at_prescription_level": 3, "measured_cycles_per_patient": 1, "patients_measured_at_once": 1,
    "control_detectors": 2, "shared_sd_percent": 2.0, "investigate_beyond_percent": 5.0, "stop_beyond_percent": 10.0,
    "boost_below_percent": 80.0, "shield_above_percent": 120.0, "read_out_minutes_min": 360.0,
}  # fmt: skip
COLUMNS = ("cycle", "day", "site", "point", "dose_cgy")
BOTH_DAYS = [
    (1, day, site, point, dose / 2)
    for day in (1, 2)
    for site, point, dose in (("umbilicus", 1, 204.0), ("umbilicus", 2, 206.0), ("umbilicus", 3, 208.0), ("sole", 1, 120.0))
]  # fmt: skip


def readings(rows: list[tuple[Any, ...]], **changes: Any) -> Item:
    """Return a file of in-vivo readings."""
    fields = {
        "kind": "in-vivo-readings", "subject": "phantom", "prescribed_per_cycle_gy": 2.0, "instrument": "osl",
        "date": date(2026, 11, 2), "table": Table.of(COLUMNS, rows), **changes,
    }  # fmt: skip
    return item("measurement", "cycle", {"instrument": "osl"}, **fields)


def described(*more: Item, instrument: dict[str, Any] | None = None, **changes: Any) -> Program:
    """Return a program with one course, an in-vivo plan and its detectors."""
    plan = {name: value for name, value in {**PLAN, **changes}.items() if value is not None}
    usual = {
        "pieces": 60, "single_reading_sd_percent": 4.0,
        "calibrated_on": date(2026, 1, 1), "calibration_due_on": date(2027, 1, 1),
    }  # fmt: skip
    detector = {**usual, **(instrument or {})}
    return program(
        item("course", "long", patients_per_year=8.0, cycles=18, sessions_per_cycle=2, sessions_per_week=4, break_weeks=0.0),
        item("instrument", "osl", **{name: value for name, value in detector.items() if value is not None}),
        item("in_vivo", "in_vivo", {"instrument": "osl"}, **plan),
        *more,
    )  # fmt: skip


def got(of: Program, name: str) -> Any:
    """Return a value of the in-vivo plan, or why there is none."""
    return graph(of, *patient_flow.DEFINITIONS, *in_vivo.DEFINITIONS).get(
        f"in_vivo.{name}", Ref("in_vivo", "in_vivo")
    )


def value(of: Program, name: str) -> Any:
    """Return a value of the in-vivo plan."""
    found = got(of, name)
    assert isinstance(found, Value), found
    return found.value


def test_points_detectors_and_readings_close_by_hand() -> None:
    """Four sites with two detectors and three at the umbilicus are 11 points, 22 readings, 24 detectors, 176 a year."""
    of = described()
    names = (
        "points_per_patient",
        "readouts_per_patient",
        "detectors_needed",
        "readouts_per_year",
        "reader_per_year_h",
    )
    assert [11, 22, 24, 176.0, 48.0] == [value(of, name) for name in names]


def test_a_stock_may_be_short() -> None:
    """Sixty detectors suffice for 24; with twenty, four are missing."""
    assert 0 == value(described(), "detectors_short")
    assert 4 == value(described(instrument={"pieces": 20}), "detectors_short")


def test_points_are_known_without_the_readers_time() -> None:
    """Missing minutes of the reader leave its hours unknown and nothing else."""
    of = described(read_out_minutes_min=None)
    assert 11 == value(of, "points_per_patient")
    assert ["in_vivo.read_out_minutes_min"] == [cause.what for cause in got(of, "reader_per_year_h").causes]


def test_low_sites_that_are_left_out_are_named() -> None:
    """A plan with perineum and sole still leaves out folds and other shaded sites."""
    missing = value(described(), "low_sites_not_measured")
    assert "axilla" in missing
    assert not {"perineum", "sole"} & set(missing.split(", "))
    assert "none" == value(
        described(sites=("umbilicus", *missing.split(", "), "perineum", "sole")), "low_sites_not_measured"
    )


def test_expected_doses_are_those_published_and_blank_otherwise() -> None:
    """The middle of the body has a published range, the sole none, an own site nothing at all."""
    of = described(sites=("umbilicus", "sole", "scar"))
    rows = {row["site"]: row for row in value(of, "expected_doses").records()}
    assert (93, 107) == (
        rows["umbilicus"]["expected_low_percent"],
        rows["umbilicus"]["expected_high_percent"],
    )
    assert rows["sole"]["expected_low_percent"] is None
    assert rows["scar"]["known"] is None


def test_the_mean_is_as_good_as_its_shared_part_allows() -> None:
    """Three readings of 4 % with 2 % in common have 3.06 %."""
    assert pytest.approx((2**2 + 4**2 / 3) ** 0.5, rel=1e-5) == value(described(), "mean_sd_percent")


def test_readings_of_both_days_are_judged_against_the_prescription() -> None:
    """A mean of 206 cGy on 200 is 103 %, measured, within the action level; the sole lacks 0.8 Gy."""
    of = described(readings(BOTH_DAYS))
    found = got(of, "result_percent")
    assert (pytest.approx(103.0), "measured") == (found.value, found.basis)
    assert found.sd > 0
    assert pytest.approx(3.0) == value(of, "result_deviation_percent")
    assert WITHIN == value(of, "result_action")
    (row,) = value(of, "boost_deficits").records()
    assert ("sole", pytest.approx(0.8)) == (row["site"], row["deficit_per_cycle_gy"])


def test_readings_of_one_day_are_no_cycle() -> None:
    """Without day 2 nothing is added up, and that is the cause."""
    found = got(described(readings([row for row in BOTH_DAYS if row[1] == 1])), "result_percent")
    assert isinstance(found, Gone)
    assert any("all 2 sessions" in cause.words for cause in found.causes)


def test_gray_under_a_column_in_centigray_is_refused() -> None:
    """Readings a hundred times too small are no result."""
    found = got(described(readings([(*row[:4], row[4] / 100) for row in BOTH_DAYS])), "result_percent")
    assert isinstance(found, Gone)
    assert any("gray" in cause.words for cause in found.causes)


def test_readings_of_an_instrument_out_of_calibration_count_for_nothing() -> None:
    """An instrument that was due the day before voids the file."""
    of = described(readings(BOTH_DAYS), instrument={"calibration_due_on": date(2026, 11, 1)})
    found = got(of, "result_percent")
    assert isinstance(found, Gone)
    assert any("out of calibration" in cause.words for cause in found.causes)


def test_without_readings_they_are_asked_for() -> None:
    """A program that has not measured a cycle is told to."""
    found = got(described(), "result_action")
    assert isinstance(found, Gone)
    assert ["in-vivo-readings"] == [cause.what for cause in found.causes]


@pytest.mark.parametrize(
    ("of", "name", "root"),
    [
        (described(instrument={"pieces": None}), "detectors_short", "instrument.pieces"),
        (described(control_detectors=None), "detectors_needed", "in_vivo.control_detectors"),
        (described(shared_sd_percent=None), "mean_sd_percent", "in_vivo.shared_sd_percent"),
    ],
)
def test_what_is_missing_is_named(of: Program, name: str, root: str) -> None:
    """The field that is left out is the one cause."""
    assert [root] == [cause.what for cause in got(of, name).causes]


def test_too_few_readings_are_judged_by_nobody() -> None:
    """Two complete readings at the prescription level have a mean, but no deviation that could be met."""
    few = [row for row in BOTH_DAYS if row[2] != "umbilicus" or row[3] < 3]
    of = described(readings(few))
    assert isinstance(got(of, "result_percent"), Value)
    found = got(of, "result_deviation_percent")
    assert isinstance(found, Gone)
    assert any("fewer than three" in cause.words for cause in found.causes)


def test_the_last_measured_cycle_is_judged_and_the_others_are_named() -> None:
    """A good first cycle does not hide a later one that is 10 % higher."""
    later = [(7, *row[1:4], 1.1 * row[4]) for row in BOTH_DAYS]
    of = described(readings([*BOTH_DAYS, *later]))
    assert pytest.approx(113.3) == value(of, "result_percent")
    assert any("Cycle 7 is judged" in said and "cycle 1," in said for said in value(of, "result_remarks"))
