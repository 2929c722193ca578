"""What would keep the goals where a barrier does not: material, shorter lists, another side or room."""

from readiness.assessment.definition import Definition, derived
from readiness.calculations.barrier_dose import WeeklyDose
from readiness.calculations.required_thickness import cycles_that_fit, required_thickness
from readiness.errors import OutsideValidity
from readiness.quantities import Table

REMEDIES = ("place", "extra_tvl", "or_concrete_cm", "or_steel_cm", "or_lead_cm", "or_cycles_at_most_per_week")
ARRANGEMENTS = ("arrangement", "worst_place", "part_of_goal_ratio")


def extra_thickness(*, dose: WeeklyDose, goal_msv_per_week: float) -> Table:
    """Return what would have to be added outside: tenth-value layers, or one material."""
    needed = required_thickness(contributions=dose.contributions, limit_usv_per_week=1000 * goal_msv_per_week)
    row = (needed.extra_tvl, needed.concrete_cm, needed.steel_cm, needed.lead_cm)
    return Table(("extra_tvl", "concrete_cm", "steel_cm", "lead_cm"), (row,))


def fitting_cycles(
    *, dose: WeeklyDose, cycles_per_week: float, peak_patients: int, goal_msv_per_week: float
) -> int:
    """Return how many cycles a week stay within the goal as the barrier is."""
    found = cycles_that_fit(
        before_usv_per_week=dose.before_usv_per_week, added_usv_per_week=dose.added_usv_per_week,
        cycles_per_week=cycles_per_week, patient_cycles_per_week=cycles_per_week / max(1, peak_patients),
        design_goal_msv_per_week=goal_msv_per_week,
    )  # fmt: skip
    if found.cycles_per_week is None:
        raise OutsideValidity("the program adds nothing behind this barrier")
    return found.cycles_per_week


def remedies(
    *, places: tuple[str, ...], extra: tuple[Table | None, ...], cycles: tuple[float | None, ...]
) -> Table:
    """Return for each place what would have to be added, or to how many cycles a week the list be cut."""
    rows = []
    for place, added, most in zip(places, extra, cycles, strict=True):
        if added is not None:
            rows.append((place, *added.rows[0], most))
    return Table(REMEDIES, tuple(rows))


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
        "exposure.cycles_that_fit_per_week",
        "Cycles a week that keep the design goal with the barrier as it is.",
        by=fitting_cycles,
        takes={
            "dose": "exposure.week",
            "cycles_per_week": "program.busiest_week_cycles_per_week",
            "peak_patients": "program.peak_patients",
            "goal_msv_per_week": "barrier.design_goal_msv_per_week",
        },
        source="own-arithmetic",
        known="derived",
    ),
    derived(
        "arrangement.barrier_remedies",
        "What would keep the goal of the week at each place: one material outside, or fewer cycles a week.",
        remedies,
        {
            "places": "each exposure.title",
            "extra": "each exposure.extra_thickness?",
            "cycles": "each exposure.cycles_that_fit_per_week?",
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
