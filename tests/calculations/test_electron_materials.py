"""Materials that electrons meet."""

import pytest

from readiness.calculations.electron_materials import electron_material
from readiness.calculations.published_tables import published_table
from readiness.errors import OutsideValidity

NAMES = [str(entry) for entry in published_table("electron_materials").column("material")]


@pytest.mark.parametrize("name", NAMES)
def test_elements_of_each_material_add_up(name: str) -> None:
    """The weight fractions of every material add up to one, and give its Z/A."""
    material = electron_material(name=name)
    assert sum(part.weight_fraction for part in material.elements) == pytest.approx(1, abs=2e-5)
    z_over_a = sum(part.weight_fraction * part.atomic_number / part.atomic_mass for part in material.elements)
    assert z_over_a == pytest.approx(material.z_over_a, rel=5e-4)


def test_unknown_material_is_refused_with_the_known_ones() -> None:
    """A material that the tables do not hold is refused, and the message lists those that they do."""
    with pytest.raises(OutsideValidity, match="knows air, water, pmma.*not 'wood'"):
        electron_material(name="wood")


@pytest.mark.parametrize("name", ["pmma", "polycarbonate", "polyethylene", "carbon", "aluminium"])
def test_every_degrader_that_a_folder_can_name_is_known(name: str) -> None:
    """The words that equipment.yaml accepts for a degrader are materials here."""
    assert electron_material(name=name).density_g_per_cm3 > 0.5
