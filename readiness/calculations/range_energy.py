"""Energies of an electron beam from its depth dose in water."""

from scipy.optimize import brentq

from readiness.calculations.air_transport import HIGHEST_MEV, LOWEST_MEV, pencil_beam_in_air
from readiness.errors import OutsideValidity

REFERENCE_DISTANCE_CM = 100.0  # where R50 and Rp are measured
LOWEST_RATIO, HIGHEST_RATIO = 1.15, 1.32  # Rp/R50 of clean beams is 1.21 to 1.25 (practice)


def most_probable_energy_mev(*, practical_range_cm: float) -> float:
    """
    Return the most probable energy at the surface.

    E_p0 = 0.22 + 1.98 Rp + 0.0025 Rp^2

    Args:
        practical_range_cm: Practical range Rp in water. [cm]

    Returns:
        Most probable energy at the surface. [MeV]

    Raises:
        ValueError: If the range is not positive.

    Valid for: 1 to 50 MeV, broad beams in water.
    Assumes: range-energy relation of monoenergetic beams.
    Source: tg-25, icru-35 (memory).
    """
    if practical_range_cm <= 0:
        raise ValueError("a practical range must be positive")
    return 0.22 + 1.98 * practical_range_cm + 0.0025 * practical_range_cm**2


def mean_energy_mev(*, r50_cm: float) -> float:
    """
    Return the mean energy at the surface of an ordinary beam at 100 cm.

    E_0 = 2.33 R50

    Args:
        r50_cm: Depth of half dose R50 in water. [cm]

    Returns:
        Mean energy at the surface. [MeV]

    Raises:
        ValueError: If the depth is not positive.
        OutsideValidity: If R50 is below 2 cm, where the relation overestimates.

    Valid for: R50 of 2 cm and more; behind a degrader use mean_energy_at_plane_mev or Rp.
    Assumes: the relation was found for 5 to 30 MeV.
    Source: tg-25, tg-70, icru-35 (memory).
    """
    if r50_cm <= 0:
        raise ValueError("R50 must be positive")
    if r50_cm < 2.0:
        raise OutsideValidity(f"2.33 R50 does not hold at R50 = {r50_cm:g} cm; it needs 2 cm or more")
    return 2.33 * r50_cm


def mean_energy_at_plane_mev(*, r50_cm: float) -> float:
    """
    Return the mean energy of a beam whose R50 was measured at the treatment plane.

    E_0 = 0.656 + 2.059 R50 + 0.022 R50^2

    Args:
        r50_cm: Depth of half dose R50 in water at the plane. [cm]

    Returns:
        Mean energy at the surface. [MeV]

    Raises:
        ValueError: If the depth is not positive.

    Valid for: R50 from about 0.8 cm; 2.33 R50 is out of its range there.
    Assumes: broad beam.
    Source: icru-35 (memory).
    """
    if r50_cm <= 0:
        raise ValueError("R50 must be positive")
    return 0.656 + 2.059 * r50_cm + 0.022 * r50_cm**2


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

    def excess(energy: float) -> float:
        """Return how much a source energy exceeds the wanted one at 100 cm."""
        beam = pencil_beam_in_air(
            energy_at_source_mev=energy,
            path_cm=REFERENCE_DISTANCE_CM,
            pressure_kpa=pressure_kpa,
            temperature_celsius=temperature_celsius,
        )
        return beam.mean_energy_mev - surface_energy_mev

    if excess(LOWEST_MEV) > 0 or excess(HIGHEST_MEV) < 0:
        raise OutsideValidity(
            f"{surface_energy_mev:.3g} MeV at 100 cm is outside the beam model "
            f"({LOWEST_MEV:g} to {HIGHEST_MEV:g} MeV at the source)"
        )
    return float(brentq(excess, LOWEST_MEV, HIGHEST_MEV, xtol=1e-6))


def range_contradiction(*, r50_cm: float, practical_range_cm: float) -> str:
    """
    Return what is suspicious about R50 and Rp of one beam, or nothing.

    Args:
        r50_cm: Depth of half dose R50. [cm]
        practical_range_cm: Practical range Rp. [cm]

    Returns:
        A sentence that names the suspicion, or an empty text.

    Raises:
        ValueError: If a depth is not positive.

    Valid for: clinical beams at 100 cm, 4 to 25 MeV, where Rp/R50 is 1.21 to 1.25.
    Assumes: a ratio outside 1.15 to 1.32 is a mix-up or a wrong reading.
    Source: common practice (practice).
    """
    if r50_cm <= 0 or practical_range_cm <= 0:
        raise ValueError("R50 and Rp must be positive")
    ratio = practical_range_cm / r50_cm
    if ratio < 1:
        return f"Rp {practical_range_cm:g} cm is smaller than R50 {r50_cm:g} cm: are the two exchanged?"
    if not LOWEST_RATIO <= ratio <= HIGHEST_RATIO:
        return (
            f"Rp/R50 is {ratio:.2f}, {LOWEST_RATIO} to {HIGHEST_RATIO} is expected: "
            "are both from the same beam, and both in cm?"
        )
    return ""
