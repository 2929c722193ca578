"""
Where the source stands and where its rays go, in IEC 61217 fixed coordinates centred on the isocentre.

x points to the right when facing the gantry, y toward the gantry, z up. A beam at gantry 90 goes toward -x,
one at 270 toward +x. A field aimed at the head has its source below the isocentre. Distances along the beam
side are counted horizontally from the nominal source, which is the source at gantry exactly 90 or 270.
"""

from math import atan, cos, degrees, isfinite, radians, sin, sqrt, tan
from typing import NamedTuple

SIDES_DEG = (90.0, 270.0)


class Point(NamedTuple):
    """A point from the isocentre in IEC 61217 fixed coordinates; a plain triple with names."""

    x_cm: float
    y_cm: float
    z_cm: float


class Direction(NamedTuple):
    """A unit vector in IEC 61217 fixed coordinates."""

    x: float
    y: float
    z: float


class TiltedPair(NamedTuple):
    """Gantry angles of the two fields of one dual field."""

    toward_head_deg: float
    toward_feet_deg: float


def sign_of_side(*, side_deg: float) -> int:
    """
    Return the sign of x toward which the beam of a side goes.

    Args:
        side_deg: Beam side as gantry angle, 90 or 270. [deg]

    Returns:
        -1 for side 90, +1 for side 270. [1]

    Raises:
        ValueError: If the side is neither 90 nor 270.

    Source: iec-61217 (memory).
    """
    if side_deg not in SIDES_DEG:
        raise ValueError(f"a beam side is 90 or 270 degrees, not {side_deg:g}")
    return -1 if side_deg == 90.0 else 1


def tilted_gantry_angles(*, side_deg: float, tilt_deg: float) -> TiltedPair:
    """
    Return the gantry angles of the two tilted fields.

    Side 90: head 90 + t, feet 90 - t. Side 270: head 270 - t, feet 270 + t.

    Args:
        side_deg: Beam side as gantry angle, 90 or 270. [deg]
        tilt_deg: Half angle t between the two axes; zero gives the side itself. [deg]

    Returns:
        Gantry angle aimed at the head and gantry angle aimed at the feet. [deg]

    Raises:
        ValueError: If the side is neither 90 nor 270, or the tilt does not lie from 0 to below 90 degrees.

    Source: iec-61217 (memory); signs derived from the source position.
    """
    if not 0.0 <= tilt_deg < 90.0:
        raise ValueError(f"a tilt lies from 0 to below 90 degrees, not {tilt_deg:g}")
    turn = -sign_of_side(side_deg=side_deg) * tilt_deg
    return TiltedPair(side_deg + turn, side_deg - turn)


def source_position(*, gantry_angle_deg: float, source_axis_distance_cm: float) -> Point:
    """
    Return where the source stands.

    x = SAD sin g, y = 0, z = SAD cos g

    Args:
        gantry_angle_deg: Gantry angle g. [deg]
        source_axis_distance_cm: From the source to the isocentre, SAD. [cm]

    Returns:
        Position from the isocentre. [cm]

    Raises:
        ValueError: If the distance is not above zero.

    Source: iec-61217 (memory).
    """
    above_zero("the source-axis distance", source_axis_distance_cm)
    angle = radians(gantry_angle_deg)
    return Point(source_axis_distance_cm * sin(angle), 0.0, source_axis_distance_cm * cos(angle))


def ray_direction(
    *, gantry_angle_deg: float, upward_tangent: float = 0.0, sideways_tangent: float = 0.0
) -> Direction:
    """
    Return the direction of a ray of a field, on its axis unless tangents are given.

    Tangents are offsets across the axis divided by the distance along it: half an opening of 40 cm at 100 cm
    is a tangent of 0.2. Sideways is toward +y. Upward is across the axis, in the plane of gantry rotation, on
    the side with the larger z; at gantry 0 and 180, where neither is higher, it is toward +x.

    Args:
        gantry_angle_deg: Gantry angle. [deg]
        upward_tangent: Offset across the axis, upward. [1]
        sideways_tangent: Offset across the axis, toward the gantry. [1]

    Returns:
        Unit vector along the ray. [1]

    Source: iec-61217 (memory).
    """
    angle = radians(gantry_angle_deg)
    across = upward_tangent * upward_sign_of_gantry_x(gantry_angle_deg=gantry_angle_deg)
    x = -sin(angle) + across * cos(angle)
    z = -cos(angle) - across * sin(angle)
    length = sqrt(x * x + sideways_tangent * sideways_tangent + z * z)
    return Direction(x / length, sideways_tangent / length, z / length)


def upward_sign_of_gantry_x(*, gantry_angle_deg: float) -> int:
    """
    Return whether the gantry's own x axis points upward.

    Args:
        gantry_angle_deg: Gantry angle. [deg]

    Returns:
        +1 if it points up (gantry 270), -1 if down (gantry 90); +1 at gantry 0 and -1 at 180, where it is
        level and upward counts as toward +x. [1]

    Source: iec-61217 (memory).
    """
    angle = radians(gantry_angle_deg)
    up, right = -sin(angle), cos(angle)
    return 1 if up > 1e-12 or (abs(up) <= 1e-12 and right > 0.0) else -1


def edge_angle_deg(*, opening_cm: float) -> float:
    """
    Return the angle between the axis and the edge of a field.

    Args:
        opening_cm: Full opening at 100 cm from the source. [cm]

    Returns:
        Angle from the axis to the middle of the edge; 11.3 for 40 cm. [deg]

    Raises:
        ValueError: If the opening is not above zero.

    Source: derived.
    """
    above_zero("the opening", opening_cm)
    return degrees(atan(opening_cm / 200.0))


def plane_x_cm(*, side_deg: float, distance_cm: float, source_axis_distance_cm: float) -> float:
    """
    Return x of the vertical plane at a distance from the nominal source.

    Args:
        side_deg: Beam side as gantry angle, 90 or 270. [deg]
        distance_cm: Horizontally from the nominal source to the plane. [cm]
        source_axis_distance_cm: From the source to the isocentre. [cm]

    Returns:
        x of the plane: -(D - SAD) for side 90, D - SAD for side 270. [cm]

    Raises:
        ValueError: If the side is neither 90 nor 270, or a distance is not above zero.

    Source: derived.
    """
    above_zero("the plane distance", distance_cm)
    above_zero("the source-axis distance", source_axis_distance_cm)
    return sign_of_side(side_deg=side_deg) * (distance_cm - source_axis_distance_cm)


def axis_height_at_plane_cm(
    *, plane_distance_cm: float, source_axis_distance_cm: float, tilt_deg: float
) -> float:
    """
    Return how far from the isocentre's height the axis of a tilted field meets the plane.

    h = (D - SAD) tan t

    Args:
        plane_distance_cm: Horizontally from the nominal source to the plane, D. [cm]
        source_axis_distance_cm: From the source to the isocentre. [cm]
        tilt_deg: Of the axis above the horizontal; negative for the field aimed at the feet. [deg]

    Returns:
        Height above the isocentre, negative below it. [cm]

    Raises:
        ValueError: If a distance is not above zero or the tilt is 90 degrees or more.

    Source: derived.
    """
    return ray_height_cm(
        distance_cm=plane_distance_cm,
        source_axis_distance_cm=source_axis_distance_cm,
        tilt_deg=tilt_deg,
        upward_deg=0.0,
    )


def ray_height_cm(
    *, distance_cm: float, source_axis_distance_cm: float, tilt_deg: float, upward_deg: float
) -> float:
    """
    Return the height at which a ray of a tilted field meets a vertical plane or wall across the beam side.

    z = (D - SAD + SAD cos t) tan(t + a) - SAD sin t, in the vertical plane through the axis

    Args:
        distance_cm: Horizontally from the nominal source to the plane or wall, D. [cm]
        source_axis_distance_cm: From the source to the isocentre, SAD. [cm]
        tilt_deg: Of the axis above the horizontal, t; negative for the field aimed at the feet. [deg]
        upward_deg: From the axis to the ray, upward positive, a. [deg]

    Returns:
        Height above the isocentre, negative below it. [cm]

    Raises:
        ValueError: If a distance is not above zero, the ray is not inclined by less than 90 degrees, or the
            plane does not lie in front of the source.

    Source: derived.
    """
    forward = distance_cm - _source_forward_cm(source_axis_distance_cm, tilt_deg)
    if forward <= 0.0:
        raise ValueError("the plane lies behind the source of the tilted field")
    slope = tan(radians(_inclination_deg(tilt_deg, upward_deg)))
    return forward * slope - source_axis_distance_cm * sin(radians(tilt_deg))


def ray_reach_cm(
    *, height_cm: float, source_axis_distance_cm: float, tilt_deg: float, upward_deg: float
) -> float | None:
    """
    Return the distance at which a ray of a tilted field meets a level surface such as floor or ceiling.

    Args:
        height_cm: Of the surface above the isocentre, negative for the floor. [cm]
        source_axis_distance_cm: From the source to the isocentre. [cm]
        tilt_deg: Of the axis above the horizontal; negative for the field aimed at the feet. [deg]
        upward_deg: From the axis to the ray, upward positive. [deg]

    Returns:
        Horizontal distance from the nominal source, or None if the ray never meets the surface. [cm]

    Raises:
        ValueError: If the distance is not above zero or the ray is not inclined by less than 90 degrees.

    Source: derived.
    """
    start = _source_forward_cm(source_axis_distance_cm, tilt_deg)
    rise = height_cm + source_axis_distance_cm * sin(radians(tilt_deg))
    slope = tan(radians(_inclination_deg(tilt_deg, upward_deg)))
    if abs(slope) < 1e-12 or rise / slope <= 0.0:
        return None
    return start + rise / slope


def _source_forward_cm(source_axis_distance_cm: float, tilt_deg: float) -> float:
    """Return how far the tilted source stands before the nominal one, toward the plane."""
    above_zero("the source-axis distance", source_axis_distance_cm)
    return source_axis_distance_cm * (1.0 - cos(radians(tilt_deg)))


def _inclination_deg(tilt_deg: float, upward_deg: float) -> float:
    """Return the inclination of a ray above the horizontal."""
    if not (abs(tilt_deg) < 90.0 and abs(tilt_deg + upward_deg) < 90.0):
        raise ValueError("axis and ray must be inclined by less than 90 degrees")
    return tilt_deg + upward_deg


def above_zero(words: str, number: float) -> None:
    """Refuse a length that is not above zero."""
    if not (isfinite(number) and number > 0.0):
        raise ValueError(f"{words} must be above zero, not {number:g}")
