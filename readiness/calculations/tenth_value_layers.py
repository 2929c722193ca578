"""Tenth-value layers per material, radiation and energy: interpolated inside the tables, refused outside."""

from functools import cache
from typing import NamedTuple, cast

from readiness.calculations.published_tables import interpolated, published_table
from readiness.errors import OutsideValidity

RADIATIONS = ("primary", "leakage", "scatter")


class TenthValueLayers(NamedTuple):
    """First and equilibrium tenth-value layer of one material."""

    tvl1_cm: float
    tvle_cm: float


class Material(NamedTuple):
    """What the tables know of a shielding material."""

    layers_of: str
    reference_density_g_per_cm3: float
    density_must_be_stated: bool
    low_atomic_number: bool


def material_named(*, material: str) -> Material:
    """
    Return what the tables know of a shielding material.

    Args:
        material: Such as ``concrete``, ``heavy-concrete``, ``earth``, ``steel`` or ``lead``.

    Returns:
        Whose tenth-value layers it takes, the density for which they hold, whether its density must be
        stated, and whether it is of low atomic number.

    Raises:
        OutsideValidity: If no table knows the material.

    Source: ncrp-151, Tables B.2 and B.7 (memory).
    """
    known = _materials()
    if material not in known:
        raise OutsideValidity(f"no tenth-value layers for {material!r}; only for {', '.join(known)}")
    return known[material]


def tenth_value_layers(
    *,
    material: str,
    density_g_per_cm3: float | None,
    radiation: str,
    energy_mv: float,
    angle_deg: float | None,
) -> TenthValueLayers:
    """
    Return first and equilibrium tenth-value layer of a material, corrected for its density.

    TVL = TVL(reference density) x reference density / density

    Leakage and scatter have tables for concrete only; steel and lead take their primary layers there, which
    are longer, because leakage and scatter are softer.

    Args:
        material: Such as ``concrete``, ``heavy-concrete``, ``earth``, ``steel`` or ``lead``.
        density_g_per_cm3: Of the layer; None takes the reference density of steel or lead. [g/cm³]
        radiation: ``primary``, ``leakage`` or ``scatter``.
        energy_mv: End point of the x rays. [MV]
        angle_deg: Scattering angle, for ``scatter`` only. [deg]

    Returns:
        Both layers; they are equal for scatter. [cm]

    Raises:
        ValueError: If the density is not above zero, or the radiation is none of the three.
        OutsideValidity: If the material is unknown, the density of concrete or earth is not stated, or energy
            or angle lie outside the tables.

    Valid for: 4 to 18 MV; scatter from 15 to 135 degrees.
    Assumes: attenuation in proportion to density.
    Source: ncrp-151, Tables B.2, B.5a, B.7 (memory; rows seen quoted are marked in the tables).
    """
    kind = material_named(material=material)
    reference = kind.reference_density_g_per_cm3
    if density_g_per_cm3 is None:
        if kind.density_must_be_stated:
            raise OutsideValidity(f"the density of the layer of {material} is not stated")
        density_g_per_cm3 = reference
    if not density_g_per_cm3 > 0.0:
        raise ValueError(f"a density must be above zero, not {density_g_per_cm3:g}")
    layers = _at_reference_density(kind.layers_of, radiation, energy_mv, angle_deg)
    ratio = reference / density_g_per_cm3
    return TenthValueLayers(layers.tvl1_cm * ratio, layers.tvle_cm * ratio)


@cache
def scatter_fraction(*, energy_mv: float, angle_deg: float) -> float:
    """
    Return the fraction of the dose at the patient that is scattered to 1 m, for a field of 400 cm2.

    Args:
        energy_mv: End point of the x rays; below 6 MV the values of 6 MV are taken. [MV]
        angle_deg: Scattering angle. [deg]

    Returns:
        Scatter fraction a. [1]

    Raises:
        OutsideValidity: If the energy lies outside 4 to 18 MV or the angle outside 10 to 150 degrees.

    Valid for: 4 to 18 MV, 10 to 150 degrees.
    Source: ncrp-151, Table B.4 (memory).
    """
    if not 4.0 <= energy_mv <= 18.0:
        raise OutsideValidity(f"the table holds an energy in MV from 4 to 18, not {energy_mv:g}")
    return _over_energy_and_angle("scatter_fractions", "scatter_fraction", max(6.0, energy_mv), angle_deg)


@cache
def _materials() -> dict[str, Material]:
    """Return the materials by name, in the order of the table."""
    return {
        str(row[0]): Material(str(row[1]), float(cast(float, row[2])), bool(row[3]), bool(row[4]))
        for row in published_table("shielding_materials").rows
    }


@cache
def _at_reference_density(
    layers_of: str, radiation: str, energy_mv: float, angle_deg: float | None
) -> TenthValueLayers:
    """Return the tabulated layers, before any correction for density."""
    if radiation not in RADIATIONS:
        raise ValueError(f"radiation is one of {', '.join(RADIATIONS)}, not {radiation!r}")
    if radiation == "scatter" and layers_of == "concrete":
        if angle_deg is None:
            raise ValueError("scattered radiation needs its scattering angle")
        layer = _over_energy_and_angle("scatter_tenth_value_layers", "tvl_cm", energy_mv, angle_deg)
        return TenthValueLayers(layer, layer)
    if radiation == "leakage" and layers_of == "concrete":
        rows = list(published_table("leakage_tenth_value_layers").records())
    else:
        table = published_table("primary_tenth_value_layers")
        rows = [row for row in table.records() if row["material"] == layers_of]
    energies = [float(cast(float, row["energy_mv"])) for row in rows]
    first, later = (
        interpolated(
            at=energy_mv,
            known_at=energies,
            values=[float(cast(float, row[column])) for row in rows],
            words="an energy in MV",
        )
        for column in ("tvl1_cm", "tvle_cm")
    )
    return TenthValueLayers(first, later)


def _over_energy_and_angle(name: str, column: str, energy_mv: float, angle_deg: float) -> float:
    """Return a value of a table over energy and angle, straight between its rows in both."""
    by_energy: dict[float, dict[float, float]] = {}
    for row in published_table(name).records():
        energy, angle = float(cast(float, row["energy_mv"])), float(cast(float, row["angle_deg"]))
        by_energy.setdefault(energy, {})[angle] = float(cast(float, row[column]))
    at_angle = [
        interpolated(
            at=angle_deg,
            known_at=list(angles),
            values=list(angles.values()),
            words="a scattering angle in degrees",
        )
        for angles in by_energy.values()
    ]
    return interpolated(at=energy_mv, known_at=list(by_energy), values=at_angle, words="an energy in MV")
