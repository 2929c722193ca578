"""Dates in an order that time does not allow, and records that contradict themselves."""

from collections import Counter
from collections.abc import Iterator

from readiness.errors import Problem
from readiness.program.items import Item, Program
from readiness.program.plausibility.stated import Check, day, impossible, number, question, word
from readiness.units import printed

LONGEST_CALIBRATION_YEARS = 5  # practice: no certificate of a dosimeter holds longer
# kind, earlier, later: the later date may be the same day
_IN_ORDER = (
    ("evidence", "dated_on", "approved_on"),
    ("evidence", "dated_on", "expires_on"),
    ("evidence", "approved_on", "expires_on"),
    ("evidence", "approved_on", "next_review_on"),
    ("exception", "approved_on", "expires_on"),
    ("progress", "started_on", "finished_on"),
    ("instrument", "calibrated_on", "calibration_due_on"),
)
_IN_USUAL_ORDER = (
    ("person", "trained_on", "competency_on"),
    ("periodic_test", "baseline_on", "last_done_on"),
)
_SAID = {
    "dated_on": "it was written",
    "approved_on": "it was approved",
    "expires_on": "it expires",
    "next_review_on": "it is reviewed next",
    "started_on": "it was started",
    "finished_on": "it was finished",
    "calibrated_on": "it was calibrated",
    "calibration_due_on": "its calibration is due",
    "trained_on": "training was given",
    "competency_on": "competency was checked",
    "baseline_on": "the baseline was taken",
    "last_done_on": "it was last done",
}


def orders(program: Program) -> Iterator[Problem]:
    """What follows from something is not dated before it."""
    for kind, earlier, later in _IN_ORDER:
        for item in program.of_kind(kind):
            message = _turned(item, earlier, later)
            if message:
                yield impossible(item, later, message)
    for kind, earlier, later in _IN_USUAL_ORDER:
        for item in program.of_kind(kind):
            message = _turned(item, earlier, later)
            if message:
                yield question(item, later, message)


def _turned(item: Item, earlier: str, later: str) -> str:
    first, second = day(item, earlier), day(item, later)
    if first is None or second is None or first <= second:
        return ""
    return f"{_SAID[later]} on {second}, before {_SAID[earlier]} on {first}"


def calibrations(program: Program) -> Iterator[Problem]:
    """A calibration holds for some years, not for none and not for ten."""
    for item in program.of_kind("instrument"):
        made, due = day(item, "calibrated_on"), day(item, "calibration_due_on")
        if made is None or due is None or due < made:
            continue
        if due == made:
            yield impossible(item, "calibration_due_on", "its calibration is due on the day it was made")
        elif (due - made).days > 366 * LONGEST_CALIBRATION_YEARS:
            years = printed((due - made).days / 365.25, 2)
            message = f"its calibration would hold {years} years; check the year"
            yield question(item, "calibration_due_on", message)


def evidence_files(program: Program) -> Iterator[Problem]:
    """One file is one piece of evidence."""
    counted = Counter(word(item, "file") for item in program.of_kind("evidence"))
    seen = set()
    for item in program.of_kind("evidence"):
        name = word(item, "file")
        if name is not None and counted[name] > 1 and name in seen:
            yield question(item, "file", f"{name} is registered twice")
        seen.add(name)


def hashes(program: Program) -> Iterator[Problem]:
    """A hash of a document is 64 hexadecimal digits."""
    for item in program.of_kind("approval"):
        found = word(item, "body_sha256")
        if found is not None and (len(found) != 64 or set(found) - set("0123456789abcdef")):
            yield impossible(item, "body_sha256", "it is not a SHA-256 hash: 64 digits 0-9 a-f")


def people(program: Program) -> Iterator[Problem]:
    """A role has no more full-time equivalents than people, and nobody covers for themselves."""
    in_role = Counter(word(person, "role") for person in program.of_kind("person"))
    for role in program.of_kind("role"):
        fte, count = number(role, "available_fte"), in_role[role.id]
        if fte is not None and count and fte > count:
            message = f"{printed(fte)} full-time equivalents, but the people described are {count}"
            yield question(role, "available_fte", message)
    for person in program.of_kind("person"):
        if word(person, "cover_for") == person.id:
            yield impossible(person, "cover_for", "nobody covers for themselves")


def action_levels(program: Program) -> Iterator[Problem]:
    """A deviation is investigated before it stops a course."""
    for item in program.of_kind("in_vivo"):
        investigate, stop = number(item, "investigate_beyond_percent"), number(item, "stop_beyond_percent")
        if investigate is not None and stop is not None and investigate > stop:
            message = f"a course stops at {printed(stop)} %, before {printed(investigate)} % is investigated"
            yield impossible(item, "investigate_beyond_percent", message)


CHECKS: tuple[Check, ...] = (orders, calibrations, evidence_files, hashes, people, action_levels)
