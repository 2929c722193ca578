"""Limits that calculations use as well as rules: named, sourced, and replaced by stricter local limits."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache

import yaml

from readiness.errors import CatalogueError
from readiness.resources import schema_file
from readiness.units import unit_ending

_Loader = getattr(yaml, "CSafeLoader", yaml.SafeLoader)


@dataclass(frozen=True)
class Criterion:
    """
    One limit.

    Attributes:
        name: ``criterion.`` and a name that ends with the unit.
        stricter: "lower" or "higher": which of two limits is the stricter one; "" for a convention
            (a length over which uniformity is judged) that is not a matter of strictness.
    """

    name: str
    meaning: str
    value: float | str
    stricter: str
    source: str
    at: str
    known: str


@cache
def criteria() -> Mapping[str, Criterion]:
    """Return every criterion that ships with the tool, by its name."""
    with schema_file("criteria.yaml").open("rb") as stream:
        entries = yaml.load(stream, Loader=_Loader)["criteria"]  # noqa: S506 - a safe loader either way
    found: dict[str, Criterion] = {}
    for entry in entries:
        criterion = Criterion(**{"stricter": "", **entry, "name": f"criterion.{entry['name']}"})
        if criterion.name in found:
            raise CatalogueError(f"{criterion.name} stands twice in criteria.yaml")
        if criterion.known not in {"read", "memory", "practice", "derived"}:
            raise CatalogueError(f"{criterion.name} does not say how it is known")
        if isinstance(criterion.value, (int, float)) and not (
            unit_ending(criterion.name) or criterion.name.endswith("_ratio")
        ):
            raise CatalogueError(f"{criterion.name} is a number without a unit ending")
        found[criterion.name] = criterion
    return found
