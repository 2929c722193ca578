"""The lists of the assessment part: gaps, requirements, values, evidence and sources, ready to print."""

import re
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass
from typing import Any

from readiness.assessment.catalogue import catalogue
from readiness.assessment.records import Assessment, Finding, Gap, Ref, Rule, Value
from readiness.assessment.wording import in_words
from readiness.outputs.documents import RenderedDocument
from readiness.outputs.words import (
    blocking,
    item_words,
    known_words,
    outcome_words,
    shortened,
    when_words,
    with_unit,
)
from readiness.sources import HOW_KNOWN, keys_in, publications
from readiness.units import printed

_MOST_INPUTS = 8  # named in the line of a value; all of them stand in assessment.json
KNOWN_WORDS = tuple(HOW_KNOWN.items())
_SOURCE_LINK = re.compile(r'href="binder:source-([a-z0-9.-]+)"')


@dataclass(frozen=True)
class GapRow:
    """One gap as it is printed."""

    id: str
    what: str
    item: str
    owner: str
    earliest: str
    strength: str
    phase: str
    when: str
    task: str
    rules: tuple[str, ...]


@dataclass(frozen=True)
class MatrixRow:
    """One finding as it is printed; ``first`` marks the first line of its rule."""

    rule: str
    first: bool
    title: str
    strength: str
    item: str
    outcome: str
    observed: str
    limit: str
    basis: str
    sources: str
    documents: tuple[str, ...]
    message: str


@dataclass(frozen=True)
class SourceRow:
    """One publication as it is printed."""

    key: str
    citation: str
    url: str
    known: str
    rules: tuple[str, ...]
    documents: tuple[str, ...]


def short_item(item: Ref, assessment: Assessment) -> str:
    """Return an item for people; the arrangement that the binder is for is not spelled out each time."""
    return shortened(item_words(item), assessment)


def gaps(assessment: Assessment, blocking_only: bool = False) -> tuple[GapRow, ...]:
    """Return the gaps in their order, or only those that block now."""
    wanted = blocking(assessment) if blocking_only else assessment.gaps
    return tuple(_gap(gap, assessment) for gap in wanted)


def _gap(gap: Gap, assessment: Assessment) -> GapRow:
    return GapRow(
        id=gap.id, what=gap.what, item=short_item(gap.item, assessment), owner=gap.owner,
        earliest=when_words(gap), strength=gap.strength, phase=gap.phase,
        when="due later" if gap.due_later else "due now", task=gap.task,
        rules=tuple(dict.fromkeys(rule for rule, _ in gap.findings)),
    )  # fmt: skip


def matrix(assessment: Assessment) -> tuple[MatrixRow, ...]:
    """Return one line for each finding that applies, and one for each rule that applies nowhere."""
    rules = {rule.id: rule for rule in assessment.rules}
    by_rule: dict[str, list[Finding]] = {rule: [] for rule in rules}
    for finding in assessment.findings:
        by_rule[finding.rule].append(finding)
    lines = []
    for rule, found in by_rule.items():
        applying = [finding for finding in found if finding.outcome != "not applicable"] or found[:1]
        lines += [
            _line(rules[rule], each, short_item(each.item, assessment), place == 0)
            for place, each in enumerate(applying)
        ]
    return tuple(lines)


def _line(rule: Rule, finding: Finding, item: str, first: bool) -> MatrixRow:
    def said(value: Any) -> str:
        return "" if value is None else with_unit(rule.subject, value)

    return MatrixRow(
        rule=rule.id, first=first, title=rule.title, strength=rule.strength, item=item,
        outcome=outcome_words(finding), observed=said(finding.observed), limit=said(finding.limit),
        basis=finding.basis, sources=known_words(rule), documents=rule.documents, message=finding.message,
    )  # fmt: skip


def tasks(assessment: Assessment) -> tuple[tuple[str, ...], ...]:
    """Return the road: task, owner, phase, days, from, to, latest, whose lead time, waits for."""
    if assessment.schedule is None:
        return ()
    return tuple(
        (
            task.title, task.owner, task.phase, printed(task.working_days), task.start.isoformat(),
            task.finish.isoformat(),
            "moves the date" if task.critical else task.latest_finish.isoformat(),
            task.state or task.lead_time,
        )
        for task in assessment.schedule.tasks
    )  # fmt: skip


def commissioning_weeks(assessment: Assessment) -> tuple[tuple[str, str, str, str, str, str], ...]:
    """Return hours of commissioning by week: week of, who, wanted, there, missing, tasks that want them."""
    schedule = assessment.schedule
    if schedule is None:
        return ()
    titles = {task.id: task.title for task in schedule.tasks}
    return tuple(
        (
            each.week_of.isoformat(), each.who, f"{each.needed_h:.0f} h", f"{each.free_h:.0f} h",
            f"{each.missing_h:.0f} h" if each.missing_h else "",
            "; ".join(titles.get(task, task) for task in each.tasks),
        )
        for each in schedule.by_week
    )  # fmt: skip


def values(assessment: Assessment) -> tuple[tuple[str, tuple[tuple[str, str, str, str, str], ...]], ...]:
    """
    Return item -> values not merely stated: name, number, basis, descent, formula and source.

    Those that a rule judges, a document shows or a formula gives; the others stand in assessment.json.
    """
    by_item: dict[str, list[tuple[str, str, str, str, str]]] = {}
    for value in _worth_printing(assessment):
        line = (value.name.partition(".")[2], _number(value), value.basis, _descent(value), _method(value))
        by_item.setdefault(short_item(value.item, assessment), []).append(line)
    return tuple((item, tuple(lines)) for item, lines in by_item.items())


def values_not_printed(assessment: Assessment) -> int:
    """Return how many values that were not merely stated are left to assessment.json."""
    return sum(1 for _ in _not_merely_stated(assessment)) - sum(1 for _ in _worth_printing(assessment))


def _not_merely_stated(assessment: Assessment) -> Iterator[Value]:
    for value in assessment.values:
        if value.item.kind != "criterion" and (value.inputs or value.source or value.basis != "stated"):
            yield value


def _worth_printing(assessment: Assessment) -> Iterator[Value]:
    judged = {rule.subject for rule in assessment.rules}
    shown = {name for document in assessment.documents for name in document.values}
    for value in _not_merely_stated(assessment):
        if value.name in judged or value.name in shown or _formula(value):
            yield value


def _formula(value: Value) -> str:
    definition = catalogue().definitions.get(value.name)
    return definition.formula if definition else ""


def _method(value: Value) -> str:
    source = f"{value.source} ({value.known})" if value.source else ""
    return "; ".join(each for each in (_formula(value), source) if each)


def _number(value: Value) -> str:
    if isinstance(value.value, float):
        text = f"{printed(value.value, 6)} {value.unit}".strip()
    else:
        text = with_unit(value.name, value.value)
    return text if value.sd is None else f"{text} (sd {printed(value.sd, 2)})"


def _descent(value: Value) -> str:
    names = list(dict.fromkeys(each.name for each in value.inputs))
    said = [", ".join(names[:_MOST_INPUTS])] if names else []
    if len(names) > _MOST_INPUTS:
        said = [f"{said[0]} and {len(names) - _MOST_INPUTS} more"]
    if value.where is not None:
        said.append(str(value.where))
    if value.instead_of is not None:
        replaced = value.instead_of
        said.append(f"instead of {with_unit(replaced.name, replaced.value)} ({replaced.basis})")
    return "; ".join(said)


def evidence(assessment: Assessment) -> tuple[tuple[str, ...], ...]:
    """Return the evidence register: id and its fields."""
    fields = ("title", "type", "file", "revision", "dated_on", "approved_by", "expires_on")
    known = {(value.name, value.item): in_words(value.value) for value in assessment.values}
    items = sorted({value.item for value in assessment.values if value.item.kind == "evidence"})
    return tuple(
        (item.id, *(known.get((f"evidence.{field}", item), "") for field in fields)) for item in items
    )


def sources(assessment: Assessment, rendered: Sequence[RenderedDocument]) -> tuple[SourceRow, ...]:
    """Return every publication that a rule, value or document of this binder points to."""
    known: dict[str, dict[str, None]] = {}
    rules: dict[str, dict[str, None]] = {}
    documents: dict[str, dict[str, None]] = {}
    for rule in assessment.rules:
        for source in rule.sources:
            rules.setdefault(source.key, {})[rule.id] = None
            known.setdefault(source.key, {})[source.known] = None
    for value in assessment.values:
        for key in keys_in(value.source):
            known.setdefault(key, {})[value.known] = None
    for document in rendered:
        for key in _SOURCE_LINK.findall(document.html_body):
            documents.setdefault(key, {})[document.number] = None
            known.setdefault(key, {})
    return tuple(
        SourceRow(
            key=key, citation=publications()[key].citation, url=publications()[key].url,
            known=", ".join(word for word in known[key] if word),
            rules=tuple(rules.get(key, ())), documents=tuple(documents.get(key, ())),
        )
        for key in sorted(_in_library(known))
    )  # fmt: skip


def _in_library(keys: Iterable[str]) -> set[str]:
    return {key for key in keys if key in publications()}
