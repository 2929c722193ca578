"""
Plan geometry of a room: the only module that imports shapely.

Corners are (x, y) from the isocentre in IEC 61217 fixed coordinates.
"""

from collections.abc import Sequence
from typing import Any

from shapely import MultiPoint, Point, Polygon, box, get_parts, union_all
from shapely.validation import explain_validity

from readiness.calculations.obstructions import Box

Corners = Sequence[tuple[float, float]]
SLACK_CM = 0.05  # a way exactly as wide as asked for must survive the narrowing


def floor_fault(*, floor_polygon_cm: Corners) -> str:
    """
    Return what is wrong with a floor polygon, in words.

    Args:
        floor_polygon_cm: Corners (x, y) of the floor in order, from the isocentre. [cm]

    Returns:
        The fault, or "" if the polygon encloses a floor with the isocentre on it.

    Valid for: any polygon without holes.
    Source: derived.
    """
    if len(set(map(tuple, floor_polygon_cm))) < 3:
        return "a floor needs at least three corners"
    floor = Polygon(floor_polygon_cm)
    if not floor.is_valid:
        return f"the outline of the floor crosses or touches itself ({explain_validity(floor)})"
    if not floor.contains(Point(0.0, 0.0)):
        return "the isocentre (0, 0) does not lie inside the floor"
    return ""


def floor_area_m2(*, floor_polygon_cm: Corners) -> float:
    """
    Return the area of the floor.

    Args:
        floor_polygon_cm: Corners (x, y) of the floor in order, from the isocentre. [cm]

    Returns:
        Area. [m2]

    Raises:
        ValueError: If the polygon has a fault.

    Source: derived.
    """
    fault = floor_fault(floor_polygon_cm=floor_polygon_cm)
    if fault:
        raise ValueError(fault)
    return float(Polygon(floor_polygon_cm).area) / 1e4


class WayPlan:
    """The floor that staff can walk on, ready to be asked about stands at many places."""

    def __init__(self, floor_polygon_cm: Corners, obstacles: Sequence[Box], width_cm: float) -> None:
        """Take the floor without what stands in the way; the width is that of the way."""
        standing = union_all([box(*_bounds(one)) for one in obstacles])
        self._floor = Polygon(floor_polygon_cm).difference(standing)
        self._inset_cm = max(0.0, width_cm / 2 - SLACK_CM)

    def is_clear(self, stand: Corners, beside: tuple[float, float], door: tuple[float, float] | None) -> bool:
        """
        Return whether a way leads to a point beside the stand.

        It comes from the door or, when no door is given, from the largest open part of the room.
        """
        open_floor = self._floor.difference(Polygon(stand)).buffer(-self._inset_cm, quad_segs=8)
        parts = [part for part in get_parts(open_floor) if not part.is_empty]
        # a person who touches the point reaches it: between the two nothing can stand
        here = [part for part in parts if part.distance(Point(beside)) <= self._inset_cm + SLACK_CM]
        if not here:
            return False
        if door is None:
            return bool(max(part.area for part in here) >= max(part.area for part in parts))
        # a door in a wall lies half a way's width from where a person's middle can be
        reach_cm = 1.5 * (self._inset_cm + SLACK_CM)
        return any(part.distance(Point(door)) <= reach_cm for part in here)


def covered_percent(whole: Corners, parts: Sequence[Corners]) -> float:
    """Return which share of a convex area the convex parts cover together."""
    area = _hull(whole)
    cover = union_all([_hull(part) for part in parts]).intersection(area)
    return 100.0 * float(cover.area) / float(area.area)


def common_area(one: Corners, other: Corners) -> Corners:
    """Return the corners of what two convex areas have in common; empty if nothing."""
    common = _hull(one).intersection(_hull(other))
    if common.geom_type != "Polygon" or common.is_empty:
        return ()
    return tuple((float(x), float(y)) for x, y in common.exterior.coords[:-1])


def _hull(corners: Corners) -> Any:
    """Return the convex hull of some points."""
    return MultiPoint([tuple(corner) for corner in corners]).convex_hull


def _bounds(one: Box) -> tuple[float, float, float, float]:
    """Return a box's outline as shapely takes it."""
    return one.x_min_cm, one.y_min_cm, one.x_max_cm, one.y_max_cm
