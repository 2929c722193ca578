"""How even a dual field is for many distances and tilts at once; the numbers behind every choice of angle."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from readiness.calculations.field_at_plane import ACROSS_STEP_CM, HEIGHT_STEP_CM, even_grid
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.tilted_field import tilted_fields
from readiness.errors import OutsideValidity

Array = NDArray[np.float64]

HALF_RANGE, DEVIATION, STRICTER = "half-range", "deviation-from-mid-height", "stricter"
TILTS_AT_ONCE = 20  # so that the arrays stay in the processor's cache
METRICS = (HALF_RANGE, DEVIATION, STRICTER)


@dataclass(frozen=True)
class TiltStudy:
    """
    Uniformity per distance and tilt, in percent, arrays of shape (distances, tilts).

    ``output`` is the dose at mid-height per MU of the pair, relative to the emission on the axis.
    """

    distances_cm: Array
    tilts_deg: Array
    vertical_half_range_percent: Array
    vertical_deviation_percent: Array
    horizontal_half_range_percent: Array
    horizontal_deviation_percent: Array
    map_half_range_percent: Array
    output: Array

    def vertical_percent(self, metric: str) -> Array:
        """Return the vertical uniformity in the metric by which it is judged."""
        return chosen_metric(metric, self.vertical_half_range_percent, self.vertical_deviation_percent)

    def horizontal_percent(self, metric: str) -> Array:
        """Return the horizontal uniformity in the metric by which it is judged."""
        return chosen_metric(metric, self.horizontal_half_range_percent, self.horizontal_deviation_percent)


def chosen_metric(metric: str, half_range: Array, deviation: Array) -> Array:
    """Return the half-range, the deviation from mid-height, or whichever is larger."""
    if metric not in METRICS:
        raise ValueError(f"a uniformity metric is one of {', '.join(METRICS)}, not {metric!r}")
    if metric == STRICTER:
        return np.maximum(half_range, deviation)
    return half_range if metric == HALF_RANGE else deviation


def profile_percents(profiles: Array, metric: str) -> Array:
    """Return the uniformity of profiles, one a row, whose middle entry is the centre."""
    centre = profiles[:, profiles.shape[1] // 2]
    if (centre <= 0).any():
        raise OutsideValidity("no dose reaches mid-height at one of the tilts")
    deviation = 100 * np.max(np.abs(profiles / centre[:, None] - 1), axis=1)
    return chosen_metric(metric, _half_range(profiles.max(axis=1), profiles.min(axis=1)), deviation)


def tilt_study(
    *,
    setup: FieldSetup,
    distances_cm: ArrayLike,
    tilts_deg: ArrayLike,
    mid_height_cm: float,
    mu_share_upper: float,
    uniformity_half_length_cm: float,
    uniformity_half_width_cm: float,
    field_length_cm: float,
    field_width_cm: float,
    height_step_cm: float = HEIGHT_STEP_CM,
    across_step_cm: float = ACROSS_STEP_CM,
) -> TiltStudy:
    """
    Return how even dual fields with two equal tilts are, for every distance and tilt.

    Args:
        setup: The beam and the room, from field_setup.
        distances_cm: Plane distances, rising. [cm]
        tilts_deg: Tilts, rising. [°]
        mid_height_cm: Of the patient's mid-height above the isocentre; negative below it. [cm]
        mu_share_upper: Part of the pair's MU that the field aimed at the head gets. [1]
        uniformity_half_length_cm: Half of the length over which the vertical profile is judged. [cm]
        uniformity_half_width_cm: Half of the width over which the horizontal profile is judged. [cm]
        field_length_cm: Height of the rectangle. [cm]
        field_width_cm: Width of the rectangle. [cm]
        height_step_cm: Largest step of the grid along the height. [cm]
        across_step_cm: Largest step of the grid across. [cm]

    Returns:
        Both metrics of both profiles, the half-range of the rectangle and the output.

    Raises:
        ValueError: If a number is impossible or distances or tilts do not rise.
        OutsideValidity: If energy, distance or tilt lie outside the model, or the degrader stops the beam.

    Valid for: 4 to 12 MeV and 300 to 500 cm: half-range within 2.5 % of own-monte-carlo.
    Assumes: both fields alike but for the MU; profiles through the middle.
    Source: own-fit (fit) to own-monte-carlo on the moments of eyges-1948.
    """
    distances, tilts = np.asarray(distances_cm, dtype=float), np.asarray(tilts_deg, dtype=float)
    if not (_rises(distances) and _rises(tilts)):
        raise ValueError("distances and tilts of a study must rise")
    if not 0 < mu_share_upper < 1 or tilts[0] < 0:
        raise ValueError("a part of the MU lies between 0 and 1, and a tilt is given as a positive angle")
    limits = (uniformity_half_length_cm, uniformity_half_width_cm, field_length_cm / 2, field_width_cm / 2)
    heights = _grid(limits[0], limits[2], height_step_cm)
    across = _grid(limits[1], limits[3], across_step_cm)
    reach = (float(distances[0]), float(distances[-1]))
    if setup.collimator_deg % 90.0 == 0.0:
        across = across[len(across) // 2 :]  # the other half is its mirror image
    rows = []
    for distance in distances:
        parts = []
        for some in np.array_split(tilts, -(-len(tilts) // TILTS_AT_ONCE)):
            doses = _dual_fields(
                setup, some, float(distance), heights, across, mid_height_cm, mu_share_upper, reach
            )
            parts.append(_metrics(doses, heights, across, limits))
        rows.append([np.concatenate(part) for part in zip(*parts, strict=True)])
    columns = [np.array(column) for column in zip(*rows, strict=True)]
    return TiltStudy(distances, tilts, *columns)


def _dual_fields(
    setup: FieldSetup,
    tilts: Array,
    distance: float,
    heights: Array,
    across: Array,
    mid_height: float,
    share: float,
    reach: tuple[float, float],
) -> Array:
    """Return dual fields with equal tilts, shape (tilts, heights, across)."""
    upper = tilted_fields(setup, tilts, distance, heights + mid_height, across, reach)
    lower = upper
    if mid_height != 0:
        lower = tilted_fields(setup, tilts, distance, heights - mid_height, across, reach)
    turned = lower[:, ::-1, :] if across[0] == 0 else lower[:, ::-1, ::-1]
    result: Array = share * upper
    result += (1 - share) * turned
    return result


def _rises(numbers: Array) -> bool:
    """Return whether there are numbers and each is larger than the one before."""
    return numbers.size > 0 and bool((np.diff(numbers) > 0).all())


def _grid(first: float, second: float, step: float) -> Array:
    """Return symmetric positions on which both half lengths lie."""
    even = even_grid(half_length_cm=max(first, second), step_cm=step)
    return np.unique(np.concatenate([even, [-first, first, -second, second]]))


def _metrics(
    doses: Array, heights: Array, across: Array, limits: tuple[float, float, float, float]
) -> tuple[Array, ...]:
    """Return the metrics of every tilt's field."""
    row, column = len(heights) // 2, int(np.argmin(np.abs(across)))
    centre = doses[:, row, column]
    if (centre <= 0).any():
        raise OutsideValidity("no dose reaches mid-height at one of the tilts")
    vertical = doses[:, _within(heights, limits[0]), column]
    horizontal = doses[:, row, _within(across, limits[1])]
    plane = doses[:, _within(heights, limits[2]), _within(across, limits[3])]
    return (
        _half_range(vertical.max(axis=1), vertical.min(axis=1)),
        100 * np.max(np.abs(vertical / centre[:, None] - 1), axis=1),
        _half_range(horizontal.max(axis=1), horizontal.min(axis=1)),
        100 * np.max(np.abs(horizontal / centre[:, None] - 1), axis=1),
        _half_range(plane.max(axis=(1, 2)), plane.min(axis=(1, 2))),
        centre,
    )


def _within(positions: Array, half_length: float) -> slice:
    """Return which of rising positions lie within a half length."""
    first, last = np.searchsorted(positions, [-half_length, half_length + 1e-9])
    return slice(int(first), int(last))


def _half_range(high: Array, low: Array) -> Array:
    """Return (max - min)/(max + min) in percent."""
    return 100 * (high - low) / (high + low)
