"""Two different tilts for a patient whose mid-height does not stand at the isocentre."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from readiness.calculations.field_at_plane import HEIGHT_STEP_CM, even_grid
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.tilt_study import profile_percents
from readiness.calculations.tilted_field import tilted_fields

Array = NDArray[np.float64]


@dataclass(frozen=True)
class UnequalTilts:
    """The pair of tilts with the evenest vertical profile, beside the best pair of equal ones."""

    tilt_toward_head_deg: float
    tilt_toward_feet_deg: float
    vertical_percent: float
    equal_tilt_deg: float
    vertical_percent_of_equal: float


def best_unequal_tilts(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    mid_height_cm: float,
    mu_share_upper: float,
    uniformity_half_length_cm: float,
    metric: str,
    tilts_deg: ArrayLike,
) -> UnequalTilts:
    """
    Return the two tilts that make the vertical profile evenest about the patient's mid-height.

    Args:
        setup: The beam and the room, from field_setup.
        plane_distance_cm: From the nominal source to the plane. [cm]
        mid_height_cm: Of the patient's mid-height above the isocentre; negative below it. [cm]
        mu_share_upper: Part of the pair's MU that the field aimed at the head gets. [1]
        uniformity_half_length_cm: Half of the length over which the vertical profile is judged. [cm]
        metric: half-range, deviation-from-mid-height or stricter.
        tilts_deg: Tilts to try for either field, rising. [°]

    Returns:
        The best pair, and the best of the equal pairs for comparison.

    Raises:
        ValueError: If a number is impossible.
        OutsideValidity: If energy, distance or a tilt lie outside the model, or no dose reaches mid-height.

    Valid for: 4 to 12 MeV and 300 to 500 cm.
    Assumes: ties go to the smaller sum of both tilts, then to the smaller tilt toward the head.
    Source: own-fit (fit) to own-monte-carlo on the moments of eyges-1948.
    """
    if not 0 < mu_share_upper < 1:
        raise ValueError("the upper field's part of the MU must lie between 0 and 1")
    tilts = np.asarray(tilts_deg, dtype=float)
    if tilts.size == 0 or tilts[0] < 0 or (np.diff(tilts) <= 0).any():
        raise ValueError("tilts are positive and rise")
    heights = even_grid(half_length_cm=uniformity_half_length_cm, step_cm=HEIGHT_STEP_CM)
    middle = np.array([0.0])
    upper = tilted_fields(setup, tilts, plane_distance_cm, heights + mid_height_cm, middle)[:, :, 0]
    lower = tilted_fields(setup, tilts, plane_distance_cm, heights - mid_height_cm, middle)[:, ::-1, 0]
    pairs = [mu_share_upper * up + (1 - mu_share_upper) * lower for up in upper]
    percent = np.round([profile_percents(pair, metric) for pair in pairs], 6)
    ties = [(int(i), int(j)) for i, j in np.argwhere(percent == percent.min())]
    head, feet = min(ties, key=lambda pair: (tilts[pair[0]] + tilts[pair[1]], pair))
    equal = int(np.argmin(np.diag(percent)))
    return UnequalTilts(
        float(tilts[head]),
        float(tilts[feet]),
        float(percent[head, feet]),
        float(tilts[equal]),
        float(percent[equal, equal]),
    )
