"""What to measure, in which order, and what to expect."""

from typing import Any

import pytest
from beam_setups import common_setup

from readiness.calculations.commissioning_plan import CommissioningPlan, commissioning_plan, tilts_to_measure
from readiness.calculations.composite_depth_dose import composite_depth_dose
from readiness.calculations.field_at_plane import dual_field_doses


def plan(**changes: Any) -> CommissioningPlan:
    """Return the plan of the common set-up."""
    given: dict[str, Any] = {
        "setup": common_setup(),
        "plane_distance_cm": 400.0,
        "tilts_in_order_deg": (16.0, 15.0, 17.0),
        "mid_height_cm": 0.0,
        "mu_share_upper": 0.5,
        "uniformity_half_length_cm": 80.0,
        "uniformity_half_width_cm": 30.0,
        "depth_dose": composite_depth_dose(energy_at_source_mev=6.0, pmma_cm=1.0),
        **changes,
    }
    return commissioning_plan(**given)


USUAL = plan()


def test_sweep_starts_at_the_best_and_goes_outward() -> None:
    """The predicted best comes first, then its neighbours, the smaller before the larger."""
    assert tilts_to_measure(best_tilt_deg=15.9, band_half_width_deg=2, step_deg=1) == (16, 15, 17, 14, 18)
    assert tilts_to_measure(best_tilt_deg=15.5, band_half_width_deg=1, step_deg=0.5) == (15.5, 15, 16, 14.5, 16.5)


def test_sweep_between_two_tilts_starts_at_the_smaller() -> None:
    """Half way between two tilts the smaller is the first."""
    assert tilts_to_measure(best_tilt_deg=15.5, band_half_width_deg=1, step_deg=1)[0] == 15


def test_sweep_stays_within_the_model() -> None:
    """Tilts of zero or above 25 degrees are not asked for."""
    assert max(tilts_to_measure(best_tilt_deg=24, band_half_width_deg=3, step_deg=1)) == 25
    assert min(tilts_to_measure(best_tilt_deg=1, band_half_width_deg=3, step_deg=1)) == 1
    with pytest.raises(ValueError, match="must be positive"):
        tilts_to_measure(best_tilt_deg=16, band_half_width_deg=0, step_deg=1)


def test_expected_readings_are_the_predicted_field() -> None:
    """Each expected reading is what the model predicts there."""
    for row in list(USUAL.angle_sweep.records())[::7]:
        dose = dual_field_doses(
            setup=common_setup(),
            plane_distance_cm=400.0,
            tilt_toward_head_deg=float(row["tilt_deg"] or 0),
            tilt_toward_feet_deg=float(row["tilt_deg"] or 0),
            mid_height_cm=0.0,
            mu_share_upper=0.5,
            heights_cm=[float(row["height_cm"] or 0)],
            across_cm=[0.0],
        )
        assert row["expected"] == pytest.approx(dose[0, 0])


def test_profiles_go_beyond_their_limits() -> None:
    """Positions reach 20 cm beyond the limits, so that a shifted centre shows."""
    assert max(USUAL.single_field.column("height_cm")) == 100  # type: ignore[type-var]
    assert max(USUAL.across.column("across_cm")) == 50  # type: ignore[type-var]


def test_geometry_and_single_field_come_before_the_sweep_and_every_step_says_how_to_go_on() -> None:
    """The foils are fitted before angles are tried, and each step has its condition."""
    names = list(USUAL.steps.column("name"))
    assert names[:4] == ["geometry", "single field", "angle sweep", "across"]
    assert names.index("output") < names.index("multiple-field factor")
    assert all(USUAL.steps.column("then"))


def test_depths_without_a_prediction_are_blank() -> None:
    """Only 4, 10 and 20 mm have expectations, and none has one outside the table."""
    expected = dict(zip(USUAL.depth_dose.column("depth_mm"), USUAL.depth_dose.column("expected_percent"), strict=True))
    assert (expected[4.0], expected[10.0], expected[20.0], expected[6.0]) == (pytest.approx(71), pytest.approx(21), pytest.approx(0), None)
    assert set(plan(depth_dose=None).depth_dose.column("expected_percent")) == {None}


def test_sweep_needs_a_tilt() -> None:
    """A sweep of no angle is impossible."""
    with pytest.raises(ValueError, match="at least one tilt"):
        plan(tilts_in_order_deg=())
