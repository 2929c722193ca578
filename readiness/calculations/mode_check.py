"""Monitor and dose in the delivery mode: linearity over thousands of MU, repeats, both monitor channels."""

from collections import defaultdict
from collections.abc import Sequence
from dataclasses import dataclass
from math import sqrt

import numpy as np

from readiness.errors import OutsideValidity
from readiness.units import printed

FEWEST_STEPS = 3


@dataclass(frozen=True)
class ModeCheck:
    """
    Behaviour of monitor and dose; None where the readings do not show it.

    ``linearity_percent`` is the largest departure of dose per MU from that of the largest number of MU,
    ``end_effect_mu`` the MU delivered beyond those set, ``repeat_sd_percent`` the standard deviation of a
    repeat, ``backup_percent`` the largest difference between both monitor channels.
    """

    linearity_percent: float | None
    end_effect_mu: float | None
    repeat_sd_percent: float | None
    backup_percent: float | None
    largest_mu: float
    remarks: tuple[str, ...]


def analyse_mode_check(
    *,
    mu: Sequence[float],
    doses_cgy: Sequence[float],
    backup_mu: Sequence[float | None],
    largest_planned_mu: float | None,
) -> ModeCheck:
    """
    Return linearity, end effect, repeatability and agreement of both monitor channels.

    dose = slope (MU + end effect); least squares

    Args:
        mu: MU set for each reading. [MU]
        doses_cgy: Dose read at fixed geometry. [cGy]
        backup_mu: MU shown by the second channel, None where not noted. [MU]
        largest_planned_mu: Largest number of MU in one beam that is planned, None if not known. [MU]

    Returns:
        The four numbers and remarks.

    Raises:
        ValueError: If lengths differ.
        OutsideValidity: If there are no readings or one is not more than 0.

    Valid for: readings at one geometry and rate.
    Assumes: equal relative scatter of the readings.
    Source: practice; aapm-23 (memory) for checking the mode at its own MU.
    """
    rows = list(zip(mu, doses_cgy, backup_mu, strict=True))
    if not rows or any(set_mu <= 0 or dose <= 0 for set_mu, dose, _ in rows):
        raise OutsideValidity("a check of the mode needs readings, with MU and doses above 0")
    by_mu: dict[float, list[float]] = defaultdict(list)
    for set_mu, dose, _ in rows:
        by_mu[set_mu].append(dose)
    largest = max(by_mu)
    per_mu = {set_mu: sum(doses) / len(doses) / set_mu for set_mu, doses in by_mu.items()}
    enough = len(by_mu) >= FEWEST_STEPS
    linearity = 100 * max(abs(one / per_mu[largest] - 1) for one in per_mu.values()) if enough else None
    shown = [100 * abs(other / set_mu - 1) for set_mu, _, other in rows if other is not None]
    said = []
    if not enough:
        said.append(f"{len(by_mu)} different numbers of MU; at least {FEWEST_STEPS} show linearity.")
    repeat = _repeat_sd_percent(by_mu)
    if repeat is None:
        said.append("No number of MU was repeated: repeatability is not known.")
    if not shown:
        said.append("The second monitor channel was not noted.")
    if largest_planned_mu is not None and largest < largest_planned_mu:
        said.append(
            f"The largest check had {printed(largest)} MU, less than the {printed(largest_planned_mu)} MU "
            "planned in one beam."
        )
    end = _end_effect_mu(rows) if enough else None
    return ModeCheck(linearity, end, repeat, max(shown, default=None), largest, tuple(said))


def _end_effect_mu(rows: Sequence[tuple[float, float, float | None]]) -> float:
    """Return the MU delivered beyond those set, from a straight line weighted by 1 / MU."""
    set_mu, dose = np.array([row[0] for row in rows]), np.array([row[1] for row in rows])
    slope, offset = np.polyfit(set_mu, dose, 1, w=1 / set_mu)
    return float(offset / slope)


def _repeat_sd_percent(by_mu: dict[float, list[float]]) -> float | None:
    """Return the relative standard deviation of repeats, pooled over numbers of MU."""
    left = sum(len(doses) - 1 for doses in by_mu.values())
    if left == 0:
        return None
    squares = sum(
        (dose * len(doses) / sum(doses) - 1) ** 2 for doses in by_mu.values() for dose in doses
    )
    return 100 * sqrt(squares / left)
