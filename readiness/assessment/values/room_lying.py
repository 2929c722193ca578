"""A lying patient carried through a vertical field: distances, and the run that the couch has and needs."""

from readiness.assessment.definition import Definition
from readiness.assessment.values.room_plane import ROOM, Floor, Space, cleared, named_obstructions
from readiness.calculations.lying_reach import LyingReach, lying_reach, source_to_floor_cm
from readiness.calculations.range_taken import range_taken
from readiness.quantities import Table

ALONG_Y = "y"


def way_of_couch(
    *,
    source_axis_distance_cm: float,
    isocentre_height_cm: float,
    opening_cm: float,
    couch_height_cm: float,
    couch_length_cm: float,
    couch_width_cm: float,
    patient_thickness_cm: float,
    travels_along: str,
    floor_polygon_cm: Floor,
    obstructions: Table,
) -> Space:
    """Return what decides whether the couch has its run, as the calculation takes it."""
    return {
        "source_axis_distance_cm": source_axis_distance_cm,
        "isocentre_height_cm": isocentre_height_cm,
        "opening_cm": opening_cm,
        "couch_height_cm": couch_height_cm,
        "couch_length_cm": couch_length_cm,
        "couch_width_cm": couch_width_cm,
        "patient_thickness_cm": patient_thickness_cm,
        "travel_along_y": travels_along == ALONG_Y,
        "floor_polygon_cm": floor_polygon_cm,
        "obstructions": named_obstructions(obstructions),
    }


def reach_of_couch(*, way: Space) -> LyingReach:
    """Return distances and run of the couch in the room as it is."""
    return lying_reach(**way)


def run_when_cleared(*, way: Space) -> float:
    """Return how much run the couch has to spare once everything movable is moved away."""
    return run_to_spare(reach=lying_reach(**cleared(way)))


def run_to_spare(*, reach: LyingReach) -> float:
    """Return the run that the couch has beyond what it needs on the shorter side."""
    return reach.clear_run_cm - reach.needed_run_cm


def needed_travel(*, reach: LyingReach) -> float:
    """Return the travel that carries the whole couch through the field."""
    return reach.needed_run_cm + reach.field_length_at_couch_cm / 2


def travel_to_spare(*, travel_cm: float, needed_cm: float) -> float:
    """Return the travel beyond what is needed."""
    return travel_cm - needed_cm


_COUCH = {
    "source_axis_distance_cm": "machine.source_axis_distance_cm",
    "isocentre_height_cm": "room.isocentre_height_cm",
    "opening_cm": "beam.opening_cm",
    "couch_height_cm": "couch.surface_height_cm",
    "couch_length_cm": "couch.length_cm",
    "couch_width_cm": "couch.width_cm",
    "patient_thickness_cm": "criterion.lying_patient_thickness_cm",
    "travels_along": "couch.travels_along",
    "floor_polygon_cm": "room.floor_polygon_cm",
    "obstructions": ROOM["obstructions"],
}


def _part(name: str, meaning: str, part: str) -> Definition:
    """Return a part of the couch's reach."""
    return Definition(
        f"arrangement.{name}", meaning, of="arrangement.lying_reach", part=part,
        source="definition", known="derived",
    )  # fmt: skip


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.source_to_floor_cm",
        "Vertical distance from the source at gantry 0 to the floor.",
        by=source_to_floor_cm,
        takes={
            "source_axis_distance_cm": "machine.source_axis_distance_cm",
            "isocentre_height_cm": "room.isocentre_height_cm",
        },
        source="definition",
        known="derived",
        formula="SAD + h_iso",
    ),
    Definition(
        "arrangement.couch_way",
        "What decides whether the couch has its run.",
        by=way_of_couch,
        takes=_COUCH,
        internal=True,
    ),
    Definition(
        "arrangement.lying_reach",
        "Distances of the lying technique and the run of its couch.",
        by=reach_of_couch,
        takes={"way": "arrangement.couch_way"},
        internal=True,
    ),
    _part("source_to_couch_cm", "Vertical distance from the source to the couch.", "source_to_couch_cm"),
    _part("field_length_at_couch_cm", "Length of the field at the couch.", "field_length_at_couch_cm"),
    _part(
        "couch_clear_run_cm",
        "Clear run of the couch from the axis on the shorter side, in the room as it is.",
        "clear_run_cm",
    ),
    _part("couch_needed_run_cm", "Run that the couch needs on each side of the axis.", "needed_run_cm"),
    _part("couch_run_limited_by", "What limits the run of the couch.", "limited_by"),
    Definition(
        "arrangement.couch_run_to_spare_cm",
        "Run that the couch has beyond what it needs, in the room as it is; negative if it is short.",
        by=run_to_spare,
        takes={"reach": "arrangement.lying_reach"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.couch_run_when_cleared_cm",
        "The same once everything movable is moved away.",
        by=run_when_cleared,
        takes={"way": "arrangement.couch_way"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.couch_travel_needed_cm",
        "Travel that carries the whole couch through the field.",
        by=needed_travel,
        takes={"reach": "arrangement.lying_reach"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.couch_travel_to_spare_cm",
        "Travel of the couch beyond what carries its whole length through the field.",
        by=travel_to_spare,
        takes={"travel_cm": "couch.travel_cm", "needed_cm": "arrangement.couch_travel_needed_cm"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.lying_range_taken_ratio",
        "Part of their range that the electrons of the vertical beam spend in air and degrader.",
        by=range_taken,
        takes={
            "energy_at_100_cm_mev": "beam.most_probable_energy_mev",
            "plane_distance_cm": "arrangement.source_to_couch_cm",
            "degrader_material": "degrader.material",
            "degrader_thickness_cm": "degrader.thickness_cm",
        },
        model=True,
        source="icru-37",
        known="memory",
    ),
)
