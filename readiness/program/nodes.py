"""
Text of a file as a tree of located nodes, before anything is typed.

Scalars keep their text exactly as written; ``quoted`` tells "no" from no.
"""

from dataclasses import dataclass

from readiness.errors import Place


@dataclass(frozen=True)
class Scalar:
    """One written entry; an empty unquoted text means that nothing was written."""

    text: str
    place: Place
    quoted: bool = False


@dataclass(frozen=True)
class Sequence:
    """A list as written."""

    entries: tuple["Node", ...]
    place: Place


@dataclass(frozen=True)
class Mapping:
    """Keys with their nodes, in written order, without doubles."""

    entries: tuple[tuple[Scalar, "Node"], ...]
    place: Place

    def get(self, key: str) -> "Node | None":
        """Return the node under a key, or None."""
        return next((node for name, node in self.entries if name.text == key), None)


Node = Scalar | Sequence | Mapping


@dataclass(frozen=True)
class CsvText:
    """A CSV file: header comments ``# key: value``, column names and rows, all located, nothing typed."""

    place: Place
    header: tuple[tuple[Scalar, Scalar], ...]
    columns: tuple[Scalar, ...]
    rows: tuple[tuple[Scalar, ...], ...]
