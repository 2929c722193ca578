"""
Uncertainty of in-vivo readings, all as relative standard deviations in per cent.

What is common to all readings of a batch (calibration, energy, prescription-level correction) does not shrink
when readings are averaged; what differs from detector to detector does.
"""

from collections.abc import Sequence
from math import sqrt


def combined_sd_percent(*, components_percent: Sequence[float]) -> float:
    """
    Return the standard deviation of one reading from its components.

    s = sqrt(sum s_i^2)

    Args:
        components_percent: Standard deviation of each independent component. [%]

    Returns:
        Combined standard deviation. [%]

    Raises:
        ValueError: If there is no component or one is negative.

    Valid for: small independent components that multiply the reading.
    Assumes: independence.
    Source: law of propagation of uncertainty (derived).
    """
    if not components_percent or min(components_percent) < 0:
        raise ValueError("a combined uncertainty needs components, none of them negative")
    return sqrt(sum(component**2 for component in components_percent))


def mean_sd_percent(*, single_sd_percent: float, shared_sd_percent: float, readings: int) -> float:
    """
    Return the standard deviation of the mean of several readings.

    s = sqrt(s_shared^2 + s_single^2 / n)

    Args:
        single_sd_percent: Standard deviation of one reading, of what differs between readings. [%]
        shared_sd_percent: Standard deviation of what all readings share. [%]
        readings: Readings averaged. [1]

    Returns:
        Standard deviation of the mean; never below what is shared. [%]

    Raises:
        ValueError: If there is no reading or a standard deviation is negative.

    Valid for: readings of one batch at doses that are alike.
    Assumes: independence of what differs.
    Source: law of propagation of uncertainty (derived).
    """
    if readings < 1 or single_sd_percent < 0 or shared_sd_percent < 0:
        raise ValueError("a mean needs readings, and no standard deviation is negative")
    return sqrt(shared_sd_percent**2 + single_sd_percent**2 / readings)


def sum_sd_percent(
    *, doses_cgy: Sequence[float], single_sd_percent: float, shared_sd_percent: float
) -> float:
    """
    Return the standard deviation of the sum of readings, such as those of both days of a cycle.

    s = sqrt(s_shared^2 + s_single^2 sum d_i^2 / (sum d_i)^2)

    Args:
        doses_cgy: Readings that are added. [cGy]
        single_sd_percent: Standard deviation of one reading, of what differs between readings. [%]
        shared_sd_percent: Standard deviation of what all readings share. [%]

    Returns:
        Standard deviation of the sum. [%]

    Raises:
        ValueError: If there is no reading, one is negative, all are 0, or a standard deviation is negative.

    Valid for: readings of one batch.
    Assumes: independence of what differs.
    Source: law of propagation of uncertainty (derived).
    """
    if single_sd_percent < 0 or shared_sd_percent < 0:
        raise ValueError("a standard deviation is not negative")
    if not doses_cgy or min(doses_cgy) < 0 or not sum(doses_cgy) > 0:
        raise ValueError("a sum needs readings, none negative and not all of them 0")
    shrink = sum(dose**2 for dose in doses_cgy) / sum(doses_cgy) ** 2
    return sqrt(shared_sd_percent**2 + single_sd_percent**2 * shrink)
