"""Stand, platform and couch: stops, turning, checks, and the drill on them."""

from collections.abc import Sequence
from datetime import date

from readiness.assessment.definition import Definition, derived
from readiness.calculations.indexed_stops import stop_error_deg
from readiness.errors import OutsideValidity

POSITIONS = 6


def six_stop_error(*, stops_deg: Sequence[float]) -> float:
    """Return how far one of the six positions lies from the nearest stop of the stand."""
    return stop_error_deg(stops_deg=stops_deg, positions=POSITIONS)


def as_stated(*, turns: bool) -> bool:
    """Return what is stated of the stand."""
    return turns


def stops_beam(*, stated: Sequence[bool]) -> bool:
    """Return whether the beam goes off when stand or couch stops."""
    return bool(stated) and all(stated)


def days_since_latest(*, done_on: Sequence[date], as_of_date: date) -> int:
    """Return the days since something was last done."""
    if not done_on:
        raise OutsideValidity("it has never been done")
    return (as_of_date - max(done_on)).days


_TODAY = {"as_of_date": "program.as_of_date"}

DEFINITIONS: tuple[Definition, ...] = (
    derived(
        "arrangement.stop_error_deg",
        "How far one of the six positions lies from the nearest stop of the stand.",
        six_stop_error,
        {"stops_deg": "stand.stops_deg"},
    ),
    derived(
        "arrangement.platform_turns",
        "The platform turns continuously during the beam.",
        as_stated,
        {"turns": "stand.turns"},
    ),
    derived(
        "arrangement.stand_stop_stops_beam",
        "The beam goes off when platform or couch stops or moves unexpectedly.",
        stops_beam,
        {"stated": "each patient_safety.stand_stop_stops_beam"},
    ),
    derived(
        "program.days_since_drill_days",
        "Days since the last emergency drill.",
        days_since_latest,
        {"done_on": "each training.emergency_drill_on", **_TODAY},
    ),
    derived(
        "program.days_since_dry_run_days",
        "Days since the last dry run with the whole team.",
        days_since_latest,
        {"done_on": "each training.dry_run_done_on", **_TODAY},
    ),
)
