"""How even a dual field is at the plane, both ways and over the rectangle."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike

from readiness.calculations.uniformity import uniformity_of_map, uniformity_of_profile


@dataclass(frozen=True)
class PlaneUniformity:
    """How even a dual field is at the plane: along the height, across, and over the rectangle of both."""

    vertical_half_range_percent: float
    vertical_deviation_percent: float
    horizontal_half_range_percent: float
    horizontal_deviation_percent: float
    map_half_range_percent: float
    map_deviation_percent: float
    lowest_in_map: float
    lowest_in_map_at_height_cm: float
    lowest_in_map_at_across_cm: float


def uniformity_of_plane(
    *,
    heights_cm: ArrayLike,
    across_cm: ArrayLike,
    doses: ArrayLike,
    uniformity_half_length_cm: float,
    uniformity_half_width_cm: float,
    field_length_cm: float,
    field_width_cm: float,
) -> PlaneUniformity:
    """
    Return how even a dual field is along its height, across its middle, and over its rectangle.

    Args:
        heights_cm: Heights from mid-height, shape (n,), 0 among them. [cm]
        across_cm: Positions across, shape (m,), 0 among them. [cm]
        doses: Relative doses, shape (n, m). [1]
        uniformity_half_length_cm: Half of the length over which the vertical profile is judged. [cm]
        uniformity_half_width_cm: Half of the width over which the horizontal profile is judged. [cm]
        field_length_cm: Height of the rectangle. [cm]
        field_width_cm: Width of the rectangle. [cm]

    Returns:
        Both metrics of both profiles and of the map, and where the map is lowest.

    Raises:
        ValueError: If shapes do not fit.
        OutsideValidity: If the grid does not reach the limits.

    Valid for: grids that include 0 both ways.
    Assumes: profiles through the middle.
    Source: aapm-23, sec. 2.1 (memory) for lengths and widths; the definitions are ours.
    """
    heights, across = np.asarray(heights_cm, dtype=float), np.asarray(across_cm, dtype=float)
    values = np.asarray(doses, dtype=float)
    row, column = int(np.argmin(np.abs(heights))), int(np.argmin(np.abs(across)))
    vertical = uniformity_of_profile(
        positions_cm=heights, doses=values[:, column], half_length_cm=uniformity_half_length_cm
    )
    horizontal = uniformity_of_profile(
        positions_cm=across, doses=values[row], half_length_cm=uniformity_half_width_cm
    )
    plane = uniformity_of_map(
        heights_cm=heights,
        across_cm=across,
        doses=values,
        half_length_cm=field_length_cm / 2,
        half_width_cm=field_width_cm / 2,
    )
    return PlaneUniformity(
        vertical.half_range_percent,
        vertical.deviation_percent,
        horizontal.half_range_percent,
        horizontal.deviation_percent,
        plane.half_range_percent,
        plane.deviation_percent,
        plane.lowest,
        plane.lowest_at_height_cm,
        plane.lowest_at_across_cm,
    )
