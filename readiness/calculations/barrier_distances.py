"""Distances from source, head, isocentre and patient to the point 0.3 m beyond a barrier, for a beam side."""

from dataclasses import dataclass
from math import isfinite, radians, sin

TOWARD = ("90", "270", "across", "above", "below")


@dataclass(frozen=True)
class BarrierDistances:
    """
    Distances to the point 0.3 m beyond a barrier, as ``weekly_dose`` takes them.

    ``xray_distance_m`` is None where the horizontal beam does not go; a tilted lobe on floor or ceiling is
    found by tracing and brings its own distance.
    """

    faces_beam: bool
    primary_distance_m: float
    isocentre_distance_m: float
    head_distance_m: float
    xray_distance_m: float | None
    scatter_distance_m: float
    scatter_angle_deg: float


def barrier_distances(
    *,
    toward: str,
    isocentre_distance_m: float,
    side_deg: float,
    tilt_deg: float,
    source_axis_distance_cm: float,
    plane_distance_cm: float,
    stated_head_distance_m: float | None,
) -> BarrierDistances:
    """
    Return all distances to a barrier from one of them, for a beam side.

    For the barrier that the beam faces: source and head at d_iso + SAD, patient at d_iso - (D - SAD). For the
    opposite one: head at d_iso - SAD, a metre nearer than the isocentre, patient at d_iso + (D - SAD). Across
    the beam, above and below, the nearest point counts, opposite to head, isocentre or patient; above and
    below the tilted head is nearer by SAD sin t.

    Args:
        toward: Where the barrier stands: where a beam at gantry ``90`` or ``270`` goes, ``across`` it,
            ``above`` or ``below``.
        isocentre_distance_m: From the isocentre, at right angles to the barrier, to 0.3 m beyond it. [m]
        side_deg: Beam side as gantry angle, 90 or 270. [deg]
        tilt_deg: Half angle between the two axes, t. [deg]
        source_axis_distance_cm: From the source to the isocentre, SAD. [cm]
        plane_distance_cm: From the nominal source to the patient's plane, D. [cm]
        stated_head_distance_m: From the head to the point, if the department measured another one. [m]

    Returns:
        The distances and the scattering angle at the patient.

    Raises:
        ValueError: If a word is none of those listed, the side neither 90 nor 270, a distance not above zero,
            or the point lies before patient or head.

    Assumes: sources at their nominal place; along the beam the tilt brings them forward by less than 5 cm and
        makes the path longer by more.
    Source: derived; existing leakage from the isocentre as in ncrp-151, sec. 2.2.2 (memory).
    """
    if toward not in TOWARD:
        raise ValueError(f"a barrier stands toward one of {', '.join(TOWARD)}, not {toward!r}")
    if side_deg not in (90.0, 270.0):
        raise ValueError(f"a beam side is 90 or 270 degrees, not {side_deg:g}")
    if not 0.0 <= tilt_deg < 90.0:
        raise ValueError(f"a tilt lies from 0 to below 90 degrees, not {tilt_deg:g}")
    for each in (isocentre_distance_m, source_axis_distance_cm, plane_distance_cm):
        if not (isfinite(each) and each > 0.0):
            raise ValueError(f"a distance must be above zero, not {each:g}")
    axis, beyond = source_axis_distance_cm / 100.0, (plane_distance_cm - source_axis_distance_cm) / 100.0
    faces = toward == f"{side_deg:g}"
    if toward in ("90", "270"):
        head = isocentre_distance_m + (axis if faces else -axis)
        patient, angle = isocentre_distance_m + (-beyond if faces else beyond), (0.0 if faces else 180.0)
    else:
        raised = axis * sin(radians(tilt_deg)) if toward in ("above", "below") else 0.0
        head, patient, angle = isocentre_distance_m - raised, isocentre_distance_m, 90.0
    if stated_head_distance_m is not None:
        head = stated_head_distance_m
    if not (head > 0.0 and patient > 0.0):
        raise ValueError("the point beyond the barrier lies before the head or the patient")
    return BarrierDistances(
        faces_beam=faces,
        primary_distance_m=isocentre_distance_m + axis,
        isocentre_distance_m=isocentre_distance_m,
        head_distance_m=head,
        xray_distance_m=isocentre_distance_m + axis if faces else None,
        scatter_distance_m=patient,
        scatter_angle_deg=angle,
    )
