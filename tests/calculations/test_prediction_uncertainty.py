"""How sure a prediction is."""

from typing import Any

import numpy as np
import pytest
from beam_setups import LIMITS, common_setup

from readiness.calculations.normal_samples import SAMPLES, normal_samples
from readiness.calculations.prediction_uncertainty import PredictionUncertainty, prediction_uncertainty
from readiness.errors import OutsideValidity


def found(**changes: Any) -> PredictionUncertainty:
    """Return the uncertainty of the common set-up at 400 cm and 16 degrees."""
    given: dict[str, Any] = {
        "setup": common_setup(),
        "plane_distance_cm": 400.0,
        "tilt_deg": 16.0,
        "mid_height_cm": 0.0,
        "mu_share_upper": 0.5,
        "uniformity_half_length_cm": 80.0,
        "uniformity_half_width_cm": 30.0,
        "metric": "half-range",
        "energy_sd_mev": 0.3,
        "foil_spread_sd": 0.03,
        "distance_sd_cm": 1.0,
        "tilt_sd_deg": 0.2,
        "foil_spread_fitted": False,
        "energy_measured": False,
        **LIMITS,
    }
    return prediction_uncertainty(**{**given, **changes})


USUAL = found()


def test_unfitted_foils_give_two_degrees_and_no_probability() -> None:
    """Until the foil spread is fitted the band is at least two degrees either way, and nothing is likely."""
    assert USUAL.probability_of_passing is None
    assert USUAL.best_tilt_deg.value - USUAL.lowest_tilt_of_band_deg >= 2
    assert USUAL.highest_tilt_of_band_deg - USUAL.best_tilt_deg.value >= 2


def test_unfitted_foils_give_two_degrees_even_if_everything_else_is_known() -> None:
    """Small standard deviations do not narrow the band of an unfitted beam."""
    sure = found(energy_sd_mev=0.0, foil_spread_sd=0.0, distance_sd_cm=0.0, tilt_sd_deg=0.0)
    assert sure.highest_tilt_of_band_deg - sure.lowest_tilt_of_band_deg == pytest.approx(4)
    assert [row["input"] for row in sure.contributions.records()] == ["scatter model"]


def test_fitted_foils_narrow_the_band_and_allow_a_probability() -> None:
    """With fitted foils the band follows from the inputs, and there is a probability that is never certain."""
    fitted = found(foil_spread_fitted=True, foil_spread_sd=0.005)
    assert fitted.highest_tilt_of_band_deg - fitted.lowest_tilt_of_band_deg < 2
    assert fitted.probability_of_passing is not None
    assert 0 < fitted.probability_of_passing < 1


def test_probability_follows_the_limits() -> None:
    """Wide limits are surely kept, narrow ones hardly ever."""
    fitted = {"foil_spread_fitted": True, "foil_spread_sd": 0.005}
    wide = found(vertical_limit_percent=15.0, horizontal_limit_percent=15.0, **fitted).probability_of_passing
    narrow = found(vertical_limit_percent=0.5, horizontal_limit_percent=15.0, **fitted).probability_of_passing
    assert wide == 1 - 1 / SAMPLES
    assert narrow == pytest.approx(0, abs=0.1)


def test_half_a_degree_belongs_to_a_third_of_an_mev() -> None:
    """0.3 MeV move the best angle by 0.2 to 0.6 degrees, 0.5 MeV by 0.5 to 0.9."""
    changes = dict(zip(USUAL.contributions.column("input"), USUAL.contributions.column("best_tilt_change_deg"), strict=True))
    assert 0.2 <= changes["energy"] <= 0.6
    more = found(energy_sd_mev=0.5).contributions
    changes = dict(zip(more.column("input"), more.column("best_tilt_change_deg"), strict=True))
    assert 0.45 <= changes["energy"] <= 0.9


def test_measurement_that_helps_most_follows_the_largest_contribution() -> None:
    """Uncertain foils ask for a single-field profile, a loose gantry for an inclinometer."""
    assert "single-field profile" in USUAL.measurement_that_helps_most
    loose = found(foil_spread_sd=0.001, energy_sd_mev=0.01, tilt_sd_deg=1.5)
    assert "inclinometer" in loose.measurement_that_helps_most
    slow = found(foil_spread_sd=0.001, energy_sd_mev=0.5, tilt_sd_deg=0.1)
    assert "depth dose" in slow.measurement_that_helps_most


def test_depth_dose_is_not_asked_for_twice() -> None:
    """Once it is measured, profiles tell which energy counts; the numbers stay as they are."""
    slow = {"foil_spread_sd": 0.001, "energy_sd_mev": 0.5, "tilt_sd_deg": 0.1}
    before, after = found(**slow), found(**slow, energy_measured=True)
    assert after.measurement_that_helps_most == "dual-field profiles at several angles"
    assert after.best_tilt_deg == before.best_tilt_deg


def test_larger_input_uncertainty_gives_a_wider_band_everywhere() -> None:
    """Twice the standard deviations widen profile and best angle."""
    wider = found(energy_sd_mev=0.6, foil_spread_sd=0.06)
    assert wider.best_tilt_deg.sd > USUAL.best_tilt_deg.sd
    assert wider.profile_band.column("sd")[0] > USUAL.profile_band.column("sd")[0]  # type: ignore[operator]


def test_profile_is_sure_in_the_middle_where_it_is_normalised() -> None:
    """The profile has no uncertainty at mid-height and the most at its ends."""
    sds = [float(entry or 0) for entry in USUAL.profile_band.column("sd")]
    assert sds[len(sds) // 2] == pytest.approx(0, abs=1e-12)
    assert max(sds) > 0.01


def test_best_angle_agrees_with_the_study() -> None:
    """The best angle is the one of the records, to a twentieth of a degree."""
    assert USUAL.best_tilt_deg.value == pytest.approx(15.85, abs=0.051)


def test_negative_standard_deviations_are_impossible() -> None:
    """A standard deviation below zero is refused."""
    with pytest.raises(ValueError, match="cannot be negative"):
        found(tilt_sd_deg=-0.1)


def test_input_moved_out_of_the_model_is_refused() -> None:
    """3.2 MeV less 0.3 leave the model, and that is said."""
    with pytest.raises(OutsideValidity, match="3 to 13 MeV"):
        found(setup=common_setup(energy_at_source_mev=3.2).without_degrader())


def test_inputs_are_not_moved_below_their_meaning() -> None:
    """Two horizontal fields, and foils narrower than their own uncertainty, still have an uncertainty."""
    assert found(tilt_deg=0.0).vertical_percent.sd > 0
    assert found(setup=common_setup(foil_spread=0.04), foil_spread_sd=0.05).best_tilt_deg.sd > 0


def test_samples_are_normal_and_the_same_every_time() -> None:
    """Samples have mean 0, standard deviation 1, hardly any correlation, and no chance in them."""
    samples = normal_samples(inputs=5)
    assert samples.shape == (SAMPLES, 5)
    assert samples.mean(axis=0) == pytest.approx(0, abs=1e-12)
    assert samples.std(axis=0) == pytest.approx(1, abs=0.03)
    assert np.abs(np.corrcoef(samples.T) - np.eye(5)).max() < 0.1
    assert (samples == normal_samples(inputs=5)).all()
    with pytest.raises(ValueError, match="at least one input"):
        normal_samples(inputs=0)


def test_the_profile_across_has_a_band_of_its_own() -> None:
    """Sure in the middle, least sure at the ends, wider with more uncertain inputs; as wide as it is judged."""
    places, sds = (np.array(USUAL.band_across.column(name), dtype=float) for name in ("across_cm", "sd"))
    assert (-30.0, 30.0) == (places[0], places[-1])
    assert sds[len(sds) // 2] == pytest.approx(0, abs=1e-12)
    assert sds[0] == max(sds) > 0.001
    wider = np.array(found(energy_sd_mev=0.6, foil_spread_sd=0.06).band_across.column("sd"), dtype=float)
    assert wider[0] > sds[0]
