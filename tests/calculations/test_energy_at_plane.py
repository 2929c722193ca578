"""Energy at the plane, behind air, degrader and gap."""

import pytest

from readiness.calculations.energy_at_plane import EnergyAtPlane, energy_at_plane
from readiness.errors import OutsideValidity


def arriving(energy_at_source_mev: float = 6.0, degrader_thickness_cm: float = 1.0, **changes: float) -> EnergyAtPlane:
    """Return what arrives at 400 cm of sea-level air behind PMMA."""
    geometry = {
        "plane_distance_cm": 400.0,
        "degrader_gap_cm": 20.0,
        "pressure_kpa": 101.325,
        "temperature_celsius": 20.0,
        **changes,
    }
    return energy_at_plane(
        energy_at_source_mev=energy_at_source_mev,
        degrader_thickness_cm=degrader_thickness_cm,
        degrader_material="pmma" if degrader_thickness_cm else None,
        **geometry,
    )


def test_nothing_in_the_way_leaves_the_energy_as_it_is() -> None:
    """Without air and degrader the energy at the source arrives and nothing is stopped."""
    found = arriving(6.0, 0.0, pressure_kpa=0.0)
    assert found.energy_mev == pytest.approx(6.0, abs=1e-6)
    assert found.transmitted_percent == 100


def test_thicker_farther_and_denser_each_take_energy() -> None:
    """A thicker degrader, a farther plane and denser air each lower the energy that arrives."""
    here = arriving().energy_mev
    assert arriving(degrader_thickness_cm=1.2).energy_mev < here
    assert arriving(plane_distance_cm=450.0).energy_mev < here
    assert arriving(pressure_kpa=85.0).energy_mev > here


def test_a_thin_beam_is_warned_of() -> None:
    """A degrader that stops much of the beam says how much."""
    assert "stops about" in arriving(4.5).warning
    assert arriving(6.0, 0.5).warning == ""


def test_impossible_places_and_stopped_beams_are_refused() -> None:
    """The degrader stands in front of the source, and something must arrive."""
    with pytest.raises(ValueError, match="behind the source"):
        arriving(degrader_gap_cm=500.0)
    with pytest.raises(OutsideValidity, match="stops the beam"):
        arriving(4.0, 3.0)
