"""The program as typed items: what every later layer reads."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from datetime import date
from functools import cached_property

from readiness.errors import Place
from readiness.quantities import Table

FieldValue = (
    float | int | str | bool | date | Table | tuple[str, ...] | tuple[float, ...] | tuple[date, ...]
    | tuple[tuple[float, float], ...]
)


@dataclass(frozen=True)
class Stated:
    """One field as the department wrote it, typed, with its place."""

    value: FieldValue
    place: Place


@dataclass(frozen=True)
class Item:
    """
    A thing described in the program folder.

    Attributes:
        kind: What it is (room, machine, beam, ...), as named in schemas/fields.
        id: Unique within its kind; a nested item's id starts with its owner's ("linac-1/e6").
        fields: Field name without the kind -> what was stated. Absent means unknown.
        owners: Kind -> id of the items it belongs to directly (a beam its machine).
        place: Where it begins.
    """

    kind: str
    id: str
    fields: Mapping[str, Stated]
    owners: Mapping[str, str]
    place: Place

    def get(self, name: str) -> FieldValue | None:
        """Return a field's value, or None if it was not stated."""
        stated = self.fields.get(name)
        return None if stated is None else stated.value


@dataclass(frozen=True)
class InputFile:
    """One file of the program folder as it was read."""

    name: str
    sha256: str
    size: int


@dataclass(frozen=True)
class Program:
    """
    Everything that a program folder says.

    Attributes:
        items: All items in the order of their files; the program itself is the item of kind ``program``.
        known_lists: (kind, owner id) of each list that is present, even empty; owner "program" at the top.
        files: Every file read, with its hash.
        texts: (document number, part) -> the department's own wording (Markdown).
        contents: Bytes of every file except evidence, by name; what a binder carries with it.
    """

    items: tuple[Item, ...]
    known_lists: frozenset[tuple[str, str]]
    files: tuple[InputFile, ...]
    texts: Mapping[tuple[str, str], str] = field(default_factory=dict)
    contents: Mapping[str, bytes] = field(default_factory=dict)

    @cached_property
    def by_kind(self) -> Mapping[str, tuple[Item, ...]]:
        """Return the items of each kind in file order."""
        kinds: dict[str, list[Item]] = {}
        for item in self.items:
            kinds.setdefault(item.kind, []).append(item)
        return {kind: tuple(items) for kind, items in kinds.items()}

    @cached_property
    def _by_key(self) -> Mapping[tuple[str, str], Item]:
        return {(item.kind, item.id): item for item in self.items}

    def find(self, kind: str, item_id: str) -> Item | None:
        """Return one item, or None."""
        return self._by_key.get((kind, item_id))

    def of_kind(self, kind: str) -> Iterator[Item]:
        """Yield the items of a kind in file order."""
        yield from self.by_kind.get(kind, ())
