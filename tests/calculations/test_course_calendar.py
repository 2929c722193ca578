"""Courses day by day: cycles stay whole, and dates agree with dateutil and the holidays library."""

from collections import Counter
from datetime import date, timedelta
from itertools import pairwise

import holidays
import pytest
from dateutil.relativedelta import relativedelta
from dateutil.rrule import FR, MO, TH, TU, WE, WEEKLY, rrule
from hypothesis import given, settings
from hypothesis import strategies as st

from readiness.calculations.course_calendar import CourseCalendar, course_calendar, field_sets
from readiness.calculations.treatment_days import TreatmentDays, treatment_days
from readiness.calculations.working_days import WEEKDAYS, working_days
from readiness.errors import OutsideValidity

WEEK = WEEKDAYS[:5]
FOUR_DAYS = ("monday", "tuesday", "thursday", "friday")
SIX = field_sets(technique="six-position", sessions_per_cycle=2)
MONDAY = date(2027, 5, 17)


def usable(closed=(), service=(), weekdays=FOUR_DAYS, **country) -> TreatmentDays:
    calendar = working_days(weekdays=WEEK, closed_dates=closed, **country)
    return treatment_days(calendar=calendar, treatment_weekdays=weekdays, service_days=service)


def planned(**changes) -> CourseCalendar:
    course = {
        "first_day": MONDAY,
        "days": usable(),
        "fields": SIX,
        "cycles": 18,
        "sessions_per_week": 4,
        "dose_per_cycle_gy": 2.0,
        "break_after_cycle": 0,
        "break_weeks": 0.0,
    }
    return course_calendar(**(course | changes))


def dates(course: CourseCalendar) -> list[date]:
    return [date.fromisoformat(day) for day in course.sessions.column("date")]


def test_full_course_is_the_recurrence_of_dateutil() -> None:
    """36 sessions on Monday, Tuesday, Thursday and Friday are the days of dateutil's weekly rule."""
    rule = rrule(WEEKLY, dtstart=MONDAY, byweekday=(MO, TU, TH, FR), count=36)
    course = planned()
    assert [moment.date() for moment in rule] == dates(course)
    assert 36.0 == course.total_dose_gy == course.sessions.column("mean_dose_after_gy")[-1]
    assert MONDAY + relativedelta(weeks=8, weekday=FR) == course.end_date


def test_planned_break_moves_the_rest_by_its_length() -> None:
    """A break week after cycle 10 moves the eleventh cycle and the end by exactly one week."""
    with_break = planned(break_after_cycle=10, break_weeks=1.0)
    expected = dates(planned())
    expected = expected[:20] + [day + relativedelta(weeks=1) for day in expected[20:]]
    assert expected == dates(with_break)


def test_day_sets_alternate() -> None:
    """Day 1 treats AP, RPO, LPO and day 2 PA, RAO, LAO, in every cycle."""
    column = planned().sessions.column("fields")
    assert ("AP, RPO, LPO", "PA, RAO, LAO") * 18 == column


def test_weekday_reserved_five_days_keeps_the_quota() -> None:
    """With five treatment weekdays and four sessions a week, Friday stays free."""
    rule = rrule(WEEKLY, dtstart=MONDAY, byweekday=(MO, TU, WE, TH), count=36)
    assert [moment.date() for moment in rule] == dates(planned(days=usable(weekdays=WEEK)))


def test_cycle_is_not_split_over_a_weekend() -> None:
    """A course that may start on Friday starts on Monday."""
    assert planned(first_day=date(2027, 5, 14)).first_date == MONDAY


def test_cycle_is_not_split_by_holiday_or_service() -> None:
    """With Tuesday closed or the machine in service, the pair of that Monday is not begun."""
    tuesday = date(2027, 5, 18)
    assert planned(days=usable(closed=[tuesday])).first_date == date(2027, 5, 20)
    assert planned(days=usable(service=[tuesday])).first_date == date(2027, 5, 20)


def test_interrupted_cycle_is_completed_first() -> None:
    """A missed Friday is made up on Monday with the day-2 fields; the next pair is Thursday and Friday."""
    course = planned(missed_days=[date(2027, 5, 21)])
    assert [date(2027, 5, 20), date(2027, 5, 24), date(2027, 5, 27), date(2027, 5, 28)] == dates(course)[2:6]
    rows = list(course.sessions.records())
    assert (2, 2, "PA, RAO, LAO", True) == tuple(
        rows[3][name] for name in ("cycle", "session_of_cycle", "fields", "made_up")
    )
    assert (1, 4) == (course.made_up_sessions, course.longest_gap_days)
    assert 36.0 == course.total_dose_gy


def test_day_missed_before_a_cycle_begins_moves_the_whole_cycle() -> None:
    """A missed Monday leaves nothing half done: the pair is given on Thursday and Friday."""
    course = planned(missed_days=[MONDAY])
    assert date(2027, 5, 20) == course.first_date
    assert 0 == course.made_up_sessions


def test_public_holidays_of_the_library_are_free_of_sessions() -> None:
    """No session falls on a holiday of the library, and each pair is on consecutive days."""
    course = planned(days=usable(country="US"))
    closed = holidays.country_holidays("US", years=[2027])
    assert not [day for day in dates(course) if day in closed]
    assert {1} == {(second - first).days for first, second in list(pairwise(dates(course)))[::2]}
    assert course.end_date > planned().end_date  # Memorial Day, Juneteenth (observed) and 5 July cost pairs


def test_sunday_to_thursday_week_counts_from_sunday() -> None:
    """Where Friday and Saturday are free, a pair may lie on Sunday and Monday."""
    week = ("sunday", "monday", "tuesday", "wednesday", "thursday")
    calendar = working_days(weekdays=week, closed_dates=())
    days = treatment_days(calendar=calendar, treatment_weekdays=week, service_days=())
    course = planned(days=days, first_day=date(2027, 5, 16), cycles=4)
    assert [16, 17, 18, 19, 23, 24, 25, 26] == [day.day for day in dates(course)]


def test_in_vivo_and_chart_checks() -> None:
    """The first cycle is measured; charts are checked before start, at each week's end and at the end."""
    course = planned(cycles=6)
    assert (True, True) + (False,) * 10 == course.sessions.column("in_vivo")
    expected = ("before start", "", "", "weekly", "", "", "", "weekly", "", "", "", "end of course")
    assert expected == course.sessions.column("chart_check")
    assert (True,) * 4 == planned(cycles=6, in_vivo_cycles=(1, 2)).sessions.column("in_vivo")[:4]


def test_doses_after_each_session() -> None:
    """The mean dose grows by half a cycle; the dose of complete cycles only with the second day."""
    course = planned(cycles=2, dose_per_cycle_gy=1.5)
    assert (0.75, 1.5, 2.25, 3.0) == course.sessions.column("mean_dose_after_gy")
    assert (0.0, 1.5, 1.5, 3.0) == course.sessions.column("complete_cycles_dose_gy")


def test_rotating_platform_treats_all_fields_each_session() -> None:
    """Twelve one-session cycles of 1 Gy make 12 Gy with every angle in each session."""
    fields = field_sets(technique="rotating-platform", sessions_per_cycle=1)
    course = planned(fields=fields, cycles=12, dose_per_cycle_gy=1.0)
    assert ("all angles",) * 12 == course.sessions.column("fields")
    assert 12.0 == course.total_dose_gy


def test_moving_couch_takes_its_own_incidences() -> None:
    """Four incidences over two sessions give two each, in the stated order."""
    fields = field_sets(
        technique="moving-couch", sessions_per_cycle=2, incidences=("supine", "left", "prone", "right")
    )
    assert (("supine", "left"), ("prone", "right")) == fields


def test_all_six_positions_in_one_session() -> None:
    """A six-position cycle of one session holds all six fields."""
    assert {"AP", "PA", "RAO", "LAO", "RPO", "LPO"} == set(
        field_sets(technique="six-position", sessions_per_cycle=1)[0]
    )


@pytest.mark.parametrize(
    ("arguments", "error", "message"),
    [
        ({"technique": "moving-couch", "sessions_per_cycle": 1}, ValueError, "own list of incidences"),
        ({"technique": "seated", "sessions_per_cycle": 1}, ValueError, "'seated' is not six-position"),
        ({"technique": "six-position", "sessions_per_cycle": 0}, ValueError, "at least one session"),
        ({"technique": "six-position", "sessions_per_cycle": 3}, OutsideValidity, "one or two sessions"),
        (
            {"technique": "moving-couch", "sessions_per_cycle": 2, "incidences": ("a", "b", "c")},
            OutsideValidity,
            "3 incidences cannot be shared equally over 2",
        ),
    ],
)
def test_fields_that_cannot_be_are_refused(arguments: dict, error: type, message: str) -> None:
    """Unknown techniques and uneven shares are refused with words."""
    with pytest.raises(error, match=message):
        field_sets(**arguments)


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"cycles": 0}, "at least one cycle"),
        ({"dose_per_cycle_gy": 0.0}, "more than 0 Gy"),
        ({"dose_per_cycle_gy": float("nan")}, "more than 0 Gy"),
        ({"break_after_cycle": 18}, "does not lie inside"),
        ({"break_weeks": -1.0}, "0 to 52 weeks"),
        ({"sessions_per_week": 1}, "do not hold a cycle"),
    ],
)
def test_impossible_courses_raise(changes: dict, message: str) -> None:
    """A course nobody can mean is refused with words."""
    with pytest.raises(ValueError, match=message):
        planned(**changes)


def test_days_that_never_hold_a_cycle() -> None:
    """Monday and Thursday alone never hold a two-day cycle."""
    with pytest.raises(OutsideValidity, match="never hold 2 sessions on consecutive days"):
        planned(days=usable(weekdays=("monday", "thursday")))


@pytest.mark.parametrize(
    ("weekdays", "message"), [(("sunday",), "no weekday is both"), (("moonday",), "'moonday' is not a weekday")]
)
def test_treatment_weekdays_must_be_worked(weekdays: tuple, message: str) -> None:
    """Treatment weekdays that are not worked, or not weekdays, are refused."""
    with pytest.raises(ValueError, match=message):
        usable(weekdays=weekdays)


NEAR = st.dates(MONDAY, MONDAY + timedelta(days=40))


@given(closed=st.frozensets(NEAR, max_size=8), service=st.frozensets(NEAR, max_size=4))
@settings(max_examples=40, deadline=None, derandomize=True)
def test_no_plan_ends_earlier(closed: frozenset[date], service: frozenset[date]) -> None:
    """A search over every way to place three pairs finds no earlier end than the calendar's."""
    days = usable(closed=closed, service=service, weekdays=WEEK)
    pairs = []
    for ahead in range(80):
        first = MONDAY + timedelta(days=ahead)
        second = first + timedelta(days=1)
        if first.weekday() < 4 and not {first, second} & (closed | service):
            pairs.append((first, second))
    best = min(_ends(pairs, 3))
    course = planned(days=days, cycles=3)
    assert best == course.end_date


def _ends(pairs: list[tuple[date, date]], cycles: int) -> list[date]:
    """Return the ends of all ways to give so many pairs, four sessions a week at most."""
    found = []

    def place(start: int, chosen: list[date]) -> None:
        if len(chosen) == 2 * cycles:
            found.append(chosen[-1])
            return
        for index in range(start, min(len(pairs), start + 12)):
            first, second = pairs[index]
            weeks = Counter(day.isocalendar()[:2] for day in [*chosen, first, second])
            if (not chosen or first > chosen[-1]) and max(weeks.values()) <= 4:
                place(index + 1, [*chosen, first, second])

    place(0, [])
    return found


@given(missed=st.frozensets(NEAR, max_size=12))
@settings(max_examples=40, deadline=None, derandomize=True)
def test_whatever_is_missed_the_course_stays_whole(missed: frozenset[date]) -> None:
    """Every cycle is complete before the next, the quota holds, no missed day is used, the dose is whole."""
    course = planned(cycles=5, missed_days=missed)
    order = list(zip(course.sessions.column("cycle"), course.sessions.column("session_of_cycle"), strict=True))
    assert [(cycle, part) for cycle in range(1, 6) for part in (1, 2)] == order
    assert not set(dates(course)) & missed
    assert max(Counter(day.isocalendar()[:2] for day in dates(course)).values()) <= 4
    assert 10.0 == course.total_dose_gy
    assert course.end_date >= planned(cycles=5).end_date


def test_the_cycle_after_a_measured_one_is_held() -> None:
    """With cycles 1 and 10 measured, cycles 2 and 11 begin only when the readings are signed."""
    rows = list(planned(in_vivo_cycles=(1, 10)).sessions.records())
    assert [(2, 1), (11, 1)] == [(row["cycle"], row["session_of_cycle"]) for row in rows if row["hold"]]
    assert "until the readings of cycle 10 are seen and signed" == rows[20]["hold"]
