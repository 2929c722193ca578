"""
Width and number of the electrons of a ray at the plane, for any distance and slope of the ray.

Transport is done once at a few distances and slopes and read between them by splines.
"""

from functools import lru_cache
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import CubicSpline, RectBivariateSpline

from readiness.calculations.air_transport import beams_in_air
from readiness.calculations.degrader_transport import beams_behind_degrader, refuse_stopped_beam
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.published_tables import published_table

Array = NDArray[np.float64]

STEEPEST_SECANT = 1.35  # of the angle between ray and plane normal: 25 degrees of tilt, turned collimator
NODES = 9
FINEST_BLUR_CM = 0.5  # at the plane even without air: the source is not a point (practice)
KERNEL: tuple[tuple[float, float], ...] = tuple(
    (float(weight or 0), float(width or 0)) for weight, width in published_table("scatter_kernel").rows
)
"""Weight and relative width of the three Gaussians of a pencil beam."""


class RaysAtPlane(NamedTuple):
    """Per ray: variance from air, variance added by the degrader, part of the electrons that arrive."""

    air_variance_cm2: Array
    degrader_variance_cm2: Array
    transmission: Array


class ScatterAtPlane:
    """Rays of one setup at planes between two distances from the source."""

    def __init__(self, setup: FieldSetup, nearest_cm: float, farthest_cm: float) -> None:
        """Transport the setup's beam to a few distances and slopes."""
        paths = np.linspace(nearest_cm, farthest_cm * STEEPEST_SECANT, NODES + 3)
        beams = beams_in_air(
            energy_at_source_mev=setup.energy_at_source_mev,
            path_cm=paths,
            density_g_per_cm3=setup.air_density_g_per_cm3,
        )
        self._scale = setup.scatter_scale
        self._sigma = CubicSpline(paths, beams.sigma_cm)
        self._degraded = setup.degrader_thickness_cm > 0
        if self._degraded:
            self._behind_degrader(setup, nearest_cm, farthest_cm)

    def _behind_degrader(self, setup: FieldSetup, nearest_cm: float, farthest_cm: float) -> None:
        """Transport the beam through the degrader at a few distances and slopes."""
        distances = np.linspace(nearest_cm, farthest_cm, 5)
        secants = np.linspace(1.0, STEEPEST_SECANT, NODES)
        before = distances - setup.degrader_gap_cm - setup.degrader_thickness_cm
        if (before <= 0).any():
            raise ValueError("the degrader would stand behind the source")
        arriving = beams_in_air(
            energy_at_source_mev=setup.energy_at_source_mev,
            path_cm=np.outer(before, secants),
            density_g_per_cm3=setup.air_density_g_per_cm3,
        )
        leaving = beams_behind_degrader(
            energy_mev=arriving.energy_mev,
            incoming_angle_rad=arriving.angle_rad,
            degrader_material=setup.degrader_material,
            path_cm=np.outer(np.ones_like(distances), secants * setup.degrader_thickness_cm),
        )
        refuse_stopped_beam(energy_mev=float(leaving.energy_mev[:, 0].min()))
        added = (leaving.own_angle_rad * setup.degrader_gap_cm * secants) ** 2
        self._added = RectBivariateSpline(distances, secants, added)
        self._left = RectBivariateSpline(distances, secants, leaving.transmission)

    def rays(self, distance_cm: Array, secant: Array) -> RaysAtPlane:
        """Return the rays' widths across themselves and their transmission, in the shape of the arguments."""
        sigma = np.maximum(self._scale * self._sigma(distance_cm * secant), FINEST_BLUR_CM)
        if not self._degraded:
            return RaysAtPlane(sigma**2, np.zeros_like(sigma), np.ones_like(sigma))
        near = np.broadcast_to(distance_cm, secant.shape)
        added = self._added(near, secant, grid=False)
        return RaysAtPlane(sigma**2, added, self._left(near, secant, grid=False))


def scatter_at_plane(setup: FieldSetup, nearest_cm: float, farthest_cm: float) -> ScatterAtPlane:
    """Return the rays of a setup, from memory if asked before; foils and collimator do not matter."""
    plain = setup.but(foil_spread=1.0, opening_cm=1.0, collimator_deg=0.0)
    return _remembered(plain, nearest_cm, farthest_cm)


@lru_cache(maxsize=64)
def _remembered(setup: FieldSetup, nearest_cm: float, farthest_cm: float) -> ScatterAtPlane:
    """Return the rays of a setup."""
    return ScatterAtPlane(setup, nearest_cm, farthest_cm)
