"""Where the stand fits: the farthest plane of an arrangement, and what hinders the one that was chosen."""

from collections import Counter
from collections.abc import Mapping, Sequence
from typing import Any

from readiness.assessment.definition import Definition
from readiness.calculations.beam_geometry import edge_angle_deg, ray_reach_cm
from readiness.calculations.plane_reach import (
    PlaneReach,
    farthest_plane,
    what_hinders_plane,
    what_would_change,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

NOTHING = "nothing"
Floor = Sequence[tuple[float, float]]
Space = Mapping[str, Any]  # keyword -> number, as the calculations of reach take them


def named_obstructions(obstructions: Table) -> Table:
    """Return obstructions under the names that people use: the title where it tells them apart."""
    rows = list(obstructions.records())
    titles = Counter(row["title"] for row in rows)
    names = [
        row["title"] if row["title"] and titles[row["title"]] == 1 else str(row["id"]).rpartition("/")[2]
        for row in rows
    ]
    columns = tuple(column for column in obstructions.columns if column not in {"id", "title"})
    return Table(
        ("name", *columns),
        tuple((name, *(row[column] for column in columns)) for name, row in zip(names, rows, strict=True)),
    )


def without_movable(obstructions: Table) -> Table:
    """Return the obstructions that are not stated to be movable."""
    at = obstructions.columns.index("movable")
    return Table(obstructions.columns, tuple(row for row in obstructions.rows if row[at] is not True))


def space_of_stand(
    *,
    side_deg: float,
    source_axis_distance_cm: float,
    floor_polygon_cm: Floor,
    obstructions: Table,
    isocentre_height_cm: float,
    stand_width_cm: float,
    stand_depth_cm: float,
    outline_turns: bool,
    stand_off_cm: float,
    access_width_cm: float,
    access_headroom_cm: float,
    raised_hands_height_cm: float,
    door_x_cm: float | None,
    door_y_cm: float | None,
) -> Space:
    """Return what decides where the stand fits, as the calculations take it."""
    return {
        "side_deg": side_deg,
        "source_axis_distance_cm": source_axis_distance_cm,
        "floor_polygon_cm": floor_polygon_cm,
        "obstructions": named_obstructions(obstructions),
        "isocentre_height_cm": isocentre_height_cm,
        "stand_width_cm": stand_width_cm,
        "stand_depth_cm": stand_depth_cm,
        "stand_outline_turns": outline_turns,
        "stand_off_cm": stand_off_cm,
        "access_width_cm": access_width_cm,
        "access_headroom_cm": access_headroom_cm,
        "patient_top_cm": raised_hands_height_cm,
        "door_cm": None if door_x_cm is None or door_y_cm is None else (door_x_cm, door_y_cm),
    }


def cleared(space: Space) -> Space:
    """Return the same space without what can be moved away."""
    return {**space, "obstructions": without_movable(space["obstructions"])}


def reach_of_plane(*, space: Space) -> PlaneReach:
    """Return the farthest plane in the room as it is."""
    return farthest_plane(**space)


def reach_when_cleared(*, space: Space) -> float:
    """Return the farthest plane once everything movable is moved away; 0 where the stand fits nowhere."""
    return farthest_plane(**cleared(space)).farthest_plane_distance_cm or 0.0


def hindrance_of_plane(*, plane_distance_cm: float, space: Space) -> str:
    """Return what hinders stand, stand-off and staff at the chosen plane."""
    return what_hinders_plane(plane_distance_cm=plane_distance_cm, **space) or NOTHING


def changes_of_room(*, wanted_plane_distance_cm: float, space: Space) -> Table:
    """Return how far the plane could be without each obstruction."""
    return what_would_change(wanted_plane_distance_cm=wanted_plane_distance_cm, **space)


def limited_by(*, reach: PlaneReach) -> str:
    """Return what limits the plane."""
    return reach.limited_by or NOTHING


def smallest_possible(
    *,
    isocentre_height_cm: float,
    stand_height_cm: float,
    patient_height_cm: float,
    source_axis_distance_cm: float,
    opening_cm: float,
    steepest_tilt_deg: float,
) -> float:
    """Return the distance below which no pair of fields could light the patient from soles to crown."""
    edge = edge_angle_deg(opening_cm=opening_cm)
    low = stand_height_cm - isocentre_height_cm
    high = low + patient_height_cm
    reaches = [source_axis_distance_cm]
    for height in (high, -low):
        if height > 0.0:
            reach = ray_reach_cm(
                height_cm=height,
                source_axis_distance_cm=source_axis_distance_cm,
                tilt_deg=steepest_tilt_deg,
                upward_deg=edge,
            )
            if reach is None:
                raise OutsideValidity("the steepest ray never reaches the patient")
            reaches.append(reach)
    return max(reaches)


def lit_width(*, opening_cm: float, plane_distance_cm: float) -> float:
    """Return how wide the geometric field is at the plane."""
    return opening_cm * plane_distance_cm / 100


def door_to_spare(*, door_clear_width_cm: float, width_cm: float, depth_cm: float) -> float:
    """Return what the door leaves beside the narrower side of the stand."""
    return door_clear_width_cm - min(width_cm, depth_cm)


ROOM = {
    "side_deg": "arrangement.side_deg",
    "source_axis_distance_cm": "machine.source_axis_distance_cm",
    "floor_polygon_cm": "room.floor_polygon_cm",
    "obstructions": (
        "rows obstruction: id title? x_min_cm x_max_cm y_min_cm y_max_cm bottom_cm top_cm movable?"
    ),
    "isocentre_height_cm": "room.isocentre_height_cm",
}
_STAND_SPACE = {
    **ROOM,
    "stand_width_cm": "stand.width_cm",
    "stand_depth_cm": "stand.depth_cm",
    "outline_turns": "stand.outline_turns",
    "stand_off_cm": "stand.behind_cm",
    "access_width_cm": "criterion.access_width_cm",
    "access_headroom_cm": "criterion.access_headroom_cm",
    "raised_hands_height_cm": "arrangement.raised_hands_height_cm",
    "door_x_cm": "room.door_x_cm?",
    "door_y_cm": "room.door_y_cm?",
}
_SPACE = {"space": "arrangement.stand_space"}

DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.stand_space",
        "What decides where the stand fits.",
        by=space_of_stand,
        takes=_STAND_SPACE,
        internal=True,
    ),
    Definition(
        "arrangement.plane_reach",
        "How far the treatment plane can be in the room as it is.",
        by=reach_of_plane,
        takes=_SPACE,
        model=True,
        internal=True,
    ),
    Definition(
        "arrangement.farthest_plane_distance_cm",
        "Farthest plane at which stand, space behind it and staff access fit into the room as it is.",
        of="arrangement.plane_reach",
        part="farthest_plane_distance_cm",
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.plane_limited_by",
        "What keeps the treatment plane from being farther away.",
        by=limited_by,
        takes={"reach": "arrangement.plane_reach"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.access_beside_stand",
        "Side on which staff reach the patient at the farthest plane.",
        of="arrangement.plane_reach",
        part="access_beside_stand",
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.farthest_when_cleared_cm",
        "Farthest plane once everything movable is moved away; 0 where the stand fits nowhere.",
        by=reach_when_cleared,
        takes=_SPACE,
        model=True,
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.smallest_possible_distance_cm",
        "Distance below which no pair of fields could light the tallest patient from soles to crown.",
        by=smallest_possible,
        takes={
            "isocentre_height_cm": "room.isocentre_height_cm",
            "stand_height_cm": "stand.height_cm",
            "patient_height_cm": "program.tallest_patient_cm",
            "source_axis_distance_cm": "machine.source_axis_distance_cm",
            "opening_cm": "beam.opening_cm",
            "steepest_tilt_deg": "criterion.steepest_tilt_deg",
        },
        model=True,
        source="definition",
        known="derived",
        formula="D = (H + SAD sin t)/tan(t + a) + SAD (1 - cos t)",
    ),
    Definition(
        "arrangement.plane_hindered_by",
        "What stands in the way of stand, space behind it or staff at the chosen plane.",
        by=hindrance_of_plane,
        takes={**_SPACE, "plane_distance_cm": "arrangement.plane_distance_cm"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.room_changes",
        "How far the plane could be without each obstruction, and what then is short of the study distance.",
        by=changes_of_room,
        takes={**_SPACE, "wanted_plane_distance_cm": "arrangement.study_distance_cm"},
        model=True,
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.lit_width_cm",
        "Width of the geometric field at the plane.",
        by=lit_width,
        takes={"opening_cm": "beam.opening_cm", "plane_distance_cm": "arrangement.study_distance_cm"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.door_to_spare_cm",
        "What the door leaves beside the narrower side of the stand; negative if it does not go through.",
        by=door_to_spare,
        takes={
            "door_clear_width_cm": "room.door_clear_width_cm",
            "width_cm": "stand.width_cm",
            "depth_cm": "stand.depth_cm",
        },
        source="definition",
        known="derived",
    ),
)
