"""Whether an instrument was in calibration on a day: its last calibration, and the earlier ones it lists."""

from collections.abc import Iterable
from datetime import date

from readiness.program.items import Item, Program

Period = tuple[date, date]  # calibrated on, holds until


def complete_periods(pairs: Iterable[tuple[object, object]]) -> tuple[Period, ...]:
    """Return the calibrations of which both days are known, the oldest first."""
    return tuple(sorted(
        (since, until) for since, until in pairs if isinstance(since, date) and isinstance(until, date)
    ))  # fmt: skip


def holds_on(periods: Iterable[Period], day: date) -> bool:
    """Return whether one of the calibrations holds on a day."""
    return any(since <= day <= until for since, until in periods)


def calibration_fault(instrument: Item, program: Program, day: date) -> str:
    """Return why nothing shows that an instrument was in calibration on a day, or "" if it was."""
    earlier = (
        each for each in program.of_kind("earlier_calibration")
        if each.owners.get("instrument") == instrument.id
    )  # fmt: skip
    periods = complete_periods(
        (each.get("calibrated_on"), each.get("calibration_due_on")) for each in (instrument, *earlier)
    )
    name = f"instrument {instrument.id}"
    if not periods:
        return f"when {name} was calibrated, and until when that holds, is not stated"
    if holds_on(periods, day):
        return ""
    ended = [until for _, until in periods if until < day]
    begins = [since for since, _ in periods if since > day]
    if not ended:
        words = "list its earlier calibration if there was one"
        return f"{name} was calibrated on {begins[0]}, after {day}; {words}"
    again = f", calibrated again on {begins[0]}" if begins else ""
    return f"{name} was out of calibration on {day} (due {max(ended)}{again})"
