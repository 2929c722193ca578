"""
Delete each field and each list of a described program in turn.

Nothing turns to met because something is missing, and whatever is lost names what was deleted or what hangs on it.
"""

import functools
import inspect
from collections.abc import Callable, Iterator
from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import Any

import pytest

from readiness.assessment.assessment import _LATE
from readiness.assessment.candidates import arrangements, exposures, measurements
from readiness.assessment.catalogue import Catalogue, catalogue
from readiness.assessment.documents import document_items
from readiness.assessment.graph import Graph
from readiness.assessment.judge import judge
from readiness.assessment.local_rules import with_local
from readiness.assessment.records import Finding, Ref
from readiness.assessment.ruleset import load_rules
from readiness.program.items import Item, Program
from readiness.program.reading import read_folder

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"
SCOPE_OF_A_PLAN = {"room", "machine", "beam", "side_deg", "technique", "degrader", "stand", "couch"}
LEFT_OUT = {"vault-b", "linac-2", "linac-1/e6", "linac-1/e9", "sheet-10"}  # the rest is one room and one beam


def remembered(function: Callable[..., Any]) -> Callable[..., Any]:
    """Return a calculation that answers the same question only once."""
    kept = functools.cache(function)

    @functools.wraps(function)
    def answer(**given: Any) -> Any:
        try:
            return kept(**given)
        except TypeError:
            return function(**given)

    answer.__signature__ = inspect.signature(function)  # type: ignore[attr-defined]
    return answer


@pytest.fixture(scope="module")
def quick() -> Catalogue:
    """Return the catalogue with calculations that remember their answers."""
    known = catalogue()
    quick_ones = {name: replace(each, by=remembered(each.by)) if each.by else each for name, each in known.definitions.items()}
    return Catalogue(known.kinds, quick_ones, known.criteria, known.takes, known.measured_takes)


@pytest.fixture(scope="module")
def described() -> Program:
    """Return the sample with one room, machine, beam and degrader."""
    whole = read_folder(SAMPLE)
    kept = tuple(item for item in whole.items if not _left_out(item))
    return replace(whole, items=kept)


def _left_out(item: Item) -> bool:
    return item.id in LEFT_OUT or any(owner in LEFT_OUT for owner in item.owners.values()) or any(
        item.id.startswith(f"{each}/") for each in LEFT_OUT if "/" not in each
    )


def outcomes(of: Program, known: Catalogue) -> dict[tuple[str, Ref], Finding]:
    """Return every finding that does not wait for documents."""
    local = with_local(load_rules(catalogue()), of, known)
    made = arrangements(of)
    graph = Graph(of, (*made, *exposures(of, made), *measurements(of), *document_items()), known, date(2026, 12, 1), local.limits)
    found = judge([rule for rule in local.rules if rule.kind not in _LATE], graph)
    return {(each.rule, each.item): each for each in found}


def without_a_field(of: Program) -> Iterator[tuple[str, Program]]:
    """Yield the program without each of its fields in turn."""
    for index, each in enumerate(of.items):
        for name in each.fields:
            if name in {"format", "kind", "table"} or each.kind in {"local_limit", "exception", "task"}:
                continue
            if each.kind == "plan" and name in SCOPE_OF_A_PLAN:
                continue  # a part left out of a plan stands for all of them: that is a wider statement, not silence
            left = {key: value for key, value in each.fields.items() if key != name}
            owners = {kind: owner for kind, owner in each.owners.items() if kind != name}
            changed = replace(each, fields=left, owners=owners)
            yield f"{each.kind}.{name} of {each.id}", replace(of, items=(*of.items[:index], changed, *of.items[index + 1 :]))


def without_a_list(of: Program) -> Iterator[tuple[str, Program]]:
    """Yield the program without each of its lists in turn, so that it is unknown."""
    for kind, owner in sorted(of.known_lists):
        if owner in LEFT_OUT or kind in {"local_limit", "exception"}:
            continue
        left = tuple(item for item in of.items if item.kind != kind or owner not in {*item.owners.values(), "program"})
        yield f"list of {kind} of {owner}", replace(of, items=left, known_lists=of.known_lists - {(kind, owner)})


def test_nothing_is_met_because_something_is_missing(described: Program, quick: Catalogue) -> None:
    """No deletion turns a finding that was not met, or not known, into met; what is lost has a cause."""
    before = outcomes(described, quick)
    wrong = []
    for what, less in (*without_a_field(described), *without_a_list(described)):
        for key, finding in outcomes(less, quick).items():
            was = before.get(key)
            if finding.outcome == "met" and was is not None and was.outcome in {"not met", "not assessed"}:
                wrong.append(f"{what}: {key[0]} for {key[1]} was {was.outcome} and is met")
            if finding.outcome == "not assessed" and not finding.causes:
                wrong.append(f"{what}: {key[0]} for {key[1]} is not assessed without a cause")
    assert wrong == []
