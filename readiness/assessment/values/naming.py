"""Lists of names in one word or sentence, so that a rule can ask for none and its message names them."""

from collections.abc import Iterable

NONE = "none"


def named(names: Iterable[str]) -> str:
    """Return names one after the other, none if there is none."""
    return ", ".join(dict.fromkeys(names)) or NONE
