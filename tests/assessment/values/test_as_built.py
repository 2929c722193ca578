"""Numbers found in the installed set-up."""

from datetime import date
from typing import Any

import pytest

from readiness.assessment.records import Gone, Ref
from readiness.assessment.values import as_built
from readiness.program.items import Item
from readiness.quantities import Table
from tests.assessment.small import graph, item, program

COLUMNS = ("plane_distance_cm", "degrader_gap_cm", "tilt_deg", "degrader_thickness_mm")
ROWS = [(400.2, 45.1, 16.0, 6.0), (400.4, None, 16.1, 6.2)]


def record(rows: list[tuple[Any, ...]], **changes: Any) -> Item:
    """Return an as-built record of side 90."""
    fields = {
        "kind": "as-built", "room": "r", "machine": "m", "beam": "b", "degrader": "d", "side_deg": 90,
        "date": date(2026, 11, 20), "table": Table.of(COLUMNS, rows), **changes,
    }  # fmt: skip
    return item("measurement", "as-built", **fields)


def got(name: str, *, side: int = 90, rows: list[tuple[Any, ...]] = ROWS, **changes: Any) -> Any:
    """Return a value of the arrangement."""
    owners = {"room": "r", "machine": "m", "beam": "b", "degrader": "d"}
    parts = [item(kind, name) for kind, name in owners.items()]
    here = item("arrangement", "here", owners, side_deg=side)
    of = program(*parts, record(rows, **changes))
    return graph(of, *as_built.DEFINITIONS, made=(here,)).get(f"arrangement.{name}", Ref("arrangement", "here"))


def test_means_of_what_was_found() -> None:
    """Two determinations give their mean, one gives itself, millimetres become centimetres; all are measured."""
    for name, mean in (
        ("as_built_distance_cm", 400.3), ("as_built_gap_cm", 45.1), ("as_built_tilt_deg", 16.05),
        ("as_built_degrader_thickness_cm", 0.61),
    ):  # fmt: skip
        assert mean == pytest.approx(got(name).value)
        assert "measured" == got(name).basis


def test_a_record_of_another_side_or_one_that_leaves_it_out() -> None:
    """A record of side 270 is no record of side 90, and a number that it leaves out is asked for."""
    assert isinstance(got("as_built_distance_cm", side=270), Gone)
    left_out = got("as_built_gap_cm", rows=[(400.2, None, 16.0, 6.0)])
    assert any("leaves out the degrader gap" in cause.words for cause in left_out.causes)


def test_a_vertical_beam_has_its_record() -> None:
    """Side 0 belongs to an arrangement with a moving couch."""
    assert 400.3 == pytest.approx(got("as_built_distance_cm", side=0, side_deg=0).value)
