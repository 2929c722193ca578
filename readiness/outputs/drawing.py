"""What all drawings to scale share: templates, numbers from the assessment, coordinates as text."""

from collections.abc import Iterable, Mapping
from functools import cache
from typing import Any

from jinja2 import Environment, FileSystemLoader, StrictUndefined

from readiness.assessment.records import Value
from readiness.outputs.lookup import Lookup
from readiness.outputs.words import with_unit
from readiness.resources import folder


@cache
def _environment() -> Environment:
    return Environment(
        loader=FileSystemLoader(folder("templates") / "pictures"), undefined=StrictUndefined, autoescape=True,
        trim_blocks=True, finalize=_short,
    )  # fmt: skip


def _short(entry: Any) -> Any:
    return f"{entry:.1f}".rstrip("0").rstrip(".") if isinstance(entry, float) else entry


def drawn(name: str, entries: Mapping[str, Any]) -> str:
    """Return a drawing as SVG from its template."""
    return _environment().get_template(f"{name}.svg.j2").render(**entries)


def numbers(lookup: Lookup, names: Mapping[str, str]) -> dict[str, float] | None:
    """Return the values by key, or None if one of them is missing."""
    found: dict[str, float] = {}
    for key, name in names.items():
        got = lookup.get(name)
        if not isinstance(got, Value) or not isinstance(got.value, (int, float)):
            return None
        found[key] = float(got.value)
    return found


def said(lookup: Lookup, name: str) -> str:
    """Return a value with its unit, or that it is not stated."""
    got = lookup.get(name)
    return with_unit(name, got.value) if isinstance(got, Value) else "not stated"


def points(pairs: Iterable[tuple[float, float]]) -> str:
    """Return coordinates as SVG writes them."""
    return " ".join(f"{x:.1f},{y:.1f}" for x, y in pairs)
