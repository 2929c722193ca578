"""Drawings to scale for page and binder; each shows only values that stand in the assessment."""

import math
from collections.abc import Mapping
from typing import Any

from readiness.assessment.records import Assessment, Value
from readiness.outputs.barrier_picture import draw_barriers
from readiness.outputs.body_picture import draw_body
from readiness.outputs.drawing import drawn, numbers, points, said
from readiness.outputs.lookup import Lookup

_MARGIN_CM = 45.0
_WIDTH_MM = 165.0
_TEXT_CM = 15.0
# name, clockwise turn of the patient seen from above (degrees, 0 faces the beam), day of the cycle
_POSITIONS = (
    ("AP", 0, 1),
    ("RPO", -120, 1),
    ("LPO", 120, 1),
    ("PA", 180, 2),
    ("RAO", -60, 2),
    ("LAO", 60, 2),
)


def make_pictures(assessment: Assessment) -> dict[str, str]:
    """Return the drawings by name; one whose values are missing is left out."""
    lookup = Lookup(assessment)
    found = {
        "room-plan": _plan(lookup),
        "room-elevation": _elevation(lookup),
        "barriers": draw_barriers(lookup),
        "in-vivo-body": draw_body(lookup),
        "six-positions": _positions() if lookup.technique in ("", "six-position") else None,
    }
    return {name: svg for name, svg in found.items() if svg is not None}


def _plan(lookup: Lookup) -> str | None:
    floor = lookup.get("room.floor_polygon_cm")
    if not isinstance(floor, Value):
        return None
    corners = [(x, -y) for x, y in floor.value]
    left, right = min(x for x, _ in corners), max(x for x, _ in corners)
    top, bottom = min(y for _, y in corners), max(y for _, y in corners)
    plane = _plane_in_plan(lookup, left)
    words = f"Floor of the room with {len(_boxes(lookup))} things in it; plane distance "
    words += f"{said(lookup, 'arrangement.study_distance_cm')} from the source."
    return drawn("room-plan", {
        "prefix": "plan-", "left": left - _MARGIN_CM, "top": top - _MARGIN_CM,
        "wide": right - left + 2 * _MARGIN_CM, "high": bottom - top + 2 * _MARGIN_CM + 20,
        "width_mm": _WIDTH_MM, "size": _TEXT_CM, "words": words, "floor": points(corners),
        "boxes": _boxes(lookup), "plane": plane, "bar": {"x": left, "y": bottom + 40},
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
            "text_y": -(box["y_min_cm"] + box["y_max_cm"]) / 2 + (5 if _is_wide(box) else 80),
        }
        for item, box in found.items()
        if {"x_min_cm", "x_max_cm", "y_min_cm", "y_max_cm"} <= box.keys()
    ]  # fmt: skip


def _is_wide(box: Mapping[str, Any]) -> bool:
    return bool(box["x_max_cm"] - box["x_min_cm"] > 60)


def _plane_in_plan(lookup: Lookup, left: float) -> dict[str, Any] | None:
    got = numbers(lookup, {
        "side": "arrangement.side_deg", "distance": "arrangement.study_distance_cm",
        "sad": "machine.source_axis_distance_cm", "opening": "beam.opening_cm",
    })  # fmt: skip
    if got is None or got["side"] not in (90, 270):
        return None
    toward = -1 if got["side"] == 90 else 1
    source, x = -toward * got["sad"], toward * (got["distance"] - got["sad"])
    half = got["opening"] / 200 * got["distance"]
    stand = numbers(lookup, {"wide": "stand.depth_cm", "high": "stand.width_cm"})
    box = None if stand is None else {
        "x": x - stand["wide"] / 2, "y": -stand["high"] / 2, "wide": stand["wide"], "high": stand["high"],
    }  # fmt: skip
    return {
        "x": x, "y1": -half - 20, "y2": half + 20, "source": source, "mid": (source + x) / 2,
        "dim": half + 60, "stand": box,
        "fan": points([(source, 0.0), (x, -half), (x, half)]),
        "words": f"plane distance {said(lookup, 'arrangement.study_distance_cm')}, plan, not as built",
    }  # fmt: skip


def _elevation(lookup: Lookup) -> str | None:
    got = numbers(lookup, {
        "side": "arrangement.side_deg", "distance": "arrangement.study_distance_cm",
        "sad": "machine.source_axis_distance_cm", "opening": "beam.opening_cm",
        "iso": "room.isocentre_height_cm", "ceiling": "room.ceiling_height_cm",
        "tilt": "arrangement.room_tilt_deg",
    })  # fmt: skip
    floor = lookup.get("room.floor_polygon_cm")
    if got is None or got["side"] not in (90, 270) or not isinstance(floor, Value):
        return None
    left, right = min(x for x, _ in floor.value), max(x for x, _ in floor.value)
    toward = -1 if got["side"] == 90 else 1
    x = toward * (got["distance"] - got["sad"])
    room = {"x": left, "y": -got["ceiling"], "wide": right - left, "high": got["ceiling"]}
    stand = numbers(lookup, {"wide": "stand.depth_cm", "high": "stand.height_cm"})
    box = None if stand is None else {
        "x": x - stand["wide"] / 2, "y": -stand["high"], "wide": stand["wide"], "high": stand["high"],
    }  # fmt: skip
    words = (
        f"Section through the beam axis: ceiling at {said(lookup, 'room.ceiling_height_cm')}, isocentre at "
        f"{said(lookup, 'room.isocentre_height_cm')}, raised hands of the tallest patient at "
        f"{said(lookup, 'arrangement.raised_hands_height_cm')}."
    )
    return drawn("room-elevation", {
        "left": left - _MARGIN_CM, "top": -got["ceiling"] - _MARGIN_CM, "wide": right - left + 2 * _MARGIN_CM,
        "high": got["ceiling"] + 2 * _MARGIN_CM + 20, "width_mm": _WIDTH_MM, "size": _TEXT_CM, "words": words,
        "room": room, "fields": [_field(got, toward, x, sign) for sign in (1, -1)], "plane": {"x": x},
        "stand": box, "patient": _patient(lookup, x, toward), "iso": -got["iso"], "bar_y": 40.0,
        "iso_words": said(lookup, "room.isocentre_height_cm"),
        "ceiling_words": said(lookup, "room.ceiling_height_cm"),
    })  # fmt: skip


def _field(got: Mapping[str, float], toward: int, x: float, sign: int) -> dict[str, Any]:
    """Return one tilted field; sign 1 is aimed at the head, so its source lies below the isocentre."""
    tilt, edge = math.radians(got["tilt"]), math.atan(got["opening"] / 200)
    source_x = -toward * got["sad"] * math.cos(tilt)
    source_z = got["iso"] - sign * got["sad"] * math.sin(tilt)
    run = abs(x - source_x)

    def height(angle: float) -> float:
        return source_z + run * math.tan(angle)

    axis = sign * tilt
    ends = [(x, -height(axis + each)) for each in (edge, -edge)]
    return {
        "fan": points([(source_x, -source_z), *ends]), "x1": source_x, "y1": -source_z, "x2": x,
        "y2": -height(axis),
        "text_x": source_x - toward * 14, "align": "start" if toward < 0 else "end",
        "words": "aimed at the head" if sign > 0 else "aimed at the feet",
    }  # fmt: skip


def _patient(lookup: Lookup, x: float, toward: int) -> dict[str, Any] | None:
    got = numbers(lookup, {
        "height": "program.tallest_patient_cm", "stand": "stand.height_cm",
        "hands": "arrangement.raised_hands_height_cm",
    })  # fmt: skip
    if got is None:
        return None
    tall, feet = got["height"], got["stand"]
    return {
        "head": -(feet + tall - 11), "neck": -(feet + tall - 22), "shoulder": -(feet + 0.82 * tall),
        "hip": -(feet + 0.48 * tall), "feet": -feet, "hands": -got["hands"],
        "text_x": x - toward * 40, "align": "start" if toward < 0 else "end",
        "words": f"raised hands of the tallest patient, {said(lookup, 'arrangement.raised_hands_height_cm')}",
    }  # fmt: skip


def _positions() -> str:
    places = [
        {"name": name, "turn": turn, "day": day, "x": 60 + 120 * index}
        for index, (name, turn, day) in enumerate(_POSITIONS)
    ]
    words = "Six positions 60 degrees apart: AP, RPO and LPO on day 1; PA, RAO and LAO on day 2."
    return drawn("six-positions", {"positions": places, "words": words})
