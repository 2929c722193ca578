"""Energy at the source from the energy at 100 cm, and energy at a depth in water."""

from readiness.calculations.air_transport import HIGHEST_MEV, LOWEST_MEV, pencil_beam_in_air
from readiness.errors import OutsideValidity

REFERENCE_DISTANCE_CM = 100.0  # where R50 and Rp are measured
REPEATS, SETTLED_MEV = 20, 1e-6  # the loss hardly depends on the energy, so that few repeats suffice


def most_probable_energy_at_depth_mev(*, surface_energy_mev: float, depth_cm: float) -> float:
    """
    Return the most probable energy at a depth in water.

    E_p(z) = E_p0 (1 - z/Rp)

    Args:
        surface_energy_mev: Most probable energy at the surface. [MeV]
        depth_cm: Depth. [cm]

    Returns:
        Most probable energy at the depth. [MeV]

    Raises:
        ValueError: If the energy is too low to have a range or the depth is negative.
        OutsideValidity: If the depth lies beyond the practical range.

    Valid for: depths up to Rp.
    Assumes: linear loss of energy.
    Source: tg-25, icru-35 (memory).
    """
    if depth_cm < 0:
        raise ValueError("a depth cannot be negative")
    reach = practical_range_of_energy_cm(surface_energy_mev=surface_energy_mev)
    if depth_cm > reach:
        raise OutsideValidity(f"{depth_cm:g} cm lies beyond the practical range of {reach:.2f} cm")
    return surface_energy_mev * (1 - depth_cm / reach)


def practical_range_of_energy_cm(*, surface_energy_mev: float) -> float:
    """
    Return the practical range in water of a most probable energy.

    Rp = (sqrt(1.98^2 + 4 0.0025 (E_p0 - 0.22)) - 1.98)/(2 0.0025)

    Args:
        surface_energy_mev: Most probable energy at the surface. [MeV]

    Returns:
        Practical range Rp. [cm]

    Raises:
        ValueError: If the energy is not above 0.22 MeV.

    Valid for: 1 to 50 MeV.
    Assumes: the inverse of the range-energy relation.
    Source: tg-25, icru-35 (memory), solved for Rp (derived).
    """
    if surface_energy_mev <= 0.22:
        raise ValueError("the relation needs more than 0.22 MeV")
    root: float = (1.98**2 + 4 * 0.0025 * (surface_energy_mev - 0.22)) ** 0.5
    return (root - 1.98) / (2 * 0.0025)


def energy_at_source_mev(
    *, surface_energy_mev: float, pressure_kpa: float, temperature_celsius: float
) -> float:
    """
    Return the energy at the source of a beam whose energy is known at 100 cm: the air's loss added back.

    Args:
        surface_energy_mev: Energy at 100 cm, mean or most probable; the result is of the same kind. [MeV]
        pressure_kpa: Air pressure where the depth dose was measured. [kPa]
        temperature_celsius: Air temperature there. [°C]

    Returns:
        Energy at the source, about 0.24 MeV more at sea level. [MeV]

    Raises:
        ValueError: If the energy is not positive.
        OutsideValidity: If the result lies outside 3 to 13 MeV.

    Valid for: 3 to 13 MeV at the source.
    Assumes: mean and most probable energy lose the same.
    Source: icru-37 (memory) for the stopping power; derived.
    """
    if surface_energy_mev <= 0:
        raise ValueError("an energy must be positive")

    energy = min(max(surface_energy_mev, LOWEST_MEV), HIGHEST_MEV)
    for _ in range(REPEATS):
        beam = pencil_beam_in_air(
            energy_at_source_mev=energy,
            path_cm=REFERENCE_DISTANCE_CM,
            pressure_kpa=pressure_kpa,
            temperature_celsius=temperature_celsius,
        )
        before, energy = energy, surface_energy_mev + energy - beam.mean_energy_mev
        if not LOWEST_MEV <= energy <= HIGHEST_MEV:
            raise OutsideValidity(
                f"{surface_energy_mev:.3g} MeV at 100 cm is outside the beam model "
                f"({LOWEST_MEV:g} to {HIGHEST_MEV:g} MeV at the source)"
            )
        if abs(energy - before) <= SETTLED_MEV:
            break
    return energy
