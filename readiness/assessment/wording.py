"""How a value reads inside a sentence."""

from datetime import date
from typing import Any

from readiness.quantities import Table
from readiness.units import printed


def in_words(value: Any) -> str:
    """Return a value as it stands in a sentence, without its unit."""
    if value is None:
        return "nothing"
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, (int, float)):
        return printed(value)
    if isinstance(value, date):
        return value.isoformat()
    if isinstance(value, tuple):
        return ", ".join(in_words(each) for each in value) or "none"
    if isinstance(value, Table):
        return f"a table of {len(value.rows)} rows"
    return str(value)
