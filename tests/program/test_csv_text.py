"""A CSV file becomes located cells, unchanged, or problems."""

import csv
import io

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from readiness.errors import Place
from readiness.program.csv_text import MOST_COLUMNS, MOST_ROWS, parse_csv
from readiness.program.decoding import MOST_PROBLEMS
from readiness.program.nodes import Scalar

PILOT = "# kind: single-profile\n# note: film, batch F-7\nheight_cm,ratio\n-110,.263\n0, 1\n"


def parse(text: str):
    """Return table and problems of a text."""
    return parse_csv("pilot.csv", text.encode())


def messages(text: str) -> list[str]:
    """Return the problems of a text as they are shown."""
    return [str(problem) for problem in parse(text)[1]]


def cells(table) -> list[list[str]]:
    """Return the rows as texts."""
    return [[cell.text for cell in row] for row in table.rows]


def test_header_columns_and_rows_stand_at_their_places():
    """Header, column names and cells carry line and character column, counted from 1."""
    table, problems = parse(PILOT)
    name = "pilot.csv"
    assert [] == problems
    assert (Scalar("kind", Place(name, 1, 3)), Scalar("single-profile", Place(name, 1, 9))) == table.header[0]
    assert "film, batch F-7" == table.header[1][1].text
    assert (Scalar("height_cm", Place(name, 3, 1)), Scalar("ratio", Place(name, 3, 11))) == table.columns
    assert (Scalar("0", Place(name, 5, 1)), Scalar("1", Place(name, 5, 4))) == table.rows[1]


@pytest.mark.parametrize("ending", ["\n", "\r\n", "\r"])
def test_line_ends_of_every_system_are_read(ending):
    """The same file is read the same with the line ends of any system."""
    assert parse(PILOT) == parse(PILOT.replace("\n", ending))


def test_byte_order_mark_of_spreadsheets_is_dropped():
    """A mark at the start of the file is no part of the first line."""
    assert parse(PILOT) == parse("\ufeff" + PILOT)


def test_what_spreadsheets_add_is_taken_away():
    """Quoted header lines, idle commas at the end and lines of commas change nothing."""
    saved = '# kind: single-profile,\n"# note: film, batch F-7",\nheight_cm,ratio,,\n-110,.263,,\n,,,\n0,1,,\n,,,\n'
    table, problems = parse(saved)
    plain, _ = parse(PILOT)
    assert [] == problems
    assert [(key.text, value.text) for key, value in plain.header] == [(key.text, value.text) for key, value in table.header]
    assert (["height_cm", "ratio"], [["-110", ".263"], ["0", "1"]]) == ([cell.text for cell in table.columns], cells(table))


def test_quotes_hold_commas_and_quotes():
    """A cell in quotes keeps its commas; two marks inside are one; it is marked as quoted."""
    table, problems = parse('a,b\n"x, ""y""" , z\n')
    assert ([['x, "y"', "z"]], []) == (cells(table), problems)
    assert [True, False] == [cell.quoted for cell in table.rows[0]]
    assert Place("pilot.csv", 2, 1) == table.rows[0][0].place


def test_empty_cells_are_kept():
    """A cell with nothing in it is an empty, unquoted text at its place."""
    table, problems = parse("a,b,c\n,2,\n")
    assert ([["", "2", ""]], []) == (cells(table), problems)
    assert [1, 2, 4] == [cell.place.column for cell in table.rows[0]]


def test_one_column_needs_no_comma():
    """A file of one column is read."""
    table, problems = parse("height_cm\n1\n2\n")
    assert ([["1"], ["2"]], []) == (cells(table), problems)


def test_cells_that_begin_with_a_number_sign_in_quotes_are_data():
    """A quoted cell below the column names is never taken for a header line."""
    table, problems = parse('film,ratio\n"#2",1\n')
    assert ([["#2", "1"]], []) == (cells(table), problems)


def test_rows_that_do_not_fit_are_left_out_and_named():
    """A row with too few or too many cells is named with what is missing or too many; the others are read."""
    table, problems = parse("a,b\n1\n1,2,3\n1,2\n")
    assert [["1", "2"]] == cells(table)
    assert [
        'pilot.csv:2:2: row 1 has 1 cell for 2 columns: "b" is missing [row]',
        'pilot.csv:3:5: row 2 has 3 cells for 2 columns: "3" is too many; check for decimal commas, and quote texts that hold a comma [row]',
    ] == [str(problem) for problem in problems]


def test_blank_lines_do_not_move_places():
    """Rows after blank lines keep the line of the file."""
    table, problems = parse("\n# kind: x\n\na\n\n1\n")
    assert ([], 6) == (problems, table.rows[0][0].place.line)


@pytest.mark.parametrize("text", ["", "\n\n", " "])
def test_empty_file_is_told(text):
    """A file with nothing in it is told."""
    assert ["pilot.csv: the file is empty; fill it or delete it [empty]"] == messages(text)


def test_too_many_rows_and_cells_are_refused():
    """Files beyond what a measurement can be are cut off and told."""
    assert [f"pilot.csv:{MOST_ROWS + 2}:1: the file has more than {MOST_ROWS:,} rows [size]"] == messages("a\n" + "1\n" * (MOST_ROWS + 5))
    assert [f"pilot.csv:2:{2 * MOST_COLUMNS + 1}: the line has more than {MOST_COLUMNS} cells [size]"] == messages("a\n" + "1," * 100_000)


def test_one_slip_repeated_does_not_fill_the_screen():
    """Problems past a limit are counted."""
    told = messages("a,b\n" + "1\n" * (MOST_PROBLEMS + 7))
    expected = f"pilot.csv:{MOST_PROBLEMS + 2}:2: 7 more problems in this file from here on; mend the first ones first [more]"
    assert (MOST_PROBLEMS + 1, expected) == (len(told), told[-1])


@given(st.binary(max_size=300))
@settings(max_examples=200)
def test_any_bytes_are_read_or_told(content):
    """Whatever the bytes, there is a table or problems, and no exception."""
    table, problems = parse_csv("x.csv", content)
    assert table is not None or problems


@given(st.lists(st.sampled_from(["a", "1", ",", ",,", '"', '""', "\n", "#", "# k: v\n", ";", "\t", " ", "\r\n", "é"]), max_size=30).map("".join))
@settings(max_examples=300)
def test_any_pieces_of_csv_are_read_or_told(text):
    """Whatever is put together from pieces of CSV gives rows that fit their columns, or located problems."""
    table, problems = parse_csv("x.csv", text.encode())
    assert table is not None or problems
    if table is not None:
        assert {len(table.columns)} >= {len(row) for row in table.rows}
        lines = text.replace("\r\n", "\n").split("\n")
        for cell in (cell for row in table.rows for cell in row if cell.text and not cell.quoted):
            assert lines[cell.place.line - 1].startswith(cell.text, cell.place.column - 1)


@given(st.lists(st.lists(st.text(alphabet='ab1 .,;"-é', max_size=6), min_size=3, max_size=3), min_size=1, max_size=5))
def test_what_the_standard_library_writes_is_read_back(rows):
    """Cells written with every text in quotes come back unchanged."""
    stream = io.StringIO()
    csv.writer(stream, quoting=csv.QUOTE_ALL).writerows([["x", "y", "z"], *rows])
    table, problems = parse_csv("x.csv", stream.getvalue().encode())
    assert (rows, []) == (cells(table), problems)
