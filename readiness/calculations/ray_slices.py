"""
A field cut into thin horizontal slices of rays, each a closed form across and a Gaussian up and down.

A slice holds the rays with one vertical tangent b in the frame of the tilted beam, which does not turn with
the collimator. Its rays meet the plane at one height; across the plane they are a Gaussian cut by the
collimator, at edges that depend on b if the collimator is turned.
"""

from functools import lru_cache
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from readiness.calculations.field_setup import STEEPEST_TILT_DEG, FieldSetup
from readiness.calculations.scatter_at_plane import KERNEL, RaysAtPlane, ScatterAtPlane
from readiness.errors import OutsideValidity

Array = NDArray[np.float64]

OBLIQUITY_POWER = 2  # dose = crossings of the plane x secant^2; 1 is the physical value (own-fit, fit)


class Opening(NamedTuple):
    """Nodes in the vertical tangent with their weights and the horizontal tangents that pass there."""

    tangent: Array
    weight: Array
    lower: Array
    upper: Array


class Slices(NamedTuple):
    """Per tilt and slice: where it meets the plane, how wide it is there, how much it carries."""

    height_cm: Array
    weight: Array
    widening_cm: Array
    lower: Array
    upper: Array
    rays: RaysAtPlane
    vertical_stretch: Array


def slices_needed(setup: FieldSetup, scatter: ScatterAtPlane, distance_cm: float) -> int:
    """Return how many slices reach 0.1 % of the centre: the narrower the blur in the opening, the more."""
    blur2 = scatter.rays(np.array(distance_cm), np.array(1.0)).air_variance_cm2
    narrowest = float(np.sqrt(blur2)) * min(width for _, width in KERNEL)
    return 4 + int(np.ceil(2 * setup.opening_cm / 200 * distance_cm / narrowest))


@lru_cache(maxsize=32)
def open_slices(opening_cm: float, collimator_deg: float, slices: int) -> Opening:
    """Return Gauss-Legendre nodes over a square opening turned by the collimator angle."""
    half = opening_cm / 200.0
    turn = np.radians(collimator_deg % 90.0)
    cosine, sine = float(np.cos(turn)), float(np.sin(turn))
    outer, inner = half * (cosine + sine), half * abs(cosine - sine)
    if sine < 1e-9 or cosine < 1e-9:
        edges, counts = [-half, half], [slices]
    else:
        edges, counts = [-outer, -inner, inner, outer], [slices, slices, slices]
    tangents, weights = [], []
    for low, high, count in zip(edges[:-1], edges[1:], counts, strict=True):
        if high - low > 1e-12:
            nodes, parts = np.polynomial.legendre.leggauss(count)
            tangents.append(0.5 * (high + low) + 0.5 * (high - low) * nodes)
            weights.append(0.5 * (high - low) * parts)
    tangent = np.concatenate(tangents)
    lower, upper = np.full_like(tangent, -half), np.full_like(tangent, half)
    if len(counts) > 1:
        lower = np.maximum((-half - tangent * sine) / cosine, (tangent * cosine - half) / sine)
        upper = np.minimum((half - tangent * sine) / cosine, (tangent * cosine + half) / sine)
    return Opening(tangent, np.concatenate(weights), lower, upper)


def slices_at_plane(
    setup: FieldSetup, scatter: ScatterAtPlane, tilts_deg: Array, distance_cm: float, slices: int
) -> Slices:
    """
    Return the slices of fields tilted upward about the isocentre, shape (tilts, slices).

    Heights count from the isocentre. Source at SAD sin t below it, D' = D - SAD + SAD cos t from the plane;
    a ray with tangent b rises by u/u_z = (sin t + b cos t)/(cos t - b sin t) per distance.
    """
    if (np.abs(tilts_deg) > STEEPEST_TILT_DEG).any():
        raise OutsideValidity(f"the beam model holds for tilts up to {STEEPEST_TILT_DEG:g} degrees")
    if distance_cm <= setup.source_axis_distance_cm:
        raise OutsideValidity("the plane must stand beyond the isocentre")
    opening = open_slices(setup.opening_cm, setup.collimator_deg, slices)
    tilt = np.radians(tilts_deg)[:, None]
    b = opening.tangent
    axis = setup.source_axis_distance_cm
    ahead = distance_cm - axis + axis * np.cos(tilt)
    forward = np.cos(tilt) - b * np.sin(tilt)
    rise = (np.sin(tilt) + b * np.cos(tilt)) / forward
    secant = np.hypot(1.0, rise)
    rays = scatter.rays(ahead, secant)
    emitted = opening.weight * np.exp(-0.5 * (b / setup.foil_spread) ** 2)
    return Slices(
        height_cm=ahead * rise - axis * np.sin(tilt),
        weight=emitted * rays.transmission * secant**OBLIQUITY_POWER,
        widening_cm=ahead / forward,
        lower=opening.lower,
        upper=opening.upper,
        rays=rays,
        vertical_stretch=secant**2,
    )
