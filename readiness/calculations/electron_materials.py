"""What electrons meet: air, water, degraders and lead, as tables describe them."""

from dataclasses import dataclass
from functools import cache

from readiness.calculations.published_tables import published_table
from readiness.errors import OutsideValidity


@dataclass(frozen=True)
class Element:
    """One element of a material and its part by weight."""

    atomic_number: int
    atomic_mass: float
    weight_fraction: float


@dataclass(frozen=True)
class ElectronMaterial:
    """A material as stopping power and scattering power need it; symbols as in sternheimer-1984."""

    name: str
    density_g_per_cm3: float
    mean_excitation_ev: float
    z_over_a: float
    effect_c: float
    effect_x0: float
    effect_x1: float
    effect_a: float
    effect_m: float
    effect_delta0: float
    radiative_constant: float
    radiative_slope: float
    elements: tuple[Element, ...]

    @property
    def scattering_sum(self) -> float:
        """Sum of w Z(Z+1)/A over the elements."""
        return sum(
            part.weight_fraction * part.atomic_number * (part.atomic_number + 1) / part.atomic_mass
            for part in self.elements
        )


@cache
def electron_material(*, name: str) -> ElectronMaterial:
    """
    Return one material by its name.

    Args:
        name: air, water, pmma, polycarbonate, polyethylene, carbon, aluminium or lead.

    Returns:
        The material with its elements.

    Raises:
        OutsideValidity: If the tables do not hold the material.

    Valid for: the materials of schemas/tables/electron_materials.yaml.
    Assumes: nominal density and composition.
    Source: sternheimer-1984 and icru-37 (memory).
    """
    known = published_table("electron_materials")
    for row in known.records():
        if row["material"] == name:
            numbers = {key: float(entry) for key, entry in row.items() if isinstance(entry, int | float)}
            return ElectronMaterial(name=name, elements=_elements(name), **numbers)
    names = ", ".join(str(entry) for entry in known.column("material"))
    raise OutsideValidity(f"the beam model knows {names}, not {name!r}")


def _elements(name: str) -> tuple[Element, ...]:
    """Return the elements of a material."""
    rows = published_table("elemental_compositions").rows
    return tuple(
        Element(int(number), float(mass), float(part))
        for material, number, mass, part in rows
        if material == name and number is not None and mass is not None and part is not None
    )
