"""Where the tilted fields meet the room, by axis and edges, and how wide a primary belt must be for them."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import cos, radians, sin, sqrt
from typing import cast

from readiness.calculations.barrier_distances import BEYOND_CM
from readiness.calculations.beam_geometry import ray_direction, source_position, tilted_gantry_angles
from readiness.calculations.surface_hit import SurfaceHit, first_surface_hit
from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table

BELT_MARGIN_CM = 30.0  # on each side of the beam (ncrp-151, read as quoted)
VERTICAL_RAYS = ("axis", "edge toward +x", "edge toward -x", "edge toward gantry", "edge away from gantry")
RAYS = ("axis", "upper edge", "lower edge", "edge toward gantry", "edge away from gantry")
SPOT_COLUMNS = (
    "field",
    "gantry_deg",
    "ray",
    "surface",
    "wall_number",
    "x_cm",
    "y_cm",
    "height_above_floor_cm",
    "path_cm",
    "obliquity_deg",
)


@dataclass(frozen=True)
class BeamSpots:
    """Where axes and edges of both tilted fields meet floor, walls and ceiling of the bare room."""

    axes_on: str
    all_on: str
    axes_on_one_wall: bool
    reaches_floor: bool
    reaches_ceiling: bool
    largest_axis_obliquity_deg: float
    widest_cm: float
    spots: Table


@dataclass(frozen=True)
class PrimaryBelt:
    """Width that a primary belt needs, and what is over (negative: missing) where its width is known."""

    beam_diagonal_cm: float
    needed_width_cm: float
    spare_cm: float | None


def beam_spots(
    *,
    side_deg: float,
    tilt_deg: float,
    source_axis_distance_cm: float,
    opening_cm: float,
    collimator_angle_deg: float,
    floor_polygon_cm: Sequence[tuple[float, float]],
    isocentre_height_cm: float,
    ceiling_height_cm: float,
) -> BeamSpots:
    """
    Return where axes and edges of both tilted fields meet the bare room.

    Args:
        side_deg: Beam side as gantry angle, 90 or 270. [deg]
        tilt_deg: Half angle between the two axes. [deg]
        source_axis_distance_cm: From the source to the isocentre. [cm]
        opening_cm: Full opening at 100 cm from the source, square. [cm]
        collimator_angle_deg: Turn of the collimator; a turned field reaches as far as its corners. [deg]
        floor_polygon_cm: Corners (x, y) of the floor in order, from the isocentre. [cm]
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        ceiling_height_cm: Of the ceiling above the floor. [cm]

    Returns:
        The spots, the surfaces they lie on (words as in ``barrier_distances``), the largest
        obliquity of an axis, and the full width of the field where its side edges meet the room.

    Raises:
        ValueError: If an angle or length is outside its meaning.
        OutsideValidity: If the source does not stand in the room that is described.

    Valid for: upright walls, level floor and ceiling; nothing in the room stops the beam.
    Source: derived; signs of iec-61217 (memory).
    """
    pair = tilted_gantry_angles(side_deg=side_deg, tilt_deg=tilt_deg)
    room = (floor_polygon_cm, isocentre_height_cm, ceiling_height_cm)
    fields = (("head", pair.toward_head_deg), ("feet", pair.toward_feet_deg))
    return _traced(fields, RAYS, _tangents(opening_cm, collimator_angle_deg), source_axis_distance_cm, room)


def vertical_spots(
    *,
    source_axis_distance_cm: float,
    opening_cm: float,
    collimator_angle_deg: float,
    floor_polygon_cm: Sequence[tuple[float, float]],
    isocentre_height_cm: float,
    ceiling_height_cm: float,
) -> BeamSpots:
    """
    Return where axis and edges of one vertical field meet the bare room, gantry at 0.

    Args:
        source_axis_distance_cm: From the source to the isocentre. [cm]
        opening_cm: Full opening at 100 cm from the source, square. [cm]
        collimator_angle_deg: Turn of the collimator; a turned field reaches as far as its corners. [deg]
        floor_polygon_cm: Corners (x, y) of the floor in order, from the isocentre. [cm]
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        ceiling_height_cm: Of the ceiling above the floor. [cm]

    Returns:
        As ``beam_spots``, for the one field that is called ``down``.

    Raises:
        ValueError: If a length is outside its meaning.
        OutsideValidity: If the source does not stand in the room that is described.

    Valid for: upright walls, level floor and ceiling; neither couch nor patient stops the beam.
    Source: derived; signs of iec-61217 (memory).
    """
    room = (floor_polygon_cm, isocentre_height_cm, ceiling_height_cm)
    tangents = _tangents(opening_cm, collimator_angle_deg)
    return _traced((("down", 0.0),), VERTICAL_RAYS, tangents, source_axis_distance_cm, room)


def _traced(
    fields: tuple[tuple[str, float], ...],
    rays: tuple[str, ...],
    tangents: list[tuple[float, float]],
    axis_cm: float,
    room: tuple[Sequence[tuple[float, float]], float, float],
) -> BeamSpots:
    """Return where axis and edges of some fields, each with its gantry angle, meet the room."""
    floor_polygon_cm, isocentre_height_cm, _ = room
    found: list[tuple[str, float, str, SurfaceHit]] = [
        (field, gantry, ray, _hit(gantry, upward, sideways, axis_cm, room))
        for field, gantry in fields
        for ray, (upward, sideways) in zip(rays, tangents, strict=True)
    ]
    sides = [_surface(hit, floor_polygon_cm) for *_, hit in found]
    axes = [side for side, (_, _, ray, _) in zip(sides, found, strict=True) if ray == "axis"]
    axis_hits = [hit for _, _, ray, hit in found if ray == "axis"]
    across = [hit.point.y_cm for _, _, ray, hit in found if ray in RAYS[3:]]
    rows: list[tuple[Scalar, ...]] = [
        (
            field,
            gantry,
            ray,
            side,
            hit.wall_index,
            hit.point.x_cm,
            hit.point.y_cm,
            hit.point.z_cm + isocentre_height_cm,
            hit.path_cm,
            hit.obliquity_deg,
        )
        for (field, gantry, ray, hit), side in zip(found, sides, strict=True)
    ]
    return BeamSpots(
        axes_on=", ".join(dict.fromkeys(axes)),
        all_on=", ".join(dict.fromkeys(sides)),
        axes_on_one_wall=len({hit.wall_index for hit in axis_hits}) == 1 and axis_hits[0].surface == "wall",
        reaches_floor="floor" in sides,
        reaches_ceiling="ceiling" in sides,
        largest_axis_obliquity_deg=max(hit.obliquity_deg for hit in axis_hits),
        widest_cm=max(across) - min(across),
        spots=Table.of(SPOT_COLUMNS, rows),
    )


def nearest_spot_distance_m(*, spots: Table, surface: str, layers: Table) -> float | None:
    """
    Return the shortest way of a tilted field through one surface of the room to 0.3 m beyond it.

    d = path + t + 0.3 m, without the lengthening by obliquity, which is the careful choice

    Args:
        spots: As ``beam_spots`` gives them.
        surface: Such as ``ceiling`` or ``x-min-wall``; a word that names none of them gives None.
        layers: Of the barrier there, with thickness_cm.

    Returns:
        Distance from the source, or None where neither axis nor edge meets that surface. [m]

    Raises:
        OutsideValidity: If the barrier has no layers.

    Source: derived.
    """
    if not layers.rows:
        raise OutsideValidity("the barrier has no layers: state material, thickness and density of each")
    thickness = sum(cast(float, entry) for entry in layers.column("thickness_cm"))
    paths = [cast(float, row["path_cm"]) for row in spots.records() if row["surface"] == surface]
    return (min(paths) + thickness + BEYOND_CM) / 100.0 if paths else None


def primary_belt(*, opening_cm: float, distance_cm: float, belt_width_cm: float | None) -> PrimaryBelt:
    """
    Return how wide the primary part of a barrier must be for a square field.

    w = sqrt(2) opening d/100 + 2 x 30 cm

    Args:
        opening_cm: Full opening at 100 cm from the source, square. [cm]
        distance_cm: From the source to the far face of the narrower part of the barrier, d. [cm]
        belt_width_cm: Width of the thick part, centred on the beam; None if not stated. [cm]

    Returns:
        Beam diagonal, width needed, and what is over.

    Raises:
        ValueError: If a length is not above zero.

    Assumes: corners of the field are not cut by a round primary collimator, which would make it smaller.
    Source: bunker-thesis (read), after ncrp-151, sec. 2.2.1.
    """
    if not (opening_cm > 0.0 and distance_cm > 0.0):
        raise ValueError("opening and distance must be above zero")
    if belt_width_cm is not None and not belt_width_cm > 0.0:
        raise ValueError(f"a width must be above zero, not {belt_width_cm:g}")
    diagonal = sqrt(2.0) * opening_cm * distance_cm / 100.0
    needed = diagonal + 2.0 * BELT_MARGIN_CM
    return PrimaryBelt(diagonal, needed, None if belt_width_cm is None else belt_width_cm - needed)


def _tangents(opening_cm: float, collimator_angle_deg: float) -> list[tuple[float, float]]:
    """Return upward and sideways tangent of axis and edges."""
    if not opening_cm > 0.0:
        raise ValueError(f"an opening must be above zero, not {opening_cm:g}")
    turn = radians(collimator_angle_deg)
    reach = opening_cm / 200.0 * (abs(cos(turn)) + abs(sin(turn)))
    return [(0.0, 0.0), (reach, 0.0), (-reach, 0.0), (0.0, reach), (0.0, -reach)]


def _hit(
    gantry_deg: float,
    upward: float,
    sideways: float,
    axis_cm: float,
    room: tuple[Sequence[tuple[float, float]], float, float],
) -> SurfaceHit:
    """Return where one ray meets the room."""
    source = source_position(gantry_angle_deg=gantry_deg, source_axis_distance_cm=axis_cm)
    direction = ray_direction(gantry_angle_deg=gantry_deg, upward_tangent=upward, sideways_tangent=sideways)
    polygon, isocentre, ceiling = room
    try:
        return first_surface_hit(
            source_cm=source,
            direction=direction,
            floor_polygon_cm=polygon,
            isocentre_height_cm=isocentre,
            ceiling_height_cm=ceiling,
        )
    except ValueError as fault:
        raise OutsideValidity("the source stands outside the room that is described") from fault


def _surface(hit: SurfaceHit, polygon: Sequence[tuple[float, float]]) -> str:
    """Return the surface of the room on which a spot lies, walls by the side of the room they belong to."""
    if hit.wall_index is None:
        return hit.surface
    (ax, ay), (bx, by) = polygon[hit.wall_index], polygon[(hit.wall_index + 1) % len(polygon)]
    if abs(bx - ax) > abs(by - ay):
        return "y-min-wall" if hit.point.y_cm < 0.0 else "y-max-wall"
    return "x-min-wall" if hit.point.x_cm < 0.0 else "x-max-wall"
