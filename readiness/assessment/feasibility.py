"""Which arrangements are possible, in words, and which one is recommended and why."""

from collections import Counter
from collections.abc import Iterable, Mapping
from dataclasses import replace

from readiness.assessment.graph import Graph
from readiness.assessment.kinds import PARTS
from readiness.assessment.records import FEASIBILITIES, PHASES, ArrangementRow, Finding, Ref, Rule, Value

# what is shown when arrangements are compared, where it is known
FIGURES = (
    "arrangement.farthest_plane_distance_cm",
    "arrangement.plane_distance_cm",
    "arrangement.ceiling_clearance_cm",
    "arrangement.best_tilt_deg",
    "arrangement.vertical_half_range_percent",
    "arrangement.horizontal_half_range_percent",
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


# counts by which arrangements are ordered, with their words
_COMPARED = (
    ("must against it", "must-rules that the arrangement itself does not meet or is not expected to meet"),
    (
        "should against it",
        "should-rules that the arrangement itself does not meet or is not expected to meet",
    ),
    ("must open", "must-rules not met or not assessed"),
)


def compare(
    findings: Iterable[Finding], rules: Mapping[str, Rule], graph: Graph
) -> tuple[ArrangementRow, ...]:
    """
    Return all arrangements, the best first.

    Order: feasibility; fewest must-rules, then should-rules, that the arrangement itself or a barrier seen
    from it does not meet or is not expected to meet (what belongs to a part of it can be bought or repaired);
    fewest must-rules open at all, so that silence is no advantage; the order in which the folder lists them.
    No score is formed.
    """
    rows = []
    for place, (arrangement, own) in enumerate(by_arrangement(findings, graph).items()):
        words, deciding = feasibility(own, rules)
        counts = _counts(own, rules)
        order = (
            FEASIBILITIES.index(words), *(counts[key] for key, _ in _COMPARED), place,
        )  # fmt: skip
        rows.append((order, _row(arrangement, words, deciding, counts, graph)))
    return _own_first(tuple(row for _, row in sorted(rows, key=lambda pair: pair[0])))


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
    counts = dict.fromkeys(
        (
            *(key for key, _ in _COMPARED),
            "must not met", "should not met", "must not assessed", "should not assessed",
        ),
        0,
    )  # fmt: skip
    for finding in findings:
        strength = rules[finding.rule].strength
        key = f"{strength} {finding.outcome}"
        if key in counts:
            counts[key] += 1
        against = finding.outcome == "not met" or finding.expected == "not met"
        if against and finding.item.kind in {"arrangement", "exposure"} and strength != "consider":
            counts[f"{strength} against it"] += 1
    counts["must open"] = counts["must not met"] + counts["must not assessed"]
    return counts


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
        (),
        floor.value if isinstance(floor, Value) else (),
        float(axis.value) if isinstance(axis, Value) else None,
    )


def reasons(best: ArrangementRow, second: ArrangementRow | None) -> tuple[str, ...]:
    """Return in sentences why the first of the compared arrangements stands before the second."""
    if second is None:
        return ("It is the only arrangement described.",)
    mine, other = dict(best.counts), dict(second.counts)
    if best.feasibility != second.feasibility:
        return (f"It is {best.feasibility}; the next, {second.title}, is {second.feasibility}.",)
    for key, words in _COMPARED:
        if mine[key] != other[key]:
            said = words.replace("-rules", "-rule") if mine[key] == 1 else words
            return (f"It has {mine[key]} {said}; the next, {second.title}, has {other[key]}.",)
    return (f"It and the next, {second.title}, stand alike; the folder lists it first.",)
