"""Transmission of layered barriers: identities, the first-layer rule, recesses and oblique paths."""

from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st

from readiness.calculations.barrier_transmission import (
    barrier_layers,
    barrier_transmission,
    wall_thickness_cm,
    wall_transmission,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table


def wall(*layers):
    return Table.of(("material", "thickness_cm", "density_g_per_cm3"), layers)


def transmission(layers, recess=0.0, incidence=0.0, radiation="primary", energy=6.0, angle=None):
    return barrier_transmission(
        layers=layers,
        recess_depth_cm=recess,
        incidence_deg=incidence,
        radiation=radiation,
        energy_mv=energy,
        angle_deg=angle,
    )


@pytest.mark.parametrize(("expected", "cm"), [(0.1, 37), (0.01, 70), (1e-3, 103), (10**-0.5, 18.5)])
def test_whole_tenth_value_layers(expected, cm):
    """One first layer leaves a tenth, each further one a tenth of that; half a first layer its square root."""
    assert expected == pytest.approx(transmission(wall(("concrete", cm, 2.35))))


@pytest.mark.parametrize("material", ["concrete", "steel", "lead"])
@pytest.mark.parametrize("radiation", ["primary", "leakage"])
@pytest.mark.parametrize("energy", [4, 6, 9, 10, 15, 18])
def test_one_more_layer_divides_by_ten(material, radiation, energy):
    """One equilibrium layer more divides by ten, behind any material and energy."""
    from readiness.calculations.tenth_value_layers import tenth_value_layers

    density = 2.35 if material == "concrete" else None
    more = tenth_value_layers(
        material=material, density_g_per_cm3=density, radiation=radiation, energy_mv=energy, angle_deg=None
    ).tvle_cm
    thin, thick = (
        transmission(wall((material, 100 + extra, density)), radiation=radiation, energy=energy)
        for extra in (0, more)
    )
    assert 0.1 == pytest.approx(thick / thin)


def test_density_acts_like_thickness():
    """A wall of half the density transmits as half the wall does."""
    assert transmission(wall(("concrete", 100, 2.35))) == pytest.approx(
        transmission(wall(("concrete", 200, 2.35 / 2)))
    )


def test_field_case_of_lighter_concrete():
    """210 cm of 10 MV at 2.2 instead of 2.35 lets about twice as much through (radsafe-2009: 44 against 21)."""
    ratio = transmission(wall(("concrete", 210, 2.2)), energy=10) / transmission(
        wall(("concrete", 210, 2.35)), energy=10
    )
    assert 2.0 <= ratio <= 2.5


def test_first_layer_rule():
    """Behind a first layer of one tenth-value layer or more, later layers count with their equilibrium layer."""
    both = transmission(wall(("concrete", 70, 2.35), ("steel", 20, None), ("lead", 5.7, None)))
    assert 10.0 ** -(2 + 2 + 1) == pytest.approx(both)
    steel_first = transmission(wall(("steel", 10, None), ("concrete", 66, 2.35)))
    assert 10.0 ** -(1 + 2) == pytest.approx(steel_first)


@given(cuts=st.lists(st.floats(0.5, 139.5), max_size=5))
def test_slices_transmit_as_the_whole(cuts):
    """A wall poured in slices transmits what the whole wall does, however thin the first slice."""
    edges = sorted({0.0, 140.0, *cuts})
    slices = [("concrete", high - low, 2.35) for low, high in pairwise(edges)]
    assert transmission(wall(("concrete", 140.0, 2.35))) == pytest.approx(transmission(wall(*slices)))


def test_recess_thins_from_inside():
    """A recess takes away the inner layer first, then the next one."""
    layers = wall(("concrete", 20, 2.35), ("steel", 10, None), ("concrete", 80, 2.35))
    left = barrier_layers(layers=layers, recess_depth_cm=25)
    assert [("steel", 5.0, None), ("concrete", 80.0, 2.35)] == [tuple(layer) for layer in left]


def test_recess_costs_what_its_thickness_is_worth():
    """A recess of one equilibrium layer lets ten times as much through."""
    layers = wall(("concrete", 150, 2.35))
    assert 10.0 == pytest.approx(transmission(layers, recess=33) / transmission(layers))


def test_recess_through_everything():
    """A hole transmits all; deeper than the wall there is nothing."""
    layers = wall(("concrete", 30, 2.35))
    assert 1.0 == transmission(layers, recess=30)
    with pytest.raises(ValueError, match="deeper than the barrier"):
        transmission(layers, recess=31)


def test_oblique_path():
    """At 45 degrees the path is longer by the square root of two; beyond it nothing is counted."""
    layers = wall(("concrete", 100, 2.35))
    longer = wall(("concrete", 100 * 2**0.5, 2.35))
    assert transmission(longer) == pytest.approx(transmission(layers, incidence=45))
    with pytest.raises(OutsideValidity, match="0 to 45 degrees"):
        transmission(layers, incidence=46)


def test_harder_radiation_comes_through_more():
    """Transmission rises with the energy and falls with the thickness."""
    layers = wall(("concrete", 110, 2.35))
    by_energy = [transmission(layers, energy=energy) for energy in (4, 5, 6, 8, 10, 12, 15, 18)]
    assert by_energy == sorted(by_energy)
    by_thickness = [transmission(wall(("concrete", cm, 2.35))) for cm in (10, 36, 37, 38, 100)]
    assert by_thickness == sorted(by_thickness, reverse=True)


def test_no_layers():
    """A barrier without layers is not computed."""
    with pytest.raises(OutsideValidity, match="no layers"):
        transmission(wall())


@pytest.mark.parametrize("cm", [0, -5, float("nan"), float("inf"), None, "10"])
def test_impossible_thickness(cm):
    """A layer that is not thicker than zero is refused."""
    with pytest.raises(ValueError, match="thickness of a layer must be above zero"):
        transmission(wall(("concrete", cm, 2.35)))


@pytest.mark.parametrize("recess", [-1.0, float("nan")])
def test_impossible_recess(recess):
    """A recess is not shallower than nothing."""
    with pytest.raises(ValueError, match="depth of a recess"):
        transmission(wall(("concrete", 10, 2.35)), recess=recess)


@given(cm=st.floats(0.0, 400.0), tvl1=st.floats(20.0, 50.0), less=st.floats(0.0, 5.0))
def test_thickness_inverts_transmission(cm, tvl1, less):
    """The thickness for a transmission has that transmission, below one layer as above."""
    layers = {"tvl1_cm": tvl1, "tvle_cm": tvl1 - less}
    there = wall_transmission(thickness_cm=cm, **layers)
    assert cm == pytest.approx(wall_thickness_cm(transmission=there, **layers), abs=1e-6)


def test_no_wall_needed():
    """A transmission of 1 or more needs no wall, and no wall transmits all."""
    assert 0.0 == wall_thickness_cm(transmission=2.0, tvl1_cm=37, tvle_cm=33)
    assert 1.0 == wall_transmission(thickness_cm=0.0, tvl1_cm=37, tvle_cm=33)


def test_impossible_walls():
    """Walls and layers below zero, and a transmission of zero, are refused."""
    with pytest.raises(ValueError, match="thickness must not be below zero"):
        wall_transmission(thickness_cm=-1.0, tvl1_cm=37, tvle_cm=33)
    with pytest.raises(ValueError, match="layer must be above zero"):
        wall_transmission(thickness_cm=1.0, tvl1_cm=0, tvle_cm=33)
    with pytest.raises(ValueError, match="transmission must be above zero"):
        wall_thickness_cm(transmission=0.0, tvl1_cm=37, tvle_cm=33)
