"""How sure a predicted field is, and which measurement would help most."""

from functools import lru_cache

import numpy as np

from readiness.assessment.definition import Definition
from readiness.assessment.values.beam_energy import ReferenceRanges
from readiness.assessment.values.beam_field import LIMITS, PREDICTION, upper_share
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.foil_spread_fit import FoilSpreadFit
from readiness.calculations.predicted_plane import PredictedPlane
from readiness.calculations.prediction_uncertainty import (
    BAND_COVERAGE,
    PredictionUncertainty,
    prediction_uncertainty,
)
from readiness.quantities import Scalar, Table

HALF_MM_CM = 0.05


@lru_cache(maxsize=32)
def uncertainty_of_arrangement(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    tilt_deg: float,
    mu_share_upper: float | None,
    half_length_cm: float,
    half_width_cm: float,
    metric: str,
    vertical_limit_percent: float,
    horizontal_limit_percent: float,
    foil_spread_fit: FoilSpreadFit | None,
    reference_ranges: ReferenceRanges | None,
    unfitted_sd_ratio: float,
    energy_sd_mev: float,
    distance_sd_cm: float,
    tilt_sd_deg: float,
) -> PredictionUncertainty:
    """Return the uncertainty of the predicted field; an unfitted foil spread has its usual range."""
    return prediction_uncertainty(
        setup=setup,
        plane_distance_cm=plane_distance_cm,
        tilt_deg=tilt_deg,
        mid_height_cm=0.0,
        mu_share_upper=upper_share(mu_share_upper),
        uniformity_half_length_cm=half_length_cm,
        uniformity_half_width_cm=half_width_cm,
        metric=metric,
        vertical_limit_percent=vertical_limit_percent,
        horizontal_limit_percent=horizontal_limit_percent,
        energy_sd_mev=energy_sd_mev,
        foil_spread_sd=unfitted_sd_ratio if foil_spread_fit is None else foil_spread_fit.foil_spread.sd,
        distance_sd_cm=distance_sd_cm,
        tilt_sd_deg=tilt_sd_deg,
        foil_spread_fitted=foil_spread_fit is not None,
        energy_measured=reference_ranges is not None,
    )


def profile_with_band(*, plane: PredictedPlane, uncertainty: PredictionUncertainty) -> Table:
    """Return the predicted vertical profile, with two standard deviations either way where they are known."""
    return _with_band("height_cm", plane.vertical_profile, uncertainty.profile_band)


def profile_across_with_band(*, plane: PredictedPlane, uncertainty: PredictionUncertainty) -> Table:
    """Return the predicted horizontal profile, with two standard deviations either way."""
    return _with_band("across_cm", plane.horizontal_profile, uncertainty.band_across)


def _with_band(place: str, profile: Table, band: Table) -> Table:
    """Return a profile with low and high; blank where the band was not worked out."""
    at = np.array(band.column(place), dtype=float)
    sds = np.array(band.column("sd"), dtype=float)
    rows: list[tuple[Scalar, ...]] = []
    for row in profile.records():
        where, dose = float(row[place] or 0), float(row["relative_dose"] or 0)
        sd = float(np.interp(where, at, sds))
        known = at[0] - HALF_MM_CM <= where <= at[-1] + HALF_MM_CM
        either_way = (dose - BAND_COVERAGE * sd, dose + BAND_COVERAGE * sd) if known else (None, None)
        rows.append((where, dose, *either_way))
    return Table((place, "predicted", "low", "high"), tuple(rows))


def sd_of_best_tilt(*, uncertainty: PredictionUncertainty) -> float:
    """Return the standard deviation of the predicted best tilt."""
    return uncertainty.best_tilt_deg.sd


def _of(name: str, meaning: str, part: str, of: str = "prediction_uncertainty") -> Definition:
    """Return a part of the record."""
    name, of = f"arrangement.{name}", f"arrangement.{of}"
    return Definition(name, meaning, of=of, part=part, source="own-fit", known="derived")


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.prediction_uncertainty",
        "Uncertainty of the predicted field and its sources.",
        by=uncertainty_of_arrangement,
        takes={
            **PREDICTION,
            **LIMITS,
            "tilt_deg": "arrangement.study_tilt_deg",
            "half_length_cm": "criterion.uniformity_half_length_cm",
            "half_width_cm": "criterion.uniformity_half_width_cm",
            "foil_spread_fit": "beam.foil_spread_fit?",
            "reference_ranges": "beam.reference_ranges?",
            "unfitted_sd_ratio": "criterion.unfitted_foil_spread_sd_ratio",
            "energy_sd_mev": "criterion.energy_sd_mev",
            "distance_sd_cm": "criterion.distance_sd_cm",
            "tilt_sd_deg": "criterion.tilt_sd_deg",
        },
        model=True,
        internal=True,
        source="own-fit",
        known="derived",
    ),
    Definition(
        "arrangement.best_tilt_sd_deg",
        "Standard deviation of the predicted best tilt.",
        by=sd_of_best_tilt,
        takes={"uncertainty": "arrangement.prediction_uncertainty"},
        source="own-fit",
        known="derived",
    ),
    _of(
        "likely_lowest_tilt_deg",
        "Lower end of the band in which the best tilt is expected to be found.",
        "lowest_tilt_of_band_deg",
    ),
    _of(
        "likely_highest_tilt_deg",
        "Upper end of the band in which the best tilt is expected to be found.",
        "highest_tilt_of_band_deg",
    ),
    _of(
        "expected_vertical_percent",
        "Vertical uniformity to expect at the chosen tilt, with its uncertainty.",
        "vertical_percent",
    ),
    _of(
        "expected_horizontal_percent",
        "Horizontal uniformity to expect, with its uncertainty.",
        "horizontal_percent",
    ),
    _of(
        "passing_probability_ratio",
        "Probability that both profiles keep their limits; given only once the foil spread is fitted.",
        "probability_of_passing",
    ),
    _of(
        "uncertainty_contributions",
        "What one standard deviation of each input changes, and the measurement that would reduce it.",
        "contributions",
    ),
    _of(
        "helpful_measurement",
        "Measurement that would make the prediction surer than any other.",
        "measurement_that_helps_most",
    ),
    Definition(
        "arrangement.profile_height",
        "Predicted vertical profile of the dual field; low and high lie two standard deviations away.",
        by=profile_with_band,
        takes={
            "plane": "arrangement.predicted_plane",
            "uncertainty": "arrangement.prediction_uncertainty",
        },
        source="own-fit",
        known="fit",
    ),
    Definition(
        "arrangement.profile_width",
        "Predicted horizontal profile of the dual field; low and high lie two standard deviations away.",
        by=profile_across_with_band,
        takes={
            "plane": "arrangement.predicted_plane",
            "uncertainty": "arrangement.prediction_uncertainty",
        },
        source="own-fit",
        known="fit",
    ),
    _of(
        "plane_map",
        "Predicted dose of the dual field over the rectangle of the plane.",
        "map",
        of="predicted_plane",
    ),
)
