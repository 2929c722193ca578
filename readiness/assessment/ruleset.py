"""
The rules that ship with the tool, checked against everything they refer to when they are loaded.

One file a topic under schemas/rules/. A rule that names a value, criterion, task, document or source that
does not exist, or a condition that does not fit its value, stops the program: it is our own defect.
"""

from collections.abc import Mapping
from dataclasses import replace
from functools import cache
from typing import Any

import yaml

from readiness import sources
from readiness.assessment.catalogue import Catalogue
from readiness.assessment.conditions import CONDITIONS, fits
from readiness.assessment.records import PHASES, STRENGTHS, Clause, Rule, RuleSource
from readiness.assessment.schedule import shipped_tasks
from readiness.errors import CatalogueError
from readiness.resources import folder

_Loader = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
_KNOWN = ("read", "memory", "practice", "derived")
_KEYS = {
    "id", "title", "strength", "sources", "applies_when", "subject", "condition", "limit", "basis",
    "physical", "exceptable", "message", "remedy", "evidence", "owner", "task", "phase", "documents", "cases",
    "would_do", "tells_apart",
}  # fmt: skip
_REQUIRED = _KEYS - {
    "applies_when", "limit", "basis", "physical", "exceptable", "evidence", "documents", "would_do",
    "tells_apart",
}  # fmt: skip


@cache
def shipped_rules() -> tuple[Rule, ...]:
    """Return the rules as they stand in schemas/rules, in order of file and place, not yet checked."""
    found: list[Rule] = []
    for path in sorted(folder("schemas").joinpath("rules").glob("*.yaml")):
        with path.open("rb") as stream:
            loaded = yaml.load(stream, Loader=_Loader)  # noqa: S506 - a safe loader either way
        for entry in loaded["rules"]:
            found.append(_rule(entry, loaded["topic"], path.name))
    return tuple(found)


def _rule(entry: Mapping[str, Any], topic: str, file: str) -> Rule:
    where = f"{file}: rule {entry.get('id', '(without id)')}"
    wrong = sorted((set(entry) - _KEYS) | (_REQUIRED - set(entry)))
    if wrong:
        raise CatalogueError(f"{where}: missing or unknown: {', '.join(wrong)}")
    return Rule(
        id=entry["id"],
        title=entry["title"],
        strength=entry["strength"],
        sources=tuple(RuleSource(each["key"], each["at"], each["known"]) for each in entry["sources"]),
        applies_when=tuple(
            Clause(each["subject"], each["condition"], _tupled(each.get("limit")))
            for each in entry.get("applies_when", ())
        ),
        subject=entry["subject"],
        condition=entry["condition"],
        limit=_tupled(entry.get("limit")),
        basis=entry.get("basis", "any"),
        physical=entry.get("physical", False),
        exceptable=entry.get("exceptable", True) and not entry.get("physical", False),
        message=entry["message"],
        remedy=entry["remedy"],
        owner=entry["owner"],
        task=entry["task"],
        phase=entry["phase"],
        evidence=tuple(entry.get("evidence", ())),
        documents=tuple(str(number) for number in entry.get("documents", ())),
        topic=topic,
        cases=_tupled(entry["cases"]),
        would_do=entry.get("would_do", ""),
        tells_apart=entry.get("tells_apart", False),
    )


def _tupled(entry: Any) -> Any:
    """Return what YAML gave with every list as a tuple, so that a rule is frozen and comes back from JSON."""
    if isinstance(entry, dict):
        return {key: _tupled(value) for key, value in entry.items()}
    return tuple(_tupled(value) for value in entry) if isinstance(entry, list) else entry


def check_rule(rule: Rule, known: Catalogue, where: str) -> None:
    """Raise CatalogueError if a rule refers to something that does not exist or does not fit."""
    for word, allowed in (
        (rule.strength, STRENGTHS),
        (rule.phase, PHASES),
        (rule.basis, ("any", "measured")),
    ):
        if word not in allowed:
            raise CatalogueError(f"{where}: {word!r} is none of {', '.join(allowed)}")
    check_clause(Clause(rule.subject, rule.condition, rule.limit), known, where)
    for clause in rule.applies_when:
        check_clause(clause, known, where)
        if clause.subject.partition(".")[0] not in known.kinds.reachable(rule.kind):
            raise CatalogueError(f"{where}: {clause.subject} cannot be asked of a {rule.kind}")
    if rule.would_do and not (known.has(rule.would_do) and rule.would_do.startswith(f"{rule.kind}.")):
        raise CatalogueError(f"{where}: {rule.would_do} is no value of a {rule.kind}")
    try:
        rule.message.format(observed="1", limit="2", item="x")
    except (KeyError, IndexError, ValueError) as error:
        raise CatalogueError(f"{where}: the message has a hole that cannot be filled: {error}") from error


def check_clause(clause: Clause, known: Catalogue, where: str) -> None:
    """Raise CatalogueError if a condition names an unknown value or a limit that does not fit it."""
    if not known.has(clause.subject):
        raise CatalogueError(f"{where}: value {clause.subject} does not exist")
    condition = CONDITIONS.get(clause.condition)
    if condition is None:
        raise CatalogueError(f"{where}: condition {clause.condition!r} does not exist")
    if is_value_name(clause.limit, known):
        return
    if not fits(condition, clause.limit):
        raise CatalogueError(f"{where}: limit {clause.limit!r} does not fit {clause.condition}")


def is_value_name(limit: Any, known: Catalogue) -> bool:
    """Return whether a limit is the name of another value."""
    return isinstance(limit, str) and "." in limit and " " not in limit and known.has(limit)


@cache
def load_rules(known: Catalogue) -> tuple[Rule, ...]:
    """Return the shipped rules, proved against the catalogue, tasks, documents and sources."""
    from readiness.assessment.document_heads import document_numbers

    rules = shipped_rules()
    numbers = document_numbers()
    seen: set[str] = set()
    for rule in rules:
        where = f"rule {rule.id}"
        if rule.id in seen:
            raise CatalogueError(f"{where} stands twice")
        seen.add(rule.id)
        check_rule(rule, known, where)
        if rule.task not in shipped_tasks():
            raise CatalogueError(f"{where}: task {rule.task} does not exist")
        for number in rule.documents:
            if number not in numbers:
                raise CatalogueError(f"{where}: document {number} does not exist")
        for source in rule.sources:
            if source.known not in _KNOWN or not sources.exists(source.key):
                raise CatalogueError(f"{where}: source {source.key} ({source.known}) is not in sources.yaml")
        if "met" not in rule.cases or ("not_met" not in rule.cases and rule.condition != "present"):
            raise CatalogueError(f"{where}: cases for met and not met are needed")
    return rules


def with_limit(rule: Rule, limit: Any, strength: str, source: RuleSource) -> Rule:
    """Return a rule with the stricter limit of a jurisdiction in place of ours."""
    return replace(
        rule, limit=limit, strength=strength, sources=(*rule.sources, source), origin="local limit"
    )
