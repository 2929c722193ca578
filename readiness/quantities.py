"""What calculations return beside plain numbers: a number with its uncertainty, and tables."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass

Scalar = float | int | str | bool | None


@dataclass(frozen=True)
class Uncertain:
    """A number with its standard deviation, both in the same unit."""

    value: float
    sd: float


@dataclass(frozen=True)
class Table:
    """
    Rows under named columns; a column's unit stands at the end of its name (``height_cm``).

    All rows have one entry per column. Entries are numbers, words, yes/no or None for a blank.
    """

    columns: tuple[str, ...]
    rows: tuple[tuple[Scalar, ...], ...]

    def __post_init__(self) -> None:
        """Refuse a row that does not fit its columns."""
        for row in self.rows:
            if len(row) != len(self.columns):
                raise ValueError(f"a row of {len(row)} entries under {len(self.columns)} columns")

    @classmethod
    def of(cls, columns: Sequence[str], rows: Sequence[Sequence[Scalar]]) -> "Table":
        """Return a table from any sequences."""
        return cls(tuple(columns), tuple(tuple(row) for row in rows))

    def column(self, name: str) -> tuple[Scalar, ...]:
        """Return one column by its name."""
        index = self.columns.index(name)
        return tuple(row[index] for row in self.rows)

    def records(self) -> Iterator[dict[str, Scalar]]:
        """Yield each row as a mapping from column name to entry."""
        for row in self.rows:
            yield dict(zip(self.columns, row, strict=True))
