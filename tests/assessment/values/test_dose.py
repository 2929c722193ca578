"""Monitor units of a cycle as limits see them, factors, second checks and x rays of a course."""

from typing import Any

import pytest

from readiness.assessment.catalogue import catalogue
from readiness.assessment.records import Gone
from tests.assessment.small import item
from tests.assessment.values.running import department, got, value


def test_the_largest_beam_is_shown_only_as_a_part_of_the_limit() -> None:
    """2 Gy with B 2.5 and 0.02 cGy/MU are 4,000 MU of the pair, 2,000 in a beam: 0.8 of 2,500."""
    of = department()
    assert 0.8 == value(of, "mode_limit_ratio")
    assert 1 == value(of, "beam_parts")


def test_no_value_holds_monitor_units() -> None:
    """Nothing that is shown of an arrangement ends in MU, and the record of a cycle is internal."""
    shown = [
        name
        for name, each in catalogue().definitions.items()
        if name.startswith("arrangement.") and not each.internal
    ]
    assert [] == [name for name in shown if name.endswith("_mu") and not name.endswith("_per_mu")]
    assert catalogue().definitions["arrangement.planned_cycles"].internal


def test_output_per_mu_on_each_beam_counts_twice() -> None:
    """0.04 cGy per MU on each beam is 0.02 per MU of both, and the same beam."""
    of = department(plan={"pair_output_cgy_per_mu": 0.04, "mu_convention": "on-each-beam"})
    assert 0.02 == value(of, "total_output_cgy_per_mu")
    assert 0.8 == value(of, "mode_limit_ratio")


def test_an_unequal_split_makes_the_larger_beam() -> None:
    """Six tenths of 4,000 MU on the upper beam are 2,400, within 0.96 of the limit."""
    assert 0.96 == value(department(plan={"mu_share_upper": 0.6}), "mode_limit_ratio")


def test_a_beam_over_the_limit_is_given_in_parts() -> None:
    """2,000 MU under a limit of 1,500 take two parts."""
    of = department(beam={"largest_mu_per_beam_mu": 1500.0})
    assert 2 == value(of, "beam_parts")
    assert pytest.approx(4 / 3, rel=1e-5) == value(of, "mode_limit_ratio")


def test_a_turning_platform_gives_the_dose_of_a_session_with_a_sixth_of_b() -> None:
    """1 Gy a session with B/6 of 0.41667 needs 12,000 MU of the pair, 6,000 in each beam."""
    assert 2.4 == value(department(), "mode_limit_ratio", "rotating-platform")


def test_a_lying_technique_has_no_such_cycle() -> None:
    """A moving couch has no B, and that is said."""
    found = got(department(), "mode_limit_ratio", "moving-couch")
    assert isinstance(found, Gone)
    assert any("no B" in cause.words for cause in found.causes)


def test_a_deeper_prescription_needs_the_depth_dose() -> None:
    """Prescribed at 4 mm without a composite depth dose nothing is calculated."""
    of = department(course={"prescription_depth_mm": 4.0})
    found = got(of, "mode_limit_ratio")
    assert isinstance(found, Gone)
    assert any("composite depth dose" in cause.words for cause in found.causes)


@pytest.mark.parametrize(
    ("b_factor", "confirmed", "understood"),
    [
        (2.5, None, True),
        (1.5, None, False),
        (1.5, False, False),
        (1.5, True, True),
        (0.41, None, False),
        (3.2, None, False),
    ],
)
def test_a_factor_of_unusual_size_is_understood_once_its_definition_is_confirmed(
    b_factor: float, confirmed: bool | None, understood: bool
) -> None:
    """Between 2.3 and 3.1 nothing is asked; outside, somebody has confirmed which definition was used."""
    of = department(plan={"b_factor": b_factor, "b_definition_confirmed": confirmed})
    assert understood is value(of, "b_factor_understood")


def test_nothing_is_calculated_from_a_factor_that_is_not_understood() -> None:
    """B of 1.5 leaves the beam unknown with the question as its cause; confirmed, it is used."""
    found = got(department(plan={"b_factor": 1.5}), "mode_limit_ratio")
    assert isinstance(found, Gone)
    assert any("was it the mean skin dose" in cause.words for cause in found.causes)
    confirmed = department(plan={"b_factor": 1.5, "b_definition_confirmed": True})
    assert pytest.approx(4 / 3, rel=1e-4) == value(confirmed, "mode_limit_ratio")
    assert pytest.approx(36 * 0.9 * 6 / 1.5 / 100, rel=1e-5) == value(confirmed, "course_xray_dose_gy")


def test_the_second_calculation_may_differ_either_way() -> None:
    """Four per cent less is as far as four per cent more."""
    assert 4.0 == value(department(plan={"second_check_percent": -4.0}), "second_check_percent")


def test_the_front_has_its_part_of_a_cycle_after_day_one() -> None:
    """With B of 2.5 the front has 40 % of the cycle's dose after the first session; a platform has no such day."""
    assert 40.0 == value(department(), "day_one_percent")
    assert isinstance(got(department(), "day_one_percent", "rotating-platform"), Gone)


def test_body_dose_of_a_course_follows_from_all_six_fields() -> None:
    """36 Gy with F = 6/2.5 of 0.9 %, 2.16 %, are 0.778 Gy; 0.9 % alone would have said 0.324."""
    of = department()
    assert pytest.approx(36 * 0.9 * 6 / 2.5 / 100, rel=1e-5) == value(of, "course_xray_dose_gy")
    assert pytest.approx(100 * 0.7 / 36, rel=1e-5) == value(of, "highest_composite_xray_percent")


def test_the_course_with_the_highest_dose_decides() -> None:
    """A second course of 12 Gy changes nothing, and both stand in the table."""
    low = item(
        "course", "low", dose_per_cycle_gy=2.0, cycles=6, sessions_per_cycle=2, prescription_depth_mm=0.0
    )
    of = department(low)
    assert value(department(), "course_xray_dose_gy") == value(of, "course_xray_dose_gy")
    rows = {row["course"]: row for row in value(of, "course_doses").records()}
    assert pytest.approx(rows["standard"]["xray_dose_gy"] / 3) == rows["low"]["xray_dose_gy"]


def test_without_an_x_ray_component_no_body_dose_is_told() -> None:
    """The missing component is asked for, and the table leaves it blank."""
    of = department(beam={"xray_fraction_percent": None})
    found = got(of, "course_xray_dose_gy")
    assert isinstance(found, Gone)
    assert "beam.xray_fraction_percent" in [cause.what for cause in found.causes]
    assert next(value(of, "course_doses").records())["xray_dose_gy"] is None


@pytest.mark.parametrize(
    ("changes", "root"),
    [
        ({"plan": {"mu_convention": None}}, "plan.mu_convention"),
        ({"beam": {"largest_mu_per_beam_mu": None}}, "beam.largest_mu_per_beam_mu"),
        ({"course": {"prescription_depth_mm": None}}, "course.prescription_depth_mm"),
    ],
)
def test_what_is_missing_is_named(changes: dict[str, Any], root: str) -> None:
    """Neither the pair's convention nor the mode's limit nor the depth has a default."""
    found = got(department(**changes), "mode_limit_ratio")
    assert isinstance(found, Gone)
    assert root in [cause.what for cause in found.causes]
