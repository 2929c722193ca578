"""
Strict reading of single entries: the schema says what is expected, the text decides nothing by itself.

Each reader returns (value, None) or (None, problem). ``what`` is the name of the entry in the user's words,
``unit`` the ending of its name in readiness.units ("cm"), or "". Quotes make no difference except for texts:
an unquoted no, off, null or ~ is never taken for a text.
"""

import re
from collections.abc import Callable
from datetime import date

from readiness.errors import Problem
from readiness.program import date_hints, number_hints
from readiness.program.nodes import Scalar
from readiness.program.number_hints import LONGEST_NUMBER
from readiness.program.wording import a_number, shown

LARGEST_WHOLE = 10**15  # whole numbers up to here are exact in every spreadsheet and in JSON
YEARS = (1900, 2199)

_NUMBER = re.compile(r"[+-]?(?:(?:0|[1-9][0-9]*)(?:\.[0-9]*)?|\.[0-9]+)(?:[eE][+-]?[0-9]+)?")
_WHOLE = re.compile(r"[+-]?(?:0|[1-9][0-9]*)")
_DATE = re.compile(r"([0-9]{4})-([0-9]{2})-([0-9]{2})")
_YES = {"yes", "true"}
_NO = {"no", "false"}
_SWITCHES = _YES | _NO | {"on", "off", "y", "n"}
_NOTHING = {"null", "~"}
_NEARLY_A_NUMBER = re.compile(r"[+-]?[0-9][0-9_,.]*|[+-]?\.(?:inf|nan)|0[xob][0-9a-f]+", re.IGNORECASE)


def read_number(scalar: Scalar, *, what: str, unit: str = "") -> tuple[float | None, Problem | None]:
    """Return a finite number written with digits and a decimal point; 1e3 is one, 010 and 1_000 are not."""
    expected = a_number(unit)
    text = scalar.text.strip(" \t")
    if not text:
        return None, _empty(scalar, what, expected)
    if len(text) > LONGEST_NUMBER or not _NUMBER.fullmatch(text):
        return None, _wrong(scalar, what, expected, number_hints.hint(text, unit))
    value = float(text) + 0.0  # -0 becomes 0
    if value in (float("inf"), float("-inf")):
        return None, _wrong(scalar, what, expected, ": it is too large to be held", "range")
    if value == 0 and re.match(r"[+-]?[0.]*[1-9]", text):
        return None, _wrong(scalar, what, expected, ": it is too near zero to be held; write 0", "range")
    return value, None


def read_whole_number(scalar: Scalar, *, what: str, unit: str = "") -> tuple[int | None, Problem | None]:
    """Return a whole number written with digits alone."""
    expected = a_number(unit, whole=True)
    text = scalar.text.strip(" \t")
    if not text:
        return None, _empty(scalar, what, expected)
    if len(text) <= LONGEST_NUMBER and _WHOLE.fullmatch(text):
        if abs(int(text)) > LARGEST_WHOLE:
            return None, _wrong(scalar, what, expected, f": at most {LARGEST_WHOLE} can be read", "range")
        return int(text), None
    if len(text) > LONGEST_NUMBER or not _NUMBER.fullmatch(text):
        return None, _wrong(scalar, what, expected, number_hints.hint(text, unit))
    value = float(text)
    exact = abs(value) <= LARGEST_WHOLE and value == int(value)
    advice = f": write {int(value)}" if exact else ": it has decimals or is too large"
    return None, _wrong(scalar, what, expected, advice)


def read_yes_or_no(scalar: Scalar, *, what: str) -> tuple[bool | None, Problem | None]:
    """Return True for yes or true, False for no or false, in any case; nothing else will do."""
    word = scalar.text.strip(" \t").casefold()
    if not word:
        return None, _empty(scalar, what, "yes or no")
    if word in _YES:
        return True, None
    if word in _NO:
        return False, None
    return None, _wrong(scalar, what, "yes or no", _switch_advice(word))


def read_date(scalar: Scalar, *, what: str) -> tuple[date | None, Problem | None]:
    """Return a day written year-month-day that exists."""
    expected = "a date, year-month-day"
    text = scalar.text.strip(" \t")
    if not text:
        return None, _empty(scalar, what, expected)
    parts = _DATE.fullmatch(text)
    if not parts:
        return None, _wrong(scalar, what, expected, date_hints.hint(text))
    year, month, day = int(parts[1]), int(parts[2]), int(parts[3])
    if not YEARS[0] <= year <= YEARS[1]:
        message = f"{what}: the year of {text} lies outside {YEARS[0]} to {YEARS[1]}; check the year"
        return None, Problem(scalar.place, message, "range")
    try:
        return date(year, month, day), None
    except ValueError:
        reason = date_hints.not_a_day(year, month, day)
        return None, Problem(scalar.place, f"{what}: {text} does not exist: {reason}", "type")


def read_text(scalar: Scalar, *, what: str) -> tuple[str | None, Problem | None]:
    """Return a text exactly as written; yes, no, on, off, null and ~ need quotes to be one."""
    if not scalar.text.strip():
        return None, _empty(scalar, what, "a text")
    word = scalar.text.casefold()
    if not scalar.quoted and word in _NOTHING:
        advice = ": leave it out if it is not known, or put it in quotes if you mean the word"
        return None, _wrong(scalar, what, "a text", advice)
    if not scalar.quoted and word in _SWITCHES - {"y", "n"}:
        advice = f': put it in quotes, "{scalar.text}", if you mean the word'
        return None, _wrong(scalar, what, "a text", advice)
    return scalar.text, None


def read_any(scalar: Scalar, *, what: str) -> tuple[float | bool | date | str | None, Problem | None]:
    """Return a number, yes or no, a date or a text, whichever is written; quoted is always a text."""
    if scalar.quoted or not scalar.text:
        return read_text(scalar, what=what)
    word = scalar.text.casefold()
    if word in _YES | _NO:
        return read_yes_or_no(scalar, what=what)
    if _DATE.fullmatch(scalar.text):
        return read_date(scalar, what=what)
    if _NUMBER.fullmatch(scalar.text):
        return read_number(scalar, what=what)
    if _NEARLY_A_NUMBER.fullmatch(scalar.text):
        advice = number_hints.hint(scalar.text, "") + ", or put it in quotes if it is a text"
        return None, _wrong(scalar, what, "a number, yes or no, a date or a text", advice)
    return read_text(scalar, what=what)


READERS: dict[str, Callable[..., tuple[object, Problem | None]]] = {
    "number": read_number,
    "whole number": read_whole_number,
    "yes or no": read_yes_or_no,
    "date": read_date,
    "text": read_text,
    "scalar": read_any,
}


def _switch_advice(word: str) -> str:
    if word in {"on", "y", "1", "x"}:
        return ": write yes"
    if word in {"off", "n", "0"}:
        return ": write no"
    if word in _NOTHING | {"unknown", "n/a", "tbd", "?", "maybe"}:
        return ": leave it out if it is not known"
    return ": write yes or no, or leave it out if it is not known"


def _empty(scalar: Scalar, what: str, expected: str) -> Problem:
    message = f"{what} is empty: write {expected}, or leave it out if it is not known"
    return Problem(scalar.place, message, "empty")


def _wrong(scalar: Scalar, what: str, expected: str, advice: str, kind: str = "type") -> Problem:
    message = f"{what} must be {expected}, not {shown(scalar.text.strip())}{advice}"
    return Problem(scalar.place, message, kind)
