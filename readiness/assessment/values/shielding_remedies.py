"""What would keep the goals where a barrier does not: material, shorter lists, another side or room."""

from collections.abc import Mapping

from readiness.assessment.definition import Definition, derived
from readiness.calculations.barrier_dose import WeeklyDose
from readiness.calculations.dose_limits import AnyHourDose
from readiness.calculations.required_thickness import (
    FittingCycles,
    cycles_that_fit,
    required_thickness,
    sessions_that_fit,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table
from readiness.units import printed

REMEDIES = (
    "place", "extra_tvl", "or_concrete_cm", "or_steel_cm", "or_lead_cm", "or_cycles_at_most_per_week",
    "or_patients_at_once",
)  # fmt: skip
ARRANGEMENTS = ("arrangement", "worst_place", "part_of_goal_ratio")


def extra_thickness(*, dose: WeeklyDose, goal_msv_per_week: float) -> Table:
    """Return what would have to be added outside: tenth-value layers, or one material."""
    needed = required_thickness(contributions=dose.contributions, limit_usv_per_week=1000 * goal_msv_per_week)
    row = (needed.extra_tvl, needed.concrete_cm, needed.steel_cm, needed.lead_cm)
    return Table(("extra_tvl", "concrete_cm", "steel_cm", "lead_cm"), (row,))


def fitting_cycles(
    *, dose: WeeklyDose, cycles_per_week: float, peak_patients: int, goal_msv_per_week: float
) -> FittingCycles:
    """Return how many cycles a week, and patients at once, stay within the goal as the barrier is."""
    found = cycles_that_fit(
        before_usv_per_week=dose.before_usv_per_week, added_usv_per_week=dose.added_usv_per_week,
        cycles_per_week=cycles_per_week, patient_cycles_per_week=cycles_per_week / max(1, peak_patients),
        design_goal_msv_per_week=goal_msv_per_week,
    )  # fmt: skip
    if found.cycles_per_week is None:
        raise OutsideValidity("the program adds nothing behind this barrier")
    return found


def remedies(
    *, places: tuple[str, ...], extra: tuple[Table | None, ...], cycles: tuple[float | None, ...],
    patients: tuple[float | None, ...],
) -> Table:  # fmt: skip
    """Return for each place what would have to be added, or to how many cycles a week the list be cut."""
    rows = []
    for place, added, most, at_once in zip(places, extra, cycles, patients, strict=True):
        if added is not None:
            rows.append((place, *added.rows[0], most, at_once))
    return Table(REMEDIES, tuple(rows))


def would_do(
    *, extra: Table, before_usv_per_week: float, goal_msv_per_week: float, cycles_per_week: int | None,
    patients: int | None, arrangement: str, others: Table | None,
) -> str:  # fmt: skip
    """Return in words what would keep the weekly goal here: material, a shorter list, another arrangement."""
    (row,) = extra.records()
    if not row["extra_tvl"]:
        return "Nothing is needed: the goal of the week is kept."
    said = [_material(row)]
    if before_usv_per_week > 1000 * goal_msv_per_week:
        said.append("the work that is there already is above the goal without the program")
    elif cycles_per_week == 0:
        said.append("not even one cycle a week keeps the goal")
    elif cycles_per_week is not None:
        said.append(f"or at most {cycles_per_week} cycles a week for all patients together")
        said[-1] += f" ({patients} at once)" if patients else " (less than one whole course at a time)"
    return f"{', '.join(said)}. {_elsewhere(arrangement, others)}"


def _material(row: Mapping[str, Scalar]) -> str:
    tvl, concrete, steel, lead = (
        printed(float(str(row[name])), 3) for name in ("extra_tvl", "concrete_cm", "steel_cm", "lead_cm")
    )
    return (
        f"It would take {concrete} cm of concrete outside, or {steel} cm of steel, or {lead} cm of lead"
        f" ({tvl} tenth-value layers)"
    )


def _elsewhere(arrangement: str, others: Table | None) -> str:
    rows = [] if others is None else [row for row in others.records() if row["arrangement"] != arrangement]
    kept = [row for row in rows if float(str(row["part_of_goal_ratio"])) <= 1]
    if not kept:
        return "No other arrangement whose barriers can be calculated keeps every goal."
    best = kept[0]
    ratio = printed(float(str(best["part_of_goal_ratio"])), 2)
    return (
        f"Another side or room: {best['arrangement']} takes at most {ratio} of a goal, at"
        f" {best['worst_place']}, as far as its barriers are calculated."
    )


def hour_would_do(*, hour: AnyHourDose, limit_usv: float) -> str:
    """Return in words what would keep the limit of an hour here."""
    found = sessions_that_fit(
        usv_in_any_hour=hour.usv_in_any_hour, photon_usv_in_any_hour=hour.photon_only_usv_in_any_hour,
        session_usv=hour.per_session_usv, limit_usv_in_any_hour=limit_usv,
    )  # fmt: skip
    if not found.extra_tvl:
        return "Nothing is needed: the limit of the hour is kept."
    tvl = printed(found.extra_tvl, 3)
    fewer = "no shorter list keeps it" if found.sessions is None else (
        f"or at most {found.sessions} sessions in 60 minutes"
    )  # fmt: skip
    return f"It would take {tvl} tenth-value layers outside, {fewer}."


def worst_place(*, places: tuple[str, ...], ratios: tuple[float | None, ...]) -> tuple[float, str]:
    """Return the largest part of a goal behind any barrier, and the place."""
    known = [(ratio, place) for ratio, place in zip(ratios, places, strict=True) if ratio is not None]
    if not known:
        raise OutsideValidity("no barrier of this arrangement can be calculated")
    return max(known, key=lambda each: each[0])


def by_arrangement(
    *, titles: tuple[str, ...], ratios: tuple[float | None, ...], places: tuple[str | None, ...]
) -> Table:
    """Return every arrangement with its worst barrier, the best first."""
    rows = [
        (title, place, ratio)
        for title, place, ratio in zip(titles, places, ratios, strict=True)
        if ratio is not None
    ]
    return Table(ARRANGEMENTS, tuple(sorted(rows, key=lambda row: (row[2], row[0]))))


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "exposure.extra_thickness",
        "What would have to be added outside to keep the design goal; one material alone.",
        by=extra_thickness,
        takes={"dose": "exposure.week", "goal_msv_per_week": "barrier.design_goal_msv_per_week"},
        source="ncrp-151",
        known="memory",
    ),
    Definition(
        "exposure.fitting",
        "Cycles and patients that keep the design goal with the barrier as it is.",
        by=fitting_cycles,
        takes={
            "dose": "exposure.week",
            "cycles_per_week": "program.busiest_week_cycles_per_week",
            "peak_patients": "program.peak_patients",
            "goal_msv_per_week": "barrier.design_goal_msv_per_week",
        },
        internal=True,
    ),
    Definition(
        "exposure.cycles_that_fit_per_week",
        "Cycles a week that keep the design goal with the barrier as it is.",
        of="exposure.fitting",
        part="cycles_per_week",
        source="own-arithmetic",
        known="derived",
        formula="n = (P - H_before) / (H_added / cycles of the busiest week)",
    ),
    Definition(
        "exposure.fitting_patients",
        "Patients at once that keep the design goal with the barrier as it is.",
        of="exposure.fitting",
        part="patients",
        source="own-arithmetic",
        known="derived",
    ),
    derived(
        "exposure.would_do",
        "What would keep the goal of the week: material, a shorter list, another arrangement.",
        would_do,
        {
            "extra": "exposure.extra_thickness",
            "before_usv_per_week": "exposure.before_usv_per_week",
            "goal_msv_per_week": "barrier.design_goal_msv_per_week",
            "cycles_per_week": "exposure.cycles_that_fit_per_week?",
            "patients": "exposure.fitting_patients?",
            "arrangement": "arrangement.title",
            "others": "program.barriers_by_arrangement?",
        },
    ),
    derived(
        "exposure.hour_would_do",
        "What would keep the limit of any one hour: material, or fewer sessions in it.",
        hour_would_do,
        {"hour": "exposure.hour", "limit_usv": "criterion.any_hour_limit_usv"},
    ),
    derived(
        "arrangement.barrier_remedies",
        "What would keep the goal of the week at each place: one material outside, or fewer cycles a week.",
        remedies,
        {
            "places": "each exposure.title",
            "extra": "each exposure.extra_thickness?",
            "cycles": "each exposure.cycles_that_fit_per_week?",
            "patients": "each exposure.fitting_patients?",
        },
    ),
    Definition(
        "arrangement.worst_barrier",
        "The barrier that takes the largest part of its goal.",
        by=worst_place,
        takes={"places": "each exposure.title", "ratios": "each exposure.goal_ratio?"},
        internal=True,
    ),
    derived(
        "arrangement.worst_goal_ratio",
        "Largest part of a weekly goal behind any barrier, with the program.",
        lambda *, worst: worst[0],
        {"worst": "arrangement.worst_barrier"},
    ),
    derived(
        "arrangement.worst_goal_place",
        "Where that is.",
        lambda *, worst: worst[1],
        {"worst": "arrangement.worst_barrier"},
    ),
    derived(
        "program.barriers_by_arrangement",
        "The worst barrier of every arrangement: what another side, room or beam would give.",
        by_arrangement,
        {
            "titles": "each arrangement.title",
            "ratios": "each arrangement.worst_goal_ratio?",
            "places": "each arrangement.worst_goal_place?",
        },
    ),
)
