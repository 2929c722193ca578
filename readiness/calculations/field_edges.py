"""Rays along the edges of a square field, and where both tilted fields meet floor, ceiling and walls."""

from collections.abc import Sequence
from math import cos, radians, sin

from readiness.calculations.beam_geometry import (
    Direction,
    above_zero,
    ray_direction,
    source_position,
    tilted_gantry_angles,
    upward_sign_of_gantry_x,
)
from readiness.calculations.surface_hit import first_surface_hit
from readiness.quantities import Scalar, Table

FIELDS = ("toward head", "toward feet")
COLUMNS = (
    "field",
    "ray",
    "surface",
    "wall",
    "x_cm",
    "y_cm",
    "height_above_floor_cm",
    "path_cm",
    "obliquity_deg",
)


def corner_rays(
    *, gantry_angle_deg: float, opening_cm: float, collimator_angle_deg: float
) -> tuple[Direction, Direction, Direction, Direction]:
    """
    Return the rays through the four corners of a square field, in order round it.

    Args:
        gantry_angle_deg: Gantry angle. [deg]
        opening_cm: Full opening at 100 cm from the source. [cm]
        collimator_angle_deg: Collimator angle, counter-clockwise seen from the source. [deg]

    Returns:
        Four unit vectors. [1]

    Raises:
        ValueError: If the opening is not above zero.

    Assumes: sharp corners, although round primary collimators cut them.
    Source: iec-61217 (memory); derived.
    """
    above_zero("the opening", opening_cm)
    half = opening_cm / 200.0
    turn = radians(collimator_angle_deg)
    upward = upward_sign_of_gantry_x(gantry_angle_deg=gantry_angle_deg)
    rays = [
        ray_direction(
            gantry_angle_deg=gantry_angle_deg,
            upward_tangent=upward * half * (across * cos(turn) - along * sin(turn)),
            sideways_tangent=half * (across * sin(turn) + along * cos(turn)),
        )
        for across, along in ((1, 1), (1, -1), (-1, -1), (-1, 1))
    ]
    return rays[0], rays[1], rays[2], rays[3]


def field_edges_in_room(
    *,
    side_deg: float,
    tilt_deg: float,
    opening_cm: float,
    collimator_angle_deg: float,
    source_axis_distance_cm: float,
    floor_polygon_cm: Sequence[tuple[float, float]],
    isocentre_height_cm: float,
    ceiling_height_cm: float,
) -> Table:
    """
    Return where the axes and edges of both tilted fields meet the bare room.

    Upper and lower edge lie in the vertical plane through the axis; the other two beside the axis; then the
    four corners. With a turned collimator the edges are met where the field's outline crosses those planes.

    Args:
        side_deg: Beam side as gantry angle, 90 or 270. [deg]
        tilt_deg: Half angle between the two axes. [deg]
        opening_cm: Full opening at 100 cm from the source. [cm]
        collimator_angle_deg: Collimator angle. [deg]
        source_axis_distance_cm: From the source to the isocentre. [cm]
        floor_polygon_cm: Corners (x, y) of the floor in order, from the isocentre. [cm]
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        ceiling_height_cm: Of the ceiling above the floor. [cm]

    Returns:
        One row per ray: field, ray, surface, number of the wall (from 1), the point (x and y from the
        isocentre, height above the floor), length of the way, and angle to the surface's normal.

    Raises:
        ValueError: If the source does not lie inside the room, or an argument lies outside its meaning.

    Valid for: a room without patient and stand, upright walls, level floor and ceiling.
    Source: derived.
    """
    rows: list[list[Scalar]] = []
    gantry_angles = tilted_gantry_angles(side_deg=side_deg, tilt_deg=tilt_deg)
    for field, gantry in zip(FIELDS, gantry_angles, strict=True):
        source = source_position(gantry_angle_deg=gantry, source_axis_distance_cm=source_axis_distance_cm)
        for ray, direction in _named_rays(gantry, opening_cm, collimator_angle_deg):
            hit = first_surface_hit(
                source_cm=source,
                direction=direction,
                floor_polygon_cm=floor_polygon_cm,
                isocentre_height_cm=isocentre_height_cm,
                ceiling_height_cm=ceiling_height_cm,
            )
            wall = None if hit.wall_index is None else hit.wall_index + 1
            height = hit.point.z_cm + isocentre_height_cm
            x, y = hit.point.x_cm, hit.point.y_cm
            rows.append([field, ray, hit.surface, wall, x, y, height, hit.path_cm, hit.obliquity_deg])
    return Table.of(COLUMNS, rows)


def _named_rays(gantry: float, opening: float, collimator: float) -> list[tuple[str, Direction]]:
    """Return axis, edges and corners of one field with their names."""
    turn = radians(collimator)
    half = opening / 200.0 / max(abs(cos(turn)), abs(sin(turn)))
    corners = corner_rays(gantry_angle_deg=gantry, opening_cm=opening, collimator_angle_deg=collimator)
    return [
        ("axis", ray_direction(gantry_angle_deg=gantry)),
        ("upper edge", ray_direction(gantry_angle_deg=gantry, upward_tangent=half)),
        ("lower edge", ray_direction(gantry_angle_deg=gantry, upward_tangent=-half)),
        ("edge toward the gantry", ray_direction(gantry_angle_deg=gantry, sideways_tangent=half)),
        ("edge away from the gantry", ray_direction(gantry_angle_deg=gantry, sideways_tangent=-half)),
        *((f"corner {number}", corner) for number, corner in enumerate(corners, start=1)),
    ]
