"""Sums of the department's own figures."""

import numpy as np
import pytest

from readiness.calculations.costs import LINES, cost_per_patient, cost_sums, total_cost
from readiness.quantities import Table

BOUGHT = [
    ("stand", "buy-stand", 2027, 8_000, 10_000, 15_000, "EUR"),
    ("degrader", "buy-degrader", 2027, 900, 1_000, 1_400, "EUR"),
    ("stand service", "buy-stand", 2028, 400, 500, 700, "EUR"),
]
OPEN = ("phantom", "buy-phantom", 2027, None, None, None, "EUR")


def sums(*lines: tuple[object, ...]) -> dict[tuple[object, object], dict]:
    """Return the sums by remedy and year."""
    return {(row["remedy"], row["year"]): row for row in cost_sums(lines=Table.of(LINES, lines)).records()}


def test_sums_by_remedy_and_year_close_by_hand():
    """The stand costs 8,400 to 15,700 over two years; 2027 takes 8,900 to 16,400; all is 9,300 to 17,100."""
    found = sums(*BOUGHT)
    assert (found["buy-stand", "all"]["low"], found["buy-stand", "all"]["high"]) == (8_400, 15_700)
    assert (found["all", 2027]["low"], found["all", 2027]["high"]) == (8_900, 16_400)
    assert [found["all", "all"][column] for column in ("low", "likely", "high")] == [9_300, 11_500, 17_100]


def test_years_and_remedies_each_add_to_the_total():
    """The sum over remedies and the sum over years are both the total."""
    found = sums(*BOUGHT)
    for index in (0, 1):
        parts = [row["likely"] for key, row in found.items() if key[1 - index] == "all" and key[index] != "all"]
        assert sum(parts) == found["all", "all"]["likely"]


def test_an_amount_that_nobody_stated_is_open_not_zero():
    """Its own sum is blank, and every sum that holds it says that one line is open."""
    found = sums(*BOUGHT, OPEN)
    assert found["buy-phantom", 2027]["likely"] is None
    assert found["buy-phantom", 2027]["lines_without_amount"] == 1
    assert found["all", "all"]["likely"] == 11_500
    assert found["all", "all"]["lines_without_amount"] == 1
    with pytest.raises(ValueError, match=r"1 cost\(s\) have no amount"):
        total_cost(lines=Table.of(LINES, [*BOUGHT, OPEN]))


def test_no_lines_give_no_sums():
    """An empty list has no total rather than a total of zero."""
    assert cost_sums(lines=Table.of(LINES, [])).rows == ()
    with pytest.raises(ValueError, match="no cost to add up"):
        total_cost(lines=Table.of(LINES, []))


def test_total_agrees_with_random_draws():
    """Mean and standard deviation agree with 400,000 seeded draws from triangular distributions."""
    generator = np.random.default_rng(11)
    draws = sum(generator.triangular(low, likely, high, 400_000) for _, _, _, low, likely, high, _ in BOUGHT)
    total = total_cost(lines=Table.of(LINES, BOUGHT))
    assert float(np.mean(draws)) == pytest.approx(total.value, rel=2e-3)
    assert float(np.std(draws)) == pytest.approx(total.sd, rel=1e-2)


def test_a_fixed_price_has_no_spread():
    """Low, likely and high alike give that price and no deviation, and zero is a price."""
    fixed = total_cost(lines=Table.of(LINES, [("a", "r", 2027, 300, 300, 300, "EUR")]))
    assert (fixed.value, fixed.sd) == (300, 0)
    assert sums(("a", "r", 2027, 0, 0, 0, "EUR"))["all", "all"]["likely"] == 0


@pytest.mark.parametrize(
    ("amounts", "words"),
    [
        ((3, 2, 4), "low 3, likely 2, high 4 are not in order"),
        ((-1, 2, 4), "are not in order"),
        ((None, 2, 4), "state low, likely and high, or none"),
        (("1", 2, 4), "low, likely and high are numbers"),
        ((1, 2, float("inf")), "low, likely and high are numbers"),
    ],
)
def test_impossible_amounts_are_refused(amounts, words):
    """The line is named with what is wrong."""
    with pytest.raises(ValueError, match=words):
        sums(("stand", "buy-stand", 2027, *amounts, "EUR"))


def test_two_currencies_are_refused():
    """Euros and pounds are not added."""
    with pytest.raises(ValueError, match="costs in EUR and GBP cannot be added"):
        sums(*BOUGHT, ("film", "buy-film", 2027, 1, 2, 3, "GBP"))


def test_cost_per_patient():
    """Eight patients share a year's costs; nobody shares none."""
    assert cost_per_patient(yearly_cost=8_000, patients_per_year=8) == 1_000
    with pytest.raises(ValueError, match="without patients"):
        cost_per_patient(yearly_cost=8_000, patients_per_year=0)
