"""Where detectors lie on the body, what is expected there, and what was found."""

from collections.abc import Mapping
from typing import Any

from readiness.assessment.wording import in_words
from readiness.outputs.drawing import drawn
from readiness.outputs.lookup import Lookup

# site -> view and place on our own outline
_PLACES: Mapping[str, tuple[str, float, float]] = {
    "umbilicus": ("front", 0, 165), "chest": ("front", 0, 96), "forehead": ("front", 0, 17),
    "eyelid": ("front", 12, 32), "ear": ("front", -19, 34), "axilla": ("front", -36, 104),
    "inframammary-fold": ("front", 17, 126), "upper-arm": ("front", 50, 124), "palm": ("front", -69, 222),
    "inner-thigh": ("front", -10, 250), "groin": ("front", 20, 200), "perineum": ("front", 0, 216),
    "shin": ("front", 24, 318), "foot-dorsum": ("front", -26, 352), "back": ("back", 0, 115),
    "scalp-vertex": ("back", 0, 11), "hand-dorsum": ("back", 69, 222), "calf": ("back", -23, 318),
    "sole": ("back", 26, 360),
}  # fmt: skip
_VIEWS = (("front", 96), ("back", 272))
_LINE = 18


def draw_body(lookup: Lookup) -> str | None:
    """Return the drawing as SVG, or None if no sites are planned."""
    expected = lookup.table("in_vivo.expected_doses")
    if expected is None or not expected.rows:
        return None
    results = lookup.table("in_vivo.site_results")
    found = {str(row["site"]): row for row in results.records()} if results is not None else {}
    lines, placed = [], []
    for number, row in enumerate(expected.records(), 1):
        site = str(row["site"])
        lines.append({
            "number": number, "title": str(row["title"]), "expected": _range(row),
            "found": _found(found.get(site)) if results is not None else "",
        })  # fmt: skip
        if site in _PLACES:
            view, x, y = _PLACES[site]
            placed.append((view, {"x": float(x), "y": float(y), "number": number}))
    heading = "Site, published range" + (", found in the latest file" if results is not None else "")
    return drawn("in-vivo-body", {
        "high": max(400, 44 + _LINE * len(lines)), "lines": lines,
        "words": _words(lines, results is not None),
        "heading": f"{heading} (% of the prescription)",
        "views": [
            {"name": name, "x": x, "sites": [site for view, site in placed if view == name]}
            for name, x in _VIEWS
        ],
    })  # fmt: skip


def _range(row: Mapping[str, Any]) -> str:
    low, high = row["expected_low_percent"], row["expected_high_percent"]
    return "no range" if low is None or high is None else f"{in_words(low)} to {in_words(high)}"


def _found(row: Mapping[str, Any] | None) -> str:
    if row is None or row["prescription_percent"] is None:
        return "no complete reading"
    spread = "" if row["sd_percent"] is None else f" ± {round(float(row['sd_percent']), 1):g}"
    outcome = str(row["outcome"]).partition(":")[0]
    return f"{round(float(row['prescription_percent']), 1):g}{spread}; {outcome}"


def _words(lines: list[dict[str, Any]], measured: bool) -> str:
    said = [
        f"{line['title']}: expected {line['expected']}" + (f", found {line['found']}" if measured else "")
        for line in lines
    ]
    whole = "Body outline from front and back with numbered sites, in per cent of the prescription."
    return f"{whole} {'; '.join(said)}."
