"""
Costs: the department's own low, likely and high figures, summed by remedy. No figure is ours.

Lines come as a table with the columns of :data:`LINES`. An amount that nobody stated stays open and is
counted; it is never taken for zero.
"""

import math
from dataclasses import dataclass

from readiness.quantities import Scalar, Table, Uncertain

LINES = ("cost", "remedy", "per", "low", "likely", "high")
SUMS = ("remedy", "paid", "low", "likely", "high", "lines", "lines_without_amount")
ONCE, EACH_YEAR = "once", "each year"
ALL = "all remedies"


def cost_sums(*, lines: Table, patients_per_year: float) -> Table:
    """
    Return the costs summed by remedy: what is paid once and what is paid each year of operation.

    each year = per year + per patient * patients a year

    Args:
        lines: What costs how much; columns of LINES. "per" is "once", "year" or "patient".
        patients_per_year: Patients treated in a year. [per year]

    Returns:
        One row per remedy paid once, then per remedy paid each year, then both over all remedies. Each says
        how many of its lines have no amount; a sum of which no line has one is blank.

    Raises:
        ValueError: If low, likely and high are not in order or only partly stated, or "per" is not known.

    Valid for: money of one currency and one price level.
    Assumes: nothing about how costs move together: a sum of lows is the lowest case, not a likely one.
    Source: definition (derived).
    """
    checked = _checked(lines, patients_per_year)
    rows: list[tuple[Scalar, ...]] = []
    for remedies in (sorted({line.remedy for line in checked}), [ALL]):
        for paid in (ONCE, EACH_YEAR):
            for remedy in remedies:
                members = [line for line in checked if line.paid == paid and remedy in (line.remedy, ALL)]
                if members:
                    rows.append((remedy, paid, *_sums(members), len(members), _open(members)))
    return Table.of(SUMS, rows)


def expected_cost(*, lines: Table, patients_per_year: float, paid: str) -> Uncertain:
    """
    Return the expected sum of what is paid once or each year, and its standard deviation.

    mean = (low + likely + high) / 3; variance = (a^2 + b^2 + c^2 - ab - ac - bc) / 18, for each line

    Args:
        lines: What costs how much; columns of LINES.
        patients_per_year: Patients treated in a year. [per year]
        paid: "once" or "each year".

    Returns:
        Expected sum with its standard deviation, in the department's currency.

    Raises:
        ValueError: If no line is paid so, an amount is not stated, or the lines are impossible.

    Valid for: lines that are all stated.
    Assumes: that each cost has a triangular distribution and costs move independently; prices that rise
        together spread more.
    Source: moments of the triangular distribution (derived).
    """
    members = [line for line in _checked(lines, patients_per_year) if line.paid == paid]
    if not members:
        raise ValueError(f"there is no cost that is paid {paid}")
    if _open(members):
        raise ValueError(f"costs without an amount: {_open(members)}; a sum without them would be too low")
    mean = variance = 0.0
    for line in members:
        low, likely, high = line.amounts or (0.0, 0.0, 0.0)
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


@dataclass(frozen=True)
class _Line:
    """One cost, as a sum that is paid once or each year; amounts are None where nobody stated them."""

    remedy: str
    paid: str
    amounts: tuple[float, float, float] | None


def _checked(lines: Table, patients_per_year: float) -> list[_Line]:
    """Return the lines once they make sense."""
    if patients_per_year < 0:
        raise ValueError("patients a year cannot be negative")
    times = {"once": (ONCE, 1.0), "year": (EACH_YEAR, 1.0), "patient": (EACH_YEAR, patients_per_year)}
    checked = []
    for row in lines.records():
        if row["per"] not in times:
            raise ValueError(f"{row['cost']}: per {row['per']!r} is not one of {', '.join(times)}")
        paid, factor = times[str(row["per"])]
        amounts = _amounts(row)
        scaled = None if amounts is None else (amounts[0] * factor, amounts[1] * factor, amounts[2] * factor)
        checked.append(_Line(str(row["remedy"]), paid, scaled))
    return checked


def _amounts(row: dict[str, Scalar]) -> tuple[float, float, float] | None:
    """Return low, likely and high of a line, None if none of them is stated."""
    stated: list[float] = []
    for column in ("low", "likely", "high"):
        amount = row[column]
        if isinstance(amount, bool | str) or (amount is not None and not math.isfinite(amount)):
            raise ValueError(f"{row['cost']}: low, likely and high are numbers")
        if amount is not None:
            stated.append(float(amount))
    if not stated:
        return None
    if len(stated) < 3:
        raise ValueError(f"{row['cost']}: state low, likely and high, or none of them")
    low, likely, high = stated
    if not 0 <= low <= likely <= high:
        raise ValueError(f"{row['cost']}: low {low:g}, likely {likely:g}, high {high:g} are not in order")
    return low, likely, high


def _sums(lines: list[_Line]) -> tuple[float | None, float | None, float | None]:
    """Return the sums of low, likely and high over the lines that have amounts."""
    stated = [line.amounts for line in lines if line.amounts is not None]
    if not stated:
        return None, None, None
    low, likely, high = (math.fsum(column) for column in zip(*stated, strict=True))
    return low, likely, high


def _open(lines: list[_Line]) -> int:
    """Return how many lines have no amount."""
    return sum(line.amounts is None for line in lines)
