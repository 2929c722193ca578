"""The field of each arrangement as predicted: best tilt, dual field, what the ends of the patient get."""

from collections.abc import Callable
from functools import lru_cache

import numpy as np

from readiness.assessment.definition import Definition
from readiness.calculations.angle_choice import AngleAtDistance, angle_at_distance
from readiness.calculations.beam_study import ACROSS_STEP_CM, HEIGHT_STEP_CM, TILTS_DEG
from readiness.calculations.field_at_plane import dual_field_doses
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.predicted_plane import PredictedPlane, predicted_plane
from readiness.calculations.tilt_study import tilt_study
from readiness.calculations.uniformity import COVERAGE_PER_HEIGHT, Coverage, coverage_of_profile

EVEN_SHARE = 0.5
COVERAGE_STEP_CM = 2.5


def upper_share(mu_share_upper: float | None) -> float:
    """Return the part of the MU that the field aimed at the head gets: half where no plan says otherwise."""
    return EVEN_SHARE if mu_share_upper is None else mu_share_upper


@lru_cache(maxsize=256)
def best_tilt_at_distance(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    mu_share_upper: float | None,
    metric: str,
    vertical_limit_percent: float,
    horizontal_limit_percent: float,
    half_length_cm: float,
    half_width_cm: float,
    field_length_cm: float,
    field_width_cm: float,
) -> AngleAtDistance:
    """Return the best tilt at one distance and the band of tilts that keep the vertical limit."""
    study = tilt_study(
        setup=setup,
        distances_cm=[plane_distance_cm],
        tilts_deg=TILTS_DEG,
        mid_height_cm=0.0,
        mu_share_upper=upper_share(mu_share_upper),
        uniformity_half_length_cm=half_length_cm,
        uniformity_half_width_cm=half_width_cm,
        field_length_cm=field_length_cm,
        field_width_cm=field_width_cm,
        height_step_cm=HEIGHT_STEP_CM,
        across_step_cm=ACROSS_STEP_CM,
    )
    return angle_at_distance(
        study=study,
        distance_cm=plane_distance_cm,
        metric=metric,
        vertical_limit_percent=vertical_limit_percent,
        horizontal_limit_percent=horizontal_limit_percent,
    )


def chosen_tilt(*, tilt_deg: float) -> float:
    """Return the chosen tilt."""
    return tilt_deg


@lru_cache(maxsize=256)
def plane_of_arrangement(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    tilt_deg: float,
    mu_share_upper: float | None,
    patient_height_cm: float | None,
    half_length_cm: float,
    half_width_cm: float,
    field_length_cm: float,
    field_width_cm: float,
) -> PredictedPlane:
    """Return the predicted dual field about the isocentre's height, far enough for the tallest patient."""
    return predicted_plane(
        setup=setup,
        plane_distance_cm=plane_distance_cm,
        tilt_toward_head_deg=tilt_deg,
        tilt_toward_feet_deg=tilt_deg,
        mid_height_cm=0.0,
        mu_share_upper=upper_share(mu_share_upper),
        patient_height_cm=patient_height_cm or field_length_cm / COVERAGE_PER_HEIGHT,
        uniformity_half_length_cm=half_length_cm,
        uniformity_half_width_cm=half_width_cm,
        field_length_cm=field_length_cm,
        field_width_cm=field_width_cm,
    )


@lru_cache(maxsize=256)
def coverage_of_patient(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    tilt_deg: float,
    mu_share_upper: float | None,
    patient_height_cm: float,
    stand_height_cm: float,
    isocentre_height_cm: float,
) -> Coverage:
    """Return what soles and raised hands of a patient on the stand get, relative to mid-height."""
    mid_height = stand_height_cm + patient_height_cm / 2 - isocentre_height_cm
    soles = -patient_height_cm / 2
    hands = COVERAGE_PER_HEIGHT * patient_height_cm + soles
    between = np.linspace(soles, hands, round((hands - soles) / COVERAGE_STEP_CM))
    heights = np.unique(np.concatenate([between, [0.0]]))
    doses = dual_field_doses(
        setup=setup,
        plane_distance_cm=plane_distance_cm,
        tilt_toward_head_deg=tilt_deg,
        tilt_toward_feet_deg=tilt_deg,
        mid_height_cm=mid_height,
        mu_share_upper=upper_share(mu_share_upper),
        heights_cm=heights,
        across_cm=[0.0],
    )
    return coverage_of_profile(positions_cm=heights, doses=doses[:, 0], soles_cm=soles, hands_cm=hands)


def in_percent(*, coverage: Coverage) -> float:
    """Return the lowest dose between soles and raised hands in per cent of mid-height."""
    return 100 * coverage.lowest


def soles_in_percent(*, coverage: Coverage) -> float:
    """Return the dose at the soles in per cent of mid-height."""
    return 100 * coverage.at_soles


def hands_in_percent(*, coverage: Coverage) -> float:
    """Return the dose at the raised hands in per cent of mid-height."""
    return 100 * coverage.at_hands


LENGTHS = {
    "half_length_cm": "criterion.uniformity_half_length_cm",
    "half_width_cm": "criterion.uniformity_half_width_cm",
    "field_length_cm": "criterion.field_length_cm",
    "field_width_cm": "criterion.field_width_cm",
}
LIMITS = {
    "metric": "program.uniformity_metric",
    "vertical_limit_percent": "criterion.vertical_uniformity_percent",
    "horizontal_limit_percent": "criterion.horizontal_uniformity_percent",
}
PREDICTION = {
    "setup": "arrangement.field_setup",
    "plane_distance_cm": "arrangement.study_distance_cm",
    "mu_share_upper": "plan.mu_share_upper?",
}


def _of(name: str, meaning: str, of: str, part: str) -> Definition:
    """Return a part of one of the predicted records."""
    name, of = f"arrangement.{name}", f"arrangement.{of}"
    return Definition(name, meaning, of=of, part=part, source="own-fit", known="fit")


def _percent(name: str, what: str, by: Callable[..., float]) -> Definition:
    """Return a dose of the tallest patient in per cent of the dose at mid-height."""
    return Definition(
        f"arrangement.{name}",
        f"{what} of the tallest patient on the stand, in per cent of mid-height, as predicted.",
        by=by,
        takes={"coverage": "arrangement.coverage"},
        source="own-fit",
        known="fit",
    )


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.tilt_here",
        "Best tilt at the plane and the band of tilts that keep the vertical limit, as predicted.",
        by=best_tilt_at_distance,
        takes={**PREDICTION, **LIMITS, **LENGTHS},
        model=True,
        internal=True,
        source="own-fit",
        known="fit",
    ),
    _of(
        "predicted_best_tilt_deg",
        "Tilt with the evenest vertical profile, as predicted.",
        "tilt_here",
        "best_tilt_deg",
    ),
    _of(
        "predicted_lowest_tilt_deg",
        "Smallest tilt whose vertical profile is predicted to keep its limit.",
        "tilt_here",
        "lowest_passing_tilt_deg",
    ),
    _of(
        "predicted_highest_tilt_deg",
        "Largest tilt whose vertical profile is predicted to keep its limit.",
        "tilt_here",
        "highest_passing_tilt_deg",
    ),
    Definition(
        "arrangement.study_tilt_deg",
        "Tilt for which the field is predicted: the chosen one, else the predicted best.",
        by=chosen_tilt,
        takes={"tilt_deg": "arrangement.tilt_deg"},
        otherwise="arrangement.predicted_best_tilt_deg",
    ),
    Definition(
        "arrangement.predicted_plane",
        "The dual field as predicted: profiles, map and evenness.",
        by=plane_of_arrangement,
        takes={
            **PREDICTION,
            **LENGTHS,
            "tilt_deg": "arrangement.study_tilt_deg",
            "patient_height_cm": "program.tallest_patient_cm?",
        },
        model=True,
        internal=True,
        source="own-fit",
        known="fit",
    ),
    Definition(
        "arrangement.coverage",
        "Dose that the ends of the tallest patient get, as predicted.",
        by=coverage_of_patient,
        takes={
            **PREDICTION,
            "tilt_deg": "arrangement.study_tilt_deg",
            "patient_height_cm": "program.tallest_patient_cm",
            "stand_height_cm": "stand.height_cm",
            "isocentre_height_cm": "room.isocentre_height_cm",
        },
        model=True,
        internal=True,
        source="own-fit",
        known="fit",
    ),
    _percent("lowest_dose_to_patient_percent", "Lowest dose between soles and raised hands", in_percent),
    _percent("dose_at_soles_percent", "Dose at the soles", soles_in_percent),
    _percent("dose_at_hands_percent", "Dose at the raised hands", hands_in_percent),
)
