"""
Heights of an arrangement: the patient on the stand under the ceiling, the head between floor and ceiling.

How far the plane can be stands in :mod:`plane_reach`, what cuts the beam in :mod:`beam_path`, where the
fields end in :mod:`field_edges`, the technique for a lying patient in :mod:`lying_reach`.
"""

from dataclasses import dataclass
from math import ceil, cos, radians, sin

from readiness.calculations.beam_geometry import above_zero


@dataclass(frozen=True)
class HeadClearance:
    """The smaller clearance of the treatment head at the two tilted angles; negative where it would hit."""

    head_above_floor_cm: float
    head_below_ceiling_cm: float


def stand_height_for_axis_cm(*, isocentre_height_cm: float, patient_height_cm: float) -> float:
    """
    Return the height of the standing surface that brings half the patient's height to the beam axis.

    Args:
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        patient_height_cm: From soles to crown. [cm]

    Returns:
        Height above the floor; negative where the patient would have to stand below it. [cm]

    Raises:
        ValueError: If a length is not above zero.

    Valid for: the standing techniques.
    Source: derived.
    """
    above_zero("the height of the isocentre", isocentre_height_cm)
    above_zero("the height of the patient", patient_height_cm)
    return isocentre_height_cm - patient_height_cm / 2


def mid_height_off_axis_cm(
    *, isocentre_height_cm: float, patient_height_cm: float, stand_height_cm: float
) -> float:
    """
    Return how far half the patient's height lies above the beam axis on a given stand.

    Args:
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        patient_height_cm: From soles to crown. [cm]
        stand_height_cm: Of the standing surface above the floor. [cm]

    Returns:
        Height above the axis, negative below it; harmless to 10, to be optimised again beyond 25. [cm]

    Raises:
        ValueError: If a length is not above zero.

    Valid for: the standing techniques.
    Source: derived; the two limits practice.
    """
    return stand_height_cm - stand_height_for_axis_cm(
        isocentre_height_cm=isocentre_height_cm, patient_height_cm=patient_height_cm
    )


def raised_hands_height_cm(
    *, patient_height_cm: float, stand_height_cm: float, coverage_ratio: float
) -> float:
    """
    Return the height of the raised hands above the floor.

    Args:
        patient_height_cm: From soles to crown. [cm]
        stand_height_cm: Of the standing surface above the floor. [cm]
        coverage_ratio: From soles to raised hands, in heights of the patient; about 1.25. [1]

    Returns:
        Height above the floor. [cm]

    Raises:
        ValueError: If the height is not above zero or the ratio below one.

    Valid for: the standing techniques.
    Source: practice.
    """
    above_zero("the height of the patient", patient_height_cm)
    if coverage_ratio < 1.0:
        raise ValueError("raised hands are not lower than the crown")
    return stand_height_cm + coverage_ratio * patient_height_cm


def ceiling_clearance_cm(*, ceiling_height_cm: float, raised_hands_height_cm: float) -> float:
    """
    Return the clearance between raised hands and ceiling.

    Args:
        ceiling_height_cm: Of the ceiling above the floor. [cm]
        raised_hands_height_cm: Of the raised hands above the floor. [cm]

    Returns:
        Clearance; negative where the hands do not fit under the ceiling. [cm]

    Raises:
        ValueError: If the height of the ceiling is not above zero.

    Valid for: the standing techniques.
    Source: derived.
    """
    above_zero("the height of the ceiling", ceiling_height_cm)
    return ceiling_height_cm - raised_hands_height_cm


def step_caution(*, stand_height_cm: float, step_height_cm: float) -> str:
    """
    Return what to heed about climbing the stand.

    Args:
        stand_height_cm: Of the standing surface above the floor. [cm]
        step_height_cm: Highest single step that a frail patient is asked to take. [cm]

    Returns:
        A caution, or "" if one step or less leads up.

    Raises:
        ValueError: If the height of a step is not above zero.

    Source: practice.
    """
    above_zero("the height of a step", step_height_cm)
    steps = ceil(stand_height_cm / step_height_cm - 1e-9)
    if stand_height_cm < 0.0:
        return (
            f"The standing surface would lie {-stand_height_cm:.0f} cm below the floor: "
            "half the patient's height is above the beam axis on any stand."
        )
    if steps <= 1:
        return ""
    return (
        f"The standing surface lies {stand_height_cm:.0f} cm above the floor, more than one step of "
        f"{step_height_cm:.0f} cm: {steps} steps with rails; guard against a fall from this height."
    )


def head_clearance(
    *,
    tilt_deg: float,
    head_radius_cm: float,
    head_end_cm: float,
    isocentre_height_cm: float,
    ceiling_height_cm: float,
) -> HeadClearance:
    """
    Return the clearance of the treatment head to floor and ceiling at the two tilted gantry angles.

    The head is a cylinder about the beam axis; its far end decides: below the isocentre by
    E sin t + R cos t for the field aimed at the head, above it by as much for the other.

    Args:
        tilt_deg: Half angle t between the two axes. [deg]
        head_radius_cm: Of the head about the beam axis, R. [cm]
        head_end_cm: From the isocentre to the far end of the head, behind the source, E. [cm]
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        ceiling_height_cm: Of the ceiling above the floor. [cm]

    Returns:
        Clearance to the floor (field aimed at the head) and to the ceiling (field aimed at the feet).

    Raises:
        ValueError: If a length is not above zero or the tilt does not lie from 0 to below 90 degrees.

    Valid for: both sides alike.
    Assumes: the parts of the gantry behind the head reach no farther than the head itself.
    Source: derived.
    """
    above_zero("the radius of the head", head_radius_cm)
    above_zero("the far end of the head", head_end_cm)
    if not 0.0 <= tilt_deg < 90.0:
        raise ValueError(f"a tilt lies from 0 to below 90 degrees, not {tilt_deg:g}")
    tilt = radians(tilt_deg)
    extent = head_end_cm * sin(tilt) + head_radius_cm * cos(tilt)
    return HeadClearance(isocentre_height_cm - extent, ceiling_height_cm - isocentre_height_cm - extent)
