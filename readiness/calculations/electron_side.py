"""What the electrons ask of a barrier: a first layer of low atomic number, and a remark on neutrons."""

from dataclasses import dataclass

from readiness.calculations.tenth_value_layers import material_named
from readiness.errors import OutsideValidity
from readiness.quantities import Table

YIELD_COEFFICIENT = 6e-4  # per MeV and atomic number (attix-1986, memory)
NEUTRON_REMARK_FROM_MEV = 10.0


@dataclass(frozen=True)
class FirstLayer:
    """The first thing behind the patient, as the beam meets it."""

    material: str
    low_atomic_number: bool
    low_atomic_number_cm: float


def first_layer(*, layers: Table) -> FirstLayer:
    """
    Return the first layer that the beam meets, and how much of low atomic number stands before others.

    Steel or lead first turns two to six times more of the electrons' energy into x rays than concrete does.

    Args:
        layers: From inside outwards: material, thickness_cm, density_g_per_cm3.

    Returns:
        The first material, whether its atomic number is low, and the thickness before the first other one.

    Raises:
        OutsideValidity: If there are no layers or a material is unknown.

    Source: derived from the radiation yield (memory).
    """
    if not layers.rows:
        raise OutsideValidity("the barrier has no layers: state material, thickness and density of each")
    materials = [str(entry) for entry in layers.column("material")]
    low = 0.0
    for material, thickness in zip(materials, layers.column("thickness_cm"), strict=True):
        if not material_named(material=material).low_atomic_number:
            break
        low += 0.0 if thickness is None or isinstance(thickness, str) else float(thickness)
    return FirstLayer(materials[0], material_named(material=materials[0]).low_atomic_number, low)


def needs_neutron_remark(*, energy_mev: float) -> bool:
    """
    Return whether neutrons deserve a remark; they are ignored at 4 to 9 MeV.

    Args:
        energy_mev: Of the electrons. [MeV]

    Returns:
        Whether the energy is 10 MeV or more.

    Raises:
        ValueError: If the energy is not above zero.

    Source: thresholds of tungsten 6.2, lead 6.7, copper 9.9, iron 11.2 MeV (memory).
    """
    if not energy_mev > 0.0:
        raise ValueError(f"an energy must be above zero, not {energy_mev:g}")
    return energy_mev >= NEUTRON_REMARK_FROM_MEV
