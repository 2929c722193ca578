"""
Treatment days: the working days on which a department gives total skin sessions.

A treatment day is an open working day, on a weekday the department reserves for the technique, on which the
machine is not in service. The weekly quota of sessions counts over the department's own week, which begins
after its weekend (Monday where Saturday and Sunday are free, Sunday where Friday and Saturday are).
"""

from collections.abc import Collection
from dataclasses import dataclass
from datetime import date, timedelta

from readiness.calculations.working_days import LONGEST_CLOSURE_DAYS, WEEKDAYS, WorkingDays
from readiness.errors import OutsideValidity

NO_DAYS: frozenset[date] = frozenset()


@dataclass(frozen=True)
class TreatmentDays:
    """The days that can be used for sessions; made by :func:`treatment_days`."""

    calendar: WorkingDays
    weekdays: frozenset[int]
    service_days: frozenset[date]

    def can_treat(self, day: date) -> bool:
        """Return whether a session can be planned on a day."""
        return day.weekday() in self.weekdays and day not in self.service_days and self.calendar.is_open(day)

    def week(self, day: date) -> int:
        """Return the running number of the department's week that holds a day."""
        return (day.toordinal() - 1 - _first_weekday(self.calendar.weekdays)) // 7

    def on_or_after(self, day: date, missed: frozenset[date] = NO_DAYS) -> date:
        """Return the first day from ``day`` on which a session can be given and none was missed."""
        for days in range(LONGEST_CLOSURE_DAYS):
            candidate = day + timedelta(days=days)
            if candidate not in missed and self.can_treat(candidate):
                return candidate
        raise OutsideValidity(f"no day for a session within a year of {day.isoformat()}")


def treatment_days(
    *, calendar: WorkingDays, treatment_weekdays: Collection[str], service_days: Collection[date]
) -> TreatmentDays:
    """
    Return the days that can be used for total skin sessions.

    Args:
        calendar: The department's working days.
        treatment_weekdays: Weekdays reserved for the technique, in words ("monday").
        service_days: Dates on which the machine is in service, known beforehand.

    Returns:
        The treatment days.

    Raises:
        ValueError: If a weekday is not a weekday, or none of them is worked.

    Valid for: any Gregorian date.
    Assumes: a service day takes the whole day.
    Source: definition (derived).
    """
    unknown = sorted(set(treatment_weekdays) - set(WEEKDAYS))
    if unknown:
        raise ValueError(f"{unknown[0]!r} is not a weekday; write one of {', '.join(WEEKDAYS)}")
    numbers = frozenset(WEEKDAYS.index(word) for word in treatment_weekdays) & calendar.weekdays
    if not numbers:
        raise ValueError("no weekday is both worked and reserved for total skin sessions")
    return TreatmentDays(calendar, numbers, frozenset(service_days))


def _first_weekday(weekdays: frozenset[int]) -> int:
    """Return the worked weekday that follows the longest run of free weekdays; Monday first on a tie."""

    def free_days_before(weekday: int) -> int:
        return next(days for days in range(7) if (weekday - 1 - days) % 7 in weekdays)

    return min(weekdays, key=lambda weekday: (-free_days_before(weekday), weekday))
