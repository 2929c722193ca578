"""Which part of their range electrons spend in air and degrader before they reach the plane."""

from readiness.calculations.electron_materials import electron_material
from readiness.calculations.stopping_power import csda_range

STATED_AT_CM = 100.0  # electron beams are stated at this distance from the source


def range_taken(
    *,
    energy_at_100_cm_mev: float,
    plane_distance_cm: float,
    degrader_material: str | None,
    degrader_thickness_cm: float,
) -> float:
    """
    Return the part of their range that electrons spend before the plane; from 1 on none arrives.

    f = rho_air (D - 100)/R_air + rho t/R, with ranges R at the energy at 100 cm

    Args:
        energy_at_100_cm_mev: Most probable energy at 100 cm from the source. [MeV]
        plane_distance_cm: From the nominal source to the plane, D. [cm]
        degrader_material: Name of the material, none for no degrader.
        degrader_thickness_cm: Thickness of the degrader, t; 0 for none. [cm]

    Returns:
        Part of the range. [1]

    Raises:
        ValueError: If a number is negative or the energy is not above zero.
        OutsideValidity: If the tables do not hold the material or the energy.

    Valid for: telling whether electrons arrive at all; energies up to 50 MeV.
    Assumes: straight paths without straggling, air at 101.3 kPa and 20 degrees, ranges in fixed proportion.
    Source: icru-37 (memory) for the ranges; derived.
    """
    if plane_distance_cm < STATED_AT_CM or degrader_thickness_cm < 0:
        raise ValueError("a plane lies beyond 100 cm, and a thickness is not negative")
    air = electron_material(name="air").density_g_per_cm3 * (plane_distance_cm - STATED_AT_CM)
    taken = air / csda_range(material="air", energy_mev=energy_at_100_cm_mev)
    if degrader_material is not None and degrader_thickness_cm > 0:
        sheet = electron_material(name=degrader_material).density_g_per_cm3 * degrader_thickness_cm
        taken += sheet / csda_range(material=degrader_material, energy_mev=energy_at_100_cm_mev)
    return taken
