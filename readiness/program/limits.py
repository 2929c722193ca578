"""Ranges, allowed words, required fields: typed plain data through cerberus, its errors in our own words."""

from collections.abc import Iterable, Mapping
from functools import cache
from typing import Any

from cerberus import TypeDefinition, Validator
from cerberus.errors import BaseErrorHandler, ErrorDefinition, ValidationError
from cerberus.schema import UnvalidatedSchema

from readiness.errors import Place, Problem
from readiness.program.entries import Plain
from readiness.program.entry_words import Path, field_at, meaning_of, words_at
from readiness.program.field_schema import FieldSchema
from readiness.program.wording import did_you_mean, shown
from readiness.units import printed

Rules = dict[str, Any]

_TYPES = {
    "text": "string", "word": "string", "reference": "string", "file": "string", "number": "number",
    "whole number": "integer", "yes or no": "boolean", "date": "date", "row": "dict",
}  # fmt: skip
_LISTS = {"texts": "text", "words": "word", "numbers": "number", "dates": "date", "references": "reference"}
_ANYTHING = ["number", "boolean", "date", "string"]
NEAR = 2  # times: a number so near to its range was not given in another unit
MOST_WORDS = 12  # longer lists of allowed words are not repeated in a message
# unit of a name -> what a mistaken number was probably given in, as a factor to the right unit
_OTHER_UNITS: dict[str, tuple[float, ...]] = {
    "cm": (100, 0.1),
    "mm": (10, 1000),
    "m": (0.01, 0.001),
    "kpa": (0.1, 0.001),
    "gy": (0.01,),
    "mev": (0.001,),
    "fte": (0.01,),
    "percent": (100,),
    "h": (1 / 60,),
    "min": (60,),
}


_NOT_ABOVE = ErrorDefinition(0x4F, "above")  # a code that cerberus does not use


class _Checker(Validator):  # type: ignore[misc] # cerberus ships no types
    """Cerberus with a lower limit that is itself excluded, and in which yes is not a whole number."""

    types_mapping = {**Validator.types_mapping, "integer": TypeDefinition("integer", (int,), (bool,))}

    def _validate_above(self, limit: float, field: str, value: float) -> None:
        """{'type': 'number'}"""  # noqa: D200,D400,D403,D415 - read by cerberus
        if not value > limit:
            self._error(field, _NOT_ABOVE)


class _Listed(BaseErrorHandler):  # type: ignore[misc] # cerberus ships no types
    """Hands over the errors as they are."""

    def __call__(self, errors: Iterable[ValidationError]) -> list[ValidationError]:
        return list(errors)


@cache
def cerberus_rules(field: FieldSchema) -> Rules:
    """Return what cerberus must know about a field."""
    rules: Rules
    if field.type in _LISTS:
        rules = {"type": "list", "schema": _single(field, _LISTS[field.type])}
    elif field.type == "points":
        point = {"type": "list", "minlength": 2, "maxlength": 2, "schema": _single(field, "number")}
        rules = {"type": "list", "schema": point}
    elif field.type == "rows":
        rules = {"type": "list", "schema": {"type": "dict", "schema": cerberus_schema(field.columns)}}
    elif field.type == "row":
        rules = {"type": "dict", "schema": cerberus_schema(field.columns)}
    elif field.type == "scalars":
        rules = {"type": "list", "schema": {"type": _ANYTHING}}
    elif field.type == "scalar":
        rules = {"type": _ANYTHING}
    else:
        rules = _single(field, field.type)
    if field.required:
        rules["required"] = True
    return rules


def cerberus_schema(fields: Mapping[str, FieldSchema]) -> dict[str, Rules]:
    """Return the cerberus schema of a mapping with these fields."""
    return {name: cerberus_rules(field) for name, field in fields.items()}


def check_limits(
    plain: Mapping[str, Plain], fields: Mapping[str, FieldSchema], places: Mapping[Path, Place], place: Place
) -> list[tuple[Path, Problem]]:
    """
    Return every range, word or required field that plain data violates, with the path to it.

    Args:
        plain: What was read.
        fields: What may stand in it.
        places: Where each part was written; a key written with an unreadable entry is not missing.
        place: Where the whole begins.
    """
    absent = [field for field in fields.values() if field.required and (field.name,) not in places]
    problems: list[tuple[Path, Problem]] = [
        ((field.name,), Problem(place, missing(field), "missing")) for field in absent
    ]
    rules = cerberus_schema({name: fields[name] for name in plain})
    for error in _errors(plain, rules):
        path = tuple(error.document_path)
        field = field_at(fields, path)
        if error.rule != "required":
            problems.append((path, _problem(error, field, words_at(fields, path), places.get(path, place))))
        elif path not in places:  # else it is written, but not readable: said already
            row = path[:-1]
            message = missing(field, f" in {words_at(fields, row)}")
            problems.append((path, Problem(places.get(row, place), message, "missing")))
    return problems


def check_columns(
    columns: Mapping[str, list[Plain]], fields: Mapping[str, FieldSchema], places: Mapping[Path, Place]
) -> list[Problem]:
    """Return every entry of a table that violates a range or a list of words; blanks are None."""
    rules: dict[str, Rules] = {
        name: {"type": "list", "schema": {**_single(fields[name], fields[name].type), "nullable": True}}
        for name in columns
    }
    return [
        _problem(error, fields[name], f"{name} in row {row + 1}", places[(name, row)])
        for error in _errors(columns, rules)
        for name, row in [error.document_path]
    ]


def _errors(plain: Mapping[str, Plain], rules: Mapping[str, Rules]) -> Iterable[ValidationError]:
    checker = _Checker(UnvalidatedSchema(rules), error_handler=_Listed())
    checker.validate(dict(plain), normalize=False)
    return _single_errors(checker.errors)


def missing(field: FieldSchema, where: str = "") -> str:
    """Return the message for a required field that is not there."""
    return f"{field.name} is missing{where}: {meaning_of(field)}"


def other_unit(number: float, field: FieldSchema) -> str:
    """Return ``: did you mean 130 (cm)?`` if the number fits the field in another common unit, or nothing."""
    meant = meant_in_another_unit(number, field)
    if meant is None:
        return f": this looks like {field.if_outside}" if field.if_outside else ""
    return f": did you mean {printed(meant)} ({field.printed_unit})?"


def meant_in_another_unit(number: float, field: FieldSchema) -> float | None:
    """Return the number that was probably meant, if it was given in another common unit."""
    low, high = field.plausible or (field.minimum or field.above or 0, field.maximum)
    if high is None or low / NEAR <= number <= high * NEAR:
        return None
    for factor in _OTHER_UNITS.get(field.unit, ()):
        meant = float(f"{number * factor:.6g}")
        if low <= meant <= high and _inside(meant, field):
            return meant
    return None


def _inside(number: float, field: FieldSchema) -> bool:
    return (
        (field.minimum is None or number >= field.minimum)
        and (field.above is None or number > field.above)
        and (field.maximum is None or number <= field.maximum)
    )


def _single(field: FieldSchema, kind: str) -> Rules:
    rules: Rules = {"type": _TYPES[kind]}
    for rule, limit in (("min", field.minimum), ("max", field.maximum), ("above", field.above)):
        if limit is not None:
            rules[rule] = limit
    if field.one_of:
        rules["allowed"] = list(field.one_of)
    elif kind == "word":
        rules["allowed"] = list(field.words)
    return rules


def _single_errors(errors: Iterable[ValidationError]) -> Iterable[ValidationError]:
    for error in errors:
        if error.is_group_error:
            yield from _single_errors(error.child_errors)
        else:
            yield error


def _problem(error: ValidationError, field: FieldSchema, what: str, place: Place) -> Problem:
    if error.rule == "allowed":
        kind = "word" if field.words else "range"
        return Problem(place, f"{what} {_not_allowed(error.value, field)}", kind)
    unit = f" {field.printed_unit}" if field.printed_unit else ""
    if error.rule == "max" and field.minimum == field.maximum:
        limit = f"must be {printed(error.constraint)}"
    else:
        bound = {"min": "at least", "max": "at most"}.get(error.rule, "above")
        limit = f"must be {bound} {printed(error.constraint)}{unit}"
    advice = other_unit(error.value, field)
    return Problem(place, f"{what} {limit}, not {printed(error.value)}{advice}", "range")


def _not_allowed(written: float | str, field: FieldSchema) -> str:
    if field.one_of:
        return f"must be {' or '.join(printed(each) for each in field.one_of)}, not {printed(float(written))}"
    words = list(field.words)
    hint = did_you_mean(str(written), words)
    if len(words) == 1:
        return f"must be {words[0]}, not {shown(str(written))}"
    if len(words) <= MOST_WORDS or not hint:
        return f"must be one of {', '.join(words)}, not {shown(str(written))}{hint}"
    return f"has no word {shown(str(written))}{hint}"
