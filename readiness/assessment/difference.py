"""What changed between two assessments: values with the size of the change, findings, gaps, documents."""

from collections.abc import Iterable, Iterator, Mapping
from dataclasses import dataclass, replace
from typing import Any, TypeVar

from readiness.assessment.records import Assessment, DocumentState, Finding, Gap, Ref, Value
from readiness.quantities import Table
from readiness.units import rounded

_Entry = TypeVar("_Entry")


@dataclass(frozen=True)
class ColumnChange:
    """A column of a table that differs: in how many rows, and by how much at most (numbers only)."""

    column: str
    rows: int
    largest: float | None


@dataclass(frozen=True)
class ChangedValue:
    """
    A value that differs; None stands for unknown.

    Attributes:
        change: After less before, for numbers.
        columns: What differs inside a table of the same columns and length.
    """

    name: str
    item: Ref
    before: Any
    after: Any
    change: float | None
    basis_before: str
    basis_after: str
    columns: tuple[ColumnChange, ...] = ()


@dataclass(frozen=True)
class TurnedFinding:
    """A finding whose outcome, expectation or exception differs; "" where one side does not have it."""

    rule: str
    item: Ref
    before: str
    after: str
    strength: str = ""
    message: str = ""


@dataclass(frozen=True)
class TurnedGap:
    """A gap that stands on one side only."""

    id: str
    what: str
    owner: str
    strength: str


@dataclass(frozen=True)
class Change:
    """Something that was so before and is so now."""

    what: str
    before: str
    after: str


@dataclass(frozen=True)
class DocumentChange:
    """A document that differs, and how; "added" and "no longer shown" have no changes."""

    number: str
    title: str
    what: str
    changes: tuple[Change, ...] = ()


@dataclass(frozen=True)
class Difference:
    """
    Everything that differs from a first to a second assessment.

    Attributes:
        elsewhere: Parts that differ although nothing listed does: names of assessment.json.
    """

    verdict: tuple[str, str]
    arrangement: tuple[str, str]
    first_patient: tuple[str, str]
    values: tuple[ChangedValue, ...]
    findings: tuple[TurnedFinding, ...]
    gaps_opened: tuple[TurnedGap, ...]
    gaps_closed: tuple[TurnedGap, ...]
    documents: tuple[DocumentChange, ...]
    inputs: tuple[str, ...]
    versions: tuple[Change, ...]
    elsewhere: tuple[str, ...] = ()

    @property
    def is_none(self) -> bool:
        """Return whether the two say the same; the files they were made from may differ all the same."""
        pairs = (self.verdict, self.arrangement, self.first_patient)
        lists = (
            self.values, self.findings, self.gaps_opened, self.gaps_closed, self.documents, self.versions,
        )  # fmt: skip
        return all(first == second for first, second in pairs) and not any(lists)


def difference(first: Assessment, second: Assessment) -> Difference:
    """Return what differs, in the order of names and items."""
    found = Difference(
        verdict=(first.verdict.words, second.verdict.words),
        arrangement=(first.verdict.arrangement, second.verdict.arrangement),
        first_patient=(_first_patient(first), _first_patient(second)),
        values=_values(first.values, second.values),
        findings=_findings(first, second),
        gaps_opened=_gaps(second.gaps, first.gaps),
        gaps_closed=_gaps(first.gaps, second.gaps),
        documents=_documents(first, second),
        inputs=_inputs(first, second),
        versions=_versions(first, second),
    )
    return replace(found, elsewhere=_elsewhere(first, second)) if found.is_none else found


def _first_patient(assessment: Assessment) -> str:
    road = assessment.schedule
    return road.first_patient.isoformat() if road and road.first_patient else ""


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
            columns = _columns(old, new)
            found.append(ChangedValue(name, item, old, new, _change(old, new), *bases, columns))
    return tuple(found)


def _change(old: Any, new: Any) -> float | None:
    return rounded(float(new - old)) if _is_number(old) and _is_number(new) else None


def _is_number(entry: Any) -> bool:
    return isinstance(entry, (int, float)) and not isinstance(entry, bool)


def _columns(old: Any, new: Any) -> tuple[ColumnChange, ...]:
    if not (isinstance(old, Table) and isinstance(new, Table)):
        return ()
    if old.columns != new.columns or len(old.rows) != len(new.rows):
        return ()
    found = []
    for place, column in enumerate(old.columns):
        pairs = [(was[place], now[place]) for was, now in zip(old.rows, new.rows, strict=True)]
        different = [(was, now) for was, now in pairs if was != now]
        sizes = [change for was, now in different if (change := _change(was, now)) is not None]
        if different:
            found.append(ColumnChange(column, len(different), max(sizes, key=abs, default=None)))
    return tuple(found)


def _findings(first: Assessment, second: Assessment) -> tuple[TurnedFinding, ...]:
    before = {(finding.rule, finding.item): finding for finding in first.findings}
    after = {(finding.rule, finding.item): finding for finding in second.findings}
    strengths = {rule.id: rule.strength for rule in (*first.rules, *second.rules)}
    found = []
    for (rule, item), was, now in _pairs(before, after):
        told = _told(was), _told(now)
        if told[0] != told[1]:
            message = now.message if now else ""
            found.append(TurnedFinding(rule, item, *told, strengths.get(rule, ""), message))
    return tuple(found)


def _told(finding: Finding | None) -> str:
    """Return an outcome with what changes its meaning: what is expected, or the exception that covers it."""
    if finding is None:
        return ""
    expected = f" (expected: {finding.expected})" if finding.expected else ""
    exception = f" ({finding.exception})" if finding.exception else ""
    return f"{finding.outcome}{expected}{exception}"


def _gaps(these: tuple[Gap, ...], others: tuple[Gap, ...]) -> tuple[TurnedGap, ...]:
    known = {gap.id for gap in others}
    return tuple(TurnedGap(gap.id, gap.what, gap.owner, gap.strength) for gap in these if gap.id not in known)


def _documents(first: Assessment, second: Assessment) -> tuple[DocumentChange, ...]:
    before = {document.number: document for document in first.documents}
    after = {document.number: document for document in second.documents}
    found = []
    for number in dict.fromkeys((*before, *after)):
        was, now = before.get(number), after.get(number)
        if was is None or now is None:
            there = was or now
            assert there is not None  # noqa: S101 - the number comes from one of the two
            what = "added" if was is None else "no longer shown"
            found.append(DocumentChange(number, there.title, what))
        else:
            what = "body changed" if was.body_sha256 != now.body_sha256 else ""
            changes = tuple(_document(was, now))
            if what or changes:
                found.append(DocumentChange(number, now.title, what, changes))
    return tuple(found)


def _document(was: DocumentState, now: DocumentState) -> Iterator[Change]:
    if was.revision != now.revision:
        yield Change("revision", was.revision or "none", now.revision or "none")
    if was.status != now.status:
        yield Change("status", was.status, now.status)
    if was.approvals != now.approvals:
        yield Change("approvals", str(len(was.approvals)), str(len(now.approvals)))


def _inputs(first: Assessment, second: Assessment) -> tuple[str, ...]:
    before = {name: sha for name, sha, _ in first.inputs}
    after = {name: sha for name, sha, _ in second.inputs}
    return tuple(name for name in sorted({*before, *after}) if before.get(name) != after.get(name))


def _versions(first: Assessment, second: Assessment) -> tuple[Change, ...]:
    each = (
        (what, getattr(first.versions, what), getattr(second.versions, what))
        for what in ("product", "rules", "contract")
    )
    return tuple(Change(what, was, now) for what, was, now in each if was != now)


def _elsewhere(first: Assessment, second: Assessment) -> tuple[str, ...]:
    """Return the parts that differ in details, such as places or descent, though no result does."""
    parts = (
        "program", "invented", "phase", "verdict", "arrangements", "values", "findings", "gaps", "schedule",
        "documents", "rules", "measurements",
    )  # fmt: skip
    return tuple(part for part in parts if getattr(first, part) != getattr(second, part))
