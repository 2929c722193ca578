"""Columns of a measurement as numbers, for the analyses; nothing is worked out here."""

from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table
from readiness.units import words_of


def number_or_none(entry: Scalar) -> float | None:
    """Return an entry of a table as a number, None for a blank."""
    return None if entry is None else float(entry)


def numbers(table: Table, name: str) -> list[float]:
    """Return a column of numbers; refuse one with blanks, which an analysis cannot use."""
    found = [number_or_none(entry) for entry in table.column(name)]
    if any(entry is None for entry in found):
        raise OutsideValidity(f"a reading has no {words_of(name)}")
    return [entry for entry in found if entry is not None]


def numbers_or(table: Table, name: str, where_blank: float) -> list[float]:
    """Return a column of numbers with a number where it is blank."""
    return [where_blank if entry is None else float(entry) for entry in table.column(name)]


def words(table: Table, name: str, where_blank: str) -> list[str]:
    """Return a column of words with a word where it is blank."""
    return [where_blank if entry is None else str(entry) for entry in table.column(name)]


def rows_where(table: Table, name: str, word: str) -> Table:
    """Return the rows of a table that have a word in a column."""
    at = table.columns.index(name)
    return Table(table.columns, tuple(row for row in table.rows if row[at] == word))
