"""The working calendar, against numpy's, dateutil's and the holidays library's own."""

from datetime import date, timedelta

import holidays
import numpy as np
import pytest
from dateutil.rrule import DAILY, FR, MO, TH, TU, WE, rrule
from hypothesis import given, settings
from hypothesis import strategies as st

from readiness.calculations.working_days import (
    WEEKDAYS,
    WorkingDays,
    public_holidays,
    working_days,
    years_without_closed_dates,
)
from readiness.errors import OutsideValidity

WEEK = WEEKDAYS[:5]
CLOSED = (date(2026, 12, 24), date(2026, 12, 25), date(2027, 1, 1), date(2027, 3, 26), date(2027, 3, 29))
DAYS = st.dates(date(2020, 1, 1), date(2035, 12, 31))


@pytest.fixture
def calendar() -> WorkingDays:
    return working_days(weekdays=WEEK, closed_dates=CLOSED)


def test_weekend_and_closed_date_are_not_open(calendar: WorkingDays) -> None:
    """Saturdays and closed dates are closed, the Thursday before is open."""
    assert not calendar.is_open(date(2027, 3, 27))
    assert not calendar.is_open(date(2027, 3, 29))
    assert calendar.is_open(date(2027, 3, 25))


def test_ten_days_across_easter(calendar: WorkingDays) -> None:
    """Counted on paper: the third working day after Thursday before the long weekend is Thursday."""
    assert calendar.add(date(2027, 3, 25), 3) == date(2027, 4, 1)
    assert calendar.subtract(date(2027, 4, 1), 3) == date(2027, 3, 25)
    assert calendar.count(date(2027, 3, 25), date(2027, 4, 1)) == 3


def test_closed_day_counts_as_the_next_open_one(calendar: WorkingDays) -> None:
    """Nothing added to a Saturday before a closed Monday is Tuesday, and the last open day is Thursday."""
    assert calendar.add(date(2027, 3, 27), 0) == date(2027, 3, 30)
    assert calendar.open_on_or_before(date(2027, 3, 28)) == date(2027, 3, 25)


@given(day=DAYS, moves=st.integers(-400, 400), closed=st.frozensets(DAYS, max_size=40))
@settings(max_examples=60, deadline=None, derandomize=True)
def test_moves_as_numpy_does(day: date, moves: int, closed: frozenset[date]) -> None:
    """Adding and counting agree with numpy's business days for any closed dates."""
    calendar = working_days(weekdays=WEEK, closed_dates=closed)
    expected = np.busday_offset(day, moves, roll="forward", holidays=sorted(closed)).astype(date)
    assert calendar.add(day, moves) == expected
    first, last = sorted((day, expected))
    assert calendar.count(first, last) == np.busday_count(first, last, holidays=sorted(closed))
    assert calendar.count(last, first) == -calendar.count(first, last)


def test_open_days_are_those_of_dateutil(calendar: WorkingDays) -> None:
    """Half a year of open days equals the recurrence rule of dateutil without the closed dates."""
    first, last = date(2026, 12, 1), date(2027, 6, 30)
    rule = rrule(DAILY, dtstart=first, until=last, byweekday=(MO, TU, WE, TH, FR))
    assert [moment.date() for moment in rule if moment.date() not in CLOSED] == list(calendar.open_days(first, last))


@pytest.mark.parametrize(("country", "subdivision"), [("US", ""), ("US", "TX"), ("DE", "BY"), ("JP", "")])
def test_public_holidays_are_closed(country: str, subdivision: str) -> None:
    """Every public holiday of the country is closed; without the country it is an ordinary day."""
    with_country = working_days(weekdays=WEEKDAYS, closed_dates=(), country=country, subdivision=subdivision)
    without = working_days(weekdays=WEEKDAYS, closed_dates=())
    expected = set(holidays.country_holidays(country, subdiv=subdivision or None, years=2027))
    year = [date(2027, 1, 1) + timedelta(days=days) for days in range(365)]
    assert expected == {day for day in year if not with_country.is_open(day)}
    assert all(without.is_open(day) for day in year)


def test_more_closed_days_never_bring_a_date_forward() -> None:
    """Closing another day moves the end later or leaves it."""
    ends = [
        working_days(weekdays=WEEK, closed_dates=CLOSED[:count]).add(date(2026, 12, 1), 90)
        for count in range(len(CLOSED) + 1)
    ]
    assert ends == sorted(ends)
    assert ends[0] < ends[-1]


def test_calendar_without_open_days_is_refused() -> None:
    """A year of closed dates, a plan of a century and the end of all calendars are outside validity."""
    shut = [date(2027, 1, 1) + timedelta(days=days) for days in range(400)]
    calendar = working_days(weekdays=WEEK, closed_dates=shut)
    with pytest.raises(OutsideValidity, match="no open day within a year"):
        calendar.open_on_or_after(date(2027, 1, 1))
    with pytest.raises(OutsideValidity, match="longer than a century"):
        calendar.add(date(2027, 1, 1), 30_000)
    with pytest.raises(OutsideValidity, match="beyond the years"):
        calendar.add(date(9999, 12, 31), 1)


@pytest.mark.parametrize(
    ("arguments", "message"),
    [
        ({"weekdays": (), "closed_dates": ()}, "works on no weekday"),
        ({"weekdays": ("moonday",), "closed_dates": ()}, "'moonday' is not a weekday"),
        ({"weekdays": WEEK, "closed_dates": (), "country": "XX"}, "'XX' are not known"),
        ({"weekdays": WEEK, "closed_dates": (), "country": "US", "subdivision": "ZZ"}, "no subdivision 'ZZ'"),
        ({"weekdays": WEEK, "closed_dates": (), "subdivision": "CA"}, "without its country"),
    ],
)
def test_impossible_calendars_raise(arguments: dict, message: str) -> None:
    """Weekdays and countries that do not exist are refused with words."""
    with pytest.raises(ValueError, match=message):
        working_days(**arguments)


def test_holiday_list_of_the_wrong_year_shows() -> None:
    """Years of a plan without any closed date are named."""
    plan = {"first_day": date(2026, 12, 1), "last_day": date(2028, 2, 1)}
    assert years_without_closed_dates(closed_dates=CLOSED, **plan) == (2028,)
    assert years_without_closed_dates(closed_dates=(), **plan) == (2026, 2027, 2028)
    with pytest.raises(ValueError, match="before it begins"):
        years_without_closed_dates(closed_dates=(), first_day=date(2027, 1, 2), last_day=date(2027, 1, 1))


def test_public_holidays_of_one_year_only() -> None:
    """The list of a year holds dates of that year alone."""
    assert {day.year for day in public_holidays(country="US", subdivision="", year=2027)} == {2027}
