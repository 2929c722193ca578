"""Costs of a small program: the department's own figures and nothing else."""

from math import sqrt
from typing import Any

import pytest

from readiness.assessment.records import PROGRAM, Gone, Value
from readiness.assessment.values import costs, patient_flow
from readiness.program.items import Item, Program
from tests.assessment.small import graph, item, program

COURSE = item(
    "course", "long", patients_per_year=8.0, cycles=18, sessions_per_cycle=2, sessions_per_week=4, break_weeks=0.0
)  # fmt: skip
STAND = item("cost", "stand", title="Stand", task="buy-stand", per="once", low=8.0, likely=10.0, high=15.0)
FILM = item("cost", "film", per="patient", low=1.0, likely=1.0, high=1.0)
AUDIT = item("cost", "audit", per="year", low=2.0, likely=2.0, high=2.0)


def got(name: str, *lines: Item, lists: tuple[str, ...] = ()) -> Any:
    """Return a value of a program with these costs, or why there is none."""
    of: Program = program(COURSE, *lines, lists=lists)
    return graph(of, *patient_flow.DEFINITIONS, *costs.DEFINITIONS).get(name, PROGRAM)


def test_what_is_paid_once_has_the_mean_of_its_three_figures() -> None:
    """8, 10 and 15 have the mean 11 and the standard deviation of their triangle."""
    found = got("program.cost_once", STAND, FILM)
    assert isinstance(found, Value)
    assert 11.0 == found.value
    assert pytest.approx(sqrt((64 + 100 + 225 - 80 - 120 - 150) / 18), rel=1e-5) == found.sd


def test_what_is_paid_for_each_patient_is_paid_each_year() -> None:
    """Eight patients at 1 and an audit at 2 are 10 a year, 1.25 for each patient."""
    assert 10.0 == got("program.cost_each_year", FILM, AUDIT).value
    assert 1.25 == got("program.cost_per_patient", FILM, AUDIT).value


def test_costs_are_summed_by_the_task_that_they_belong_to() -> None:
    """The stand belongs to its task, the film to none, and that is said."""
    rows = list(got("program.cost_sums", STAND, FILM).value.records())
    assert {("buy-stand", "once"), ("not assigned to a task", "each year")} <= {
        (row["remedy"], row["paid"]) for row in rows
    }


def test_an_amount_that_nobody_stated_is_open_and_not_zero() -> None:
    """A cost without figures is counted, named, and leaves no sum."""
    blank = item("cost", "camera", title="Second camera", per="once")
    assert 1 == got("program.costs_without_amount_count", STAND, blank).value
    found = got("program.cost_once", STAND, blank)
    assert isinstance(found, Gone)
    assert "Second camera" in found.causes[0].words


def test_without_a_cost_there_is_no_sum_and_without_a_list_nothing_is_known() -> None:
    """An empty list has nothing to sum; a list that is not there is asked for."""
    assert 0 == got("program.costs_without_amount_count", lists=("cost",)).value
    assert isinstance(got("program.cost_once", lists=("cost",)), Gone)
    unknown = got("program.costs_without_amount_count")
    assert isinstance(unknown, Gone)
    assert ["cost"] == [cause.what for cause in unknown.causes]
