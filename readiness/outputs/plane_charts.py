"""Charts of a predicted field as a whole: the rectangle of the plane, and the field over a moving couch."""

from typing import Any

from readiness.assessment.records import Value
from readiness.outputs.chart_making import figure_of, svg_of
from readiness.outputs.lookup import Lookup

_LEVELS = (50, 60, 70, 80, 85, 90, 92, 94, 96, 98, 100, 102, 104, 106, 108, 110, 115, 120)


def draw_plane_map(lookup: Lookup) -> str | None:
    """Return lines of equal predicted dose over the rectangle of the composite field, mid-height 100."""
    table = lookup.table("arrangement.plane_map")
    if table is None:
        return None
    doses = {(row["height_cm"], row["across_cm"]): row["relative_dose"] for row in table.records()}
    heights = sorted({float(height or 0) for height, _ in doses})
    across = sorted({float(place or 0) for _, place in doses})
    grid = [[100 * float(doses[height, place] or 0) for height in heights] for place in across]
    figure, (axes,) = figure_of(1, height_in=3.2)
    lines = axes.contour(heights, across, grid, levels=_LEVELS, colors="black", linewidths=0.8)
    axes.clabel(lines, fmt="%g %%", fontsize=7)
    _rectangle(axes, lookup)
    axes.set(xlabel="height above mid-height [cm]", ylabel="across [cm]", aspect="equal")
    words = (
        "Predicted dose of the dual field in per cent of mid-height; inside the dashed lines it is judged."
        " Nothing here is measured."
    )
    return svg_of(figure, "plane-map", "Dual field over the plane", words)


def _rectangle(axes: Any, lookup: Lookup) -> None:
    """Draw the length and the width over which evenness is judged."""
    half_length = lookup.get("criterion.uniformity_half_length_cm")
    half_width = lookup.get("criterion.uniformity_half_width_cm")
    if isinstance(half_length, Value) and isinstance(half_width, Value):
        x, y = float(half_length.value), float(half_width.value)
        axes.plot([-x, x, x, -x, -x], [-y, -y, y, y, -y], color="0.4", linewidth=1, linestyle=(0, (6, 3)))


def draw_couch_field(lookup: Lookup) -> str | None:
    """Return the predicted dose across a lying patient, and the dose rate along the travel."""
    across = lookup.table("arrangement.couch_profile_across")
    along = lookup.table("arrangement.couch_rate_profile")
    if across is None or along is None:
        return None
    figure, (upper, lower) = figure_of(2, height_in=4.4)
    upper.plot(across.column("across_cm"), across.column("relative_dose"), "k-")
    upper.set(xlabel="across the patient [cm]", ylabel="dose of a pass, middle 1", ylim=(0, None))
    lower.plot(along.column("position_cm"), along.column("dose_rate_cgy_per_min"), "k-")
    lower.set(xlabel="along the travel [cm]", ylabel="dose rate [cGy/min]", ylim=(0, None))
    words = (
        "Above: dose of a pass across. Below: dose rate along the travel, couch at rest."
        " Both at the surface of the couch, both predicted."
    )
    return svg_of(figure, "couch-field", "Vertical field over the couch", words)
