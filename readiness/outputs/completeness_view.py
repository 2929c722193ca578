"""The completeness of a program for its reviewer: in words, as JSON and as a page."""

import json
import textwrap
from collections import Counter
from collections.abc import Iterator

from readiness.assessment.completeness import Completeness, Line
from readiness.assessment.evidence import EvidenceRow, Register
from readiness.assessment.records import OUTCOMES, STRENGTHS
from readiness.outputs.contract import CAUTION, INVENTED, plain
from readiness.outputs.holes import plain as escaped
from readiness.outputs.plain_page import section, table, whole_page
from readiness.outputs.words import date_words, item_words

_HEADS = ("Rule", "For", "Finding", "Evidence", "Documents", "Owner", "Date")
_HASH_SHOWN = 12


def finding_cell(line: Line) -> str:
    """Return the outcome of a line with what qualifies it."""
    notes = [line.basis] if line.basis else []
    notes += [f"expected: {line.expected}"] if line.expected else []
    notes += [f"exception {line.exception}"] if line.exception else []
    notes += ["due later"] if line.due_later else []
    return f"{line.outcome} ({'; '.join(notes)})" if notes else line.outcome


def evidence_cell(line: Line) -> str:
    """Return the papers of a line, and what is asked for and not there."""
    said = list(line.evidence)
    if line.lacking:
        said.append(f"lacking {', '.join(line.lacking)}")
    return "; ".join(said) or "-"


def documents_cell(line: Line) -> str:
    """Return the documents of a line with their status."""
    return ", ".join(f"{number} ({status})" for number, status in line.documents) or "none"


def _cells(line: Line) -> tuple[str, ...]:
    return (
        f"{line.rule} ({line.strength}): {line.title}",
        item_words(line.item),
        f"{finding_cell(line)}. {line.message}".strip(),
        evidence_cell(line),
        documents_cell(line),
        line.owner,
        date_words(line.day),
    )


def completeness_text(found: Completeness, name: str, width: int) -> str:
    """Return what to look at first, the evidence and the matrix, for the terminal."""
    lines = [f"{found.program} ({name}), as of {found.as_of.isoformat()}", ""]
    lines.append(textwrap.fill(_verdict(found), width))
    lines += ["", "LOOK AT FIRST"]
    for look in found.looks:
        lines.append(f"  {look.heading} ({len(look.lines)})")
        lines += [_wrapped(f"- {each}", width, 4) for each in look.lines]
    lines += ["", "EVIDENCE REGISTER", *(f"  {each}" for each in _register_lines(found.register, width))]
    lines += ["", "COUNTS BY SUBJECT AND STRENGTH", *_counts(found)]
    for topic in topics(found):
        lines += ["", topic.upper()]
        for line in found.lines:
            if line.topic == topic and line.outcome != "not applicable":
                lines += _matrix_lines(line, width)
    lines += ["", textwrap.fill(CAUTION, width)]
    return "\n".join(lines) + "\n"


def _verdict(found: Completeness) -> str:
    if found.is_complete:
        return (
            "Complete for the present phase: every must-rule is closed and the evidence stands. Whether it "
            "is right is for the reviewer to say."
        )
    return f"Not complete: {', '.join(look.heading.lower() for look in found.looks if look.open)}."


def _wrapped(text: str, width: int, indent: int) -> str:
    return textwrap.fill(
        text, width, initial_indent=" " * indent, subsequent_indent=" " * (indent + 2),
        break_on_hyphens=False,
    )  # fmt: skip


def topics(found: Completeness) -> list[str]:
    """Return the subjects of the matrix in its order."""
    return list(dict.fromkeys(line.topic for line in found.lines))


def _matrix_lines(line: Line, width: int) -> Iterator[str]:
    yield _wrapped(f"{line.rule} ({line.strength}), {item_words(line.item)}: {finding_cell(line)}", width, 2)
    said = [f"evidence {evidence_cell(line)}"] if line.asked else []
    said += [f"documents {documents_cell(line)}", line.owner]
    said += [f"{'earliest' if line.is_open else 'of'} {date_words(line.day)}"] if line.day else []
    yield _wrapped("; ".join(said), width, 6)


def _counts(found: Completeness) -> Iterator[str]:
    for topic in topics(found):
        for strength in STRENGTHS:
            here = [line for line in found.lines if line.topic == topic and line.strength == strength]
            if here:
                counted = Counter(line.outcome for line in here)
                said = ", ".join(f"{counted[each]} {each}" for each in OUTCOMES if counted[each])
                yield f"  {topic}, {strength}: {said}"


def _register_lines(register: Register, width: int) -> Iterator[str]:
    if not register.registered:
        yield "none: evidence is not in documents.yaml"
    for row in register.rows:
        yield _wrapped("; ".join(each for each in _evidence_words(row) if each), width - 2, 0)
    for words in register_remarks(register):
        yield _wrapped(words, width - 2, 0)


def _evidence_words(row: EvidenceRow) -> Iterator[str]:
    yield f"{row.id}: {row.title or row.type or 'no title'}"
    yield f"{row.file or 'no file'} {row.sha256[:_HASH_SHOWN]}".strip()
    yield f"revision {row.revision or 'not stated'}"
    yield row.owner
    approved = f" on {date_words(row.approved_on)}" if row.approved_on else ""
    yield f"approved by {row.approved_by}{approved}" if row.approved_by else "not approved"
    yield f"next review {date_words(row.next_review_on)}" if row.next_review_on else ""
    yield f"holds until {date_words(row.expires_on)}" if row.expires_on else ""
    yield from row.faults
    yield from row.remarks


def register_remarks(register: Register) -> Iterator[str]:
    """Yield what does not fit together around the register."""
    for name in register.orphans:
        yield f"In no entry of the register: {name}"
    if register.answering_no_rule:
        yield f"Papers of a type that no rule asks for: {', '.join(register.answering_no_rule)}"
    if register.documents_without_rule:
        told = ", ".join(f"{number} {title}" for number, title in register.documents_without_rule)
        yield f"Controlled documents that answer no rule: {told}"
    if register.rules_without_document:
        yield f"Rules that no document answers: {', '.join(register.rules_without_document)}"
    if register.rules_without_evidence:
        told = ", ".join(f"{rule} ({kind})" for rule, kind in register.rules_without_evidence)
        yield f"Rules whose paper is not there or does not stand: {told}"


def completeness_json(found: Completeness, *, invented: bool) -> str:
    """Return everything, for programs."""
    caution = f"{CAUTION} {INVENTED}" if invented else CAUTION
    data = {"caution": caution, "complete": found.is_complete, **plain(found)}
    return json.dumps(data, ensure_ascii=False, indent=1) + "\n"


def completeness_section(found: Completeness) -> str:
    """Return what to look at first, the evidence and the matrix as sections of a page."""
    first = f"<p class='verdict'>{escaped(_verdict(found))}</p>"
    for look in found.looks:
        entries = "".join(f"<li>{escaped(each)}</li>" for each in look.lines)
        first += f"<h3>{escaped(look.heading)} ({len(look.lines)})</h3><ul>{entries}</ul>"
    parts = [section("look-first", "Look at first", first), _evidence_section(found.register)]
    matrix = ""
    for topic in topics(found):
        here = [line for line in found.lines if line.topic == topic]
        matrix += f"<h3>{escaped(topic)}</h3>" + table(topic, _HEADS, [_cells(line) for line in here])
    return "".join([*parts, section("completeness", "Every finding by subject and strength", matrix)])


def _evidence_section(register: Register) -> str:
    heads = (
        "Paper",
        "File and hash",
        "Revision",
        "Owner",
        "Approved",
        "Next review",
        "Holds until",
        "To look at",
    )
    rows = [
        (
            f"{row.id}: {row.title}", f"{row.file} {row.sha256}", row.revision, row.owner,
            f"{row.approved_by} {date_words(row.approved_on)}", date_words(row.next_review_on),
            date_words(row.expires_on), "; ".join((*row.faults, *row.remarks)),
        )
        for row in register.rows
    ]  # fmt: skip
    remarks = "".join(f"<li>{escaped(each)}</li>" for each in register_remarks(register))
    body = table("Evidence register", heads, rows) if rows else "<p>No paper is registered.</p>"
    return section("evidence", "Evidence register", body + (f"<ul>{remarks}</ul>" if remarks else ""))


def completeness_page(found: Completeness, *, invented: bool) -> bytes:
    """Return a page of its own."""
    title = f"{found.program}: completeness for the reviewer, {found.as_of.isoformat()}"
    return whole_page(title, completeness_section(found), invented=invented)
