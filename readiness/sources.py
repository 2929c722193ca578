"""The publications that numbers and rules point to, and the words for how we know a number."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache

import yaml

from readiness.resources import schema_file

HOW_KNOWN: Mapping[str, str] = {
    "read": "the number was seen in the named publication",
    "memory": "recalled from the named publication; confirm it there before relying on it",
    "practice": "common practice, without a publication",
    "derived": "worked out by us from the named sources",
    "fit": "our own fit to our own Monte Carlo runs",
    "mc": "our own Monte Carlo runs",
    "local": "regulation or decision cited by the department",
}


@dataclass(frozen=True)
class Publication:
    """One entry of schemas/sources.yaml."""

    key: str
    citation: str
    url: str = ""


@cache
def publications() -> Mapping[str, Publication]:
    """Return every publication by its key."""
    with schema_file("sources.yaml").open("rb") as stream:
        entries = yaml.load(stream, Loader=getattr(yaml, "CSafeLoader", yaml.SafeLoader)) or {}
    return {key: Publication(key, entry["citation"], entry.get("url", "")) for key, entry in entries.items()}


def exists(key: str) -> bool:
    """Return whether a source key is known."""
    return key in publications()


def keys_in(source: str) -> tuple[str, ...]:
    """Return the keys of a source that may name several, set off by commas."""
    return tuple(key for key in source.split(", ") if key)


def unknown_in(source: str, known: str) -> str:
    """Return what a source names that does not exist, key or word of how it is known, else nothing."""
    wrong = [key for key in keys_in(source) if not exists(key)]
    if known not in HOW_KNOWN and (source or known):
        wrong.append(known or "how it is known")
    return ", ".join(wrong)
