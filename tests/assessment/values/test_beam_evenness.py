"""Uniformity and tilt: measured where a measurement agrees, else predicted, and which one is always said."""

import pytest

from tests.assessment.values.beam_program import (
    HEIGHTS,
    across,
    bowl,
    department,
    finding,
    sweep,
    value,
    vertical,
    words,
)

EVEN = {float(place): 1 - abs(place) / 5000 for place in range(-50, 51, 10)}  # no detector reads the same everywhere


def test_without_a_measurement_uniformity_is_predicted() -> None:
    """The model answers, and its answer is called predicted."""
    found = value(department(beam={"foil_spread": 0.2}), "arrangement.vertical_half_range_percent")
    assert "predicted" == found.basis
    assert 0 < found.value < 8


def test_an_assumed_foil_spread_makes_the_prediction_assumed() -> None:
    """A foil spread that nobody stated or measured weakens what follows from it."""
    assert "assumed" == value(department(), "arrangement.vertical_half_range_percent").basis


def test_a_dual_profile_replaces_the_prediction() -> None:
    """
    A profile that rises by 10 % at 80 cm has a deviation of 10 % and a half-range of 4.76 %.

    half-range = (1.1 - 1)/(1.1 + 1) = 0.047619
    """
    of = department(vertical(bowl(0.10)))
    found = value(of, "arrangement.vertical_half_range_percent")
    assert ("measured", pytest.approx(4.7619, abs=1e-4)) == (found.basis, found.value)
    assert found.instead_of is not None
    assert pytest.approx(10.0) == value(of, "arrangement.vertical_deviation_percent").value


def test_the_stricter_metric_judges_unless_another_is_recorded() -> None:
    """A profile with a deviation of 10 % and a half-range of 4.8 % fails by the one and passes by the other."""
    profile = vertical(bowl(0.10))
    assert "not met" == finding(department(profile), "vertical-uniformity").outcome
    recorded = department(profile, program={"uniformity_metric": "half-range"})
    assert "met" == finding(recorded, "vertical-uniformity").outcome


def test_a_profile_across_says_nothing_of_the_height() -> None:
    """A horizontal profile is evaluated across only."""
    of = department(across({**EVEN, 30.0: 0.9}))
    assert "measured" == value(of, "arrangement.horizontal_half_range_percent").basis
    assert "measured" != value(of, "arrangement.vertical_half_range_percent").basis


def test_a_profile_that_does_not_reach_the_limits_is_not_used() -> None:
    """A profile to 60 cm cannot be judged over 80 cm, and the cause says so."""
    short = vertical({height: 1.0 for height in HEIGHTS if abs(height) <= 60})
    of = department(short, beam={"rp_cm": None})
    assert "does not reach the limits" in words(of, "arrangement.vertical_half_range_percent")


def test_a_sweep_gives_the_profile_at_the_chosen_tilt() -> None:
    """Where no dual profile was measured, the sweep's profile at the chosen tilt is the measured one."""
    of = department(sweep({14.0: bowl(-0.2), 16.0: bowl(0.05), 18.0: bowl(0.3)}))
    found = value(of, "arrangement.vertical_deviation_percent")
    assert ("measured", pytest.approx(5.0)) == (found.basis, found.value)


def test_a_sweep_without_the_chosen_tilt_is_not_interpolated() -> None:
    """A profile between two measured tilts is not called measured."""
    of = department(sweep({14.0: bowl(-0.2), 18.0: bowl(0.3)}))
    assert "measured" != value(of, "arrangement.vertical_deviation_percent").basis


def test_a_dual_profile_comes_before_a_sweep() -> None:
    """The profile of the final set-up stands, not the one of the search for the tilt."""
    of = department(vertical(bowl(0.02)), sweep({14.0: bowl(-0.2), 16.0: bowl(0.05), 18.0: bowl(0.3)}))
    assert pytest.approx(2.0) == value(of, "arrangement.vertical_deviation_percent").value


def test_the_best_tilt_is_found_between_the_measured_ones() -> None:
    """
    Between a profile that falls by 10 % and one that rises by 10 % lies an even one.

    The sweep also gives the uncertainty of the best tilt.
    """
    found = value(department(sweep({14.0: bowl(-0.1), 16.0: bowl(0.0), 18.0: bowl(0.1)})), "arrangement.best_tilt_deg")
    assert ("measured", pytest.approx(16.0, abs=0.1)) == (found.basis, found.value)
    assert found.sd is not None


def test_a_rule_asks_for_the_measured_best_tilt() -> None:
    """A predicted best tilt does not stand for a measured one; a sweep does."""
    predicted = finding(department(), "tilt-found-by-measurement")
    assert ("not assessed", "met") == (predicted.outcome, predicted.expected)
    swept = department(sweep({14.0: bowl(-0.1), 16.0: bowl(0.0), 18.0: bowl(0.1)}))
    assert "met" == finding(swept, "tilt-found-by-measurement").outcome


def test_a_measurement_behind_another_degrader_is_named_not_used() -> None:
    """A profile behind the thick sheet says nothing of the thin one, and is named as the near miss."""
    of = department(vertical(bowl(0.02), degrader="thick"))
    assert "measured" == value(of, "arrangement.vertical_deviation_percent", "thick").basis
    said = finding(of, "vertical-uniformity", "thin")
    assert "not assessed" == said.outcome
    assert any("measured with degrader thick, the plan is thin" in cause.words for cause in said.causes)


def test_a_profile_in_a_phantom_is_none_in_air() -> None:
    """The rule on uniformity in air takes only a profile measured in air."""
    both = department(across(EVEN), vertical(bowl(0.02)))
    assert "met" == finding(both, "uniformity-in-air").outcome
    in_phantom = department(across(EVEN, medium="phantom"), vertical(bowl(0.02)))
    assert "not assessed" == finding(in_phantom, "uniformity-in-air").outcome


def test_the_length_measured_is_that_covered_on_both_sides() -> None:
    """A profile from -110 to 90 cm was measured to 90 cm either way, short of the tallest patient's soles."""
    of = department(vertical({height: 1.0 for height in HEIGHTS if height <= 90}))
    assert 90 == value(of, "arrangement.measured_half_length_cm").value
    assert 100 == value(of, "arrangement.needed_half_length_cm").value
    assert "not met" == finding(of, "profile-reaches-tallest-patient").outcome
    assert "met" == finding(department(vertical(bowl(0.0))), "profile-reaches-tallest-patient").outcome
