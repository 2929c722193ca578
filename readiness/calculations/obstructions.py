"""Things that stand or hang in a room, as upright boxes with a name."""

from collections.abc import Mapping
from dataclasses import dataclass

from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table

LABELS = ("name", "id", "obstruction", "title")
EDGES = ("x_min_cm", "x_max_cm", "y_min_cm", "y_max_cm", "bottom_cm", "top_cm")


@dataclass(frozen=True)
class Box:
    """One obstruction: x and y from the isocentre, bottom and top above the floor; None: nobody said."""

    name: str
    x_min_cm: float
    x_max_cm: float
    y_min_cm: float
    y_max_cm: float
    bottom_cm: float
    top_cm: float
    movable: bool | None = None

    @property
    def corners_cm(self) -> tuple[tuple[float, float], ...]:
        """Return the corners of the outline on the floor, in order."""
        return (
            (self.x_min_cm, self.y_min_cm),
            (self.x_max_cm, self.y_min_cm),
            (self.x_max_cm, self.y_max_cm),
            (self.x_min_cm, self.y_max_cm),
        )

    def reaches_into(self, low_cm: float, high_cm: float) -> bool:
        """Return whether the box occupies any height between two heights above the floor."""
        return self.bottom_cm < high_cm and self.top_cm > low_cm


def boxes_of(*, obstructions: Table) -> tuple[Box, ...]:
    """
    Return the obstructions of a table as boxes.

    Args:
        obstructions: Columns name (or id, obstruction, title), x_min_cm, x_max_cm, y_min_cm, y_max_cm,
            bottom_cm, top_cm, and movable where it is known.

    Returns:
        One box per row, in the order of the rows.

    Raises:
        ValueError: If a column is missing, two rows have the same name, or an edge lies beyond its opposite.
        OutsideValidity: If an edge is left blank.

    Source: derived.
    """
    label = next((word for word in LABELS if word in obstructions.columns), "name")
    missing = [column for column in (label, *EDGES) if column not in obstructions.columns]
    if missing:
        raise ValueError(f"the table of obstructions has no column {', '.join(missing)}")
    boxes = tuple(_box(str(row[label]), row) for row in obstructions.records())
    if len({box.name for box in boxes}) < len(boxes):
        raise ValueError("two obstructions have the same name")
    return boxes


def _box(name: str, row: Mapping[str, Scalar]) -> Box:
    """Return one row as a box."""
    edges: dict[str, float] = {}
    for column in EDGES:
        entry = row[column]
        if entry is None:
            raise OutsideValidity(f"{column} of obstruction {name} is not stated")
        if isinstance(entry, str | bool):
            raise ValueError(f"{column} of obstruction {name} is not a number")
        edges[column] = float(entry)
    movable = row.get("movable")
    box = Box(name, **edges, movable=None if movable is None else bool(movable))
    if not (box.x_min_cm < box.x_max_cm and box.y_min_cm < box.y_max_cm and box.bottom_cm < box.top_cm):
        raise ValueError(f"obstruction {name} has an edge beyond its opposite")
    return box
