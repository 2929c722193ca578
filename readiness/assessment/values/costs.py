"""Costs: the department's own figures, summed by what they are for."""

from readiness.assessment.definition import Definition, derived
from readiness.calculations.costs import (
    EACH_YEAR,
    LINES,
    ONCE,
    cost_per_patient,
    cost_sums,
    expected_cost,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table, Uncertain

_LINES = "rows cost: id title? task? per low? likely? high?"
NO_REMEDY = "not assigned to a task"


def lines_of_costs(*, costs: Table) -> Table:
    """Return the cost figures as lines with the task that each belongs to."""
    rows = [
        (row["title"] or row["id"], row["task"] or NO_REMEDY, *(row[name] for name in LINES[2:]))
        for row in costs.records()
    ]
    return Table.of(LINES, rows)


def blank_lines(*, lines: Table) -> int:
    """Return how many costs have no amount."""
    return sum(row["likely"] is None for row in lines.records())


def cost_once(*, lines: Table, expected_patients_per_year: float) -> Uncertain | None:
    """Return what is paid once; none if there is nothing to pay."""
    return _expected(lines, expected_patients_per_year, ONCE)


def cost_each_year(*, lines: Table, expected_patients_per_year: float) -> Uncertain | None:
    """Return what is paid each year; none if there is nothing to pay."""
    return _expected(lines, expected_patients_per_year, EACH_YEAR)


def _expected(lines: Table, patients_per_year: float, paid: str) -> Uncertain | None:
    once = {ONCE: ("once",), EACH_YEAR: ("year", "patient")}[paid]
    members = [row for row in lines.records() if row["per"] in once]
    if not members:
        return None
    blank = [str(row["cost"]) for row in members if row["likely"] is None]
    if blank:
        raise OutsideValidity(
            f"State low, likely and high of {', '.join(blank)} under costs in program.yaml."
        )
    return expected_cost(lines=lines, patients_per_year=patients_per_year, paid=paid)


_TAKES = {
    "lines": "program.cost_lines",
    "expected_patients_per_year": "program.expected_patients_per_year",
}
TRIANGULAR = "definition"

DEFINITIONS: tuple[Definition, ...] = (
    derived(
        "program.cost_lines",
        "Cost figures of the department, each with the task that it belongs to.",
        lines_of_costs,
        {"costs": _LINES},
    ),
    derived(
        "program.costs_without_amount_count",
        "Costs that are listed without an amount.",
        blank_lines,
        {"lines": "program.cost_lines"},
    ),
    derived(
        "program.cost_sums",
        "Costs by task, paid once and paid each year, low, likely and high.",
        cost_sums,
        {
            "lines": "program.cost_lines",
            "patients_per_year": "program.expected_patients_per_year",
        },
    ),
    Definition(
        "program.cost_once",
        "Expected sum of what is paid once, in the department's currency.",
        by=cost_once,
        takes=_TAKES,
        source=TRIANGULAR,
        known="derived",
        formula="sum of (low + likely + high)/3",
    ),
    Definition(
        "program.cost_each_year",
        "Expected sum of what is paid each year, in the department's currency.",
        by=cost_each_year,
        takes=_TAKES,
        source=TRIANGULAR,
        known="derived",
        formula="sum of (low + likely + high)/3",
    ),
    derived(
        "program.cost_per_patient",
        "Yearly costs for each patient, in the department's currency.",
        cost_per_patient,
        {
            "yearly_cost": "program.cost_each_year",
            "patients_per_year": "program.expected_patients_per_year",
        },
    ),
)
