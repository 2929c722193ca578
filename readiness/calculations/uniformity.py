"""How even a profile or a map of dose is, in the two metrics that are often mixed up."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from readiness.errors import OutsideValidity

FEWEST_POINTS = 5  # inside the limits; fewer cannot show where a profile is highest and lowest
COVERAGE_PER_HEIGHT = 1.25  # soles to raised hands / standing height (practice)

Array = NDArray[np.float64]


@dataclass(frozen=True)
class ProfileUniformity:
    """
    Both metrics of one profile within its limits.

    ``half_range_percent`` is (highest - lowest)/(highest + lowest); ``deviation_percent`` is the largest
    departure from the reading at position 0 either way. ``highest`` and ``lowest`` are relative to that
    reading and stand at ``highest_at_cm`` and ``lowest_at_cm``.
    """

    half_range_percent: float
    deviation_percent: float
    highest: float
    highest_at_cm: float
    lowest: float
    lowest_at_cm: float

    @property
    def stricter_percent(self) -> float:
        """The larger of the two metrics, by which a profile is judged unless the physicist records which."""
        return max(self.half_range_percent, self.deviation_percent)


@dataclass(frozen=True)
class MapUniformity:
    """Both metrics over a rectangle of the plane, with the places of its highest and lowest dose."""

    half_range_percent: float
    deviation_percent: float
    highest: float
    highest_at_height_cm: float
    highest_at_across_cm: float
    lowest: float
    lowest_at_height_cm: float
    lowest_at_across_cm: float


@dataclass(frozen=True)
class Coverage:
    """Dose at the soles and at the raised hands, and the extremes between, relative to mid-height."""

    at_soles: float
    at_hands: float
    lowest: float
    highest: float


def ordered_profile(*, positions_cm: ArrayLike, doses: ArrayLike) -> tuple[Array, Array]:
    """
    Return positions in rising order with their doses.

    Args:
        positions_cm: Where each dose was measured or predicted, shape (n,). [cm]
        doses: Relative dose at each position, shape (n,). [1]

    Returns:
        Positions and doses, both of shape (n,), positions rising.

    Raises:
        ValueError: If the lengths differ, a number is not finite, a reading is negative, or a position
            stands twice.

    Valid for: any profile.
    Assumes: one dose per position.
    Source: our own definition.
    """
    places = np.atleast_1d(np.asarray(positions_cm, dtype=float))
    readings = np.atleast_1d(np.asarray(doses, dtype=float))
    if places.ndim != 1 or places.shape != readings.shape:
        raise ValueError("a profile needs one dose for each position")
    if not (np.isfinite(places).all() and np.isfinite(readings).all()):
        raise ValueError("a profile holds a number that is not finite")
    if (readings < 0).any():
        raise ValueError("a profile holds a negative reading")
    order = np.argsort(places, kind="stable")
    places, readings = places[order], readings[order]
    if (np.diff(places) == 0).any():
        raise ValueError("a position stands twice in the profile")
    return places, readings


def _within(places: Array, readings: Array, lowest_cm: float, highest_cm: float) -> tuple[Array, Array]:
    """Return the part between two limits, with the doses at the limits themselves interpolated."""
    slack = 1e-9 * max(abs(lowest_cm), abs(highest_cm), 1.0)
    if len(places) == 0 or places[0] > lowest_cm + slack or places[-1] < highest_cm - slack:
        reach = f"{places[0]:g} to {places[-1]:g} cm" if len(places) else "nothing"
        raise OutsideValidity(
            f"the profile covers {reach} and does not reach the limits of {lowest_cm:g} to {highest_cm:g} cm"
        )
    inside = (places > lowest_cm + slack) & (places < highest_cm - slack)
    ends = np.array([lowest_cm, highest_cm])
    end_doses = np.interp(ends, places, readings)
    part = np.concatenate([ends[:1], places[inside], ends[1:]])
    doses = np.concatenate([end_doses[:1], readings[inside], end_doses[1:]])
    if len(part) < FEWEST_POINTS:
        raise OutsideValidity(
            f"the profile has {len(part)} points within {lowest_cm:g} to {highest_cm:g} cm; "
            f"at least {FEWEST_POINTS} are needed"
        )
    return part, doses


def _half_range_percent(doses: Array) -> float:
    """Return (highest - lowest)/(highest + lowest)."""
    highest, lowest = float(doses.max()), float(doses.min())
    if highest <= 0:
        raise ValueError("a profile of nothing but zeros has no uniformity")
    return 100 * (highest - lowest) / (highest + lowest)


def uniformity_of_profile(
    *, positions_cm: ArrayLike, doses: ArrayLike, half_length_cm: float
) -> ProfileUniformity:
    """
    Return how even a profile is between its limits, measured or predicted.

    half-range = (max - min)/(max + min);  deviation = max |D(y)/D(0) - 1|

    Args:
        positions_cm: Positions from the centre (mid-height, or the middle of the width), shape (n,). [cm]
        doses: Relative dose at each position, any normalisation, shape (n,). [1]
        half_length_cm: The limits stand this far on either side of position 0. [cm]

    Returns:
        Both metrics with the places of the highest and lowest dose.

    Raises:
        ValueError: If the profile is not a profile (lengths, negative or repeated entries) or all zero.
        OutsideValidity: If the profile does not reach both limits or has too few points between them.

    Valid for: profiles with at least five points within the limits, the limits included.
    Assumes: straight lines between neighbouring points; position 0 is the centre.
    Source: aapm-23, sec. 2.1 (memory) for the limits of departure; the two definitions are ours.
    """
    if half_length_cm <= 0:
        raise ValueError("the length over which uniformity is judged must be positive")
    places, readings = ordered_profile(positions_cm=positions_cm, doses=doses)
    part, within = _within(places, readings, -half_length_cm, half_length_cm)
    half_range = _half_range_percent(within)
    centre = float(np.interp(0.0, places, readings))
    if centre <= 0:
        raise ValueError("the dose at the centre is zero, so nothing can be referred to it")
    top, bottom = int(np.argmax(within)), int(np.argmin(within))
    return ProfileUniformity(
        half_range_percent=half_range,
        deviation_percent=100 * float(np.max(np.abs(within / centre - 1))),
        highest=float(within[top]) / centre,
        highest_at_cm=float(part[top]),
        lowest=float(within[bottom]) / centre,
        lowest_at_cm=float(part[bottom]),
    )


def uniformity_of_map(
    *,
    heights_cm: ArrayLike,
    across_cm: ArrayLike,
    doses: ArrayLike,
    half_length_cm: float,
    half_width_cm: float,
) -> MapUniformity:
    """
    Return how even the dose is over a rectangle of the plane, for example 200 cm by 80 cm.

    Args:
        heights_cm: Heights from mid-height, rising, shape (n,). [cm]
        across_cm: Positions across from the middle, rising, shape (m,). [cm]
        doses: Relative dose, shape (n, m). [1]
        half_length_cm: Half the height of the rectangle. [cm]
        half_width_cm: Half the width of the rectangle. [cm]

    Returns:
        Both metrics and where the extremes stand.

    Raises:
        ValueError: If shapes disagree, positions do not rise, or a reading is negative.
        OutsideValidity: If the map does not reach the edges of the rectangle.

    Valid for: maps whose grid lies on the edges, or crosses them (edges are then interpolated).
    Assumes: straight lines between neighbouring points.
    Source: aapm-23, sec. 2.1 (memory) for the rectangle; the definitions are ours.
    """
    heights, across = np.asarray(heights_cm, dtype=float), np.asarray(across_cm, dtype=float)
    values = np.asarray(doses, dtype=float)
    if values.shape != (len(heights), len(across)):
        raise ValueError("a map needs one dose for each height and position across")
    if (np.diff(heights) <= 0).any() or (np.diff(across) <= 0).any():
        raise ValueError("the positions of a map must rise")
    if not np.isfinite(values).all() or (values < 0).any():
        raise ValueError("a map holds a negative reading or one that is not finite")
    columns = [_within(heights, column, -half_length_cm, half_length_cm) for column in values.T]
    rows_at = columns[0][0]
    in_height = np.array([column[1] for column in columns]).T
    rows = [_within(across, row, -half_width_cm, half_width_cm) for row in in_height]
    columns_at = rows[0][0]
    part = np.array([row[1] for row in rows])
    middle = np.array([np.interp(0.0, heights, column) for column in values.T])
    centre = float(np.interp(0.0, across, middle))
    if centre <= 0:
        raise ValueError("the dose at the centre is zero, so nothing can be referred to it")
    top = np.unravel_index(int(np.argmax(part)), part.shape)
    bottom = np.unravel_index(int(np.argmin(part)), part.shape)
    return MapUniformity(
        half_range_percent=_half_range_percent(part),
        deviation_percent=100 * float(np.max(np.abs(part / centre - 1))),
        highest=float(part[top]) / centre,
        highest_at_height_cm=float(rows_at[top[0]]),
        highest_at_across_cm=float(columns_at[top[1]]),
        lowest=float(part[bottom]) / centre,
        lowest_at_height_cm=float(rows_at[bottom[0]]),
        lowest_at_across_cm=float(columns_at[bottom[1]]),
    )


def coverage_length_cm(*, standing_height_cm: float) -> float:
    """
    Return the length from the soles to the raised hands of a standing patient.

    Args:
        standing_height_cm: Height of the patient, soles to vertex. [cm]

    Returns:
        Length to be covered. [cm]

    Raises:
        ValueError: If the height is not positive.

    Valid for: children and adults standing with arms raised.
    Assumes: 1.25 times the height.
    Source: common practice, no publication (practice).
    """
    if standing_height_cm <= 0:
        raise ValueError("a patient's height must be positive")
    return COVERAGE_PER_HEIGHT * standing_height_cm


def coverage_of_profile(
    *, positions_cm: ArrayLike, doses: ArrayLike, soles_cm: float, hands_cm: float
) -> Coverage:
    """
    Return the dose that the ends of the patient get, relative to mid-height.

    Args:
        positions_cm: Heights from mid-height, shape (n,). [cm]
        doses: Relative dose at each height, shape (n,). [1]
        soles_cm: Height of the soles from mid-height, negative. [cm]
        hands_cm: Height of the raised hands from mid-height, positive. [cm]

    Returns:
        Dose at both ends and the extremes between them, relative to position 0.

    Raises:
        ValueError: If the soles are not below and the hands not above mid-height, or the profile is none.
        OutsideValidity: If the profile does not reach from the soles to the hands.

    Valid for: vertical profiles, measured or predicted.
    Assumes: straight lines between neighbouring points.
    Source: our own definition; coverage from soles to raised hands is practice.
    """
    if not soles_cm < 0 < hands_cm:
        raise ValueError("the soles must lie below mid-height and the hands above it")
    places, readings = ordered_profile(positions_cm=positions_cm, doses=doses)
    centre = float(np.interp(0.0, places, readings))
    if centre <= 0:
        raise ValueError("the dose at mid-height is zero, so nothing can be referred to it")
    _, within = _within(places, readings, soles_cm, hands_cm)
    relative = within / centre
    return Coverage(
        at_soles=float(relative[0]),
        at_hands=float(relative[-1]),
        lowest=float(relative.min()),
        highest=float(relative.max()),
    )
