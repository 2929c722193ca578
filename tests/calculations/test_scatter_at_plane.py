"""Width and number of the electrons of a ray at the plane."""

import numpy as np
import pytest
from beam_setups import common_setup

from readiness.calculations.air_transport import beams_in_air
from readiness.calculations.degrader_transport import beams_behind_degrader
from readiness.calculations.scatter_at_plane import FINEST_BLUR_CM, KERNEL, RaysAtPlane, scatter_at_plane

SEA_LEVEL_G_PER_CM3 = 1.20479e-3


def ray(secant: float = 1.0, distance: float = 400.0, **changes: float) -> RaysAtPlane:
    """Return one ray of the common set-up with changes."""
    scatter = scatter_at_plane(common_setup(**changes), 300.0, 450.0)
    return scatter.rays(np.array(distance), np.array(secant))


def test_kernel_is_the_one_fitted() -> None:
    """Three Gaussians carry 0.66, 0.306 and 0.034 of a pencil beam at 0.86, 1.37 and 3.1 times its sigma (own-fit)."""
    assert np.array(KERNEL) == pytest.approx(np.array([[0.66, 0.86], [0.306, 1.37], [0.034, 3.1]]))
    assert sum(part for part, _ in KERNEL) == pytest.approx(1.0)


def test_kernel_has_the_median_that_defines_sigma() -> None:
    """Half of the electrons lie within 1.1774 sigma, as the width is defined, to 0.005 of all."""
    within = sum(part * (1 - np.exp(-np.log(2) / width**2)) for part, width in KERNEL)
    assert within == pytest.approx(0.5, abs=0.005)


@pytest.mark.parametrize(("distance", "secant"), [(333.0, 1.07), (412.0, 1.21), (450.0, 1.0)])
def test_between_its_nodes_a_ray_is_transported_ray_by_ray(distance: float, secant: float) -> None:
    """Splines give a direct transport to 0.1 %, the degrader's part to 0.5 % near the kink where its angle is capped."""
    air = beams_in_air(energy_at_source_mev=6.0, path_cm=distance * secant, density_g_per_cm3=SEA_LEVEL_G_PER_CM3)
    before = beams_in_air(
        energy_at_source_mev=6.0, path_cm=(distance - 21.0) * secant, density_g_per_cm3=SEA_LEVEL_G_PER_CM3
    )
    behind = beams_behind_degrader(
        energy_mev=before.energy_mev, incoming_angle_rad=before.angle_rad, degrader_material="pmma", path_cm=secant
    )
    found = ray(secant, distance)
    assert float(found.air_variance_cm2) == pytest.approx(float(air.sigma_cm) ** 2, rel=1e-3)
    assert float(found.degrader_variance_cm2) == pytest.approx((float(behind.own_angle_rad) * 20 * secant) ** 2, rel=5e-3)
    assert float(found.transmission) == pytest.approx(float(behind.transmission), rel=1e-3)


def test_without_air_and_degrader_only_the_source_blurs() -> None:
    """In a vacuum without a degrader every electron arrives, half a centimetre wide."""
    found = ray(pressure_kpa=0.0, degrader_thickness_cm=0.0)
    assert float(found.air_variance_cm2) == pytest.approx(FINEST_BLUR_CM**2)
    assert (float(found.degrader_variance_cm2), float(found.transmission)) == (0.0, 1.0)


def test_gap_farther_and_steeper_widen() -> None:
    """The degrader's part grows with the square of the gap; distance and slope widen the air's part."""
    usual = ray()
    assert float(ray(degrader_gap_cm=40.0).degrader_variance_cm2) == pytest.approx(
        4 * float(usual.degrader_variance_cm2), rel=0.03
    )
    assert float(ray(distance=430.0).air_variance_cm2) > float(usual.air_variance_cm2)
    assert float(ray(1.2).air_variance_cm2) > float(usual.air_variance_cm2)
    assert float(ray(1.2).transmission) < float(usual.transmission)
