"""What the beam meets on its way and where it goes: obstructions, gantry angles, edges in the room."""

from collections.abc import Sequence

from readiness.assessment.definition import Definition
from readiness.assessment.values.room_plane import NOTHING, ROOM, Floor, Space, cleared, named_obstructions
from readiness.calculations.beam_geometry import tilted_gantry_angles
from readiness.calculations.beam_path import BeamPath, beam_path
from readiness.calculations.field_edges import field_edges_in_room
from readiness.calculations.gantry_range import angle_within
from readiness.calculations.range_taken import range_taken
from readiness.errors import OutsideValidity
from readiness.quantities import Table


def usual_tilt(*, tilt_deg: float) -> float:
    """Return a tilt as it is."""
    return tilt_deg


def way_of_beam(
    *,
    side_deg: float,
    tilt_deg: float,
    plane_distance_cm: float,
    source_axis_distance_cm: float,
    opening_cm: float,
    collimator_deg: float,
    floor_polygon_cm: Floor,
    obstructions: Table,
    isocentre_height_cm: float,
    stand_height_cm: float,
    raised_hands_height_cm: float,
    patient_width_cm: float,
) -> Space:
    """Return what decides whether the way to the patient is clear, as the calculation takes it."""
    return {
        "side_deg": side_deg,
        "tilt_deg": tilt_deg,
        "plane_distance_cm": plane_distance_cm,
        "source_axis_distance_cm": source_axis_distance_cm,
        "opening_cm": opening_cm,
        "collimator_angle_deg": collimator_deg,
        "floor_polygon_cm": floor_polygon_cm,
        "obstructions": named_obstructions(obstructions),
        "isocentre_height_cm": isocentre_height_cm,
        "stand_height_cm": stand_height_cm,
        "patient_top_cm": raised_hands_height_cm,
        "patient_width_cm": patient_width_cm,
    }


def path_of_beam(*, way: Space) -> BeamPath:
    """Return what cuts the two fields on their way to the patient."""
    return beam_path(**way)


def cut_when_cleared(*, way: Space) -> float:
    """Return the cut by what cannot be moved away; whether something can must be known where it cuts."""
    fixed = cleared(way)
    path = beam_path(**fixed)
    undecided = {str(row["name"]) for row in fixed["obstructions"].records() if row["movable"] is None}
    unknown = undecided & {str(row["obstruction"]) for row in path.cuts.records()}
    if unknown:
        raise OutsideValidity(f"State whether these can be moved away: {', '.join(sorted(unknown))}.")
    return path.cut_percent


def what_cuts(*, path: BeamPath) -> str:
    """Return what cuts the beam, in words."""
    return path.cut_by or NOTHING


def edges_in_room(
    *,
    side_deg: float,
    tilt_deg: float,
    opening_cm: float,
    collimator_deg: float,
    source_axis_distance_cm: float,
    floor_polygon_cm: Floor,
    isocentre_height_cm: float,
    ceiling_height_cm: float,
) -> Table:
    """Return where axes and edges of both fields meet the bare room."""
    return field_edges_in_room(
        side_deg=side_deg,
        tilt_deg=tilt_deg,
        opening_cm=opening_cm,
        collimator_angle_deg=collimator_deg,
        source_axis_distance_cm=source_axis_distance_cm,
        floor_polygon_cm=floor_polygon_cm,
        isocentre_height_cm=isocentre_height_cm,
        ceiling_height_cm=ceiling_height_cm,
    )


def toward_head(*, side_deg: float, tilt_deg: float) -> float:
    """Return the gantry angle of the field aimed at the head."""
    return tilted_gantry_angles(side_deg=side_deg, tilt_deg=tilt_deg).toward_head_deg


def toward_feet(*, side_deg: float, tilt_deg: float) -> float:
    """Return the gantry angle of the field aimed at the feet."""
    return tilted_gantry_angles(side_deg=side_deg, tilt_deg=tilt_deg).toward_feet_deg


def both_reachable(*, side_deg: float, tilt_deg: float, gantry_ranges_deg: Sequence[float]) -> bool:
    """Return whether both tilted gantry angles lie in the ranges."""
    pair = tilted_gantry_angles(side_deg=side_deg, tilt_deg=tilt_deg)
    return all(angle_within(gantry_angle_deg=angle, gantry_ranges_deg=gantry_ranges_deg) for angle in pair)


def vertical_reachable(*, gantry_ranges_deg: Sequence[float]) -> bool:
    """Return whether gantry 0 lies in the ranges."""
    return angle_within(gantry_angle_deg=0.0, gantry_ranges_deg=gantry_ranges_deg)


_ANGLES = {"side_deg": "arrangement.side_deg", "tilt_deg": "arrangement.room_tilt_deg"}
_CHOSEN = {"side_deg": "arrangement.side_deg", "tilt_deg": "arrangement.tilt_deg"}
_BEAM = {
    **_ANGLES,
    "source_axis_distance_cm": "machine.source_axis_distance_cm",
    "opening_cm": "beam.opening_cm",
    "collimator_deg": "beam.collimator_deg",
    "floor_polygon_cm": "room.floor_polygon_cm",
    "isocentre_height_cm": "room.isocentre_height_cm",
}
_PATH = {
    **_BEAM,
    "obstructions": ROOM["obstructions"],
    "plane_distance_cm": "arrangement.study_distance_cm",
    "stand_height_cm": "stand.height_cm",
    "raised_hands_height_cm": "arrangement.raised_hands_height_cm",
    "patient_width_cm": "criterion.patient_width_cm",
}
_WAY = {"way": "arrangement.beam_way"}
_MACHINE, _MODE = "machine.gantry_range_deg", "beam.mode_gantry_range_deg"

DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.usual_tilt_deg",
        "Usual tilt, with which a room is looked at before one is chosen.",
        by=usual_tilt,
        takes={"tilt_deg": "criterion.usual_tilt_deg"},
        model=True,
        source="platoni-2012",
        known="read",
    ),
    Definition(
        "arrangement.room_tilt_deg",
        "Tilt with which the room is looked at: the chosen one, else a usual one.",
        by=usual_tilt,
        takes={"tilt_deg": "arrangement.tilt_deg"},
        otherwise="arrangement.usual_tilt_deg",
    ),
    Definition(
        "arrangement.beam_way",
        "What decides whether the way from head to patient is clear.",
        by=way_of_beam,
        takes=_PATH,
        internal=True,
    ),
    Definition(
        "arrangement.beam_path",
        "What cuts the two fields between head and patient.",
        by=path_of_beam,
        takes=_WAY,
        internal=True,
    ),
    Definition(
        "arrangement.beam_path_cut_percent",
        "Part of the patient that is hidden from the source of one of the two fields.",
        of="arrangement.beam_path",
        part="cut_percent",
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.beam_path_cut_by",
        "What stands between the head and the patient.",
        by=what_cuts,
        takes={"path": "arrangement.beam_path"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.beam_path_cuts",
        "What each obstruction cuts from each field, and where.",
        of="arrangement.beam_path",
        part="cuts",
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.fixed_cut_percent",
        "Part of the patient that is hidden by what cannot be moved away.",
        by=cut_when_cleared,
        takes=_WAY,
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.field_edges",
        "Where axes, edges and corners of both tilted fields meet floor, ceiling and walls.",
        by=edges_in_room,
        takes={**_BEAM, "ceiling_height_cm": "room.ceiling_height_cm"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.gantry_toward_head_deg",
        "Gantry angle of the field aimed at the head, for the chosen tilt.",
        by=toward_head,
        takes=_CHOSEN,
        critical=True,
        source="iec-61217",
        known="memory",
    ),
    Definition(
        "arrangement.gantry_toward_feet_deg",
        "Gantry angle of the field aimed at the feet, for the chosen tilt.",
        by=toward_feet,
        takes=_CHOSEN,
        critical=True,
        source="iec-61217",
        known="memory",
    ),
    Definition(
        "arrangement.gantry_angles_reachable",
        "The machine reaches the gantry angles of both fields.",
        by=both_reachable,
        takes={**_ANGLES, "gantry_ranges_deg": _MACHINE},
        source="iec-61217",
        known="memory",
    ),
    Definition(
        "arrangement.mode_allows_angles",
        "The mode allows the gantry angles of both fields.",
        by=both_reachable,
        takes={**_ANGLES, "gantry_ranges_deg": _MODE},
        source="iec-61217",
        known="memory",
    ),
    Definition(
        "arrangement.vertical_reachable",
        "The machine reaches gantry 0.",
        by=vertical_reachable,
        takes={"gantry_ranges_deg": _MACHINE},
        source="iec-61217",
        known="memory",
    ),
    Definition(
        "arrangement.mode_allows_vertical",
        "The mode allows gantry 0.",
        by=vertical_reachable,
        takes={"gantry_ranges_deg": _MODE},
        source="iec-61217",
        known="memory",
    ),
    Definition(
        "arrangement.range_taken_ratio",
        "Part of their range that the electrons spend in air and degrader; from 1 on none arrives.",
        by=range_taken,
        takes={
            "energy_at_100_cm_mev": "beam.most_probable_energy_mev",
            "plane_distance_cm": "arrangement.study_distance_cm",
            "degrader_material": "degrader.material",
            "degrader_thickness_cm": "degrader.thickness_cm",
        },
        model=True,
        source="icru-37",
        known="memory",
        formula="f = rho_air (D - 100)/R_air + rho t/R",
    ),
)
