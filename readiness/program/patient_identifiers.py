"""
Anything in a measurement file that looks like a patient's name, number or date of birth.

Such a file is refused. Messages say what it looks like and where, and never repeat it.
"""

import re
from collections.abc import Mapping
from pathlib import PurePosixPath

from readiness.errors import Place, Problem
from readiness.program.field_schema import FieldSchema
from readiness.program.nodes import CsvText, Scalar

KIND = "identifier"
ADVICE = "a file that could identify a patient is not read; take it out, and say phantom or patient only"

_NAMES_OF_FIELDS = {
    "name": {"name", "surname", "forename", "firstname", "lastname", "initials", "patient", "person"},
    "number": {"id", "mrn", "ssn", "nhs", "case", "chart", "record", "hospital", "insurance", "accession"},
    "date of birth": {"birth", "birthdate", "birthday", "dob", "born", "age"},
    "address": {"address", "street", "phone", "telephone", "email", "mail"},
}
_CAPITAL = r"[A-Z\u00c0-\u00de][a-z\u00df-\u00ff'\u2019-]+"
_FILED_AS = "patient|chart|record|hospital|case"
_DAY, _MONTH = r"(?:0?[1-9]|[12]\d|3[01])", r"(?:0?[1-9]|1[0-2]|[A-Za-z]{3})"
_LONG_AGO = r"(?:19\d\d|200\d)"  # no measurement of a program that is being planned is that old
_LOOKS_LIKE = (
    ("name", re.compile(rf"\b(?:Mr|Mrs|Ms|Miss|Mister|Herr|Frau|Mme|Dr)\b\.?\s+{_CAPITAL}")),
    ("name", re.compile(rf"\b(?i:patient|name|surname)\b\s*[:=]?\s+{_CAPITAL}")),
    ("name", re.compile(rf"^\s*{_CAPITAL}\s*,\s*{_CAPITAL}(?:\s+{_CAPITAL})?\s*$")),
    ("number", re.compile(r"(?i)\b(?:mrn|ssn|nhs)\b\W*\w{0,3}\d{3,}")),
    ("number", re.compile(rf"(?i)\b(?:{_FILED_AS})\s*(?:no|number|id|[#:])\W*\w{{0,3}}\d\d")),
    ("number", re.compile(r"(?<![\d.,-])\d{6,}(?![\d.,])")),
    ("number", re.compile(r"(?<!\d)\d{3}-\d{2}-\d{4}(?!\d)")),
    ("date of birth", re.compile(r"(?i)\b(?:born|birth|birthdate|dob|d\.o\.b)\b")),
    ("date of birth", re.compile(rf"(?<!\d){_LONG_AGO}[-/.]{_MONTH}[-/.]{_DAY}(?!\d)")),
    ("date of birth", re.compile(rf"(?<!\d){_DAY}[-/. ]{_MONTH}[-/. ]{_LONG_AGO}(?!\d)")),
    ("address", re.compile(r"[\w.+-]+@[\w-]+\.\w+")),
)
_TWO_NAMES = re.compile(rf"^\s*{_CAPITAL}\s+{_CAPITAL}\s*$")
_NAME_OF_FILE = re.compile(r"(?i)(?<![a-z])(?:mrn|patient|dob)[-_ ]?[a-z0-9]|(?<!\d)(?!20\d{6}(?!\d))\d{6,}")


def identifier_problems(
    csv: CsvText, header: Mapping[str, FieldSchema], columns: Mapping[str, FieldSchema]
) -> list[Problem]:
    """
    Return a problem for each entry that could identify a patient.

    Args:
        csv: The file as cells.
        header: Header keys that its kind describes; empty if the kind is not known.
        columns: Columns that its kind describes.

    Returns:
        Located problems. Numbers, dates and references that a kind describes are not looked at.
    """
    found = _file_name_problems(csv.place)
    for key, value in csv.header:
        if key.text not in header:
            found += _field_problems(key)
        described = header[key.text].type if key.text in header else ""
        if described in ("", "text", "word"):
            found += _text_problems(value, alone=described != "text" or key.text == "note")
    for at, column in enumerate(csv.columns):
        if column.text not in columns:
            found += _field_problems(column)
        if column.text not in columns or columns[column.text].type == "text":
            for row in csv.rows:
                found += _text_problems(row[at], alone=column.text not in columns)
    return found


def looks_like(text: str, *, alone: bool = False) -> str:
    """
    Return what a text looks like: name, number, date of birth, address, or "" for none of them.

    With ``alone`` two capitalised words and nothing else are taken for a name.
    """
    for what, pattern in _LOOKS_LIKE:
        if pattern.search(text):
            return what
    return "name" if alone and _TWO_NAMES.search(text) else ""


def _field_problems(key: Scalar) -> list[Problem]:
    """Return the problem with a key or column whose own name asks for an identity."""
    words = set(re.split(r"[^a-z]+", re.sub(r"(?<=[a-z])(?=[A-Z])", "_", key.text).lower()))
    for what, names in _NAMES_OF_FIELDS.items():
        if words & names:
            return [_problem(key.place, f"this seems to hold a patient's {what}")]
    return []


def _text_problems(entry: Scalar, *, alone: bool) -> list[Problem]:
    """Return the problem with a text that looks like an identity."""
    what = looks_like(entry.text, alone=alone)
    return [_problem(entry.place, f"this looks like a patient's {what}")] if what else []


def _file_name_problems(place: Place) -> list[Problem]:
    """Return the problem with a file whose name looks like an identity."""
    if _NAME_OF_FILE.search(PurePosixPath(place.file).stem):
        return [_problem(Place(place.file), "the name of this file seems to hold a patient's name or number")]
    return []


def _problem(place: Place, message: str) -> Problem:
    """Return one problem with the advice that belongs to all of them."""
    return Problem(place, f"{message}: {ADVICE}", KIND)
