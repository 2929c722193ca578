"""The planned dual field."""

from typing import Any

import pytest
from beam_setups import LENGTHS, common_setup

from readiness.calculations.predicted_plane import PredictedPlane, predicted_plane


def found(**changes: Any) -> PredictedPlane:
    """Return the planned field at 400 cm and 16 degrees for a patient of 175 cm."""
    given: dict[str, Any] = {
        "setup": common_setup(),
        "plane_distance_cm": 400.0,
        "tilt_toward_head_deg": 16.0,
        "tilt_toward_feet_deg": 16.0,
        "mid_height_cm": 0.0,
        "mu_share_upper": 0.5,
        "patient_height_cm": 175.0,
        **LENGTHS,
        **changes,
    }
    return predicted_plane(**given)


USUAL = found()


def test_profiles_are_one_in_the_middle_and_reach_the_raised_hands() -> None:
    """The vertical profile is listed every 5 cm out to the hands, the horizontal one over the width of the field."""
    vertical = {row["height_cm"]: row["relative_dose"] for row in USUAL.vertical_profile.records()}
    assert vertical[0.0] == pytest.approx(1)
    assert max(vertical) >= 0.75 * 175
    assert sorted(vertical)[1] - sorted(vertical)[0] == pytest.approx(5)
    across = USUAL.horizontal_profile.column("across_cm")
    assert (across[0], across[-1]) == (-40, 40)


def test_map_covers_the_rectangle() -> None:
    """The map reaches from -100 to 100 cm and from -40 to 40 cm."""
    rows = list(USUAL.map.records())
    assert {row["height_cm"] for row in rows} >= {-100.0, 0.0, 100.0}
    assert {row["across_cm"] for row in rows} >= {-40.0, 0.0, 40.0}


def test_raised_hands_get_less_than_the_soles() -> None:
    """Hands are farther from mid-height than soles."""
    assert USUAL.dose_at_hands < USUAL.dose_at_soles


def test_taller_patients_reach_farther_out_of_the_field() -> None:
    """At 16 degrees the dose at the ends falls with the patient's height."""
    tall = found(patient_height_cm=195.0)
    assert tall.dose_at_hands < USUAL.dose_at_hands
    assert tall.dose_at_soles < USUAL.dose_at_soles


def test_flat_map_has_its_largest_departure_in_the_corners() -> None:
    """The rectangle departs more than either profile."""
    assert USUAL.map_deviation_percent > USUAL.vertical_deviation_percent
    assert USUAL.map_half_range_percent > USUAL.horizontal_half_range_percent


def test_patient_needs_a_height() -> None:
    """A patient of no height is impossible."""
    with pytest.raises(ValueError, match="height must be positive"):
        found(patient_height_cm=0.0)
