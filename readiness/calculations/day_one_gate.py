"""The gate after the first session: readings of day 1, seen before day 2, against a factor of two."""

from collections.abc import Sequence
from statistics import fmean

from readiness.errors import OutsideValidity

LARGEST_FACTOR = 2**0.5  # halfway, as ratios go, between a dose as meant and one that is doubled
GATE_OPEN = "nearer to what is expected than to half or twice of it: the second session may be given"
GATE_SHUT = "nearer to half or twice of what is expected: no further session until it is explained"


def day_one_gate(
    *, prescription_doses_cgy: Sequence[float], dose_per_cycle_gy: float, expected_day_one_percent: float
) -> str:
    """
    Return whether the readings after the first session allow the second, as a gate against a factor of two.

    1/sqrt(2) < r < sqrt(2), r being the mean reading over the expected one: a dose that is doubled or halved
    reads twice or half give or take its uncertainty, and a gate at exactly two would let half of them pass.

    Args:
        prescription_doses_cgy: Readings at the prescription level after day 1 of the first cycle. [cGy]
        dose_per_cycle_gy: Prescribed dose of one cycle. [Gy]
        expected_day_one_percent: Part of the cycle's dose that the first session gives there. [%]

    Returns:
        Words for the gate.

    Raises:
        ValueError: If a dose or the expected part is impossible.
        OutsideValidity: If there is no reading.

    Valid for: the first session of a course.
    Assumes: nothing finer than a factor of two is decided here.
    Source: practice, a gate against a factor of two; its place in the middle is derived.
    """
    if not dose_per_cycle_gy > 0 or not 0 < expected_day_one_percent <= 100:
        raise ValueError("the first session gives a part of the cycle's dose, above 0 and up to 100 %")
    if not prescription_doses_cgy:
        raise OutsideValidity("no reading at the prescription level after the first session")
    ratio = fmean(prescription_doses_cgy) / (dose_per_cycle_gy * expected_day_one_percent)
    return GATE_OPEN if 1 / LARGEST_FACTOR < ratio < LARGEST_FACTOR else GATE_SHUT


def expected_day_one_percent(*, b_factor: float) -> float:
    """
    Return the part of a cycle's dose that the front of the trunk gets from the session with the front field.

    p = 100 / B

    Args:
        b_factor: Multiple-field factor B of six positions. [1]

    Returns:
        Part of the cycle's dose at the umbilicus from one dual field at right angles. [%]

    Raises:
        ValueError: If B is not more than 1.

    Valid for: six positions with the front and both rear oblique fields on day 1.
    Assumes: the oblique fields from behind give nothing to the front.
    Source: definition of B (derived).
    """
    if not b_factor > 1:
        raise ValueError(f"B is more than 1, not {b_factor:g}")
    return 100 / b_factor
