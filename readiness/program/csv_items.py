"""CSV files become items: a measurement with its header and readings, or the dates of tasks, one a row."""

from collections.abc import Mapping, Sequence
from pathlib import PurePosixPath

from readiness.errors import Place
from readiness.program import nodes
from readiness.program.entries import EntryReader, Plain, Sink, Use
from readiness.program.entry_words import Path, meaning_of, unknown_key
from readiness.program.field_schema import PROGRAM, FieldSchema, KindSchema
from readiness.program.items import Item, Stated
from readiness.program.limits import check_columns, check_limits
from readiness.program.measurement_kinds import MeasurementKind, measurement_kind, measurement_kinds
from readiness.program.patient_identifiers import identifier_problems
from readiness.program.typed import field_value, read_id, table_cell
from readiness.program.wording import did_you_mean, shown
from readiness.quantities import Table

MEASUREMENT = "measurement"
NONE = "none"  # written where nothing was in place
TABLE = "table"  # the field of a measurement that holds its readings


def read_measurement(csv: nodes.CsvText, sink: Sink) -> Item | None:
    """
    Return one measurement; None if its kind is not known.

    The item's fields are those of the header and ``table``, the readings under all columns that the kind
    describes, blank where nothing was read. It belongs to everything that its header names.
    """
    kind = _kind(csv, sink)
    described = (kind.header, kind.columns) if kind else ({}, {})
    identifying = identifier_problems(csv, *described)
    sink.problems.extend(identifying)
    if kind is None or identifying:  # what else is wrong would repeat what must not be repeated
        return None
    stem = PurePosixPath(csv.place.file).stem
    item_id = read_id(nodes.Scalar(stem, csv.place), "name of a measurement file", sink) or stem
    header = nodes.Mapping(csv.header, csv.place)
    reader = EntryReader(kind.header, sink)
    plain = reader.read(header)
    found = check_limits(plain, kind.header, reader.places, csv.place)
    sink.problems.extend(problem for _, problem in found)
    wrong = {path[0] for path, _ in found}
    fields = {
        name: Stated(field_value(kind.header[name], value), reader.places[(name,)])
        for name, value in plain.items()
        if name not in wrong
    }
    columns = _read_columns(csv, kind.columns, sink)
    if len(csv.rows) < kind.min_rows:
        message = f"too few rows of readings, {len(csv.rows)}: {kind.kind} needs {kind.min_rows} or more"
        sink.add(csv.place, message, "missing")
    fields[TABLE] = Stated(_table(kind.columns, columns, len(csv.rows)), csv.place)
    named = {
        field.to: str(fields[name].value)
        for name, field in kind.header.items()
        if field.type == "reference" and name in fields and fields[name].value != NONE
    }
    return Item(MEASUREMENT, item_id, fields, {**named, PROGRAM: PROGRAM}, csv.place)


def read_progress(csv: nodes.CsvText, kind: KindSchema, sink: Sink) -> list[Item]:
    """Return one item a row; the first described column is its id."""
    for key, _ in csv.header:
        sink.add(key.place, f"{shown(key.text)} is not known: this file has no header lines", "unknown-key")
    columns = _read_columns(csv, kind.fields, sink)
    named = {column.text: at for at, column in enumerate(csv.columns)}
    identity = next(iter(kind.fields))
    if identity not in named:
        return []
    items = []
    for number, row in enumerate(csv.rows):
        entry = row[named[identity]]
        item_id = read_id(entry, f"{identity} in row {number + 1}", sink) if entry.text else None
        fields = {
            name: Stated(field_value(kind.fields[name], values[number]), row[named[name]].place)
            for name, values in columns.items()
            if values[number] is not None
        }
        if item_id is not None:
            items.append(Item(kind.kind, item_id, fields, {PROGRAM: PROGRAM}, entry.place))
    return items


def _kind(csv: nodes.CsvText, sink: Sink) -> MeasurementKind | None:
    known = measurement_kinds()
    written = next((value for key, value in csv.header if key.text == "kind"), None)
    if written is None:
        message = f'the header has no line "# kind: ...": say what was measured, one of {", ".join(known)}'
        sink.add(csv.place, message, "missing")
        return None
    if written.text not in known:
        hint = did_you_mean(written.text, known) or f": one of {', '.join(known)}"
        sink.add(written.place, f"kind of measurement {shown(written.text)} is not known{hint}", "word")
        return None
    return measurement_kind(written.text)


def _read_columns(
    csv: nodes.CsvText, fields: Mapping[str, FieldSchema], sink: Sink
) -> dict[str, list[Plain | None]]:
    """Return the readings of each known column; None where nothing readable is written."""
    for column in csv.columns:
        if column.text not in fields:
            sink.add(column.place, unknown_key(column.text, fields, " as a column"), "unknown-column")
    places: dict[Path, Place] = {}
    found: dict[str, list[Plain | None]] = {}
    reader = EntryReader(fields, sink)
    for name, field in fields.items():
        at = next((index for index, column in enumerate(csv.columns) if column.text == name), None)
        if at is not None:
            entries = [row[at] for row in csv.rows]
            places.update({(name, row): entry.place for row, entry in enumerate(entries)})
            found[name] = _read_column(entries, field, reader, sink)
        elif field.required:
            place = csv.columns[0].place if csv.columns else csv.place
            sink.add(place, f"column {name} is missing: {meaning_of(field)}", "missing")
    sink.problems.extend(check_columns(found, fields, places))
    return found


def _read_column(
    entries: Sequence[nodes.Scalar], field: FieldSchema, reader: EntryReader, sink: Sink
) -> list[Plain | None]:
    values: list[Plain | None] = []
    for row, entry in enumerate(entries):
        what = f"{field.name} in row {row + 1}"
        blank = not entry.text.strip()
        value = None if blank else reader.scalar(entry, field, (field.name, row), what)
        values.append(value)
        if field.to and value is not None and not (field.or_none and value == "none"):
            sink.uses.append(Use(field.to, str(value), str(value), what, entry.place))
        if blank and field.required:
            sink.add(entry.place, f"{what} is empty: {meaning_of(field)}", "empty")
    return values


def _table(fields: Mapping[str, FieldSchema], columns: Mapping[str, list[Plain | None]], rows: int) -> Table:
    blank = [None] * rows
    entries = [columns.get(name, blank) for name in fields]
    return Table.of(tuple(fields), [[table_cell(column[row]) for column in entries] for row in range(rows)])
