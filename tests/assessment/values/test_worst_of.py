"""The worse of two: one rule asks both directions, and the worse one answers."""

import pytest

from readiness.assessment.values import worst_of


@pytest.mark.parametrize(("energy", "outside"), [(2.6, 0.4), (3.0, 0.0), (5.0, 0.0), (7.5, 0.5)])
def test_an_energy_outside_its_range(energy: float, outside: float) -> None:
    """Below 3 MeV and above 7 MeV the distance to the range is told; at its ends it is 0."""
    assert outside == pytest.approx(worst_of.outside_range(energy_mev=energy, lowest_mev=3.0, highest_mev=7.0))


def test_the_worse_direction_answers() -> None:
    """The smaller clearance and the larger deviation count, whichever side they are on."""
    assert -5 == worst_of.smaller(one_cm=20, other_cm=-5) == worst_of.smaller(one_cm=-5, other_cm=20)
    assert 9 == worst_of.larger(along_percent=4, across_percent=9) == worst_of.larger(along_percent=9, across_percent=4)


def test_what_of_the_monitor_departs_is_named_with_its_limit() -> None:
    """At its limit a number still passes; beyond it the words give what was seen and what is allowed."""
    limits = {"most_linearity_percent": 2.0, "most_repeat_percent": 1.0, "most_backup_percent": 2.0}
    good = worst_of.monitor_faults(linearity_percent=2.0, repeat_percent=1.0, backup_percent=2.0, **limits)
    bad = worst_of.monitor_faults(linearity_percent=0.5, repeat_percent=1.8, backup_percent=0.0, **limits)
    assert ("nothing", "repeated exposures by 1.8 % (1 %)") == (good, bad)


@pytest.mark.parametrize(
    ("names_beam", "age", "faults"),
    [(True, 366, "nothing"), (True, 367, "367 days old (366)"), (False, 20, "done for another machine or beam")],
)
def test_why_a_reference_calibration_does_not_stand(names_beam: bool, age: int, faults: str) -> None:
    """A calibration of a year ago still stands; one day more, or another beam, does not."""
    assert faults == worst_of.calibration_faults(names_beam=names_beam, age_days=age, longest_days=366)


def test_too_few_of_a_profession_is_told_with_both_numbers() -> None:
    """One physicist of two is too few; one oncologist of one is enough."""
    asked = {"physicists_persons": 2.0, "oncologists_persons": 1.0}
    assert "physicists (1 of 2)" == worst_of.too_few(physicists=1, oncologists=1, **asked)
    assert "nothing" == worst_of.too_few(physicists=2, oncologists=1, **asked)
