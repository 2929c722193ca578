"""Instruments in calibration and phantoms at hand."""

from datetime import date
from typing import Any

import pytest

from readiness.assessment.records import PROGRAM, Gone, Ref, Value
from readiness.assessment.values import tools
from readiness.errors import OutsideValidity
from readiness.program.items import Item, Program
from tests.assessment.small import graph, item, program

HELD = {"calibrated_on": date(2026, 2, 10), "calibration_due_on": date(2028, 2, 10)}
ONE = Ref("instrument", "one")


def tool(type_: str, name: str = "one", **fields: Any) -> Item:
    """Return an instrument of a type."""
    return item("instrument", name, type=type_, **fields)


def got(of: Program, name: str, ref: Ref = PROGRAM) -> Any:
    """Return a value, or why there is none."""
    found = graph(of, *tools.DEFINITIONS).get(name, ref)
    return found.value if isinstance(found, Value) else found


def test_first_and_last_day_of_a_calibration() -> None:
    """A calibration holds from its own day to its last day, and not before or after."""
    for due, holds in ((date(2026, 12, 1), True), (date(2026, 11, 30), False)):
        of = program(tool("electrometer", calibrated_on=date(2026, 2, 10), calibration_due_on=due))
        assert holds is got(of, "instrument.calibration_holds", ONE)
    early = program(tool("electrometer", calibrated_on=date(2026, 12, 2), calibration_due_on=date(2028, 1, 1)))
    assert got(early, "instrument.calibration_holds", ONE) is False


def test_how_long_a_calibration_was_given_for() -> None:
    """Two years from 2026-02-10 are 730 days."""
    assert 730 == got(program(tool("electrometer", **HELD)), "instrument.calibration_interval_days", ONE)


def test_a_calibration_that_runs_out_soon() -> None:
    """60 days before its last day it is due soon, after it no more."""
    for due, soon in ((date(2027, 1, 30), True), (date(2027, 1, 31), False), (date(2026, 11, 30), False)):
        of = program(tool("electrometer", calibrated_on=date(2026, 2, 1), calibration_due_on=due))
        assert soon is got(of, "instrument.calibration_due_soon", ONE)


def test_kinds_without_calibration() -> None:
    """An expired chamber does not count, a barometer with thermometer counts for both."""
    of = program(
        tool("plane-parallel-chamber", "old", calibrated_on=date(2024, 9, 16), calibration_due_on=date(2026, 9, 16)),
        tool("barometer-with-thermometer", "air", **HELD),
        tool("survey-meter", "meter"),
    )
    said = got(of, "program.instruments_without_calibration")
    assert "ionisation chamber, electrometer, survey meter" == said
    assert 0 == got(of, "program.chambers_in_calibration")


def test_nothing_is_missing_where_each_kind_holds() -> None:
    """One of each kind in calibration leaves nothing to ask for."""
    kinds = ("cylindrical-chamber", "electrometer", "survey-meter", "barometer", "thermometer")
    of = program(*(tool(kind, kind, **HELD) for kind in kinds))
    assert "nothing" == got(of, "program.instruments_without_calibration")
    assert 1 == got(of, "program.chambers_in_calibration")


def test_an_empty_list_lacks_everything_and_an_unknown_one_is_asked_for() -> None:
    """No instrument at all is not the same as a list that nobody wrote."""
    none = program(lists=("instrument",))
    assert "distance meter, inclinometer, thickness gauge" == got(none, "program.as_built_instruments_missing")
    assert isinstance(got(program(), "program.as_built_instruments_missing"), Gone)


def test_kinds_of_detector_on_the_skin() -> None:
    """Two lots of film are one kind; film and luminescent detectors are two."""
    assert 1 == got(program(tool("film", "a"), tool("film", "b")), "program.in_vivo_detector_types")
    assert 2 == got(program(tool("film", "a"), tool("osld", "b")), "program.in_vivo_detector_types")


def test_phantoms_at_hand() -> None:
    """A phantom counts if the department has the use of it."""
    of = program(
        item("phantom", "a", type="cylinder", owned=True, diameter_cm=26.0),
        item("phantom", "b", type="cylinder", owned=False),
    )
    assert "an anthropomorphic phantom" == got(of, "program.phantoms_missing")
    assert 1 == got(of, "program.cylinders")
    assert 0 == got(of, "program.anthropomorphic_phantoms")
    assert 4.0 == got(of, "phantom.off_usual_diameter_cm", Ref("phantom", "a"))


def test_a_thin_cylinder_is_not_one_of_a_trunk() -> None:
    """A cylinder of 20 cm and a borrowed body are a body and no cylinder of about 30 cm."""
    of = program(
        item("phantom", "a", type="cylinder", owned=True, diameter_cm=20.0),
        item("phantom", "b", type="anthropomorphic", owned=True),
    )
    assert "a cylinder of about 30 cm" == got(of, "program.phantoms_missing")


@pytest.mark.parametrize(
    ("kind", "purpose", "days"),
    [("electrometer", "reference", 731), ("electrometer", "field", None), ("survey-meter", None, 366), ("film", None, None)],
)
def test_how_long_a_calibration_may_be_given(kind: str, purpose: str | None, days: int | None) -> None:
    """Reference instruments two years, meters for radiation and air one; others have no interval here."""
    fields = {"type": kind} if purpose is None else {"type": kind, "purpose": purpose}
    of, ref = program(item("instrument", "x", **fields)), Ref("instrument", "x")
    assert got(of, "instrument.has_calibration_interval", ref) is (days is not None)
    found = got(of, "instrument.longest_interval_days", ref)
    assert days == found if days is not None else isinstance(found, Gone)


def test_what_of_a_detector_is_not_characterised() -> None:
    """A luminescent detector needs its own factor, film a fixed delay, a diode neither."""
    good: dict[str, Any] = {"response_checked": True, "individual_factors": None, "readout_delay_h": None}
    assert "nothing" == tools.not_characterised(type_word="diode", **good)
    dated = {**good, "readout_delay_h": 24.0}
    assert "nothing" == tools.not_characterised(type_word="film", **dated)
    assert "a factor for each detector" == tools.not_characterised(type_word="osld", **{**dated, "individual_factors": False})
    for kind, words in (("film", "read-out"), ("tld", "own factor")):
        with pytest.raises(OutsideValidity, match=words):
            tools.not_characterised(type_word=kind, **good)
