"""
X-ray dose to the body over a course.

Two fractions are in use and differ by about 2.2: f1 of one dual field (x-ray dose at a depth over the
calibration-point dose) and F of all six (body dose over skin dose). A body dose from f1 alone is too low.
"""

from readiness.calculations.field_factor import POSITIONS, b_factor_question
from readiness.errors import OutsideValidity


def composite_xray_percent(
    *, pair_xray_percent: float, b_factor: float, definition_confirmed: bool = False
) -> float:
    """
    Return the x-ray fraction of all six dual fields from that of one.

    F = (6 / B) f1

    Args:
        pair_xray_percent: X-ray dose f1 of one dual field over its calibration-point dose. [%]
        b_factor: Multiple-field factor B. [1]
        definition_confirmed: Whether the definition of an unusual B has been confirmed.

    Returns:
        Body dose over skin dose of a complete cycle. [%]

    Raises:
        ValueError: If a number is impossible.
        OutsideValidity: If B is unusual and its definition has not been confirmed.

    Valid for: six positions.
    Assumes: the x-ray dose at the stated depth is alike from all directions.
    Source: definition (derived).
    """
    if not 0 <= pair_xray_percent <= 100:
        raise ValueError(f"an x-ray fraction lies between 0 and 100 %, not {pair_xray_percent}")
    question = b_factor_question(b_factor=b_factor)
    if question and not definition_confirmed:
        raise OutsideValidity(question)
    return POSITIONS / b_factor * pair_xray_percent


def course_xray_dose(*, total_dose_gy: float, composite_xray_percent: float) -> float:
    """
    Return the x-ray dose to the body over a course.

    D_x = D F / 100

    Args:
        total_dose_gy: Skin dose of the course. [Gy]
        composite_xray_percent: Body dose over skin dose F, all six dual fields. [%]

    Returns:
        X-ray dose at the depth that F was stated for. [Gy]

    Raises:
        ValueError: If a number is impossible.

    Valid for: F, never f1.
    Assumes: boosts add no x rays.
    Source: definition (derived).
    """
    if not total_dose_gy > 0 or not 0 <= composite_xray_percent <= 100:
        raise ValueError(f"{composite_xray_percent} % of {total_dose_gy} Gy is no x-ray dose")
    return total_dose_gy * composite_xray_percent / 100


def highest_composite_xray_percent(*, total_dose_gy: float, xray_limit_gy: float) -> float:
    """
    Return the highest fraction F with which a course stays within a limit of x-ray dose.

    F = 100 D_limit / D

    Args:
        total_dose_gy: Skin dose of the course. [Gy]
        xray_limit_gy: Highest x-ray dose to the body over the course. [Gy]

    Returns:
        Highest body dose over skin dose F. [%]

    Raises:
        ValueError: If a dose is not more than 0.

    Valid for: F, never f1.
    Assumes: boosts add no x rays.
    Source: definition (derived).
    """
    if not total_dose_gy > 0 or not xray_limit_gy > 0:
        raise ValueError(f"a limit of {xray_limit_gy} Gy on a course of {total_dose_gy} Gy says nothing")
    return 100 * xray_limit_gy / total_dose_gy
