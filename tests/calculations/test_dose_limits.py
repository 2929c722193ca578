"""Week, hour and year against what is allowed."""

import pytest

from readiness.calculations.dose_limits import (
    annual_dose_msv,
    any_hour_dose,
    goal_margin,
)

HOUR = {
    "before_rate_usv_per_week": 100.0,
    "added_rate_usv_per_week": 80.0,
    "cycles_per_week": 4.0,
    "sessions_per_cycle": 2.0,
    "sessions_in_hour": 2.0,
    "session_room_min": 30.0,
    "busiest_hour_ratio": 1.5,
}


@pytest.mark.parametrize(
    ("dose", "within", "named"),
    [(4.9, True, False), (5.0, True, False), (5.1, True, True), (20.0, True, True), (20.1, False, True)],
)
def test_goal_and_factor_of_four(dose, within, named):
    """The goal itself is within; a margin smaller than a factor of 4 is named."""
    margin = goal_margin(dose_usv_per_week=dose, design_goal_msv_per_week=0.02, survey_margin_ratio=0.25)
    assert (within, named) == (margin.within_goal, margin.margin_is_small)
    assert dose / 20.0 == pytest.approx(margin.share_of_goal)


def test_hour_filled_with_sessions():
    """Two sessions of 10 uSv fill the hour; photon work has no room in it."""
    result = any_hour_dose(**HOUR)
    assert 20.0 == pytest.approx(result.usv_in_any_hour)
    assert 10.0 == pytest.approx(result.per_session_usv)
    assert 1.5 / 40 * 100 == pytest.approx(result.photon_only_usv_in_any_hour)
    assert "sessions" in result.governed_by


def test_hour_left_to_photons():
    """One session of half an hour leaves half an hour of photon work; unknown room time leaves all of it."""
    half = any_hour_dose(**{**HOUR, "sessions_in_hour": 1.0})
    assert 10.0 + 3.75 / 2 == pytest.approx(half.usv_in_any_hour)
    unknown = any_hour_dose(**{**HOUR, "session_room_min": None})
    assert 20.0 + 3.75 == pytest.approx(unknown.usv_in_any_hour)


def test_photon_work_governs_behind_a_busy_wall():
    """Where the photon hour is larger than the sessions, it governs."""
    result = any_hour_dose(**{**HOUR, "before_rate_usv_per_week": 1000.0})
    assert 37.5 == pytest.approx(result.usv_in_any_hour)
    assert "photon work alone" == result.governed_by


def test_year():
    """Fifty peak weeks are an upper bound; known cycles give less."""
    year = {"before_usv_per_week": 2.0, "added_usv_per_week": 8.0, "cycles_per_week": 4.0}
    assert 0.5 == pytest.approx(annual_dose_msv(**year, cycles_per_year=None))
    assert 0.1 + 108 * 2e-3 == pytest.approx(annual_dose_msv(**year, cycles_per_year=108.0))


@pytest.mark.parametrize(
    ("name", "number"),
    [
        ("cycles_per_week", 0.0),
        ("sessions_in_hour", -1.0),
        ("busiest_hour_ratio", 0.5),
        ("before_rate_usv_per_week", -1.0),
    ],
)
def test_impossible_hours(name, number):
    """Numbers outside their meaning are refused."""
    with pytest.raises(ValueError, match="must|cannot"):
        any_hour_dose(**{**HOUR, name: number})


def test_impossible_others():
    """A goal of zero and a year below zero are refused."""
    with pytest.raises(ValueError, match="design goal"):
        goal_margin(dose_usv_per_week=1.0, design_goal_msv_per_week=0.0, survey_margin_ratio=0.25)
    with pytest.raises(ValueError, match="below zero"):
        annual_dose_msv(
            before_usv_per_week=-1.0, added_usv_per_week=0.0, cycles_per_week=1.0, cycles_per_year=None
        )
