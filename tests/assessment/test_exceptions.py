"""Exceptions: which ones hold, which ones cannot be granted, and that each fault is a gap."""

from datetime import date
from typing import Any

import pytest

from readiness.assessment.exceptions import in_force, may_be_granted
from readiness.assessment.records import Ref
from readiness.program.items import Item
from tests.assessment.small import DAY, assessed, item, program, rule

GRANTED: dict[str, Any] = {
    "rule": "ceiling", "item": "a", "reason": "why", "compensation": "instead", "approver": "chief",
    "approved_on": date(2026, 11, 1), "expires_on": date(2027, 11, 1),
}  # fmt: skip


def exception(**changes: Any) -> Item:
    """Return an exception; None leaves a field out."""
    return item("exception", "x", **{key: value for key, value in {**GRANTED, **changes}.items() if value is not None})


@pytest.mark.parametrize(
    ("changes", "holds"),
    [
        ({}, True), ({"expires_on": DAY}, True), ({"expires_on": date(2026, 11, 30)}, False), ({"approver": None}, False),
        ({"approved_on": None}, False), ({"approved_on": date(2026, 12, 2)}, False), ({"reason": None}, False),
    ],
)  # fmt: skip
def test_an_exception_holds_while_it_is_signed_and_not_run_out(changes: dict[str, Any], holds: bool) -> None:
    """Unsigned, undated, future and expired ones cover nothing; the last day still counts."""
    assert holds is in_force(exception(**changes), DAY)


@pytest.mark.parametrize(
    ("changes", "allowed"), [({}, True), ({"exceptable": False}, False), ({"id": "another"}, False)]
)
def test_what_may_be_excepted(changes: dict[str, Any], allowed: bool) -> None:
    """A rule that is not exceptable, and one that does not exist, are not excepted."""
    known = rule(**changes)
    assert {Ref("exception", "x"): allowed} == may_be_granted(program(exception()), {known.id: known})


@pytest.mark.parametrize("name", ["room-sweep", "two-persons", "degrader-check", "mode-interlocks", "gantry-reaches", "room-swep"])
def test_an_exception_of_what_cannot_be_excepted_is_a_gap(name: str) -> None:
    """Sweep, two persons, degrader check, interlocks, what a room cannot give, and no rule at all."""
    found = assessed(program(exception(rule=name)))
    outcomes = {each.rule: each.outcome for each in found.findings if each.item == Ref("exception", "x")}
    assert {"exception-holds": "met", "exception-may-be-granted": "not met", "exception-needed": "not met"} == outcomes
    assert "mend exception-may-be-granted for exception x" in {gap.id for gap in found.gaps}


def test_an_exception_without_a_signature_is_a_gap() -> None:
    """What is missing of it is named in the gap."""
    found = assessed(program(exception(approver=None, rule="plane-distance")))
    gap = next(gap for gap in found.gaps if gap.id == "mend exception-holds for exception x")
    assert "no approver" in gap.what
