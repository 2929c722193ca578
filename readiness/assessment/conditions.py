"""
The closed list of conditions that rules may use, each with what it needs and how it reads.

A condition answers yes or no; what is unknown never reaches it.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from datetime import date
from typing import Any

_TOLERANCE = 1e-9  # of the limit: a barrier exactly at its goal meets it


@dataclass(frozen=True)
class Condition:
    """One way to judge; ``needs`` is number, date, scalar, words or nothing; ``stricter`` lower or higher."""

    name: str
    words: str
    needs: str
    holds: Callable[[Any, Any], bool]
    stricter: str = ""


def _slack(limit: float) -> float:
    return _TOLERANCE * max(1.0, abs(limit))


def _words(value: Any) -> set[str]:
    return {value} if isinstance(value, str) else set(value)


def _one_of(value: Any, limit: Any) -> bool:
    return value in (limit if isinstance(limit, (tuple, list)) else (limit,))


CONDITIONS: Mapping[str, Condition] = {
    each.name: each
    for each in (
        Condition("at_least", "at least", "number", lambda v, limit: v >= limit - _slack(limit), "higher"),
        Condition("at_most", "at most", "number", lambda v, limit: v <= limit + _slack(limit), "lower"),
        Condition("above", "above", "number", lambda v, limit: v > limit, "higher"),
        Condition("below", "below", "number", lambda v, limit: v < limit, "lower"),
        Condition("equals", "equal to", "scalar", lambda v, limit: bool(v == limit)),
        Condition("one_of", "one of", "words", _one_of),
        Condition("is_yes", "yes", "", lambda v, _: v is True),
        Condition("is_no", "no", "", lambda v, _: v is False),
        Condition("present", "stated", "", lambda v, _: v is not None),
        Condition("contains", "with", "words", lambda v, limit: _words(limit) <= _words(v)),
        Condition("on_or_after", "on or after", "date", lambda v, limit: v >= limit, "higher"),
        Condition("on_or_before", "on or before", "date", lambda v, limit: v <= limit, "lower"),
    )
}


def fits(condition: Condition, limit: Any) -> bool:
    """Return whether a literal limit is of the kind that the condition needs."""
    if condition.needs == "number":
        return isinstance(limit, (int, float)) and not isinstance(limit, bool)
    if condition.needs == "date":
        return isinstance(limit, date)
    if condition.needs == "words":
        return isinstance(limit, (str, tuple, list)) and len(limit) > 0
    if condition.needs == "scalar":
        return limit is not None
    return limit is None


def comparable(condition: Condition, value: Any, limit: Any) -> bool:
    """Return whether a value and a limit are of the kind that the condition compares."""
    if condition.needs == "number":
        return all(isinstance(each, (int, float)) and not isinstance(each, bool) for each in (value, limit))
    if condition.needs == "date":
        return isinstance(value, date) and isinstance(limit, date)
    if condition.name == "contains":
        return isinstance(value, (str, tuple))
    return True
