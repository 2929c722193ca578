"""A measured depth dose, of one beam or of all dual fields together: ranges, energies, dose at depths."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from readiness.calculations.range_energy import (
    LOWEST_R50_CM,
    low_mean_energy_mev,
    mean_energy_mev,
    most_probable_energy_mev,
    range_contradiction,
)
from readiness.calculations.usable_readings import in_order, paired, plateau_remarks, refuse_negative
from readiness.errors import OutsideValidity
from readiness.units import printed

Array = NDArray[np.float64]

FEWEST_POINTS = 6
FEW_POINTS = 10
LEAST_R50_MM, LARGEST_R50_MM = 4.0, 120.0  # outside, depths are in another unit
SURFACE_WITHIN_MM = 1.0  # the first reading may be this deep to reach the surface by a straight line
TAIL_SLOPE = 0.01  # of the steepest: where the dose falls less, only x rays are left
TAIL_DOSE = 0.10  # of the highest
FOOT_TO_TAIL = 2.5  # from R50, in units of the way from R50 to the tangent's foot: erfc(2.2)/2 is 0.001
WINDOW = 0.12  # of R50 to either side of the place where the slope is taken
NOT_AT_MAXIMUM = 0.02
GAP_MM = 3.0


@dataclass(frozen=True)
class DepthDose:
    """
    What a depth dose says; doses are in per cent of the dose at normalisation, None where it cannot be said.

    ``rp_mm`` is where the tangent at the steepest place meets the x-ray tail. ``mean_energy_mev`` is 2.33 R50
    and None below 2 cm, where ``low_mean_energy_mev`` holds instead. A composite has ranges but no energies:
    the formulas are for one beam at normal incidence.
    """

    r80_mm: float
    r50_mm: float
    rp_mm: float | None
    depth_of_maximum_mm: float
    surface_percent: float | None
    at_4_mm_percent: float | None
    at_10_mm_percent: float | None
    at_20_mm_percent: float | None
    xray_tail_percent: float | None
    mean_energy_mev: float | None
    low_mean_energy_mev: float | None
    most_probable_energy_mev: float | None
    remarks: tuple[str, ...]


def analyse_depth_dose(
    *, depths_mm: ArrayLike, readings: ArrayLike, normalisation: str, composite: bool
) -> DepthDose:
    """
    Return ranges, energies and doses of a measured depth dose.

    Args:
        depths_mm: Depth of each reading below the surface, (n,). [mm]
        readings: Relative readings, (n,). [1]
        normalisation: Where the file says that readings are 1; "none" divides them by the highest one, any
            other word leaves them as they are.
        composite: Whether all dual fields were given, not one beam.

    Returns:
        Depths at 80 and 50 %, practical range, energies, doses at the surface and at 4, 10 and 20 mm, x-ray
        tail, and remarks.

    Raises:
        ValueError: If the lengths differ or a number is not finite.
        OutsideValidity: If readings are too few or negative, depths look like another unit or the columns
            swapped, or the readings end before the dose has fallen to half.

    Valid for: water or water-equivalent depths, one beam or a composite.
    Assumes: straight lines between neighbouring readings; the tail is flat.
    Source: tg-25, icru-35 (memory) for the definitions.
    """
    depths, values, remarks = _usable(depths_mm, readings, normalisation)
    top = int(np.argmax(values))
    full = 1.0 if normalisation != "none" else float(values[top])
    r80, r50 = (_falls_to(depths, values, share * full, top) for share in (0.8, 0.5))
    if not LEAST_R50_MM <= r50 <= LARGEST_R50_MM:
        unit = "centimetres" if r50 < LEAST_R50_MM else "tenths of a millimetre"
        raise OutsideValidity(
            f"the dose has fallen to half at {printed(r50, 3)} mm: are the depths {unit} under a column "
            "in mm?"
        )
    slope, through = _steepest(depths, values, r50, top)
    tail, measured_tail = _tail(depths, values, slope, through, r50)
    rp = through[0] + (tail - through[1]) / slope if measured_tail else None
    surface = _surface(depths, values)
    percent = 100 / full
    at = {depth: _dose_at(depths, values, depth) for depth in (4.0, 10.0, 20.0)}
    remarks += _remarks(depths, surface is None, measured_tail, r50)
    remarks += _energy_remarks(r50, rp, composite)
    return DepthDose(
        r80_mm=r80,
        r50_mm=r50,
        rp_mm=rp,
        depth_of_maximum_mm=float(depths[top]),
        surface_percent=None if surface is None else surface * percent,
        at_4_mm_percent=_percent(at[4.0], percent),
        at_10_mm_percent=_percent(at[10.0], percent),
        at_20_mm_percent=_percent(at[20.0], percent),
        xray_tail_percent=tail * percent if measured_tail else None,
        mean_energy_mev=None if composite else _mean_energy_or_none(r50 / 10),
        low_mean_energy_mev=None if composite else low_mean_energy_mev(r50_cm=r50 / 10),
        most_probable_energy_mev=None if composite or rp is None else most_probable_energy_mev(rp_cm=rp / 10),
        remarks=tuple(remarks),
    )


def _usable(
    depths_mm: ArrayLike, readings: ArrayLike, normalisation: str
) -> tuple[Array, Array, list[str]]:
    """Return depths in rising order with readings and remarks, or refuse them."""
    depths, values = paired(depths_mm, readings)
    if len(depths) < FEWEST_POINTS:
        raise OutsideValidity(
            f"a depth dose of {len(depths)} readings says too little; {FEWEST_POINTS} are needed"
        )
    if values.max() > 3 and depths.max() <= 3:
        raise OutsideValidity(
            f"depths reach {printed(float(depths.max()))} mm and readings {printed(float(values.max()))}: "
            "are the columns swapped?"
        )
    refuse_negative(depths, values, "mm")
    if (depths < 0).any():
        raise OutsideValidity("a depth is negative: depths are counted from the surface inward")
    depths, values, averaged = in_order(depths, values, "mm")
    remarks = [*averaged, *plateau_remarks(depths, values, "mm")]
    if normalisation == "maximum" and abs(values.max() - 1) > NOT_AT_MAXIMUM:
        remarks.append(
            f"The file says that readings are 1 at the maximum, but the highest is "
            f"{printed(float(values.max()))}: the maximum lies between or before the depths measured. "
            "Readings are taken as stated."
        )
    elif normalisation != "none" and values.max() > 1 + NOT_AT_MAXIMUM:
        remarks.append(f"Readings reach {printed(float(values.max()))}; they are taken as stated.")
    return depths, values, remarks


def _falls_to(depths: Array, values: Array, level: float, top: int) -> float:
    """Return the last depth behind the maximum at which the dose falls through a level."""
    above = np.flatnonzero(values[top:] >= level) + top
    last = int(above[-1]) if len(above) else -1
    if last < 0 or last == len(depths) - 1:
        raise OutsideValidity(
            f"the readings end at {printed(float(depths[-1]))} mm or never reach {printed(level)}, so that "
            "the depth of that dose is not seen"
        )
    part = (values[last] - level) / (values[last] - values[last + 1])
    return float(depths[last] + part * (depths[last + 1] - depths[last]))


def _steepest(depths: Array, values: Array, r50_mm: float, top: int) -> tuple[float, tuple[float, float]]:
    """Return the steepest slope behind the maximum and a point of its tangent."""
    steepest, through = 0.0, (0.0, 0.0)
    for middle in range(top, len(depths)):
        near = np.abs(depths - depths[middle]) <= WINDOW * r50_mm
        if near.sum() < 3:
            nearest = np.argsort(np.abs(depths - depths[middle]), kind="stable")[:3]
            near = np.isin(np.arange(len(depths)), nearest)
        slope, _ = np.polyfit(depths[near], values[near], 1)
        if slope < steepest:
            steepest = float(slope)
            through = float(depths[near].mean()), float(values[near].mean())
    return steepest, through


def _tail(
    depths: Array, values: Array, slope: float, through: tuple[float, float], r50_mm: float
) -> tuple[float, bool]:
    """
    Return the mean dose of the x-ray tail, and whether a tail was measured.

    The tail is the longest run of deepest readings, beyond the place where an error function that falls
    through R50 with this slope has left a thousandth, along which a straight line is flat: the scatter of
    single readings does not end it.
    """
    foot = through[0] + (float(values[-1]) - through[1]) / slope
    beyond = int(np.searchsorted(depths, r50_mm + FOOT_TO_TAIL * (foot - r50_mm)))
    for first in range(beyond, len(depths)):
        tail = values[first:]
        fall = np.polyfit(depths[first:], tail, 1)[0] if len(tail) > 1 else 0.0
        if tail.max() <= TAIL_DOSE * values.max() and abs(fall) <= TAIL_SLOPE * abs(slope):
            return float(tail.mean()), True
    return float(values[-1]), False


def _surface(depths: Array, values: Array) -> float | None:
    """Return the dose at the surface, on the line through the first two readings if none is there."""
    if depths[0] == 0:
        return float(values[0])
    if depths[0] > SURFACE_WITHIN_MM:
        return None
    return float(values[0] - depths[0] * (values[1] - values[0]) / (depths[1] - depths[0]))


def _dose_at(depths: Array, values: Array, depth_mm: float) -> float | None:
    """Return the dose at a depth, or None outside the depths measured."""
    if not depths[0] <= depth_mm <= depths[-1]:
        return None
    return float(np.interp(depth_mm, depths, values))


def _percent(dose: float | None, percent: float) -> float | None:
    """Return a dose in per cent, or None."""
    return None if dose is None else dose * percent


def _mean_energy_or_none(r50_cm: float) -> float | None:
    """Return 2.33 R50 where it holds."""
    try:
        return mean_energy_mev(r50_cm=r50_cm)
    except OutsideValidity:
        return None


def _remarks(depths: Array, no_surface: bool, measured_tail: bool, r50_mm: float) -> list[str]:
    """Return what must be said about the depths measured."""
    said = []
    if len(depths) < FEW_POINTS:
        said.append(f"Only {len(depths)} depths; the practical range is uncertain.")
    around = np.interp(r50_mm, depths, np.arange(len(depths)))
    if float(depths[int(np.ceil(around))] - depths[int(np.floor(around))]) > GAP_MM:
        said.append(f"The readings around the half-value depth are more than {printed(GAP_MM)} mm apart.")
    if depths[0] > 0:
        said.append(
            f"The first reading is {printed(float(depths[0]))} mm deep; the surface "
            + ("is not known." if no_surface else "is found by a straight line.")
        )
    if not measured_tail:
        said.append("The readings end before the x-ray tail: no practical range and no x-ray dose from them.")
    if depths[-1] < 20:
        said.append(f"The readings end at {printed(float(depths[-1]))} mm: the dose at 20 mm is not known.")
    return said


def _energy_remarks(r50_mm: float, rp_mm: float | None, composite: bool) -> list[str]:
    """Return what must be said about the energies."""
    if composite:
        return ["A composite has no energy of its own: the formulas are for one beam at normal incidence."]
    said = []
    if r50_mm < 10 * LOWEST_R50_CM:
        said.append(
            f"R50 is below {LOWEST_R50_CM:g} cm: 2.33 R50 does not hold; take the formula for low energies, "
            "or better the practical range."
        )
    contradiction = range_contradiction(r50_cm=r50_mm / 10, rp_cm=rp_mm / 10) if rp_mm is not None else ""
    return [*said, contradiction] if contradiction else said
