"""Surveys of a room: in the mode, newer than the last change, meter in calibration; week and hour by them."""

from datetime import date

from readiness.assessment.definition import Definition, derived
from readiness.calculations.dose_limits import any_hour_dose
from readiness.errors import OutsideValidity
from readiness.program.calibration import complete_periods, holds_on
from readiness.quantities import Table
from readiness.units import printed

METER = "survey-meter"
JUDGED = ("place", "already_there_usv_per_week", "added_usv_per_week", "part_of_goal_ratio", "any_hour_usv")
UNKNOWN = (
    "what the work already there gives is not known: state existing_usv_per_week of the barrier in"
    " shielding.yaml, from the room's own survey or report"
)
_SURVEYS = {
    "days": "each survey.done_on?",
    "in_mode": "each survey.in_mode?",
    "as_of_date": "program.as_of_date",
}
_EXISTING = {
    "added_usv_per_week": "exposure.surveyed_added_usv_per_week",
    "existing_usv_per_week": "exposure.already_usv_per_week?",
}


def surveys_in_mode(
    *, days: tuple[date | None, ...], in_mode: tuple[bool | None, ...], as_of_date: date
) -> int:
    """Return how many surveys were done in the mode; one of a day to come is none."""
    found = zip(days, in_mode, strict=True)
    return sum(1 for day, mode in found if mode is True and (day is None or day <= as_of_date))


def latest_in_mode(
    *, days: tuple[date | None, ...], in_mode: tuple[bool | None, ...], as_of_date: date
) -> date:
    """Return the day of the latest survey in the mode."""
    dated = [day for day, mode in zip(days, in_mode, strict=True) if mode is True and day is not None]
    found = [day for day in dated if day <= as_of_date]
    if not found:
        raise OutsideValidity(
            "no survey in the mode has been done; survey the room in the mode at both tilts"
        )
    return max(found)


def is_newer(
    *, surveyed: date, room_changed: date | None, workload_changed: date | None,
    machines_changed: tuple[date | None, ...],
) -> bool:  # fmt: skip
    """Return whether a survey is not older than the last change of workload, room or machine."""
    changes = [room_changed, workload_changed, *machines_changed]
    return all(change is None or surveyed >= change for change in changes)


def meter_of_survey(
    *, instrument: str, done: date, meters: tuple[str, ...], types: tuple[str | None, ...],
    periods: tuple[Table, ...],
) -> bool:  # fmt: skip
    """Return whether the survey was done with a survey meter that was in calibration that day."""
    if instrument not in meters:
        raise OutsideValidity(f"instrument {instrument} is not in the list of instruments")
    if types[meters.index(instrument)] not in (METER, None):
        return False
    known = complete_periods(periods[meters.index(instrument)].rows)  # type: ignore[arg-type]
    if not known:
        raise OutsideValidity(f"the calibration dates of instrument {instrument} are not stated")
    return holds_on(known, done)


def part_of_goal(
    *, added_usv_per_week: float, existing_usv_per_week: float | None, goal_msv_per_week: float
) -> float:
    """Return existing dose and surveyed addition as a part of the goal; the addition alone if too large."""
    ratio = (added_usv_per_week + (existing_usv_per_week or 0.0)) / (1000 * goal_msv_per_week)
    if existing_usv_per_week is None and ratio <= 1.0:
        raise OutsideValidity(
            f"the program alone adds {printed(ratio)} times the goal by the survey; {UNKNOWN}"
        )
    return ratio


def hour(
    *, added_usv_per_week: float, existing_usv_per_week: float | None,
    occupancy: float, cycles_per_week: float, sessions_per_cycle: int, sessions_in_hour: int,
    busiest_photon_hour: float, limit_usv: float,
) -> float:  # fmt: skip
    """Return the largest dose in any 60 consecutive minutes by the survey, no occupancy counted."""
    dose = any_hour_dose(
        before_rate_usv_per_week=(existing_usv_per_week or 0.0) / occupancy,
        added_rate_usv_per_week=added_usv_per_week / occupancy, cycles_per_week=cycles_per_week,
        sessions_per_cycle=sessions_per_cycle, sessions_in_hour=sessions_in_hour, session_room_min=None,
        busiest_hour_ratio=busiest_photon_hour,
    ).usv_in_any_hour  # fmt: skip
    if existing_usv_per_week is None and dose <= limit_usv:
        raise OutsideValidity(
            f"the program alone gives {printed(dose)} µSv in an hour by the survey; {UNKNOWN}"
        )
    return dose


def already(*, before_usv_per_week: float | None, existing_usv_per_week: float | None) -> float:
    """Return the weekly dose of the work already there: as calculated, else as stated."""
    known = before_usv_per_week if before_usv_per_week is not None else existing_usv_per_week
    if known is None:
        raise OutsideValidity(UNKNOWN)
    return known


def judged(
    *, places: tuple[str, ...], already: tuple[float | None, ...], added: tuple[float | None, ...],
    parts: tuple[float | None, ...], hours: tuple[float | None, ...],
) -> Table:  # fmt: skip
    """Return what the survey gives of each place; blank where something is missing."""
    rows = [row for row in zip(places, already, added, parts, hours, strict=True) if row[2] is not None]
    if not rows:
        raise OutsideValidity("no survey in the mode, with a scattering body at the plane, is at hand")
    return Table(JUDGED, tuple(rows))


def count(*, barriers: tuple[str, ...]) -> int:
    """Return how many barriers are listed."""
    return len(barriers)


DEFINITIONS: tuple[Definition, ...] = (
    derived("room.barrier_count", "Barriers listed for the room.", count, {"barriers": "each barrier.id"}),
    derived(
        "room.surveys_in_mode",
        "Surveys of the room in the mode.",
        surveys_in_mode,
        _SURVEYS,
    ),
    derived(
        "room.surveyed_in_mode_on",
        "Day of the latest survey in the mode.",
        latest_in_mode,
        _SURVEYS,
    ),
    derived(
        "room.survey_is_current",
        "The survey in the mode is not older than the last change of workload, room or machine.",
        is_newer,
        {
            "surveyed": "room.surveyed_in_mode_on",
            "room_changed": "room.changed_on?",
            "workload_changed": "protection.workload_changed_on?",
            "machines_changed": "each machine.changed_on?",
        },
    ),
    derived(
        "exposure.already_usv_per_week",
        "Dose of a week beyond the barrier from the work already there: calculated, else as stated.",
        already,
        {
            "before_usv_per_week": "exposure.before_usv_per_week?",
            "existing_usv_per_week": "barrier.existing_usv_per_week?",
        },
    ),
    derived(
        "exposure.surveyed_goal_ratio",
        "Existing dose and surveyed addition as a part of the weekly goal.",
        part_of_goal,
        {**_EXISTING, "goal_msv_per_week": "barrier.design_goal_msv_per_week"},
    ),
    Definition(
        "exposure.surveyed_hour_usv",
        "Largest dose in any 60 consecutive minutes by the survey, existing work beside it; no occupancy.",
        by=hour,
        takes={
            **_EXISTING,
            "occupancy": "barrier.occupancy",
            "cycles_per_week": "program.busiest_week_cycles_per_week",
            "sessions_per_cycle": "program.fewest_sessions_per_cycle",
            "sessions_in_hour": "program.sessions_in_busiest_hour",
            "busiest_photon_hour": "protection.busiest_photon_hour",
            "limit_usv": "criterion.any_hour_limit_usv",
        },
        source="ncrp-151",
        known="memory",
        formula="R_h = larger of (M/40) R_w and n H_session + (M/40) R_w; without occupancy",
    ),
    derived(
        "arrangement.survey_judged",
        "What the survey gives in the busiest week and in any 60 minutes, place by place.",
        judged,
        {
            "places": "each exposure.title",
            "already": "each exposure.already_usv_per_week?",
            "added": "each exposure.surveyed_added_usv_per_week?",
            "parts": "each exposure.surveyed_goal_ratio?",
            "hours": "each exposure.surveyed_hour_usv?",
        },
    ),
    derived(
        "survey.meter_was_in_calibration",
        "It was done with a survey meter, in calibration on that day.",
        meter_of_survey,
        {
            "instrument": "survey.instrument",
            "done": "survey.done_on",
            "meters": "each instrument.id",
            "types": "each instrument.type?",
            "periods": "each instrument.calibration_periods",
        },
    ),
)
