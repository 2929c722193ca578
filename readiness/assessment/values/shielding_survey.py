"""Surveys of a room: done in the mode, newer than the last change, with a meter in calibration."""

from datetime import date

from readiness.assessment.definition import Definition, derived
from readiness.errors import OutsideValidity
from readiness.program.calibration import complete_periods, holds_on
from readiness.quantities import Table


def surveys_in_mode(*, surveys: Table) -> int:
    """Return how many surveys were done in the mode."""
    return sum(1 for survey in surveys.records() if survey["in_mode"] is True)


def latest_in_mode(*, days: tuple[date | None, ...], in_mode: tuple[bool | None, ...]) -> date:
    """Return the day of the latest survey in the mode."""
    found = [day for day, mode in zip(days, in_mode, strict=True) if mode is True and day is not None]
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
    *, instrument: str, done: date, meters: tuple[str, ...], periods: tuple[Table, ...]
) -> bool:  # fmt: skip
    """Return whether the survey's meter was in calibration that day."""
    if instrument not in meters:
        raise OutsideValidity(f"instrument {instrument} is not in the list of instruments")
    known = complete_periods(periods[meters.index(instrument)].rows)  # type: ignore[arg-type]
    if not known:
        raise OutsideValidity(f"the calibration dates of instrument {instrument} are not stated")
    return holds_on(known, done)


def count(*, barriers: tuple[str, ...]) -> int:
    """Return how many barriers are listed."""
    return len(barriers)


DEFINITIONS: tuple[Definition, ...] = (
    derived("room.barrier_count", "Barriers listed for the room.", count, {"barriers": "each barrier.id"}),
    derived(
        "room.surveys_in_mode",
        "Surveys of the room in the mode.",
        surveys_in_mode,
        {"surveys": "rows survey: in_mode"},
    ),
    derived(
        "room.surveyed_in_mode_on",
        "Day of the latest survey in the mode.",
        latest_in_mode,
        {"days": "each survey.done_on?", "in_mode": "each survey.in_mode?"},
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
        "survey.meter_was_in_calibration",
        "The survey meter was in calibration on that day.",
        meter_of_survey,
        {
            "instrument": "survey.instrument",
            "done": "survey.done_on",
            "meters": "each instrument.id",
            "periods": "each instrument.calibration_periods",
        },
    ),
)
