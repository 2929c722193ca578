"""Tests of obstructions as boxes."""

import pytest

from readiness.calculations.obstructions import Box, boxes_of
from readiness.errors import OutsideValidity
from readiness.quantities import Table

COLUMNS = ("id", "x_min_cm", "x_max_cm", "y_min_cm", "y_max_cm", "bottom_cm", "top_cm")


def test_rows_become_boxes_in_order() -> None:
    """Each row is a box with its name; ids serve where there are no names."""
    table = Table.of(COLUMNS, [("desk", 0, 1, 2, 3, 0, 70), ("lamp", 5, 6, 7, 8, 220, 250)])
    assert (Box("desk", 0, 1, 2, 3, 0, 70), Box("lamp", 5, 6, 7, 8, 220, 250)) == boxes_of(obstructions=table)


def test_no_obstructions_are_no_boxes() -> None:
    """An empty table gives no box."""
    assert boxes_of(obstructions=Table.of(COLUMNS, [])) == ()


def test_blank_edge_is_named() -> None:
    """An edge nobody stated is a cause, not a number."""
    with pytest.raises(OutsideValidity, match="top_cm of obstruction desk is not stated"):
        boxes_of(obstructions=Table.of(COLUMNS, [("desk", 0, 1, 2, 3, 0, None)]))


@pytest.mark.parametrize(
    ("columns", "rows", "words"),
    [
        (COLUMNS[:-1], [], "has no column top_cm"),
        (COLUMNS, [("desk", 1, 0, 2, 3, 0, 70)], "desk has an edge beyond its opposite"),
        (COLUMNS, [("desk", 0, 1, 2, 3, 0, "70")], "top_cm of obstruction desk is not a number"),
        (COLUMNS, [("desk", 0, 1, 2, 3, 0, 70)] * 2, "same name"),
    ],
)
def test_impossible_table_is_refused(columns: tuple[str, ...], rows: list[tuple[str | float, ...]], words: str) -> None:
    """Missing columns, edges the wrong way round, words for numbers and doubled names are refused."""
    with pytest.raises(ValueError, match=words):
        boxes_of(obstructions=Table.of(columns, rows))


def test_hanging_box_does_not_reach_what_stays_below() -> None:
    """A lamp that starts at 220 cm hinders what is 230 cm high, and not what is 220 cm high."""
    lamp = Box("lamp", 5, 6, 7, 8, 220, 250)
    assert lamp.reaches_into(0, 230)
    assert not lamp.reaches_into(0, 220)
