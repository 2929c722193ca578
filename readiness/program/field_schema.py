"""One field, one kind and one file of a program folder, as schemas/fields/ describes them."""

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from functools import cached_property

from readiness.units import unit_ending, unit_of, words_of

PROGRAM = "program"  # kind and id of the item that everything belongs to

Plain = float | int | str | bool | None

NUMBERS = ("number", "whole number", "numbers", "points")
TYPES = (
    "text", "texts", "number", "numbers", "whole number", "yes or no", "date", "dates", "word", "words",
    "points", "reference", "references", "row", "rows", "file", "scalar", "scalars",
)  # fmt: skip


@dataclass(frozen=True)
class Assumed:
    """What is used when nothing is stated; it never makes a rule met."""

    value: Plain
    source: str
    at: str
    known: str


@dataclass(frozen=True, eq=False)  # there is one of each, so that what is made of it can be kept
class FieldSchema:
    """
    One field of a kind, one column of a table, or one line of a measurement's header.

    Attributes:
        kind: Kind of the item it is written in.
        name: As written in the file, with its unit ending.
        type: One of TYPES.
        words: Allowed word -> its meaning, which may be "".
        to: Kind that a reference points to; "any" for every item; "" if it is no reference.
        within: Name of the neighbouring field that names the owner of what is referred to, or "".
        one_of: The only numbers allowed; empty if there is no such list.
        or_none: The word none may stand for "there is none".
        if_outside: What a number beyond its limits makes us suspect.
    """

    kind: str
    name: str
    type: str
    meaning: str
    nature: str = "record"
    minimum: float | None = None
    maximum: float | None = None
    above: float | None = None
    words: Mapping[str, str] = field(default_factory=dict)
    to: str = ""
    within: str = ""
    owner: bool = False
    columns: Mapping[str, "FieldSchema"] = field(default_factory=dict)
    required: bool = False
    assumed: Assumed | None = None
    critical: bool = False
    example: object = None
    plausible: tuple[float, float] | None = None
    one_of: tuple[float, ...] = ()
    or_none: bool = False
    if_outside: str = ""

    @property
    def value_name(self) -> str:
        """Return the name of the value that the field gives: kind.field."""
        return f"{self.kind}.{self.name}"

    @cached_property
    def unit(self) -> str:
        """Return the unit ending of the name ("cm"), or "" where there is none."""
        return unit_ending(self.name)

    @cached_property
    def printed_unit(self) -> str:
        """Return the unit as printed ("°"), or ""."""
        return unit_of(self.name)

    @cached_property
    def in_words(self) -> str:
        """Return the name in the user's words, without its unit."""
        return words_of(self.name)


@dataclass(frozen=True)
class KindSchema:
    """
    A kind of item: its fields and what is written inside it.

    Attributes:
        owner: Kind of the entry it is written in; "program" at the top of a file, "" for the program itself.
        key: Key it is written under; "" for the program itself.
        form: "root", "section" (one mapping) or "list" (any number of entries with ids).
        sections: Key -> kind written inside it, once.
        lists: Key -> kind written inside it, any number of times.
    """

    kind: str
    title: str
    meaning: str
    file: str
    owner: str
    key: str
    form: str
    fields: Mapping[str, FieldSchema]
    sections: Mapping[str, "KindSchema"]
    lists: Mapping[str, "KindSchema"]

    @property
    def keys(self) -> tuple[str, ...]:
        """Return every key that may be written in an entry of this kind."""
        own = ("id",) if self.form == "list" else ()
        return (*own, *self.fields, *self.sections, *self.lists)

    def with_inner(self) -> Iterator["KindSchema"]:
        """Yield this kind and every kind written inside it."""
        yield self
        for each in (*self.sections.values(), *self.lists.values()):
            yield from each.with_inner()


@dataclass(frozen=True)
class FileSchema:
    """One YAML file of a program folder; ``top`` holds what may be written at its top."""

    file: str
    title: str
    meaning: str
    top: KindSchema
