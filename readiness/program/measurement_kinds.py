"""What a measurement file of each kind must hold: schemas/measurements/*.yaml as frozen records."""

from collections.abc import Mapping
from dataclasses import dataclass, replace
from functools import cache
from pathlib import Path

from readiness.errors import CatalogueError
from readiness.program.field_loading import Description, field_schemas, read_description
from readiness.program.field_schema import FieldSchema
from readiness.program.fields import Schemas, check_references, schemas
from readiness.resources import schema_file

_OPTIONAL_KEYS: Mapping[str, tuple[str, ...]] = {"outdated_by": (), "instruments": ()}
_NEEDED_KEYS = {"kind", "title", "meaning", "attaches_to", "agrees_on", "min_rows", "header", "columns"}
_KEYS = _NEEDED_KEYS | set(_OPTIONAL_KEYS)
_COLUMN_TYPES = {"text", "word", "number", "whole number", "date", "yes or no", "reference"}


@dataclass(frozen=True)
class MeasurementKind:
    """
    One kind of measurement file.

    Attributes:
        kind: Word in the header of the CSV file.
        attaches_to: Kind of item whose claims it replaces.
        agrees_on: Header keys that must agree with that item's choices before it attaches.
        outdated_by: Dates of the program (value names) after which a measurement no longer counts.
        instruments: Types of instrument that can measure it; any, if none is named.
        min_rows: Fewest rows with which the file can be used at all.
        header: Key -> field, in the order in which people write them.
        columns: Name -> field.
    """

    kind: str
    title: str
    meaning: str
    attaches_to: str
    agrees_on: tuple[str, ...]
    outdated_by: tuple[str, ...]
    instruments: tuple[str, ...]
    min_rows: int
    header: Mapping[str, FieldSchema]
    columns: Mapping[str, FieldSchema]


def measurement_kinds() -> tuple[str, ...]:
    """Return the names of all kinds of measurement file that ship with the tool."""
    return tuple(path.stem for path in sorted(schema_file("measurements").glob("*.yaml")))


@cache
def measurement_kind(kind: str) -> MeasurementKind:
    """Return one kind, read when it is first asked for."""
    return load_measurement_kind(schema_file("measurements", f"{kind}.yaml"), schemas())


def load_measurement_kind(path: Path, known: Schemas) -> MeasurementKind:
    """Return the kind described in a file; raise CatalogueError if the description does not fit together."""
    description = read_description(path)
    description = {**_OPTIONAL_KEYS, **description}
    unknown = set(description) ^ _KEYS
    if unknown:
        raise CatalogueError(f"{path.name}: {sorted(unknown)[0]} is missing or unknown")
    if description["kind"] != path.stem:
        raise CatalogueError(f"{path.name}: describes {description['kind']!r}; name it after that kind")
    result = MeasurementKind(
        kind=path.stem,
        title=description["title"],
        meaning=" ".join(description["meaning"].split()),
        attaches_to=description["attaches_to"],
        agrees_on=tuple(description["agrees_on"]),
        outdated_by=tuple(description["outdated_by"]),
        instruments=tuple(description["instruments"]),
        min_rows=description["min_rows"],
        header=_fields(description["header"], known),
        columns=_fields(description["columns"], known),
    )
    _check(result, path.name, known)
    return result


def _fields(descriptions: Mapping[str, Description], known: Schemas) -> dict[str, FieldSchema]:
    fields = field_schemas(descriptions, "measurement")
    return {name: _within_its_owner(field, fields, known) for name, field in fields.items()}


def _within_its_owner(field: FieldSchema, fields: Mapping[str, FieldSchema], known: Schemas) -> FieldSchema:
    """Return a reference to a nested kind with the neighbour that names the owner (beam: machine)."""
    target = known.kinds.get(field.to)
    if target is None or field.within:
        return field
    owners = [name for name, other in fields.items() if other.to == target.owner != "program"]
    return replace(field, within=owners[0]) if owners else field


def _check(kind: MeasurementKind, where: str, known: Schemas) -> None:
    fields = (*kind.header.values(), *kind.columns.values())
    check_references(fields, known)
    for field in fields:
        if field.type not in _COLUMN_TYPES:
            raise CatalogueError(f"{where}: {field.name} cannot be of type {field.type!r}")
    if kind.attaches_to not in known.kinds and kind.attaches_to != "arrangement":
        raise CatalogueError(f"{where}: attaches to {kind.attaches_to!r}, which does not exist")
    for name in kind.outdated_by:
        dated = known.field(name)
        if dated is None or dated.type != "date":
            raise CatalogueError(f"{where}: outdated by {name!r}, which is no date of the program folder")
    type_of_instrument = known.field("instrument.type")
    types = type_of_instrument.words if type_of_instrument is not None else ()
    unknown = [name for name in kind.instruments if name not in types]
    if unknown:
        raise CatalogueError(f"{where}: {unknown[0]!r} is no type of instrument")
    missing = [name for name in kind.agrees_on if name not in kind.header]
    if missing:
        raise CatalogueError(f"{where}: agrees on {missing[0]!r}, which the header does not hold")
