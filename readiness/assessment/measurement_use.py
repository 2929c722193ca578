"""What each measurement file gives, why it does not count, and what must be said about its readings."""

from collections.abc import Iterable
from dataclasses import replace
from datetime import date

from readiness.assessment.graph import Graph
from readiness.assessment.matching import disagreements, void
from readiness.assessment.records import Gone, MeasurementUse, Ref, Value
from readiness.assessment.values.beam_profiles import NO_LINE
from readiness.program.items import Item
from readiness.program.measurement_kinds import measurement_kind

REMARKS = "remarks"
REFUSED = ("validity", "contradiction")  # kinds of the causes that an analysis itself gives


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
    uses = [
        _use(item, _why_not(item, arrangement, graph), through.get(ref, []), graph)
        for ref in graph.refs("measurement")
        if (item := graph.item(ref)) is not None
    ]
    return tuple(_beside_others(use, uses) for use in uses)


def _use(item: Item, why_not: tuple[str, ...], through: list[Value], graph: Graph) -> MeasurementUse:
    ref = Ref("measurement", item.id)
    done = item.get("date")
    said = graph.get("measurement.remarks", ref)
    remarks = [*said.value] if isinstance(said, Value) else []
    refusals = _refusals(ref, graph)
    for value in through:
        if value.name.endswith(REMARKS) and value.item != ref:
            remarks += [value.value] if isinstance(value.value, str) else [*value.value]
    measured = (value.name for value in through if value.basis == "measured")
    gives = dict.fromkeys(
        name for name in measured if not name.startswith("measurement.") and not name.endswith(REMARKS)
    )
    if gives:
        remarks += [
            f"The readings cannot be used for all that they could give: {_ended(why)}" for why in refusals
        ]
    return MeasurementUse(
        item=ref,
        file=item.place.file,
        kind=measurement_kind(str(item.get("kind"))).title,
        done_on=done if isinstance(done, date) else None,
        gives=tuple(gives),
        why_not=() if gives else (*why_not, *refusals),
        remarks=tuple(dict.fromkeys(str(each) for each in remarks)),
    )


def _ended(words: str) -> str:
    """Return words with their full stop, unless they end with a question."""
    return words if words.endswith("?") else f"{words}."


def _refusals(ref: Ref, graph: Graph) -> list[str]:
    """
    Return why an analysis could not use a file's readings, in its own words.

    A file holds a profile in one direction or in both: that one is not there is said only if the file gave
    no analysis at all an answer.
    """
    answered = False
    refused: list[str] = []
    not_there: list[str] = []
    for _, take in graph.catalogue.takes["measurement.remarks"]:
        got = graph.get(take.name, ref)
        if not isinstance(got, Gone):
            answered = True
            continue
        of_another_kind = graph.catalogue.definitions[take.name].meaning
        for cause in got.causes:
            if cause.kind in REFUSED and not cause.words.startswith(of_another_kind):
                told = not_there if cause.words.startswith(NO_LINE) else refused
                told.append(cause.words.rstrip("."))
    return refused or ([] if answered else not_there)


def _beside_others(use: MeasurementUse, uses: Iterable[MeasurementUse]) -> MeasurementUse:
    """Return a line with what is to be said where another file of its kind is used instead of it."""
    if use.gives or use.why_not or use.done_on is None:
        return use
    for other in uses:
        if other.kind != use.kind or not other.gives or other.done_on is None or other.done_on < use.done_on:
            continue
        newer = f"newer, of {other.done_on}" if other.done_on > use.done_on else "of the same day: remove one"
        return replace(use, why_not=(f"{other.file.removeprefix('measurements/')} is used, {newer}",))
    return use


def _why_not(item: Item, arrangement: Ref | None, graph: Graph) -> tuple[str, ...]:
    """Return every reason for which a file does not count for the arrangement or what belongs to it."""
    found = [reason for reason in (void(item, graph.program, graph.as_of),) if reason]
    if arrangement is not None:
        owners = graph.owners(arrangement)
        kind = measurement_kind(str(item.get("kind"))).attaches_to
        concerned = Ref(kind, owners.get(kind, kind))
        found += disagreements(item, owners, concerned, graph.get, ())
    return tuple(found)
