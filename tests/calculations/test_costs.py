"""Sums of the department's own figures."""

import numpy as np
import pytest

from readiness.calculations.costs import LINES, cost_per_patient, cost_sums, expected_cost
from readiness.quantities import Table

BOUGHT = [
    ("stand", "buy-stand", "once", 8_000, 10_000, 15_000),
    ("degrader", "buy-degrader", "once", 900, 1_000, 1_400),
    ("stand service", "buy-stand", "year", 400, 500, 700),
    ("detectors", "buy-detectors", "patient", 50, 60, 100),
]
OPEN = ("phantom", "buy-phantom", "once", None, None, None)


def sums(*lines: tuple[object, ...], patients: float = 8) -> dict[tuple[object, object], dict]:
    """Return the sums by remedy and how they are paid."""
    table = cost_sums(lines=Table.of(LINES, lines), patients_per_year=patients)
    return {(row["remedy"], row["paid"]): row for row in table.records()}


def amounts(row: dict) -> list[float]:
    """Return low, likely and high."""
    return [row[column] for column in ("low", "likely", "high")]


def test_sums_by_remedy_close_by_hand():
    """Once 8,900 to 16,400; each year 400 + 8 x 50 to 700 + 8 x 100."""
    found = sums(*BOUGHT)
    assert amounts(found["buy-stand", "once"]) == [8_000, 10_000, 15_000]
    assert amounts(found["buy-stand", "each year"]) == [400, 500, 700]
    assert amounts(found["buy-detectors", "each year"]) == [400, 480, 800]
    assert amounts(found["all remedies", "once"]) == [8_900, 11_000, 16_400]
    assert amounts(found["all remedies", "each year"]) == [800, 980, 1_500]


def test_remedies_add_to_the_total():
    """The sum over remedies is the total, for what is paid once and each year."""
    found = sums(*BOUGHT)
    for paid in ("once", "each year"):
        parts = [row["likely"] for (remedy, when), row in found.items() if when == paid and remedy != "all remedies"]
        assert sum(parts) == found["all remedies", paid]["likely"]


def test_more_patients_cost_more_each_year_and_not_once():
    """Only what is paid per patient grows with them; without patients it is nothing."""
    few, many = sums(*BOUGHT, patients=0), sums(*BOUGHT, patients=20)
    assert amounts(few["buy-detectors", "each year"]) == [0, 0, 0]
    assert many["all remedies", "each year"]["likely"] == 500 + 20 * 60
    assert many["all remedies", "once"] == few["all remedies", "once"]


def test_an_amount_that_nobody_stated_is_open_not_zero():
    """Its own sum is blank, and every sum that holds it says that one line is open."""
    found = sums(*BOUGHT, OPEN)
    assert found["buy-phantom", "once"]["likely"] is None
    assert found["buy-phantom", "once"]["lines_without_amount"] == 1
    assert found["all remedies", "once"]["likely"] == 11_000
    assert found["all remedies", "once"]["lines_without_amount"] == 1
    assert found["all remedies", "each year"]["lines_without_amount"] == 0
    with pytest.raises(ValueError, match="costs without an amount: 1"):
        expected_cost(lines=Table.of(LINES, [*BOUGHT, OPEN]), patients_per_year=8, paid="once")


def test_no_lines_give_no_sums():
    """An empty list has no total rather than a total of zero."""
    assert sums() == {}
    with pytest.raises(ValueError, match="no cost that is paid once"):
        expected_cost(lines=Table.of(LINES, []), patients_per_year=8, paid="once")


def test_expected_cost_agrees_with_random_draws():
    """Mean and standard deviation agree with 400,000 seeded draws from triangular distributions."""
    generator = np.random.default_rng(11)
    draws = sum(generator.triangular(*line[3:], 400_000) for line in BOUGHT if line[2] == "once")
    total = expected_cost(lines=Table.of(LINES, BOUGHT), patients_per_year=8, paid="once")
    assert float(np.mean(draws)) == pytest.approx(total.value, rel=2e-3)
    assert float(np.std(draws)) == pytest.approx(total.sd, rel=1e-2)


def test_a_fixed_price_has_no_spread():
    """Low, likely and high alike give that price and no deviation, and zero is a price."""
    lines = Table.of(LINES, [("a", "r", "once", 300, 300, 300)])
    fixed = expected_cost(lines=lines, patients_per_year=8, paid="once")
    assert (fixed.value, fixed.sd) == (300, 0)
    assert sums(("a", "r", "once", 0, 0, 0))["all remedies", "once"]["likely"] == 0


@pytest.mark.parametrize(
    ("line", "words"),
    [
        (("once", 3, 2, 4), "stand: low 3, likely 2, high 4 are not in order"),
        (("once", -1, 2, 4), "stand: low -1, likely 2, high 4 are not in order"),
        (("once", None, 2, 4), "stand: state low, likely and high, or none"),
        (("once", "1", 2, 4), "stand: low, likely and high are numbers"),
        (("once", 1, 2, float("inf")), "stand: low, likely and high are numbers"),
        (("month", 1, 2, 3), "stand: per 'month' is not one of once, year, patient"),
    ],
)
def test_impossible_lines_are_refused(line, words):
    """The line is named with what is wrong."""
    with pytest.raises(ValueError, match=words):
        sums(("stand", "buy-stand", *line))


def test_negative_patients_are_refused():
    """A negative number of patients would earn money."""
    with pytest.raises(ValueError, match="cannot be negative"):
        sums(*BOUGHT, patients=-1)


def test_cost_per_patient():
    """Eight patients share a year's costs; nobody shares none."""
    assert cost_per_patient(yearly_cost=8_000, patients_per_year=8) == 1_000
    with pytest.raises(ValueError, match="without patients"):
        cost_per_patient(yearly_cost=8_000, patients_per_year=0)
