"""
From a program folder to the assessment: the one function that runs all steps in their order.

Items -> arrangements -> values and findings -> feasibility and choice -> documents and exceptions ->
gaps -> schedule -> verdict.
"""

import hashlib
from collections.abc import Callable, Iterable, Mapping
from dataclasses import replace
from datetime import date

from readiness import __version__
from readiness.assessment.candidates import arrangements, exposures, measurements
from readiness.assessment.catalogue import catalogue
from readiness.assessment.comparison import ordered
from readiness.assessment.document_heads import document_heads
from readiness.assessment.documents import document_items, document_states, is_shown
from readiness.assessment.exceptions import excepted, may_be_granted
from readiness.assessment.feasibility import rows as arrangement_rows
from readiness.assessment.gaps import find_gaps
from readiness.assessment.graph import Graph, Memory
from readiness.assessment.judge import judge
from readiness.assessment.local_rules import LocalRules, with_local
from readiness.assessment.measurement_use import measurement_uses
from readiness.assessment.records import (
    PROGRAM,
    ArrangementRow,
    Assessment,
    DocumentState,
    Finding,
    Gone,
    Ref,
    Rule,
    Value,
    Versions,
)
from readiness.assessment.relevance import concerned
from readiness.assessment.ruleset import load_rules, shipped_rules
from readiness.assessment.schedule import plan_road
from readiness.assessment.verdict import give_verdict
from readiness.program.items import Program

CONTRACT = "1"
DATED_VERDICTS = (
    "ready",
    "ready when gaps close",
)  # no date is promised where nothing is known to be possible
_LATE = ("document", "exception", "local_limit")  # judged when documents, exceptions and limits are known
Bodies = Callable[[Assessment], Mapping[str, str]]


def assess(
    program: Program, as_of: date, bodies: Bodies | None = None, memory: Memory | None = None,
    wanted: tuple[str, ...] | None = None,
) -> Assessment:  # fmt: skip
    """
    Return the whole assessment of a program on a day.

    Args:
        program: What the folder says.
        as_of: The day; the only date that enters.
        bodies: Gives number -> SHA-256 of each document's body for an assessment; without it no document
            counts as approved.
        memory: What calculations gave before, shared by assessments of programs that are nearly the same.
        wanted: Values to work out besides those that rules ask for; None works out everything.

    Raises:
        ProgramProblems: If local rules or limits do not fit.
    """
    known = catalogue()
    local = with_local(load_rules(known), program, known)
    by_id = {rule.id: rule for rule in local.rules}
    graph = new_graph(program, as_of, local.limits, memory)
    early = judge((rule for rule in local.rules if rule.kind not in _LATE), graph)
    early, answers = excepted(early, by_id, program, as_of)
    rows = ordered(arrangement_rows(early, by_id, graph), by_id, graph)
    chosen = _choose(rows)
    of_concern = concerned(chosen.item if chosen else None, graph)
    _work_out(graph, of_concern, wanted)
    shown = tuple(finding for finding in early if _concerns(finding, of_concern))
    first = _assemble(program, as_of, graph, local, rows, shown, of_concern)
    used = measurement_uses(graph, chosen.item if chosen else None, first.values)
    first = replace(first, measurements=used)
    states = document_states(program, chosen, local.rules, bodies(first) if bodies else {})
    _supply_late(graph, states, chosen, answers, local)
    late = judge((rule for rule in local.rules if rule.kind in _LATE), graph)
    late, _ = excepted(late, by_id, program, as_of)
    findings = _in_rule_order((*shown, *(f for f in late if _is_shown(f, graph))), local.rules)
    gaps = find_gaps(findings, by_id, _phase(program))
    verdict = give_verdict(program, rows, chosen, findings, by_id)
    schedule, gaps = plan_road(program, gaps, as_of, possible=verdict.words in DATED_VERDICTS)
    return replace(first, findings=findings, gaps=gaps, schedule=schedule, documents=states, verdict=verdict)


def new_graph(
    program: Program, as_of: date, limits: Mapping[str, Value], memory: Memory | None = None
) -> Graph:
    """Return the graph of a program, with the items that are made from what the folder describes."""
    made = arrangements(program)
    items = (*made, *exposures(program, made), *measurements(program), *document_items())
    return Graph(program, items, catalogue(), as_of, limits, memory)


def why_absent(program: Program, as_of: date, name: str, item: Ref | None) -> tuple[str, ...]:
    """
    Return in words why a value of an item is not known, each cause once.

    Args:
        program: What the folder says.
        as_of: The day of the assessment.
        name: Name of the value.
        item: Whose value; None asks every item of its kind.
    """
    known = catalogue()
    graph = new_graph(program, as_of, with_local(load_rules(known), program, known).limits)
    asked = (item,) if item is not None else graph.refs(name.partition(".")[0])
    found = (graph.get(name, each) for each in asked)
    return tuple(dict.fromkeys(cause.words for got in found if isinstance(got, Gone) for cause in got.causes))


def _choose(rows: tuple[ArrangementRow, ...]) -> ArrangementRow | None:
    """Return the department's arrangement, else the first of the compared ones that is possible."""
    stated = next((row for row in rows if row.chosen), None)
    possible = next((row for row in rows[:1] if row.feasibility != "not feasible here"), None)
    return stated or possible


def _phase(program: Program) -> str:
    root = program.find("program", "program")
    return str(root.get("phase") or "decide") if root else "decide"


def _work_out(graph: Graph, of_concern: set[Ref], wanted: tuple[str, ...] | None) -> None:
    """Ask for values of the items of concern, so that documents and descents can show them."""
    known = graph.catalogue
    shown = (name for name, definition in known.definitions.items() if not definition.internal)
    everything = (*shown, *known.kinds.described.fields, *known.criteria)
    for name in everything if wanted is None else wanted:
        kind = name.partition(".")[0]
        if kind == "criterion":
            graph.get(name, PROGRAM)
            continue
        for ref in graph.refs(kind):
            if ref in of_concern:
                graph.get(name, ref)


def _concerns(finding: Finding, of_concern: set[Ref]) -> bool:
    return finding.item in of_concern or finding.item.id in {"all", "none"} or finding.item == PROGRAM


def _is_shown(finding: Finding, graph: Graph) -> bool:
    if finding.item.kind != "document" or finding.item.id in {"all", "none"}:
        return True
    shown = graph.get("document.shown", finding.item)
    return isinstance(shown, Value) and shown.value is True


def _supply_late(
    graph: Graph, states: tuple[DocumentState, ...], chosen: ArrangementRow | None,
    answers: Mapping[Ref, bool], local: LocalRules,
) -> None:  # fmt: skip
    by_number = {state.number: state for state in states}
    for head in document_heads():
        ref = Ref("document", head.number)
        state = by_number.get(head.number)
        graph.supply("document.title", ref, head.title)
        graph.supply("document.number", ref, head.number)
        graph.supply("document.shown", ref, is_shown(head, chosen))
        graph.supply("document.approved", ref, state is not None and state.status == "approved")
        changed = state is not None and state.status == "changed after approval"
        graph.supply("document.changed_after_approval", ref, changed)
    granted = may_be_granted(graph.program, {rule.id: rule for rule in local.rules})
    for ref, answered in answers.items():
        graph.supply("exception.answers_a_finding", ref, answered)
        graph.supply("exception.may_be_granted", ref, granted[ref])
    for ref, governs in local.governs.items():
        graph.supply("local_limit.governs", ref, governs)


def _in_rule_order(findings: Iterable[Finding], rules: tuple[Rule, ...]) -> tuple[Finding, ...]:
    place = {rule.id: index for index, rule in enumerate(rules)}
    return tuple(sorted(findings, key=lambda finding: place[finding.rule]))


def _assemble(
    program: Program, as_of: date, graph: Graph, local: LocalRules, rows: tuple[ArrangementRow, ...],
    findings: tuple[Finding, ...], of_concern: set[Ref],
) -> Assessment:  # fmt: skip
    root = program.find("program", "program")
    values = tuple(
        value for value in graph.values() if value.item in of_concern or value.item.kind == "criterion"
    )
    limits = tuple(
        value for name in graph.catalogue.criteria if isinstance(value := graph.get(name, PROGRAM), Value)
    )
    return Assessment(
        program=str((root.get("department") if root else None) or "Department not named"),
        invented=bool(root and root.get("invented") is True),
        as_of=as_of,
        phase=_phase(program),
        versions=Versions(__version__, rules_version(), CONTRACT),
        verdict=give_verdict(program, rows, None, (), {}),
        arrangements=rows,
        values=(*values, *limits),
        findings=findings,
        gaps=(),
        schedule=None,
        documents=(),
        rules=local.rules,
        inputs=tuple((file.name, file.sha256, file.size) for file in program.files),
    )


def rules_version() -> str:
    """Return a short fingerprint of the shipped rules, so that two assessments can be told apart."""
    return hashlib.sha256(repr(shipped_rules()).encode()).hexdigest()[:12]
