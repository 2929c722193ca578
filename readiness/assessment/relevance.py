"""Which items the chosen arrangement concerns: its own parts, what belongs to them, and the program's own."""

from readiness.assessment.graph import Graph
from readiness.assessment.kinds import PARTS
from readiness.assessment.records import Ref


def concerned(chosen: Ref | None, graph: Graph) -> set[Ref]:
    """
    Return every item that the chosen arrangement concerns.

    Another room with its barriers, another machine, beam, degrader or stand is not concerned; instruments,
    staff and documents always are. Without a chosen arrangement everything is.
    """
    every = {ref for kind in graph.catalogue.kinds.all for ref in graph.refs(kind)}
    if chosen is None:
        return every
    own = graph.owners(chosen)
    return {ref for ref in every if _belongs(ref, chosen, own, graph)}


def _belongs(ref: Ref, chosen: Ref, own: dict[str, str], graph: Graph) -> bool:
    owners = graph.owners(ref)
    if owners.get("arrangement", chosen.id) != chosen.id:
        return False
    if ref.kind in {"measurement", "plan"}:
        return ref.kind == "measurement" or own.get("plan") == ref.id
    return all(owners[kind] == own.get(kind) for kind in PARTS if kind in owners)
