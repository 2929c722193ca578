"""
The evidence register as a reviewer reads it: which paper is there, in force, approved, and what it answers.

Whether a paper is in force or runs out soon are values, judged by rules; here they are put beside its hash
and beside the rules that ask for it.
"""

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date
from typing import Any

from readiness.assessment.criteria import criteria
from readiness.assessment.records import Assessment, Finding, Ref, Rule
from readiness.errors import Place
from readiness.program.items import InputFile, Item, Program

FOLDER = "evidence/"
_NOTICE = "criterion.expiry_notice_days"


@dataclass(frozen=True)
class EvidenceRow:
    """
    One entry of the register.

    Attributes:
        present: Whether the file it names is there.
        rules: Rules that ask for a paper of its type.
        faults: What makes it unfit as evidence, in words: missing, run out, not approved.
        remarks: What to look at besides: runs out soon, review overdue, no owner.
    """

    id: str
    title: str
    type: str
    file: str
    present: bool
    sha256: str
    size: int
    revision: str
    owner: str
    approved_by: str
    dated_on: date | None
    approved_on: date | None
    next_review_on: date | None
    expires_on: date | None
    covers: tuple[str, ...]
    rules: tuple[str, ...]
    faults: tuple[str, ...]
    remarks: tuple[str, ...]
    where: Place


@dataclass(frozen=True)
class Register:
    """
    The register, and what does not fit together around it.

    Attributes:
        registered: Whether the folder has a register at all.
        orphans: Files under evidence/ that no entry names.
        answering_no_rule: Entries whose type no rule asks for.
        documents_without_rule: Controlled documents (number, title) that answer no rule.
        rules_without_document: Rules that no controlled document answers.
        rules_without_evidence: (rule, type) that applies here and has no paper of that type in force.
    """

    registered: bool
    rows: tuple[EvidenceRow, ...]
    orphans: tuple[str, ...]
    answering_no_rule: tuple[str, ...]
    documents_without_rule: tuple[tuple[str, str], ...]
    rules_without_document: tuple[str, ...]
    rules_without_evidence: tuple[tuple[str, str], ...]

    @property
    def faults(self) -> Iterator[str]:
        """Yield every fault as a sentence."""
        for row in self.rows:
            for fault in row.faults:
                yield f"Evidence {row.id} ({row.title or row.type or 'no title'}): {fault}."
        for name in self.orphans:
            yield f"The file {name} is in no entry of the register."


def evidence_register(program: Program, assessment: Assessment, as_of: date) -> Register:
    """
    Return the evidence register of a program on a day.

    Args:
        program: Where the entries and files stand.
        assessment: Its rules, findings and documents.
        as_of: The day on which papers must be in force.
    """
    files = {file.name: file for file in program.files if file.name.startswith(FOLDER)}
    notice = _notice_days(assessment)
    asking = _asking(assessment)
    rows = tuple(_row(item, files, asking, as_of, notice) for item in program.of_kind("evidence"))
    named = {row.file for row in rows}
    sound = {row.type for row in rows if not row.faults}
    applying = {finding.rule for finding in assessment.findings if finding.outcome != "not applicable"}
    rules = [rule for rule in assessment.rules if rule.id in applying]
    return Register(
        registered=("evidence", "program") in program.known_lists,
        rows=rows,
        orphans=tuple(name for name in files if name not in named),
        answering_no_rule=tuple(row.id for row in rows if not row.rules),
        documents_without_rule=tuple(
            (each.number, each.title) for each in assessment.documents if not each.rules
        ),
        rules_without_document=tuple(rule.id for rule in rules if not _answered(rule, assessment)),
        rules_without_evidence=tuple(
            (rule.id, kind) for rule in rules for kind in rule.evidence if kind not in sound
        ),
    )


def papers_for(finding: Finding, rule: Rule, register: Register) -> tuple[EvidenceRow, ...]:
    """Return the entries that a rule asks for and that speak of the item of a finding."""
    about = {rule.id, *_names(finding.item)}
    everything = finding.item.kind == "program" or finding.item.id in {"all", "none"}
    return tuple(
        row for row in register.rows if row.type in rule.evidence and (everything or about & set(row.covers))
    )


def _names(item: Ref) -> set[str]:
    """Return the ids under which a paper may speak of an item: its own, its owners', its parts'."""
    parts = item.id.split("/")
    joined = {
        "/".join(parts[first:last])
        for first in range(len(parts))
        for last in range(first + 1, len(parts) + 1)
    }
    return joined - {""}


def _notice_days(assessment: Assessment) -> int:
    stated = [value.value for value in assessment.values if value.name == _NOTICE]
    return int(stated[0] if stated else criteria()[_NOTICE].value)


def _asking(assessment: Assessment) -> dict[str, tuple[str, ...]]:
    kinds = dict.fromkeys(kind for rule in assessment.rules for kind in rule.evidence)
    return {kind: tuple(rule.id for rule in assessment.rules if kind in rule.evidence) for kind in kinds}


def _answered(rule: Rule, assessment: Assessment) -> bool:
    shown = {document.number for document in assessment.documents}
    return bool(shown & set(rule.documents))


def _row(
    item: Item, files: dict[str, InputFile], asking: dict[str, tuple[str, ...]], as_of: date, notice: int
) -> EvidenceRow:
    name, kind = _text(item, "file"), _text(item, "type")
    found = files.get(name)
    covers: Any = item.get("covers")
    return EvidenceRow(
        id=item.id,
        title=_text(item, "title"),
        type=kind,
        file=name,
        present=found is not None,
        sha256=found.sha256 if found else "",
        size=found.size if found else 0,
        revision=_text(item, "revision"),
        owner=_text(item, "owner"),
        approved_by=_text(item, "approved_by"),
        dated_on=_day(item, "dated_on"),
        approved_on=_day(item, "approved_on"),
        next_review_on=_day(item, "next_review_on"),
        expires_on=_day(item, "expires_on"),
        covers=tuple(str(each) for each in covers or ()),
        rules=asking.get(kind, ()),
        faults=tuple(_faults(item, found, as_of)),
        remarks=tuple(_remarks(item, as_of, notice)),
        where=item.place,
    )


def _text(item: Item, field: str) -> str:
    return str(item.get(field) or "")


def _day(item: Item, field: str) -> date | None:
    stated = item.get(field)
    return stated if isinstance(stated, date) else None


def _faults(item: Item, found: InputFile | None, as_of: date) -> Iterator[str]:
    if not item.get("file"):
        yield "no file is named"
    elif found is None:
        yield f"the file {item.get('file')} is not there"
    expires, approved, dated = _day(item, "expires_on"), _day(item, "approved_on"), _day(item, "dated_on")
    if expires and expires < as_of:
        yield f"ran out on {expires.isoformat()}"
    if not item.get("approved_by") or not approved:
        yield "no approval with role and date"
    elif approved > as_of:
        yield f"approved on {approved.isoformat()}, after the day of this review"
    elif dated and approved < dated:
        yield f"approved on {approved.isoformat()}, before its own date {dated.isoformat()}"


def _remarks(item: Item, as_of: date, notice: int) -> Iterator[str]:
    expires, review = _day(item, "expires_on"), _day(item, "next_review_on")
    if expires and 0 <= (expires - as_of).days <= notice:
        yield f"runs out on {expires.isoformat()}, within {notice} days"
    if review and review < as_of:
        yield f"review was due on {review.isoformat()}"
    elif review and (review - as_of).days <= notice:
        yield f"review due on {review.isoformat()}, within {notice} days"
    missing = [
        field.replace("_", " ")
        for field in ("revision", "owner", "dated_on", "type", "covers")
        if not item.get(field)
    ]
    if missing:
        yield f"not stated: {', '.join(missing)}"
