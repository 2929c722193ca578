"""Energy at the source and at a depth."""

import pytest

from readiness.calculations.air_transport import pencil_beam_in_air
from readiness.calculations.source_energy import (
    energy_at_source_mev,
    most_probable_energy_at_depth_mev,
    practical_range_of_energy_cm,
)
from readiness.errors import OutsideValidity


def test_adding_the_air_back_and_taking_it_off_again_is_a_round_trip() -> None:
    """The energy at the source arrives at 100 cm as the energy it came from."""
    source = energy_at_source_mev(surface_energy_mev=5.59, pressure_kpa=98.5, temperature_celsius=22)
    arrives = pencil_beam_in_air(energy_at_source_mev=source, path_cm=100, pressure_kpa=98.5, temperature_celsius=22)
    assert arrives.mean_energy_mev == pytest.approx(5.59, abs=1e-4)


def test_no_air_adds_nothing() -> None:
    """Without air the energy at the source is the energy at 100 cm."""
    assert energy_at_source_mev(surface_energy_mev=6, pressure_kpa=0, temperature_celsius=20) == pytest.approx(6, abs=1e-5)


def test_thin_air_adds_less() -> None:
    """At altitude less energy has been lost."""
    sea, mountain = (
        energy_at_source_mev(surface_energy_mev=6, pressure_kpa=pressure, temperature_celsius=20) for pressure in (101, 80)
    )
    assert mountain < sea


@pytest.mark.parametrize("energy", [2.0, 13.5])
def test_energies_outside_the_beam_model_are_refused(energy: float) -> None:
    """The message gives the range of the model."""
    with pytest.raises(OutsideValidity, match="outside the beam model"):
        energy_at_source_mev(surface_energy_mev=energy, pressure_kpa=101.325, temperature_celsius=20)


def test_energy_falls_to_nothing_at_the_practical_range() -> None:
    """At the surface all of it is left, at the practical range none."""
    reach = practical_range_of_energy_cm(surface_energy_mev=6)
    assert most_probable_energy_at_depth_mev(surface_energy_mev=6, depth_cm=0) == 6
    assert most_probable_energy_at_depth_mev(surface_energy_mev=6, depth_cm=reach) == pytest.approx(0, abs=1e-9)


def test_nothing_is_said_beyond_the_practical_range() -> None:
    """Beyond the range there is no most probable energy."""
    with pytest.raises(OutsideValidity, match="beyond the practical range"):
        most_probable_energy_at_depth_mev(surface_energy_mev=6, depth_cm=4)


def test_impossible_energies_are_refused() -> None:
    """Energies and depths below zero are impossible."""
    with pytest.raises(ValueError, match="more than 0.22"):
        practical_range_of_energy_cm(surface_energy_mev=0.1)
    with pytest.raises(ValueError, match="must be positive"):
        energy_at_source_mev(surface_energy_mev=0, pressure_kpa=101, temperature_celsius=20)
    with pytest.raises(ValueError, match="cannot be negative"):
        most_probable_energy_at_depth_mev(surface_energy_mev=6, depth_cm=-1)
