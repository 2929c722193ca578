"""The JSON Schema of assessment.json, worked out from the records so that the two cannot drift apart."""

import dataclasses
import json
import types
import typing
from datetime import date
from typing import Any

from readiness.assessment.assessment import CONTRACT
from readiness.assessment.records import Assessment

_SCALARS: dict[Any, dict[str, Any]] = {
    str: {"type": "string"},
    bool: {"type": "boolean"},
    int: {"type": "integer"},
    float: {"type": "number"},
    Any: {},
}
_DATE = {
    "type": "object",
    "properties": {"date": {"type": "string", "format": "date"}},
    "required": ["date"],
    "additionalProperties": False,
}


def contract_schema() -> str:
    """Return the schema as text; the file schemas/assessment.schema.json holds the same."""
    definitions: dict[str, Any] = {}
    _of(Assessment, definitions)
    whole = definitions["Assessment"]
    whole["properties"] = {
        "caution": {"type": "string", "description": "Read this before any number."},
        "contract": {"const": CONTRACT},
        **whole["properties"],
    }
    whole["required"] = ["caution", "contract", *whole["required"]]
    schema = {
        "$schema": "https://json-schema.org/draft/2020-12/schema",
        "title": f"Assessment of a total skin electron program, contract {CONTRACT}",
        "$ref": "#/$defs/Assessment",
        "$defs": dict(sorted(definitions.items())),
    }
    return json.dumps(schema, indent=1, ensure_ascii=False) + "\n"


def _of(kind: Any, definitions: dict[str, Any]) -> dict[str, Any]:
    origin = typing.get_origin(kind)
    if kind in _SCALARS:
        return dict(_SCALARS[kind])
    if kind is date:
        return dict(_DATE)
    if origin in (typing.Union, types.UnionType):
        (inner,) = (each for each in typing.get_args(kind) if each is not type(None))
        return {"anyOf": [_of(inner, definitions), {"type": "null"}]}
    if origin is tuple:
        kinds = typing.get_args(kind)
        if len(kinds) == 2 and kinds[1] is Ellipsis:
            return {"type": "array", "items": _of(kinds[0], definitions)}
        entries = [_of(each, definitions) for each in kinds]
        return {"type": "array", "prefixItems": entries, "minItems": len(entries), "maxItems": len(entries)}
    return _record(kind, definitions)


def _record(kind: Any, definitions: dict[str, Any]) -> dict[str, Any]:
    name = kind.__name__
    if name not in definitions:
        definitions[name] = {}
        hints = typing.get_type_hints(kind)
        names = (
            [each.name for each in dataclasses.fields(kind)]
            if dataclasses.is_dataclass(kind)
            else kind._fields
        )
        definitions[name] = {
            "type": "object",
            "description": " ".join((kind.__doc__ or "").split("\n\n")[0].split()),
            "properties": {each: _of(hints[each], definitions) for each in names},
            "required": list(names),
            "additionalProperties": False,
        }
    return {"$ref": f"#/$defs/{name}"}
