"""The tree of a file and the schema of that file become typed items, each part with its place."""

from collections.abc import Mapping
from datetime import date

from readiness.errors import Place, Problem
from readiness.program import nodes, scalars
from readiness.program.entries import EntryReader, Plain, Sink
from readiness.program.entry_words import in_words, is_blank
from readiness.program.field_schema import PROGRAM, FieldSchema, FileSchema, KindSchema
from readiness.program.fields import Schemas
from readiness.program.items import FieldValue, Item, Stated
from readiness.program.limits import check_limits
from readiness.quantities import Scalar, Table

ID_LENGTH = 60  # characters
_ID_CHARACTERS = frozenset("abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789-_.")


class FileReader:
    """
    Reads the trees of files, one after the other.

    Attributes:
        schemas: All that may be written.
        sink: Takes problems and names that must exist.
        items: What was described, owners before what belongs to them.
        known_lists: (kind, owner id) of each list that is present, even empty.
        incomplete: (kind, id) of each item of which something was written that could not be read.
    """

    def __init__(self, schemas: Schemas, sink: Sink) -> None:
        """Prepare to read."""
        self.schemas = schemas
        self.sink = sink
        self.items: list[Item] = []
        self.known_lists: set[tuple[str, str]] = set()
        self.incomplete: set[tuple[str, str]] = set()

    def read(self, node: nodes.Node | None, file: FileSchema) -> None:
        """Read one file; None is a file in which nothing is written."""
        place = Place(file.file) if node is None else node.place
        if node is None:
            node = nodes.Mapping((), place)
        if not isinstance(node, nodes.Mapping):
            self.sink.add(place, f"{file.file} must be a mapping (key: value), not {in_words(node)}", "type")
            return
        self._entry(node, file.top, PROGRAM, {})

    def _entry(self, node: nodes.Mapping, kind: KindSchema, item_id: str, owners: dict[str, str]) -> None:
        reader = EntryReader(kind.fields, self.sink, self._elsewhere)
        own = ("id",) if kind.form == "list" else ()
        plain = reader.read(node, (*own, *kind.sections, *kind.lists))
        found = check_limits(plain, kind.fields, reader.places, node.place)
        self.sink.problems.extend(problem for _, problem in found)
        wrong = {path[0] for path, _ in found}
        stated = {
            name: Stated(field_value(kind.fields[name], value), reader.places[(name,)])
            for name, value in plain.items()
            if name not in wrong
        }
        owning = {kind.fields[name].to: str(plain[name]) for name in stated if kind.fields[name].owner}
        if any((name,) in reader.places and name not in stated for name in kind.fields):
            self.incomplete.add((kind.kind, item_id))
        if kind.kind:  # the top of a file that describes no item itself has none
            self.items.append(Item(kind.kind, item_id, stated, {**owners, **owning}, node.place))
        inside = {kind.kind or PROGRAM: item_id}
        for key, value in node.entries:
            if key.text in kind.sections:
                self._section(value, kind.sections[key.text], item_id, inside)
            elif key.text in kind.lists:
                self._list(value, kind.lists[key.text], item_id, inside)

    def _section(self, node: nodes.Node, kind: KindSchema, owner_id: str, owners: dict[str, str]) -> None:
        if isinstance(node, nodes.Mapping):
            item_id = kind.kind if owner_id == PROGRAM else f"{owner_id}/{kind.kind}"
            self._entry(node, kind, item_id, owners)
        elif is_blank(node):
            message = f"{kind.key} is empty: write its fields below it, or leave it out if nothing is known"
            self.sink.add(node.place, message, "empty")
        else:
            message = f"{kind.key} must be a mapping (key: value), not {in_words(node)}"
            self.sink.add(node.place, message, "type")

    def _list(self, node: nodes.Node, kind: KindSchema, owner_id: str, owners: dict[str, str]) -> None:
        if is_blank(node):
            message = f"{kind.key} is empty: write [] if there are none, or leave it out if that is not known"
            self.sink.add(node.place, message, "empty")
        elif not isinstance(node, nodes.Sequence):
            message = f"{kind.key} must be a list, each entry beginning with - id: ..., not {in_words(node)}"
            self.sink.add(node.place, message, "type")
        else:
            self.known_lists.add((kind.kind, owner_id))
            for entry in node.entries:
                self._listed(entry, kind, owner_id, owners)

    def _listed(self, node: nodes.Node, kind: KindSchema, owner_id: str, owners: dict[str, str]) -> None:
        if not isinstance(node, nodes.Mapping):
            message = f"each entry of {kind.key} must be a mapping with an id, not {in_words(node)}"
            self.sink.add(node.place, message, "type")
            return
        written = node.get("id")
        if written is None:
            message = f"this {kind.title.lower()} has no id: write id: and a short name of its own"
            self.sink.add(node.place, message, "missing")
        item_id = None if written is None else read_id(written, f"id of this {kind.title.lower()}", self.sink)
        item_id = item_id or f"(line {node.place.line})"  # so that the rest is read all the same
        self._entry(node, kind, item_id if owner_id == PROGRAM else f"{owner_id}/{item_id}", owners)

    def _elsewhere(self, key: str) -> str:
        """Return where a key that is not known here would be read."""
        for kind in self.schemas.kinds.values():
            if key in kind.fields:
                return f": it belongs to {_where(kind)}"
            if key in kind.lists or key in kind.sections:
                return f": it is written inside {_where(kind)}"
        for file in self.schemas.files.values():
            if key in file.top.lists or key in file.top.sections:
                return f": it is written in {file.file}"
        return ""


def read_id(node: nodes.Node, what: str, sink: Sink) -> str | None:
    """Return an id, or None after saying what is wrong with it."""
    if not isinstance(node, nodes.Scalar):
        sink.add(node.place, f"{what} must be one word, not {in_words(node)}", "type")
        return None
    text, problem = scalars.read_text(nodes.Scalar(node.text, node.place, quoted=True), what=what)
    if problem is not None or text is None:
        sink.problems.append(problem or Problem(node.place, f"{what} is empty", "empty"))
        return None
    if not set(text) <= _ID_CHARACTERS or not text[0].isalnum() or len(text) > ID_LENGTH:
        allowed = f"letters, digits, - _ and . only, {ID_LENGTH} at most"
        message = f"{what} must have {allowed}, not {in_words(node)}"
        sink.add(node.place, message, "type")
        return None
    return text


def field_value(field: FieldSchema, plain: Plain) -> FieldValue:
    """Return plain data as an item holds it: lists as tuples, rows as tables."""
    if field.type == "row":
        return _table(field.columns, [plain])
    if field.type == "rows":
        return _table(field.columns, plain)
    if field.type == "points":
        return tuple((x, y) for x, y in plain)
    value: FieldValue = tuple(plain) if isinstance(plain, list) else plain
    return value


def _table(columns: Mapping[str, FieldSchema], rows: list[dict[str, Plain]]) -> Table:
    """Return rows under all columns that may be written; what is not written is blank."""
    return Table.of(tuple(columns), [[table_cell(row.get(name)) for name in columns] for row in rows])


def table_cell(plain: Plain) -> Scalar:
    """Return an entry of a table: dates year-month-day, lists as JSON text."""
    if isinstance(plain, date):
        return plain.isoformat()
    if isinstance(plain, list):
        import json  # rarely needed, and reading must start fast

        return json.dumps([each.isoformat() if isinstance(each, date) else each for each in plain])
    cell: Scalar = plain
    return cell


def _where(kind: KindSchema) -> str:
    if kind.form == "root":
        return f"the top of {kind.file}"
    entry = "an entry of " if kind.form == "list" else ""
    return f"{entry}{kind.key} in {kind.file}"
