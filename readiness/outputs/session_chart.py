"""One session on a time axis: who is in the room, when the patient stands, when the beam is on."""

from itertools import groupby
from typing import Any

from readiness.assessment.records import Value
from readiness.assessment.wording import in_words
from readiness.outputs.chart_making import figure_of, svg_of
from readiness.outputs.lookup import Lookup
from readiness.quantities import Table

_NAMES = (("first", "First session"), ("later", "Later session"))
_FIELDS = ("first field", "second field", "field", "pass")
_ROWS = ("room without the patient", "patient with staff", "patient stands, beam off", "beam on")


def draw_session(lookup: Lookup) -> str | None:
    """Return the chart as SVG, or None if no session can be laid on minutes."""
    found = [(title, lookup.get(f"arrangement.{name}_session")) for name, title in _NAMES]
    tables = [(title, got) for title, got in found if isinstance(got, Value) and isinstance(got.value, Table)]
    if not tables:
        return None
    figure, axes = figure_of(len(tables), height_in=1.85 * len(tables))
    longest = max(_end(got.value) for _, got in tables)
    for (title, got), place in zip(tables, axes, strict=True):
        _draw(place, got.value)
        place.set_xlim(0, longest * 1.02)
        heading = f"{title}: {in_words(round(_end(got.value), 1))} min ({got.basis})"
        place.set_title(heading, fontsize=9, loc="left")
    axes[-1].set_xlabel("minutes from entering the mode")
    return svg_of(figure, "session-timeline", "A session in minutes", _words(lookup, tables))


def _end(table: Table) -> float:
    return max(float(str(end)) for end in table.column("end_min"))


def _row(step: dict[str, Any]) -> int:
    if step["step"] in _FIELDS:
        return 3
    return {"with staff": 1, "standing": 2, "lying": 2}.get(str(step["patient"]), 0)


def _draw(axes: Any, table: Table) -> None:
    for step in table.records():
        row = _row(dict(step))
        axes.barh(
            row, step["duration_min"], left=step["start_min"], height=0.7, edgecolor="black", linewidth=0.6,
            color="black" if row == 3 else "white" if row < 2 else "0.75",
        )  # fmt: skip
    positions = [step for step in table.records() if step["position"]]
    for name, steps in groupby(positions, key=lambda step: step["position"]):
        each = list(steps)
        middle = (float(str(each[0]["start_min"])) + float(str(each[-1]["end_min"]))) / 2
        axes.text(middle, 3.62, str(name), ha="center", va="bottom", fontsize=6, rotation=90)
    axes.set_yticks(range(len(_ROWS)), _ROWS, fontsize=7)
    axes.set_ylim(-0.6, 4.9)


def _words(lookup: Lookup, tables: list[tuple[str, Value]]) -> str:
    said = [f"{title} {in_words(round(_end(got.value), 1))} minutes ({got.basis})" for title, got in tables]
    by_course = lookup.get("arrangement.session_minutes_by_course")
    longest = ""
    if isinstance(by_course, Value) and isinstance(by_course.value, Table):
        columns = by_course.value.columns
        if "longest_position_min" in columns:
            most = max(float(str(each)) for each in by_course.value.column("longest_position_min"))
            allowed = lookup.get("program.standing_time_min")
            limit = f" of {in_words(allowed.value)} allowed" if isinstance(allowed, Value) else ""
            longest = f" The longest position takes {in_words(round(most, 1))} minutes{limit}."
    return f"{'; '.join(said)}. Black: beam on; grey: the patient stands.{longest}"
