"""JSON Schemas of the YAML files, for editors: they complete keys and words and mark what is wrong."""

from collections.abc import Mapping
from typing import Any

from readiness.program.field_notes import field_note
from readiness.program.field_schema import FieldSchema, FileSchema, KindSchema

Schema = dict[str, Any]

DIALECT = "http://json-schema.org/draft-07/schema#"  # what YAML editors understand best
ID = {
    "type": "string",
    "pattern": "^[A-Za-z0-9][A-Za-z0-9._-]{0,59}$",
    "description": "Short name of its own: letters, digits, - _ and .",
}
_DATE = {"type": "string", "format": "date", "pattern": "^[0-9]{4}-[0-9]{2}-[0-9]{2}$"}
_YES_OR_NO = {"enum": [True, False, "yes", "no"]}  # editors read YAML 1.2, in which yes is a text
_SINGLE: Mapping[str, Schema] = {
    "number": {"type": "number"},
    "whole number": {"type": "integer"},
    "yes or no": _YES_OR_NO,
    "date": _DATE,
    "scalar": {"type": ["number", "boolean", "string"]},
}
_LISTS = {
    "texts": "text",
    "words": "word",
    "numbers": "number",
    "dates": "date",
    "references": "reference",
    "scalars": "scalar",
}


def editor_schema(file: FileSchema) -> Schema:
    """Return the JSON Schema of one file."""
    return {"$schema": DIALECT, "title": file.title, **kind_schema(file.top)}


def kind_schema(kind: KindSchema) -> Schema:
    """Return the JSON Schema of one entry of a kind, with everything written inside it."""
    inner: dict[str, Schema] = {key: kind_schema(section) for key, section in kind.sections.items()}
    for key, listed in kind.lists.items():
        inner[key] = {"type": "array", "description": listed.meaning, "items": kind_schema(listed)}
    required = [name for name, field in kind.fields.items() if field.required]
    if kind.form == "list":
        inner["id"] = ID
        required.insert(0, "id")
    return {**_mapping(kind.fields, inner, required), "description": kind.meaning}


def field_rules(field: FieldSchema) -> Schema:
    """Return the JSON Schema of one field."""
    if field.type == "row":
        rules = _columns(field)
    elif field.type == "rows":
        rules = {"type": "array", "items": _columns(field)}
    elif field.type == "points":
        point = {"type": "array", "minItems": 2, "maxItems": 2, "items": _one(field, "number")}
        rules = {"type": "array", "items": point}
    elif field.type in _LISTS:
        rules = {"type": "array", "items": _one(field, _LISTS[field.type])}
    else:
        rules = _one(field, field.type)
    return {**rules, "description": f"{field.meaning} [{field_note(field)}]"}


def _columns(field: FieldSchema) -> Schema:
    required = [name for name, column in field.columns.items() if column.required]
    return _mapping(field.columns, {}, required)


def _mapping(fields: Mapping[str, FieldSchema], inner: Mapping[str, Schema], required: list[str]) -> Schema:
    properties = {**{name: field_rules(field) for name, field in fields.items()}, **inner}
    return {"type": "object", "properties": properties, "required": required, "additionalProperties": False}


def _one(field: FieldSchema, kind: str) -> Schema:
    rules = dict(_SINGLE.get(kind, {"type": "string"}))
    limits = (("minimum", field.minimum), ("maximum", field.maximum), ("exclusiveMinimum", field.above))
    rules.update({name: limit for name, limit in limits if limit is not None})
    if field.one_of or kind == "word":
        rules["enum"] = list(field.one_of or field.words)
    return rules
