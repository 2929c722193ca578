"""Numbers become values with six significant digits, once; printed inputs then give printed results."""

from typing import Any

from readiness.quantities import Table
from readiness.units import rounded

_AS_THEY_ARE = frozenset((str, int, bool, type(None)))


def settled(value: Any) -> Any:
    """Return a result with every floating number in it rounded."""
    kind = type(value)
    if kind is float:
        return rounded(value)
    if kind in _AS_THEY_ARE:
        return value
    if hasattr(value, "item") and not isinstance(value, (str, bytes)):
        value = value.item()  # a NumPy scalar
    if isinstance(value, float):
        return rounded(value)
    if isinstance(value, tuple):
        return tuple(settled(each) for each in value)
    if isinstance(value, Table):
        return Table(value.columns, tuple(tuple(settled(each) for each in row) for row in value.rows))
    return value
