"""The dual field as it is planned: profiles, map, evenness, and what the ends of the patient get."""

from dataclasses import dataclass
from typing import Any

import numpy as np

from readiness.calculations.field_at_plane import (
    ACROSS_STEP_CM,
    HEIGHT_STEP_CM,
    MAP_STEP_CM,
    dual_field_doses,
    even_grid,
    map_table,
    profile_table,
)
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.plane_uniformity import uniformity_of_plane
from readiness.calculations.uniformity import coverage_length_cm, coverage_of_profile
from readiness.quantities import Table

LISTED_STEP_CM = 5.0  # of the profiles in the tables


@dataclass(frozen=True)
class PredictedPlane:
    """
    The planned dual field, relative to mid-height in the middle.

    ``vertical_profile``: height_cm, relative_dose. ``horizontal_profile``: across_cm, relative_dose. ``map``:
    height_cm, across_cm, relative_dose. ``dose_at_soles`` and ``dose_at_hands`` are those of a patient of the
    stated height who stands with mid-height where it was said and arms raised.
    """

    vertical_half_range_percent: float
    vertical_deviation_percent: float
    horizontal_half_range_percent: float
    horizontal_deviation_percent: float
    map_half_range_percent: float
    map_deviation_percent: float
    dose_at_soles: float
    dose_at_hands: float
    vertical_profile: Table
    horizontal_profile: Table
    map: Table


def predicted_plane(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    tilt_toward_head_deg: float,
    tilt_toward_feet_deg: float,
    mid_height_cm: float,
    mu_share_upper: float,
    patient_height_cm: float,
    uniformity_half_length_cm: float,
    uniformity_half_width_cm: float,
    field_length_cm: float,
    field_width_cm: float,
) -> PredictedPlane:
    """
    Return the planned dual field with its evenness and what soles and raised hands get.

    Args:
        setup: The beam and the room, from field_setup.
        plane_distance_cm: From the nominal source to the plane. [cm]
        tilt_toward_head_deg: Of the axis aimed at the head above the horizontal. [°]
        tilt_toward_feet_deg: Of the axis aimed at the feet below the horizontal, positive. [°]
        mid_height_cm: Of the patient's mid-height above the isocentre; negative below it. [cm]
        mu_share_upper: Part of the pair's MU that the field aimed at the head gets. [1]
        patient_height_cm: Standing height, soles to vertex. [cm]
        uniformity_half_length_cm: Half of the length over which the vertical profile is judged. [cm]
        uniformity_half_width_cm: Half of the width over which the horizontal profile is judged. [cm]
        field_length_cm: Height of the rectangle. [cm]
        field_width_cm: Width of the rectangle. [cm]

    Returns:
        Both metrics of both profiles and of the rectangle, doses at both ends of the patient, tables.

    Raises:
        ValueError: If a number is impossible.
        OutsideValidity: If energy, distance or a tilt lie outside the model, or the degrader stops the beam.

    Valid for: 4 to 12 MeV and 300 to 500 cm: half-range within 2.5 % of own-monte-carlo; a machine differs by
        its foils.
    Assumes: mid-height is half of the standing height; arms raised to 1.25 of it (practice).
    Source: own-fit (fit) to own-monte-carlo on the moments of eyges-1948.
    """
    hands = coverage_length_cm(standing_height_cm=patient_height_cm) - patient_height_cm / 2
    reach = max(uniformity_half_length_cm, field_length_cm / 2, hands)
    reach = float(np.ceil(reach / LISTED_STEP_CM) * LISTED_STEP_CM)
    heights = even_grid(half_length_cm=reach, step_cm=HEIGHT_STEP_CM)
    beside = max(uniformity_half_width_cm, field_width_cm / 2)
    across = even_grid(half_length_cm=beside, step_cm=ACROSS_STEP_CM)

    pair: dict[str, Any] = {
        "setup": setup,
        "plane_distance_cm": plane_distance_cm,
        "tilt_toward_head_deg": tilt_toward_head_deg,
        "tilt_toward_feet_deg": tilt_toward_feet_deg,
        "mid_height_cm": mid_height_cm,
        "mu_share_upper": mu_share_upper,
    }
    doses = dual_field_doses(heights_cm=heights, across_cm=across, **pair)
    even = uniformity_of_plane(
        heights_cm=heights,
        across_cm=across,
        doses=doses,
        uniformity_half_length_cm=uniformity_half_length_cm,
        uniformity_half_width_cm=uniformity_half_width_cm,
        field_length_cm=field_length_cm,
        field_width_cm=field_width_cm,
    )
    vertical, horizontal = doses[:, len(across) // 2], doses[len(heights) // 2]
    ends = coverage_of_profile(
        positions_cm=heights, doses=vertical, soles_cm=-patient_height_cm / 2, hands_cm=hands
    )
    listed = slice(None, None, round(LISTED_STEP_CM / HEIGHT_STEP_CM))
    tall = even_grid(half_length_cm=field_length_cm / 2, step_cm=MAP_STEP_CM)
    wide = even_grid(half_length_cm=field_width_cm / 2, step_cm=MAP_STEP_CM)
    return PredictedPlane(
        even.vertical_half_range_percent,
        even.vertical_deviation_percent,
        even.horizontal_half_range_percent,
        even.horizontal_deviation_percent,
        even.map_half_range_percent,
        even.map_deviation_percent,
        ends.at_soles,
        ends.at_hands,
        profile_table(positions_cm=heights[listed], doses=vertical[listed], position_name="height"),
        profile_table(positions_cm=across, doses=horizontal, position_name="across"),
        map_table(
            heights_cm=tall, across_cm=wide, doses=dual_field_doses(heights_cm=tall, across_cm=wide, **pair)
        ),
    )
