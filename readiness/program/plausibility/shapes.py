"""Plane shapes by hand: the reader must start fast, and a floor has few corners."""

Point = tuple[float, float]
Polygon = tuple[Point, ...]


def area(polygon: Polygon) -> float:
    """Return the enclosed area, in the square of the unit of the corners."""
    return abs(sum(ax * by - bx * ay for (ax, ay), (bx, by) in sides(polygon))) / 2


def sides(polygon: Polygon) -> list[tuple[Point, Point]]:
    """Return the sides in order; the last one leads back to the first corner."""
    return list(zip(polygon, (*polygon[1:], polygon[0]), strict=True))


def extent(polygon: Polygon) -> tuple[float, float, float, float]:
    """Return smallest x, smallest y, largest x, largest y."""
    xs, ys = [x for x, _ in polygon], [y for _, y in polygon]
    return min(xs), min(ys), max(xs), max(ys)


def first_crossing(polygon: Polygon) -> tuple[int, int] | None:
    """Return the numbers (from 1) of the first two sides that meet other than at a common corner, or None."""
    edges = sides(polygon)
    for first, (a, b) in enumerate(edges):
        for second in range(first + 1, len(edges)):
            c, d = edges[second]
            neighbours = second == first + 1 or (first == 0 and second == len(edges) - 1)
            if _fold_back(a, b, c, d) if neighbours else _meet(a, b, c, d):
                return first + 1, second + 1
    return None


def holds(polygon: Polygon, point: Point) -> bool:
    """Return whether a point lies inside a polygon and not on its border."""
    x, y = point
    inside = False
    for (ax, ay), (bx, by) in sides(polygon):
        if _turn((ax, ay), (bx, by), point) == 0 and _between((ax, ay), (bx, by), point):
            return False
        if (ay > y) != (by > y) and x < ax + (y - ay) * (bx - ax) / (by - ay):
            inside = not inside
    return inside


def touches(polygon: Polygon, other: Polygon) -> bool:
    """Return whether two polygons have a point of their insides in common, or sides that cross."""
    if any(holds(polygon, corner) for corner in other) or any(holds(other, corner) for corner in polygon):
        return True
    centre = (sum(x for x, _ in other) / len(other), sum(y for _, y in other) / len(other))
    return holds(polygon, centre) or any(
        _turn(a, b, c) * _turn(a, b, d) < 0 and _turn(c, d, a) * _turn(c, d, b) < 0
        for a, b in sides(polygon)
        for c, d in sides(other)
    )


def _turn(a: Point, b: Point, c: Point) -> float:
    """Return a positive number if a, b, c turn left, a negative one if right, 0 if straight."""
    return (b[0] - a[0]) * (c[1] - a[1]) - (b[1] - a[1]) * (c[0] - a[0])


def _between(a: Point, b: Point, c: Point) -> bool:
    """Return whether c, on the line through a and b, lies between them or on one of them."""
    return min(a[0], b[0]) <= c[0] <= max(a[0], b[0]) and min(a[1], b[1]) <= c[1] <= max(a[1], b[1])


def _meet(a: Point, b: Point, c: Point, d: Point) -> bool:
    """Return whether the sides ab and cd have a point in common."""
    turns = _turn(a, b, c), _turn(a, b, d), _turn(c, d, a), _turn(c, d, b)
    if turns[0] * turns[1] < 0 and turns[2] * turns[3] < 0:
        return True
    ends = ((a, b, c), (a, b, d), (c, d, a), (c, d, b))
    return any(turn == 0 and _between(*end) for turn, end in zip(turns, ends, strict=True))


def _fold_back(a: Point, b: Point, c: Point, d: Point) -> bool:
    """Return whether two neighbouring sides lie on each other (b is c, or the last side d is the first a)."""
    if b == c:
        corner, before, after = b, a, d
    else:  # the last side ends where the first one begins
        corner, before, after = a, b, c
    straight = _turn(before, corner, after) == 0
    away = (before[0] - corner[0]) * (after[0] - corner[0]) + (before[1] - corner[1]) * (after[1] - corner[1])
    return straight and away > 0
