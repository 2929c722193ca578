"""
Rules meet values: one finding for each rule and item.

A missing or assumed number is never "met". A prediction under a rule that asks for a measurement is
"not assessed", with what to expect beside it.
"""

from collections.abc import Iterable, Iterator
from typing import Any

from readiness.assessment.absence import unknown_list
from readiness.assessment.causes import assumed_roots, why_not_measured
from readiness.assessment.conditions import CONDITIONS, comparable
from readiness.assessment.graph import Graph
from readiness.assessment.records import Cause, Clause, Finding, Gone, Ref, Rule, Value
from readiness.assessment.ruleset import is_value_name
from readiness.assessment.wording import in_words
from readiness.units import words_of

_NAMED_BY_TITLE = ("barrier", "exposure")


def judge(rules: Iterable[Rule], graph: Graph) -> tuple[Finding, ...]:
    """Return every finding, in the order of the rules and their items."""
    return tuple(finding for rule in rules for finding in judge_rule(rule, graph))


def judge_rule(rule: Rule, graph: Graph) -> Iterator[Finding]:
    """Yield the findings of one rule: one for each item of its kind, or one for the unknown or empty list."""
    kind = rule.kind
    if kind == "criterion":
        kind = "program"
    items = graph.refs(kind)
    if items:
        for item in items:
            yield judge_item(rule, item, graph)
        return
    yield _without_items(rule, kind, graph)


def _without_items(rule: Rule, kind: str, graph: Graph) -> Finding:
    """Return the finding where no item of a kind is known: what to list, or that there is none."""
    causes: tuple[Cause, ...]
    made = kind in {"arrangement", "exposure"}
    if made and not graph.refs("arrangement"):
        words = "Describe rooms, machines with beams, degraders, stands and techniques, so that there is one."
        causes = (Cause("list", "arrangement", Ref("program", "program"), words),)
    else:
        causes = _lists_to_write("barrier" if kind == "exposure" else kind, graph)
    if not causes:
        words = f"There is no {words_of(kind)} in this program."
        return Finding(rule.id, Ref(kind, "none"), "not applicable", message=words)
    words = " ".join(cause.words for cause in causes)
    return Finding(rule.id, Ref(kind, "all"), "not assessed", causes=causes, message=words)


def _lists_to_write(kind: str, graph: Graph) -> tuple[Cause, ...]:
    """Return the lists that nobody has written yet: of each item they belong to, else of the program."""
    if kind in {"document", "measurement"}:
        return ()
    within = [owner for owner in graph.catalogue.kinds.owners(kind) if owner != "program"]
    owners = [ref for owner in within for ref in graph.refs(owner)] or [Ref("program", "program")]
    return tuple(
        unknown_list(kind, owner, graph.catalogue.kinds)
        for owner in owners
        if not graph.list_is_known(kind, owner)
    )


def judge_item(rule: Rule, item: Ref, graph: Graph) -> Finding:
    """Return what a rule says of one item."""
    applies, causes = _applies(rule, item, graph)
    if applies is False:
        return Finding(rule.id, item, "not applicable", message="The rule does not apply here.")
    observed = graph.get(rule.subject, item)
    limit, limit_causes = _limit(rule, item, graph)
    if isinstance(observed, Gone):
        causes += observed.causes
    causes += limit_causes
    if causes:
        return Finding(
            rule.id, item, "not assessed", limit=limit, causes=tuple(sorted(set(causes))),
            message=" ".join(dict.fromkeys(cause.words for cause in sorted(set(causes)))),
        )  # fmt: skip
    assert isinstance(observed, Value)  # noqa: S101 - Gone was dealt with above
    if not comparable(CONDITIONS[rule.condition], observed.value, limit):
        cause = _unlike(rule.subject, rule.condition, item)
        return Finding(rule.id, item, "not assessed", limit=limit, causes=(cause,), message=cause.words)
    return _compared(rule, item, observed, limit, graph)


def _applies(rule: Rule, item: Ref, graph: Graph) -> tuple[bool, list[Cause]]:
    """Return whether a rule applies; where that is unknown it is taken to, with the causes."""
    causes: list[Cause] = []
    for clause in rule.applies_when:
        value = graph.get(clause.subject, item)
        limit, unknown = _clause_limit(clause, item, graph)
        if isinstance(value, Gone):
            causes += value.causes
        elif unknown:
            causes += unknown
        elif not comparable(CONDITIONS[clause.condition], value.value, limit):
            causes.append(_unlike(clause.subject, clause.condition, item))
        elif not _holds(clause.condition, value.value, limit):
            return False, []
    return True, causes


def _unlike(name: str, condition: str, item: Ref) -> Cause:
    """Return the cause that a local rule compares what is not of one kind."""
    asked = condition.replace("_", " ")
    words = f"The local rule cannot compare {name} by {asked}: they are not of one kind."
    return Cause("contradiction", name, item, words)


def _limit(rule: Rule, item: Ref, graph: Graph) -> tuple[Any, list[Cause]]:
    return _clause_limit(Clause(rule.subject, rule.condition, rule.limit), item, graph)


def _clause_limit(clause: Clause, item: Ref, graph: Graph) -> tuple[Any, list[Cause]]:
    if not is_value_name(clause.limit, graph.catalogue):
        return clause.limit, []
    got = graph.get(clause.limit, item)
    if isinstance(got, Gone):
        return None, list(got.causes)
    return got.value, []


def _holds(condition: str, value: Any, limit: Any) -> bool:
    return CONDITIONS[condition].holds(value, limit)


def _compared(rule: Rule, item: Ref, observed: Value, limit: Any, graph: Graph) -> Finding:
    holds = _holds(rule.condition, observed.value, limit)
    message = say(rule, item, observed.value, limit, graph)
    outcome = "met" if holds else "not met"
    if rule.would_do and not holds:
        instead = graph.get(rule.would_do, item)
        message += f" {instead.value}" if isinstance(instead, Value) else ""
    causes: tuple[Cause, ...] = ()
    if rule.basis == "measured" and observed.basis != "measured":
        causes = why_not_measured(graph, rule.subject, item)
    elif observed.basis == "assumed" and holds:
        causes = assumed_roots(graph, rule.subject, item)
    return Finding(
        rule.id, item, "not assessed" if causes else outcome, _plain(observed.value), limit, observed.basis,
        expected=outcome if causes else "", causes=causes, message=message, where=observed.where,
    )  # fmt: skip


def _plain(value: Any) -> Any:
    return (
        value if isinstance(value, (int, float, str, bool, tuple)) or hasattr(value, "year") else str(value)
    )


def say(rule: Rule, item: Ref, observed: Any, limit: Any, graph: Graph) -> str:
    """Return the rule's message with what was seen and what is asked."""
    name = _name(item, graph)
    return rule.message.format(observed=in_words(observed), limit=in_words(limit), item=name)


def _name(item: Ref, graph: Graph) -> str:
    """Return an item as a message names it: a place behind a barrier by its title, others by their id."""
    title = graph.get(f"{item.kind}.title", item) if item.kind in _NAMED_BY_TITLE else None
    return str(title.value) if isinstance(title, Value) else item.id
