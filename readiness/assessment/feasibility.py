"""Which arrangements are possible, in words, and what decides that."""

from collections import Counter
from collections.abc import Iterable, Mapping
from dataclasses import replace

from readiness.assessment.comparison import telling
from readiness.assessment.graph import Graph
from readiness.assessment.kinds import PARTS
from readiness.assessment.records import PHASES, ArrangementRow, Finding, Ref, Rule, Value

# what is shown when arrangements are compared, where it is known
FIGURES = (
    "arrangement.farthest_plane_distance_cm",
    "arrangement.farthest_when_cleared_cm",
    "arrangement.plane_distance_cm",
    "arrangement.ceiling_clearance_cm",
    "arrangement.best_tilt_deg",
    "arrangement.vertical_uniformity_percent",
    "arrangement.horizontal_uniformity_percent",
    "arrangement.r80_mm",
)
_OWN = {"arrangement", "exposure", *PARTS}


def by_arrangement(findings: Iterable[Finding], graph: Graph) -> dict[Ref, tuple[Finding, ...]]:
    """Return each arrangement with its own findings, in one pass over all of them."""
    shared: dict[Ref, list[Finding]] = {}
    for finding in findings:
        if finding.item.kind == "exposure":
            owner = Ref("arrangement", graph.owners(finding.item).get("arrangement", ""))
            shared.setdefault(owner, []).append(finding)
        elif finding.item.kind in _OWN:
            shared.setdefault(finding.item, []).append(finding)
    return {
        arrangement: tuple(
            finding
            for kind, owner in graph.owners(arrangement).items()
            if kind in _OWN
            for finding in shared.get(Ref(kind, owner), ())
        )
        + tuple(finding for finding in shared.get(arrangement, ()) if finding.item.kind == "exposure")
        for arrangement in graph.refs("arrangement")
    }


def feasibility(findings: Iterable[Finding], rules: Mapping[str, Rule]) -> tuple[str, tuple[Finding, ...]]:
    """Return the feasibility of one arrangement from its own findings, and the findings that decide it."""
    failed, unknown, open_musts = [], [], []
    for finding in findings:
        rule = rules[finding.rule]
        if rule.physical and finding.outcome == "not met":
            failed.append(finding)
        elif rule.physical and finding.outcome == "not assessed":
            unknown.append(finding)
        elif rule.strength == "must" and finding.outcome in {"not met", "not assessed"}:
            open_musts.append(finding)
    if failed:
        return "not feasible here", tuple(failed)
    if unknown:
        return "not enough described", tuple(unknown)
    if open_musts:
        worst = sorted(
            open_musts,
            key=lambda finding: (
                finding.outcome != "not met" and finding.expected != "not met",
                PHASES.index(rules[finding.rule].phase),
            ),
        )
        return "feasible when gaps close", tuple(worst)
    return "feasible", ()


def rows(findings: Iterable[Finding], rules: Mapping[str, Rule], graph: Graph) -> tuple[ArrangementRow, ...]:
    """Return a row for each arrangement, in the order of the folder."""
    made = []
    for arrangement, own in by_arrangement(findings, graph).items():
        words, deciding = feasibility(own, rules)
        row = _row(arrangement, words, deciding, _counts(own, rules), graph)
        against, unanswered = telling(own, rules)
        made.append(replace(row, against=against, unanswered=unanswered))
    return _own_first(tuple(made))


def _own_first(rows: tuple[ArrangementRow, ...]) -> tuple[ArrangementRow, ...]:
    """Return the rows with what tells an arrangement from the others before what many of them share."""
    shared = Counter((finding.rule, finding.message) for row in rows for finding in row.deciding)
    return tuple(
        replace(row, deciding=tuple(sorted(row.deciding, key=lambda each: _rank(each, shared))))
        for row in rows
    )


def _rank(finding: Finding, shared: Counter[tuple[str, str]]) -> tuple[bool, int]:
    open_only = finding.outcome != "not met" and finding.expected != "not met"
    return open_only, shared[(finding.rule, finding.message)]


def _counts(findings: Iterable[Finding], rules: Mapping[str, Rule]) -> dict[str, int]:
    counts = Counter(f"{rules[finding.rule].strength} {finding.outcome}" for finding in findings)
    return {
        f"{strength} {outcome}": counts[f"{strength} {outcome}"]
        for outcome in ("not met", "not assessed")
        for strength in ("must", "should")
    }


def _row(
    arrangement: Ref, words: str, deciding: tuple[Finding, ...], counts: dict[str, int], graph: Graph
) -> ArrangementRow:
    item = graph.item(arrangement)
    assert item is not None  # noqa: S101 - it came from the graph
    parts = tuple((kind, str(value)) for kind in ("room", "machine", "beam", "side_deg", "technique",
                  "degrader", "stand", "couch") if (value := item.get(kind)) is not None)  # fmt: skip
    chosen = item.get("chosen") is True
    figures = tuple(
        (name, got.value, got.basis)
        for name in FIGURES
        if name in graph.catalogue.definitions and isinstance(got := graph.get(name, arrangement), Value)
    )
    floor = graph.get("room.floor_polygon_cm", arrangement)
    axis = graph.get("machine.source_axis_distance_cm", arrangement)
    return ArrangementRow(
        arrangement,
        str(item.get("title")),
        parts,
        words,
        deciding,
        tuple(counts.items()),
        chosen,
        figures,
        floor_cm=floor.value if isinstance(floor, Value) else (),
        source_axis_distance_cm=float(axis.value) if isinstance(axis, Value) else None,
    )
