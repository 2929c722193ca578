"""What each measurement file gives, why it does not count, and what must be said about its readings."""

from collections.abc import Iterable
from datetime import date

from readiness.assessment.graph import Graph
from readiness.assessment.matching import disagreements, void
from readiness.assessment.records import MeasurementUse, Ref, Value
from readiness.program.items import Item
from readiness.program.measurement_kinds import measurement_kind

REMARKS = "remarks"


def measurement_uses(
    graph: Graph, arrangement: Ref | None, values: Iterable[Value]
) -> tuple[MeasurementUse, ...]:
    """
    Return one line for each measurement file, in the order of the folder.

    Args:
        graph: Finds the files and compares them with the choices.
        arrangement: The one that documents are for; None where there is none.
        values: All values of concern; the measured ones name the file that they come from.
    """
    through: dict[Ref, list[Value]] = {}
    for value in values:
        for source in dict.fromkeys(each.item for each in value.inputs if each.item.kind == "measurement"):
            through.setdefault(source, []).append(value)
    return tuple(
        _use(item, _why_not(item, arrangement, graph), through.get(ref, []), graph)
        for ref in graph.refs("measurement")
        if (item := graph.item(ref)) is not None
    )


def _use(item: Item, why_not: tuple[str, ...], through: list[Value], graph: Graph) -> MeasurementUse:
    ref = Ref("measurement", item.id)
    done = item.get("date")
    said = graph.get("measurement.remarks", ref)
    remarks = [*said.value] if isinstance(said, Value) else []
    for value in through:
        if value.name.endswith(REMARKS) and value.item != ref:
            remarks += [value.value] if isinstance(value.value, str) else [*value.value]
    measured = (value.name for value in through if value.basis == "measured")
    gives = dict.fromkeys(
        name for name in measured if not name.startswith("measurement.") and not name.endswith(REMARKS)
    )
    return MeasurementUse(
        item=ref,
        file=item.place.file,
        kind=measurement_kind(str(item.get("kind"))).title,
        done_on=done if isinstance(done, date) else None,
        gives=tuple(gives),
        why_not=() if gives else why_not,
        remarks=tuple(dict.fromkeys(str(each) for each in remarks)),
    )


def _why_not(item: Item, arrangement: Ref | None, graph: Graph) -> tuple[str, ...]:
    """Return every reason for which a file does not count for the arrangement or what belongs to it."""
    found = [reason for reason in (void(item, graph.program, graph.as_of),) if reason]
    if arrangement is not None:
        owners = graph.owners(arrangement)
        kind = measurement_kind(str(item.get("kind"))).attaches_to
        concerned = Ref(kind, owners.get(kind, kind))
        found += disagreements(item, owners, concerned, graph.get, ())
    return tuple(found)
