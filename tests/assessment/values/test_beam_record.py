"""The set-up as built, the monitor in the mode, a phantom cycle, report and review."""

from datetime import date
from typing import Any

import pytest

from readiness.program.items import Item
from tests.assessment.small import item
from tests.assessment.values.beam_program import department, finding, measured, value, words

BUILT = ("plane_distance_cm", "degrader_gap_cm", "tilt_deg", "degrader_thickness_mm", "shield_thickness_mm")
SITES = ("site", "detector", "dose_cgy")
MODE = ("mu", "backup_mu", "dose_cgy")


def as_built(*rows: tuple[float | None, float | None, float | None, float | None]) -> Item:
    """Return an as-built record of distance, gap, tilt and thickness."""
    return measured("as-built", BUILT, [(*row, None) for row in rows])


def phantom(*readings: tuple[str, str, float]) -> Item:
    """Return a phantom cycle of 2 Gy."""
    return measured("end-to-end", SITES, readings, prescribed_per_cycle_gy=2.0)


def mode_check(*readings: tuple[float, float | None, float], **header: Any) -> Item:
    """Return a check of the mode: MU, MU of the second channel, dose."""
    return measured("mode-check", MODE, readings, **header)


def paper(kind: str, signed: date | None, *covers: str, **fields: Any) -> Item:
    """Return a registered paper."""
    dated = {} if signed is None else {"approved_on": signed}
    return item("evidence", kind, type=kind, covers=covers, **dated, **fields)


def test_a_set_up_found_as_chosen_agrees() -> None:
    """Distance within 1 cm, gap within 1 cm, tilt within 0.2 degrees, thickness within 0.2 mm."""
    of = department(as_built((400.8, 45.5, 16.1, 6.1)))
    assert value(of, "arrangement.as_built_agrees").value is True
    assert "met" == finding(of, "as-built-record").outcome


@pytest.mark.parametrize(
    ("row", "names"),
    [
        ((402.0, 45.0, 16.0, 6.0), ("plane distance",)),
        ((400.0, 45.0, 16.5, 6.0), ("tilt",)),
        ((400.0, 47.0, 16.0, 6.5), ("degrader gap", "degrader thickness")),
    ],
)
def test_what_was_found_otherwise_is_named(row: tuple[float, ...], names: tuple[str, ...]) -> None:
    """Each number beyond its tolerance is named, and the rule is not met."""
    of = department(as_built(row))  # type: ignore[arg-type]
    assert names == value(of, "arrangement.as_built_differing").value
    assert "not met" == finding(of, "as-built-record").outcome


def test_a_number_left_out_of_the_record_is_named() -> None:
    """A record without the thickness does not agree."""
    of = department(as_built((400.0, 45.0, 16.0, None)))
    assert ("degrader thickness",) == value(of, "arrangement.as_built_not_recorded").value
    assert "not met" == finding(of, "as-built-record").outcome


def test_choices_without_a_record_are_not_as_built() -> None:
    """Without a record the rule waits for one."""
    assert "Measure distance, gap, tilt and degrader as built" in words(department(), "arrangement.as_built_agrees")
    assert "not assessed" == finding(department(), "as-built-record").outcome


def test_a_phantom_cycle_read_with_two_detectors() -> None:
    """204 and 200 cGy of 200 at the umbilicus are 101 % on average, 1.98 % apart."""
    of = department(phantom(("umbilicus", "film", 204.0), ("umbilicus", "osld", 200.0)))
    assert pytest.approx(1.0) == value(of, "arrangement.phantom_deviation_percent").value
    assert pytest.approx(1.9802, abs=1e-4) == value(of, "arrangement.phantom_detector_difference_percent").value
    for rule in ("phantom-cycle", "phantom-detectors-agree"):
        assert "met" == finding(of, rule).outcome


def test_a_phantom_cycle_with_one_detector_is_half_of_it() -> None:
    """One type of detector is not two, and nothing shows whether it agrees with another."""
    of = department(phantom(("umbilicus", "film", 180.0)))
    assert 1 == value(of, "arrangement.phantom_detector_types").value
    assert "not met" == finding(of, "phantom-cycle").outcome
    assert "not assessed" == finding(of, "phantom-detectors-agree").outcome


def test_the_mode_is_checked_with_its_own_monitor_units() -> None:
    """Dose per MU of 0.0101 at 10, 0.0100 at 1000 and 2000 MU departs by 1 %; the channels by 0.5 %."""
    of = department(mode_check((10.0, 10.0, 0.101), (1000.0, 1005.0, 10.0), (2000.0, 2010.0, 20.0)))
    assert pytest.approx(1.0) == value(of, "beam.mode_linearity_percent").value
    assert pytest.approx(0.5) == value(of, "beam.mode_backup_percent").value
    assert "met" == finding(of, "mode-checked-at-largest-mu").outcome
    assert "not assessed" == finding(of, "monitor-in-the-mode").outcome


def test_a_channel_that_departs_is_named() -> None:
    """A repeat that scatters little does not hide a second channel that is 4 % off."""
    readings = ((10.0, 10.0, 0.1), (1000.0, 1040.0, 10.0), (1000.0, 1040.0, 10.0), (2000.0, 2080.0, 20.0))
    found = finding(department(mode_check(*readings)), "monitor-in-the-mode")
    assert ("not met", "both monitor channels by 4 % (2 %)") == (found.outcome, found.observed)


def test_a_check_in_ordinary_mode_says_nothing_of_the_high_rate_mode() -> None:
    """The mode of the check must be that of the beam."""
    readings = ((10.0, 10.0, 0.1), (1000.0, 1000.0, 10.0), (2000.0, 2000.0, 20.0))
    assert "not in the high-rate mode" in words(
        department(mode_check(*readings, mode="ordinary")), "beam.mode_linearity_percent"
    )


def test_a_check_with_few_monitor_units_does_not_reach_the_mode() -> None:
    """A check with up to 500 MU says nothing of 2000."""
    of = department(mode_check((10.0, None, 0.1), (100.0, None, 1.0), (500.0, None, 5.0)))
    assert "not met" == finding(of, "mode-checked-at-largest-mu").outcome


def test_a_report_counts_when_signed_and_about_the_arrangement() -> None:
    """An unsigned report, one about another room, and one signed after today do not count."""
    signed = date(2026, 11, 20)
    assert "met" == finding(department(paper("commissioning-report", signed, "linac")), "commissioning-report").outcome
    for other in (
        paper("commissioning-report", None, "linac"),
        paper("commissioning-report", signed, "elsewhere"),
        paper("commissioning-report", date(2026, 12, 20), "linac"),
        paper("commissioning-report", signed, "linac", expires_on=date(2026, 11, 30)),
    ):
        assert "not met" == finding(department(other), "commissioning-report").outcome


def test_a_review_counts_when_it_follows_the_report() -> None:
    """A review signed before the report reviewed something else."""
    report = paper("commissioning-report", date(2026, 11, 20), "vault")
    later = paper("second-physicist-review", date(2026, 11, 25), "vault")
    earlier = paper("second-physicist-review", date(2026, 11, 10), "vault")
    assert "met" == finding(department(report, later), "commissioning-reviewed").outcome
    assert "not met" == finding(department(report, earlier), "commissioning-reviewed").outcome
    assert "not met" == finding(department(later), "commissioning-reviewed").outcome


def test_an_unknown_register_leaves_report_and_review_open() -> None:
    """Without a register of evidence nobody knows whether there is a report."""
    assert "not assessed" == finding(department(), "commissioning-report").outcome


def test_a_cracked_degrader_is_not_used() -> None:
    """A scratched or cracked sheet and one that is not there are named."""
    assert "not met" == finding(department(thin={"condition": "cracked"}), "degrader-sound").outcome
    assert "met" == finding(department(thin={"condition": "sound"}), "degrader-sound").outcome
    assert "not met" == finding(department(thin={"owned": False}), "degrader-owned").outcome
    looked = department(thin={"inspected_on": date(2025, 10, 1)})
    assert 426 == value(looked, "degrader.days_since_inspection_days").value
