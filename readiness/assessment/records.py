"""What an assessment is made of; names are those of assessment.json."""

from dataclasses import dataclass
from datetime import date
from typing import Any, NamedTuple

from readiness.errors import Place

BASES = ("measured", "stated", "predicted", "assumed")  # from the strongest to the weakest
STRENGTHS = ("must", "should", "consider")
PHASES = ("decide", "build", "install", "commission", "train", "release", "operate")
OUTCOMES = ("met", "not met", "not assessed", "not applicable", "excepted")
FEASIBILITIES = ("feasible", "feasible when gaps close", "not enough described", "not feasible here")
VERDICTS = ("ready", "ready when gaps close", "no feasible arrangement", "not enough described")


class Ref(NamedTuple):
    """An item by its kind and id."""

    kind: str
    id: str

    def __str__(self) -> str:
        """Return the item in words."""
        words = self.kind.replace("_", " ")
        return words if self.id == self.kind else f"{words} {self.id}"


PROGRAM = Ref("program", "program")


@dataclass(frozen=True, order=True)
class Cause:
    """
    Why something is not known: a root, never an intermediate name.

    Attributes:
        kind: field, list, item, file, measurement, validity, contradiction or assumed.
        what: What to supply: a value name ("room.ceiling_height_cm"), a kind, or a measurement kind.
        item: The item that lacks it.
        words: One sentence for the person who supplies it.
    """

    kind: str
    what: str
    item: Ref
    words: str


class Input(NamedTuple):
    """One input of a value: the calculation's keyword and the value it was given."""

    keyword: str
    name: str
    item: Ref


@dataclass(frozen=True)
class Value:
    """
    A named number, word, date or table of an item, with where it comes from.

    Attributes:
        name: kind.name_unit
        basis: measured, stated, predicted or assumed.
        sd: Standard deviation in the unit of the value, or None.
        inputs: What it was worked out from; empty for what was stated.
        where: Place in the program folder, for what was stated or measured.
        source: Publication or method behind the calculation or default; known: how we know it.
        instead_of: The claim or prediction that a measurement replaced.
    """

    name: str
    item: Ref
    value: Any
    unit: str
    basis: str
    sd: float | None = None
    inputs: tuple[Input, ...] = ()
    where: Place | None = None
    source: str = ""
    known: str = ""
    instead_of: "Value | None" = None


@dataclass(frozen=True)
class Gone:
    """A value that cannot be had, with every root cause."""

    causes: tuple[Cause, ...]


Got = Value | Gone


@dataclass(frozen=True)
class RuleSource:
    """Where a requirement comes from, and how we know."""

    key: str
    at: str
    known: str


@dataclass(frozen=True)
class Clause:
    """One condition on one value; the limit is a number, words, or the name of another value."""

    subject: str
    condition: str
    limit: Any = None


@dataclass(frozen=True)
class Rule:
    """
    One requirement.

    Attributes:
        tells_apart: Whether arrangements are compared by it: another beam, side, degrader or room would
            answer otherwise.
        would_do: Value in words, of the same item, that follows the message where the rule is not met: what
            would do instead, with numbers. "" where the remedy says it all.
    """

    id: str
    title: str
    strength: str
    sources: tuple[RuleSource, ...]
    applies_when: tuple[Clause, ...]
    subject: str
    condition: str
    limit: Any
    basis: str
    physical: bool
    exceptable: bool
    message: str
    remedy: str
    owner: str
    task: str
    phase: str
    evidence: tuple[str, ...]
    documents: tuple[str, ...]
    topic: str
    cases: Any = None
    origin: str = "shipped"
    where: Place | None = None
    would_do: str = ""
    tells_apart: bool = False

    @property
    def kind(self) -> str:
        """Return the kind of item the rule speaks of."""
        return self.subject.partition(".")[0]


@dataclass(frozen=True)
class Finding:
    """
    What one rule says of one item.

    Attributes:
        observed: The value as judged, or None.
        limit: The limit as used, or None.
        expected: "met" or "not met" where a prediction or default stands in for what is missing, else "".
        causes: Why it is not assessed.
        exception: Id of the exception that covers it, or "".
        message: The sentence for people.
    """

    rule: str
    item: Ref
    outcome: str
    observed: Any = None
    limit: Any = None
    basis: str = ""
    expected: str = ""
    causes: tuple[Cause, ...] = ()
    exception: str = ""
    message: str = ""
    where: Place | None = None


@dataclass(frozen=True)
class Gap:
    """One thing to do; closes one or more findings."""

    id: str
    kind: str  # "supply" (something unknown) or "mend" (something not met)
    what: str
    item: Ref
    findings: tuple[tuple[str, Ref], ...]
    task: str
    owner: str
    strength: str
    phase: str
    topic: str
    due_later: bool
    where: Place | None = None
    waits_for: tuple[str, ...] = ()
    earliest: date | None = None
    progress: str = ""  # actual dates of its task in words


@dataclass(frozen=True)
class ArrangementRow:
    """
    One arrangement compared with the others, with the findings that decide its feasibility.

    Attributes:
        reasons: Why it stands first, or why the chosen one does not.
        against: Rules that tell arrangements apart and that it does not keep or is not expected to keep.
        unanswered: Such rules without an answer yet.
        floor_cm: Corners of the room's floor from the isocentre, for a small plan; empty if not known.
        source_axis_distance_cm: From the source to the isocentre, for that plan.
    """

    item: Ref
    title: str
    parts: tuple[tuple[str, str], ...]
    feasibility: str
    deciding: tuple[Finding, ...]
    counts: tuple[tuple[str, int], ...]
    chosen: bool
    figures: tuple[tuple[str, Any, str], ...]  # value name, value, basis
    reasons: tuple[str, ...] = ()
    against: tuple[str, ...] = ()
    unanswered: tuple[str, ...] = ()
    floor_cm: tuple[tuple[float, float], ...] = ()
    source_axis_distance_cm: float | None = None


@dataclass(frozen=True)
class ScheduledTask:
    """One task on the road to the first patient."""

    id: str
    title: str
    owner: str
    phase: str
    working_days: float
    waits_for: tuple[str, ...]
    gaps: tuple[str, ...]
    start: date
    finish: date
    latest_finish: date
    float_days: float
    critical: bool
    done: bool
    lead_time: str  # "department's own", or "default, common practice"
    state: str = ""  # actual dates in words


@dataclass(frozen=True)
class WeekOfWork:
    """Hours of commissioning that a profession is wanted for in a week, and by which tasks."""

    week_of: date
    who: str
    needed_h: float
    free_h: float
    missing_h: float
    tasks: tuple[str, ...]


@dataclass(frozen=True)
class Schedule:
    """
    The road to the first patient.

    Attributes:
        by_week: Hours of commissioning by week and profession; empty where they are not stated.
    """

    tasks: tuple[ScheduledTask, ...]
    first_patient: date | None
    target: date | None
    working_days_late: int | None
    movers: tuple[tuple[str, float], ...]
    remarks: tuple[str, ...]
    by_week: tuple[WeekOfWork, ...] = ()


@dataclass(frozen=True)
class DocumentState:
    """One controlled document as far as the assessment knows it."""

    number: str
    title: str
    part: str
    kind: str
    owner: str
    approvers: tuple[str, ...]
    body_sha256: str
    values: tuple[str, ...]
    rules: tuple[str, ...]
    status: str
    revision: str
    approvals: tuple[tuple[str, str, str], ...]  # role, name, date


@dataclass(frozen=True)
class MeasurementUse:
    """
    One measurement file: what it gives, or why it does not count, and what must be said about it.

    Attributes:
        kind: What was measured, in words.
        gives: Names of the values that are measured through it.
        why_not: Every reason for which it does not count for the arrangement; empty if it does.
        remarks: What the analysis says beside the numbers.
    """

    item: Ref
    file: str
    kind: str
    done_on: date | None
    gives: tuple[str, ...]
    why_not: tuple[str, ...]
    remarks: tuple[str, ...]


@dataclass(frozen=True)
class Verdict:
    """The answer in words."""

    words: str
    arrangement: str
    chosen_by: str  # "department", "recommendation" or ""
    reasons: tuple[str, ...]


@dataclass(frozen=True)
class Versions:
    """What made the assessment."""

    product: str
    rules: str
    contract: str


@dataclass(frozen=True)
class Assessment:
    """Everything that the outputs show; ``from_json(to_json(a)) == a``."""

    program: str
    invented: bool
    as_of: date
    phase: str
    versions: Versions
    verdict: Verdict
    arrangements: tuple[ArrangementRow, ...]
    values: tuple[Value, ...]
    findings: tuple[Finding, ...]
    gaps: tuple[Gap, ...]
    schedule: Schedule | None
    documents: tuple[DocumentState, ...]
    rules: tuple[Rule, ...]
    inputs: tuple[tuple[str, str, int], ...]
    measurements: tuple[MeasurementUse, ...] = ()


def weakest(bases: list[str]) -> str:
    """Return the weakest of some bases; nothing at all counts as stated."""
    return max(bases, key=BASES.index) if bases else "stated"
