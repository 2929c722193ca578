"""Patients at once, sessions and the peak."""

import math

import pytest

from readiness.calculations.patient_flow import (
    AS_PRESCRIBED,
    COURSES,
    WEEKS_PER_YEAR,
    course_mix,
    first_cycle_sessions_per_year,
    mean_sessions_per_week,
    patient_weeks_per_year,
    patients_under_treatment,
    peak_patients,
    peak_sessions_per_week,
    sessions_per_year,
    total_patients_per_year,
    treatment_days_per_year,
)
from readiness.quantities import Table

MIX = Table.of(COURSES, [("long", 5, 36, 2, 4, 10), ("short", 3, 12, 2, 4, 3)])


def mix(**change: object) -> Table:
    """Return a mix of one course with one number changed."""
    row = dict(zip(COURSES, ("long", 5, 36, 2, 4, 10), strict=True)) | change
    return Table.of(COURSES, [tuple(row[column] for column in COURSES)])


def test_mix_of_prescribed_courses():
    """18 cycles of two sessions, four a week, with a week of break, are 36 sessions in 10 weeks; six cycles take 3."""
    prescribed = Table.of(AS_PRESCRIBED, [("long", 5, 18, 2, 4, 1), ("short", 3, 6, 2, 4, 0)])
    assert course_mix(courses=prescribed) == MIX


def test_a_place_is_held_for_whole_weeks_of_whole_cycles():
    """With five sessions a week only two cycles of two fit, as with four."""
    rows = [("long", 5, 18, 2, 5, 0)]
    assert course_mix(courses=Table.of(AS_PRESCRIBED, rows)).column("course_weeks") == (9,)


@pytest.mark.parametrize("row", [("x", 5, None, 2, 4, 0), ("x", 5, 18.5, 2, 4, 0), ("x", 5, 18, 2, 4, None)])
def test_courses_with_a_blank_or_a_fraction_are_refused(row):
    """Cycles are whole, and a break that nobody stated is not none."""
    with pytest.raises(ValueError, match="is not a (whole )?number"):
        course_mix(courses=Table.of(AS_PRESCRIBED, [row]))


def test_counts_of_a_year_are_sums_over_the_courses():
    """Five long and three short courses bring 216 sessions, 16 of first cycles, 59 patient weeks, 8 patients."""
    assert sessions_per_year(courses=MIX) == 5 * 36 + 3 * 12
    assert first_cycle_sessions_per_year(courses=MIX) == 16
    assert patient_weeks_per_year(courses=MIX) == 59
    assert total_patients_per_year(courses=MIX) == 8


def test_patients_at_once_follow_littles_law():
    """A patient every W weeks on courses of W weeks is one patient at once."""
    assert patients_under_treatment(courses=mix(patients_per_year=WEEKS_PER_YEAR / 10)) == pytest.approx(1)
    assert patients_under_treatment(courses=MIX) == pytest.approx(59 / WEEKS_PER_YEAR)


def test_longer_courses_mean_more_patients_at_once():
    """A break adds to the patients at once, not to the sessions."""
    longer = mix(course_weeks=11)
    assert patients_under_treatment(courses=longer) > patients_under_treatment(courses=mix())
    assert sessions_per_year(courses=longer) == sessions_per_year(courses=mix())


def test_a_program_without_referrals_is_empty():
    """No patients a year means nobody under treatment and no session."""
    assert patients_under_treatment(courses=mix(patients_per_year=0)) == 0
    assert mean_sessions_per_week(courses=mix(patients_per_year=0)) == 0
    assert peak_patients(mean_patients=0, share_of_time=0.99) == 0


@pytest.mark.parametrize(
    ("mean", "share", "expected"),
    [(1.0, 0.36, 0), (1.0, 0.73, 1), (1.0, 0.74, 2), (2.0, 0.857, 3), (2.0, 0.858, 4), (5.0, 0.95, 9)],
)
def test_peak_is_the_quantile_of_the_poisson_law(mean, share, expected):
    """P(N <= 1) is 0.7358 at a mean of 1; P(N <= 3) is 0.8571 at 2; P(N <= 8) 0.9319 and P(N <= 9) 0.9682 at 5."""
    assert expected == peak_patients(mean_patients=mean, share_of_time=share)


def test_peak_agrees_with_scipys_poisson_law():
    """The quantiles agree with an independent library for means up to the largest."""
    from scipy.stats import poisson

    for mean in (0.05, 0.7, 1.13, 4.4, 30.0, 200.0):
        for share in (0.5, 0.9, 0.95, 0.999):
            assert int(poisson.ppf(share, mean)) == peak_patients(mean_patients=mean, share_of_time=share)


def test_busiest_week_has_every_place_on_the_most_frequent_course():
    """Two places on courses of up to five sessions a week need ten sessions."""
    frequent = Table.of(COURSES, [*MIX.rows, ("daily", 1, 10, 1, 5, 2)])
    assert peak_sessions_per_week(courses=frequent, places=2) == 10
    assert peak_sessions_per_week(courses=MIX, places=2) == 8


@pytest.mark.parametrize(
    ("change", "words"),
    [
        ({"patients_per_year": -1}, "patients_per_year cannot be -1"),
        ({"course_weeks": 0}, "course_weeks cannot be 0"),
        ({"sessions": None}, "sessions is not a number"),
        ({"sessions": math.nan}, "sessions is not a number"),
        ({"sessions": True}, "sessions is not a number"),
    ],
)
def test_impossible_courses_are_refused(change, words):
    """A missing or impossible number is named, never counted as zero."""
    with pytest.raises(ValueError, match=words):
        patients_under_treatment(courses=mix(**change))


def test_no_course_is_no_program():
    """An empty mix is refused rather than taken for zero patients."""
    with pytest.raises(ValueError, match="without a course"):
        sessions_per_year(courses=Table.of(COURSES, []))


def test_impossible_questions_about_the_peak_are_refused():
    """Certainty, negative means and no place have no answer."""
    with pytest.raises(ValueError, match="between 0 and 1"):
        peak_patients(mean_patients=1, share_of_time=1)
    with pytest.raises(ValueError, match="not a program's number"):
        peak_patients(mean_patients=-1, share_of_time=0.9)
    with pytest.raises(ValueError, match="hold no patient"):
        peak_sessions_per_week(courses=MIX, places=0)


def test_few_patients_share_no_day_and_many_share_every_day():
    """One patient in ten years has a day for each session; fifty at once leave no treatment day empty."""
    assert treatment_days_per_year(courses=mix(patients_per_year=0.1)) == pytest.approx(3.6, rel=0.02)
    assert treatment_days_per_year(courses=mix(patients_per_year=261)) == pytest.approx(4 * WEEKS_PER_YEAR)


def test_treatment_days_of_the_sample_mix():
    """59 patient weeks a year leave the room without a patient for exp(-1.13) of the time: 141 days."""
    expected = 4 * WEEKS_PER_YEAR * (1 - math.exp(-59 / WEEKS_PER_YEAR))
    assert treatment_days_per_year(courses=MIX) == pytest.approx(expected)
    assert expected == pytest.approx(141, abs=0.5)
