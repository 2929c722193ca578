"""
The measured x-ray component: f1 of one dual field with its depth, F of all of them, dose per MU on the axis.

f1 is x-ray dose over the calibration-point dose of one dual field; F is body dose over skin dose of all six.
F = (6/B) f1, about 2.2 f1: the dose to the body over a course follows from F, never from f1 alone.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from readiness.calculations.course_xray_dose import composite_xray_percent
from readiness.errors import OutsideValidity
from readiness.quantities import Table
from readiness.units import printed

ONE_DUAL, ALL_DUAL = "one-dual", "all-dual"
MID_HEIGHT, AXIS, ELSEWHERE = "mid-height", "tilted axis", "elsewhere"
NEAR_CM = 15.0  # of mid-height, or of the place where a tilted axis meets the plane
BEHIND_RANGE_MM = 5.0  # behind the practical range the last electrons are gone
SHALLOWEST_MM = 30.0  # where the range is not known
WANTED_DEPTH_MM = 50.0  # 5 or 10 cm are in use; the shallower one has the higher dose
USUAL_DEPTHS_MM = (45.0, 105.0)
DISAGREEMENT = 0.25  # between F measured and F from f1, relative
COLUMNS = ("fields", "depth_mm", "height_cm", "across_cm", "xray_percent", "xray_cgy_per_mu", "place")

_Row = tuple[str, float, float, float, float | None, float | None]


@dataclass(frozen=True)
class XrayComponent:
    """
    What the readings say about x rays; None where no reading says it.

    ``pair_xray_percent`` is f1 at mid-height at ``pair_depth_mm``. ``composite_xray_percent`` is F, measured
    at ``composite_depth_mm``, or (6/B) f1 if ``composite_is_measured`` is false. Doses per MU of the pair are
    those of one dual field at mid-height and on the tilted axis, the latter at ``tilted_axis_depth_mm``,
    the former at ``mid_height_depth_mm``.
    """

    pair_xray_percent: float | None
    pair_depth_mm: float | None
    composite_xray_percent: float | None
    composite_depth_mm: float | None
    composite_is_measured: bool
    mid_height_cgy_per_mu: float | None
    mid_height_depth_mm: float | None
    tilted_axis_cgy_per_mu: float | None
    tilted_axis_depth_mm: float | None
    axis_over_mid_height: float | None
    readings: Table
    remarks: tuple[str, ...]


@dataclass(frozen=True)
class _Reading:
    """One reading and where it belongs."""

    fields: str
    depth_mm: float
    height_cm: float
    across_cm: float
    percent: float | None
    cgy_per_mu: float | None
    place: str


def analyse_xray_component(
    *,
    fields: Sequence[str],
    depths_mm: Sequence[float],
    heights_cm: Sequence[float],
    across_cm: Sequence[float],
    xray_percent: Sequence[float | None],
    xray_cgy_per_mu: Sequence[float | None],
    axis_height_cm: float,
    practical_range_mm: float | None,
    b_factor: float | None,
) -> XrayComponent:
    """
    Return the x-ray fractions and the x-ray dose per MU from readings behind the electrons' range.

    F = (6/B) f1

    Args:
        fields: "one-dual" or "all-dual", a word per reading.
        depths_mm: Depth of each reading. [mm]
        heights_cm: Height of each reading above the isocentre in the plane. [cm]
        across_cm: Horizontal place of each reading from the beam's vertical plane. [cm]
        xray_percent: X-ray dose over the dose that the fraction is defined with, None where not given. [%]
        xray_cgy_per_mu: X-ray dose per MU of the pair, None where not given. [cGy/MU]
        axis_height_cm: Where the tilted axes meet the plane, this far above and below the isocentre. [cm]
        practical_range_mm: Practical range at the plane, None if not known. [mm]
        b_factor: Multiple-field factor B of six positions, None if not known. [1]

    Returns:
        f1 and F with their depths, doses per MU on and off the tilted axis, all readings, and remarks.

    Raises:
        ValueError: If lengths differ, a number is impossible, or a word is not one of the two.
        OutsideValidity: If a reading is negative, or none lies behind the electrons' range.

    Valid for: readings a few centimetres deep.
    Assumes: the reading at mid-height nearest to 5 cm depth stands for the body.
    Source: definition (derived); aapm-23 (memory) for measuring on and off the axis.
    """
    rows = list(zip(fields, depths_mm, heights_cm, across_cm, xray_percent, xray_cgy_per_mu, strict=True))
    given = _readings(rows, axis_height_cm)
    behind_mm = SHALLOWEST_MM if practical_range_mm is None else practical_range_mm + BEHIND_RANGE_MM
    deep = [reading for reading in given if reading.depth_mm >= behind_mm]
    if not deep:
        raise OutsideValidity(
            f"no reading lies {printed(behind_mm)} mm deep or deeper, so that electrons are in all of them"
        )
    f1 = _nearest(deep, ONE_DUAL, MID_HEIGHT, "percent")
    f_all = _nearest(deep, ALL_DUAL, MID_HEIGHT, "percent")
    remarks = _remarks(given, deep, behind_mm, f1, practical_range_mm)
    derived = _composite_from_pair(f1, b_factor, remarks)
    measured = f_all.percent if f_all else None
    if measured is not None and derived is not None and abs(measured / derived - 1) > DISAGREEMENT:
        remarks.append(
            f"F measured is {printed(measured, 3)} %, but {printed(derived, 3)} % from f1 and B: they should "
            "agree."
        )
    centre = _nearest(deep, ONE_DUAL, MID_HEIGHT, "cgy_per_mu")
    axis = _nearest(deep, ONE_DUAL, AXIS, "cgy_per_mu")
    at_centre, on_axis = centre.cgy_per_mu if centre else None, axis.cgy_per_mu if axis else None
    composite_depth = f_all.depth_mm if f_all else f1.depth_mm if f1 and derived is not None else None
    return XrayComponent(
        pair_xray_percent=f1.percent if f1 else None,
        pair_depth_mm=f1.depth_mm if f1 else None,
        composite_xray_percent=measured if measured is not None else derived,
        composite_depth_mm=composite_depth,
        composite_is_measured=measured is not None,
        mid_height_cgy_per_mu=at_centre,
        mid_height_depth_mm=centre.depth_mm if centre else None,
        tilted_axis_cgy_per_mu=on_axis,
        tilted_axis_depth_mm=axis.depth_mm if axis else None,
        axis_over_mid_height=on_axis / at_centre if on_axis is not None and at_centre else None,
        readings=Table.of(COLUMNS, [tuple(vars(reading).values()) for reading in given]),
        remarks=tuple(remarks),
    )


def _readings(rows: Sequence[_Row], axis_height_cm: float) -> list[_Reading]:
    """Return the readings with the place each belongs to."""
    if not {row[0] for row in rows} <= {ONE_DUAL, ALL_DUAL}:
        raise ValueError(f"each reading belongs to {ONE_DUAL} or {ALL_DUAL}")
    if not np.isfinite([number for row in rows for number in row[1:4]]).all():
        raise ValueError("a place of a reading is not a finite number")
    if any(number is not None and number < 0 for row in rows for number in (row[4], row[5])):
        raise OutsideValidity("an x-ray reading is negative: was the background subtracted twice?")
    return [_Reading(*row, _place(row[2], row[3], axis_height_cm)) for row in rows]


def _place(height_cm: float, across_cm: float, axis_height_cm: float) -> str:
    """Return whether a reading is at mid-height, on a tilted axis, or elsewhere."""
    from_axis, from_middle = abs(abs(height_cm) - axis_height_cm), abs(height_cm)
    if abs(across_cm) > NEAR_CM or min(from_axis, from_middle) > NEAR_CM:
        return ELSEWHERE
    return MID_HEIGHT if from_middle <= from_axis else AXIS


def _nearest(readings: Sequence[_Reading], fields: str, place: str, number: str) -> _Reading | None:
    """Return the reading nearest to the wanted depth that has a number, the deeper of two equally near."""
    fitting = [
        reading
        for reading in readings
        if reading.fields == fields and reading.place == place and getattr(reading, number) is not None
    ]
    return min(
        fitting,
        key=lambda reading: (abs(reading.depth_mm - WANTED_DEPTH_MM), -reading.depth_mm),
        default=None,
    )


def _composite_from_pair(f1: _Reading | None, b_factor: float | None, remarks: list[str]) -> float | None:
    """Return (6/B) f1, or None; adds why it cannot be said."""
    if f1 is None or f1.percent is None:
        return None
    if b_factor is None:
        remarks.append("B is not known: F cannot be had from f1, and f1 alone is less than half of it.")
        return None
    try:
        return composite_xray_percent(pair_xray_percent=f1.percent, b_factor=b_factor)
    except OutsideValidity as reason:
        remarks.append(f"F cannot be had from f1: {reason}")
        return None


def _remarks(
    given: Sequence[_Reading],
    deep: Sequence[_Reading],
    behind_mm: float,
    f1: _Reading | None,
    practical_range_mm: float | None,
) -> list[str]:
    """Return what must be said beside the numbers."""
    said = []
    if len(deep) < len(given):
        said.append(
            f"{len(given) - len(deep)} readings less than {printed(behind_mm)} mm deep hold electrons and "
            "were not used."
        )
    if practical_range_mm is None:
        said.append(f"The practical range is not known; readings from {SHALLOWEST_MM:g} mm on were used.")
    if f1 is not None and not USUAL_DEPTHS_MM[0] <= f1.depth_mm <= USUAL_DEPTHS_MM[1]:
        said.append(f"f1 is for a depth of {printed(f1.depth_mm)} mm; 50 or 100 mm are usual.")
    if f1 is None:
        said.append("No reading of one dual field at mid-height gives f1.")
    if not any(reading.place == AXIS for reading in deep):
        said.append("No reading on the tilted axis: how much stronger x rays are there is not known.")
    return said
