"""What decides a field at the plane, as one record."""

from dataclasses import dataclass, replace

from readiness.calculations.air_density import air_density_g_per_cm3
from readiness.errors import OutsideValidity

STEEPEST_TILT_DEG = 25.0
NARROWEST_SPREAD, WIDEST_SPREAD = 0.02, 20.0  # tangents; the widest is a flat field


@dataclass(frozen=True)
class FieldSetup:
    """
    One beam in one room: everything but plane distance and tilt.

    ``foil_spread`` is the standard deviation of the tangents; ``scatter_scale`` multiplies the width of the
    scatter in air and is 1 but for the study of its uncertainty.
    """

    energy_at_source_mev: float
    foil_spread: float
    opening_cm: float
    collimator_deg: float
    degrader_material: str | None
    degrader_thickness_cm: float
    degrader_gap_cm: float
    air_density_g_per_cm3: float
    source_axis_distance_cm: float
    scatter_scale: float = 1.0

    def but(self, **changes: float) -> "FieldSetup":
        """Return the setup with some numbers changed."""
        return replace(self, **changes)  # type: ignore[arg-type]

    def without_degrader(self) -> "FieldSetup":
        """Return the setup with the degrader taken away."""
        return replace(self, degrader_material=None, degrader_thickness_cm=0.0, degrader_gap_cm=0.0)


def field_setup(
    *,
    energy_at_source_mev: float,
    foil_spread: float,
    opening_cm: float,
    collimator_deg: float,
    degrader_material: str | None,
    degrader_thickness_cm: float | None,
    degrader_gap_cm: float | None,
    pressure_kpa: float,
    temperature_celsius: float,
    source_axis_distance_cm: float,
) -> FieldSetup:
    """
    Return the record of a beam in a room after refusing what is impossible.

    Args:
        energy_at_source_mev: Energy at the source, mean or most probable as the department decided. [MeV]
        foil_spread: Standard deviation of the tangents behind the foils; 0.15 to 0.25 is usual. [1]
        opening_cm: Side of the square field at 100 cm. [cm]
        collimator_deg: Collimator rotation. [°]
        degrader_material: Name of the material, none for no degrader.
        degrader_thickness_cm: Thickness of the degrader; none or 0 for no degrader. [cm]
        degrader_gap_cm: From its exit face to the plane; none for no degrader. [cm]
        pressure_kpa: Air pressure on the site. [kPa]
        temperature_celsius: Air temperature. [°C]
        source_axis_distance_cm: From the source to the isocentre. [cm]

    Returns:
        The record.

    Raises:
        ValueError: If a number is impossible.
        OutsideValidity: If the foil spread lies outside 0.02 to 20.

    Valid for: square fields without an applicator.
    Assumes: the foil's Gaussian is centred and round.
    Source: our own model.
    """
    if opening_cm <= 0 or source_axis_distance_cm <= 0:
        raise ValueError("opening and source-axis distance must be positive")
    thickness, gap = degrader_thickness_cm or 0.0, degrader_gap_cm or 0.0
    if thickness < 0 or gap < 0:
        raise ValueError("a degrader's thickness and gap cannot be negative")
    if thickness > 0 and (degrader_material is None or degrader_gap_cm is None):
        raise ValueError("a degrader needs a material and a gap")
    if not NARROWEST_SPREAD <= foil_spread <= WIDEST_SPREAD:
        raise OutsideValidity(
            f"a foil spread is a standard deviation of tangents, 0.15 to 0.25 as a rule, not {foil_spread:g}"
        )
    return FieldSetup(
        energy_at_source_mev=energy_at_source_mev,
        foil_spread=foil_spread,
        opening_cm=opening_cm,
        collimator_deg=collimator_deg,
        degrader_material=degrader_material,
        degrader_thickness_cm=thickness,
        degrader_gap_cm=gap,
        air_density_g_per_cm3=air_density_g_per_cm3(
            pressure_kpa=pressure_kpa, temperature_celsius=temperature_celsius
        ),
        source_axis_distance_cm=source_axis_distance_cm,
    )
