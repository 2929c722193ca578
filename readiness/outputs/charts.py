"""Charts of profiles, of the choice of distance and tilt, and of the road; legible without colour."""

from collections.abc import Callable
from datetime import date
from typing import Any

from readiness.assessment.records import Assessment, Value
from readiness.outputs.chart_making import figure_of, svg_of
from readiness.outputs.lookup import Lookup
from readiness.outputs.plane_charts import draw_couch_field, draw_plane_map
from readiness.outputs.session_chart import draw_session
from readiness.outputs.words import with_unit
from readiness.quantities import Table

_HEIGHT_IN = 3.6
_BELOW = 0.2  # room for the legend below a profile


def make_charts(assessment: Assessment) -> dict[str, str]:
    """Return the charts by name, as SVG; one whose values are missing is left out."""
    lookup = Lookup(assessment)
    makers: dict[str, Callable[[Lookup], str | None]] = {
        "profile-over-height": _profile_over_height,
        "profile-across": _profile_across,
        "distance-and-tilt": _distance_and_tilt,
        "plane-map": draw_plane_map,
        "couch-field": draw_couch_field,
        "session-timeline": draw_session,
        "road": _road,
    }
    drawn = {name: maker(lookup) for name, maker in makers.items()}
    return {name: svg for name, svg in drawn.items() if svg is not None}


def _number(lookup: Lookup, name: str) -> float | None:
    got = lookup.get(name)
    return float(got.value) if isinstance(got, Value) and isinstance(got.value, (int, float)) else None


def _figure() -> tuple[Any, Any]:
    figure, (axes,) = figure_of(1, height_in=_HEIGHT_IN)
    return figure, axes


def _limits(axes: Any, half_cm: float, percent: float, centre: float) -> None:
    for sign in (1, -1):
        level = centre * (1 + sign * percent / 100)
        axes.plot([-half_cm, half_cm], [level, level], color="black", linewidth=1, linestyle=(0, (6, 3)))


def _measured(axes: Any, table: Table | None, place: str) -> None:
    if table is not None:
        axes.plot(table.column(place), table.column("relative_dose"), "ko", markersize=4, label="measured")


def _profile(
    axes: Any, table: Table, measured: Table | None, place: str, half_cm: float | None, percent: float | None
) -> None:
    """Draw a predicted profile with its band, the limits about the middle, and what was measured."""
    rows = [row for row in table.records() if row["predicted"] is not None]
    axes.plot([r[place] for r in rows], [r["predicted"] for r in rows], "k-", label="predicted")
    band = [r for r in rows if r["low"] is not None and r["high"] is not None]
    if band:
        axes.fill_between(
            [r[place] for r in band], [r["low"] for r in band], [r["high"] for r in band],
            color="0.8", label="band of the prediction",
        )  # fmt: skip
    if half_cm and percent:
        _limits(axes, half_cm, percent, 1.0)
    lowest = min(float(r["predicted"] or 0) for r in rows)
    _measured(axes, measured, place)
    axes.set(ylabel="relative dose", ylim=(max(0.0, lowest - _BELOW), None))
    axes.legend(loc="lower center", frameon=False)


def _profile_over_height(lookup: Lookup) -> str | None:
    table = lookup.table("arrangement.profile_height")
    if table is None:
        return None
    figure, axes = _figure()
    half = _number(lookup, "criterion.uniformity_half_length_cm")
    percent = _number(lookup, "criterion.vertical_uniformity_percent")
    measured = lookup.table("arrangement.measured_profile_height")
    _profile(axes, table, measured, "height_cm", half, percent)
    axes.set(xlabel="height above the isocentre [cm]")
    words = (
        f"Dual field over height at {_said(lookup, 'arrangement.study_distance_cm')} and tilt "
        f"{_said(lookup, 'arrangement.study_tilt_deg')}; dashed lines are the limits. "
        "Curve and band are predicted."
    )
    return svg_of(figure, "profile-over-height", "Dual field over the height of the patient", words)


def _said(lookup: Lookup, name: str) -> str:
    got = lookup.get(name)
    return f"{with_unit(name, got.value)} ({got.basis})" if isinstance(got, Value) else "an unknown value"


def _profile_across(lookup: Lookup) -> str | None:
    table = lookup.table("arrangement.profile_width")
    if table is None:
        return None
    figure, axes = _figure()
    half = _number(lookup, "criterion.uniformity_half_width_cm")
    percent = _number(lookup, "criterion.horizontal_uniformity_percent")
    measured = lookup.table("arrangement.measured_profile_width")
    _profile(axes, table, measured, "across_cm", half, percent)
    axes.set(xlabel="across the patient [cm]")
    words = (
        "Dual field across the patient; dashed lines are the limits. Distance, not tilt, evens it. "
        "Curve and band are predicted."
    )
    return svg_of(figure, "profile-across", "Dual field across the patient", words)


def _distance_and_tilt(lookup: Lookup) -> str | None:
    table = lookup.table("arrangement.uniformity_map")
    limit = _number(lookup, "criterion.vertical_uniformity_percent")
    if table is None or limit is None:
        return None
    figure, axes = _figure()
    rows = list(table.records())
    vertical = [r for r in rows if _below(r["vertical_percent"], limit)]
    both = [r for r in vertical if r["within_both"] is True]
    axes.plot([r["distance_cm"] for r in vertical], [r["tilt_deg"] for r in vertical], linestyle="none",
              marker=".", color="0.55", label="vertical limit kept")  # fmt: skip
    if both:
        axes.plot([r["distance_cm"] for r in both], [r["tilt_deg"] for r in both], "ks", markersize=4,
                  label="both limits kept")  # fmt: skip
    distance, tilt = (
        _number(lookup, "arrangement.study_distance_cm"),
        _number(lookup, "arrangement.study_tilt_deg"),
    )
    if distance and tilt:
        axes.plot([distance], [tilt], "k*", markersize=14, markerfacecolor="white", label="plan")
    reach = _number(lookup, "arrangement.farthest_plane_distance_cm")
    if reach:
        axes.axvline(reach, color="black", linewidth=1, linestyle=":", label="farthest plane as the room is")
    axes.set(xlabel="plane distance [cm]", ylabel="tilt [°]")
    axes.legend(loc="upper right", frameon=False)
    words = "Distances and tilts at which the predicted dual field keeps its limits, and the plan."
    return svg_of(figure, "distance-and-tilt", "Plane distance and tilt", words)


def _below(entry: object, limit: float) -> bool:
    return isinstance(entry, (int, float)) and entry <= limit


def _road(lookup: Lookup) -> str | None:
    schedule = lookup.assessment.schedule
    if schedule is None or not schedule.tasks:
        return None
    tasks = sorted(schedule.tasks, key=lambda task: (task.start, task.finish, task.id))
    figure, axes = _figure()
    figure.set_size_inches(6.5, 0.9 + 0.17 * len(tasks))
    for line, task in enumerate(tasks):
        days = (task.finish - task.start).days + 1
        axes.barh(line, days, left=task.start.toordinal(), height=0.6, edgecolor="black",
                  color="0.25" if task.critical else "white")  # fmt: skip
    axes.set_yticks(range(len(tasks)), [task.title[:58] for task in tasks], fontsize=6)
    axes.invert_yaxis()
    ticks = [int(tick) for tick in axes.get_xticks()]
    axes.set_xticks(ticks, [date.fromordinal(tick).isoformat() for tick in ticks], fontsize=6, rotation=30)
    if schedule.target:
        axes.axvline(schedule.target.toordinal(), color="black", linestyle="--", linewidth=1)
    words = (
        "Tasks from start to finish; dark bars lie on the critical path; the dashed line is the wanted date."
    )
    return svg_of(figure, "road", "Road to the first patient", words)
