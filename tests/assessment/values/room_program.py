"""A room with a machine, a stand and a couch, looked at from one arrangement."""

from typing import Any

from readiness.assessment.records import Gone, Ref, Value
from readiness.assessment.values import (
    arrangement_choices,
    beam_energy,
    room_beam,
    room_heights,
    room_lying,
    room_plane,
)
from readiness.program.items import Item, Program
from tests.assessment.small import graph, item, program

DEFINITIONS = (
    *arrangement_choices.DEFINITIONS, *room_beam.DEFINITIONS, *room_heights.DEFINITIONS, *room_lying.DEFINITIONS,
    *room_plane.DEFINITIONS,
    *(each for each in beam_energy.DEFINITIONS if each.name == "beam.most_probable_energy_mev"),
)  # fmt: skip
HERE = Ref("arrangement", "here")
PARTS: dict[str, dict[str, Any]] = {
    "room": {
        "floor_polygon_cm": ((-365.0, -420.0), (330.0, -420.0), (330.0, 270.0), (-365.0, 270.0)),
        "isocentre_height_cm": 130.0, "ceiling_height_cm": 300.0, "door_clear_width_cm": 130.0,
    },
    "machine": {
        "source_axis_distance_cm": 100.0, "head_radius_cm": 42.0, "head_end_cm": 152.0, "gantry_range_deg": (-180.0, 180.0),
    },
    "beam": {"r50_cm": 2.40, "rp_cm": 2.95, "opening_cm": 40.0, "collimator_deg": 0.0, "mode_gantry_range_deg": (70.0, 110.0, 250.0, 290.0)},
    "degrader": {"material": "pmma", "thickness_cm": 0.6},
    "stand": {
        "width_cm": 90.0, "depth_cm": 90.0, "height_cm": 40.0, "behind_cm": 20.0, "steps": 2, "outline_turns": False,
    },
    "couch": {"surface_height_cm": 40.0, "length_cm": 200.0, "width_cm": 60.0, "travel_cm": 300.0, "travels_along": "y"},
    "plan": {"plane_distance_cm": 400.0, "tilt_deg": 16.0},
    "program": {"tallest_patient_cm": 190.0, "shortest_patient_cm": 150.0},
}  # fmt: skip
LASER: dict[str, Any] = {
    "title": "Laser box", "x_min_cm": -365.0, "x_max_cm": -350.0, "y_min_cm": -8.0, "y_max_cm": 8.0, "bottom_cm": 122.0,
    "top_cm": 138.0, "movable": True,
}  # fmt: skip
PILLAR: dict[str, Any] = {
    "x_min_cm": -200.0, "x_max_cm": -180.0, "y_min_cm": 0.0, "y_max_cm": 20.0, "bottom_cm": 0.0, "top_cm": 300.0,
}  # fmt: skip


def thing(name: str, **fields: Any) -> Item:
    """Return an obstruction of the room; None leaves a field out."""
    known = {key: value for key, value in fields.items() if value is not None}
    return item("obstruction", f"room/{name}", {"room": "room"}, **known)


def department(*things: Item, without: tuple[str, ...] = (), **changes: dict[str, Any]) -> Program:
    """Return the department; a part's fields are changed by the part's name, None leaves a field out."""

    def of(part: str) -> dict[str, Any]:
        fields = {**PARTS[part], **changes.get(part, {})}
        return {name: value for name, value in fields.items() if value is not None}

    owners = {"machine": {"room": "room"}, "beam": {"machine": "machine"}}
    parts = [
        item(part, part, owners.get(part, {}), **of(part))
        for part in PARTS
        if part not in ("program", *without)
    ]
    made = program(*parts, *things, **of("program"))
    return Program(made.items, made.known_lists | {("obstruction", "room")}, ())


def got(of: Program, name: str, *, side: int = 90, technique: str = "six-position") -> Any:
    """Return a value of the arrangement or of what belongs to it, or why there is none."""
    carrier = "couch" if technique == "moving-couch" else "stand"
    there = {each.kind for each in of.items}
    owners = {part: part for part in ("room", "machine", "beam", "degrader", carrier, "plan") if part in there}
    here = item("arrangement", "here", owners, side_deg=side, technique=technique)
    return graph(of, *DEFINITIONS, made=(here,)).get(name, HERE)


def value(of: Program, name: str, **seen: Any) -> Any:
    """Return a value of the arrangement."""
    found = got(of, name, **seen)
    assert isinstance(found, Value), found
    return found.value


def causes(of: Program, name: str, **seen: Any) -> list[str]:
    """Return the roots for which a value cannot be had."""
    found = got(of, name, **seen)
    assert isinstance(found, Gone), found
    return [cause.what for cause in found.causes]
