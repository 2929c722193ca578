"""
Every value that can be asked for, proved when loaded.

The proof: names exist, each calculation is given exactly the keywords it takes, unit endings agree,
every item asked can be reached from the item that asks, and nothing is circular.
"""

import inspect
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass
from functools import cache
from typing import Any

from readiness.assessment.criteria import Criterion, criteria
from readiness.assessment.definition import Definition, Take, parse_take
from readiness.assessment.kinds import Kinds, kinds
from readiness.errors import CatalogueError
from readiness.program.measurement_kinds import measurement_kind, measurement_kinds
from readiness.sources import unknown_in
from readiness.units import unit_ending, words_of


@dataclass(frozen=True, eq=False)
class Catalogue:
    """Definitions, fields and criteria under one roof."""

    kinds: Kinds
    definitions: Mapping[str, Definition]
    criteria: Mapping[str, Criterion]
    takes: Mapping[str, tuple[tuple[str, Take], ...]]
    measured_takes: Mapping[str, tuple[tuple[str, Take], ...]]

    def has(self, name: str) -> bool:
        """Return whether a value of this name can be asked for."""
        return (
            name in self.definitions
            or name in self.criteria
            or self.kinds.field(name) is not None
            or self.kinds.is_given(name)
            or (name.startswith("measurement.") and name.partition(".")[2] in measurement_fields())
        )

    def names(self) -> tuple[str, ...]:
        """Return every name that can be asked for, for near-miss hints."""
        shown = [name for name, definition in self.definitions.items() if not definition.internal]
        return tuple(dict.fromkeys([*shown, *self.kinds.described.fields, *self.criteria]))

    def meaning(self, name: str) -> str:
        """Return what a value means, in one sentence."""
        if name in self.definitions:
            return self.definitions[name].meaning
        if name in self.criteria:
            return self.criteria[name].meaning
        field = self.kinds.field(name)
        return field.meaning if field else words_of(name).capitalize() + "."

    def is_choice(self, name: str) -> bool:
        """Return whether the department sets this value, or what it follows from: it weakens no basis."""
        if name in self.criteria or self.kinds.is_given(name):
            return True
        field = self.kinds.field(name)
        if field is not None:
            return field.nature in {"choice", "record"}
        definition = self.definitions.get(name)
        if definition is None:
            return False
        return definition.part == "choice" or self._follows_from_choices(definition)

    def _follows_from_choices(self, definition: Definition) -> bool:
        """Return whether a value is worked out from nothing but choices, as the dose of a course is."""
        plain = not (definition.model or definition.measured or definition.otherwise)
        names = [name for _, take in self.takes.get(definition.name, ()) for name in take.names]
        return bool(plain and definition.by and names) and all(map(self.is_choice, names))


@cache
def measurement_fields() -> frozenset[str]:
    """Return the header keys of all kinds of measurement."""
    return frozenset(name for kind in measurement_kinds() for name in measurement_kind(kind).header)


@cache
def catalogue() -> Catalogue:
    """Return the values that ship with the tool, proved."""
    from readiness.assessment.values import ALL

    return build(ALL, kinds(), criteria())


def build(entries: tuple[Definition, ...], known: Kinds, limits: Mapping[str, Criterion]) -> Catalogue:
    """Return a catalogue of these definitions; raise CatalogueError at what does not fit."""
    definitions: dict[str, Definition] = {}
    for entry in entries:
        if entry.name in definitions:
            raise CatalogueError(f"value {entry.name} is defined twice")
        if entry.kind not in known.all:
            raise CatalogueError(f"value {entry.name} belongs to a kind that does not exist")
        definitions[entry.name] = entry
    takes = {name: _parsed(definition.takes) for name, definition in definitions.items()}
    measured = {
        name: _parsed(definition.measured.takes)
        for name, definition in definitions.items()
        if definition.measured
    }
    found = Catalogue(known, definitions, limits, takes, measured)
    _prove_sources(found)
    for definition in definitions.values():
        _prove(definition, found)
    _prove_no_circle(found)
    return found


def _parsed(takes: Mapping[str, str]) -> tuple[tuple[str, Take], ...]:
    return tuple((keyword, parse_take(text)) for keyword, text in takes.items())


def _prove_sources(known: Catalogue) -> None:
    for criterion in known.criteria.values():
        if wrong := unknown_in(criterion.source, criterion.known):
            raise CatalogueError(f"{criterion.name}: its source names what does not exist: {wrong}")
    for name, field in known.kinds.described.fields.items():
        assumed = field.assumed
        if assumed is not None and (wrong := unknown_in(assumed.source, assumed.known)):
            raise CatalogueError(f"field {name}: its source names what does not exist: {wrong}")


def _prove(definition: Definition, known: Catalogue) -> None:
    name = definition.name
    if not definition.meaning.endswith("."):
        raise CatalogueError(f"value {name}: its meaning is not a sentence")
    if wrong := unknown_in(definition.source, definition.known):
        raise CatalogueError(f"value {name}: its source names what does not exist: {wrong}")
    if definition.of and definition.of not in known.definitions:
        raise CatalogueError(f"value {name} takes a part of {definition.of}, which is not defined")
    if definition.otherwise:
        take = Take("one", definition.otherwise, optional=False)
        _prove_take(name, definition.kind, name, take, known, ())
    for stands_for in definition.by_technique.values():
        _prove_take(name, definition.kind, name, Take("one", stands_for, optional=False), known, ())
    found_by = (definition.by, definition.of, definition.measured, definition.otherwise)
    if not (any(found_by) or definition.by_technique):
        raise CatalogueError(f"value {name} says nothing of how it is found")
    if definition.by:
        _prove_takes(name, definition.kind, definition.by, known.takes[name], known, ())
    if definition.measured and definition.measured.by:
        also = ("measurement",)
        _prove_takes(name, definition.kind, definition.measured.by, known.measured_takes[name], known, also)


def _prove_takes(
    name: str,
    kind: str,
    by: Callable[..., Any],
    takes: tuple[tuple[str, Take], ...],
    known: Catalogue,
    also: tuple[str, ...],
) -> None:
    parameters = inspect.signature(by).parameters
    given = {keyword for keyword, _ in takes}
    needed = {key for key, each in parameters.items() if each.default is inspect.Parameter.empty}
    if not given <= parameters.keys() or not needed <= given:
        wrong = sorted(given - parameters.keys()) + sorted(needed - given)
        raise CatalogueError(f"value {name}: keywords that do not fit its calculation: {', '.join(wrong)}")
    for keyword, take in takes:
        _prove_take(name, kind, keyword, take, known, also)


def _prove_take(
    name: str, kind: str, keyword: str, take: Take, known: Catalogue, also: tuple[str, ...]
) -> None:
    if take.form == "rows":
        for column, _ in take.columns:
            if not known.has(f"{take.name}.{column}"):
                raise CatalogueError(f"value {name} takes {take.name}.{column}, which does not exist")
    elif not known.has(take.name):
        raise CatalogueError(f"value {name} takes {take.name}, which does not exist")
    if take.form == "one" and take.kind not in known.kinds.reachable(kind) and take.kind not in also:
        raise CatalogueError(f"value {name} takes {take.name}, but a {kind} does not belong to a {take.kind}")
    if take.form != "one" and known.kinds.anchor(kind, take.kind) is None:
        raise CatalogueError(f"value {name} takes every {take.kind}, which cannot be reached from a {kind}")
    if take.form == "one" and unit_ending(keyword) != unit_ending(take.name):
        raise CatalogueError(f"value {name}: {keyword} and {take.name} do not end with the same unit")


def _needs(name: str, known: Catalogue) -> Iterator[str]:
    definition = known.definitions.get(name)
    if definition is None:
        return
    yield from (each for each in (definition.of, definition.otherwise) if each)
    yield from definition.by_technique.values()
    for _, take in (*known.takes.get(name, ()), *known.measured_takes.get(name, ())):
        if take.form == "rows":
            yield from (f"{take.name}.{column}" for column, _ in take.columns)
        elif take.name != name:
            yield take.name


def _prove_no_circle(known: Catalogue) -> None:
    done: set[str] = set()
    for start in known.definitions:
        path: list[str] = []
        stack: list[tuple[str, Iterator[str]]] = [(start, _needs(start, known))]
        if start in done:
            continue
        path.append(start)
        while stack:
            name, needs = stack[-1]
            following = next(needs, None)
            if following is None:
                stack.pop()
                path.pop()
                done.add(name)
            elif following in path:
                circle = " <- ".join([*path[path.index(following) :], following])
                raise CatalogueError(f"values wait for each other: {circle}")
            elif following not in done:
                path.append(following)
                stack.append((following, _needs(following, known)))
