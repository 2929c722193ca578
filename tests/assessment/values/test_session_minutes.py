"""Minutes of a session, standing and lying."""

from typing import Any

import pytest

from readiness.assessment.records import Gone
from tests.assessment.values.running import department, dose_rates, got, value


def test_a_later_session_closes_by_hand() -> None:
    """30 min around the beams and three positions of 2 + 2 + 1 + 2 min are 51 min; detectors add 60."""
    of = department()
    assert pytest.approx(51.0) == value(of, "later_session_min")
    assert pytest.approx(111.0) == value(of, "first_session_min")


def test_the_patient_stands_for_one_position_at_a_time() -> None:
    """A position takes 7 min, one more than the patient is asked to stand, and three take 21."""
    of = department()
    assert pytest.approx(7.0) == value(of, "longest_position_min")
    assert pytest.approx(-1.0) == value(of, "standing_margin_min")
    assert pytest.approx(21.0) == value(of, "standing_min")


def test_a_faster_mode_shortens_only_the_beams() -> None:
    """At twice the rate the 12 min of beam are 6."""
    assert pytest.approx(12.0) == value(department(), "session_beam_min")
    fast = department(beam={"rate_mu_per_min": 2000.0})
    assert pytest.approx(6.0) == value(fast, "session_beam_min")
    assert pytest.approx(45.0) == value(fast, "later_session_min")


def test_the_timeline_ends_with_the_session() -> None:
    """Steps follow each other without a gap, and detectors are placed in the first session only."""
    first, later = (list(value(department(), name).records()) for name in ("first_session", "later_session"))
    assert pytest.approx(111.0) == first[-1]["end_min"]
    assert all(one["end_min"] == two["start_min"] for one, two in zip(first, first[1:], strict=False))
    assert "place skin detectors" in {row["step"] for row in first} - {row["step"] for row in later}


def test_a_turning_platform_has_one_position_and_turns() -> None:
    """Both beams of 6 min follow each other in one position, with 18 turns of 20 s during each."""
    of = department()
    assert pytest.approx(15.0) == value(of, "longest_position_min", "rotating-platform")
    assert pytest.approx(18.0) == value(of, "turns_per_beam_ratio", "rotating-platform")
    assert isinstance(got(of, "turns_per_beam_ratio"), Gone)


def test_minutes_rest_on_what_the_output_rests_on() -> None:
    """A stated output gives minutes as stated as itself."""
    assert "stated" == got(department(), "later_session_min").basis


@pytest.mark.parametrize(
    ("changes", "root"),
    [
        ({"steps": {"turning_min": None}}, "session_time.turning_min"),
        ({"beam": {"rate_mu_per_min": None}}, "beam.rate_mu_per_min"),
    ],
)
def test_a_missing_step_is_named_and_takes_no_less_time(changes: dict[str, Any], root: str) -> None:
    """A step without minutes leaves the session unknown."""
    found = got(department(**changes), "later_session_min")
    assert isinstance(found, Gone)
    assert [root] == [cause.what for cause in found.causes]


def test_a_pass_of_the_couch_closes_by_hand() -> None:
    """A triangle of 100 cm and 300 cGy/min at 2 cm/s gives 125 cGy a pass, 250 in two, in 50 s each."""
    of = department(dose_rates())
    assert pytest.approx(250.0) == value(of, "incidence_dose_cgy", "moving-couch")
    assert pytest.approx(50.0) == value(of, "pass_time_s", "moving-couch")
    assert "measured" == got(of, "incidence_dose_cgy", "moving-couch").basis


def test_a_pass_is_a_part_of_what_the_mode_allows() -> None:
    """50 s at 1,000 MU/min are a third of 2,500 MU."""
    of = department(dose_rates())
    assert pytest.approx(1000 * 50 / 60 / 2500, rel=1e-5) == value(of, "pass_limit_ratio", "moving-couch")


def test_a_lying_session_holds_half_of_the_incidences() -> None:
    """Two of four incidences of 2 + 1.667 min and 30 min around them are 37.3 min."""
    of = department(dose_rates())
    assert pytest.approx(30 + 2 * (2 + 100 / 60), rel=1e-5) == value(
        of, "lying_later_session_min", "moving-couch"
    )


def test_a_couch_measured_at_another_rate_does_not_count() -> None:
    """The rate of the mode and of the measurement agree, or neither dose nor minutes are known."""
    found = got(department(dose_rates(rate_mu_per_min=600.0)), "incidence_dose_cgy", "moving-couch")
    assert isinstance(found, Gone)
    assert any("600 MU/min" in cause.words for cause in found.causes)


def test_a_couch_is_not_measured_for_a_standing_patient() -> None:
    """Readings along a couch stand for no standing arrangement."""
    assert isinstance(got(department(dose_rates()), "incidence_dose_cgy"), Gone)
