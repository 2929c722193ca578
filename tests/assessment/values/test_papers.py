"""The register: which papers count, and what is missing of them."""

from datetime import date
from typing import Any

import pytest

from readiness.assessment.records import PROGRAM, Gone, Ref, Value
from readiness.assessment.values import papers
from readiness.program.items import Item, Program
from tests.assessment.small import graph, item, program

PAPER: dict[str, Any] = {
    "type": "room-survey-drawing", "file": "evidence/drawing.pdf", "revision": "1", "owner": "medical physicist",
    "dated_on": date(2026, 10, 6), "approved_by": "chief physicist", "approved_on": date(2026, 10, 8), "covers": ("vault",),
}  # fmt: skip


def paper(name: str = "drawing", **changes: Any) -> Item:
    """Return a paper; None leaves a field out."""
    fields = {key: value for key, value in {**PAPER, **changes}.items() if value is not None}
    return item("evidence", name, **fields)


def got(of: Program, name: str, ref: Ref) -> Any:
    """Return a value, or why there is none."""
    found = graph(of, *papers.DEFINITIONS).get(name, ref)
    return found.value if isinstance(found, Value) else found


def of_room(*found: Item) -> Any:
    """Return the papers that count for the room."""
    return got(program(item("room", "vault"), *found), "room.papers", Ref("room", "vault"))


def test_a_paper_that_counts() -> None:
    """A paper with a file, approved and in force counts for what it covers and for nothing else."""
    assert ("room-survey-drawing",) == of_room(paper())
    assert () == of_room(paper(covers=("other",)))
    assert ("room-survey-drawing",) == got(program(paper(covers=("other",))), "program.papers", PROGRAM)


@pytest.mark.parametrize(
    "changes",
    [
        {"file": None}, {"approved_on": None}, {"approved_on": date(2027, 1, 1)}, {"expires_on": date(2026, 11, 30)},
        {"covers": None}, {"type": None},
    ],
)  # fmt: skip
def test_a_paper_that_does_not_count(changes: dict[str, Any]) -> None:
    """Without file, approval, cover or type, or after its last day, a paper does not count."""
    assert () == of_room(paper(**changes))


def test_the_last_day_counts() -> None:
    """A paper that runs out today still holds, and runs out soon."""
    today = paper(expires_on=date(2026, 12, 1))
    assert ("room-survey-drawing",) == of_room(today)
    ref = Ref("evidence", "drawing")
    assert got(program(today), "evidence.still_in_force", ref) is True
    assert got(program(today), "evidence.runs_out_soon", ref) is True
    assert got(program(paper(expires_on=date(2027, 3, 1))), "evidence.runs_out_soon", ref) is False
    assert got(program(paper()), "evidence.runs_out_soon", ref) is False


def test_a_nested_item_is_covered_by_its_own_id() -> None:
    """A paper that covers e6 covers the beam linac/e6."""
    of = program(item("beam", "linac/e6"), paper(covers=("e6",)))
    assert ("room-survey-drawing",) == got(of, "beam.papers", Ref("beam", "linac/e6"))


def test_an_unknown_register_is_asked_for() -> None:
    """Without a register nobody knows the papers of a room."""
    found = got(program(item("room", "vault")), "room.papers", Ref("room", "vault"))
    assert isinstance(found, Gone)
    assert ["evidence"] == [cause.what for cause in found.causes]


def test_particulars_that_are_not_entered() -> None:
    """What is missing is named in words."""
    ref = Ref("evidence", "drawing")
    assert "nothing" == got(program(paper()), "evidence.particulars_missing", ref)
    bare = paper(file=None, revision=None, covers=None)
    assert "file, revision, what it covers" == got(program(bare), "evidence.particulars_missing", ref)


@pytest.mark.parametrize(
    ("changes", "faults"),
    [
        ({}, "nothing"),
        ({"compensation": None, "approver": None}, "no compensation, no approver"),
        ({"expires_on": date(2026, 11, 30)}, "run out on 2026-11-30"),
        ({"expires_on": None}, "no last day"),
        ({"approved_on": date(2026, 12, 2)}, "granted in the future"),
    ],
)  # fmt: skip
def test_why_an_exception_does_not_hold(changes: dict[str, Any], faults: str) -> None:
    """What is not entered, not yet granted or run out is named; the last day counts."""
    fields = {
        "rule": "r", "item": "i", "reason": "why", "compensation": "instead", "approver": "chief",
        "approved_on": date(2026, 11, 1), "expires_on": date(2026, 12, 1), **changes,
    }  # fmt: skip
    exception = item("exception", "x", **{key: value for key, value in fields.items() if value is not None})
    assert faults == got(program(exception), "exception.faults", Ref("exception", "x"))


def test_which_date_of_a_paper_has_passed() -> None:
    """Its last day and its review are told apart; a paper without dates does not age."""
    ref = Ref("evidence", "drawing")
    passed: dict[str, Any] = {"expires_on": date(2026, 11, 30), "next_review_on": date(2026, 11, 1)}
    assert "its last day, the date of its review" == got(program(paper(**passed)), "evidence.out_of_date", ref)
    assert "nothing" == got(program(paper()), "evidence.out_of_date", ref)


def test_an_approval_before_the_paper_existed() -> None:
    """A paper cannot be approved before its own date or after today."""
    ref = Ref("evidence", "drawing")
    assert got(program(paper()), "evidence.approved", ref) is True
    assert got(program(paper(approved_on=date(2026, 10, 5))), "evidence.approved", ref) is False
    assert got(program(paper(approved_on=date(2026, 12, 2))), "evidence.approved", ref) is False
    assert isinstance(got(program(paper(approved_by=None)), "evidence.approved", ref), Gone)


def test_a_review_that_was_missed() -> None:
    """The day of the next review is still in time; a paper without one misses none."""
    ref = Ref("evidence", "drawing")
    assert got(program(paper(next_review_on=date(2026, 12, 1))), "evidence.reviewed_in_time", ref) is True
    assert got(program(paper(next_review_on=date(2026, 11, 30))), "evidence.reviewed_in_time", ref) is False
    assert got(program(paper()), "evidence.reviewed_in_time", ref) is True
