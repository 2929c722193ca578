"""The failure modes that ship with the program: read once, checked, never scored by us."""

from dataclasses import dataclass
from functools import cache
from typing import Any

import yaml

from readiness.errors import CatalogueError
from readiness.resources import schema_file

TEXTS = ("id", "step", "failure", "cause", "effect")
LISTS = ("controls", "documents", "rules")


@dataclass(frozen=True)
class FailureMode:
    """One way in which the process can fail, with what stands against it and where that is written."""

    id: str
    step: str
    failure: str
    cause: str
    effect: str
    controls: tuple[str, ...]
    documents: tuple[str, ...]
    rules: tuple[str, ...] = ()


@cache
def shipped_failure_modes() -> tuple[FailureMode, ...]:
    """
    Return the failure modes of schemas/failure_modes.yaml, in the order of the process.

    Returns:
        The modes; their scores are the department's and not here.

    Raises:
        CatalogueError: If an entry is incomplete or two share an id.

    Valid for: a course from referral to its end.
    Assumes: nothing.
    Source: tg-100 (read) for the method; the modes are our own (practice).
    """
    content = yaml.safe_load(schema_file("failure_modes.yaml").read_text(encoding="utf-8"))
    modes = tuple(_mode(entry) for entry in content["modes"])
    ids = [mode.id for mode in modes]
    twice = sorted({name for name in ids if ids.count(name) > 1})
    if twice:
        raise CatalogueError(f"failure mode {twice[0]!r} stands twice in failure_modes.yaml")
    return modes


@cache
def score_scale() -> tuple[tuple[str, int, str], ...]:
    """
    Return the anchors of the three scales: which score, its number, and what that number means.

    Returns:
        Rows of score name, number from 1 to 10 and words, in the order of the file.

    Raises:
        CatalogueError: If a number lies outside 1 to 10.

    Valid for: the department's team; the numbers between two anchors lie between them.
    Assumes: nothing.
    Source: practice (the anchors are our own).
    """
    content = yaml.safe_load(schema_file("failure_modes.yaml").read_text(encoding="utf-8"))
    scales = content["scale"].items()
    rows = tuple((name, number, words) for name, anchors in scales for number, words in anchors.items())
    if any(not 1 <= number <= 10 for _, number, _ in rows):
        raise CatalogueError("a scale in failure_modes.yaml leaves 1 to 10")
    return rows


def _mode(entry: dict[str, Any]) -> FailureMode:
    """Return one entry as a record, or say what it lacks."""
    name = entry.get("id", "without id")
    if set(entry) != {*TEXTS, *LISTS}:
        odd = sorted(set(entry) ^ {*TEXTS, *LISTS})
        raise CatalogueError(f"failure mode {name!r}: missing or unknown key {odd[0]!r}")
    if not all(isinstance(entry[key], str) and entry[key].strip() for key in TEXTS):
        raise CatalogueError(f"failure mode {name!r}: {', '.join(TEXTS)} are words")
    if not all(isinstance(part, str) for key in LISTS for part in entry[key]):
        raise CatalogueError(f"failure mode {name!r}: {', '.join(LISTS)} are lists of words")
    parts: dict[str, Any] = {key: entry[key] for key in TEXTS}
    parts.update({key: tuple(entry[key]) for key in LISTS})
    return FailureMode(**parts)
