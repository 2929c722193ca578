"""Stops, turning, and what stops the beam."""

from datetime import date
from typing import Any

from readiness.assessment.records import PROGRAM, Gone, Ref, Value
from readiness.assessment.values import stand_checks
from readiness.program.items import Program
from tests.assessment.small import graph, item, program

HERE = Ref("arrangement", "here")


def got(of: Program, name: str, ref: Ref = HERE) -> Any:
    """Return a value, or why there is none."""
    here = item("arrangement", "here", {"stand": "s"}, technique="six-position")
    found = graph(of, *stand_checks.DEFINITIONS, made=(here,)).get(name, ref)
    return found.value if isinstance(found, Value) else found


def test_stops_of_the_stand() -> None:
    """Six stops serve six positions, four do not."""
    six = program(item("stand", "s", stops_deg=(0.0, 60.0, 120.0, 180.0, 240.0, 300.0), turns=False))
    four = program(item("stand", "s", stops_deg=(0.0, 90.0, 180.0, 270.0), turns=True))
    assert 0.0 == got(six, "arrangement.stop_error_deg")
    assert 30.0 == got(four, "arrangement.stop_error_deg")
    assert (False, True) == (got(six, "arrangement.platform_turns"), got(four, "arrangement.platform_turns"))


def test_what_stops_the_beam_is_taken_from_patient_safety() -> None:
    """The department's word on it counts for each arrangement; without it nobody knows."""
    stand = item("stand", "s")
    said = program(stand, item("patient_safety", stand_stop_stops_beam=True))
    assert got(said, "arrangement.stand_stop_stops_beam") is True
    unsaid = got(program(stand, item("patient_safety")), "arrangement.stand_stop_stops_beam")
    assert isinstance(unsaid, Gone)
    assert ["patient_safety.stand_stop_stops_beam"] == [cause.what for cause in unsaid.causes]


def test_days_since_drill_and_dry_run() -> None:
    """A drill of the first of November is 30 days old; a dry run planned for tomorrow is not done."""
    of = program(item("training", emergency_drill_on=date(2026, 11, 1), dry_run_done_on=date(2026, 12, 2)))
    assert 30 == got(of, "program.days_since_drill_days", PROGRAM)
    assert -1 == got(of, "program.days_since_dry_run_days", PROGRAM)
