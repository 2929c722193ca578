"""What an item states, by type; and the two kinds of thing to say about it."""

from collections.abc import Callable, Iterator
from datetime import date

from readiness.errors import Place, Problem
from readiness.program.items import Item, Program
from readiness.quantities import Scalar, Table

Check = Callable[[Program], Iterator[Problem]]

IMPOSSIBLE = "impossible"  # the program cannot be used as it is
QUESTION = "question"  # it can, but somebody should look


def number(item: Item, name: str) -> float | None:
    """Return a number that is stated, or None."""
    value = item.get(name)
    return value if isinstance(value, int | float) and not isinstance(value, bool) else None


def numbers(item: Item, name: str) -> tuple[float, ...] | None:
    """Return a list of numbers that is stated, or None."""
    value = item.get(name)
    if not isinstance(value, tuple):
        return None
    return tuple(each for each in value if isinstance(each, int | float))


def points(item: Item, name: str) -> tuple[tuple[float, float], ...] | None:
    """Return a list of points that is stated, or None."""
    value = item.get(name)
    if not isinstance(value, tuple):
        return None
    return tuple((each[0], each[1]) for each in value if isinstance(each, tuple))


def day(item: Item, name: str) -> date | None:
    """Return a date that is stated, or None."""
    value = item.get(name)
    return value if isinstance(value, date) else None


def days(item: Item, name: str) -> tuple[date, ...] | None:
    """Return a list of dates that is stated, or None."""
    value = item.get(name)
    return tuple(each for each in value if isinstance(each, date)) if isinstance(value, tuple) else None


def word(item: Item, name: str) -> str | None:
    """Return a text, word or id that is stated, or None."""
    value = item.get(name)
    return value if isinstance(value, str) else None


def words(item: Item, name: str) -> tuple[str, ...] | None:
    """Return a list of texts that is stated, or None."""
    value = item.get(name)
    return tuple(each for each in value if isinstance(each, str)) if isinstance(value, tuple) else None


def table(item: Item, name: str) -> Table | None:
    """Return a table that is stated, or None."""
    value = item.get(name)
    return value if isinstance(value, Table) else None


def cell(row: dict[str, Scalar], name: str) -> float | None:
    """Return a number in a row of a table, or None."""
    value = row.get(name)
    return value if isinstance(value, int | float) and not isinstance(value, bool) else None


def place(item: Item, name: str) -> Place:
    """Return where a field is stated, else where the item begins."""
    stated = item.fields.get(name)
    return item.place if stated is None else stated.place


def impossible(item: Item, name: str, message: str) -> Problem:
    """Return that what a field states cannot be."""
    return Problem(place(item, name), f"{_called(item)}: {message}", IMPOSSIBLE)


def question(item: Item, name: str, message: str) -> Problem:
    """Return that what a field states is odd."""
    return Problem(place(item, name), f"{_called(item)}: {message}", QUESTION)


def _called(item: Item) -> str:
    kind = item.kind.replace("_", " ")
    return kind if item.id == item.kind else f"{kind} {item.id}"
