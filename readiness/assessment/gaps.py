"""
What there is to do: one gap for each thing to supply, one for each thing to mend.

Five rules that wait for one field are one gap; its owner, task and phase come from the strictest of them.
"""

from collections.abc import Iterable, Mapping

from readiness.assessment.records import PHASES, STRENGTHS, Cause, Finding, Gap, Ref, Rule

_SUPPLY_TASK = {"field": "describe-program", "list": "describe-program", "item": "describe-program",
                "assumed": "describe-program", "contradiction": "describe-program",
                "file": "describe-program"}  # fmt: skip


def find_gaps(findings: Iterable[Finding], rules: Mapping[str, Rule], phase: str) -> tuple[Gap, ...]:
    """Return all gaps: first by whether due, then strength, phase and id."""
    supply: dict[tuple[str, str, Ref], list[tuple[Finding, Cause]]] = {}
    gaps: list[Gap] = []
    for finding in findings:
        if finding.outcome == "not met":
            gaps.append(_mend(finding, rules[finding.rule], phase))
        elif finding.outcome == "not assessed":
            for cause in finding.causes:
                supply.setdefault((cause.kind, cause.what, cause.item), []).append((finding, cause))
    gaps += [_supply(key, entries, rules, phase) for key, entries in supply.items()]
    return tuple(sorted(gaps, key=_order))


def _order(gap: Gap) -> tuple[bool, int, int, int, str]:
    return (
        gap.due_later, STRENGTHS.index(gap.strength), PHASES.index(gap.phase),
        0 if gap.kind == "mend" else 1, gap.id,
    )  # fmt: skip


def _later(due: str, phase: str) -> bool:
    return PHASES.index(due) > PHASES.index(phase)


def _mend(finding: Finding, rule: Rule, phase: str) -> Gap:
    return Gap(
        id=f"mend {rule.id} for {finding.item}",
        kind="mend",
        what=f"{finding.message} {rule.remedy}",
        item=finding.item,
        findings=((rule.id, finding.item),),
        task=rule.task,
        owner=rule.owner,
        strength=rule.strength,
        phase=rule.phase,
        topic=rule.topic,
        due_later=_later(rule.phase, phase),
        where=finding.where,
    )


def _askers(kind: str, concerned: list[Rule]) -> list[Rule]:
    """
    Return the rules that say who supplies something and when.

    A measurement is due when a rule asks for it as measured, not when an earlier rule could use it as well.
    """
    measured = [rule for rule in concerned if rule.basis == "measured"]
    return measured if kind == "measurement" and measured else concerned


def _supply(
    key: tuple[str, str, Ref], entries: list[tuple[Finding, Cause]], rules: Mapping[str, Rule], phase: str
) -> Gap:
    kind, what, item = key
    concerned = _askers(kind, [rules[finding.rule] for finding, _ in entries])
    first = min(concerned, key=lambda rule: (STRENGTHS.index(rule.strength), PHASES.index(rule.phase)))
    earliest = min((rule.phase for rule in concerned), key=PHASES.index)
    words = " ".join(sorted({cause.words for _, cause in entries}))
    return Gap(
        id=f"supply {what} for {item}" if kind != "validity" else f"settle {what} for {item}",
        kind="supply",
        what=words,
        item=item,
        findings=tuple(sorted({(finding.rule, finding.item) for finding, _ in entries})),
        task=_SUPPLY_TASK.get(kind, first.task),
        owner=first.owner,
        strength=first.strength,
        phase=earliest,
        topic=first.topic,
        due_later=_later(earliest, phase),
    )
