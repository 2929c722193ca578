"""Words that every message of the intake shares: what was written, what was probably meant, units in full."""

import difflib
import unicodedata
from collections.abc import Iterable

from readiness.units import UNITS

LONGEST_SHOWN = 60  # characters of the user's text repeated in a message

_IN_FULL = {
    "cm": "centimetres",
    "mm": "millimetres",
    "m": "metres",
    "cm2": "square centimetres",
    "m2": "square metres",
    "m3": "cubic metres",
    "deg": "degrees",
    "rad": "radians",
    "percent": "per cent",
    "celsius": "degrees Celsius",
    "kg": "kilograms",
    "s": "seconds",
    "min": "minutes",
    "h": "hours",
}
_COUNTED = {"days", "weeks", "months", "years", "working_days", "patients", "persons"}


def shown(text: str) -> str:
    """Return the user's text in quotes, fit to stand in one line of a message."""
    line = "".join(_visible(character) for character in text[: LONGEST_SHOWN + 1])
    if len(line) > LONGEST_SHOWN:
        line = line[: LONGEST_SHOWN - 1] + "…"
    return f'"{line}"'


def _visible(character: str) -> str:
    if character in "\n\r\t":
        return " "
    if unicodedata.category(character) in {"Cc", "Cf", "Cs", "Co", "Cn", "Zl", "Zp"}:
        return character_name(character)
    return character


def character_name(character: str) -> str:
    """Return how a character that cannot be seen is called in a message: U+202E."""
    return f"U+{ord(character):04X}"


def near_miss(word: str, known: Iterable[str]) -> str | None:
    """Return the known word that was probably meant, or None."""
    folded: dict[str, str] = {}
    for candidate in known:
        folded.setdefault(_plain(candidate), candidate)
    wanted = _plain(word)
    if wanted in folded:
        return folded[wanted]
    close = difflib.get_close_matches(wanted[:100], folded, n=1, cutoff=0.72)
    return folded[close[0]] if close else None


def did_you_mean(word: str, known: Iterable[str]) -> str:
    """Return ``: did you mean X?``, or nothing if no known word is near."""
    close = near_miss(word, known)
    return "" if close is None else f": did you mean {close}?"


def _plain(word: str) -> str:
    return word.casefold().replace("-", "_").replace(" ", "_")


def a_number(unit: str, *, whole: bool = False) -> str:
    """Return "a number in centimetres" for a unit ending ("cm"); "a number" if there is none."""
    kind = "a whole number" if whole else "a number"
    if not unit:
        return kind
    printed = UNITS.get(unit, unit)
    if unit in _COUNTED:
        return f"{kind} of {printed}"
    if unit.startswith("per_"):
        return f"{kind} {printed}"
    return f"{kind} in {_IN_FULL.get(unit, printed)}"


def unit_in_full(unit: str) -> str:
    """Return the unit of an ending in words where there are words ("centimetres"), else as printed."""
    return _IN_FULL.get(unit, UNITS.get(unit, unit))
