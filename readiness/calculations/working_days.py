"""
Working days: which days the department works, and how to count and move along them.

A day is open when its weekday is worked, it is not among the closed dates and it is not a public holiday
of the stated country. Everything that plans (courses, tasks to the first patient) uses this one calendar.
"""

from collections.abc import Collection, Iterable
from dataclasses import dataclass
from datetime import date, timedelta
from functools import cache

from readiness.errors import OutsideValidity

WEEKDAYS = ("monday", "tuesday", "wednesday", "thursday", "friday", "saturday", "sunday")
LONGEST_MOVE = 26_000  # working days, about a century: further is a slip of the keyboard
LONGEST_CLOSURE_DAYS = 366  # no open day for a year: the calendar is wrong, not the department closed


@cache
def public_holidays(*, country: str, subdivision: str, year: int) -> frozenset[date]:
    """
    Return the public holidays of a country in one year, observed days included.

    Args:
        country: Two letters, as in ISO 3166-1 ("US").
        subdivision: State or province as in ISO 3166-2 without the country ("CA"), or "".
        year: Calendar year. [1]

    Returns:
        The dates.

    Raises:
        ValueError: If the country or its subdivision is not known.

    Valid for: the countries and years that the open ``holidays`` library knows.
    Assumes: that the department closes on every public holiday; local days are closed dates.
    Source: the open ``holidays`` library (practice).
    """
    import holidays  # here, because few programs name a country and the import costs time

    known = holidays.list_supported_countries()
    if country not in known:
        raise ValueError(f"public holidays of {country!r} are not known; give the two letters of ISO 3166-1")
    if subdivision and subdivision not in known[country]:
        raise ValueError(f"{country} has no subdivision {subdivision!r}; known: {', '.join(known[country])}")
    return frozenset(holidays.country_holidays(country, subdiv=subdivision or None, years=year))


@dataclass(frozen=True)
class WorkingDays:
    """The open days of a department; made by :func:`working_days`."""

    weekdays: frozenset[int]
    closed_dates: frozenset[date] = frozenset()
    country: str = ""
    subdivision: str = ""

    def is_open(self, day: date) -> bool:
        """Return whether the department works on a day."""
        if day.weekday() not in self.weekdays or day in self.closed_dates:
            return False
        if not self.country:
            return True
        return day not in public_holidays(country=self.country, subdivision=self.subdivision, year=day.year)

    def open_on_or_after(self, day: date) -> date:
        """Return the day itself if it is open, otherwise the next open day."""
        return self._first_open(day, 1)

    def open_on_or_before(self, day: date) -> date:
        """Return the day itself if it is open, otherwise the last open day before it."""
        return self._first_open(day, -1)

    def add(self, day: date, working_days: int) -> date:
        """
        Return the open day that lies a number of working days after a day.

        A closed day counts as the next open one. Work of n days that starts on the morning of ``day`` lets
        the next work start on the morning of ``add(day, n)``; its own last day is ``add(day, n - 1)``.
        A negative number moves back, so that ``add(add(day, n), -n)`` is ``day`` on open days.
        """
        if abs(working_days) > LONGEST_MOVE:
            raise OutsideValidity(f"a plan of {working_days} working days is longer than a century")
        reached = self.open_on_or_after(day)
        step = 1 if working_days > 0 else -1
        for _ in range(abs(working_days)):
            reached = self._first_open(_moved(reached, step), step)
        return reached

    def subtract(self, day: date, working_days: int) -> date:
        """Return the open day that lies a number of working days before a day (see :meth:`add`)."""
        return self.add(day, -working_days)

    def count(self, first: date, last: date) -> int:
        """
        Return how many open days lie from ``first`` to the day before ``last``.

        Negative when ``last`` lies before ``first``, so that ``count(day, add(day, n))`` is n on open days.
        """
        if last < first:
            return -self.count(last, first)
        return sum(self.is_open(first + timedelta(days=days)) for days in range((last - first).days))

    def open_days(self, first: date, last: date) -> Iterable[date]:
        """Yield the open days from ``first`` to ``last``, both included."""
        for days in range((last - first).days + 1):
            day = first + timedelta(days=days)
            if self.is_open(day):
                yield day

    def _first_open(self, day: date, step: int) -> date:
        """Return the first open day at or beyond a day in one direction."""
        for _ in range(LONGEST_CLOSURE_DAYS):
            if self.is_open(day):
                return day
            day = _moved(day, step)
        raise OutsideValidity(f"the working calendar has no open day within a year of {day.isoformat()}")


def working_days(
    *, weekdays: Collection[str], closed_dates: Collection[date], country: str = "", subdivision: str = ""
) -> WorkingDays:
    """
    Return the working-day calendar of a department.

    Args:
        weekdays: The weekdays that are worked, in words ("monday").
        closed_dates: Dates on which the department is closed.
        country: Country whose public holidays are closed too, two letters, or "" for none.
        subdivision: State or province of that country, or "".

    Returns:
        The calendar.

    Raises:
        ValueError: If no weekday is worked, a weekday is not a weekday, or the country is not known.

    Valid for: any Gregorian date.
    Assumes: whole days; half days are stated as open or closed.
    Source: definition (derived).
    """
    unknown = sorted(set(weekdays) - set(WEEKDAYS))
    if unknown:
        raise ValueError(f"{unknown[0]!r} is not a weekday; write one of {', '.join(WEEKDAYS)}")
    if not weekdays:
        raise ValueError("a department that works on no weekday has no working calendar")
    if subdivision and not country:
        raise ValueError(f"subdivision {subdivision!r} is given without its country")
    if country:
        public_holidays(country=country, subdivision=subdivision, year=2027)  # refuse an unknown one at once
    numbers = frozenset(WEEKDAYS.index(word) for word in weekdays)
    return WorkingDays(numbers, frozenset(closed_dates), country, subdivision)


def years_without_closed_dates(
    *, closed_dates: Collection[date], first_day: date, last_day: date
) -> tuple[int, ...]:
    """
    Return the calendar years of a plan for which no closed date is listed.

    A list of the wrong year, or one that ends before the plan does, shows here.

    Args:
        closed_dates: Dates on which the department is closed.
        first_day: First day of the plan.
        last_day: Last day of the plan.

    Returns:
        The years, in order; empty when every year of the plan has at least one closed date.

    Raises:
        ValueError: If the plan ends before it begins.

    Valid for: any Gregorian date.
    Assumes: that every department closes at least one day a year.
    Source: definition (derived).
    """
    if last_day < first_day:
        raise ValueError(f"the plan ends on {last_day.isoformat()}, before it begins")
    listed = {day.year for day in closed_dates}
    return tuple(year for year in range(first_day.year, last_day.year + 1) if year not in listed)


def _moved(day: date, days: int) -> date:
    """Return a day moved by whole days; the end of the calendar is outside validity."""
    try:
        return day + timedelta(days=days)
    except OverflowError:
        raise OutsideValidity("the plan runs beyond the years that a calendar has") from None
