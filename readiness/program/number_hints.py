"""
What somebody who wrote something that is not a number probably meant by it.

The hints only help to mend a file: nothing is ever read as the number they propose.
"""

import re
import unicodedata
from collections.abc import Callable
from decimal import Decimal

from readiness.program.wording import unit_in_full
from readiness.units import UNITS

# what a unit measures -> spellings and their size in one common unit (derived: by definition of the units)
_FAMILIES: tuple[dict[str, str], ...] = (
    {"mm": "0.1", "cm": "1", "m": "100", "in": "2.54", "inch": "2.54", "inches": "2.54", "ft": "30.48"}
    | {"feet": "30.48", "km": "100000", "millimetres": "0.1", "centimetres": "1", "metres": "100"}
    | {"millimeters": "0.1", "centimeters": "1", "meters": "100", "metre": "100", "meter": "100"},
    {"s": "1", "sec": "1", "seconds": "1", "min": "60", "minutes": "60", "h": "3600", "hour": "3600"}
    | {"hr": "3600", "hours": "3600"},
    {"days": "1", "day": "1", "d": "1", "weeks": "7", "week": "7"},
    {"months": "1", "month": "1", "years": "12", "year": "12"},
    {"gy": "1", "cgy": "0.01", "mgy": "0.001"},
    {"msv": "1", "usv": "0.001", "µsv": "0.001", "μsv": "0.001", "sv": "1000"},
    {"mev": "1", "kev": "0.001"},
    {"mv": "1", "kv": "0.001"},
    {"kpa": "1", "hpa": "0.1", "mbar": "0.1", "pa": "0.001"},
    {"kg": "1", "g": "0.001"},
    {"cm2": "1", "cm²": "1", "m2": "10000", "m²": "10000", "mm2": "0.01", "mm²": "0.01"},
    {"g_per_cm3": "1", "g/cm3": "1", "g/cm³": "1", "kg/m3": "0.001", "kg/m³": "0.001"},
    {"deg": "1", "°": "1", "degrees": "1", "degree": "1"},
    {"celsius": "1", "°c": "1", "c": "1"},
    {"percent": "1", "%": "1", "per cent": "1", "": "100"},
)
_LIKE_A_NUMBER = r"[+-]?(?:[0-9]+(?:[.,][0-9]*)?|[.,][0-9]+)"
_WITH_UNIT = re.compile(rf"({_LIKE_A_NUMBER})\s*([^\W\d_%°][^\d\s]*\d?(?:\s[^\d\s]+)*|[%°][a-zA-Z]?)")
_UNKNOWN = {"unknown", "n/a", "na", "n.a.", "tbd", "tbc", "?", "-", "--", "none", "null", "~", "nil", "x"}
LONGEST_NUMBER = 40  # characters
_SIGNS = str.maketrans({"−": "-", "–": "-", "‒": "-", "﹣": "-", "－": "-", "＋": "+", "．": ".", "，": ","})


def hint(text: str, unit: str) -> str:
    """Return how to write what was probably meant, as the end of a sentence; never empty."""
    for look in _LOOKS:
        found = look(text, unit)
        if found:
            return found
    return ": write digits and a decimal point only, or leave it out if it is not known"


def plain(number: Decimal) -> str:
    """Return a decimal number as people write it, without exponent and idle zeros."""
    written = f"{number:f}"
    return written.rstrip("0").rstrip(".") if "." in written else written


def _not_known(text: str, unit: str) -> str:
    if text.casefold() in _UNKNOWN:
        return ": leave it out if it is not known"
    if re.fullmatch(r"[+-]?\.?(nan|inf|infinity)", text.casefold()):
        return ": a number must be finite; leave it out if it is not known"
    return ""


def _too_long(text: str, unit: str) -> str:
    if len(text) > LONGEST_NUMBER:
        return f": it has {len(text)} characters, more than any number needed here"
    return ""


def _yes_or_no(text: str, unit: str) -> str:
    if text.casefold() in {"yes", "no", "true", "false", "on", "off"}:
        return ": a number is expected here, not yes or no"
    return ""


def _leading_zero(text: str, unit: str) -> str:
    if re.fullmatch(r"[+-]?0[0-9]+(\.[0-9]*)?", text):
        return f": write {plain(Decimal(text))}, without the leading zero"
    return ""


def _other_base(text: str, unit: str) -> str:
    if re.fullmatch(r"[+-]?0[xX][0-9a-fA-F]+|[+-]?0[oO][0-7]+|[+-]?0[bB][01]+", text):
        return f": write it as an ordinary number, {int(text, 0)}"
    return ""


def _grouped(text: str, unit: str) -> str:
    if re.fullmatch(r"[+-]?[0-9]+([_'’\s  ][0-9]+)+(\.[0-9]+)?", text):
        joined = re.sub(r"[^0-9.+-]", "", text)
        return f": write {joined}, without anything between the digits"
    return ""


def _comma(text: str, unit: str) -> str:
    if re.fullmatch(r"[+-]?[1-9][0-9]{0,2}(,[0-9]{3})+", text):
        thousands = text.replace(",", "")
        if text.count(",") > 1:
            return f": write {thousands}, without commas"
        decimal = plain(Decimal(text.replace(",", ".")))
        return f": write {thousands} if the comma parts thousands, {decimal} if it is a decimal comma"
    if re.fullmatch(r"[+-]?[0-9]*,[0-9]+", text):
        return f": write {plain(Decimal(text.replace(',', '.')))}, with a decimal point instead of the comma"
    if re.fullmatch(r"[+-]?[0-9]{1,3}(,[0-9]{3})+\.[0-9]+", text):
        return f": write {text.replace(',', '')}, without commas"
    if re.fullmatch(r"[+-]?[0-9]{1,3}(\.[0-9]{3})+,[0-9]+", text):
        return f": write {text.replace('.', '').replace(',', '.')}, with a decimal point only"
    return ""


def _time_of_day(text: str, unit: str) -> str:
    parts = re.fullmatch(r"([0-9]{1,3}):([0-5][0-9])", text)
    if not parts:
        return ""
    first, second = int(parts[1]), int(parts[2])
    if unit == "h":
        return f": write hours as one number, {plain(Decimal(first) + round(Decimal(second) / 60, 3))}"
    if unit in {"min", "s"}:
        return f": write {unit_in_full(unit)} as one number, {first * 60 + second} if {text} means that"
    return ": it looks like a time of day; write one number"


def _fraction(text: str, unit: str) -> str:
    parts = re.fullmatch(r"([0-9]{1,4})\s*[/:]\s*([1-9][0-9]{0,3})", text)
    if not parts:
        return ""
    return f": write it as one number, {plain(round(Decimal(parts[1]) / Decimal(parts[2]), 6))}"


def _with_unit(text: str, unit: str) -> str:
    parts = _WITH_UNIT.fullmatch(text)
    if not parts:
        return ""
    comma = "," in parts[1]
    number = Decimal(parts[1].replace(",", "."))
    written = parts[2].casefold().rstrip(".")
    known = unit_in_full(unit)
    if written in {unit, UNITS.get(unit, unit).casefold(), known.casefold()}:
        return f": write {plain(number)} alone, the unit is fixed"
    for family in _FAMILIES:
        if unit in family and written in family:
            meant = plain(number * Decimal(family[written]) / Decimal(family[unit]))
            return f" (did you mean {meant}?)" if comma or not unit else f": write {meant}, in {known}"
    return f": write the number alone, in {known}" if unit else ": write the number alone"


def _other_script(text: str, unit: str) -> str:
    latin = "".join(
        str(unicodedata.decimal(character)) if unicodedata.category(character) == "Nd" else character
        for character in text.translate(_SIGNS)
    )
    if latin != text and re.fullmatch(_LIKE_A_NUMBER, latin):
        return f": write {latin} with the digits and signs of the Latin keyboard"
    return ""


def _several(text: str, unit: str) -> str:
    if re.fullmatch(rf"{_LIKE_A_NUMBER}\s*(?:-|–|to|±|\+/-|\.\.)\s*{_LIKE_A_NUMBER}", text):
        return ": write one number"
    if re.fullmatch(rf"(?:[<>≤≥~≈±]=?|ca\.?|about|approx\.?)\s*{_LIKE_A_NUMBER}", text):
        return ": write the number alone, without a sign or word before it"
    return ""


_LOOKS: tuple[Callable[[str, str], str], ...] = (
    _not_known,
    _too_long,
    _yes_or_no,
    _leading_zero,
    _other_base,
    _grouped,
    _comma,
    _time_of_day,
    _fraction,
    _several,
    _with_unit,
    _other_script,
)
