"""Density of the air on the site; thinner air scatters less."""

from readiness.calculations.electron_materials import electron_material
from readiness.errors import OutsideValidity

REFERENCE_PRESSURE_KPA = 101.325
REFERENCE_TEMPERATURE_CELSIUS = 20.0
ZERO_CELSIUS_K = 273.15


def air_density_g_per_cm3(*, pressure_kpa: float, temperature_celsius: float) -> float:
    """
    Return the density of dry air.

    rho = 1.20479e-3 (p/101.325) (293.15/(273.15 + t))

    Args:
        pressure_kpa: Air pressure on the site, not reduced to sea level. [kPa]
        temperature_celsius: Air temperature. [°C]

    Returns:
        Density. [g/cm³]

    Raises:
        ValueError: If the pressure is negative.
        OutsideValidity: If the temperature is none that a treatment room has (0 to 50).

    Valid for: treatment rooms at any altitude; a pressure of zero means no air.
    Assumes: ideal gas, dry: humidity lowers it by up to 1 %.
    Source: icru-37 (memory) for 1.20479e-3; the scaling is the ideal gas law.
    """
    if pressure_kpa < 0:
        raise ValueError("air pressure cannot be negative")
    if not 0 <= temperature_celsius <= 50:
        raise OutsideValidity(f"a treatment room has 0 to 50 °C, not {temperature_celsius:g}")
    warmth = (ZERO_CELSIUS_K + REFERENCE_TEMPERATURE_CELSIUS) / (ZERO_CELSIUS_K + temperature_celsius)
    return electron_material(name="air").density_g_per_cm3 * pressure_kpa / REFERENCE_PRESSURE_KPA * warmth
