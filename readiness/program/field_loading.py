"""Turns the description of a field, kind or file in schemas/ into a record, or says what is wrong with it."""

from collections.abc import Callable, Mapping
from pathlib import Path
from typing import Any

import yaml

from readiness.errors import CatalogueError
from readiness.program.field_schema import (
    NUMBERS,
    PROGRAM,
    TYPES,
    Assumed,
    FieldSchema,
    FileSchema,
    KindSchema,
    Plain,
)
from readiness.units import unit_ending

Description = Mapping[str, Any]

_FIELD_KEYS = {
    "type", "meaning", "nature", "min", "max", "above", "words", "to", "within", "owner", "columns",
    "required", "assumed", "critical", "example", "plausible", "one_of", "or_none", "if_outside",
}  # fmt: skip
_KIND_KEYS = {"kind", "title", "meaning", "fields", "sections", "lists"}
_FILE_KEYS = {"file", "title", "meaning", "root", "sections", "lists"}
_NATURES = {"choice", "claim", "record"}
_KNOWN = {"read", "memory", "practice", "derived", "fit", "mc"}
_WITH_UNIT = {*NUMBERS, "row", "rows", "scalar", "scalars"}
_IN_A_ROW = set(TYPES) - {"row", "rows", "points", "numbers", "dates", "texts", "words", "references"}
# last words of a name that look like a unit which readiness.units does not know
_UNIT_LIKE = {
    "inch", "inches", "in", "ft", "feet", "hours", "minutes", "seconds", "metres", "meters", "degrees", "sv",
    "mgy", "ugy", "hpa", "pa", "mbar", "mmhg", "c", "f", "k", "kev", "ev", "kv", "v", "ma", "a", "na", "g",
    "mg", "nc", "l",
}  # fmt: skip

_Loader = getattr(yaml, "CSafeLoader", yaml.SafeLoader)  # several times faster where the C library is there


def read_description(path: Path) -> Description:
    """Return one file of schemas/ as a mapping."""
    try:
        with path.open("rb") as stream:
            found = yaml.load(stream, Loader=_Loader)  # noqa: S506 - a safe loader either way
    except yaml.YAMLError as error:
        raise CatalogueError(f"{path.name}: {error}") from error
    if not isinstance(found, dict):
        raise CatalogueError(f"{path.name}: a mapping is expected")
    return found


def file_schema(name: str, description: Description) -> FileSchema:
    """Return what may be written in one file of a program folder."""
    _only(description, _FILE_KEYS, name)
    for key in ("file", "title", "meaning"):
        _text(description, key, name)
    name = name.removesuffix(".yaml") if name.endswith(".csv.yaml") else name
    if description["file"] != name:
        raise CatalogueError(f"{name}: describes {description['file']!r}; name it after that file")
    root = description.get("root", {})
    _only(root, _KIND_KEYS, f"{name} root")
    top = KindSchema(
        kind=root.get("kind", ""),
        title=description["title"],
        meaning=description["meaning"],
        file=name,
        owner="",
        key="",
        form="root",
        fields=field_schemas(root.get("fields", {}), root.get("kind", "")),
        sections=_inner(description, "sections", name, PROGRAM),
        lists=_inner(description, "lists", name, PROGRAM),
    )
    _no_key_twice(top)
    return FileSchema(name, top.title, top.meaning, top)


def field_schemas(descriptions: Mapping[str, Description], kind: str) -> dict[str, FieldSchema]:
    """Return the fields of one kind."""
    return {name: field_schema(kind, name, description) for name, description in descriptions.items()}


def field_schema(kind: str, name: str, description: Description, *, column: bool = False) -> FieldSchema:
    """Return one field, or raise CatalogueError if its description does not fit together."""
    where = f"{kind}.{name}"
    _field_form(name, description, where)
    result = FieldSchema(
        kind=kind,
        name=name,
        type=description.get("type", ""),
        meaning=" ".join(description["meaning"].split()),
        nature=description.get("nature", "record"),
        minimum=description.get("min"),
        maximum=description.get("max"),
        above=description.get("above"),
        words=_words(description.get("words", {}), where),
        to=description.get("to", ""),
        within=description.get("within", ""),
        owner=description.get("owner", False),
        columns={
            each: field_schema(where, each, inner, column=True)
            for each, inner in description.get("columns", {}).items()
        },
        required=description.get("required", False),
        assumed=_assumed(description.get("assumed"), where),
        critical=description.get("critical", False),
        example=description.get("example"),
        plausible=_pair(description.get("plausible"), where),
        one_of=tuple(description.get("one_of", ())),
        or_none=description.get("or_none", False),
        if_outside=description.get("if_outside", ""),
    )
    for check in _CHECKS:
        complaint = check(result)
        if complaint:
            raise CatalogueError(f"{where}: {complaint}")
    if column and result.type not in _IN_A_ROW | {"scalars"}:
        raise CatalogueError(f"{where}: a column cannot be of type {result.type!r}")
    return result


def _field_form(name: str, description: Description, where: str) -> None:
    if not isinstance(name, str) or not name.replace("_", "a").isalnum() or name != name.lower():
        raise CatalogueError(f"{where}: a name has small letters, digits and underscores")
    _only(description, _FIELD_KEYS, where)
    _text(description, "meaning", where)


def _inner(description: Description, form: str, file: str, owner: str) -> dict[str, KindSchema]:
    found = {}
    for key, inner in description.get(form, {}).items():
        where = f"{file} {key}"
        _only(inner, _KIND_KEYS, where)
        for needed in ("kind", "title", "meaning"):
            _text(inner, needed, where)
        kind = inner["kind"]
        found[key] = KindSchema(
            kind=kind,
            title=inner["title"],
            meaning=inner["meaning"],
            file=file,
            owner=owner,
            key=key,
            form="section" if form == "sections" else "list",
            fields=field_schemas(inner.get("fields", {}), kind),
            sections=_inner(inner, "sections", file, kind),
            lists=_inner(inner, "lists", file, kind),
        )
        _no_key_twice(found[key])
    return found


def _no_key_twice(kind: KindSchema) -> None:
    if "id" in kind.fields:
        raise CatalogueError(f"{kind.kind}: id is understood and is not described again")
    for key in kind.keys:
        if kind.keys.count(key) > 1:
            raise CatalogueError(f"{kind.file} {kind.key or 'top'}: {key!r} is described twice")
    for each in kind.fields.values():
        if each.within and each.within not in kind.fields:
            raise CatalogueError(f"{each.value_name}: there is no field {each.within!r} beside it")


def _only(description: Description, allowed: set[str], where: str) -> None:
    if not isinstance(description, dict):
        raise CatalogueError(f"{where}: a mapping is expected")
    unknown = [str(key) for key in description if key not in allowed]
    if unknown:
        raise CatalogueError(f"{where}: unknown key {unknown[0]!r}")


def _text(description: Description, key: str, where: str) -> None:
    found = description.get(key)
    if not isinstance(found, str) or not found.strip():
        raise CatalogueError(f"{where}: {key} is missing")


def _words(found: Any, where: str) -> dict[str, str]:
    words = found if isinstance(found, dict) else dict.fromkeys(found, "")
    if not all(isinstance(word, str) and isinstance(meaning, str) for word, meaning in words.items()):
        raise CatalogueError(f"{where}: every allowed word must be a text; put yes, no, on and off in quotes")
    return words


def _pair(found: Any, where: str) -> tuple[float, float] | None:
    if found is None:
        return None
    if not isinstance(found, list) or len(found) != 2 or not found[0] < found[1]:
        raise CatalogueError(f"{where}: plausible is [low, high]")
    return (found[0], found[1])


def _assumed(found: Any, where: str) -> Assumed | None:
    if found is None:
        return None
    if not isinstance(found, dict) or set(found) != {"value", "source", "at", "known"}:
        raise CatalogueError(f"{where}: assumed holds value, source, at and known")
    if found["known"] not in _KNOWN:
        raise CatalogueError(f"{where}: {found['known']!r} does not say how the assumed value is known")
    value: Plain = found["value"]
    return Assumed(value, found["source"], found["at"], found["known"])


def _right_type(field: FieldSchema) -> str:
    if field.type not in TYPES:
        return f"unknown type {field.type!r}"
    if field.nature not in _NATURES:
        return f"unknown nature {field.nature!r}"
    return ""


def _right_unit(field: FieldSchema) -> str:
    last = field.name.rsplit("_", 1)[-1]
    if field.type in NUMBERS and not field.unit and "_" in field.name and last in _UNIT_LIKE:
        return f"the unit {last!r} at the end of its name is not known"
    if field.type not in _WITH_UNIT and unit_ending(field.name):
        return f"a {field.type} has no unit, but its name ends with {field.unit!r}"
    return ""


def _right_range(field: FieldSchema) -> str:
    limits = (field.minimum, field.maximum, field.above, field.plausible, field.one_of or None)
    if field.type not in NUMBERS:
        return "only numbers have a range" if any(each is not None for each in limits) else ""
    low = max((each for each in (field.minimum, field.above) if each is not None), default=float("-inf"))
    high = field.maximum if field.maximum is not None else float("inf")
    if not low < high and not (field.minimum == field.maximum is not None):
        return "its smallest value is not below its largest"
    if field.plausible and not low <= field.plausible[0] < field.plausible[1] <= high:
        return "its plausible range reaches beyond its allowed range"
    return ""


def _right_words(field: FieldSchema) -> str:
    if field.type in {"word", "words"} and not field.words:
        return "the allowed words are missing"
    if field.type not in {"word", "words"} and field.words:
        return f"a {field.type} has no list of allowed words"
    return ""


def _right_reference(field: FieldSchema) -> str:
    refers = field.type in {"reference", "references"}
    if refers and not field.to:
        return "it does not say what it refers to"
    if not refers and (field.to or field.within or field.owner or field.or_none):
        return "only a reference has to, within, owner or or_none"
    if field.owner and field.type == "references":
        return "one item cannot have several owners of a kind"
    return ""


def _right_columns(field: FieldSchema) -> str:
    if (field.type in {"row", "rows"}) != bool(field.columns):
        return "a row has columns, and nothing else has"
    return ""


_CHECKS: tuple[Callable[[FieldSchema], str], ...] = (
    _right_type,
    _right_unit,
    _right_range,
    _right_words,
    _right_reference,
    _right_columns,
)
