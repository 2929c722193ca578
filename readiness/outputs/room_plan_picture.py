"""The room from above, to scale: floor, things in it, beam, degrader, plane, stand, space kept free."""

from collections.abc import Mapping
from typing import Any

from readiness.assessment.records import Value
from readiness.outputs.drawing import drawn, numbers, points, said
from readiness.outputs.lookup import Lookup

_MARGIN_CM = 45.0
_WIDTH_MM = 165.0
_TEXT_CM = 15.0
_SHEET_CM = 3.0  # a degrader is drawn at least this thick, or it would not be seen
_WIDE_CM = 60.0  # a thing narrower than this has its name below it
_LINES_TRIED_CM = (50.0, 90.0, 130.0, 170.0)


def draw_room_plan(lookup: Lookup) -> str | None:
    """Return the plan, or None where the floor is not described."""
    floor = lookup.get("room.floor_polygon_cm")
    if not isinstance(floor, Value):
        return None
    corners = [(x, -y) for x, y in floor.value]
    left, right = min(x for x, _ in corners), max(x for x, _ in corners)
    top, bottom = min(y for _, y in corners), max(y for _, y in corners)
    boxes = _boxes(lookup)
    words = f"Floor of the room with {len(boxes)} things in it; plane distance "
    words += f"{said(lookup, 'arrangement.study_distance_cm')} from the source."
    return drawn("room-plan", {
        "prefix": "plan-", "left": left - _MARGIN_CM, "top": top - _MARGIN_CM,
        "wide": right - left + 2 * _MARGIN_CM, "high": bottom - top + 2 * _MARGIN_CM + 20,
        "width_mm": _WIDTH_MM, "size": _TEXT_CM, "words": words, "floor": points(corners),
        "boxes": boxes, "beam": _beam(lookup, boxes, (top, bottom)), "bar": {"x": left, "y": bottom + 40},
    })  # fmt: skip


def _boxes(lookup: Lookup) -> list[dict[str, Any]]:
    names = ("x_min_cm", "x_max_cm", "y_min_cm", "y_max_cm", "title")
    room = lookup.scope.get("room")
    found: dict[str, dict[str, Any]] = {}
    for value in lookup.assessment.values:
        kind, _, field = value.name.partition(".")
        if kind == "obstruction" and field in names and room and value.item.id.startswith(f"{room.id}/"):
            found.setdefault(value.item.id, {})[field] = value.value
    return [
        {
            "x": box["x_min_cm"], "y": -box["y_max_cm"], "wide": box["x_max_cm"] - box["x_min_cm"],
            "high": box["y_max_cm"] - box["y_min_cm"], "title": str(box.get("title", item.split("/")[-1])),
            "text_x": min(max((box["x_min_cm"] + box["x_max_cm"]) / 2, -250), 200),
            "text_y": -(box["y_min_cm"] + box["y_max_cm"]) / 2 + (5 if _is_wide(box) else 100),
        }
        for item, box in found.items()
        if {"x_min_cm", "x_max_cm", "y_min_cm", "y_max_cm"} <= box.keys()
    ]  # fmt: skip


def _is_wide(box: Mapping[str, Any]) -> bool:
    return bool(box["x_max_cm"] - box["x_min_cm"] > _WIDE_CM)


def _beam(
    lookup: Lookup, boxes: list[dict[str, Any]], inside: tuple[float, float]
) -> dict[str, Any] | None:  # fmt: skip
    """Return source, fan, plane, stand and degrader of a beam from the side."""
    got = numbers(lookup, {
        "side": "arrangement.side_deg", "distance": "arrangement.study_distance_cm",
        "sad": "machine.source_axis_distance_cm", "opening": "beam.opening_cm",
    })  # fmt: skip
    if got is None or got["side"] not in (90, 270):
        return None
    toward = -1 if got["side"] == 90 else 1
    source, x = -toward * got["sad"], toward * (got["distance"] - got["sad"])
    half = got["opening"] / 200 * got["distance"]
    ends = (min(source, x), max(source, x))
    line = _free_line(boxes, ends, half, inside)
    return {
        "x": x, "y1": -half - 20, "y2": half + 20, "source": source, "mid": (source + x) / 2, "line": line,
        "fan": points([(source, 0.0), (x, -half), (x, half)]), "stand": _stand(lookup, x, toward),
        "degrader": _degrader(lookup, x, toward),
        "words": f"plane distance {said(lookup, 'arrangement.study_distance_cm')}, {_how_chosen(lookup)}",
        "axis_x": -toward * got["sad"] / 2, "axis_words": said(lookup, "machine.source_axis_distance_cm"),
    }  # fmt: skip


def _how_chosen(lookup: Lookup) -> str:
    planned = lookup.get("arrangement.plane_distance_cm")
    return "plan, not as built" if isinstance(planned, Value) else "the farthest as the room is"


def _free_line(
    boxes: list[dict[str, Any]], ends: tuple[float, float], half: float, inside: tuple[float, float]
) -> float:
    """Return where a dimension line beside the beam meets the fewest things."""

    def met(y: float) -> tuple[bool, int]:
        outside = not inside[0] + 25 < y < inside[1] - 25
        return outside, sum(
            box["x"] < ends[1] and box["x"] + box["wide"] > ends[0]
            and box["y"] - 5 < y < box["y"] + box["high"] + 20
            for box in boxes
        )  # fmt: skip

    tried = [sign * (half + step) for step in _LINES_TRIED_CM for sign in (1, -1)]
    return min(tried, key=met)


def _stand(lookup: Lookup, x: float, toward: int) -> dict[str, Any] | None:
    got = numbers(lookup, {"deep": "stand.depth_cm", "wide": "stand.width_cm"})
    if got is None:
        return None
    behind = numbers(lookup, {"free": "stand.behind_cm"})
    back = x + toward * got["deep"] / 2
    free = None
    if behind is not None:
        free = {"x": min(back, back + toward * behind["free"]), "wide": behind["free"],
                "words": f"{said(lookup, 'stand.behind_cm')} kept free behind the stand"}  # fmt: skip
    return {
        "x": x - got["deep"] / 2, "y": -got["wide"] / 2, "wide": got["deep"], "high": got["wide"],
        "behind": free, "text_x": x - toward * got["deep"] / 2, "align": "start" if toward < 0 else "end",
    }  # fmt: skip


def _degrader(lookup: Lookup, x: float, toward: int) -> dict[str, Any] | None:
    got = numbers(lookup, {"gap": "arrangement.study_gap_cm", "wide": "degrader.width_cm"})
    if got is None:
        return None
    exit_face = x - toward * got["gap"]
    return {
        "x": min(exit_face, exit_face - toward * _SHEET_CM), "y": -got["wide"] / 2, "thick": _SHEET_CM,
        "high": got["wide"], "text_x": exit_face - toward * 8, "align": "start" if toward < 0 else "end",
        "words": f"degrader, {said(lookup, 'arrangement.study_gap_cm')} before the plane",
    }  # fmt: skip
