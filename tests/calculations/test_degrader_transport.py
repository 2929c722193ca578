"""What a degrader does to a beam."""

import numpy as np
import pytest

from readiness.calculations.degrader_transport import (
    DegradedBeam,
    beam_behind_degrader,
    beams_behind_degrader,
)
from readiness.errors import OutsideValidity


def behind(thickness: float, energy: float = 5.1, material: str | None = "pmma") -> DegradedBeam:
    """Return the beam behind a degrader."""
    return beam_behind_degrader(
        energy_mev=energy, incoming_angle_rad=0.2, degrader_material=material, degrader_thickness_cm=thickness
    )


def test_no_degrader_changes_nothing() -> None:
    """A degrader of no thickness leaves energy, angle and number of electrons alone."""
    found = behind(0.0, material=None)
    assert (found.mean_energy_mev, found.angle_rad, found.transmission) == pytest.approx((5.1, 0.2, 1.0))
    assert found.warning == ""


def test_thicker_takes_more_energy_and_electrons_and_spreads_more() -> None:
    """Energy, residual range and transmission fall with thickness, the angle grows."""
    beams = [behind(thickness) for thickness in (0.2, 0.5, 0.8, 1.1, 1.4)]
    for name, falls in (("mean_energy_mev", True), ("residual_range_cm", True), ("transmission", True), ("own_angle_rad", False)):
        numbers = [getattr(beam, name) for beam in beams]
        assert numbers == sorted(numbers, reverse=falls), name


def test_plastic_takes_about_two_mev_per_centimetre() -> None:
    """PMMA takes 2.2 to 2.6 MeV per centimetre, aluminium 4 to 5 along the crooked path."""
    assert 2.2 < 5.1 - behind(1.0).mean_energy_mev < 2.6
    assert 4.0 < (5.1 - behind(0.2, material="aluminium").mean_energy_mev) / 0.2 < 5.0


def test_angle_is_capped() -> None:
    """A diffuse beam widens no more."""
    assert behind(1.7).own_angle_rad <= 0.6
    assert behind(1.7).angle_rad <= 0.6


def test_short_residual_range_is_warned_of() -> None:
    """When a quarter of the electrons is lost, the warning says how many and what energy is left."""
    found = behind(1.0, energy=3.12)
    assert "stops about" in found.warning
    assert "% of the electrons" in found.warning


def test_ample_range_is_not_warned_of() -> None:
    """Half a centimetre at 6 MeV needs no warning."""
    assert behind(0.5).warning == ""


def test_degrader_thicker_than_the_range_is_refused() -> None:
    """Three centimetres of plastic stop 5 MeV."""
    with pytest.raises(OutsideValidity, match="stops the beam"):
        behind(3.0)


def test_steep_rays_that_stop_are_kept_with_little_transmission() -> None:
    """Among many rays those that stop do not spoil the others."""
    beams = beams_behind_degrader(
        energy_mev=5.1, incoming_angle_rad=0.2, degrader_material="pmma", path_cm=np.array([1.0, 3.0])
    )
    assert beams.transmission[0] > 0.85
    assert beams.transmission[1] < 0.05


def test_degrader_without_a_material_is_impossible() -> None:
    """A thickness needs a material and cannot be negative."""
    with pytest.raises(ValueError, match="needs a material"):
        behind(1.0, material=None)
    with pytest.raises(ValueError, match="cannot be negative"):
        behind(-1.0)
