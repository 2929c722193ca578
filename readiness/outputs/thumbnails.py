"""A small plan of each arrangement: room, beam, plane; all at one scale, so that rooms can be compared."""

from collections.abc import Sequence

from readiness.assessment.records import ArrangementRow
from readiness.outputs.drawing import drawn, points
from readiness.outputs.words import with_unit

_MM_PER_CM = 0.045
_MARGIN_CM = 12.0
_DISTANCES = ("arrangement.plane_distance_cm", "arrangement.farthest_plane_distance_cm")


def thumbnails(rows: Sequence[ArrangementRow]) -> dict[str, str]:
    """Return the small plan of each arrangement by its id; one whose room is not drawn has none."""
    found = {row.item.id: _thumbnail(row, number) for number, row in enumerate(rows, 1)}
    return {item: svg for item, svg in found.items() if svg is not None}


def _thumbnail(row: ArrangementRow, number: int) -> str | None:
    if not row.floor_cm:
        return None
    xs, ys = [x for x, _ in row.floor_cm], [-y for _, y in row.floor_cm]
    wide = max(xs) - min(xs) + 2 * _MARGIN_CM
    return drawn("thumbnail", {
        "number": number, "left": min(xs) - _MARGIN_CM, "top": min(ys) - _MARGIN_CM, "wide": wide,
        "high": max(ys) - min(ys) + 2 * _MARGIN_CM, "width_mm": wide * _MM_PER_CM,
        "floor": points((x, -y) for x, y in row.floor_cm), "beam": _beam(row), "words": _words(row),
    })  # fmt: skip


def _plane(row: ArrangementRow) -> tuple[str, float] | None:
    """Return the distance of the plane: the department's, else the farthest that the room allows."""
    known = {name: value for name, value, _ in row.figures}
    return next(((name, float(known[name])) for name in _DISTANCES if name in known), None)


def _beam(row: ArrangementRow) -> dict[str, float] | None:
    side, plane = dict(row.parts).get("side_deg"), _plane(row)
    if side not in ("90", "270") or plane is None or row.source_axis_distance_cm is None:
        return None
    toward = -1.0 if side == "90" else 1.0
    source = -toward * row.source_axis_distance_cm
    return {"source": source, "plane": source + toward * plane[1]}


def _words(row: ArrangementRow) -> str:
    plane = _plane(row)
    if _beam(row) is None or plane is None:
        return f"Small plan of the room of {row.title}."
    which = "chosen" if plane[0] == _DISTANCES[0] else "farthest possible"
    return f"Small plan of {row.title}: {which} plane at {with_unit(*plane)} from the source."
