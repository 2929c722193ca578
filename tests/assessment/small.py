"""Small programs made of items, for tests that need no folder."""

from datetime import date
from typing import Any

from readiness.assessment.assessment import assess
from readiness.assessment.catalogue import Catalogue, build
from readiness.assessment.criteria import criteria
from readiness.assessment.definition import Definition
from readiness.assessment.graph import Graph
from readiness.assessment.kinds import kinds
from readiness.assessment.records import Assessment, Rule, RuleSource
from readiness.errors import Place
from readiness.program.items import Item, Program, Stated

DAY = date(2026, 12, 1)


def item(
    kind: str, item_id: str | None = None, owners: dict[str, str] | None = None, /, **fields: Any
) -> Item:  # fmt: skip
    """Return an item with these fields; everything belongs to the program."""
    place = Place(f"{kind}.yaml", 1, 1)
    stated = {name: Stated(value, place) for name, value in fields.items()}
    own = {} if kind == "program" else {**(owners or {}), "program": "program"}
    return Item(kind, item_id or kind, stated, own, place)


def program(*items: Item, lists: tuple[str, ...] = (), **fields: Any) -> Program:
    """Return a program of these items; ``lists`` are the top lists that are complete."""
    kinds_given = {each.kind for each in items}
    known = {(kind, "program") for kind in (*lists, *kinds_given)}
    return Program((item("program", **fields), *items), frozenset(known), ())


def graph(of: Program, *definitions: Definition, made: tuple[Item, ...] = ()) -> Graph:
    """Return the graph of a program with these definitions only."""
    return Graph(of, made, small_catalogue(*definitions), DAY, {})


def small_catalogue(*definitions: Definition) -> Catalogue:
    """Return a catalogue with these definitions only."""
    return build(definitions, kinds(), criteria())


def rule(**changes: Any) -> Rule:
    """Return a rule on the ceiling of a room, changed as asked."""
    entries: dict[str, Any] = {
        "id": "ceiling", "title": "High ceiling", "strength": "must",
        "sources": (RuleSource("practice", "", "practice"),), "applies_when": (),
        "subject": "room.ceiling_height_cm", "condition": "at_least", "limit": 260, "basis": "any",
        "physical": False, "exceptable": True, "message": "The ceiling is at {observed} cm; {limit} cm is asked.",
        "remedy": "Choose another room.", "owner": "medical physicist", "task": "choose-room", "phase": "decide",
        "evidence": (), "documents": (), "topic": "Room",
    }  # fmt: skip
    return Rule(**{**entries, **changes})


def assessed(of: Program, as_of: date = DAY) -> Assessment:
    """Return the assessment of a program."""
    return assess(of, as_of)
