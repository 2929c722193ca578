"""
The study of one arrangement: best angle and band of angles at every distance, and where both limits are kept.

Distances beyond the room's reach are studied too, so that a room that fails can be told by how much.
"""

from dataclasses import dataclass
from typing import Any

import numpy as np
from numpy.typing import NDArray

from readiness.calculations.angle_choice import (
    angle_at_distance,
    angles_by_distance,
    distance_for_both_limits_cm,
    remedy_for_uniformity,
    uniformity_over_distance_and_tilt,
)
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.tilt_study import tilt_study
from readiness.errors import OutsideValidity
from readiness.quantities import Table

Array = NDArray[np.float64]

TILTS_DEG = np.linspace(5.0, 24.75, 80)
DISTANCE_STEP_CM, HEIGHT_STEP_CM, ACROSS_STEP_CM = 5.0, 2.5, 5.0  # profiles are smooth over tens of cm
LISTED = 2  # every second distance and tilt stands in the table over both
NEAREST_CM, FARTHEST_CM = 250.0, 600.0  # of any study; the model was compared at 300 to 500


@dataclass(frozen=True)
class ArrangementStudy:
    """
    What an arrangement allows.

    ``best_tilt_deg`` to ``horizontal_within`` hold at the chosen plane distance; the band is None where not
    even the best tilt keeps the vertical limit. ``recommended_distance_cm`` is the nearest distance that the
    room reaches and where both limits are kept, or the farthest that it reaches. ``remedy`` says in words
    what would have to change, empty if nothing. ``by_distance`` and ``by_distance_and_tilt`` are the tables
    behind it.
    """

    best_tilt_deg: float
    lowest_passing_tilt_deg: float | None
    highest_passing_tilt_deg: float | None
    vertical_percent: float
    horizontal_percent: float
    map_half_range_percent: float
    vertical_within: bool
    horizontal_within: bool
    recommended_distance_cm: float
    tilt_at_recommended_distance_deg: float
    distance_for_both_limits_cm: float | None
    remedy: str
    by_distance: Table
    by_distance_and_tilt: Table


def arrangement_study(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    nearest_reachable_cm: float,
    farthest_reachable_cm: float,
    mid_height_cm: float,
    mu_share_upper: float,
    uniformity_half_length_cm: float,
    uniformity_half_width_cm: float,
    field_length_cm: float,
    field_width_cm: float,
    metric: str,
    vertical_limit_percent: float,
    horizontal_limit_percent: float,
) -> ArrangementStudy:
    """
    Return the best angle and its band at every distance, the feasible region, and what would have to change.

    Args:
        setup: The beam and the room, from field_setup.
        plane_distance_cm: Chosen distance from the nominal source to the plane. [cm]
        nearest_reachable_cm: Nearest plane distance that the room allows on this side. [cm]
        farthest_reachable_cm: Farthest plane distance that the room allows on this side. [cm]
        mid_height_cm: Of the patient's mid-height above the isocentre; negative below it. [cm]
        mu_share_upper: Part of the pair's MU that the field aimed at the head gets. [1]
        uniformity_half_length_cm: Half of the length over which the vertical profile is judged. [cm]
        uniformity_half_width_cm: Half of the width over which the horizontal profile is judged. [cm]
        field_length_cm: Height of the rectangle. [cm]
        field_width_cm: Width of the rectangle. [cm]
        metric: half-range, deviation-from-mid-height or stricter.
        vertical_limit_percent: Largest departure allowed along the height. [%]
        horizontal_limit_percent: Largest departure allowed across. [%]

    Returns:
        Angles at the chosen distance, recommended distance, remedy, and the tables behind them.

    Raises:
        ValueError: If a number is impossible or the reach is empty.
        OutsideValidity: If the chosen distance lies outside 250 to 600 cm, its best tilt beyond those
            studied, the energy outside the model, or the degrader stops the beam.

    Valid for: 4 to 12 MeV and 300 to 500 cm; the best angle agrees within 0.5 degrees with own-monte-carlo,
        which is not a machine: see prediction_uncertainty for the band.
    Assumes: equal tilts; a gap that is kept when the plane moves.
    Source: own-fit (fit) to own-monte-carlo on the moments of eyges-1948.
    """
    if nearest_reachable_cm > farthest_reachable_cm:
        raise ValueError("the nearest reachable distance lies beyond the farthest")
    study = tilt_study(
        setup=setup,
        distances_cm=_distances(plane_distance_cm, nearest_reachable_cm, farthest_reachable_cm),
        tilts_deg=TILTS_DEG,
        mid_height_cm=mid_height_cm,
        mu_share_upper=mu_share_upper,
        uniformity_half_length_cm=uniformity_half_length_cm,
        uniformity_half_width_cm=uniformity_half_width_cm,
        field_length_cm=field_length_cm,
        field_width_cm=field_width_cm,
        height_step_cm=HEIGHT_STEP_CM,
        across_step_cm=ACROSS_STEP_CM,
    )

    limits: dict[str, Any] = {
        "study": study,
        "metric": metric,
        "vertical_limit_percent": vertical_limit_percent,
        "horizontal_limit_percent": horizontal_limit_percent,
    }
    here = angle_at_distance(distance_cm=plane_distance_cm, **limits)
    angles = angles_by_distance(**limits)
    best_cm = _recommended(angles, nearest_reachable_cm, farthest_reachable_cm)
    remedy = remedy_for_uniformity(
        angles=angles, plane_distance_cm=plane_distance_cm, farthest_reachable_cm=farthest_reachable_cm
    )
    return ArrangementStudy(
        best_tilt_deg=here.best_tilt_deg,
        lowest_passing_tilt_deg=here.lowest_passing_tilt_deg,
        highest_passing_tilt_deg=here.highest_passing_tilt_deg,
        vertical_percent=here.vertical_percent,
        horizontal_percent=here.horizontal_percent,
        map_half_range_percent=here.map_half_range_percent,
        vertical_within=here.vertical_within,
        horizontal_within=here.horizontal_within,
        recommended_distance_cm=best_cm,
        tilt_at_recommended_distance_deg=angle_at_distance(distance_cm=best_cm, **limits).best_tilt_deg,
        distance_for_both_limits_cm=distance_for_both_limits_cm(angles=angles),
        remedy=remedy,
        by_distance=angles,
        by_distance_and_tilt=uniformity_over_distance_and_tilt(
            every_distance=LISTED, every_tilt=LISTED, **limits
        ),
    )


def _distances(chosen: float, nearest: float, farthest: float) -> Array:
    """Return the distances to study: even steps, with the chosen one and both ends of the reach."""
    if not NEAREST_CM <= chosen <= FARTHEST_CM:
        raise OutsideValidity(
            f"a study covers plane distances of {NEAREST_CM:g} to {FARTHEST_CM:g} cm, not {chosen:g}"
        )
    steps = np.arange(NEAREST_CM, FARTHEST_CM + 1e-9, DISTANCE_STEP_CM)
    ends = [end for end in (chosen, nearest, farthest) if NEAREST_CM <= end <= FARTHEST_CM]
    return np.unique(np.round(np.concatenate([steps, ends]), 6))


def _recommended(angles: Table, nearest: float, farthest: float) -> float:
    """Return the nearest reachable distance where both limits are kept, or the farthest reachable one."""
    reachable = [
        row
        for row in angles.records()
        if nearest - 1e-6 <= float(row["distance_cm"] or 0) <= farthest + 1e-6
        and row["best_tilt_deg"] is not None
    ]
    if not reachable:
        raise OutsideValidity("no distance that the room allows lies within the study")
    keeping = [row for row in reachable if row["vertical_within"] and row["horizontal_within"]]
    chosen = keeping[0] if keeping else reachable[-1]
    return float(chosen["distance_cm"] or 0)
