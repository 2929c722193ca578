"""
Costs: the department's own low, likely and high figures, summed by remedy and year. No figure is ours.

Lines come as a table with the columns of :data:`LINES`. An amount that nobody stated stays open and is
counted; it is never taken for zero.
"""

import math
from collections.abc import Callable

from readiness.quantities import Scalar, Table, Uncertain

LINES = ("item", "remedy", "year", "low", "likely", "high", "currency")
SUMS = ("remedy", "year", "low", "likely", "high", "currency", "lines", "lines_without_amount")


def cost_sums(*, lines: Table) -> Table:
    """
    Return the costs summed by remedy and year, by remedy, by year, and over all.

    Args:
        lines: What costs how much; columns of LINES. Year is a calendar year.

    Returns:
        One row per remedy and year, then per remedy (year "all"), per year (remedy "all"), and the total;
        each says how many of its lines have no amount. A sum of which no line has an amount is blank.

    Raises:
        ValueError: If low, likely and high are not in order or only partly stated, or currencies differ.

    Valid for: money of one currency and one price level.
    Assumes: nothing about how costs move together: a sum of lows is the lowest case, not a likely one.
    Source: definition (derived).
    """
    checked = _checked(lines)
    groupings: tuple[Callable[[dict[str, Scalar]], tuple[str, Scalar]], ...] = (
        lambda row: (str(row["remedy"]), row["year"]),
        lambda row: (str(row["remedy"]), "all"),
        lambda row: ("all", row["year"]),
        lambda row: ("all", "all"),
    )
    rows: list[tuple[Scalar, ...]] = []
    for grouping in groupings:
        groups: dict[tuple[str, Scalar], list[dict[str, Scalar]]] = {}
        for row in checked:
            groups.setdefault(grouping(row), []).append(row)
        for remedy, year in sorted(groups, key=lambda key: (key[0], str(key[1]))):
            members = groups[remedy, year]
            rows.append((remedy, year, *_sums(members), members[0]["currency"], len(members), _open(members)))
    return Table.of(SUMS, rows)


def total_cost(*, lines: Table) -> Uncertain:
    """
    Return the expected total and its standard deviation, from low, likely and high of each line.

    mean = (low + likely + high) / 3; variance = (a^2 + b^2 + c^2 - ab - ac - bc) / 18

    Args:
        lines: What costs how much; columns of LINES.

    Returns:
        Expected total with its standard deviation, in the currency of the lines.

    Raises:
        ValueError: If there is no line, an amount is not stated, or the lines are impossible.

    Valid for: lines that are all stated.
    Assumes: that each cost has a triangular distribution and costs move independently; prices that rise
        together spread more.
    Source: moments of the triangular distribution (derived).
    """
    checked = _checked(lines)
    if not checked:
        raise ValueError("there is no cost to add up")
    if _open(checked):
        raise ValueError(f"{_open(checked)} cost(s) have no amount; a total without them would be too low")
    mean = variance = 0.0
    for row in checked:
        low, likely, high = (float(row[column] or 0.0) for column in ("low", "likely", "high"))
        mean += (low + likely + high) / 3
        variance += (low**2 + likely**2 + high**2 - low * likely - low * high - likely * high) / 18
    return Uncertain(mean, math.sqrt(max(0.0, variance)))


def cost_per_patient(*, yearly_cost: float, patients_per_year: float) -> float:
    """
    Return what a year's costs come to per patient.

    Args:
        yearly_cost: Costs of a year, in the department's currency. [1]
        patients_per_year: Patients treated in that year. [per year]

    Returns:
        Cost of one patient, in the same currency. [1]

    Raises:
        ValueError: If nobody is treated.

    Valid for: running costs; what is bought once belongs to no year's patients alone.
    Assumes: nothing.
    Source: definition (derived).
    """
    if patients_per_year <= 0:
        raise ValueError("without patients there is no cost of one")
    return yearly_cost / patients_per_year


def _checked(lines: Table) -> list[dict[str, Scalar]]:
    """Return the lines once they make sense."""
    rows = list(lines.records())
    for row in rows:
        amounts = [row[column] for column in ("low", "likely", "high")]
        stated = [amount for amount in amounts if amount is not None]
        if not stated:
            continue
        if any(isinstance(amount, bool | str) or not math.isfinite(amount) for amount in stated):
            raise ValueError(f"{row['item']}: low, likely and high are numbers")
        if len(stated) < 3:
            raise ValueError(f"{row['item']}: state low, likely and high, or none of them")
        low, likely, high = (float(amount) for amount in stated)
        if not 0 <= low <= likely <= high:
            raise ValueError(f"{row['item']}: low {low:g}, likely {likely:g}, high {high:g} are not in order")
    currencies = sorted({str(row["currency"]) for row in rows})
    if len(currencies) > 1:
        raise ValueError(f"costs in {' and '.join(currencies)} cannot be added; state one currency")
    return rows


def _sums(rows: list[dict[str, Scalar]]) -> tuple[float | None, float | None, float | None]:
    """Return the sums of low, likely and high over the lines that have amounts."""
    if _open(rows) == len(rows):
        return None, None, None
    low, likely, high = (
        math.fsum(float(row[column] or 0.0) for row in rows) for column in ("low", "likely", "high")
    )
    return low, likely, high


def _open(rows: list[dict[str, Scalar]]) -> int:
    """Return how many lines have no amount."""
    return sum(row["likely"] is None for row in rows)
