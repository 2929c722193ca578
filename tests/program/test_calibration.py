"""An instrument was in calibration on a day only if one of its calibrations, last or earlier, says so."""

from datetime import date

import pytest

from readiness.program.calibration import calibration_fault
from readiness.program.items import Program
from tests.assessment.small import item, program

DAY = date(2026, 10, 21)


def with_chamber(*earlier: tuple[date, date], **last: date) -> Program:
    """Return a program with one chamber and its calibrations."""
    old = (
        item("earlier_calibration", f"chamber/{number}", {"instrument": "chamber"}, calibrated_on=since, calibration_due_on=until)
        for number, (since, until) in enumerate(earlier)
    )  # fmt: skip
    return program(item("instrument", "chamber", **last), *old)


def fault(of: Program) -> str:
    """Return what speaks against the chamber on the day."""
    chamber = of.find("instrument", "chamber")
    assert chamber is not None
    return calibration_fault(chamber, of, DAY)


@pytest.mark.parametrize("last", [{}, {"calibrated_on": date(2026, 1, 1)}, {"calibration_due_on": date(2027, 1, 1)}])
def test_an_instrument_without_both_days_shows_nothing(last: dict[str, date]) -> None:
    """A missing date is not taken for a calibration that holds."""
    assert fault(with_chamber(**last)) == (
        "when instrument chamber was calibrated, and until when that holds, is not stated"
    )


def test_the_first_and_the_last_day_count() -> None:
    """A calibration holds from its day until the day stated."""
    assert fault(with_chamber(calibrated_on=DAY, calibration_due_on=date(2028, 10, 21))) == ""
    assert fault(with_chamber(calibrated_on=date(2024, 10, 21), calibration_due_on=DAY)) == ""


def test_a_later_calibration_does_not_heal_an_expired_one() -> None:
    """A chamber recalibrated after the measurement was still out of calibration that day."""
    again = with_chamber((date(2024, 9, 16), date(2026, 9, 16)), calibrated_on=date(2026, 12, 20), calibration_due_on=date(2028, 12, 20))
    assert fault(again) == (
        "instrument chamber was out of calibration on 2026-10-21 (due 2026-09-16, calibrated again on 2026-12-20)"
    )
    alone = with_chamber(calibrated_on=date(2026, 12, 20), calibration_due_on=date(2028, 12, 20))
    assert fault(alone) == (
        "instrument chamber was calibrated on 2026-12-20, after 2026-10-21; list its earlier calibration if there was one"
    )


def test_an_earlier_calibration_keeps_what_was_measured_under_it() -> None:
    """Recalibration does not take away a measurement that was made in time."""
    of = with_chamber((date(2024, 11, 1), date(2026, 11, 1)), calibrated_on=date(2026, 12, 20), calibration_due_on=date(2028, 12, 20))
    assert fault(of) == ""
