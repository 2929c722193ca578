"""Predicted output of the pair."""

from typing import Any

import pytest
from beam_setups import common_setup

from readiness.calculations.pair_output import PredictedPairOutput, predicted_pair_output


def found(**changes: Any) -> PredictedPairOutput:
    """Return the predicted output."""
    given: dict[str, Any] = {
        "setup": common_setup(),
        "reference_output_cgy_per_mu": 1.0,
        "plane_distance_cm": 400.0,
        "tilt_toward_head_deg": 16.0,
        "tilt_toward_feet_deg": 16.0,
        "mid_height_cm": 0.0,
        "mu_share_upper": 0.5,
        **changes,
    }
    return predicted_pair_output(**given)


def test_output_is_proportional_to_the_reference_output() -> None:
    """Twice the reference output gives twice the output of the pair."""
    assert found(reference_output_cgy_per_mu=2.0).pair_output_cgy_per_mu == pytest.approx(2 * found().pair_output_cgy_per_mu)


def test_degrader_farther_and_steeper_take_output_away() -> None:
    """Output falls with degrader, distance and tilt."""
    usual = found()
    assert usual.pair_output_cgy_per_mu < usual.without_degrader_cgy_per_mu
    assert found(plane_distance_cm=420.0).pair_output_cgy_per_mu < usual.pair_output_cgy_per_mu
    assert found(tilt_toward_head_deg=18.0).pair_output_cgy_per_mu < usual.pair_output_cgy_per_mu
    assert usual.per_degree_percent < 0
    assert usual.per_2_cm_percent < 0


def test_without_air_tilt_and_degrader_a_flat_field_follows_the_inverse_square() -> None:
    """In a vacuum, level, with flat foils and no degrader, only the distance is left."""
    setup = common_setup(pressure_kpa=0.0, foil_spread=20.0).without_degrader()
    for distance in (300.0, 400.0, 500.0):
        level = found(setup=setup, tilt_toward_head_deg=0.0, tilt_toward_feet_deg=0.0, plane_distance_cm=distance)
        assert level.pair_output_cgy_per_mu == pytest.approx((100 / distance) ** 2, rel=1e-3)


def test_measured_output_of_the_sample_is_of_the_predicted_size() -> None:
    """0.0193 cGy per MU, as the invented department read, lies within the gross-error check."""
    setup = common_setup(energy_at_source_mev=6.3, degrader_gap_cm=45.0, pressure_kpa=98.5)
    predicted = found(setup=setup)
    assert abs(0.0193 - predicted.pair_output_cgy_per_mu) < predicted.sd_cgy_per_mu


@pytest.mark.parametrize(("changes", "words"), [({"reference_output_cgy_per_mu": 0.0}, "must be positive"), ({"mu_share_upper": 1.2}, "between 0 and 1")])
def test_impossible_outputs_are_refused(changes: dict[str, float], words: str) -> None:
    """A reference output of zero and a part above one are refused."""
    with pytest.raises(ValueError, match=words):
        found(**changes)
