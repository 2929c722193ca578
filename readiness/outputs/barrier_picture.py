"""
The barriers of the room to scale, in plan and section, with both fields to the spots that they meet, and
the weekly dose of each place before and with the program as bars.
"""

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from typing import Any

from readiness.assessment.records import Ref, Value
from readiness.assessment.wording import in_words
from readiness.outputs.drawing import drawn, numbers, points
from readiness.outputs.lookup import Lookup
from readiness.quantities import Table

_WIDTH_MM = 165.0
_GAP_CM = 30.0  # from a wall to the place behind it, and between parts of the drawing
_LINES_A_WIDTH = 70  # lines of text that would fit side by side into the width
_NO_PREDICTION = "no prediction: survey in the mode"
_SIDES = {"x-min-wall": "left", "x-max-wall": "right", "y-max-wall": "top", "y-min-wall": "bottom"}
_LEVELS = {"ceiling": "top", "floor": "bottom"}


@dataclass(frozen=True)
class _Place:
    """A place behind a barrier, or one that only a survey can judge (no dose)."""

    title: str
    surface: str
    thickness_cm: float
    before: Value | None
    after: Value | None
    goal_usv: float | None


@dataclass(frozen=True)
class _Frame:
    """A rectangle of the drawing in its own coordinates (centimetres, downward) and the wall around it."""

    left: float
    right: float
    top: float
    bottom: float


def draw_barriers(lookup: Lookup) -> str | None:
    """Return the drawing as SVG, or None if the room or its fields are not known well enough."""
    floor, spots = lookup.get("room.floor_polygon_cm"), lookup.get("arrangement.beam_spots")
    got = numbers(lookup, {
        "ceiling": "room.ceiling_height_cm", "iso": "room.isocentre_height_cm",
        "side": "arrangement.side_deg", "sad": "machine.source_axis_distance_cm",
        "tilt": "arrangement.room_tilt_deg", "distance": "arrangement.study_distance_cm",
    })  # fmt: skip
    places = _places(lookup)
    if got is None or not isinstance(floor, Value) or not isinstance(spots, Value) or not places:
        return None
    xs, ys = [x for x, _ in floor.value], [y for _, y in floor.value]
    plan = _Frame(min(xs), max(xs), -max(ys), -min(ys))
    section = _Frame(min(xs), max(xs), -got["ceiling"], 0.0)
    around = {side: _room_for(places, side) for side in ("left", "right", "top", "bottom")}
    wide = plan.right - plan.left + around["left"] + around["right"]
    size = wide / _LINES_A_WIDTH
    left = plan.left - around["left"]
    above = max(_thickest(places, "ceiling"), _GAP_CM)
    below = max(_thickest(places, "floor"), _GAP_CM)
    drop = plan.bottom + around["bottom"] + above + 5 * size + got["ceiling"]  # floor line of the section
    bars_top = drop + below + 6 * size
    bars = _bars(places, left, wide, bars_top, size)
    rays = list(spots.value.records())
    return drawn("barriers", {
        "left": left, "top": plan.top - around["top"] - 2 * size, "wide": wide,
        "high": bars_top + bars["high"] - plan.top + around["top"] + 2 * size, "width_mm": _WIDTH_MM,
        "size": size, "words": _words(places), "floor": points((x, -y) for x, y in floor.value),
        "walls": _walls(places, plan, size), "beam": _beam_in_plan(got, rays), "drop": drop,
        "room": {"x": section.left, "y": section.top, "wide": section.right - section.left,
                 "high": got["ceiling"]},
        "slabs": _slabs(places, section), "fields": [_field(got, rays, each) for each in ("head", "feet")],
        "iso": -got["iso"], "plane": _toward(got) * (got["distance"] - got["sad"]), "bars": bars,
        "bar_y": below + 2.2 * size,
    })  # fmt: skip


def _places(lookup: Lookup) -> list[_Place]:
    row = lookup.row
    if row is None:
        return []
    found = []
    values = {(value.name, value.item): value for value in lookup.assessment.values}
    for value in lookup.assessment.values:
        if value.name == "exposure.title" and value.item.id.endswith(f" from {row.item.id}"):
            barrier = Ref("barrier", value.item.id.removesuffix(f" from {row.item.id}"))
            layers = values.get(("barrier.layers", barrier))
            surface = values.get(("barrier.surface", barrier))
            goal = values.get(("exposure.goal_msv_per_week", value.item))
            found.append(_Place(
                str(value.value), str(surface.value) if surface else "", _thickness(layers),
                values.get(("exposure.before_usv_per_week", value.item)),
                values.get(("exposure.weekly_dose_usv_per_week", value.item)),
                1000 * float(goal.value) if goal else None,
            ))  # fmt: skip
    return found


def _thickness(layers: Value | None) -> float:
    if layers is None or not isinstance(layers.value, Table):
        return 0.0
    return sum(float(str(each)) for each in layers.value.column("thickness_cm"))


def _on(places: Sequence[_Place], surface: str) -> list[_Place]:
    return [place for place in places if place.surface == surface]


def _thickest(places: Sequence[_Place], surface: str) -> float:
    return max((place.thickness_cm for place in _on(places, surface)), default=0.0)


def _room_for(places: Sequence[_Place], side: str) -> float:
    """Return how much lies outside the floor on one side: wall, place, names."""
    surface = next(name for name, where in _SIDES.items() if where == side)
    return _thickest(places, surface) + 2 * _GAP_CM + 24.0 * max(1, len(_on(places, surface)))


def _walls(places: Sequence[_Place], plan: _Frame, size: float) -> list[dict[str, Any]]:
    """Return the walls that stand as barriers, with the names of the places behind them."""
    found = []
    for surface, side in _SIDES.items():
        here, thick = _on(places, surface), _thickest(places, surface)
        if not here:
            continue
        along_y = side in ("left", "right")
        out = 1 if side in ("right", "bottom") else -1
        face = {"left": plan.left, "right": plan.right, "top": plan.top, "bottom": plan.bottom}[side]
        outer = face + out * thick
        spot = outer + out * _GAP_CM
        names = [
            {"text": place.title, "at": spot + out * (0.6 + 1.25 * index) * size + (size if out > 0 else 0)}
            for index, place in enumerate(here)
        ]
        low, high = min(face, outer), abs(outer - face)
        box = (
            {"x": low, "y": plan.top, "wide": high, "high": plan.bottom - plan.top}
            if along_y
            else {"x": plan.left, "y": low, "wide": plan.right - plan.left, "high": high}
        )
        found.append({**box, "along_y": along_y, "spot": spot, "names": names})
    return found


def _slabs(places: Sequence[_Place], section: _Frame) -> list[dict[str, Any]]:
    """Return the walls, ceiling and floor that the section cuts."""
    found = []
    for surface in ("x-min-wall", "x-max-wall", *_LEVELS):
        thick = _thickest(places, surface)
        if thick == 0:
            continue
        wide, high = section.right - section.left, section.bottom - section.top
        found.append({
            "x-min-wall": {"x": section.left - thick, "y": section.top, "wide": thick, "high": high},
            "x-max-wall": {"x": section.right, "y": section.top, "wide": thick, "high": high},
            "ceiling": {"x": section.left, "y": section.top - thick, "wide": wide, "high": thick},
            "floor": {"x": section.left, "y": section.bottom, "wide": wide, "high": thick},
        }[surface])  # fmt: skip
    return found


def _toward(got: Mapping[str, float]) -> int:
    return -1 if got["side"] == 90 else 1


def _beam_in_plan(got: Mapping[str, float], rays: Sequence[Mapping[str, Any]]) -> dict[str, Any]:
    """Return the field seen from above: source and the spots of its edges."""
    source = -_toward(got) * got["sad"] * math.cos(math.radians(got["tilt"]))
    ends = [
        (ray["x_cm"], -ray["y_cm"])
        for ray in rays
        if ray["field"] == "head" and ray["ray"] in ("edge toward gantry", "edge away from gantry")
    ]
    return {"source": source, "fan": points([(source, 0.0), *ends]), "spots": ends}


def _field(got: Mapping[str, float], rays: Sequence[Mapping[str, Any]], field: str) -> dict[str, Any]:
    """Return one tilted field in the section: source, axis and edges to the spots that they meet."""
    sign = 1 if field == "head" else -1
    tilt = math.radians(got["tilt"])
    x = -_toward(got) * got["sad"] * math.cos(tilt)
    y = -(got["iso"] - sign * got["sad"] * math.sin(tilt))
    ends = {ray["ray"]: (ray["x_cm"], -ray["height_above_floor_cm"]) for ray in rays if ray["field"] == field}
    return {
        "x": x, "y": y, "axis": ends["axis"], "edges": [ends["upper edge"], ends["lower edge"]],
        "words": f"aimed at the {field}", "align": "start" if _toward(got) < 0 else "end",
        "text_x": x - _toward(got) * 14,
    }  # fmt: skip


def _bars(places: Sequence[_Place], left: float, wide: float, top: float, size: float) -> dict[str, Any]:
    """Return two bars a place as parts of its weekly goal, with the numbers beside them."""
    ratios = [
        value.value / place.goal_usv
        for place in places
        for value in (place.before, place.after)
        if value is not None and place.goal_usv
    ]
    most = max([1.0, *ratios])
    start, run = left + 0.34 * wide, 0.3 * wide
    rows = [
        _bar(place, top + 3.4 * size + index * 3.2 * size, run / most, size)
        for index, place in enumerate(places)
    ]
    return {
        "rows": rows, "x": start, "goal": start + run / most, "text_x": start + run + 1.2 * size,
        "name_x": left, "y": top + 1.2 * size, "bottom": top + 2.4 * size + len(places) * 3.2 * size,
        "high": (4.0 + 3.2 * len(places)) * size, "thick": 0.8 * size,
    }  # fmt: skip


def _bar(place: _Place, y: float, goal_wide: float, size: float) -> dict[str, Any]:
    row: dict[str, Any] = {"title": place.title, "y": y, "bars": [], "words": _NO_PREDICTION}
    if place.before is None or place.after is None or not place.goal_usv:
        return row
    before, after = place.before.value, place.after.value
    return row | {
        "bars": [
            {"y": y - 0.95 * size, "wide": goal_wide * before / place.goal_usv, "fill": "#fff"},
            {"y": y + 0.05 * size, "wide": goal_wide * after / place.goal_usv, "fill": "#000"},
        ],
        "words": f"{in_words(before)}, then {in_words(after)} of {in_words(place.goal_usv)} µSv/week "
        f"({place.after.basis})",
    }


def _words(places: Sequence[_Place]) -> str:
    said = []
    for place in places:
        if place.before is None or place.after is None:
            said.append(f"{place.title}: no prediction, a survey in the mode decides")
        else:
            goal = f" of {in_words(place.goal_usv)}" if place.goal_usv else ""
            said.append(
                f"{place.title}: {in_words(place.before.value)} before, {in_words(place.after.value)} with "
                f"the program{goal} microsievert a week ({place.after.basis})"
            )
    return "Plan and section with both tilted fields; weekly dose by place. " + "; ".join(said) + "."
