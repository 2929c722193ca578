"""
What can be written in a program folder: schemas/fields/*.yaml as frozen records with look-ups.

The format of those files stands in schemas/fields/README.md. Nothing about a field is said anywhere else:
reader, messages, starter, editor schema and values all ask here.
"""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache, cached_property
from pathlib import Path

from readiness.errors import CatalogueError
from readiness.program.field_loading import file_schema, read_description
from readiness.program.field_schema import PROGRAM, FieldSchema, FileSchema, KindSchema
from readiness.resources import schema_file

NOT_IN_A_FOLDER = frozenset({"any", "arrangement"})  # what a reference may name beside the described kinds


@dataclass(frozen=True)
class Schemas:
    """All fields of all files, with the look-ups that every other layer needs."""

    files: Mapping[str, FileSchema]

    @cached_property
    def kinds(self) -> Mapping[str, KindSchema]:
        """Return every kind by its name, in the order of the files."""
        return {
            kind.kind: kind for each in self.files.values() for kind in each.top.with_inner() if kind.kind
        }

    @cached_property
    def fields(self) -> Mapping[str, FieldSchema]:
        """Return every field by the name of its value, ``room.ceiling_height_cm``."""
        return {each.value_name: each for kind in self.kinds.values() for each in kind.fields.values()}

    def field(self, value_name: str) -> FieldSchema | None:
        """Return the field that gives a value, or None if no field does."""
        return self.fields.get(value_name)

    def owner_kinds(self, kind: str) -> tuple[str, ...]:
        """Return the kinds that an item of this kind belongs to directly, the one it is written in first."""
        schema = self.kinds[kind]
        written_in = (schema.owner,) if schema.owner else ()
        return written_in + tuple(each.to for each in schema.fields.values() if each.owner)

    def all_owner_kinds(self, kind: str) -> tuple[str, ...]:
        """Return the kinds that an item of this kind belongs to, also through others; the program is last."""
        found: list[str] = []
        waiting = list(self.owner_kinds(kind))
        while waiting:
            owner = waiting.pop(0)
            if owner not in found:
                found.append(owner)
                waiting.extend(self.owner_kinds(owner))
        return tuple(sorted(found, key=lambda each: each == PROGRAM))

    def lists_of(self, kind: str) -> tuple[str, ...]:
        """Return the kinds that are listed in an entry of this kind (of the program: in any file)."""
        return tuple(each.kind for each in self.kinds.values() if each.owner == kind and each.form == "list")

    def sections_of(self, kind: str) -> tuple[str, ...]:
        """Return the kinds that are written once in an entry of this kind (of the program: in any file)."""
        return tuple(
            each.kind for each in self.kinds.values() if each.owner == kind and each.form == "section"
        )

    def check(self) -> None:
        """Raise CatalogueError if a kind is described twice or a reference points to no kind."""
        described = [kind.kind for each in self.files.values() for kind in each.top.with_inner() if kind.kind]
        for kind in described:
            if described.count(kind) > 1:
                raise CatalogueError(f"kind {kind!r} is described {described.count(kind)} times")
        if PROGRAM not in self.kinds:
            raise CatalogueError("no file describes the program itself")
        for each in self.fields.values():
            check_references((each, *each.columns.values()), self)


def check_references(fields: tuple[FieldSchema, ...], known: Schemas) -> None:
    """Raise CatalogueError if one of the fields refers to a kind that does not exist."""
    for each in fields:
        if each.to and each.to not in known.kinds and each.to not in NOT_IN_A_FOLDER:
            raise CatalogueError(f"{each.value_name} refers to kind {each.to!r}, which does not exist")


@cache
def schemas() -> Schemas:
    """Return the fields that ship with the tool, read once."""
    return load_folder(schema_file("fields"))


def load_folder(folder: Path) -> Schemas:
    """Return the fields described in a folder; raise CatalogueError at the first wrong description."""
    loaded = [file_schema(path.name, read_description(path)) for path in sorted(folder.glob("*.yaml"))]
    loaded.sort(key=lambda each: (each.top.kind != PROGRAM, each.file))
    result = Schemas({each.file: each for each in loaded})
    result.check()
    return result
