"""A barrier seen from an arrangement against other limits: hour, year, dose rate, commissioning week."""

from readiness.assessment.definition import Definition, derived
from readiness.calculations.barrier_dose import WeeklyDose
from readiness.calculations.dose_limits import (
    AnyHourDose,
    annual_dose_msv,
    any_hour_dose,
    week_of_tests_usv,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

LIMITS = (
    "place", "busiest_usv_per_week", "any_hour_usv_in_any_hour", "year_msv_per_year", "beam_on_usv_per_h",
    "commissioning_usv_per_week",
)  # fmt: skip


def hour(
    *, dose: WeeklyDose, cycles_per_week: float, sessions_per_cycle: int, sessions_in_hour: int,
    busiest_photon_hour: float,
) -> AnyHourDose:  # fmt: skip
    """Return the largest dose in any 60 consecutive minutes, no occupancy counted."""
    return any_hour_dose(
        before_rate_usv_per_week=dose.before_rate_usv_per_week,
        added_rate_usv_per_week=dose.added_rate_usv_per_week, cycles_per_week=cycles_per_week,
        sessions_per_cycle=sessions_per_cycle, sessions_in_hour=sessions_in_hour, session_room_min=None,
        busiest_hour_ratio=busiest_photon_hour,
    )  # fmt: skip


def year(*, dose: WeeklyDose, cycles_per_week: float) -> float:
    """Return the dose of a year of busiest weeks, an upper bound."""
    return annual_dose_msv(
        before_usv_per_week=dose.before_usv_per_week, added_usv_per_week=dose.added_usv_per_week,
        cycles_per_week=cycles_per_week, cycles_per_year=None,
    )  # fmt: skip


def commissioning_week(
    *, dose: WeeklyDose, cycles_per_week: float, cycle_mu: int, qa_mu: float | None, commissioning_mu: float
) -> float:
    """Return the dose of the busiest commissioning week, in which no patient is treated in the mode."""
    return week_of_tests_usv(
        before_usv_per_week=dose.before_usv_per_week, added_usv_per_week=dose.added_usv_per_week,
        added_mu=cycles_per_week * cycle_mu + (qa_mu or 0.0), tests_mu=commissioning_mu,
    )  # fmt: skip


def part_of_goal(*, dose_usv_per_week: float, goal_msv_per_week: float) -> float:
    """Return a weekly dose as a part of the design goal."""
    return dose_usv_per_week / (1000 * goal_msv_per_week)


def all_limits(
    *, places: tuple[str, ...], weeks: tuple[float | None, ...], hours: tuple[float | None, ...],
    years: tuple[float | None, ...], rates: tuple[float | None, ...], commissioning: tuple[float | None, ...],
) -> Table:  # fmt: skip
    """Return every place with its doses in a week, hour, year and commissioning week, and the dose rate."""
    return Table(LIMITS, tuple(zip(places, weeks, hours, years, rates, commissioning, strict=True)))


def highest_reading(*, readings: Table) -> float:
    """Return the largest dose rate to expect behind a barrier while one beam is on."""
    rates = [float(str(rate)) for rate in readings.column("predicted_usv_per_h") if rate is not None]
    if not rates:
        raise OutsideValidity("no dose rate is predicted here: measure it in the mode")
    return max(rates)


HOUR = (
    (
        "any_hour_dose_usv",
        "Largest dose in any 60 consecutive minutes, no occupancy counted.",
        "usv_in_any_hour",
        "R_h = larger of (M/40) R_w and n H_session + (M/40) R_w; without occupancy",
    ),
    (
        "photon_hour_usv",
        "Dose of the busiest hour of photon work alone, no occupancy counted.",
        "photon_only_usv_in_any_hour",
        "R_h = (M/40) R_w",
    ),
    (
        "session_usv",
        "Dose of one session of the program, no occupancy counted.",
        "per_session_usv",
        "H_session = H_added / (T cycles a week x sessions a cycle)",
    ),
)


def _part_of_hour(name: str, meaning: str, part: str, formula: str) -> Definition:
    return Definition(
        f"exposure.{name}", meaning, of="exposure.hour", part=part, source="ncrp-151", known="memory",
        formula=formula,
    )  # fmt: skip


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "exposure.hour",
        "Largest dose in any 60 consecutive minutes and its parts.",
        by=hour,
        takes={
            "dose": "exposure.week",
            "cycles_per_week": "program.busiest_week_cycles_per_week",
            "sessions_per_cycle": "program.fewest_sessions_per_cycle",
            "sessions_in_hour": "program.sessions_in_busiest_hour",
            "busiest_photon_hour": "protection.busiest_photon_hour",
        },
        internal=True,
    ),
    *(_part_of_hour(*each) for each in HOUR),
    Definition(
        "exposure.annual_dose_msv_per_year",
        "Dose of a year of busiest weeks, an upper bound.",
        by=year,
        takes={"dose": "exposure.week", "cycles_per_week": "program.busiest_week_cycles_per_week"},
        source="ncrp-151",
        known="memory",
    ),
    Definition(
        "exposure.commissioning_week_usv_per_week",
        "Dose of the busiest week of commissioning, without patients in the mode.",
        by=commissioning_week,
        takes={
            "dose": "exposure.week",
            "cycles_per_week": "program.busiest_week_cycles_per_week",
            "cycle_mu": "arrangement.workload_mu",
            "qa_mu": "protection.qa_mu_per_week_mu?",
            "commissioning_mu": "protection.commissioning_mu_per_week_mu",
        },
        source="own-arithmetic",
        known="derived",
        formula="H = H_before + H_added x MU of commissioning / MU of the busiest week",
    ),
    Definition(
        "exposure.commissioning_goal_ratio",
        "Dose of the busiest commissioning week as a part of the design goal.",
        by=part_of_goal,
        takes={
            "dose_usv_per_week": "exposure.commissioning_week_usv_per_week",
            "goal_msv_per_week": "barrier.design_goal_msv_per_week",
        },
        source="own-arithmetic",
        known="derived",
    ),
    Definition(
        "exposure.instantaneous_usv_per_h",
        "Largest dose rate while one beam of the mode is on, patient in place; no occupancy counted.",
        by=highest_reading,
        takes={"readings": "exposure.predicted_readings"},
        source="own-arithmetic",
        known="derived",
        formula="R = dose of the week / MU of the week x MU an hour, of the field that gives more",
    ),
    derived(
        "arrangement.barrier_limits",
        "Doses of every place in the busiest week, any hour, year and commissioning week, and the dose rate.",
        all_limits,
        {
            "places": "each exposure.title",
            "weeks": "each exposure.weekly_dose_usv_per_week?",
            "hours": "each exposure.any_hour_dose_usv?",
            "years": "each exposure.annual_dose_msv_per_year?",
            "rates": "each exposure.instantaneous_usv_per_h?",
            "commissioning": "each exposure.commissioning_week_usv_per_week?",
        },
    ),
)
