"""Stopping power and range beyond their published values."""

import numpy as np
import pytest

from readiness.calculations.stopping_power import (
    collision_stopping_power,
    csda_range,
    stopping_power_in_steps,
    total_stopping_power,
)
from readiness.errors import OutsideValidity


def test_arrays_give_what_single_energies_give() -> None:
    """Energies may come as an array."""
    energies = np.array([1.0, 6.0, 10.0])
    singles = [total_stopping_power(material="pmma", energy_mev=float(energy)) for energy in energies]
    assert total_stopping_power(material="pmma", energy_mev=energies) == pytest.approx(singles)


def test_radiation_adds_and_adds_more_at_high_energy_and_in_heavy_matter() -> None:
    """The radiative part is positive and grows with energy and atomic number."""
    def part(material: str, energy: float) -> float:
        """Return the radiative part of the total."""
        total = total_stopping_power(material=material, energy_mev=energy)
        return 1 - collision_stopping_power(material=material, energy_mev=energy) / total

    assert 0 < part("air", 2.0) < part("air", 6.0) < part("aluminium", 6.0) < part("lead", 6.0)


def test_stopping_power_has_its_minimum_near_one_mev() -> None:
    """Collision losses are least where the electron becomes relativistic."""
    energies = np.geomspace(0.05, 20, 200)
    losses = collision_stopping_power(material="water", energy_mev=energies)
    assert 0.8 < energies[np.argmin(losses)] < 2.0


def test_range_grows_with_energy_and_vanishes_with_it() -> None:
    """More energy goes farther; almost none goes almost nowhere."""
    reaches = [csda_range(material="water", energy_mev=energy) for energy in (0.02, 1.0, 3.0, 6.0)]
    assert reaches == sorted(reaches)
    assert reaches[0] < 0.001


def test_range_is_the_integral_of_the_losses() -> None:
    """Going 0.5 g/cm2 through water costs an electron what the ranges say."""
    here = csda_range(material="water", energy_mev=6.0)
    energy, step = 6.0, 0.0005
    for _ in range(1000):
        energy -= step * total_stopping_power(material="water", energy_mev=energy)
    assert here - 0.5 == pytest.approx(csda_range(material="water", energy_mev=energy), abs=0.0005)


def test_half_energy_in_millimetres_and_one_more_stops_in_lead() -> None:
    """Lead of E/2 mm and 1 mm of margin exceeds the range of 4 to 10 MeV electrons."""
    for energy in (4.0, 6.0, 8.0, 10.0):
        assert (energy / 2 + 1) / 10 * 11.35 > csda_range(material="lead", energy_mev=energy)


@pytest.mark.parametrize("energy", [0.0, -1.0])
def test_energy_must_be_positive(energy: float) -> None:
    """No stopping power belongs to an energy of zero."""
    with pytest.raises(ValueError, match="must be positive"):
        collision_stopping_power(material="air", energy_mev=energy)


def test_energies_outside_the_formula_are_refused() -> None:
    """A few keV would need shell corrections; 60 MeV was never compared."""
    for energy in (0.005, 60.0):
        with pytest.raises(OutsideValidity, match="0.01 to 50 MeV"):
            total_stopping_power(material="air", energy_mev=energy)


@pytest.mark.parametrize("material", ["air", "water", "pmma", "aluminium", "lead"])
def test_reading_between_close_energies_changes_nothing_that_matters(material: str) -> None:
    """Between its energies the curve departs from the formula by less than 2e-5 of it."""
    energies = np.geomspace(0.011, 49.0, 9973)
    exact = total_stopping_power(material=material, energy_mev=energies)
    assert stopping_power_in_steps(material=material, energy_mev=energies) == pytest.approx(exact, rel=2e-5)


def test_the_curve_refuses_what_the_formula_refuses() -> None:
    """Energies that are not positive or outside the range are refused alike."""
    with pytest.raises(ValueError, match="must be positive"):
        stopping_power_in_steps(material="air", energy_mev=np.array([1.0, -1.0]))
    with pytest.raises(OutsideValidity, match="0.01 to 50"):
        stopping_power_in_steps(material="air", energy_mev=np.array([60.0]))
    with pytest.raises(ValueError, match="must be positive"):
        stopping_power_in_steps(material="air", energy_mev=np.array([np.nan]))
