"""Published tables, as they stand under schemas/tables, and the one way to look between their rows."""

from bisect import bisect_right
from collections.abc import Sequence
from functools import cache

import yaml

from readiness.errors import OutsideValidity
from readiness.quantities import Table
from readiness.resources import schema_file


@cache
def published_table(name: str) -> Table:
    """
    Return the rows of one published table, read once.

    Args:
        name: Of its file under schemas/tables, without the ending.

    Returns:
        The rows under their columns.

    Source: each file names its own.
    """
    text = schema_file("tables", f"{name}.yaml").read_text(encoding="utf-8")
    stored = yaml.safe_load(text)
    return Table.of(stored["columns"], stored["rows"])


def interpolated(*, at: float, known_at: Sequence[float], values: Sequence[float], words: str) -> float:
    """
    Return a value between the rows of a table, on the straight line between its two neighbours.

    Args:
        at: Where the value is wanted.
        known_at: Where the table has rows, rising.
        values: What the table gives there.
        words: What ``at`` is, with its unit, for the message.

    Returns:
        The value, exact on a row.

    Raises:
        OutsideValidity: If the place lies before the first or behind the last row.

    Source: derived.
    """
    if not known_at[0] <= at <= known_at[-1]:
        raise OutsideValidity(f"the table holds {words} from {known_at[0]:g} to {known_at[-1]:g}, not {at:g}")
    upper = min(bisect_right(known_at, at), len(known_at) - 1)
    low, high = known_at[upper - 1], known_at[upper]
    share = (at - low) / (high - low)
    return values[upper - 1] * (1.0 - share) + values[upper] * share
