"""Plans whose fields cannot fall where the room has its floor and ceiling."""

from collections.abc import Iterator
from math import radians, tan

from readiness.errors import Problem
from readiness.program.items import Item, Program
from readiness.program.plausibility.stated import Check, number, question
from readiness.units import printed

USUAL_AXIS_DISTANCE_CM = 100.0  # practice: isocentric machines


def axes_in_the_room(program: Program) -> Iterator[Problem]:
    """The axes of both tilted fields meet the plane between floor and ceiling, or a number is wrong."""
    for plan in program.of_kind("plan"):
        distance, tilt = number(plan, "plane_distance_cm"), number(plan, "tilt_deg")
        room = program.find("room", str(plan.get("room") or ""))
        if distance is None or tilt is None or room is None:
            continue
        iso, ceiling = number(room, "isocentre_height_cm"), number(room, "ceiling_height_cm")
        if iso is None:
            continue
        rise = (distance - _axis_distance(program, plan)) * tan(radians(tilt))
        at = f"at {printed(distance)} cm and {printed(tilt)}°"
        asked = f"is the isocentre of {room.id} at {printed(iso)} cm, and are distance and tilt right?"
        if iso - rise < 0:
            under = printed(rise - iso)
            words = f"the axis of the field aimed at the feet goes into the floor {at}, {under} cm"
            yield question(plan, "tilt_deg", f"{words} below it at the plane; {asked}")
        if ceiling is not None and iso + rise > ceiling:
            over = printed(iso + rise - ceiling)
            words = f"the axis of the field aimed at the head goes into the ceiling {at}, {over} cm"
            yield question(plan, "tilt_deg", f"{words} above it at the plane; {asked}")


def _axis_distance(program: Program, plan: Item) -> float:
    machine = program.find("machine", str(plan.get("machine") or ""))
    stated = number(machine, "source_axis_distance_cm") if machine else None
    return USUAL_AXIS_DISTANCE_CM if stated is None else stated


CHECKS: tuple[Check, ...] = (axes_in_the_room,)
