"""What changed between two assessments: values with the size of the change, findings, gaps, documents."""

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from typing import Any, TypeVar

from readiness.assessment.records import Assessment, Finding, Ref, Value
from readiness.units import rounded

_Entry = TypeVar("_Entry")


@dataclass(frozen=True)
class ChangedValue:
    """A value that differs; None stands for unknown, ``change`` for numbers only."""

    name: str
    item: Ref
    before: Any
    after: Any
    change: float | None
    basis_before: str
    basis_after: str


@dataclass(frozen=True)
class TurnedFinding:
    """A finding whose outcome differs; "" where one side does not have it."""

    rule: str
    item: Ref
    before: str
    after: str


@dataclass(frozen=True)
class Difference:
    """Everything that differs from a first to a second assessment."""

    verdict: tuple[str, str]
    values: tuple[ChangedValue, ...]
    findings: tuple[TurnedFinding, ...]
    gaps_opened: tuple[str, ...]
    gaps_closed: tuple[str, ...]
    documents: tuple[tuple[str, str], ...]  # number, what changed
    inputs: tuple[str, ...]
    versions: tuple[str, ...]

    @property
    def is_none(self) -> bool:
        """Return whether the two say the same."""
        lists = (
            self.values,
            self.findings,
            self.gaps_opened,
            self.gaps_closed,
            self.documents,
            self.versions,
        )
        return self.verdict[0] == self.verdict[1] and not any(lists)


def difference(first: Assessment, second: Assessment) -> Difference:
    """Return what differs, in the order of names and items."""
    gaps_before = {gap.id: gap for gap in first.gaps}
    gaps_after = {gap.id: gap for gap in second.gaps}
    return Difference(
        verdict=(first.verdict.words, second.verdict.words),
        values=_values(first.values, second.values),
        findings=_findings(first.findings, second.findings),
        gaps_opened=tuple(name for name in gaps_after if name not in gaps_before),
        gaps_closed=tuple(name for name in gaps_before if name not in gaps_after),
        documents=_documents(first, second),
        inputs=_inputs(first, second),
        versions=_versions(first, second),
    )


def _pairs(
    first: Mapping[tuple[str, Ref], _Entry], second: Mapping[tuple[str, Ref], _Entry]
) -> Iterable[tuple[tuple[str, Ref], _Entry | None, _Entry | None]]:
    for key in sorted({*first, *second}):
        yield key, first.get(key), second.get(key)


def _values(first: tuple[Value, ...], second: tuple[Value, ...]) -> tuple[ChangedValue, ...]:
    before = {(value.name, value.item): value for value in first}
    after = {(value.name, value.item): value for value in second}
    found = []
    for (name, item), was, now in _pairs(before, after):
        old, new = (None if was is None else was.value), (None if now is None else now.value)
        bases = ("" if was is None else was.basis, "" if now is None else now.basis)
        if old != new or bases[0] != bases[1]:
            found.append(ChangedValue(name, item, old, new, _change(old, new), *bases))
    return tuple(found)


def _change(old: Any, new: Any) -> float | None:
    numbers = all(isinstance(each, (int, float)) and not isinstance(each, bool) for each in (old, new))
    return rounded(float(new - old)) if numbers else None


def _findings(first: tuple[Finding, ...], second: tuple[Finding, ...]) -> tuple[TurnedFinding, ...]:
    before = {(finding.rule, finding.item): finding.outcome for finding in first}
    after = {(finding.rule, finding.item): finding.outcome for finding in second}
    return tuple(
        TurnedFinding(rule, item, was or "", now or "")
        for (rule, item), was, now in _pairs(before, after)
        if was != now
    )


def _documents(first: Assessment, second: Assessment) -> tuple[tuple[str, str], ...]:
    before = {document.number: document for document in first.documents}
    after = {document.number: document for document in second.documents}
    found = []
    for number in dict.fromkeys((*before, *after)):
        was, now = before.get(number), after.get(number)
        if was is None or now is None:
            found.append((number, "added" if was is None else "no longer shown"))
        elif was.body_sha256 != now.body_sha256:
            found.append((number, f"body changed; now {now.status}"))
        elif was.status != now.status:
            found.append((number, f"{was.status}, now {now.status}"))
    return tuple(found)


def _inputs(first: Assessment, second: Assessment) -> tuple[str, ...]:
    before = {name: sha for name, sha, _ in first.inputs}
    after = {name: sha for name, sha, _ in second.inputs}
    return tuple(name for name in sorted({*before, *after}) if before.get(name) != after.get(name))


def _versions(first: Assessment, second: Assessment) -> tuple[str, ...]:
    found = []
    for what in ("product", "rules", "contract"):
        was, now = getattr(first.versions, what), getattr(second.versions, what)
        if was != now:
            found.append(f"{what}: {was}, now {now}")
    return tuple(found)
