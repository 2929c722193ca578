"""The room from the side, to scale: both tilted fields, degrader, plane, stand, patient, clearance."""

import math
from collections.abc import Mapping
from typing import Any

from readiness.assessment.records import Value
from readiness.outputs.drawing import drawn, numbers, points, said
from readiness.outputs.lookup import Lookup

_MARGIN_CM = 45.0
_WIDTH_MM = 165.0
_TEXT_CM = 13.0
_LINE_CM = 17.0  # from one note to the next
_SHEET_CM = 3.0


def draw_room_elevation(lookup: Lookup) -> str | None:
    """Return the section through the beam axis, or None where room, beam or plane are not described."""
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
    words = (
        f"Section through the beam axis: ceiling at {said(lookup, 'room.ceiling_height_cm')}, isocentre at "
        f"{said(lookup, 'room.isocentre_height_cm')}, raised hands of the tallest patient at "
        f"{said(lookup, 'arrangement.raised_hands_height_cm')}."
    )
    return drawn("room-elevation", {
        "prefix": "side-", "left": left - _MARGIN_CM, "top": -got["ceiling"] - _MARGIN_CM,
        "wide": right - left + 2 * _MARGIN_CM, "high": got["ceiling"] + 2 * _MARGIN_CM + 20,
        "width_mm": _WIDTH_MM, "size": _TEXT_CM, "words": words,
        "room": {"x": left, "y": -got["ceiling"], "wide": right - left, "high": got["ceiling"]},
        "fields": [_field(got, toward, x, sign) for sign in (1, -1)], "plane": {"x": x},
        "stand": _stand(lookup, x), "degrader": _degrader(lookup, x, toward),
        "patient": _patient(lookup, x), "notes": _notes(lookup, got, x), "iso": -got["iso"],
        "align": "start" if toward < 0 else "end", "note_x": x - toward * 62, "bar_y": 40.0,
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


def _stand(lookup: Lookup, x: float) -> dict[str, float] | None:
    got = numbers(lookup, {"deep": "stand.depth_cm", "high": "stand.height_cm"})
    if got is None:
        return None
    return {"x": x - got["deep"] / 2, "y": -got["high"], "wide": got["deep"], "high": got["high"]}


def _degrader(lookup: Lookup, x: float, toward: int) -> dict[str, float] | None:
    got = numbers(lookup, {
        "gap": "arrangement.study_gap_cm", "high": "degrader.height_cm", "foot": "degrader.foot_height_cm",
    })  # fmt: skip
    if got is None:
        return None
    exit_face = x - toward * got["gap"]
    return {"x": min(exit_face, exit_face - toward * _SHEET_CM), "y": -got["foot"] - got["high"],
            "wide": _SHEET_CM, "high": got["high"]}  # fmt: skip


def _patient(lookup: Lookup, x: float) -> dict[str, Any] | None:
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
    }  # fmt: skip


# value -> what is written beside the height at which it stands
_HEIGHTS = {
    "arrangement.raised_hands_height_cm": "raised hands of the tallest patient",
    "arrangement.upper_axis_height_cm": "upper axis",
    "arrangement.lower_axis_height_cm": "lower axis",
    "stand.height_cm": "stand",
}


def _notes(lookup: Lookup, got: Mapping[str, float], x: float) -> list[dict[str, Any]]:
    """Return what is written beside the plane, each at its own height."""
    notes: list[dict[str, Any]] = []
    for name, words in _HEIGHTS.items():
        found = numbers(lookup, {"height": name})
        if found is not None and 0 <= found["height"] <= got["ceiling"]:
            notes.append({"x1": x, "y": -found["height"], "words": f"{words}, {said(lookup, name)}"})
    clear = numbers(lookup, {"left": "arrangement.ceiling_clearance_cm"})
    if clear is not None and notes and "raised" in notes[0]["words"]:
        notes[0]["words"] += f"; {said(lookup, 'arrangement.ceiling_clearance_cm')} to the ceiling"
    return _apart(notes)


def _apart(notes: list[dict[str, Any]]) -> list[dict[str, Any]]:
    """Return the notes from top to bottom, none written over the one above it."""
    placed: list[dict[str, Any]] = []
    for note in sorted(notes, key=lambda note: float(note["y"])):
        lowest = placed[-1]["text_y"] + _LINE_CM if placed else note["y"]
        placed.append({**note, "text_y": max(note["y"], lowest)})
    return placed
