"""A barrier seen from an arrangement: distances, and the dose of the busiest week before and after."""

from readiness.assessment.definition import Definition, derived
from readiness.assessment.values.shielding_places import GEOMETRY
from readiness.assessment.values.shielding_workload import by_technique
from readiness.calculations.barrier_distances import BarrierDistances, barrier_distances
from readiness.calculations.barrier_dose import WeeklyDose, weekly_dose
from readiness.calculations.beam_on_barrier import nearest_spot_distance_m
from readiness.calculations.dose_limits import goal_margin
from readiness.quantities import Table

MV_OF_MEV = 1.0  # the end point of the x rays is the energy of the electrons
WORKED_OUT = ("contribution", "formula", "with_numbers", "dose_usv_per_week", "share_percent", "source")
BARRIERS = (
    "place", "before_usv_per_week", "after_usv_per_week", "goal_usv_per_week", "in_any_hour_usv", "role",
    "largest_contribution", "remark",
)  # fmt: skip


def distances(
    *, surface: str, layers: Table, inner_face_cm: float | None, distance_m: float | None,
    isocentre_distance_m: float | None, leakage_distance_m: float | None, isocentre_height_cm: float | None,
    side_deg: int, tilt_deg: float, source_axis_distance_cm: float, plane_distance_cm: float,
) -> BarrierDistances:  # fmt: skip
    """Return all distances to a barrier; doors, mazes and penetrations are for the survey."""
    return barrier_distances(
        surface=surface, layers=layers, inner_face_cm=inner_face_cm, distance_m=distance_m,
        isocentre_distance_m=isocentre_distance_m, leakage_distance_m=leakage_distance_m,
        isocentre_height_cm=isocentre_height_cm, side_deg=side_deg, tilt_deg=tilt_deg,
        source_axis_distance_cm=source_axis_distance_cm, plane_distance_cm=plane_distance_cm,
    )  # fmt: skip


def vertical_distances(
    *, surface: str, layers: Table, inner_face_cm: float | None, distance_m: float | None,
    isocentre_distance_m: float | None, isocentre_height_cm: float | None, source_axis_distance_cm: float,
    plane_distance_cm: float,
) -> BarrierDistances:  # fmt: skip
    """Return all distances to a barrier of a beam that points straight down at the floor."""
    return barrier_distances(
        surface=surface, layers=layers, inner_face_cm=inner_face_cm, distance_m=distance_m,
        isocentre_distance_m=isocentre_distance_m, leakage_distance_m=None,
        isocentre_height_cm=isocentre_height_cm, side_deg=0, tilt_deg=0.0,
        source_axis_distance_cm=source_axis_distance_cm, plane_distance_cm=plane_distance_cm,
    )  # fmt: skip


def week(
    *, distances: BarrierDistances, surface: str, layers: Table, role: str, occupancy: float,
    recess_cm: float | None, existing: Table, energy_mev: float, xray_gy_m2_per_week: float,
    leakage_gy_m2_per_week: float, leakage_percent: float, plane_distance_cm: float, patient_area_m2: float,
    spots: Table,
) -> WeeklyDose:  # fmt: skip
    """Return the dose of the busiest week behind a barrier, contribution by contribution."""
    lobe = nearest_spot_distance_m(spots=spots, surface=surface, layers=layers)
    across = not surface.startswith("x-")
    return weekly_dose(
        layers=layers, role=role, occupancy=occupancy, recess_depth_cm=recess_cm or 0.0, existing=existing,
        primary_distance_m=distances.primary_distance_m,
        isocentre_distance_m=distances.isocentre_distance_m, beam_energy_mv=energy_mev * MV_OF_MEV,
        xray_workload_gy_m2_per_week=xray_gy_m2_per_week,
        xray_distance_m=lobe if across else distances.xray_distance_m,
        leakage_workload_gy_m2_per_week=leakage_gy_m2_per_week, leakage_percent=leakage_percent,
        head_distance_m=distances.head_distance_m, plane_distance_cm=plane_distance_cm,
        patient_area_m2=patient_area_m2, scatter_distance_m=distances.scatter_distance_m,
        scatter_angle_deg=distances.scatter_angle_deg,
    )  # fmt: skip


def part_of_goal(*, dose_usv_per_week: float, goal_msv_per_week: float, survey_margin: float) -> float:
    """Return the weekly dose as a part of the design goal."""
    return goal_margin(
        dose_usv_per_week=dose_usv_per_week, design_goal_msv_per_week=goal_msv_per_week,
        survey_margin_ratio=survey_margin,
    ).share_of_goal  # fmt: skip


def worked_out(*, contributions: Table) -> Table:
    """Return each contribution as its formula, the same with numbers, and what it gives."""
    rows = []
    for row in contributions.records():
        numbers = " x ".join(
            f"{float(str(row[name])):.4g}"
            for name in ("workload_gy_m2_per_week", "factor", "occupancy", "transmission")
        )
        said = f"{numbers} / {float(str(row['distance_m'])):.4g}^2 x 10^6"
        dose, share = row["dose_usv_per_week"], row["share_percent"]
        rows.append((row["contribution"], row["formula"], said, dose, share, row["source"]))
    return Table(WORKED_OUT, tuple(rows))


def overview(
    *, places: tuple[str, ...], roles: tuple[str, ...], before: tuple[float | None, ...],
    after: tuple[float | None, ...], goals: tuple[float | None, ...], hours: tuple[float | None, ...],
    largest: tuple[str | None, ...], remarks: tuple[str | None, ...],
) -> Table:  # fmt: skip
    """Return all barriers of the room, before and after; blank where only a survey can tell."""
    rows = [
        (place, was, now, None if goal is None else 1000 * goal, in_hour, role, most, remark)
        for place, role, was, now, goal, in_hour, most, remark in zip(
            places, roles, before, after, goals, hours, largest, remarks, strict=True
        )
    ]
    return Table(BARRIERS, tuple(rows))


def _part(name: str, meaning: str, part: str) -> Definition:
    return Definition(
        f"exposure.{name}", meaning, of="exposure.week", part=part, source="ncrp-151", known="memory",
        formula="H = W x factor x T x B / d^2, summed over contributions",
    )  # fmt: skip


_PLACE = {
    "surface": "barrier.surface",
    "layers": "barrier.layers",
    "inner_face_cm": "barrier.inner_face_cm?",
    "distance_m": "barrier.distance_m?",
    "isocentre_distance_m": "barrier.isocentre_distance_m?",
    "isocentre_height_cm": "room.isocentre_height_cm?",
    "plane_distance_cm": "arrangement.study_distance_cm",
}

DEFINITIONS: tuple[Definition, ...] = (
    by_technique(
        "exposure.distances",
        "Distances to the barrier from source, head, isocentre and patient.",
        standing="exposure.level_distances",
        lying="exposure.vertical_distances",
    ),
    Definition(
        "exposure.level_distances",
        "Distances to the barrier with the gantry at 90 or 270.",
        by=distances,
        takes={**_PLACE, "leakage_distance_m": "barrier.leakage_distance_m?", **GEOMETRY},
        internal=True,
    ),
    Definition(
        "exposure.vertical_distances",
        "Distances to the barrier with the gantry at 0.",
        by=vertical_distances,
        takes={**_PLACE, "source_axis_distance_cm": "machine.source_axis_distance_cm"},
        internal=True,
    ),
    Definition(
        "exposure.week",
        "Dose of the busiest week behind the barrier.",
        by=week,
        takes={
            "distances": "exposure.distances",
            "surface": "barrier.surface",
            "layers": "barrier.layers",
            "role": "barrier.role",
            "occupancy": "barrier.occupancy",
            "recess_cm": "barrier.recess_cm?",
            "existing": "barrier.existing_workload",
            "energy_mev": "beam.energy_at_source_mev",
            "xray_gy_m2_per_week": "arrangement.xray_workload_gy_m2_per_week",
            "leakage_gy_m2_per_week": "arrangement.leakage_workload_gy_m2_per_week",
            "leakage_percent": "beam.leakage_percent",
            "plane_distance_cm": "arrangement.study_distance_cm",
            "patient_area_m2": "criterion.patient_area_m2",
            "spots": "arrangement.field_spots",
        },
        model=True,
        internal=True,
    ),
    _part("before_usv_per_week", "Dose of a week before the program.", "before_usv_per_week"),
    _part("weekly_dose_usv_per_week", "Dose of the busiest week with the program.", "after_usv_per_week"),
    _part("added_usv_per_week", "What the program adds in the busiest week.", "added_usv_per_week"),
    _part("contributions", "What the dose is made of, line by line.", "contributions"),
    derived(
        "exposure.calculation",
        "Each contribution as its formula, with numbers, and its share.",
        worked_out,
        {"contributions": "exposure.contributions"},
    ),
    _part("largest_contribution", "The largest contribution.", "largest_contribution"),
    _part("beam_on_secondary", "The fields meet a barrier built as secondary.", "beam_on_secondary"),
    Definition(
        "exposure.goal_ratio",
        "Dose of the busiest week as a part of the design goal.",
        by=part_of_goal,
        takes={
            "dose_usv_per_week": "exposure.weekly_dose_usv_per_week",
            "goal_msv_per_week": "barrier.design_goal_msv_per_week",
            "survey_margin": "criterion.survey_margin_ratio",
        },
        source="ncrp-151",
        known="memory",
    ),
    derived(
        "arrangement.barriers",
        "All barriers of the room before and after; a blank is left for the survey.",
        overview,
        {
            "places": "each exposure.title",
            "roles": "each exposure.role?",
            "before": "each exposure.before_usv_per_week?",
            "after": "each exposure.weekly_dose_usv_per_week?",
            "goals": "each exposure.goal_msv_per_week?",
            "hours": "each exposure.any_hour_dose_usv?",
            "largest": "each exposure.largest_contribution?",
            "remarks": "each exposure.remark?",
        },
    ),
)
