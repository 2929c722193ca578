"""
One written entry becomes plain data of the type that its field asks for.

Plain data is what numbers, texts, dates, lists and mappings can hold; ranges and allowed words are checked
afterwards (limits.py). Every part keeps its place, under the path that leads to it.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import Any

from readiness.errors import Place, Problem
from readiness.program import nodes, scalars
from readiness.program.entry_words import Path, in_words, is_blank, one, unknown_key, words_at
from readiness.program.field_schema import FieldSchema
from readiness.program.wording import LONGEST_SHOWN

Plain = Any  # what a YAML library would have loaded, had it known the field

# type of a list -> type of its entries
_ENTRIES = {
    "texts": "text",
    "words": "word",
    "numbers": "number",
    "dates": "date",
    "references": "reference",
    "scalars": "scalar",
}
_LIKE_TEXT = {"word", "reference", "file"}
_ROW = "a mapping (key: value)"
_POINT = "two numbers, [x, y]"


@dataclass(frozen=True)
class Use:
    """A place in the folder where an item or a file is named."""

    kind: str  # kind that the id must belong to, "any", or "file"
    name: str  # full id, or path
    written: str
    what: str
    place: Place


@dataclass
class Sink:
    """What reading leaves behind beside the data: problems, and names that must exist."""

    problems: list[Problem] = field(default_factory=list)
    uses: list[Use] = field(default_factory=list)

    def add(self, place: Place, message: str, kind: str) -> None:
        """Keep one problem."""
        self.problems.append(Problem(place, message, kind))


class EntryReader:
    """
    Reads the fields of one mapping.

    Attributes:
        fields: What may be written in it.
        sink: Takes problems and names that must exist.
        elsewhere: Says where a key that is not known here would be read, or "".
        places: Path -> place of everything that was written, readable or not.
    """

    def __init__(
        self, fields: Mapping[str, FieldSchema], sink: Sink, elsewhere: Callable[[str], str] | None = None
    ) -> None:
        """Prepare to read a mapping with these fields."""
        self.fields = fields
        self.sink = sink
        self.elsewhere = elsewhere or (lambda key: "")
        self.places: dict[Path, Place] = {}

    def read(self, node: nodes.Mapping, others: tuple[str, ...] = ()) -> dict[str, Plain]:
        """Return the fields written in a mapping; the other keys are somebody else's to read."""
        return self._mapping(node, self.fields, others, ())

    def _mapping(
        self, node: nodes.Mapping, fields: Mapping[str, FieldSchema], others: tuple[str, ...], path: Path
    ) -> dict[str, Plain]:
        plain: dict[str, Plain] = {}
        for key, value in node.entries:
            if key.text in fields:
                self.places[(*path, key.text)] = value.place
                found = self._entry(value, fields[key.text], (*path, key.text))
                if found is not None:
                    plain[key.text] = found
            elif key.text not in others:
                where = f" in {words_at(self.fields, path)}" if path else ""
                message = unknown_key(key.text, (*fields, *others), where, self.elsewhere(key.text))
                self.sink.add(key.place, message, "unknown-key")
        for name, found in plain.items():
            if fields[name].to:
                plain[name] = self.full_ids(fields[name], found, plain, (*path, name))
        return plain

    def _entry(self, node: nodes.Node, schema: FieldSchema, path: Path) -> Plain | None:
        if schema.type == "row":
            return self._row(node, schema, path)
        if schema.type == "points":
            return self._list(node, schema, path, self._point, "a list of points, each [x, y]")
        if schema.type == "rows":
            return self._list(node, schema, path, self._row, f"a list of rows, each {_ROW}")
        if schema.type in _ENTRIES:
            return self._list(node, schema, path, self.scalar, "a list")
        return self.scalar(node, schema, path)

    def _list(
        self,
        node: nodes.Node,
        schema: FieldSchema,
        path: Path,
        read: Callable[[nodes.Node, FieldSchema, Path], Plain | None],
        expected: str,
    ) -> Plain | None:
        if isinstance(node, nodes.Sequence):
            found = [read(each, schema, (*path, index)) for index, each in enumerate(node.entries)]
            return None if any(each is None for each in found) else found
        advice = ""
        if schema.type in _ENTRIES and isinstance(node, nodes.Scalar):
            advice = f": write [{node.text[:LONGEST_SHOWN]}], also for a single entry"
        return self._wrong_shape(node, path, expected, advice, ", [] if there are none")

    def _row(self, node: nodes.Node, schema: FieldSchema, path: Path) -> Plain | None:
        self.places[path] = node.place
        if isinstance(node, nodes.Mapping):
            return self._mapping(node, schema.columns, (), path)
        return self._wrong_shape(node, path, _ROW)

    def _point(self, node: nodes.Node, schema: FieldSchema, path: Path) -> Plain | None:
        self.places[path] = node.place
        if not isinstance(node, nodes.Sequence):
            return self._wrong_shape(node, path, _POINT)
        if len(node.entries) != 2:
            return self._wrong_shape(node, path, _POINT, f" of {len(node.entries)}")
        found = [self.scalar(each, schema, (*path, at)) for at, each in enumerate(node.entries)]
        return None if any(each is None for each in found) else found

    def scalar(self, node: nodes.Node, schema: FieldSchema, path: Path, what: str = "") -> Plain | None:
        """Return a single entry, called ``what`` in messages, or None after saying what is wrong with it."""
        self.places[path] = node.place
        kind = "number" if schema.type == "points" else _ENTRIES.get(schema.type, schema.type)
        if not isinstance(node, nodes.Scalar):
            return self._wrong_shape(node, path, one(kind, schema.unit))
        what = what or words_at(self.fields, path)
        if kind in {"number", "whole number"}:
            value, problem = scalars.READERS[kind](node, what=what, unit=schema.unit)
        elif kind in _LIKE_TEXT:  # an allowed word such as none needs no quotes
            quoted = nodes.Scalar(node.text.strip(), node.place, quoted=True)
            value, problem = scalars.read_text(quoted, what=what)
        else:
            value, problem = scalars.READERS[kind](node, what=what)
        if problem is not None:
            self.sink.problems.append(problem)
            return None
        if kind == "file":
            self.sink.uses.append(Use("file", str(value), str(value), what, node.place))
        return value

    def full_ids(self, schema: FieldSchema, value: Plain, plain: Mapping[str, Plain], path: Path) -> Plain:
        """Return the full ids of what is referred to (linac-1/e6), after noting that they must exist."""
        if isinstance(value, list):
            return [self._full_id(schema, each, plain, (*path, at)) for at, each in enumerate(value)]
        return self._full_id(schema, value, plain, path)

    def _full_id(self, schema: FieldSchema, written: str, plain: Mapping[str, Plain], path: Path) -> str:
        if schema.or_none and written == "none":
            return written
        what = words_at(self.fields, path)
        if not schema.within:
            self.sink.uses.append(Use(schema.to, written, written, what, self.places[path]))
            return written
        owner = plain.get(schema.within)
        if owner is not None:
            full = written if written.startswith(f"{owner}/") else f"{owner}/{written}"
            self.sink.uses.append(Use(schema.to, full, written, what, self.places[path]))
            return full
        beside = path[: path.index(schema.name)]
        if (*beside, schema.within) not in self.places:
            message = f"{what} needs {schema.within} beside it, to say whose it is"
            self.sink.add(self.places[path], message, "reference")
        return written

    def _wrong_shape(
        self, node: nodes.Node, path: Path, expected: str, advice: str = "", blank_advice: str = ""
    ) -> Plain | None:
        what = words_at(self.fields, path)
        if is_blank(node):
            unknown = ", or leave it out if it is not known"
            self.sink.add(node.place, f"{what} is empty: write {expected}{blank_advice}{unknown}", "empty")
        else:
            self.sink.add(node.place, f"{what} must be {expected}, not {in_words(node)}{advice}", "type")
        return None
