"""How far from the source the treatment plane can be, and what would have to change to have it farther."""

from collections.abc import Sequence
from dataclasses import dataclass

from readiness.calculations.beam_geometry import above_zero, sign_of_side
from readiness.calculations.obstructions import boxes_of
from readiness.calculations.plane_search import (
    SIDE_WORDS,
    PlaneSearch,
    edges_of,
    mirrored,
    stand_of,
    wall_name,
)
from readiness.calculations.room_plan import floor_fault
from readiness.quantities import Scalar, Table

AS_IT_IS = "as it is"
WITHOUT_ALL = "without all of these"
CHANGE_COLUMNS = ("change", "movable", "farthest_plane_distance_cm", "gain_cm", "shortfall_cm", "limited_by")


@dataclass(frozen=True)
class PlaneReach:
    """The farthest treatment plane of a beam side; the distance is None where the stand fits nowhere."""

    farthest_plane_distance_cm: float | None
    limited_by: str
    access_beside_stand: str


def farthest_plane(
    *,
    side_deg: float,
    source_axis_distance_cm: float,
    floor_polygon_cm: Sequence[tuple[float, float]],
    obstructions: Table,
    isocentre_height_cm: float,
    stand_width_cm: float,
    stand_depth_cm: float,
    stand_outline_turns: bool,
    stand_off_cm: float,
    access_width_cm: float,
    access_headroom_cm: float,
    patient_top_cm: float,
    door_cm: tuple[float, float] | None = None,
) -> PlaneReach:
    """
    Return the farthest vertical plane at which stand, stand-off and staff access fit into the room.

    The stand is centred on the plane under the beam axis. Behind it lies the stand-off, as wide as the stand;
    beside it, on one side, a clear strip as long as the stand; and a clear way of that width leads to it.

    Args:
        side_deg: Beam side as gantry angle, 90 or 270. [deg]
        source_axis_distance_cm: From the source to the isocentre. [cm]
        floor_polygon_cm: Corners (x, y) of the floor in order, from the isocentre. [cm]
        obstructions: Columns name (or id), x_min_cm, x_max_cm, y_min_cm, y_max_cm, bottom_cm, top_cm.
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        stand_width_cm: Of the stand across the beam. [cm]
        stand_depth_cm: Of the stand along the beam. [cm]
        stand_outline_turns: Whether the whole outline turns, not only a platter within it.
        stand_off_cm: Between the stand and what is behind it. [cm]
        access_width_cm: Of the strip beside the stand and of the way to it. [cm]
        access_headroom_cm: Above the floor; what hangs higher does not hinder staff. [cm]
        patient_top_cm: Of the raised hands above the floor; what hangs higher does not hinder the stand. [cm]
        door_cm: Where the way starts (x, y); without it, in the largest open part of the room. [cm]

    Returns:
        Distance from the nominal source to the plane, what limits it, and on which side the strip lies.

    Raises:
        ValueError: If the floor polygon has a fault, a length is negative or the side is neither 90 nor 270.
        OutsideValidity: If an edge of an obstruction is not stated.

    Valid for: any floor polygon without holes; obstructions as upright boxes.
    Assumes: the gantry turned to the beam side. An obstruction on the level axis beyond the isocentre stops
        the plane as a wall does; one beside the axis only cuts the beam (see beam_path).
    Source: derived.
    """
    search = _search(
        side_deg, floor_polygon_cm, obstructions, isocentre_height_cm, patient_top_cm,
        (stand_width_cm, stand_depth_cm, stand_outline_turns, stand_off_cm),
        (access_width_cm, access_headroom_cm, door_cm),
    )  # fmt: skip
    above_zero("the source-axis distance", source_axis_distance_cm)
    return _reach(search, source_axis_distance_cm)


def what_hinders_plane(
    *,
    plane_distance_cm: float,
    side_deg: float,
    source_axis_distance_cm: float,
    floor_polygon_cm: Sequence[tuple[float, float]],
    obstructions: Table,
    isocentre_height_cm: float,
    stand_width_cm: float,
    stand_depth_cm: float,
    stand_outline_turns: bool,
    stand_off_cm: float,
    access_width_cm: float,
    access_headroom_cm: float,
    patient_top_cm: float,
    door_cm: tuple[float, float] | None = None,
) -> str:
    """
    Return what hinders stand, stand-off or staff access at a treatment plane that has been chosen.

    A plane nearer than the farthest one need not be free: something may stand in between.

    Args:
        plane_distance_cm: From the nominal source to the plane that is chosen. [cm]
        side_deg: Beam side as gantry angle, 90 or 270. [deg]
        source_axis_distance_cm: From the source to the isocentre. [cm]
        floor_polygon_cm: Corners (x, y) of the floor in order, from the isocentre. [cm]
        obstructions: Columns name (or id), x_min_cm, x_max_cm, y_min_cm, y_max_cm, bottom_cm, top_cm.
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        stand_width_cm: Of the stand across the beam. [cm]
        stand_depth_cm: Of the stand along the beam. [cm]
        stand_outline_turns: Whether the whole outline turns, not only a platter within it.
        stand_off_cm: Between the stand and what is behind it. [cm]
        access_width_cm: Of the strip beside the stand and of the way to it. [cm]
        access_headroom_cm: Above the floor; what hangs higher does not hinder staff. [cm]
        patient_top_cm: Of the raised hands above the floor; what hangs higher does not hinder the stand. [cm]
        door_cm: Where the way starts (x, y); without it, in the largest open part of the room. [cm]

    Returns:
        Names of walls and obstructions in the way, or "" if the stand fits there.

    Raises:
        ValueError: If the floor polygon has a fault, a length is negative or the side is neither 90 nor 270.
        OutsideValidity: If an edge of an obstruction is not stated.

    Valid for: as farthest_plane.
    Assumes: as farthest_plane.
    Source: derived.
    """
    above_zero("the plane distance", plane_distance_cm)
    search = _search(
        side_deg, floor_polygon_cm, obstructions, isocentre_height_cm, patient_top_cm,
        (stand_width_cm, stand_depth_cm, stand_outline_turns, stand_off_cm),
        (access_width_cm, access_headroom_cm, door_cm),
    )  # fmt: skip
    above_zero("the source-axis distance", source_axis_distance_cm)
    return ", ".join(search.hindered_at(plane_distance_cm - source_axis_distance_cm))


def what_would_change(
    *,
    wanted_plane_distance_cm: float,
    side_deg: float,
    source_axis_distance_cm: float,
    floor_polygon_cm: Sequence[tuple[float, float]],
    obstructions: Table,
    isocentre_height_cm: float,
    stand_width_cm: float,
    stand_depth_cm: float,
    stand_outline_turns: bool,
    stand_off_cm: float,
    access_width_cm: float,
    access_headroom_cm: float,
    patient_top_cm: float,
    door_cm: tuple[float, float] | None = None,
) -> Table:
    """
    Return how far the plane could be with each obstruction taken out of the room, and what then is short.

    Args:
        wanted_plane_distance_cm: From the nominal source to the plane that is wanted. [cm]
        side_deg: Beam side as gantry angle, 90 or 270. [deg]
        source_axis_distance_cm: From the source to the isocentre. [cm]
        floor_polygon_cm: Corners (x, y) of the floor in order, from the isocentre. [cm]
        obstructions: Columns name (or id), x_min_cm, x_max_cm, y_min_cm, y_max_cm, bottom_cm, top_cm.
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        stand_width_cm: Of the stand across the beam. [cm]
        stand_depth_cm: Of the stand along the beam. [cm]
        stand_outline_turns: Whether the whole outline turns, not only a platter within it.
        stand_off_cm: Between the stand and what is behind it. [cm]
        access_width_cm: Of the strip beside the stand and of the way to it. [cm]
        access_headroom_cm: Above the floor; what hangs higher does not hinder staff. [cm]
        patient_top_cm: Of the raised hands above the floor; what hangs higher does not hinder the stand. [cm]
        door_cm: Where the way starts (x, y); without it, in the largest open part of the room. [cm]

    Returns:
        Columns change, movable (blank where nobody said), farthest_plane_distance_cm, gain_cm, shortfall_cm
        (0 where the wanted distance is reached) and limited_by; a blank where the stand fits nowhere. The
        first row is the room as it is, then one row for each obstruction alone unless it is stated that it
        cannot be moved, and the last one is the room without all of these.

    Raises:
        ValueError: If the floor polygon has a fault, a length is negative or the side is neither 90 nor 270.
        OutsideValidity: If an edge of an obstruction is not stated.

    Valid for: as farthest_plane.
    Assumes: as farthest_plane.
    Source: derived.
    """
    above_zero("the wanted plane distance", wanted_plane_distance_cm)
    above_zero("the source-axis distance", source_axis_distance_cm)
    search = _search(
        side_deg, floor_polygon_cm, obstructions, isocentre_height_cm, patient_top_cm,
        (stand_width_cm, stand_depth_cm, stand_outline_turns, stand_off_cm),
        (access_width_cm, access_headroom_cm, door_cm),
    )  # fmt: skip
    changes: list[tuple[str, bool | None, list[str]]] = [(AS_IT_IS, None, [])]
    loose = [one for one in search.boxes if one.movable is not False]
    changes += [(f"without {one.name}", one.movable, [one.name]) for one in loose]
    if len(loose) > 1:
        changes.append((WITHOUT_ALL, None, [one.name for one in loose]))
    now = _reach(search, source_axis_distance_cm).farthest_plane_distance_cm
    rows: list[list[Scalar]] = []
    for words, movable, removed in changes:
        reach = _reach(search.without(removed), source_axis_distance_cm)
        then = reach.farthest_plane_distance_cm
        gain = None if then is None or now is None else then - now
        shortfall = None if then is None else max(0.0, wanted_plane_distance_cm - then)
        rows.append([words, movable, then, gain, shortfall, reach.limited_by])
    return Table.of(CHANGE_COLUMNS, rows)


def _reach(search: PlaneSearch, source_axis_distance_cm: float) -> PlaneReach:
    """Return the outcome of a search in words and from the source."""
    place = search.farthest()
    if place is None:
        return PlaneReach(None, ", ".join(search.nowhere()), "")
    distance = source_axis_distance_cm + place.position_cm
    return PlaneReach(distance, ", ".join(place.limited_by), SIDE_WORDS[place.side])


def _search(
    side_deg: float,
    floor: Sequence[tuple[float, float]],
    obstructions: Table,
    isocentre_height_cm: float,
    patient_top_cm: float,
    stand: tuple[float, float, bool, float],
    access: tuple[float, float, tuple[float, float] | None],
) -> PlaneSearch:
    """Return the search, with x turned toward the beam side, after refusing impossible input."""
    width, depth, outline_turns, stand_off = stand
    access_width, headroom, door = access
    for words, length in (
        ("the width of the stand", width),
        ("the depth of the stand", depth),
        ("the width of the access", access_width),
        ("the headroom of the access", headroom),
        ("the height of the isocentre", isocentre_height_cm),
        ("the height of the raised hands", patient_top_cm),
    ):
        above_zero(words, length)
    if stand_off < 0.0:
        raise ValueError("the stand-off behind the stand cannot be negative")
    fault = floor_fault(floor_polygon_cm=floor)
    if fault:
        raise ValueError(fault)
    sign = sign_of_side(side_deg=side_deg)
    corners = list(floor[:-1]) if tuple(floor[0]) == tuple(floor[-1]) else list(floor)
    return PlaneSearch(
        floor=[(sign * x, y) for x, y in corners],
        wall_names=[wall_name(start, end) for start, end in edges_of(corners)],
        boxes=tuple(mirrored(one, sign) for one in boxes_of(obstructions=obstructions)),
        stand=stand_of(width, depth, outline_turns, stand_off),
        isocentre_height_cm=isocentre_height_cm,
        patient_top_cm=patient_top_cm,
        headroom_cm=headroom,
        access_width_cm=access_width,
        door=None if door is None else (sign * door[0], door[1]),
    )
