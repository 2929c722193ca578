"""Measured transmission and backscatter of a patient shield."""

from collections.abc import Sequence
from dataclasses import dataclass

from readiness.errors import OutsideValidity
from readiness.units import printed

BEHIND, BEAM_SIDE = "behind", "beam-side"
LEAST_BACKSCATTER_PERCENT = -10.0  # readings scatter
LARGEST_BACKSCATTER_PERCENT = 100.0  # no metal doubles the dose on the side of the beam


@dataclass(frozen=True)
class ShieldTransmission:
    """
    The worst reading decides each number; None where no reading was taken there.

    ``transmission_percent`` is dose behind the shield over dose without it; ``backscatter_percent`` is the
    rise of dose on the side of the beam.
    """

    transmission_percent: float | None
    backscatter_percent: float | None
    readings: int
    remarks: tuple[str, ...]


def analyse_shield_transmission(
    *, places: Sequence[str], with_shield_cgy: Sequence[float], without_shield_cgy: Sequence[float]
) -> ShieldTransmission:
    """
    Return transmission and backscatter of a shield from readings with and without it.

    T = D_with / D_without behind;  b = D_with / D_without - 1 on the side of the beam

    Args:
        places: "behind" or "beam-side", a word per reading.
        with_shield_cgy: Dose with the shield. [cGy]
        without_shield_cgy: Dose at the same point without it. [cGy]

    Returns:
        The largest transmission and backscatter in per cent, and remarks.

    Raises:
        ValueError: If lengths differ or a word is not one of the two.
        OutsideValidity: If a reading cannot be one.

    Valid for: readings with and without the shield for the same MU.
    Assumes: nothing else changes between the two readings.
    Source: definition (derived).
    """
    if not set(places) <= {BEHIND, BEAM_SIDE}:
        raise ValueError(f"each reading was taken {BEHIND} or {BEAM_SIDE}")
    rows = list(zip(places, with_shield_cgy, without_shield_cgy, strict=True))
    if not rows or any(dose < 0 or free <= 0 for _, dose, free in rows):
        raise OutsideValidity("a shield needs readings, none negative, and a dose without the shield above 0")
    behind = [100 * dose / free for place, dose, free in rows if place == BEHIND]
    toward = [100 * (dose / free - 1) for place, dose, free in rows if place == BEAM_SIDE]
    said = []
    if not behind:
        said.append("No reading behind the shield: its transmission is not known.")
    if not toward:
        said.append("No reading on the side of the beam: its backscatter is not known.")
    if behind and max(behind) > 100:
        said.append(f"A transmission of {printed(max(behind), 3)} %: were the two readings exchanged?")
    if toward and not LEAST_BACKSCATTER_PERCENT <= min(toward) <= max(toward) <= LARGEST_BACKSCATTER_PERCENT:
        said.append("A backscatter that no shield has: were readings exchanged or taken behind the shield?")
    return ShieldTransmission(max(behind, default=None), max(toward, default=None), len(rows), tuple(said))
