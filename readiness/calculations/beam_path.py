"""What stands between the head and the patient, and how much of each tilted field it cuts."""

from collections.abc import Sequence
from dataclasses import dataclass

from readiness.calculations.beam_geometry import (
    Point,
    above_zero,
    plane_x_cm,
    sign_of_side,
    source_position,
    tilted_gantry_angles,
)
from readiness.calculations.field_edges import FIELDS, corner_rays
from readiness.calculations.obstructions import Box, boxes_of
from readiness.calculations.plane_search import edges_of, mirrored, wall_name
from readiness.calculations.room_plan import Corners, common_area, covered_percent, floor_fault
from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table

CUT_COLUMNS = ("field", "obstruction", "cut_percent", "lowest_cm", "highest_cm", "y_min_cm", "y_max_cm")
NOTHING_PERCENT = 1e-6
HEAD_CM = 1.0  # what lies closer to the source than this is inside the head


@dataclass(frozen=True)
class BeamPath:
    """The larger cut of the two fields, what cuts (in words, "" for nothing), and each cut by itself."""

    cut_percent: float
    cut_by: str
    cuts: Table


@dataclass(frozen=True)
class _Shadow:
    """The part of the treatment plane (y, z from the isocentre) that something hides from the source."""

    name: str
    corners: Corners


def beam_path(
    *,
    side_deg: float,
    tilt_deg: float,
    plane_distance_cm: float,
    source_axis_distance_cm: float,
    opening_cm: float,
    collimator_angle_deg: float,
    floor_polygon_cm: Sequence[tuple[float, float]],
    obstructions: Table,
    isocentre_height_cm: float,
    stand_height_cm: float,
    patient_top_cm: float,
    patient_width_cm: float,
) -> BeamPath:
    """
    Return how much of both tilted fields is cut on the way to the patient, by what, and where.

    The patient is an upright rectangle in the treatment plane, from the standing surface to the raised hands.
    Electrons scatter far past the edges of a field, so that each field counts for all that both light
    together; of that, the share is counted whose straight rays from its source meet something first.

    Args:
        side_deg: Beam side as gantry angle, 90 or 270. [deg]
        tilt_deg: Half angle between the two axes. [deg]
        plane_distance_cm: Horizontally from the nominal source to the treatment plane. [cm]
        source_axis_distance_cm: From the source to the isocentre. [cm]
        opening_cm: Full opening at 100 cm from the source. [cm]
        collimator_angle_deg: Collimator angle. [deg]
        floor_polygon_cm: Corners (x, y) of the floor in order, from the isocentre. [cm]
        obstructions: Columns name (or id), x_min_cm, x_max_cm, y_min_cm, y_max_cm, bottom_cm, top_cm.
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        stand_height_cm: Of the standing surface above the floor. [cm]
        patient_top_cm: Of the raised hands above the floor. [cm]
        patient_width_cm: Of the part of the plane that must be reached, centred on the axis. [cm]

    Returns:
        Larger cut of the two fields, names of what cuts, and a table with field, obstruction, share of
        the lit part of the patient, heights above the floor and y of the part that is cut.

    Raises:
        ValueError: If the floor polygon has a fault or an argument lies outside its meaning.
        OutsideValidity: If an edge of an obstruction is not stated, or the fields do not light the patient.

    Valid for: upright walls; obstructions as upright boxes.
    Assumes: straight rays from two point sources; the degrader and the stand itself do not count.
    Source: derived.
    """
    above_zero("the width of the patient", patient_width_cm)
    if patient_top_cm <= stand_height_cm:
        raise ValueError("the raised hands must be above the standing surface")
    fault = floor_fault(floor_polygon_cm=floor_polygon_cm)
    if fault:
        raise ValueError(fault)
    sign = sign_of_side(side_deg=side_deg)
    plane = sign * plane_x_cm(
        side_deg=side_deg, distance_cm=plane_distance_cm, source_axis_distance_cm=source_axis_distance_cm
    )
    low, high = stand_height_cm - isocentre_height_cm, patient_top_cm - isocentre_height_cm
    half = patient_width_cm / 2
    patient = ((-half, low), (half, low), (half, high), (-half, high))
    boxes = [mirrored(one, sign) for one in boxes_of(obstructions=obstructions)]
    sources, outlines = _fans(
        tilted_gantry_angles(side_deg=side_deg, tilt_deg=tilt_deg),
        (source_axis_distance_cm, opening_cm, collimator_angle_deg),
        sign,
        plane,
    )
    lit = common_area(patient, outlines)
    if not lit:
        raise OutsideValidity(f"the two fields do not light the patient at {plane_distance_cm:g} cm")
    rows: list[list[Scalar]] = []
    cuts = []
    for field, source in zip(FIELDS, sources, strict=True):
        shadows = [
            *_wall_shadows(source, floor_polygon_cm, sign, plane, (low, high)),
            *_box_shadows(source, boxes, isocentre_height_cm, plane),
        ]
        rows += _cuts(field, lit, shadows, isocentre_height_cm)
        cuts.append(covered_percent(lit, [shadow.corners for shadow in shadows]))
    cut_by = ", ".join(dict.fromkeys(str(row[1]) for row in rows))
    return BeamPath(max(cuts) if rows else 0.0, cut_by, Table.of(CUT_COLUMNS, rows))


def _fans(
    gantry_angles_deg: Sequence[float], head: tuple[float, float, float], sign: int, plane: float
) -> tuple[list[Point], list[tuple[float, float]]]:
    """Return the sources, and the corners of all fields on the plane, with x turned toward the beam side."""
    source_axis_distance, opening, collimator = head
    sources: list[Point] = []
    outlines: list[tuple[float, float]] = []
    for gantry in gantry_angles_deg:
        at = source_position(gantry_angle_deg=gantry, source_axis_distance_cm=source_axis_distance)
        sources.append(Point(sign * at.x_cm, at.y_cm, at.z_cm))
        rays = corner_rays(gantry_angle_deg=gantry, opening_cm=opening, collimator_angle_deg=collimator)
        outlines += _on_plane(sources[-1], [(sign * ray.x, ray.y, ray.z) for ray in rays], plane)
    return sources, outlines


def _cuts(field: str, lit: Corners, shadows: Sequence[_Shadow], floor_below_cm: float) -> list[list[Scalar]]:
    """Return a row for each shadow that falls on the lit part."""
    rows: list[list[Scalar]] = []
    for shadow in shadows:
        share = covered_percent(lit, [shadow.corners])
        common = common_area(lit, shadow.corners)
        if share > NOTHING_PERCENT and common:
            across = [y for y, _ in common]
            heights = [z + floor_below_cm for _, z in common]
            rows.append(
                [field, shadow.name, share, min(heights), max(heights), min(across), max(across)]
            )
    return rows


def _on_plane(
    source: Point, rays: Sequence[tuple[float, float, float]], plane: float
) -> list[tuple[float, float]]:
    """Return where rays meet the plane, as (y, z)."""
    if any(forward <= 0.0 for forward, _, _ in rays) or plane <= source.x_cm:
        raise OutsideValidity("a corner of the field never meets the treatment plane")
    return [
        (
            source.y_cm + across * (plane - source.x_cm) / forward,
            source.z_cm + up * (plane - source.x_cm) / forward,
        )
        for forward, across, up in rays
    ]


def _box_shadows(source: Point, boxes: Sequence[Box], floor_below_cm: float, plane: float) -> list[_Shadow]:
    """Return the shadows of the parts of boxes that lie between source and plane."""
    shadows = []
    for one in boxes:
        near, far = max(one.x_min_cm, source.x_cm + HEAD_CM), min(one.x_max_cm, plane)
        if near < far:
            corners = [
                (x - source.x_cm, y - source.y_cm, height - floor_below_cm - source.z_cm)
                for x in (near, far)
                for y in (one.y_min_cm, one.y_max_cm)
                for height in (one.bottom_cm, one.top_cm)
            ]
            shadows.append(_Shadow(one.name, _on_plane(source, corners, plane)))
    return shadows


def _wall_shadows(
    source: Point, floor: Corners, sign: int, plane: float, heights: tuple[float, float]
) -> list[_Shadow]:
    """Return the shadows, over the patient's whole height, of the walls between source and plane."""
    shadows = []
    near = source.x_cm + HEAD_CM
    for (ax, ay), (bx, by) in edges_of(floor):
        (left, left_y), (right, right_y) = sorted(((sign * ax, ay), (sign * bx, by)))
        if right <= near or left >= plane:
            continue
        slope = (right_y - left_y) / (right - left) if right > left else 0.0
        ends = ((max(left, near), left_y, left), (min(right, plane), right_y, right))
        across = [
            (y + (x - corner) * slope) * (plane - source.x_cm) / (x - source.x_cm) for x, y, corner in ends
        ]
        corners = [(y, z) for y in across for z in heights]
        shadows.append(_Shadow(wall_name((ax, ay), (bx, by)), corners))
    return shadows
