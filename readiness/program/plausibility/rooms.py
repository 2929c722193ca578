"""Rooms that cannot be built."""

from collections.abc import Iterator

from readiness.errors import Problem
from readiness.program.items import Item, Program
from readiness.program.plausibility.shapes import Polygon, area, extent, first_crossing, holds, sides, touches
from readiness.program.plausibility.stated import Check, impossible, number, points, question
from readiness.units import printed

FLOOR = "floor_polygon_cm"
SMALLEST_SIDE_CM = 150  # practice: no treatment room is narrower; a smaller one was given in metres
LARGEST_SIDE_CM = 3000  # practice: no treatment room is longer; a larger one was given in millimetres
BEYOND_WALL_CM = 1  # drawings are read to a centimetre


def floor_polygons(program: Program) -> Iterator[Problem]:
    """A floor has three corners or more, none of them twice, and sides that do not cross."""
    for room in program.of_kind("room"):
        floor = points(room, FLOOR)
        if floor is None:
            continue
        if len(floor) > 1 and floor[0] == floor[-1]:
            yield impossible(room, FLOOR, "the last corner repeats the first one; leave it out")
            continue
        if len(floor) < 3:
            yield impossible(room, FLOOR, f"a floor has three corners or more, not {len(floor)}")
            continue
        repeated = [at + 1 for at, (a, b) in enumerate(sides(floor)) if a == b]
        if repeated:
            yield impossible(room, FLOOR, f"corner {repeated[0]} is written twice in a row")
            continue
        crossing = first_crossing(floor)
        if area(floor) == 0:
            yield impossible(room, FLOOR, "the corners lie on one line")
        elif crossing:
            first, second = (_side(floor, each) for each in crossing)
            message = f"the side {first} meets the side {second}; write the corners in order"
            yield impossible(room, FLOOR, message)


def floor_sizes(program: Program) -> Iterator[Problem]:
    """A floor has the size of a room, not of a table or a hall: else the unit was mistaken."""
    for room in program.of_kind("room"):
        floor = points(room, FLOOR)
        if not floor or len(floor) < 3:
            continue
        x_min, y_min, x_max, y_max = extent(floor)
        size = f"{printed(x_max - x_min)} by {printed(y_max - y_min)} cm"
        if max(x_max - x_min, y_max - y_min) < SMALLEST_SIDE_CM:
            yield impossible(room, FLOOR, f"the floor is {size}; were the corners given in metres?")
        elif max(x_max - x_min, y_max - y_min) > LARGEST_SIDE_CM:
            yield impossible(room, FLOOR, f"the floor is {size}; were the corners given in millimetres?")


def isocentres(program: Program) -> Iterator[Problem]:
    """The isocentre, the origin of the plan, lies inside the floor and below the ceiling."""
    for room in program.of_kind("room"):
        floor = usable_floor(room)
        if floor and not holds(floor, (0, 0)):
            message = "the isocentre [0, 0] lies outside the floor; give the corners from the isocentre"
            yield impossible(room, FLOOR, message)
        height, ceiling = number(room, "isocentre_height_cm"), number(room, "ceiling_height_cm")
        if height is not None and ceiling is not None and ceiling <= height:
            message = f"the ceiling ({printed(ceiling)} cm) is not above the isocentre ({printed(height)} cm)"
            yield impossible(room, "ceiling_height_cm", message)


def obstructions(program: Program) -> Iterator[Problem]:
    """A box has a positive size and stands in its room."""
    for box in program.of_kind("obstruction"):
        x_min, x_max, y_min, y_max, _, top = (number(box, name) for name in _BOX)
        for low_name, high_name in zip(_BOX[::2], _BOX[1::2], strict=True):
            low, high = number(box, low_name), number(box, high_name)
            if low is not None and high is not None and low >= high:
                message = f"{high_name} ({printed(high)}) must be above {low_name} ({printed(low)})"
                yield impossible(box, high_name, message)
        room = program.find("room", box.owners["room"])
        if room is None or x_min is None or x_max is None or y_min is None or y_max is None:
            continue
        ceiling = number(room, "ceiling_height_cm")
        if ceiling is not None and top is not None and top > ceiling:
            message = f"its top ({printed(top)} cm) is above the ceiling ({printed(ceiling)} cm)"
            yield impossible(box, "top_cm", message)
        if x_min < x_max and y_min < y_max:
            yield from _in_room(box, room, (x_min, y_min, x_max, y_max))


def _in_room(box: Item, room: Item, edges: tuple[float, float, float, float]) -> Iterator[Problem]:
    floor = usable_floor(room)
    if not floor:
        return
    x_min, y_min, x_max, y_max = edges
    outline = ((x_min, y_min), (x_max, y_min), (x_max, y_max), (x_min, y_max))
    if not touches(floor, outline):
        yield impossible(box, "x_min_cm", f"it stands outside the floor of {room.id}")
        return
    west, south, east, north = extent(floor)
    beyond = max(west - x_min, south - y_min, x_max - east, y_max - north)
    if beyond > BEYOND_WALL_CM:
        yield question(box, "x_min_cm", f"it reaches {printed(beyond)} cm beyond the walls of {room.id}")


def usable_floor(room: Item) -> Polygon | None:
    """Return the floor of a room if it is one without crossings, else None."""
    floor = points(room, FLOOR)
    if not floor or len(floor) < 3 or area(floor) == 0 or first_crossing(floor):
        return None
    return floor


def _side(floor: Polygon, number_of_side: int) -> str:
    (ax, ay), (bx, by) = sides(floor)[number_of_side - 1]
    return f"[{printed(ax)}, {printed(ay)}]-[{printed(bx)}, {printed(by)}]"


_BOX = ("x_min_cm", "x_max_cm", "y_min_cm", "y_max_cm", "bottom_cm", "top_cm")

CHECKS: tuple[Check, ...] = (floor_polygons, floor_sizes, isocentres, obstructions)
