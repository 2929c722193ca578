"""
Where an outline that slides along x would run into things: exact, one interval per thing.

Outlines are convex polygons given by their corners in order; a thing is a convex polygon or, for a wall, a
segment of two corners. Touching is allowed, overlapping is not.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from math import cos, inf, pi, sin

Corners = Sequence[tuple[float, float]]
TOUCH_CM = 1e-6


@dataclass(frozen=True)
class Hindrance:
    """A named thing and the open interval of positions at which the sliding outline overlaps it."""

    name: str
    from_cm: float
    to_cm: float


def rectangle(x_min_cm: float, x_max_cm: float, y_min_cm: float, y_max_cm: float) -> Corners:
    """Return an upright rectangle."""
    return ((x_min_cm, y_min_cm), (x_max_cm, y_min_cm), (x_max_cm, y_max_cm), (x_min_cm, y_max_cm))


def round_outline(radius_cm: float, stretch_cm: float = 0.0) -> Corners:
    """
    Return a circle about the origin, drawn out along +x by a stretch.

    It is a polygon of 64 sides around the circle: exact toward walls along x and y, 0.1 % generous elsewhere.
    """
    outer = radius_cm / cos(pi / 64)
    corners = []
    for step in range(64):
        angle = (step + 0.5) * pi / 32
        x = outer * cos(angle)
        corners.append((x + (stretch_cm if x > 0 else 0.0), outer * sin(angle)))
    return corners


def hindrance(name: str, outline: Corners, thing: Corners) -> Hindrance | None:
    """Return the positions of an outline at which it overlaps a thing, or None if it slides past."""
    low = max(min(y for _, y in outline), min(y for _, y in thing))
    high = min(max(y for _, y in outline), max(y for _, y in thing))
    flat = max(y for _, y in thing) - min(y for _, y in thing) <= TOUCH_CM
    inside = min(y for _, y in outline) + TOUCH_CM < low < max(y for _, y in outline) - TOUCH_CM
    if high - low <= TOUCH_CM and not (flat and inside):
        return None
    # the gap along x is convex or concave in y and has corners only where an outline has them
    levels = {low, high} | {y for _, y in (*outline, *thing) if low < y < high}
    starts, ends = [], []
    for level in levels:
        outline_left, outline_right = _span(outline, level)
        thing_left, thing_right = _span(thing, level)
        starts.append(thing_left - outline_right)
        ends.append(thing_right - outline_left)
    return Hindrance(name, min(starts), max(ends))


def free_stretches(hindrances: Sequence[Hindrance], nearest_cm: float) -> list[tuple[float, float]]:
    """Return the stretches (from, to) without hindrance, from the nearest position on, in order."""
    stretches: list[tuple[float, float]] = []
    position = nearest_cm
    for one in sorted(hindrances, key=lambda one: (one.from_cm, one.to_cm)):
        if one.from_cm >= position - TOUCH_CM:
            stretches.append((position, max(position, one.from_cm)))
        position = max(position, one.to_cm)
    if position < inf:
        stretches.append((position, inf))
    return stretches


def _span(corners: Corners, level: float) -> tuple[float, float]:
    """Return the leftmost and rightmost x of a convex outline at one y."""
    found: list[float] = []
    for (ax, ay), (bx, by) in zip(corners, (*corners[1:], corners[0]), strict=True):
        if min(ay, by) - TOUCH_CM <= level <= max(ay, by) + TOUCH_CM:
            if abs(by - ay) <= TOUCH_CM:
                found += [ax, bx]
            else:
                share = min(1.0, max(0.0, (level - ay) / (by - ay)))
                found.append(ax + share * (bx - ax))
    return min(found), max(found)
