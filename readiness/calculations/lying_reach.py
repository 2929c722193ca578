"""Distances and run of the technique that carries a lying patient through a vertical field."""

from collections.abc import Sequence
from dataclasses import dataclass
from math import inf

from readiness.calculations.beam_geometry import above_zero
from readiness.calculations.obstructions import Box, boxes_of
from readiness.calculations.plane_search import edges_of, wall_name
from readiness.calculations.room_plan import floor_fault
from readiness.calculations.sliding import Corners, Hindrance, hindrance, rectangle
from readiness.quantities import Table


@dataclass(frozen=True)
class LyingReach:
    """Distances of the technique that carries a lying patient through a vertical field."""

    source_to_floor_cm: float
    source_to_couch_cm: float
    field_length_at_couch_cm: float
    clear_run_cm: float
    needed_run_cm: float
    limited_by: str


def lying_reach(
    *,
    source_axis_distance_cm: float,
    isocentre_height_cm: float,
    opening_cm: float,
    couch_height_cm: float,
    couch_length_cm: float,
    couch_width_cm: float,
    patient_thickness_cm: float,
    travel_along_y: bool,
    floor_polygon_cm: Sequence[tuple[float, float]],
    obstructions: Table,
) -> LyingReach:
    """
    Return the distances under a vertical beam and the run that a moving couch has and needs.

    The couch carries its whole length through the field: from its middle at half a length and half a field
    before the axis to as far beyond it, so that it needs a length and half a field on each side.

    Args:
        source_axis_distance_cm: From the source to the isocentre. [cm]
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        opening_cm: Full opening at 100 cm from the source. [cm]
        couch_height_cm: Of the surface that the patient lies on above the floor. [cm]
        couch_length_cm: Of the moving couch along its travel. [cm]
        couch_width_cm: Of the moving couch across its travel. [cm]
        patient_thickness_cm: Above the couch; obstructions that start higher do not hinder. [cm]
        travel_along_y: Whether the couch travels along y (toward the gantry) instead of along x.
        floor_polygon_cm: Corners (x, y) of the floor in order, from the isocentre. [cm]
        obstructions: Columns name (or id), x_min_cm, x_max_cm, y_min_cm, y_max_cm, bottom_cm, top_cm.

    Returns:
        Source to floor, source to couch, length of the field there, the shorter of the two clear runs from
        the axis, the run needed on each side, and what limits the shorter one.

    Raises:
        ValueError: If a length is not above zero, or the couch is above the source.
        OutsideValidity: If an edge of an obstruction is not stated.

    Valid for: gantry 0, a couch that travels in a straight line under the axis.
    Source: derived.
    """
    for words, length in (
        ("the opening", opening_cm),
        ("the length of the couch", couch_length_cm),
        ("the width of the couch", couch_width_cm),
        ("the thickness of the patient", patient_thickness_cm),
    ):
        above_zero(words, length)
    to_floor = source_to_floor_cm(
        source_axis_distance_cm=source_axis_distance_cm, isocentre_height_cm=isocentre_height_cm
    )
    if not 0.0 <= couch_height_cm < to_floor:
        raise ValueError("the couch must be between the floor and the source")
    fault = floor_fault(floor_polygon_cm=floor_polygon_cm)
    if fault:
        raise ValueError(fault)
    boxes = boxes_of(obstructions=obstructions)
    low = [one for one in boxes if one.reaches_into(0.0, couch_height_cm + patient_thickness_cm)]
    runs = [_clear_run(floor_polygon_cm, low, couch_width_cm, travel_along_y, sign) for sign in (1, -1)]
    run, limited_by = min(runs)
    field = opening_cm * (to_floor - couch_height_cm) / 100.0
    return LyingReach(
        source_to_floor_cm=to_floor,
        source_to_couch_cm=to_floor - couch_height_cm,
        field_length_at_couch_cm=field,
        clear_run_cm=run,
        needed_run_cm=couch_length_cm + field / 2,
        limited_by=limited_by,
    )


def source_to_floor_cm(*, source_axis_distance_cm: float, isocentre_height_cm: float) -> float:
    """
    Return the distance from the source at gantry 0 to the floor.

    Args:
        source_axis_distance_cm: From the source to the isocentre. [cm]
        isocentre_height_cm: Of the isocentre above the floor. [cm]

    Returns:
        Vertical distance. [cm]

    Raises:
        ValueError: If a length is not above zero.

    Source: derived.
    """
    above_zero("the source-axis distance", source_axis_distance_cm)
    above_zero("the height of the isocentre", isocentre_height_cm)
    return source_axis_distance_cm + isocentre_height_cm


def _clear_run(
    floor: Corners, boxes: Sequence[Box], width_cm: float, along_y: bool, sign: int
) -> tuple[float, str]:
    """Return how far a strip from the axis is clear on one side, and what ends it."""

    def turned(corners: Corners) -> Corners:
        return [(sign * (y if along_y else x), x if along_y else y) for x, y in corners]

    front = rectangle(0.0, 0.0, -width_cm / 2, width_cm / 2)
    things = [(wall_name(*edge), turned(edge)) for edge in edges_of(floor)]
    things += [(one.name, turned(one.corners_cm)) for one in boxes]
    met = [hindrance(name, front, corners) for name, corners in things]
    ahead: list[Hindrance] = [one for one in met if one is not None and one.to_cm > 0.0]
    first = min(ahead, key=lambda one: one.from_cm, default=Hindrance("", inf, inf))
    return max(0.0, first.from_cm), first.name
