"""The calculation of a barrier line by line, and what must be said beside its result."""

from math import exp, log10

from readiness.assessment.definition import Definition, derived
from readiness.calculations.barrier_distances import BarrierDistances
from readiness.calculations.barrier_dose import NEUTRONS_FROM_MV, WeeklyDose
from readiness.calculations.barrier_transmission import barrier_layers, transmission_steps
from readiness.calculations.field_factor import POSITIONS
from readiness.calculations.leakage_workload import LeakageWorkload
from readiness.quantities import Scalar, Table
from readiness.units import printed

DISTANCES = ("distance", "symbol", "amount_m", "comes_from")
LAYERS = ("contribution", "layer", "thickness_cm", "density_g_per_cm3", "first_tenth_cm", "later_tenth_cm",
          "in_first_tenth_cm", "tenths", "transmission")  # fmt: skip
JUDGED = ("step", "symbol", "amount", "unit")
STEPS = ("step", "symbol", "amount", "unit", "basis", "source")
HOURS = ("place", "photon_hour_usv", "session_usv", "sessions_in_hour", "any_hour_usv", "limit_usv")
NOTHING = "none"
SURVEY_ONLY = "Not assessed: survey in the mode."


def distance_steps(
    *, distances: BarrierDistances, inner_face_cm: float | None, distance_m: float | None,
    isocentre_distance_m: float | None, leakage_distance_m: float | None, contributions: Table,
) -> Table:  # fmt: skip
    """Return every distance to the point 0.3 m beyond the barrier, and what it comes from."""
    isocentre = "stated" if isocentre_distance_m is not None else (
        "inner face, layers and 0.3 m" if inner_face_cm is not None else "source less its distance"
    )  # fmt: skip
    beside = distances.scatter_angle_deg == 90.0
    head = "stated" if beside and leakage_distance_m is not None else "isocentre and where the head stands"
    rows: list[tuple[Scalar, ...]] = [
        ("from the isocentre", "d_iso", distances.isocentre_distance_m, isocentre),
        ("from the source of photon beams", "d", distances.primary_distance_m,
         "stated" if distance_m is not None else "isocentre and its distance"),
        ("from the head in the mode", "d_L", distances.head_distance_m, head),
        ("from the patient", "d_sec", distances.scatter_distance_m, "isocentre and plane"),
    ]  # fmt: skip
    for row in contributions.records():
        if row["contribution"] == "added x rays":
            way = "source straight ahead" if distances.faces_beam else "nearest ray, layers and 0.3 m"
            rows.append(("of the x rays", "d", row["distance_m"], way))
    return Table(DISTANCES, tuple(rows))


def layer_steps(*, contributions: Table, layers: Table, recess_cm: float | None) -> Table:
    """Return for each contribution what each layer takes, from inside outwards."""
    met = barrier_layers(layers=layers, recess_depth_cm=recess_cm or 0.0)
    rows: list[tuple[Scalar, ...]] = []
    for row in contributions.records():
        angle = row["angle_deg"]
        steps = transmission_steps(
            layers=met, radiation=str(row["radiation"]), energy_mv=float(str(row["energy_mv"])),
            angle_deg=None if angle is None else float(angle),
        )  # fmt: skip
        tenths = 0.0
        for step in steps:
            tenths += step.tenths
            rows.append(
                (
                    row["contribution"], step.layer.material, step.layer.thickness_cm,
                    step.layer.density_g_per_cm3, step.tvl1_cm, step.tvle_cm, step.in_first_cm, step.tenths,
                    10.0**-tenths,
                )
            )  # fmt: skip
    return Table(LAYERS, tuple(rows))


def judged_steps(
    *, dose: WeeklyDose, occupancy: float, goal_msv_per_week: float, area: str, ratio: float
) -> Table:
    """Return how the sum of the contributions stands to the goal of the week."""
    rows: list[tuple[Scalar, ...]] = [
        ("occupancy of the place", "T", occupancy, ""),
        ("before the program", "H_before", dose.before_usv_per_week, "µSv/week"),
        ("added by the program", "H_added", dose.added_usv_per_week, "µSv/week"),
        ("with the program", "H", dose.after_usv_per_week, "µSv/week"),
        (f"design goal, {area} area", "P", 1000 * goal_msv_per_week, "µSv/week"),
        ("part of the goal", "H/P", ratio, ""),
    ]
    if ratio > 0:
        rows.append(("tenth-value layers to spare; missing if negative", "log10 P/H", -log10(ratio), ""))
    return Table(JUDGED, tuple(rows))


def turned_factor(*, b_factor: float) -> float:
    """Return by what six dual fields exceed their skin dose in x rays: 6/B."""
    return POSITIONS / b_factor


def water_factor(*, depth_cm: float, attenuation: float) -> float:
    """Return what the water in front of the fraction took away."""
    return exp(attenuation * depth_cm)


def surfaces_unlisted(*, spots: Table, surfaces: tuple[str | None, ...]) -> str:
    """Return the surfaces that a field meets and for which no place to protect is listed, none if all are."""
    met = dict.fromkeys(str(row["surface"]) for row in spots.records())
    return ", ".join(each for each in met if each not in surfaces) or NOTHING


def leakage_steps(*, workload: LeakageWorkload, percent: float) -> Table:
    """Return the steps of the leakage workload."""
    cycles = workload.per_week_gy_m2_per_week / workload.per_cycle_gy_m2
    week = workload.per_week_gy_m2_per_week
    rows: list[tuple[Scalar, ...]] = [
        ("dose at 1 m, of a cycle", "W_1", workload.per_cycle_gy_m2, "Gy m²", "product", "program"),
        ("cycles in the week, with extra MU", "N", cycles, "per week", "as given", "program"),
        ("dose at 1 m, of the week", "W_L", week, "Gy m²/week", "product", "derived"),
        ("leaking part", "L", percent / 100, "", "as given", "machine"),
    ]
    return Table(STEPS, tuple(rows))


def hours(
    *, places: tuple[str, ...], photons: tuple[float | None, ...], sessions: tuple[float | None, ...],
    doses: tuple[float | None, ...], sessions_in_hour: int, limit_usv: float,
) -> Table:  # fmt: skip
    """Return for each place what the largest dose of 60 minutes is made of."""
    rows = [
        (place, photon, session, sessions_in_hour, dose, limit_usv)
        for place, photon, session, dose in zip(places, photons, sessions, doses, strict=True)
        if dose is not None
    ]
    return Table(HOURS, tuple(rows))


def remark(
    *, survey_only: bool, role: str | None, dose: WeeklyDose | None, ratio: float | None, margin: float,
    belt_spare_cm: float | None, spots: Table | None, surface: str | None,
) -> str:  # fmt: skip
    """Return what must be said beside the numbers of a place, none if nothing."""
    if survey_only:
        return SURVEY_ONLY
    said = []
    if dose is None:
        return "Not calculated; its gap names what is missing. Survey in the mode."
    if dose.beam_on_secondary:
        said.append("The beam meets a barrier built as secondary.")
    if belt_spare_cm is not None and belt_spare_cm < 0:
        said.append(f"The beam is wider than the thick part, by {printed(-belt_spare_cm, 2)} cm.")
    elif belt_spare_cm is None and role == "primary" and _is_met(spots, surface):
        said.append("Width of the thick part not stated.")
    if ratio is not None and ratio > 1:
        said.append("Above its goal.")
    elif ratio is not None and ratio > margin:
        said.append(f"Margin below {printed(1 / margin, 2)}: survey here first.")
    if dose.photon_part_only:
        said.append(f"Photon part only ({printed(NEUTRONS_FROM_MV)} MV or more).")
    oblique = _oblique_deg(spots, surface)
    if oblique:
        said.append(f"Rays meet it at up to {printed(oblique, 2)}° from straight; counted as straight.")
    return " ".join(said) or NOTHING


def _rays(spots: Table | None, surface: str | None) -> list[dict[str, Scalar]]:
    return [] if spots is None else [row for row in spots.records() if row["surface"] == surface]


def _is_met(spots: Table | None, surface: str | None) -> bool:
    return bool(_rays(spots, surface))


def _oblique_deg(spots: Table | None, surface: str | None) -> float:
    return max((float(str(row["obliquity_deg"])) for row in _rays(spots, surface)), default=0.0)


DEFINITIONS: tuple[Definition, ...] = (
    derived(
        "exposure.distance_steps",
        "Every distance to the point beyond the barrier, and what it comes from.",
        distance_steps,
        {
            "distances": "exposure.distances",
            "inner_face_cm": "barrier.inner_face_cm?",
            "distance_m": "barrier.distance_m?",
            "isocentre_distance_m": "barrier.isocentre_distance_m?",
            "leakage_distance_m": "barrier.leakage_distance_m?",
            "contributions": "exposure.contributions",
        },
    ),
    Definition(
        "exposure.layer_steps",
        "What each layer of the barrier takes from each contribution.",
        by=layer_steps,
        takes={
            "contributions": "exposure.contributions",
            "layers": "barrier.layers",
            "recess_cm": "barrier.recess_cm?",
        },
        source="ncrp-151",
        known="memory",
        formula="B = 10^-(t1/TVL1 + (t - t1)/TVLe); TVL = TVL(rho_0) rho_0 / rho",
    ),
    derived(
        "exposure.judged_steps",
        "How the sum of the contributions stands to the goal of the week.",
        judged_steps,
        {
            "dose": "exposure.week",
            "occupancy": "barrier.occupancy",
            "goal_msv_per_week": "barrier.design_goal_msv_per_week",
            "area": "barrier.area",
            "ratio": "exposure.goal_ratio",
        },
    ),
    derived(
        "arrangement.turned_ratio",
        "X rays of six dual fields over those of one, for the same skin dose: 6/B.",
        turned_factor,
        {"b_factor": "arrangement.b_factor"},
    ),
    Definition(
        "arrangement.water_ratio",
        "X rays without water over those behind the water in front of the stated fraction.",
        by=water_factor,
        takes={
            "depth_cm": "arrangement.pair_xray_depth_cm",
            "attenuation": "criterion.water_attenuation_ratio",
        },
        source="own-arithmetic",
        known="derived",
        formula="exp(mu z)",
    ),
    derived(
        "arrangement.surfaces_unlisted",
        "Surfaces that a field meets without a place to protect listed there, none if all are listed.",
        surfaces_unlisted,
        {"spots": "arrangement.field_spots", "surfaces": "each barrier.surface?"},
    ),
    derived(
        "arrangement.leakage_workload_steps",
        "Steps to the leakage workload.",
        leakage_steps,
        {"workload": "arrangement.leakage_workload_record", "percent": "beam.leakage_percent"},
    ),
    derived(
        "arrangement.barrier_hours",
        "What the largest dose in any 60 minutes is made of, place by place; no occupancy counted.",
        hours,
        {
            "places": "each exposure.title",
            "photons": "each exposure.photon_hour_usv?",
            "sessions": "each exposure.session_usv?",
            "doses": "each exposure.any_hour_dose_usv?",
            "sessions_in_hour": "program.sessions_in_busiest_hour",
            "limit_usv": "criterion.any_hour_limit_usv",
        },
    ),
    derived(
        "exposure.remark",
        "What must be said beside the numbers of this place, none if nothing.",
        remark,
        {
            "survey_only": "barrier.survey_only",
            "role": "barrier.role?",
            "dose": "exposure.week?",
            "ratio": "exposure.goal_ratio?",
            "margin": "criterion.survey_margin_ratio",
            "belt_spare_cm": "exposure.belt_spare_cm?",
            "spots": "arrangement.field_spots?",
            "surface": "barrier.surface?",
        },
    ),
)
