"""Failure modes of a small program: shipped ones, the department's own, and the team's scores."""

from datetime import date
from typing import Any

import pytest

from readiness.assessment.records import PROGRAM, Gone, Value
from readiness.assessment.values import risk
from readiness.calculations.failure_modes import shipped_failure_modes
from readiness.program.items import Item
from tests.assessment.small import graph, item, program

SHIPPED = shipped_failure_modes()
FIRST = SHIPPED[0].id


def mode(name: str, **fields: Any) -> Item:
    """Return an entry of risks.yaml."""
    return item("failure_mode", name, **fields)


def got(name: str, *modes: Item, lists: tuple[str, ...] = ("failure_mode",)) -> Any:
    """Return a value of a program with these entries, or why there is none."""
    return graph(program(*modes, lists=lists), *risk.DEFINITIONS).get(f"program.{name}", PROGRAM)


def value(name: str, *modes: Item) -> Any:
    """Return a value of a program with these entries."""
    found = got(name, *modes)
    assert isinstance(found, Value), found
    return found.value


def test_shipped_modes_are_there_without_a_score() -> None:
    """An empty list means that the team has scored none of the shipped modes; we score none either."""
    assert len(SHIPPED) == value("failure_mode_count")
    assert len(SHIPPED) == value("failure_modes_without_score_count")
    assert 0 == value("failure_modes_without_control_count")
    assert () == value("worst_failure_modes").rows


def test_scores_rank_modes_and_a_blank_stays_blank() -> None:
    """Two modes are scored, one of them not wholly: one has a rank."""
    whole = mode(FIRST, occurrence=2, severity=9, lack_of_detection=3)
    half = mode(SHIPPED[1].id, occurrence=2, severity=9)
    assert len(SHIPPED) - 1 == value("failure_modes_without_score_count", whole, half)
    ((rank, name, *_),) = value("worst_failure_modes", whole, half).rows
    assert (1, FIRST) == (rank, name)


def test_a_mode_of_the_departments_own_is_added_and_may_lack_what_stands_against_it() -> None:
    """An own mode without controls and documents is counted as open until it has them."""
    bare = mode("lift-fails", failure="The patient lift fails", step="patient set-up")
    assert len(SHIPPED) + 1 == value("failure_mode_count", bare)
    assert 1 == value("failure_modes_without_control_count", bare)
    whole = mode(
        "lift-fails", failure="The patient lift fails", controls=("Monthly check",), documents=("4.5",)
    )
    assert 0 == value("failure_modes_without_control_count", whole)
    assert 0 == value("failure_modes_without_document_count", whole)


def test_an_emptied_list_of_controls_counts_as_none() -> None:
    """A department that removes all controls of a shipped mode has a mode without control."""
    assert 1 == value("failure_modes_without_control_count", mode(FIRST, controls=()))


def test_scores_for_a_mode_that_nobody_described_are_a_slip() -> None:
    """A slip in an id is told with the nearest one."""
    found = got("failure_mode_ranking", mode(FIRST[:-1], occurrence=1, severity=1, lack_of_detection=1))
    assert isinstance(found, Gone)
    assert FIRST in found.causes[0].words


def test_a_severe_mode_wants_two_controls() -> None:
    """Severity 9 with one control is named, severity 8 is not."""
    one = ("Look at it",)
    others = [mode(each.id, severity=5) for each in SHIPPED[1:]]
    assert FIRST == value("severe_modes_with_one_control", mode(FIRST, severity=9, controls=one))
    assert "none" == value("severe_modes_with_one_control", mode(FIRST, severity=8, controls=one), *others)


def test_a_severity_that_nobody_scored_may_be_severe() -> None:
    """While a severity is blank it is not known that no severe mode lacks a control."""
    found = got("severe_modes_with_one_control", mode(FIRST, severity=8))
    assert isinstance(found, Gone)
    assert f"severity of failure modes; without one: {len(SHIPPED) - 1}" in found.causes[0].words


def test_the_oldest_scores_decide_their_age() -> None:
    """Scores of 1 December 2025 are twelve months old on 1 December 2026; without a date there is no age."""
    dated = mode(FIRST, scored_on=date(2025, 12, 1)), mode(SHIPPED[1].id, scored_on=date(2026, 11, 1))
    assert pytest.approx(12.0, abs=0.02) == value("failure_mode_scores_age_months", *dated)
    assert isinstance(got("failure_mode_scores_age_months"), Gone)


def test_without_a_list_nothing_is_known() -> None:
    """A folder without risks.yaml is asked for its list."""
    found = got("failure_modes_without_score_count", lists=())
    assert isinstance(found, Gone)
    assert ["failure_mode"] == [cause.what for cause in found.causes]
