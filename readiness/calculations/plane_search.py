"""The search behind :mod:`plane_reach`: along the beam side, x turned so that the beam goes toward +u."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from math import hypot, inf

from readiness.calculations.obstructions import Box
from readiness.calculations.room_plan import WayPlan
from readiness.calculations.sliding import (
    Corners,
    Hindrance,
    free_stretches,
    hindrance,
    rectangle,
    round_outline,
)

SAME_PLACE_CM = 0.05
WAY_STEP_CM = 5.0
WAY_PRECISION_CM = 0.1
AWAY, TOWARD = -1, 1  # sign of y
SIDE_WORDS = {AWAY: "away from the gantry", TOWARD: "toward the gantry"}
NO_WAY = "no clear way to the stand"
AXIS_HEIGHTS_CM = 1e-6  # an obstruction that only touches the axis does not stop it


@dataclass(frozen=True)
class Stand:
    """Outline of the stand, the same with its stand-off, and half its extents."""

    outline: Corners
    zone: Corners
    half_width_cm: float
    half_depth_cm: float


@dataclass(frozen=True)
class Place:
    """A position of the plane from the isocentre, what limits it, and the side of the staff's strip."""

    position_cm: float
    limited_by: tuple[str, ...]
    side: int


@dataclass(frozen=True)
class PlaneSearch:
    """Everything that decides where the stand fits; heights are above the floor."""

    floor: Corners
    wall_names: Sequence[str]
    boxes: tuple[Box, ...]
    stand: Stand
    isocentre_height_cm: float
    patient_top_cm: float
    headroom_cm: float
    access_width_cm: float
    door: tuple[float, float] | None

    def without(self, names: Sequence[str]) -> "PlaneSearch":
        """Return the same search in a room without some obstructions."""
        return replace(self, boxes=tuple(one for one in self.boxes if one.name not in names))

    def farthest(self) -> Place | None:
        """Return the farthest place; the strip lies away from the gantry where both sides do equally."""
        way = WayPlan(self.floor, self._reaching(self.headroom_cm), self.access_width_cm)
        body = [*self._stops(), *self._met_by(self.stand.zone, self.patient_top_cm)]
        found = [place for side in (AWAY, TOWARD) if (place := self._beside(side, body, way)) is not None]
        return max(found, key=lambda place: round(place.position_cm, 6), default=None)

    def hindered_at(self, position_cm: float) -> tuple[str, ...]:
        """Return what hinders stand and staff at one position, in the order body, staff access, way."""
        body = _covering([*self._stops(), *self._met_by(self.stand.zone, self.patient_top_cm)], position_cm)
        if body:
            return body
        way = WayPlan(self.floor, self._reaching(self.headroom_cm), self.access_width_cm)
        found: list[str] = []
        for side in (AWAY, TOWARD):
            strip = _covering(self._met_by(self._strip(side), self.headroom_cm), position_cm)
            if not strip and self._with_way(position_cm, position_cm, side, way) is not None:
                return ()
            found += [f"staff access at {name}" for name in strip] or [NO_WAY]
        return tuple(dict.fromkeys(found))

    def nowhere(self) -> tuple[str, ...]:
        """Return what stands where the stand would stand, for a room without any place."""
        body = [*self._stops(), *self._met_by(self.stand.zone, self.patient_top_cm)]
        strips = [self._met_by(self._strip(side), self.headroom_cm) for side in (AWAY, TOWARD)]
        return tuple(dict.fromkeys(one.name for one in (*body, *strips[0], *strips[1]) if one.to_cm > 0.0))

    def _beside(self, side: int, body: list[Hindrance], way: WayPlan) -> Place | None:
        """Return the farthest place with the staff's strip on one side."""
        strip = [
            replace(one, name=f"staff access at {one.name}")
            for one in self._met_by(self._strip(side), self.headroom_cm)
        ]
        for nearest, farthest in reversed(free_stretches([*body, *strip], 0.0)):
            position = self._with_way(nearest, farthest, side, way)
            if position is not None:
                return Place(position, self._limits(position, farthest, body, strip), side)
        return None

    def _with_way(self, nearest: float, farthest: float, side: int, way: WayPlan) -> float | None:
        """Return the farthest position of a stretch to whose strip a way leads, or None."""
        middle = side * (self.stand.half_width_cm + self.access_width_cm / 2)

        def clear(position: float) -> bool:
            stand = [(x + position, y) for x, y in self.stand.outline]
            return way.is_clear(stand, (position, middle), self.door)

        blocked, position = None, farthest
        while not clear(position):
            if position <= nearest:
                return None
            blocked, position = position, max(nearest, position - WAY_STEP_CM)
        while blocked is not None and blocked - position > WAY_PRECISION_CM:
            between = (blocked + position) / 2
            blocked, position = (blocked, between) if clear(between) else (between, position)
        return position

    def _limits(
        self, position: float, farthest: float, body: list[Hindrance], strip: list[Hindrance]
    ) -> tuple[str, ...]:
        """Return the names of what begins where the stand has to stop."""
        if position < farthest - SAME_PLACE_CM:
            return (NO_WAY,)
        here = [one.name for one in body if abs(one.from_cm - position) <= SAME_PLACE_CM]
        beside = [one.name for one in strip if abs(one.from_cm - position) <= SAME_PLACE_CM]
        return tuple(dict.fromkeys(here or beside))

    def _strip(self, side: int) -> Corners:
        """Return the strip beside the stand together with the stand's own half on that side."""
        far = side * (self.stand.half_width_cm + self.access_width_cm)
        depth = self.stand.half_depth_cm
        return rectangle(-depth, depth, min(0.0, far), max(0.0, far))

    def _reaching(self, high_cm: float) -> list[Box]:
        """Return the obstructions that reach below a height."""
        return [one for one in self.boxes if one.reaches_into(0.0, high_cm)]

    def _met_by(self, outline: Corners, high_cm: float) -> list[Hindrance]:
        """Return what hinders an outline: every wall, and the obstructions that reach below a height."""
        things = [
            *zip(self.wall_names, edges_of(self.floor), strict=True),
            *((one.name, one.corners_cm) for one in self._reaching(high_cm)),
        ]
        met = (hindrance(name, outline, corners) for name, corners in things)
        return [one for one in met if one is not None]

    def _stops(self) -> list[Hindrance]:
        """Return the walls and obstructions that the level axis meets beyond the isocentre."""
        stops = []
        for name, ((ax, ay), (bx, by)) in zip(self.wall_names, edges_of(self.floor), strict=True):
            if (ay > 0.0) != (by > 0.0):
                crossing = ax - ay * (bx - ax) / (by - ay)
                if crossing > 0.0:
                    stops.append(Hindrance(name, crossing, inf))
        for one in self.boxes:
            level = self.isocentre_height_cm
            high_enough = one.bottom_cm < level - AXIS_HEIGHTS_CM and one.top_cm > level + AXIS_HEIGHTS_CM
            if one.y_min_cm < 0.0 < one.y_max_cm and high_enough and one.x_max_cm > 0.0:
                stops.append(Hindrance(one.name, one.x_min_cm, inf))
        return stops


def _covering(hindrances: Sequence[Hindrance], position_cm: float) -> tuple[str, ...]:
    """Return the names of what covers a position; touching does not count."""
    return tuple(
        dict.fromkeys(
            one.name
            for one in hindrances
            if one.from_cm + SAME_PLACE_CM < position_cm < one.to_cm - SAME_PLACE_CM
        )
    )


def stand_of(width_cm: float, depth_cm: float, outline_turns: bool, stand_off_cm: float) -> Stand:
    """Return a stand; one whose outline turns takes the circle through its corners."""
    if outline_turns:
        radius = hypot(width_cm, depth_cm) / 2
        return Stand(round_outline(radius), round_outline(radius, stand_off_cm), radius, radius)
    half_width, half_depth = width_cm / 2, depth_cm / 2
    outline = rectangle(-half_depth, half_depth, -half_width, half_width)
    zone = rectangle(-half_depth, half_depth + stand_off_cm, -half_width, half_width)
    return Stand(outline, zone, half_width, half_depth)


def edges_of(corners: Corners) -> list[tuple[tuple[float, float], tuple[float, float]]]:
    """Return the edges of a polygon; edge i starts at corner i."""
    return list(zip(corners, (*corners[1:], corners[0]), strict=True))


def wall_name(start: tuple[float, float], end: tuple[float, float]) -> str:
    """Return a wall in words."""
    if start[0] == end[0]:
        return f"wall at x {start[0]:g} cm"
    if start[1] == end[1]:
        return f"wall at y {start[1]:g} cm"
    return f"wall from ({start[0]:g}, {start[1]:g}) to ({end[0]:g}, {end[1]:g}) cm"


def mirrored(one: Box, sign: int) -> Box:
    """Return a box with x turned so that the beam side is positive."""
    left, right = sorted((sign * one.x_min_cm, sign * one.x_max_cm))
    return replace(one, x_min_cm=left, x_max_cm=right)
