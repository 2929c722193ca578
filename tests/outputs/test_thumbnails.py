"""Small plans of the arrangements: one scale for all, the beam on its side, nothing drawn that is not known."""

from dataclasses import replace
from xml.etree import ElementTree

import pytest

from readiness.assessment.records import ArrangementRow, Ref
from readiness.outputs.thumbnails import thumbnails

FLOOR = ((-365.0, -420.0), (330.0, -420.0), (330.0, 270.0), (-365.0, 270.0))
ROW = ArrangementRow(
    Ref("arrangement", "a"), "room a, side 90", (("room", "a"), ("side_deg", "90")), "feasible", (), (), False,
    (("arrangement.farthest_plane_distance_cm", 385.0, "predicted"),), floor_cm=FLOOR, source_axis_distance_cm=100.0,
)  # fmt: skip


def drawing(row: ArrangementRow) -> ElementTree.Element:
    """Return the drawing of one arrangement."""
    return ElementTree.fromstring(thumbnails((row,))[row.item.id])


def line(row: ArrangementRow) -> tuple[float, float]:
    """Return where source and plane stand, from the isocentre."""
    root = drawing(row)
    svg = "{http://www.w3.org/2000/svg}"
    return float(root.find(f"{svg}circle").get("cx")), float(root.find(f"{svg}line").get("x1"))  # type: ignore[union-attr, arg-type]


def test_rooms_are_drawn_at_one_scale() -> None:
    """A room half as large is drawn half as large."""
    small = replace(ROW, floor_cm=tuple((x / 2, y / 2) for x, y in FLOOR))
    scales = []
    for row in (ROW, small):
        root = drawing(row)
        wide = float(root.get("viewBox", "").split()[2])
        scales.append(float(root.get("width", "").removesuffix("mm")) / wide)
    assert scales[0] == pytest.approx(scales[1], rel=0.01)


def test_the_plane_stands_on_the_side_of_the_beam() -> None:
    """Gantry 90 aims toward negative x, 270 toward positive x; the distance counts from the source."""
    assert (100.0, -285.0) == line(ROW)
    other = replace(ROW, parts=(("room", "a"), ("side_deg", "270")))
    assert (-100.0, 285.0) == line(other)


def test_the_chosen_plane_comes_before_the_farthest() -> None:
    """And the title says which of them is drawn."""
    chosen = replace(ROW, figures=(*ROW.figures, ("arrangement.plane_distance_cm", 350.0, "stated")))
    assert (100.0, -250.0) == line(chosen)
    assert "chosen plane at 350 cm" in "".join(drawing(chosen).itertext())
    assert "farthest possible plane at 385 cm" in "".join(drawing(ROW).itertext())


def test_without_a_floor_nothing_is_drawn() -> None:
    """And without a distance or side no beam."""
    assert {} == thumbnails((replace(ROW, floor_cm=()),))
    for row in (replace(ROW, figures=()), replace(ROW, parts=(("room", "a"),))):
        assert drawing(row).find("{http://www.w3.org/2000/svg}circle") is None
