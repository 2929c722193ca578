"""Tenth-value layers come from the tables, corrected for density, and never from outside them."""

import pytest
import yaml

from readiness.calculations.published_tables import interpolated, published_table
from readiness.calculations.tenth_value_layers import (
    material_named,
    scatter_fraction,
    tenth_value_layers,
)
from readiness.errors import OutsideValidity
from readiness.resources import schema_file

SHIELDING_TABLES = (
    "primary_tenth_value_layers",
    "leakage_tenth_value_layers",
    "scatter_tenth_value_layers",
    "scatter_fractions",
    "shielding_materials",
    "occupancy_factors",
    "use_factors",
    "air_collision_stopping_powers",
)


def layers(material="concrete", density=2.35, radiation="primary", energy=6.0, angle=None):
    return tenth_value_layers(
        material=material,
        density_g_per_cm3=density,
        radiation=radiation,
        energy_mv=energy,
        angle_deg=angle,
    )


@pytest.mark.parametrize(
    ("expected", "radiation", "energy", "angle"),
    [
        ((37, 33), "primary", 6, None),
        ((44, 41), "primary", 15, None),
        ((34, 29), "leakage", 6, None),
        ((36, 33), "leakage", 15, None),
        ((17, 17), "scatter", 6, 90),
        ((44, 44), "scatter", 18, 15),
    ],
)
def test_rows_of_the_tables(expected, radiation, energy, angle):
    """A row of a table is returned as it stands."""
    assert expected == pytest.approx(layers(radiation=radiation, energy=energy, angle=angle))


def test_between_rows():
    """Between two energies the layer lies on the straight line: 9 MV between 6 and 10."""
    assert (40.0, 36.0) == pytest.approx(layers(energy=9))


def test_scatter_between_angles_and_energies():
    """Scatter is interpolated in angle first, then in energy."""
    at_6, at_10 = (26 + 23) / 2, (28 + 25) / 2
    assert (at_6 + at_10) / 2 == pytest.approx(layers(radiation="scatter", energy=8, angle=37.5).tvl1_cm)


@pytest.mark.parametrize(
    ("energy", "radiation", "angle"),
    [(3.9, "primary", None), (18.1, "leakage", None), (6, "scatter", 14), (6, "scatter", 136)],
)
def test_outside_the_tables(energy, radiation, angle):
    """An energy or angle outside a table is refused in words that name its range."""
    with pytest.raises(OutsideValidity, match="the table holds .* from .* to"):
        layers(energy=energy, radiation=radiation, angle=angle)


def test_lighter_concrete_needs_more():
    """Concrete of 2.2 has layers longer by the ratio of densities."""
    assert 37 * 2.35 / 2.2 == pytest.approx(layers(density=2.2).tvl1_cm)


def test_heavy_concrete_and_earth_are_concrete_of_another_density():
    """Heavy concrete and earth take the layers of concrete at their own density."""
    assert 37 * 2.35 / 3.7 == pytest.approx(layers(material="heavy-concrete", density=3.7).tvl1_cm)
    assert 37 * 2.35 / 1.5 == pytest.approx(layers(material="earth", density=1.5).tvl1_cm)


def test_density_of_concrete_must_be_stated():
    """Concrete without a density is not computed; steel and lead have one of their own."""
    with pytest.raises(OutsideValidity, match="density of the layer of concrete is not stated"):
        layers(density=None)
    assert (10, 10) == pytest.approx(layers(material="steel", density=None))
    assert (5.7, 5.7) == pytest.approx(layers(material="lead", density=None, radiation="leakage"))


def test_unknown_material():
    """A material without tenth-value layers is named, with those that have some."""
    with pytest.raises(
        OutsideValidity, match="'brick'; only for concrete, heavy-concrete, earth, steel, lead"
    ):
        layers(material="brick")


def test_impossible_input():
    """A density of zero, an unknown radiation and scatter without an angle are refused."""
    with pytest.raises(ValueError, match="density must be above zero"):
        layers(density=0.0)
    with pytest.raises(ValueError, match="one of primary, leakage, scatter"):
        layers(radiation="neutron")
    with pytest.raises(ValueError, match="needs its scattering angle"):
        layers(radiation="scatter")


def test_scatter_fraction_rows_and_below_6_mv():
    """The row of 6 MV and 90 degrees is exact, and 4 MV takes it too."""
    assert 4.26e-4 == scatter_fraction(energy_mv=6.0, angle_deg=90.0)
    assert 4.26e-4 == scatter_fraction(energy_mv=4.0, angle_deg=90.0)


def test_less_is_scattered_backward():
    """The scatter fraction falls with the angle at every energy."""
    for energy in (6.0, 8.0, 10.0, 15.0, 18.0):
        values = [scatter_fraction(energy_mv=energy, angle_deg=angle) for angle in range(10, 151, 5)]
        assert values == sorted(values, reverse=True)


def test_scatter_fraction_outside():
    """Scatter fractions end at 10 and 150 degrees and at 4 and 18 MV."""
    for energy, angle in ((6.0, 9.0), (6.0, 151.0), (3.0, 90.0), (19.0, 90.0)):
        with pytest.raises(OutsideValidity):
            scatter_fraction(energy_mv=energy, angle_deg=angle)


def test_atomic_numbers():
    """Steel and lead are not of low atomic number, the concretes and earth are."""
    low = {name: material_named(material=name).low_atomic_number for name in ("concrete", "earth", "steel")}
    assert {"concrete": True, "earth": True, "steel": False} == low


@pytest.mark.parametrize("name", SHIELDING_TABLES)
def test_each_table_says_where_it_comes_from(name):
    """Each table names a listed source, a place in it, and that it is from memory unless a row says otherwise."""
    stored = yaml.safe_load(schema_file("tables", f"{name}.yaml").read_text(encoding="utf-8"))
    sources = yaml.safe_load(schema_file("sources.yaml").read_text(encoding="utf-8"))
    assert stored["known"] == "memory"
    assert stored["source"] in sources
    assert stored["title"]
    assert stored["at"]
    for row in published_table(name).records():
        assert row.get("known", "memory") in {"read", "memory"}
        if row.get("seen_in") is not None:
            assert row["known"] == "read"
            assert row["seen_in"] in sources


def test_interpolation_ends():
    """First and last row belong to the table."""
    line = {"known_at": [1.0, 2.0, 4.0], "values": [10.0, 20.0, 0.0], "words": "a number"}
    assert [10.0, 15.0, 20.0, 10.0, 0.0] == [interpolated(at=at, **line) for at in (1.0, 1.5, 2.0, 3.0, 4.0)]
