"""What somebody who wrote something that is not a date probably meant by it."""

import calendar
import re
from datetime import date

_MONTHS = (
    "january", "february", "march", "april", "may", "june",
    "july", "august", "september", "october", "november", "december",
)  # fmt: skip
_YEAR_FIRST = re.compile(r"([0-9]{4})[-/. ]?([0-9]{1,2})[-/. ]?([0-9]{1,2})")
_YEAR_LAST = re.compile(r"([0-9]{1,2})[-/. ]([0-9]{1,2})[-/. ]([0-9]{4})")
_DAY_NAMED = re.compile(r"([0-9]{1,2})\.?[- ]([a-z]{3,9})\.?,?[- ]([0-9]{4})")
_NAMED_DAY = re.compile(r"([a-z]{3,9})\.?[- ]([0-9]{1,2}),?[- ]([0-9]{4})")


def hint(text: str) -> str:
    """Return how to write what was probably meant, as the end of a sentence; never empty."""
    if re.fullmatch(r"[0-9]{4}-[0-9]{2}-[0-9]{2}[Tt ].{1,40}", text):
        return f": write the day alone, {text[:10]}"
    meant = list(dict.fromkeys(_candidates(text.casefold())))
    if len(meant) == 1:
        return f": write {meant[0]} (year-month-day)"
    if len(meant) == 2:
        day_first, month_first = meant
        return (
            f": write it year-month-day, {day_first} if the day stands first, {month_first} if the month does"
        )
    return ": write year-month-day, as in 2026-02-01"


def not_a_day(year: int, month: int, day: int) -> str:
    """Return why a date written in the right form does not exist."""
    if not 1 <= month <= 12:
        return f"there is no month {month:02d}; dates are written year-month-day"
    last = calendar.monthrange(year, month)[1]
    return f"{_MONTHS[month - 1].capitalize()} {year} has {last} days, not a day {day:02d}"


def _candidates(text: str) -> list[str]:
    if parts := _YEAR_FIRST.fullmatch(text):
        return _existing(parts[1], parts[2], parts[3])
    if parts := _YEAR_LAST.fullmatch(text):
        return _existing(parts[3], parts[2], parts[1]) + _existing(parts[3], parts[1], parts[2])
    if parts := _DAY_NAMED.fullmatch(text):
        return _existing(parts[3], _month(parts[2]), parts[1])
    if parts := _NAMED_DAY.fullmatch(text):
        return _existing(parts[3], _month(parts[1]), parts[2])
    return []


def _month(name: str) -> int:
    return next((number for number, month in enumerate(_MONTHS, 1) if month.startswith(name)), 0)


def _existing(year: str, month: str | int, day: str) -> list[str]:
    try:
        return [date(int(year), int(month), int(day)).isoformat()]
    except ValueError:
        return []
