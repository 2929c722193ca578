"""The multiple-field factor B measured on a cylinder, and the corresponding factor of a rotating platform."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from readiness.calculations.field_factor import B_HIGH, B_LOW, POSITIONS, b_factor_question
from readiness.calculations.usable_readings import paired
from readiness.errors import OutsideValidity
from readiness.quantities import Uncertain
from readiness.units import printed

Array = NDArray[np.float64]

SIX_POSITION, ROTATING = "six-position", "rotating-platform"
FEWEST_AROUND = 3
FEW_AROUND = 6
WIDEST_GAP_DEG = 60.0  # dual fields stand this far apart, and the dose between two of them is another
TRUNK_RADIUS_CM = (12.0, 18.0)  # a cylinder of about 30 cm diameter stands for an adult's trunk
LARGEST_SPREAD_PERCENT = 15.0


@dataclass(frozen=True)
class BFactor:
    """
    Factor of the fields given, from a cylinder.

    ``factor`` is B for six positions and B/6 for a rotating platform; its standard deviation is that of the
    mean around the circumference and of the calibration-point readings. ``spread_percent`` is the half-range
    around the circumference. ``six_position_factor`` is the factor times 6 for a rotating platform.
    """

    factor: Uncertain
    six_position_factor: float
    technique: str
    spread_percent: float
    lowest_at_deg: float
    highest_at_deg: float
    readings_around: int
    calibration_readings: int
    question: str
    remarks: tuple[str, ...]


def analyse_b_factor(
    *,
    around_deg: ArrayLike,
    cylinder_doses_cgy: ArrayLike,
    cylinder_mu: ArrayLike,
    calibration_doses_cgy: ArrayLike,
    calibration_mu: ArrayLike,
    technique: str,
    cylinder_radius_cm: float,
) -> BFactor:
    """
    Return the multiple-field factor from readings around a cylinder and at the calibration point.

    factor = mean(dose on the cylinder / MU) / mean(dose at the calibration point / MU)

    Args:
        around_deg: Place of each reading on the circumference, (n,). [deg]
        cylinder_doses_cgy: Dose at each place from all dual fields or the whole rotation, (n,). [cGy]
        cylinder_mu: MU of each dual field, or of the whole rotation, for each of them, (n,). [MU]
        calibration_doses_cgy: Dose at the calibration point from one dual field, (m,). [cGy]
        calibration_mu: MU of that dual field, for each of them, (m,). [MU]
        technique: "six-position" or "rotating-platform".
        cylinder_radius_cm: Radius of the cylinder. [cm]

    Returns:
        The factor with its standard deviation, its spread around the circumference, a question if it is of an
        unusual size, and remarks.

    Raises:
        ValueError: If lengths differ, a number is not finite, or the technique is another word.
        OutsideValidity: If the technique has no B, readings are too few or not more than 0, or doses differ
            by the factor between gray and centigray.

    Valid for: a cylinder near the depth of the calibration reading, turned through all fields.
    Assumes: MU are counted alike in both; readings around scatter independently.
    Source: aapm-23 (memory) for the definition; 2.3 to 3.1 and about 30 cm practice.
    """
    if technique == "moving-couch":
        raise OutsideValidity("a moving couch has no B: its dose follows from the dose rate along the travel")
    if technique not in (SIX_POSITION, ROTATING):
        raise ValueError(f"a technique with a factor is {SIX_POSITION} or {ROTATING}, not {technique!r}")
    if not cylinder_radius_cm > 0:
        raise ValueError("the radius of a cylinder is more than 0 cm")
    places, around = _per_mu(around_deg, cylinder_doses_cgy, cylinder_mu)
    _, at_point = _per_mu(calibration_doses_cgy, calibration_doses_cgy, calibration_mu)
    if len(around) < FEWEST_AROUND:
        raise OutsideValidity(f"{len(around)} readings on the cylinder; at least {FEWEST_AROUND} are needed")
    value = float(around.mean() / at_point.mean())
    relative = np.hypot(_relative_sd(around), _relative_sd(at_point))
    six = value if technique == SIX_POSITION else POSITIONS * value
    _refuse_factor_100(six)
    spread = 100 * float((around.max() - around.min()) / (around.max() + around.min()))
    question = _question(six, value, technique)
    return BFactor(
        factor=Uncertain(value, value * float(relative)),
        six_position_factor=six,
        technique=technique,
        spread_percent=spread,
        lowest_at_deg=float(places[np.argmin(around)]),
        highest_at_deg=float(places[np.argmax(around)]),
        readings_around=len(around),
        calibration_readings=len(at_point),
        question=question,
        remarks=tuple(_remarks(places, len(at_point), spread, cylinder_radius_cm, question)),
    )


def _per_mu(places: ArrayLike, doses: ArrayLike, mu: ArrayLike) -> tuple[Array, Array]:
    """Return places and dose per MU, all readings more than 0."""
    at, values = paired(places, doses)
    _, given = paired(places, mu)
    if not len(at):
        raise OutsideValidity("the cylinder and the calibration point both need readings")
    if (values <= 0).any() or (given <= 0).any():
        raise OutsideValidity("a reading or its MU is not more than 0")
    return at, values / given


def _relative_sd(readings: Array) -> float:
    """Return the relative standard deviation of the mean; 0 for a single reading, which the remarks say."""
    if len(readings) == 1:
        return 0.0
    return float(readings.std(ddof=1) / np.sqrt(len(readings)) / readings.mean())


def _refuse_factor_100(six: float) -> None:
    """Refuse a factor that is a hundred times too small or large."""
    for factor in (100.0, 0.01):
        if B_LOW * 0.8 <= six / factor <= B_HIGH * 1.2:
            raise OutsideValidity(
                f"the doses give a factor of {printed(six, 3)}: are some of them gray under a column in cGy?"
            )


def _question(six: float, value: float, technique: str) -> str:
    """Return the question that a factor of unusual size raises."""
    if technique == SIX_POSITION:
        return b_factor_question(b_factor=six)
    if B_LOW <= six <= B_HIGH:
        return ""
    low, high = B_LOW / POSITIONS, B_HIGH / POSITIONS
    return (
        f"A rotating factor of {printed(value, 3)} lies outside {printed(low, 2)} to {printed(high, 2)}: "
        "were the MU those of the whole rotation, and the calibration dose that of one dual field?"
    )


def _remarks(places: Array, calibration: int, spread: float, radius_cm: float, question: str) -> list[str]:
    """Return what must be said beside the factor."""
    said = [question] if question else []
    if len(places) < FEW_AROUND:
        said.append(f"Only {len(places)} places on the cylinder; {FEW_AROUND} or more show the scalloping.")
    turned = np.sort(places % 360)
    gap = float(np.diff(np.append(turned, turned[0] + 360)).max())
    if gap > WIDEST_GAP_DEG + 1e-6:
        said.append(f"No reading over {printed(gap)} deg of the circumference; the mean leaves it out.")
    if calibration == 1:
        said.append("One reading at the calibration point: its scatter is not in the standard deviation.")
    if spread > LARGEST_SPREAD_PERCENT:
        said.append(
            f"Readings around the cylinder vary by {printed(spread, 2)} % (half-range): was a position left "
            "out or given twice, or the cylinder off the axis?"
        )
    if not TRUNK_RADIUS_CM[0] <= radius_cm <= TRUNK_RADIUS_CM[1]:
        said.append(
            f"A radius of {printed(radius_cm)} cm is not that of an adult's trunk; B is larger on thin ones."
        )
    return said
