"""
What a reviewer works through: a line for every finding with its evidence, documents, owner and date, and
what to look at first.
"""

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date

from readiness.assessment.evidence import Register, papers_for
from readiness.assessment.records import STRENGTHS, Assessment, Finding, Gap, Ref, Rule
from readiness.errors import Place
from readiness.program.items import Item, Program

CLOSED = ("met", "excepted", "not applicable")


@dataclass(frozen=True)
class Line:
    """
    One finding with everything that a reviewer asks of it.

    Attributes:
        asked: Types of evidence that the rule asks for.
        evidence: Registered papers that speak of the item, fit as evidence.
        lacking: Types that were asked for and are not there, or are unfit.
        documents: (number, status) of the controlled documents that answer the rule.
        owner: Who closes it, or keeps it closed.
        day: Earliest day on which it can be closed; for what is closed, the date of its newest paper.
        due_later: Whether it belongs to a later phase.
    """

    topic: str
    strength: str
    rule: str
    title: str
    item: Ref
    outcome: str
    expected: str
    basis: str
    message: str
    exception: str
    asked: tuple[str, ...]
    evidence: tuple[str, ...]
    lacking: tuple[str, ...]
    documents: tuple[tuple[str, str], ...]
    owner: str
    day: date | None
    due_later: bool
    where: Place | None

    @property
    def is_open(self) -> bool:
        """Return whether something is still to be done for it."""
        return self.outcome not in CLOSED


@dataclass(frozen=True)
class Look:
    """One kind of thing to look at first, with one sentence for each; ``open`` keeps a program incomplete."""

    heading: str
    open: bool
    lines: tuple[str, ...]


@dataclass(frozen=True)
class Completeness:
    """The completeness matrix of a program, its evidence, and what to look at first."""

    program: str
    as_of: date
    lines: tuple[Line, ...]
    looks: tuple[Look, ...]
    register: Register

    @property
    def is_complete(self) -> bool:
        """Return whether every must-rule of the present phase is closed and all evidence is sound."""
        return not any(look.open for look in self.looks)


def completeness(program: Program, assessment: Assessment, register: Register) -> Completeness:
    """Return the matrix by subject and strength, and what a reviewer must look at first."""
    rules = {rule.id: rule for rule in assessment.rules}
    gaps = {key: gap for gap in assessment.gaps for key in gap.findings}
    states = {document.number: document.status for document in assessment.documents}
    topics = list(dict.fromkeys(rule.topic for rule in assessment.rules))
    lines = [
        _line(finding, rules[finding.rule], gaps.get((finding.rule, finding.item)), states, register)
        for finding in assessment.findings
    ]
    lines.sort(key=lambda line: (topics.index(line.topic), STRENGTHS.index(line.strength)))
    looks = tuple(look for look in _looks(program, assessment, register, lines) if look.lines)
    return Completeness(assessment.program, assessment.as_of, tuple(lines), looks, register)


def _line(finding: Finding, rule: Rule, gap: Gap | None, states: dict[str, str], register: Register) -> Line:
    papers = papers_for(finding, rule, register)
    fit = [paper for paper in papers if not paper.faults]
    applies = finding.outcome != "not applicable"
    dates = [paper.dated_on for paper in fit if paper.dated_on]
    return Line(
        topic=rule.topic,
        strength=rule.strength,
        rule=rule.id,
        title=rule.title,
        item=finding.item,
        outcome=finding.outcome,
        expected=finding.expected,
        basis=finding.basis,
        message=finding.message,
        exception=finding.exception,
        asked=rule.evidence if applies else (),
        evidence=tuple(paper.id for paper in fit) if applies else (),
        lacking=tuple(kind for kind in rule.evidence if kind not in {p.type for p in fit}) if applies else (),
        documents=tuple((number, states[number]) for number in rule.documents if number in states),
        owner=gap.owner if gap else rule.owner,
        day=gap.earliest if gap else max(dates, default=None),
        due_later=gap.due_later if gap else False,
        where=finding.where,
    )


def _looks(program: Program, assessment: Assessment, register: Register, lines: list[Line]) -> Iterator[Look]:
    musts = [line for line in lines if line.strength == "must" and not line.due_later]
    yield Look("Must-rules not met", True, _told(line for line in musts if line.outcome == "not met"))
    unknown = (line for line in musts if line.outcome == "not assessed")
    yield Look("Must-rules that cannot be judged", True, tuple(_grouped(unknown, assessment)))
    yield Look("Arrangement", True, tuple(_arrangement(assessment)))
    yield Look("Evidence that does not stand", True, _evidence_faults(register))
    changed = [each for each in assessment.documents if each.status == "changed after approval"]
    yield Look(
        "Documents changed after their approval",
        True,
        tuple(f"{each.number} {each.title}: the approval no longer covers its body." for each in changed),
    )
    yield Look("Must-rules of later phases", False, _later(lines))
    yield Look("Exceptions", False, tuple(_exceptions(program, assessment)))
    yield Look("Met on a statement alone, without the paper that shows it", False, _unproven(lines))
    yield Look("Predicted, stated or assumed where that is not enough", False, _predicted(lines))
    yield Look(
        "Evidence to watch",
        False,
        tuple(f"{row.id}: {said}." for row in register.rows for said in row.remarks),
    )
    yield Look("Local rules and limits", False, tuple(_local(program)))
    drafts = [each.number for each in assessment.documents if each.status == "draft"]
    total = len(assessment.documents)
    yield Look(
        "Documents not approved",
        False,
        (f"{len(drafts)} of {total}: {', '.join(drafts)}.",) if drafts else (),
    )


def _later(lines: list[Line]) -> tuple[str, ...]:
    waiting = [line for line in lines if line.strength == "must" and line.due_later]
    failed = [line for line in waiting if line.outcome == "not met"]
    if not waiting:
        return ()
    unknown = len(waiting) - len(failed)
    return (f"{len(failed)} findings are not met, {unknown} cannot be judged yet; the matrix names them.",)


def _told(lines: Iterator[Line]) -> tuple[str, ...]:
    return tuple(dict.fromkeys(f"{line.rule}: {line.message} [{line.owner}]" for line in lines))


def _grouped(lines: Iterator[Line], assessment: Assessment) -> Iterator[str]:
    """Yield one sentence for each root cause, with the rules that it leaves open."""
    open_rules = {(line.rule, line.item) for line in lines}
    for gap in assessment.gaps:
        left = dict.fromkeys(rule for rule, item in gap.findings if (rule, item) in open_rules)
        if left and gap.kind == "supply":
            yield f"{gap.what} [{gap.owner}; leaves open: {', '.join(left)}]"


def _arrangement(assessment: Assessment) -> Iterator[str]:
    if assessment.verdict.chosen_by == "recommendation":
        yield "The department has not chosen an arrangement; what is judged is the recommended one."
    elif not assessment.verdict.arrangement:
        yield "No arrangement is chosen or can be recommended."


def _evidence_faults(register: Register) -> tuple[str, ...]:
    if not register.registered:
        return ("The folder has no evidence register (evidence: in documents.yaml).",)
    return tuple(register.faults)


def _exceptions(program: Program, assessment: Assessment) -> Iterator[str]:
    used = {finding.exception for finding in assessment.findings if finding.exception}
    for item in program.of_kind("exception"):
        until = item.get("expires_on")
        standing = "in force" if item.id in used else "covers nothing: not in force, or not needed"
        yield (
            f"{item.id}: rule {item.get('rule')}, granted by {item.get('approver') or 'nobody named'} until "
            f"{until.isoformat() if isinstance(until, date) else 'no date'}; {standing}."
        )


def _unproven(lines: list[Line]) -> tuple[str, ...]:
    return tuple(
        dict.fromkeys(
            f"{line.rule} ({line.strength}): asked for {', '.join(line.lacking)}."
            for line in lines
            if line.outcome == "met" and line.basis != "measured" and line.lacking
        )
    )


def _predicted(lines: list[Line]) -> tuple[str, ...]:
    """Return what is only predicted, what is expected to fail before what is expected to hold."""
    found = [line for line in lines if line.outcome == "not assessed" and line.expected]
    found.sort(key=lambda line: (line.expected == "met", STRENGTHS.index(line.strength)))
    return tuple(
        f"{line.rule} ({line.strength}): {line.message} That is {line.basis}; expected: {line.expected}."
        for line in found
    )


def _local(program: Program) -> Iterator[str]:
    for item in program.of_kind("local_rule"):
        yield f"Rule {item.id}: {item.get('title')} ({item.get('source')})."
    for item in program.of_kind("local_limit"):
        what = item.get("rule") or item.get("criterion")
        yield f"Limit on {what}: {_limit(item)} ({item.get('source')})."


def _limit(item: Item) -> str:
    return f"{item.get('limit')} {item.get('unit') or ''}".strip()
