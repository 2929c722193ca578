"""
Text of a CSV file becomes located cells; nothing is typed here.

Header lines ``# name: value`` stand before the column names; cells are parted by commas; a row is one line.
"""

import re
from collections.abc import Sequence as Listed

from readiness.errors import Place, Problem
from readiness.program.decoding import decode, first_problems, lines_of
from readiness.program.nodes import CsvText, Scalar
from readiness.program.wording import shown
from readiness.program.yaml_traps import WIDE_SPACES

MOST_COLUMNS = 200
MOST_ROWS = 100_000

_SPACES = " \t" + WIDE_SPACES
_BLANKS = re.compile(f"[{_SPACES}]*")
_QUOTED = re.compile(r'"((?:[^"]|"")*)"')

Row = tuple[Scalar, ...]


def parse_csv(name: str, content: bytes) -> tuple[CsvText | None, list[Problem]]:
    """
    Return the cells of a CSV file and everything that is wrong with its text.

    Args:
        name: Name of the file in the program folder.
        content: Its bytes.

    Returns:
        Header, columns and rows, or None if nothing can be made of the file. Rows that do not fit the columns
        are left out; the rows are complete only when there are no problems.
    """
    text, problems = decode(name, content)
    if text is None:
        return None, problems
    if not text.strip():
        return None, [*problems, Problem(Place(name), "the file is empty; fill it or delete it", "empty")]
    reader = _Reader(name, problems)
    table = reader.read(lines_of(text))
    return table, first_problems(reader.problems)


class _Reader:
    """Reads the lines of one file in order."""

    def __init__(self, name: str, problems: list[Problem]) -> None:
        self.name = name
        self.problems = problems
        self.header: dict[str, tuple[Scalar, Scalar]] = {}

    def read(self, lines: Listed[str]) -> CsvText | None:
        """Return the whole table, or None if it has no usable column names."""
        top = next(
            (n for n, line in enumerate(lines) if line.strip(_SPACES + ",") and not _is_header(line)), None
        )
        for number, line in enumerate(lines[:top], 1):
            if _is_header(line):
                self._header_line(line, number)
        if top is None:
            message = "the file has no line with the names of its columns; write one after the header lines"
            self._note(Place(self.name), message, "empty")
            return None
        columns = self._columns(lines[top], top + 1)
        if columns is None:
            return None
        rows = self._rows(lines, top + 1, columns)
        return CsvText(Place(self.name, 1, 1), tuple(self.header.values()), columns, rows)

    def _header_line(self, line: str, number: int) -> None:
        written, column = _unpacked(line)
        if not written.strip("#" + _SPACES):
            return
        name, colon, value = written.partition(":")
        key = self._part(name, number, column, _SPACES + "#")
        if not colon or not key.text:
            place = Place(self.name, number, column)
            self._note(place, f'{shown(written)} is no header line; write "# name: value"', "syntax")
            return
        if key.text in self.header:
            first = self.header[key.text][0].place.line
            message = f"{shown(key.text)} is written twice, first in line {first}; keep one"
            self._note(key.place, message, "duplicate")
            return
        self.header[key.text] = (key, self._part(value, number, column + len(name) + 1, _SPACES))

    def _part(self, text: str, number: int, column: int, idle: str) -> Scalar:
        """Return a part of a header line without the idle characters around it."""
        begins = column + len(text) - len(text.lstrip(idle))
        return Scalar(text.strip(idle), Place(self.name, number, begins))

    def _columns(self, line: str, number: int) -> Row | None:
        if wrong := _other_separator(line):
            self._note(Place(self.name, number, wrong[0] + 1), wrong[1], "syntax")
            return None
        cells = self._cells(line, number)
        if cells is None:
            return None
        columns = _without_idle_end(cells)
        seen: dict[str, int] = {}
        for position, cell in enumerate(columns, 1):
            first = seen.setdefault(cell.text.casefold(), position)
            if not cell.text:
                self._note(cell.place, f"column {position} has no name", "empty")
            elif first != position:
                message = f"columns {first} and {position} are both named {shown(cell.text)}; rename one"
                self._note(cell.place, message, "duplicate")
        return columns

    def _rows(self, lines: Listed[str], start: int, columns: Row) -> tuple[Row, ...]:
        rows: list[Row] = []
        count = 0
        for number, line in enumerate(lines[start:], start + 1):
            if not line.strip(_SPACES + ","):
                continue
            if line.lstrip(_SPACES).startswith("#"):
                message = "header lines (#) stand before the names of the columns; move this one up"
                self._note(Place(self.name, number, 1), message, "syntax")
                continue
            count += 1
            if count > MOST_ROWS:
                self._note(Place(self.name, number, 1), f"the file has more than {MOST_ROWS:,} rows", "size")
                break
            cells = self._cells(line, number)
            if cells is not None and self._fits(cells, count, columns, line):
                rows.append(cells[: len(columns)])
        if count == 0:
            message = "the file has names of columns but no rows; write the rows or delete the file"
            self._note(Place(self.name), message, "empty")
        return tuple(rows)

    def _fits(self, cells: Row, row: int, columns: Row, line: str) -> bool:
        used = _without_idle_end(cells)
        wanted = f"for {_counted(len(columns), 'column')}"
        if len(used) > len(columns):
            extra = used[len(columns)]
            message = f"row {row} has {_counted(len(used), 'cell')} {wanted}: {shown(extra.text)} is too many"
            if len(used) <= 2 * len(columns):
                message += "; check for decimal commas, and quote texts that hold a comma"
            self._note(extra.place, message, "row")
            return False
        if len(cells) < len(columns):
            missing = shown(columns[len(cells)].text)
            message = f"row {row} has {_counted(len(cells), 'cell')} {wanted}: {missing} is missing"
            if wrong := _other_separator(line):
                message += f"; {wrong[1]}"
            self._note(Place(self.name, cells[0].place.line, len(line) + 1), message, "row")
            return False
        return True

    def _cells(self, line: str, number: int) -> Row | None:
        """Return the cells of a line, or None if its quotation marks cannot be read."""
        cells: list[Scalar] = []
        at = 0
        while at <= len(line):
            if len(cells) == MOST_COLUMNS:
                message = f"the line has more than {MOST_COLUMNS} cells"
                self._note(Place(self.name, number, at + 1), message, "size")
                return None
            begins = _after_blanks(line, at)
            match = _QUOTED.match(line, begins)
            if match is None:
                ends = line.find(",", at)
                ends = len(line) if ends < 0 else ends
                text = line[at:ends].strip(_SPACES)
                wrong = line.find('"', at, ends)
            else:
                ends = _after_blanks(line, match.end())
                text = match[1].replace('""', '"')
                wrong = -1 if ends == len(line) or line[ends] == "," else match.end()
            if wrong >= 0:
                self._quote_problem(line, number, wrong, begins)
                return None
            cells.append(Scalar(text, Place(self.name, number, min(begins, ends) + 1), match is not None))
            at = ends + 1
        return tuple(cells)

    def _quote_problem(self, line: str, number: int, wrong: int, begins: int) -> None:
        if wrong == begins and line[wrong] == '"':
            message = "the quotation mark that opens here is not closed in its line"
        elif line[wrong] == '"':
            message = (
                "a quotation mark inside a cell: put the whole cell in quotes and write the inner mark twice"
            )
        else:
            message = "text goes on after the closing quotation mark; part cells with a comma"
        self._note(Place(self.name, number, wrong + 1), message, "syntax")

    def _note(self, place: Place, message: str, kind: str) -> None:
        self.problems.append(Problem(place, message, kind))


def _after_blanks(line: str, at: int) -> int:
    """Return where the text after the blanks at a place begins."""
    match = _BLANKS.match(line, at)
    return at if match is None else match.end()


def _is_header(line: str) -> bool:
    """Return whether a line above the column names is a header line, in quotes or not."""
    return line.lstrip(_SPACES + '"').startswith("#")


def _unpacked(line: str) -> tuple[str, int]:
    """Return a header line without what spreadsheets add to it, and the column (from 1) where it begins."""
    begins = len(line) - len(line.lstrip(_SPACES))
    match = _QUOTED.match(line, begins)
    if match and not line[match.end() :].strip("," + _SPACES):
        return match[1].replace('""', '"'), begins + 2
    return line[begins:].rstrip("," + _SPACES), begins + 1


def _other_separator(line: str) -> tuple[int, str] | None:
    """Return column (from 0) and message if the cells of a line are parted by something other than commas."""
    if match := re.match(r"(?i)\s*\"?sep=", line):
        return match.start(), 'delete the line "sep=" and save with commas and decimal points'
    if "," in line:
        return None
    for separator, spoken in ((";", "semicolons"), ("\t", "tabs"), ("|", "upright strokes")):
        if separator in line:
            return line.index(separator), f"cells are parted by {spoken}; save with commas and decimal points"
    return None


def _without_idle_end(cells: Row) -> Row:
    """Return cells without the empty ones at the end that spreadsheets leave behind."""
    last = len(cells)
    while last > 1 and not cells[last - 1].text and not cells[last - 1].quoted:
        last -= 1
    return cells[:last]


def _counted(count: int, thing: str) -> str:
    return f"{count} {thing}" if count == 1 else f"{count} {thing}s"
