"""A place to protect by itself, and how the beam meets it: goal, first layer, opening, spots, belt."""

from readiness.assessment.definition import Definition, derived, one_of_techniques
from readiness.calculations.barrier_distances import BarrierDistances
from readiness.calculations.beam_on_barrier import beam_spots, primary_belt, vertical_spots
from readiness.calculations.electron_side import first_layer, needs_neutron_remark
from readiness.errors import OutsideValidity
from readiness.quantities import Table

VERTICAL = "a vertical beam has no tilted fields"
LEVEL = "a beam from the side is not vertical"
SURVEY_ONLY = ("door", "maze", "penetration")
GEOMETRY = {
    "side_deg": "arrangement.side_deg",
    "tilt_deg": "arrangement.room_tilt_deg",
    "source_axis_distance_cm": "machine.source_axis_distance_cm",
}

ROOM = {
    "opening_cm": "beam.opening_cm",
    "collimator_deg": "beam.collimator_deg?",
    "floor_polygon_cm": "room.floor_polygon_cm",
    "isocentre_height_cm": "room.isocentre_height_cm",
    "ceiling_height_cm": "room.ceiling_height_cm",
}


def design_goal(*, area: str, controlled_msv_per_week: float, uncontrolled_msv_per_week: float) -> float:
    """Return the weekly design goal of the place beyond a barrier."""
    return controlled_msv_per_week if area == "controlled" else uncontrolled_msv_per_week


def spots_of_fields(
    *, side_deg: int, tilt_deg: float, source_axis_distance_cm: float, opening_cm: float,
    collimator_deg: float | None, floor_polygon_cm: tuple[tuple[float, float], ...],
    isocentre_height_cm: float, ceiling_height_cm: float,
) -> Table:  # fmt: skip
    """Return where axes and edges of both tilted fields meet the room."""
    if side_deg not in (90, 270):
        raise OutsideValidity(VERTICAL)
    return beam_spots(
        side_deg=side_deg, tilt_deg=tilt_deg, source_axis_distance_cm=source_axis_distance_cm,
        opening_cm=opening_cm, collimator_angle_deg=collimator_deg or 0.0, floor_polygon_cm=floor_polygon_cm,
        isocentre_height_cm=isocentre_height_cm, ceiling_height_cm=ceiling_height_cm,
    ).spots  # fmt: skip


def spots_of_vertical(
    *, side_deg: int, source_axis_distance_cm: float, opening_cm: float, collimator_deg: float | None,
    floor_polygon_cm: tuple[tuple[float, float], ...], isocentre_height_cm: float, ceiling_height_cm: float,
) -> Table:  # fmt: skip
    """Return where axis and edges of a vertical field meet the room."""
    if side_deg:
        raise OutsideValidity(LEVEL)
    return vertical_spots(
        source_axis_distance_cm=source_axis_distance_cm, opening_cm=opening_cm,
        collimator_angle_deg=collimator_deg or 0.0, floor_polygon_cm=floor_polygon_cm,
        isocentre_height_cm=isocentre_height_cm, ceiling_height_cm=ceiling_height_cm,
    ).spots  # fmt: skip


def belt_spare(
    *, distances: BarrierDistances, opening_cm: float, distance_m: float | None, belt_width_cm: float
) -> float:
    """Return what a primary belt has over the width that the beam needs there; negative is missing."""
    if not distances.faces_beam:
        raise OutsideValidity("the beam does not face this barrier")
    reach_cm = 100 * (distance_m or distances.primary_distance_m)
    spare = primary_belt(opening_cm=opening_cm, distance_cm=reach_cm, belt_width_cm=belt_width_cm).spare_cm
    if spare is None:
        raise OutsideValidity("the width of the thick part is not stated")
    return spare


def low_first(*, layers: Table) -> bool:
    """Return whether the first layer has a low atomic number."""
    return first_layer(layers=layers).low_atomic_number


def is_survey_only(*, role: str, surface: str) -> bool:
    """Return whether a place can only be measured: door, maze, penetration."""
    return role in SURVEY_ONLY or surface in SURVEY_ONLY


def neutrons(*, energy_mev: float) -> bool:
    """Return whether neutrons deserve a remark."""
    return needs_neutron_remark(energy_mev=energy_mev)


DEFINITIONS: tuple[Definition, ...] = (
    derived(
        "barrier.design_goal_msv_per_week",
        "Weekly design goal of the place beyond.",
        design_goal,
        {
            "area": "barrier.area",
            "controlled_msv_per_week": "criterion.controlled_goal_msv_per_week",
            "uncontrolled_msv_per_week": "criterion.uncontrolled_goal_msv_per_week",
        },
    ),
    derived(
        "barrier.survey_only",
        "It can only be measured: a door, maze or penetration.",
        is_survey_only,
        {"role": "barrier.role", "surface": "barrier.surface"},
    ),
    derived(
        "barrier.low_atomic_number_first",
        "Its first layer has a low atomic number.",
        low_first,
        {"layers": "barrier.layers"},
    ),
    Definition(
        "arrangement.beam_spots",
        "Where axes and edges of both tilted fields meet the room.",
        by=spots_of_fields,
        takes={**GEOMETRY, **ROOM},
        source="iec-61217",
        known="derived",
    ),
    Definition(
        "arrangement.vertical_spots",
        "Where axis and edges of the vertical field meet the room.",
        by=spots_of_vertical,
        takes={
            "side_deg": "arrangement.side_deg",
            "source_axis_distance_cm": "machine.source_axis_distance_cm",
            **ROOM,
        },
        source="iec-61217",
        known="derived",
    ),
    one_of_techniques(
        "arrangement.field_spots",
        "Where axes and edges of the fields meet the room.",
        standing="arrangement.beam_spots",
        lying="arrangement.vertical_spots",
    ),
    Definition(
        "arrangement.neutron_remark",
        "The energy is high enough for neutrons to deserve a remark.",
        by=neutrons,
        takes={"energy_mev": "beam.energy_at_source_mev"},
        source="ncrp-151",
        known="memory",
    ),
    Definition(
        "exposure.belt_spare_cm",
        "What the thick part of the wall has over the width that the beam needs; negative is missing.",
        by=belt_spare,
        takes={
            "distances": "exposure.distances",
            "opening_cm": "beam.opening_cm",
            "distance_m": "barrier.distance_m?",
            "belt_width_cm": "barrier.belt_width_cm",
        },
        source="ncrp-151",
        known="memory",
    ),
    derived(
        "exposure.faces_beam",
        "The beam faces the barrier.",
        lambda *, distances: distances.faces_beam,
        {"distances": "exposure.distances"},
    ),
    derived(
        "barrier.surveys_in_mode",
        "Surveys of its room in the mode.",
        lambda *, surveys: surveys,
        {"surveys": "room.surveys_in_mode"},
    ),
    derived(
        "arrangement.neutrons_covered",
        "Neutrons and doors are covered by the room's own report.",
        lambda *, covered: covered,
        {"covered": "protection.neutron_assessed"},
    ),
    derived(
        "exposure.role", "What the barrier was built for.", lambda *, role: role, {"role": "barrier.role"}
    ),
    derived(
        "exposure.goal_msv_per_week",
        "Weekly design goal of the place beyond.",
        lambda *, goal_msv_per_week: goal_msv_per_week,
        {"goal_msv_per_week": "barrier.design_goal_msv_per_week"},
    ),
)
