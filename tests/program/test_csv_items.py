"""A measurement file becomes one item, progress.csv one item a row."""

from datetime import date

import pytest

from readiness.errors import Place, ProgramProblems
from readiness.program.files import from_mapping
from readiness.program.items import Program
from readiness.program.reading import known_yaml, read_program

HEADER = {
    "kind": "dual-profile",
    "room": "vault-a",
    "machine": "linac-1",
    "beam": "e6",
    "degrader": "none",
    "side_deg": "90",
    "distance_cm": "400",
    "gap_cm": "0",
    "tilt_deg": "16",
    "medium": "air",
    "depth_mm": "0",
    "normalisation": "mid-height",
    "smoothing": "none",
    "detector": "film",
    "instrument": "film-1",
    "date": "2026-10-21",
}
ROWS = ["height_cm,relative_dose", "-60,0.97", "-40,0.98", "-20,0.99", "0,1", "20,0.99", "40,0.98", "60,0.97"]


def csv(rows: list[str] = ROWS, **header: str | None) -> str:
    """Return a profile with these header lines changed, or left out where they are None."""
    lines = [f"# {key}: {value}" for key, value in {**HEADER, **header}.items() if value is not None]
    return "\n".join([*lines, *rows]) + "\n"


def read(text: str, name: str = "measurements/pilot.csv") -> Program:
    files = {"program.yaml": b"format: 1\n", name: text.encode()}
    contents, found = from_mapping(files, {}, known_yaml())
    return read_program(contents, found)


def told(text: str, name: str = "measurements/pilot.csv") -> list[str]:
    with pytest.raises(ProgramProblems) as refused:
        read(text, name)
    return [f"{problem.place.line}: {problem.message}" for problem in refused.value.problems]


def test_a_measurement_is_one_item():
    """Its id is the name of the file, its fields are the header's, and its readings are a table."""
    item = read(csv()).find("measurement", "pilot")
    assert item is not None
    assert item.get("kind") == "dual-profile"
    assert item.get("beam") == "linac-1/e6"
    assert item.get("date") == date(2026, 10, 21)
    assert item.get("distance_cm") == 400.0
    assert item.owners["program"] == "program"
    assert item.fields["distance_cm"].place == Place("measurements/pilot.csv", 7, 16)


def test_a_measurement_belongs_to_what_it_was_made_with():
    """Room, machine, beam and instrument are its owners; a degrader that was not in place is none."""
    owners = read(csv(degrader="none", gap_cm="0")).find("measurement", "pilot").owners
    assert {"room": "vault-a", "machine": "linac-1", "beam": "linac-1/e6"}.items() <= owners.items()
    assert owners["instrument"] == read(csv()).find("measurement", "pilot").get("instrument")
    assert "degrader" not in owners


def test_readings_are_a_table_with_all_columns():
    """A column that may be absent is blank in every row."""
    table = read(csv()).find("measurement", "pilot").get("table")
    assert table.columns == ("height_cm", "across_cm", "relative_dose", "relative_dose_sd")
    assert table.rows[0] == (-60.0, None, 0.97, None)
    assert len(table.rows) == 7


def test_a_blank_entry_is_blank():
    """An entry may be blank where the kind allows it."""
    rows = ["height_cm,relative_dose,relative_dose_sd", *(f"{row},0.01" for row in ROWS[1:-1]), "60,0.97,"]
    table = read(csv(rows)).find("measurement", "pilot").get("table")
    assert table.column("relative_dose_sd") == (0.01, 0.01, 0.01, 0.01, 0.01, 0.01, None)


def test_columns_may_stand_in_any_order():
    """The order of columns in a file does not matter."""
    rows = [",".join(reversed(row.split(","))) for row in ROWS]
    assert read(csv(rows)).find("measurement", "pilot").get("table") == read(csv()).find("measurement", "pilot").get("table")


def test_a_required_header_line_is_asked_for():
    """A header line that must be there is named with its meaning."""
    assert told(csv(date=None)) == ["1: date is missing: day of the measurement"]


def test_row_and_column_are_named():
    """A wrong reading is named by its column and row, and placed at its line."""
    rows = [*ROWS[:3], "-20,low", *ROWS[4:]]
    (message,) = told(csv(rows))
    assert message.startswith('20: relative_dose in row 3 must be a number, not "low"')


def test_a_reading_out_of_range_is_named_with_the_suspicion():
    """Per cent where a fraction is expected is recognised as such."""
    (message,) = told(csv([*ROWS[:3], "-20,99", *ROWS[4:]]))
    assert message.startswith("20: relative_dose in row 3 must be at most 3, not 99: this looks like")
    assert message.endswith("per cent where a fraction is expected")


def test_a_missing_column_is_named_with_its_meaning():
    """A column that must be there is named with its meaning."""
    messages = told(csv(["height_cm,dose", *ROWS[1:]]))
    assert any("column relative_dose is missing: reading divided by" in message for message in messages)
    assert any('"dose" is not known as a column' in message for message in messages)


def test_a_name_that_is_no_id_is_refused():
    """The name of a measurement file is an id."""
    (message,) = told(csv(), "measurements/pilot run.csv")
    assert message.startswith("1: name of a measurement file must have letters, digits, - _ and . only")


def test_progress_is_one_item_a_row():
    """Each row of progress.csv is an item named after its task; a blank date is unknown."""
    program = read("task,started_on,finished_on\nbuy-stand,2026-10-01,\ndry-run,2026-09-01,2026-09-15\n", "progress.csv")
    stand, dry_run = program.of_kind("progress")
    assert (stand.id, stand.get("started_on"), stand.get("finished_on")) == ("buy-stand", date(2026, 10, 1), None)
    assert (dry_run.id, dry_run.get("finished_on")) == ("dry-run", date(2026, 9, 15))
    assert ("progress", "program") in program.known_lists


def test_a_task_has_one_row():
    """A task that stands in two rows is told."""
    messages = told("task,started_on\ndry-run,2026-10-01\ndry-run,2026-10-02\n", "progress.csv")
    assert messages == ["3: Progress of a task dry-run is described twice; first at progress.csv:2:1"]
