"""Why a value does not do: what would have to be measured, and what is only assumed."""

from readiness.assessment.definition import Definition
from readiness.assessment.graph import Graph
from readiness.assessment.records import Cause, Got, Ref, Value
from readiness.units import words_of


def why_not_measured(graph: Graph, name: str, ref: Ref) -> tuple[Cause, ...]:
    """Return what is missing for a value to be measured, itself or what it is worked out from."""
    causes: set[Cause] = set()
    seen: set[tuple[str, Ref]] = set()
    waiting = [(name, ref)]
    while waiting:
        each = waiting.pop()
        if each in seen or graph.catalogue.is_choice(each[0]):
            continue
        seen.add(each)
        definition = graph.catalogue.definitions.get(each[0])
        got = graph.get(*each)
        if definition is None or (isinstance(got, Value) and got.basis == "measured"):
            continue
        if definition.measured is not None:
            owner = _owner_of(graph, *each)
            _, near = graph.measurements(definition.measured, owner)
            causes.update(graph.wanted(definition.measured, owner, near))
        else:
            waiting += _rests_on(graph, definition, got, each[1])
    owner = _owner_of(graph, name, ref)
    words = f"Measure {words_of(name)} of {owner}."
    return tuple(sorted(causes)) or (Cause("measurement", name, owner, words),)


def assumed_roots(graph: Graph, name: str, ref: Ref) -> tuple[Cause, ...]:
    """Return the defaults that a value rests on, as things to state."""
    return tuple(sorted(_assumed(graph, name, ref)))


def _assumed(graph: Graph, name: str, ref: Ref) -> frozenset[Cause]:
    """Return the causes below a value; each value is walked once, since many rest on the same defaults."""
    known = graph.assumed_below.get((name, ref))
    if known is not None:
        return known
    value = graph.get(name, ref)
    found: set[Cause] = set()
    if isinstance(value, Value) and value.basis == "assumed":
        if not value.inputs:
            unit = f" {value.unit}" if value.unit else ""
            words = f"State {words_of(value.name)} of {value.item}; {value.value}{unit} is only assumed."
            found.add(Cause("assumed", value.name, value.item, words))
        for one in value.inputs:
            if one.name.partition(".")[0] != "criterion":
                found |= _assumed(graph, one.name, one.item)
    graph.assumed_below[(name, ref)] = frozenset(found)
    return graph.assumed_below[(name, ref)]


def _owner_of(graph: Graph, name: str, ref: Ref) -> Ref:
    kind = name.partition(".")[0]
    return Ref(kind, graph.owners(ref).get(kind, ref.id))


def _rests_on(graph: Graph, definition: Definition, got: Got, ref: Ref) -> list[tuple[str, Ref]]:
    """Return what a value is worked out from; where a prediction stands in, what it stands in for."""
    if definition.by_technique:
        technique = graph.get("arrangement.technique", ref)
        return [
            (name, ref)
            for word, name in definition.by_technique.items()
            if isinstance(technique, Value) and word == technique.value
        ]
    if isinstance(got, Value) and [each.keyword for each in got.inputs] != ["otherwise"]:
        return [] if definition.model else [(each.name, each.item) for each in got.inputs]
    return [(take.name, ref) for _, take in graph.catalogue.takes[definition.name] if take.form == "one"]
