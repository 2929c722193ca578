"""A measured profile of a dual field: how even it is within its limits, and what must be said beside that."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.optimize import least_squares

from readiness.calculations.uniformity import uniformity_of_profile
from readiness.calculations.usable_readings import usable_profile
from readiness.errors import OutsideValidity
from readiness.quantities import Uncertain
from readiness.units import printed

Array = NDArray[np.float64]

METRICS = ("stricter", "half-range", "deviation-from-centre")
FEWEST_WITHIN = 5
FEW_WITHIN = 9
EVEN_POWERS = (0, 2, 4, 6)
FEWEST_FOR_CENTRE = 8  # four coefficients and the centre are fitted, three readings are left
SHIFT_WORTH_SAYING_CM = 2.0
CERTAIN_SHIFT = 2.0  # standard deviations


@dataclass(frozen=True)
class ProfileEvaluation:
    """
    A measured profile against its limits.

    Highest and lowest are relative to the reading at position 0. ``centre_shift_cm`` is where the profile is
    symmetric, None if there are too few readings to say. ``scatter_percent`` is the departure of the readings
    from a smooth symmetric curve.
    """

    half_range_percent: float
    deviation_percent: float
    judged_percent: float
    metric: str
    highest: float
    highest_at_cm: float
    lowest: float
    lowest_at_cm: float
    centre_shift_cm: Uncertain | None
    scatter_percent: float | None
    points_within: int
    normalisation: str
    smoothing: str
    remarks: tuple[str, ...]


@dataclass(frozen=True)
class SymmetricCurve:
    """An even polynomial about its own centre, fitted to a profile."""

    centre_cm: Uncertain
    coefficients: tuple[float, ...]
    length_cm: float
    scatter: float

    def at(self, positions_cm: Array) -> Array:
        """Return the curve at given positions, its centre moved to 0."""
        return np.asarray(_powers(positions_cm / self.length_cm) @ np.array(self.coefficients), dtype=float)


def evaluate_profile(
    *,
    positions_cm: ArrayLike,
    readings: ArrayLike,
    half_length_cm: float,
    metric: str,
    normalisation: str,
    smoothing: str,
) -> ProfileEvaluation:
    """
    Return how even a measured profile of a dual field is between its limits.

    Args:
        positions_cm: Where the readings were taken, from mid-height or the middle of the width, (n,). [cm]
        readings: Relative readings as measured, any normalisation, (n,). [1]
        half_length_cm: The limits stand this far on either side of position 0. [cm]
        metric: What is judged: "stricter" of the two, "half-range" or "deviation-from-centre".
        normalisation: Where the file says that readings are 1; stated in the result and compared with them.
        smoothing: How the file says that readings were smoothed; stated in the result.

    Returns:
        Both metrics, the one that is judged, extremes and their places, the centre, and remarks.

    Raises:
        ValueError: If the lengths differ, a number is not finite, or the metric has another name.
        OutsideValidity: If the readings cannot be used, are too few, or do not reach both limits.

    Valid for: vertical and horizontal profiles through the centre of the plane.
    Assumes: straight lines between neighbouring readings; readings are not smoothed here.
    Source: aapm-23, sec. 2.1 (memory) for the limits; the two metrics are our definitions.
    """
    usable = usable_profile(positions_cm=positions_cm, readings=readings, normalisation=normalisation)
    places, values = usable.places, usable.readings
    even = uniformity_of_profile(positions_cm=places, doses=values, half_length_cm=half_length_cm)
    judged = judged_percent(even.half_range_percent, even.deviation_percent, metric)
    within = int((np.abs(places) <= half_length_cm * (1 + 1e-9)).sum())
    curve = symmetric_curve(places, values) if len(places) >= FEWEST_FOR_CENTRE else None
    remarks = [*usable.remarks, *_remarks(places, within, half_length_cm, curve, smoothing)]
    return ProfileEvaluation(
        half_range_percent=even.half_range_percent,
        deviation_percent=even.deviation_percent,
        judged_percent=judged,
        metric=metric,
        highest=even.highest,
        highest_at_cm=even.highest_at_cm,
        lowest=even.lowest,
        lowest_at_cm=even.lowest_at_cm,
        centre_shift_cm=curve.centre_cm if curve else None,
        scatter_percent=100 * curve.scatter / float(np.interp(0.0, places, values)) if curve else None,
        points_within=within,
        normalisation=normalisation,
        smoothing=smoothing,
        remarks=tuple(remarks),
    )


def judged_percent(half_range_percent: float, deviation_percent: float, metric: str) -> float:
    """Return the metric by which a profile is judged."""
    if metric not in METRICS:
        raise ValueError(f"a profile is judged by one of {', '.join(METRICS)}, not {metric!r}")
    if metric == "half-range":
        return half_range_percent
    return deviation_percent if metric == METRICS[2] else max(half_range_percent, deviation_percent)


def symmetric_curve(places: Array, readings: Array) -> SymmetricCurve:
    """Return the even polynomial of sixth degree about its own centre that fits a profile best."""
    if len(places) < FEWEST_FOR_CENTRE:
        raise OutsideValidity(
            f"a centre cannot be found from {len(places)} readings; at least {FEWEST_FOR_CENTRE} are needed"
        )
    middle, length = (places[0] + places[-1]) / 2, float(np.ptp(places)) / 2

    def departure(guess: Array) -> Array:
        return np.asarray(_powers((places - middle) / length - guess[0]) @ guess[1:] - readings, dtype=float)

    straight, *_ = np.linalg.lstsq(_powers((places - middle) / length), readings, rcond=None)
    fit = least_squares(departure, np.concatenate([[0.0], straight]), xtol=1e-12, ftol=1e-12, gtol=1e-12)
    variance = 2 * fit.cost / (len(places) - len(fit.x))
    covariance = np.linalg.pinv(fit.jac.T @ fit.jac) * variance
    centre = Uncertain(float(middle + length * fit.x[0]), float(length * np.sqrt(covariance[0, 0])))
    return SymmetricCurve(centre, tuple(float(c) for c in fit.x[1:]), length, float(np.sqrt(variance)))


def shift_remark(centre_cm: Uncertain) -> tuple[str, ...]:
    """Return the remark that a shifted centre deserves, or nothing."""
    shift, sd = centre_cm.value, centre_cm.sd
    if abs(shift) <= SHIFT_WORTH_SAYING_CM or abs(shift) <= CERTAIN_SHIFT * sd:
        return ()
    return (
        f"The profile is centred at {printed(shift, 2)} cm (sd {printed(sd, 2)} cm), not at 0: look at the "
        "detector's position, the zero of the gantry and the MU of both fields.",
    )


def _powers(scaled: Array) -> Array:
    """Return the even powers of scaled positions, one column each."""
    return np.stack([scaled**power for power in EVEN_POWERS], axis=1)


def _remarks(
    places: Array, within: int, half_length_cm: float, curve: SymmetricCurve | None, smoothing: str
) -> list[str]:
    """Return what must be said about a profile beside its numbers."""
    said = []
    if within < FEW_WITHIN:
        said.append(
            f"Only {within} readings lie within {printed(half_length_cm)} cm of the centre; peaks between "
            "them are missed."
        )
    if smoothing and smoothing != "none":
        said.append(f"The readings were smoothed before ({smoothing}); the departure is a lower bound.")
    if curve is None:
        said.append(f"Fewer than {FEWEST_FOR_CENTRE} readings: a shift of the centre cannot be seen.")
    else:
        said.extend(shift_remark(curve.centre_cm))
    if not np.isclose(places, 0.0, atol=1e-6).any():
        said.append("No reading was taken at position 0; the centre is interpolated.")
    return said
