"""
Measured profiles before anything is read from them: what makes them unusable, what must be said beside them.

A file can hold millimetres under a name in centimetres, two columns exchanged, or a film that was saturated.
What cannot be used is refused with the suspicion in words; what can be used but is doubtful gets a remark.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from readiness.errors import OutsideValidity
from readiness.units import printed

Array = NDArray[np.float64]

LARGEST_RELATIVE = 3.0  # a relative profile or depth dose that is normalised anywhere sensible stays below
FARTHEST_CM = 300.0  # no treatment plane is measured farther from its centre
NEAREST_CM = 5.0  # a profile that ends this close to its centre is in another unit
PLATEAU = 3  # neighbouring readings that all equal the highest one
SATURATED = 6  # so many, and the profile was cut off: it is not used
SAME = 1e-4  # relative; readings are written to three decimals or more
NORMALISED_WITHIN = 0.01


@dataclass(frozen=True)
class UsableReadings:
    """Readings in rising order of place, repeats averaged, with what must be said about them."""

    places: Array
    readings: Array
    remarks: tuple[str, ...]


def usable_profile(*, positions_cm: ArrayLike, readings: ArrayLike, normalisation: str) -> UsableReadings:
    """
    Return the readings of a profile ready for use, or refuse them with the suspicion in words.

    Args:
        positions_cm: Where the readings were taken, from mid-height or the middle of the width, (n,). [cm]
        readings: Relative readings, (n,). [1]
        normalisation: Where the file says that readings are 1: "mid-height", "beam-axis", "maximum",
            "calibration-point" or "none".

    Returns:
        Positions and readings in rising order, with remarks.

    Raises:
        ValueError: If the lengths differ or a number is not finite.
        OutsideValidity: If columns look exchanged, positions look like another unit, a reading is negative,
            all readings are zero, or the top of the profile was cut off by a saturated detector.

    Valid for: profiles along one line of the plane.
    Assumes: one field or one set of fields throughout.
    Source: practice; the bounds behind each suspicion are ours.
    """
    places, values = paired(positions_cm, readings)
    reach, highest = float(np.abs(places).max(initial=0)), float(np.abs(values).max(initial=0))
    if highest > LARGEST_RELATIVE and reach <= LARGEST_RELATIVE:
        raise OutsideValidity(
            f"positions reach {printed(reach)} cm and readings {printed(highest)}: are the columns swapped?"
        )
    refuse_negative(places, values, "cm")
    if reach > FARTHEST_CM:
        raise OutsideValidity(
            f"positions reach {printed(reach)} cm: are they millimetres under a column in cm?"
        )
    if len(places) > 1 and reach < NEAREST_CM:
        raise OutsideValidity(
            f"positions end {printed(reach)} cm from the centre: are they metres under a column in cm?"
        )
    places, values, remarks = in_order(places, values, "cm")
    if SATURATED <= highest_run(values) < len(values):
        said = " ".join(plateau_remarks(places, values, "cm"))
        raise OutsideValidity(f"{said} A cut-off profile shows less unevenness than there is.")
    doubts = plateau_remarks(places, values, "cm") + _normalisation_remarks(places, values, normalisation)
    return UsableReadings(places, values, remarks + doubts)


def paired(places: ArrayLike, readings: ArrayLike) -> tuple[Array, Array]:
    """Return two columns as arrays of one length, all numbers finite."""
    at = np.atleast_1d(np.asarray(places, dtype=float))
    values = np.atleast_1d(np.asarray(readings, dtype=float))
    if at.ndim != 1 or at.shape != values.shape:
        raise ValueError("there must be one reading for each place")
    if not (np.isfinite(at).all() and np.isfinite(values).all()):
        raise ValueError("a place or reading is not a finite number")
    return at, values


def refuse_negative(places: Array, readings: Array, unit: str) -> None:
    """Refuse readings below zero, and readings that are all zero."""
    below = np.flatnonzero(readings < 0)
    if len(below):
        lowest = int(np.argmin(readings))
        raise OutsideValidity(
            f"{len(below)} of {len(readings)} readings are negative, the lowest "
            f"{printed(float(readings[lowest]))} at {printed(float(places[lowest]))} {unit}: "
            "was the background subtracted twice?"
        )
    if not (readings > 0).any():
        raise OutsideValidity("all readings are zero")


def in_order(places: Array, readings: Array, unit: str) -> tuple[Array, Array, tuple[str, ...]]:
    """Return readings in rising order of place, readings at the same place averaged and that said."""
    distinct, index = np.unique(places, return_inverse=True)
    if len(distinct) == len(places):
        order = np.argsort(places, kind="stable")
        return places[order], readings[order], ()
    counts = np.bincount(index)
    repeated = ", ".join(printed(float(place)) for place in distinct[counts > 1])
    mean = np.bincount(index, weights=readings) / counts
    return distinct, mean, (f"Readings at the same place were averaged: {repeated} {unit}.",)


def highest_run(readings: Array) -> int:
    """Return the length of the longest row of neighbouring readings that all equal the highest."""
    top = readings >= readings.max() * (1 - SAME)
    edges = np.diff(np.concatenate([[0], top.astype(int), [0]]))
    return int((np.flatnonzero(edges == -1) - np.flatnonzero(edges == 1)).max())


def plateau_remarks(places: Array, readings: Array, unit: str) -> tuple[str, ...]:
    """Return the remark that a row of equal highest readings deserves, or nothing."""
    top = readings >= readings.max() * (1 - SAME)
    edges = np.diff(np.concatenate([[0], top.astype(int), [0]]))
    for first, behind in zip(np.flatnonzero(edges == 1), np.flatnonzero(edges == -1), strict=True):
        if behind - first >= PLATEAU:
            return (
                f"The {behind - first} readings from {printed(float(places[first]))} to "
                f"{printed(float(places[behind - 1]))} {unit} all equal the highest one: "
                "is the film or the detector saturated?",
            )
    return ()


def _normalisation_remarks(places: Array, readings: Array, normalisation: str) -> tuple[str, ...]:
    """Return a remark if the readings are not 1 where the file says they are."""
    if normalisation in ("mid-height", "beam-axis") and places[0] <= 0 <= places[-1]:
        found, where = float(np.interp(0.0, places, readings)), "at position 0"
    elif normalisation == "maximum":
        found, where = float(readings.max()), "at the highest reading"
    else:
        return ()
    if abs(found - 1) <= NORMALISED_WITHIN:
        return ()
    stated = normalisation.replace("beam-axis", "beam axis")
    return (
        f"The file says that readings are 1 at the {stated}, but {where} they are {printed(found)}; "
        "only their ratios are used.",
    )
