"""Which surface of the bare room a ray meets first, where, and how obliquely."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import acos, degrees, hypot, isfinite, sqrt

from readiness.calculations.beam_geometry import Direction, Point


@dataclass(frozen=True)
class SurfaceHit:
    """Where a ray first meets the room: ``floor``, ``ceiling`` or ``wall`` (then counted from 0)."""

    surface: str
    wall_index: int | None
    point: Point
    path_cm: float
    obliquity_deg: float


def first_surface_hit(
    *,
    source_cm: tuple[float, float, float],
    direction: tuple[float, float, float],
    floor_polygon_cm: Sequence[tuple[float, float]],
    isocentre_height_cm: float,
    ceiling_height_cm: float,
) -> SurfaceHit:
    """
    Return the surface of the bare room that a ray meets first.

    Wall i runs from corner i of the polygon to the next one. A ray into an edge or corner counts for the
    floor, else the ceiling, else the wall with the lower number.

    Args:
        source_cm: Where the ray starts, from the isocentre. [cm]
        direction: Along the ray, of any length. [1]
        floor_polygon_cm: Corners (x, y) of the floor in order, from the isocentre. [cm]
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        ceiling_height_cm: Of the ceiling above the floor. [cm]

    Returns:
        Surface, point from the isocentre, length of the way there, angle to the surface's normal.

    Raises:
        ValueError: If the ray has no direction or starts outside the room.

    Valid for: upright walls, level floor and ceiling.
    Source: derived.
    """
    length = sqrt(sum(part * part for part in direction))
    if not (isfinite(length) and length > 0.0):
        raise ValueError("a ray needs a direction")
    unit = Direction(*(part / length for part in direction))
    start = Point(*source_cm)
    low, high = -isocentre_height_cm, ceiling_height_cm - isocentre_height_cm
    if not (low < start.z_cm < high and _inside(start.x_cm, start.y_cm, floor_polygon_cm)):
        raise ValueError("the ray starts outside the room")
    hits: list[tuple[float, str, int | None, float]] = []
    if unit.z < 0.0:
        hits.append(((low - start.z_cm) / unit.z, "floor", None, -unit.z))
    if unit.z > 0.0:
        hits.append(((high - start.z_cm) / unit.z, "ceiling", None, unit.z))
    hits.extend(_wall_hits(start, unit, floor_polygon_cm))
    path, surface, wall, cosine = min(hits, key=lambda hit: round(hit[0], 9))  # the first of equals
    point = Point(*(at + path * along for at, along in zip(start, unit, strict=True)))
    return SurfaceHit(surface, wall, point, path, degrees(acos(min(1.0, cosine))))


def _wall_hits(
    start: Point, unit: Direction, polygon: Sequence[tuple[float, float]]
) -> list[tuple[float, str, int | None, float]]:
    """Return (path, surface, wall, cosine on the normal) for every wall that the ray's line crosses ahead."""
    hits: list[tuple[float, str, int | None, float]] = []
    for index, (ax, ay) in enumerate(polygon):
        bx, by = polygon[(index + 1) % len(polygon)]
        run, rise = bx - ax, by - ay
        cross = unit.x * rise - unit.y * run
        if abs(cross) < 1e-12 * max(1.0, hypot(run, rise)):
            continue
        path = ((ax - start.x_cm) * rise - (ay - start.y_cm) * run) / cross
        along = ((ax - start.x_cm) * unit.y - (ay - start.y_cm) * unit.x) / cross
        if path > 0.0 and -1e-9 <= along <= 1.0 + 1e-9:
            hits.append((path, "wall", index, abs(cross) / hypot(run, rise)))
    return hits


def _inside(x: float, y: float, polygon: Sequence[tuple[float, float]]) -> bool:
    """Return whether a point lies inside a polygon, by counting crossings."""
    inside = False
    for index, (ax, ay) in enumerate(polygon):
        bx, by = polygon[(index + 1) % len(polygon)]
        if (ay > y) != (by > y) and x < ax + (y - ay) * (bx - ax) / (by - ay):
            inside = not inside
    return inside
