"""Distances from source, head, isocentre and patient to the point 0.3 m beyond a barrier, for a beam side."""

from dataclasses import dataclass
from math import isfinite, radians, sin
from typing import cast

from readiness.errors import OutsideValidity
from readiness.quantities import Table

BEYOND_CM = 30.0  # from the outer face to the point that is protected (ncrp-151, memory)
IN_LINE = {90.0: ("x-min-wall", "x-max-wall"), 270.0: ("x-max-wall", "x-min-wall"), 0.0: ("floor", "ceiling")}
SURFACES = ("x-min-wall", "x-max-wall", "y-min-wall", "y-max-wall", "ceiling", "floor")
SURVEY_ONLY = ("door", "maze", "penetration")


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
    surface: str,
    layers: Table,
    inner_face_cm: float | None,
    distance_m: float | None,
    isocentre_distance_m: float | None,
    leakage_distance_m: float | None,
    isocentre_height_cm: float | None,
    side_deg: float,
    tilt_deg: float,
    source_axis_distance_cm: float,
    plane_distance_cm: float,
) -> BarrierDistances:
    """
    Return all distances to a barrier, for a beam side, from those that are stated or from its inner face.

    For the wall that the beam faces: source and head at d_iso + SAD, patient at d_iso - (D - SAD). For the
    opposite one: head at d_iso - SAD, a metre nearer than the isocentre, patient at d_iso + (D - SAD). Across
    the beam, above and below, the nearest point counts, opposite to head, isocentre or patient; above and
    below the tilted head is nearer by SAD sin t. A vertical beam faces the floor, with the ceiling opposite.

    Args:
        surface: ``x-min-wall`` (faced at gantry 90), ``x-max-wall`` (270), ``y-min-wall``, ``y-max-wall``,
            ``ceiling`` or ``floor``; doors, mazes and penetrations are for the survey.
        layers: With thickness_cm, for the distance from the inner face.
        inner_face_cm: Coordinate of the inner face from the isocentre, for ceiling and floor its height above
            the floor; None if not stated. [cm]
        distance_m: From the source through the isocentre to 0.3 m beyond; None if not stated. [m]
        isocentre_distance_m: From the isocentre to 0.3 m beyond; None if not stated. [m]
        leakage_distance_m: From the head to 0.3 m beyond at gantry 90 or 270, taken where the head is beside
            the barrier; in line with the beam it follows from the side. None if not stated. [m]
        isocentre_height_cm: Of the isocentre above the floor, for ceiling and floor; None if not stated. [cm]
        side_deg: Beam side as gantry angle, 90 or 270; 0 for a vertical beam. [deg]
        tilt_deg: Half angle between the two axes, t; 0 for a vertical beam. [deg]
        source_axis_distance_cm: From the source to the isocentre, SAD. [cm]
        plane_distance_cm: From the nominal source to the patient's plane, D. [cm]

    Returns:
        The distances and the scattering angle at the patient.

    Raises:
        ValueError: If a word is none of those listed, an angle or distance is outside its meaning, or the
            point lies before patient or head.
        OutsideValidity: For doors, mazes and penetrations, or if no distance is stated and none follows.

    Assumes: sources at their nominal place; along the beam the tilt brings them forward by less than 5 cm and
        makes the path longer by more.
    Source: derived; existing leakage from the isocentre as in ncrp-151, sec. 2.2.2 (memory).
    """
    _check(surface, side_deg, tilt_deg, (source_axis_distance_cm, plane_distance_cm))
    axis, beyond = source_axis_distance_cm / 100.0, (plane_distance_cm - source_axis_distance_cm) / 100.0
    iso = isocentre_distance_m
    if iso is None and distance_m is not None and surface.startswith("x-"):
        iso = distance_m - axis
    if iso is None:
        iso = _from_inner_face(surface, layers, inner_face_cm, isocentre_height_cm)
    source = iso + axis if distance_m is None else distance_m
    faced, opposite = IN_LINE[side_deg]
    faces = surface == faced
    if faces:
        head, patient, angle = source, source - beyond - axis, 0.0
    elif surface == opposite:
        head, patient, angle = iso - axis, iso + beyond, 180.0
    else:
        raised = axis * sin(radians(tilt_deg)) if surface in ("ceiling", "floor") else 0.0
        stated = None if side_deg == 0.0 else leakage_distance_m
        head = iso - raised if stated is None else stated
        patient, angle = iso, 90.0
    if not all(isfinite(each) and each > 0.0 for each in (iso, source, head, patient)):
        raise ValueError("the point beyond the barrier lies before the isocentre, the head or the patient")
    return BarrierDistances(faces, source, iso, head, source if faces else None, patient, angle)


def _check(surface: str, side_deg: float, tilt_deg: float, distances: tuple[float, ...]) -> None:
    """Refuse words and numbers outside their meaning."""
    if surface in SURVEY_ONLY:
        raise OutsideValidity("doors, mazes and penetrations are not computed: survey in the mode")
    if surface not in SURFACES:
        raise ValueError(f"a barrier is one of {', '.join(SURFACES)}, not {surface!r}")
    if side_deg not in IN_LINE:
        raise ValueError(f"a beam side is 90 or 270 degrees, or 0 for a vertical beam, not {side_deg:g}")
    if not 0.0 <= tilt_deg < 90.0:
        raise ValueError(f"a tilt lies from 0 to below 90 degrees, not {tilt_deg:g}")
    for each in distances:
        if not (isfinite(each) and each > 0.0):
            raise ValueError(f"a distance must be above zero, not {each:g}")


def _from_inner_face(surface: str, layers: Table, face_cm: float | None, height_cm: float | None) -> float:
    """Return the distance from the isocentre to 0.3 m beyond, from the inner face and the thickness."""
    upright = surface not in ("ceiling", "floor")
    if face_cm is None or not layers.rows or (height_cm is None and not upright):
        raise OutsideValidity(
            "no distance to the barrier is stated, and it does not follow: state it from the isocentre, or "
            "state the inner face and the layers"
        )
    inside = abs(face_cm) if upright else abs(face_cm - cast(float, height_cm))
    thickness = sum(cast(float, entry) for entry in layers.column("thickness_cm"))
    return (inside + thickness + BEYOND_CM) / 100.0
