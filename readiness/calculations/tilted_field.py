"""Dose of tilted single fields over a grid of the plane: products of a height part and a width part."""

import numpy as np
from numpy.typing import NDArray

from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.ray_slices import Slices, slices_at_plane, slices_needed
from readiness.calculations.scatter_at_plane import KERNEL, scatter_at_plane
from readiness.calculations.truncated_gaussian import blurred_gaussian

Array = NDArray[np.float64]

KERNEL_PARTS, KERNEL_WIDTHS = (np.array(column) for column in zip(*KERNEL, strict=True))
MARGIN_CM = 12.0  # a source tilted by 25 degrees stands less than this nearer to the plane


def tilted_fields(
    setup: FieldSetup,
    tilts_deg: Array,
    distance_cm: float,
    heights_cm: Array,
    across_cm: Array,
    reach_cm: tuple[float, float] | None = None,
    slices: int | None = None,
) -> Array:
    """
    Return the dose of single fields tilted upward, shape (tilts, heights, across).

    Heights count from the isocentre, positions across from the middle. Dose is relative to the emission per
    tangent squared on the axis, so that fields at different distances can be compared. A field tilted
    downward is the same field turned by half a turn: dose(height, across) = up(-height, -across).
    ``reach_cm`` are the nearest and farthest distance of a study, so that transport is done once for all.
    """
    nearest, farthest = reach_cm or (distance_cm, distance_cm)
    scatter = scatter_at_plane(setup, nearest - MARGIN_CM, farthest)
    count = slices or slices_needed(setup, scatter, distance_cm)
    found = slices_at_plane(setup, scatter, tilts_deg, distance_cm, count)
    blur2 = np.concatenate(
        [
            width**2 * found.rays.air_variance_cm2 + found.rays.degrader_variance_cm2
            for width in KERNEL_WIDTHS
        ],
        axis=1,
    )
    result: Array = _height_part(found, blur2, heights_cm) @ _width_part(setup, found, blur2, across_cm)
    return result


def dual_field(
    setup: FieldSetup,
    tilt_toward_head_deg: float,
    tilt_toward_feet_deg: float,
    distance_cm: float,
    heights_cm: Array,
    across_cm: Array,
    mu_share_upper: float = 0.5,
) -> Array:
    """
    Return the dose of a dual field per MU of the pair, shape (heights, across).

    Heights count from the isocentre; both tilts are given as positive numbers.
    """
    tilts = np.array([tilt_toward_head_deg, tilt_toward_feet_deg])
    upper = tilted_fields(setup, tilts[:1], distance_cm, heights_cm, across_cm)[0]
    lower = tilted_fields(setup, tilts[1:], distance_cm, -heights_cm[::-1], -across_cm[::-1])[0]
    result: Array = mu_share_upper * upper + (1 - mu_share_upper) * lower[::-1, ::-1]
    return result


def _height_part(found: Slices, blur2: Array, heights_cm: Array) -> Array:
    """Return weight times Gaussian of every slice and kernel at every height, (tilts, heights, slices)."""
    variance = blur2 * _each(found.vertical_stretch)
    parts = np.repeat(KERNEL_PARTS, found.weight.shape[1])
    front = parts * _each(found.weight) / np.sqrt(2 * np.pi * variance)
    result: Array = heights_cm[None, :, None] - _each(found.height_cm)[:, None, :]
    result *= result
    result *= (-0.5 / variance)[:, None, :]
    np.exp(result, out=result)
    result *= front[:, None, :]
    return result


def _width_part(setup: FieldSetup, found: Slices, blur2: Array, across_cm: Array) -> Array:
    """Return the closed form of every slice and kernel across the plane, (tilts, slices, across)."""
    widening = _each(found.widening_cm)[:, :, None]
    edges = [np.tile(edge, len(KERNEL))[None, :, None] * widening for edge in (found.lower, found.upper)]
    return (
        blurred_gaussian(
            position_cm=across_cm,
            spread_cm=setup.foil_spread * widening,
            lower_cm=edges[0],
            upper_cm=edges[1],
            blur_cm=np.sqrt(blur2)[:, :, None],
        )
        / widening
    )


def _each(slices: Array) -> Array:
    """Return the slices once for each kernel, side by side."""
    return np.tile(slices, (1, len(KERNEL)))
