"""
assessment.json: the assessment as plain data and back, byte for byte the same for the same assessment.

Its schema stands in schemas/assessment.schema.json; ``from_json(to_json(a)) == a``.
"""

import dataclasses
import json
import types
import typing
from datetime import date
from functools import cache
from typing import Any

from readiness.assessment.records import Assessment
from readiness.errors import UsageError
from readiness.quantities import Table

CAUTION = (
    "Planning aid. It does not replace measurement: a qualified medical physicist must confirm every number "
    "by measurement before it is used. Local regulation and licensed practice come first."
)
INVENTED = "All data of this department are invented for teaching; nothing here describes a real department."


def to_json(assessment: Assessment) -> str:
    """Return an assessment as JSON text with a caution at its head."""
    notes = [CAUTION, INVENTED] if assessment.invented else [CAUTION]
    data = {"caution": " ".join(notes), "contract": assessment.versions.contract, **plain(assessment)}
    return json.dumps(data, ensure_ascii=False, indent=1, allow_nan=False) + "\n"


def from_json(text: str) -> Assessment:
    """Return the assessment that a JSON text holds; raise UsageError if it is not one of ours."""
    try:
        data = json.loads(text)
        data.pop("caution")
        data.pop("contract")
        found = _built(Assessment, data)
    except (ValueError, KeyError, TypeError, AttributeError) as error:
        raise UsageError(f"this is not an assessment written by this tool: {error}") from error
    assert isinstance(found, Assessment)  # noqa: S101 - built as one
    return found


def plain(value: Any) -> Any:
    """Return a record as mappings, lists, numbers and words that JSON can hold."""
    if isinstance(value, Table):
        return {
            "columns": list(value.columns),
            "rows": [[plain(each) for each in row] for row in value.rows],
        }
    if dataclasses.is_dataclass(value) and not isinstance(value, type):
        return {each.name: plain(getattr(value, each.name)) for each in dataclasses.fields(value)}
    if isinstance(value, tuple) and hasattr(value, "_asdict"):
        return {key: plain(each) for key, each in value._asdict().items()}
    if isinstance(value, (tuple, list)):
        return [plain(each) for each in value]
    if isinstance(value, dict):
        return {str(key): plain(each) for key, each in value.items()}
    if isinstance(value, date):
        return {"date": value.isoformat()}
    if value is None or isinstance(value, (str, int, float, bool)):
        return value
    raise TypeError(f"{type(value).__name__} has no place in assessment.json")


@cache
def _fields_of(kind: type) -> dict[str, Any]:
    return typing.get_type_hints(kind)


def _built(kind: Any, data: Any) -> Any:
    origin = typing.get_origin(kind)
    if kind is Any:
        return _guessed(data)
    if data is None:
        return None
    if origin in (typing.Union, types.UnionType):
        return _built(next(each for each in typing.get_args(kind) if each is not type(None)), data)
    if origin is tuple:
        return _built_tuple(typing.get_args(kind), data)
    if dataclasses.is_dataclass(kind) or hasattr(kind, "_fields"):
        hints = _fields_of(kind)
        return kind(**{name: _built(hints[name], each) for name, each in data.items()})
    if kind is date:
        return date.fromisoformat(data["date"])
    if kind is float and isinstance(data, int) and not isinstance(data, bool):
        return float(data)
    return data


def _built_tuple(kinds: tuple[Any, ...], data: list[Any]) -> tuple[Any, ...]:
    if len(kinds) == 2 and kinds[1] is Ellipsis:
        return tuple(_built(kinds[0], each) for each in data)
    return tuple(_built(kind, each) for kind, each in zip(kinds, data, strict=True))


def _guessed(data: Any) -> Any:
    if isinstance(data, list):
        return tuple(_guessed(each) for each in data)
    if isinstance(data, dict):
        if data.keys() == {"date"}:
            return date.fromisoformat(data["date"])
        if data.keys() == {"columns", "rows"}:
            return Table(
                tuple(data["columns"]), tuple(tuple(_guessed(e) for e in row) for row in data["rows"])
            )
        return {key: _guessed(each) for key, each in data.items()}
    return data
