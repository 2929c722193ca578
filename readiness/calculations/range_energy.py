"""Energies from the ranges of a depth dose, and ranges that contradict each other."""

from readiness.errors import OutsideValidity
from readiness.units import printed

LOWEST_R50_CM = 2.0  # 2.33 R50 is meant for 5 MeV and more
HIGHEST_R50_CM = 13.0
LARGEST_ENERGY_GAP_MEV = 1.5  # most probable less mean; about 0.5 MeV is usual
LARGEST_RANGE_RATIO = 1.8  # R_p over R_50; 1.2 to 1.3 at 100 cm, up to 1.7 behind a thick degrader


def mean_energy_mev(*, r50_cm: float) -> float:
    """
    Return the mean energy at the surface from the half-value depth.

    E_0 = 2.33 R_50

    Args:
        r50_cm: Depth in water at which the dose has fallen to half. [cm]

    Returns:
        Mean energy at the phantom's surface. [MeV]

    Raises:
        ValueError: If the depth is not more than 0.
        OutsideValidity: If the depth is outside 2 to 13 cm, where the factor does not hold.

    Valid for: depth dose of a broad beam, R50 of 2 to 13 cm.
    Assumes: the surface at about 100 cm from the source.
    Source: tg-25, icru-35 (memory).
    """
    _positive(r50_cm)
    if not LOWEST_R50_CM <= r50_cm <= HIGHEST_R50_CM:
        raise OutsideValidity(
            f"2.33 R50 holds for R50 of {LOWEST_R50_CM:g} to {HIGHEST_R50_CM:g} cm, not {printed(r50_cm)} "
            "cm; use the practical range, or the formula for low energies"
        )
    return 2.33 * r50_cm


def low_mean_energy_mev(*, r50_cm: float) -> float:
    """
    Return the mean energy at the surface from a half-value depth that is too small for the factor 2.33.

    E_0 = 0.656 + 2.059 R_50 + 0.022 R_50^2

    Args:
        r50_cm: Depth in water at which the dose has fallen to half. [cm]

    Returns:
        Mean energy at the phantom's surface. [MeV]

    Raises:
        ValueError: If the depth is not more than 0.

    Valid for: depth dose, R50 of about 0.5 cm and more.
    Assumes: the surface at about 100 cm from the source.
    Source: trs-381 (memory).
    """
    _positive(r50_cm)
    return 0.656 + 2.059 * r50_cm + 0.022 * r50_cm**2


def most_probable_energy_mev(*, rp_cm: float) -> float:
    """
    Return the most probable energy at the surface from the practical range.

    E_p0 = 0.22 + 1.98 R_p + 0.0025 R_p^2

    Args:
        rp_cm: Practical range in water. [cm]

    Returns:
        Most probable energy at the phantom's surface. [MeV]

    Raises:
        ValueError: If the range is not more than 0.

    Valid for: broad beams of 1 to 50 MeV.
    Assumes: water.
    Source: tg-25, icru-35 (memory).
    """
    _positive(rp_cm)
    return 0.22 + 1.98 * rp_cm + 0.0025 * rp_cm**2


def range_contradiction(*, r50_cm: float, rp_cm: float) -> str:
    """
    Return what contradicts between a half-value depth and a practical range, or nothing.

    Args:
        r50_cm: Depth in water at which the dose has fallen to half. [cm]
        rp_cm: Practical range in water. [cm]

    Returns:
        "" if both can belong to one beam; otherwise a sentence that names the suspicion.

    Raises:
        ValueError: If a depth is not more than 0.

    Valid for: electron beams of 2 to 25 MeV, in front of or behind a degrader.
    Assumes: the most probable energy lies up to 1.5 MeV above the mean.
    Source: tg-25 (memory) for the energies; the bounds are ours (derived).
    """
    _positive(r50_cm, rp_cm)
    both = f"R50 {printed(r50_cm)} cm and Rp {printed(rp_cm)} cm"
    ratio = rp_cm / r50_cm
    for factor, words in ((10.0, "Rp looks like millimetres"), (0.1, "R50 looks like millimetres")):
        if factor <= ratio <= LARGEST_RANGE_RATIO * factor:
            return f"{both} contradict each other: {words} under a name in cm."
    if ratio <= 1:
        return f"{both} contradict each other: the practical range is the larger one; were they exchanged?"
    mean = 2.33 * r50_cm if r50_cm >= LOWEST_R50_CM else low_mean_energy_mev(r50_cm=r50_cm)
    probable = most_probable_energy_mev(rp_cm=rp_cm)
    lowest = mean if r50_cm >= LOWEST_R50_CM else 0.0
    if lowest <= probable <= mean + LARGEST_ENERGY_GAP_MEV and ratio <= LARGEST_RANGE_RATIO:
        return ""
    return (
        f"{both} contradict each other: they give a mean energy of {printed(mean, 3)} MeV and a most "
        f"probable energy of {printed(probable, 3)} MeV."
    )


def _positive(*depths: float) -> None:
    """Refuse depths that are not more than 0."""
    if not all(depth > 0 for depth in depths):
        raise ValueError("a range is more than 0 cm")
