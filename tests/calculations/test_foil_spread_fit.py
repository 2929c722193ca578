"""The foil spread fitted to a single-field profile, against a known spread and an independent fit."""

from pathlib import Path

import lmfit
import numpy as np
import pytest
import yaml
from scipy.special import erf

from readiness.calculations.field_setup import FieldSetup, field_setup
from readiness.calculations.foil_spread_fit import FoilSpreadFit, fit_foil_spread, foil_spread_of_profile
from readiness.calculations.tilted_field import tilted_fields
from readiness.errors import OutsideValidity

PILOT = yaml.safe_load((Path(__file__).parents[1] / "data" / "pilot_readings.yaml").read_text(encoding="utf-8"))
HEIGHTS = np.array(PILOT["single"]["heights_cm"], dtype=float)
DISTANCE_CM, HALF_CM, BLUR_CM = 400.0, 80.0, 52.0


def closed_form(places: np.ndarray, spread: float) -> np.ndarray:
    """Return a Gaussian foil cut at the collimator and blurred, relative to its centre."""
    wide = spread * DISTANCE_CM
    total = np.hypot(wide, BLUR_CM)
    width = np.sqrt(2) * wide * BLUR_CM / total

    def at(y: np.ndarray) -> np.ndarray:
        middle = y * (wide / total) ** 2
        return np.exp(-(y**2) / 2 / total**2) * (erf((HALF_CM - middle) / width) + erf((HALF_CM + middle) / width))

    return np.asarray(at(places) / at(np.zeros(1)))


def fitted(places: np.ndarray, readings: np.ndarray, normalisation: str = "none") -> FoilSpreadFit:
    """Return the fit of the closed form."""
    return fit_foil_spread(positions_cm=places, readings=readings, normalisation=normalisation, model=closed_form)


def noisy(spread: float, shift: float, seed: int, sd: float = 0.008) -> np.ndarray:
    """Return readings with scatter, normalised anyhow."""
    scatter = np.random.default_rng(seed).normal(0, sd, len(HEIGHTS))
    return 0.97 * (closed_form(HEIGHTS - shift, spread) + scatter)


def setup() -> FieldSetup:
    """Return the beam and room of the pilot profile."""
    return field_setup(
        energy_at_source_mev=6.2,
        foil_spread=0.2,
        opening_cm=40.0,
        collimator_deg=0.0,
        degrader_material="pmma",
        degrader_thickness_cm=1.0,
        degrader_gap_cm=45.0,
        pressure_kpa=98.5,
        temperature_celsius=20.0,
        source_axis_distance_cm=100.0,
    )


@pytest.mark.parametrize(("spread", "shift"), [(0.15, 0.0), (0.20, 3.0), (0.25, -5.0)])
def test_known_spread_and_shift_are_found_without_scatter(spread: float, shift: float) -> None:
    """Without scatter the fit gives back the spread and shift that made the profile."""
    result = fitted(HEIGHTS, 0.8 * closed_form(HEIGHTS - shift, spread))
    assert (result.foil_spread.value, result.centre_shift_cm.value) == pytest.approx((spread, shift), abs=1e-4)
    assert (result.foil_spread.sd, result.scale) == pytest.approx((0, 0.8), abs=1e-4)


@pytest.mark.parametrize("seed", range(4))
def test_independent_fit_gives_the_same_numbers_and_standard_deviations(seed: int) -> None:
    """A general-purpose fitting library agrees on values within 0.1 % and on standard deviations within 2 %."""
    readings = noisy(0.2, 3.0, seed)
    model = lmfit.Model(lambda y, scale, shift, spread: scale * closed_form(y - shift, spread))
    theirs = model.fit(readings, model.make_params(scale=1.0, shift=0.0, spread=0.2), y=HEIGHTS).params
    ours = fitted(HEIGHTS, readings)
    assert theirs["spread"].value == pytest.approx(ours.foil_spread.value, rel=1e-3)
    assert theirs["shift"].value == pytest.approx(ours.centre_shift_cm.value, abs=0.01)
    assert theirs["spread"].stderr == pytest.approx(ours.foil_spread.sd, rel=0.02)
    assert theirs["shift"].stderr == pytest.approx(ours.centre_shift_cm.sd, rel=0.02)


def test_standard_deviation_covers_the_truth() -> None:
    """Over many noisy profiles the truth lies within two standard deviations nine times in ten or more."""
    fits = [fitted(HEIGHTS, noisy(0.2, 3.0, seed)) for seed in range(60)]
    within = sum(abs(fit.foil_spread.value - 0.2) <= 2 * fit.foil_spread.sd for fit in fits)
    assert within >= 0.85 * len(fits)


def test_pilot_profile_gives_the_spread_it_was_made_with() -> None:
    """The pilot profile was made with a spread of 0.20; with 6.2 MeV at the source the model finds it."""
    result = foil_spread_of_profile(
        positions_cm=HEIGHTS,
        readings=PILOT["single"]["readings"],
        normalisation="beam-axis",
        direction="vertical",
        setup=setup(),
        plane_distance_cm=400.0,
        tilt_deg=0.0,
    )
    assert result.foil_spread.value == pytest.approx(0.20, abs=0.02)
    assert abs(result.centre_shift_cm.value) < 2
    assert result.residual_percent == pytest.approx(0.8, abs=0.3)
    assert result.remarks == ()


@pytest.mark.parametrize("direction", ["vertical", "horizontal"])
def test_model_of_a_set_up_gives_back_its_own_spread(direction: str) -> None:
    """A profile predicted with a spread of 0.17 is fitted with 0.17 in either direction."""
    made = setup().but(foil_spread=0.17)
    exact = foil_spread_of_profile(
        positions_cm=HEIGHTS,
        readings=_predicted(made, direction),
        normalisation="none",
        direction=direction,
        setup=setup(),
        plane_distance_cm=400.0,
        tilt_deg=0.0,
    )
    assert exact.foil_spread.value == pytest.approx(0.17, abs=1e-4)


def _predicted(made: FieldSetup, direction: str) -> np.ndarray:
    """Return the predicted profile of a horizontal field."""
    along = (HEIGHTS, np.zeros(1)) if direction == "vertical" else (np.zeros(1), HEIGHTS)
    return tilted_fields(made, np.zeros(1), 400.0, *along).ravel()


def test_direction_has_two_words() -> None:
    """A profile is vertical or horizontal."""
    with pytest.raises(ValueError, match="vertical or horizontal, not 'diagonal'"):
        foil_spread_of_profile(
            positions_cm=HEIGHTS,
            readings=HEIGHTS,
            normalisation="none",
            direction="diagonal",
            setup=setup(),
            plane_distance_cm=400.0,
            tilt_deg=0.0,
        )


def test_wider_profile_has_a_larger_spread() -> None:
    """The spread found rises with the width of the profile."""
    narrow, wide = (fitted(HEIGHTS, closed_form(HEIGHTS * factor, 0.2)).foil_spread.value for factor in (1.02, 0.98))
    assert wide > narrow


@pytest.mark.parametrize(
    ("places", "readings", "suspicion"),
    [
        (HEIGHTS * 10, closed_form(HEIGHTS, 0.2), "are they millimetres under a column in cm"),
        (HEIGHTS / 2.54, closed_form(HEIGHTS, 0.2), "are the positions inches under a column in cm"),
        (HEIGHTS / 10, closed_form(HEIGHTS, 0.2), "are the positions decimetres under a column in cm"),
        (closed_form(HEIGHTS, 0.2), HEIGHTS, "are the columns swapped"),
        (HEIGHTS, closed_form(HEIGHTS, 0.2) - 0.3, "readings are negative"),
        (HEIGHTS[:4], closed_form(HEIGHTS, 0.2)[:4], "cannot be fitted to 4 readings"),
        (HEIGHTS, np.exp(-((HEIGHTS / 45) ** 2) / 2), "no foil spread between 0.02 and 0.6 fits"),
    ],
    ids=["mm", "inches", "dm", "swapped", "negative", "few", "narrow"],
)
def test_unusable_profile_is_refused_with_the_suspicion(
    places: np.ndarray, readings: np.ndarray, suspicion: str
) -> None:
    """A profile that cannot be fitted is refused in words that name what probably happened."""
    with pytest.raises(OutsideValidity, match=suspicion):
        fitted(places, readings)


@pytest.mark.parametrize(
    ("places", "readings", "remark"),
    [
        (HEIGHTS[::2], closed_form(HEIGHTS[::2], 0.2), "Only 7 readings"),
        (HEIGHTS, closed_form(HEIGHTS - 6, 0.2), "centred at 6 cm"),
        (HEIGHTS[2:-2], closed_form(HEIGHTS[2:-2], 0.2), "has not fallen to half on both sides"),
        (HEIGHTS, np.minimum(closed_form(HEIGHTS, 0.2), 0.98), "saturated"),
        (HEIGHTS, closed_form(HEIGHTS, 0.2) + 0.03 * (-1) ** np.arange(13), "depart from the fitted curve by"),
        (HEIGHTS[4:-4], noisy(0.2, 0, 1)[4:-4], "The spread is known only within"),
    ],
    ids=["few", "shifted", "short", "plateau", "misfit", "uncertain"],
)
def test_doubtful_profile_is_fitted_and_that_is_said(places: np.ndarray, readings: np.ndarray, remark: str) -> None:
    """A doubtful profile is fitted, and the doubt stands beside the numbers."""
    remarks = fitted(places, readings).remarks
    assert any(remark in said for said in remarks), remarks


def test_a_refused_fit_still_names_a_saturated_detector() -> None:
    """A profile that is flat where the detector saturates is refused with that suspicion."""
    places = np.arange(-110.0, 111.0, 10.0)
    readings = np.minimum(np.exp(-(places**2) / 2 / 68.0**2), 0.7)
    with pytest.raises(OutsideValidity, match="saturated"):
        fit_foil_spread(
            positions_cm=places, readings=readings, normalisation="none",
            model=lambda at, spread: np.exp(-(at**2) / 2 / (110 * spread) ** 2),
        )  # fmt: skip
