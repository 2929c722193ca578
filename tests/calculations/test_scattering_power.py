"""Scattering power."""

import numpy as np
import pytest

from readiness.calculations.scattering_power import scattering_power


def test_slow_electrons_scatter_more() -> None:
    """Scattering power falls roughly as the square of the energy."""
    powers = scattering_power(material="air", energy_mev=np.array([3.0, 6.0, 12.0]), cut_rad=0.3)
    assert 3.0 < powers[0] / powers[1] < 4.2
    assert 3.2 < powers[1] / powers[2] < 4.2


def test_counting_larger_deflections_gives_more() -> None:
    """A larger cut raises the scattering power, but only as a logarithm."""
    small, large = (float(scattering_power(material="air", energy_mev=6.0, cut_rad=cut)) for cut in (0.2, 0.4))
    assert 1.05 < large / small < 1.25


def test_heavy_matter_scatters_more() -> None:
    """Per mass, aluminium scatters more than plastic, and lead most."""
    powers = [float(scattering_power(material=name, energy_mev=6.0, cut_rad=0.4)) for name in ("pmma", "aluminium", "lead")]
    assert powers == sorted(powers)


def test_nuclear_size_limits_the_cut() -> None:
    """Beyond the angle at which the nucleus ends a larger cut changes nothing."""
    one, other = (float(scattering_power(material="lead", energy_mev=50.0, cut_rad=cut)) for cut in (1.0, 3.0))
    assert one == other


@pytest.mark.parametrize(("energy", "cut"), [(0.0, 0.3), (6.0, 0.0)])
def test_energy_and_cut_must_be_positive(energy: float, cut: float) -> None:
    """Neither an energy nor a cut of zero has a meaning."""
    with pytest.raises(ValueError, match="must be positive"):
        scattering_power(material="air", energy_mev=energy, cut_rad=cut)
