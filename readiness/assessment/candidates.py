"""
Every arrangement that the program folder allows, and every barrier seen from it.

An arrangement is a room, machine, beam, side, technique, degrader and stand (or couch). A plan that
fits it becomes one of its owners and gives it the department's choices.
"""

from collections.abc import Iterator
from dataclasses import replace
from itertools import product

from readiness.assessment.kinds import MADE
from readiness.errors import Place
from readiness.program.items import Item, Program, Stated

SIDES = (90, 270)
STANDING = ("six-position", "rotating-platform")
LYING = "moving-couch"
_MATCHED = ("room", "machine", "beam", "side_deg", "technique", "degrader", "stand", "couch")


def arrangements(program: Program) -> tuple[Item, ...]:
    """Return all arrangements in the order rooms, beams, techniques, degraders, stands, sides."""
    root = program.find("program", "program")
    techniques = root.get("techniques") if root else None
    if not isinstance(techniques, tuple):
        return ()
    return tuple(
        item
        for machine in program.of_kind("machine")
        for beam in program.of_kind("beam")
        if beam.owners.get("machine") == machine.id and "room" in machine.owners
        for technique in techniques
        for item in _of_beam(program, machine, beam, str(technique))
    )


def _of_beam(program: Program, machine: Item, beam: Item, technique: str) -> Iterator[Item]:
    support = "couch" if technique == LYING else "stand"
    sides = (0,) if technique == LYING else SIDES
    for degrader, carrier, side in product(program.of_kind("degrader"), program.of_kind(support), sides):
        parts: dict[str, str | int] = {
            "room": machine.owners["room"],
            "machine": machine.id,
            "beam": beam.id,
            "side_deg": side,
            "technique": technique,
            "degrader": degrader.id,
            support: carrier.id,
        }
        yield _arrangement(program, parts, beam.place)


def _arrangement(program: Program, parts: dict[str, str | int], place: Place) -> Item:
    short_beam = str(parts["beam"]).rpartition("/")[2]
    carrier = str(parts.get("stand") or parts.get("couch"))
    side = f"side-{parts['side_deg']}" if parts["side_deg"] else "vertical"
    names = (
        parts["room"],
        parts["machine"],
        short_beam,
        side,
        parts["technique"],
        parts["degrader"],
        carrier,
    )
    owners: dict[str, str] = {
        kind: str(parts[kind])
        for kind in ("room", "machine", "beam", "degrader", "stand", "couch")
        if kind in parts
    }
    owners["program"] = "program"
    plan = next((plan for plan in program.of_kind("plan") if _fits(plan, parts)), None)
    if plan is not None:
        owners["plan"] = plan.id
    fields = {name: Stated(value, place) for name, value in parts.items()}
    fields["title"] = Stated(", ".join(str(name).replace("-", " ") if name == side else str(name)
                                       for name in names), place)  # fmt: skip
    fields["chosen"] = Stated(_is_chosen(program, parts), place)
    return Item("arrangement", "/".join(str(name) for name in names), fields, owners, place)


def _fits(plan: Item, parts: dict[str, str | int]) -> bool:
    for name in _MATCHED:
        wanted = plan.get(name)
        if wanted is not None and parts.get(name) != wanted:
            return False
    return True


def _is_chosen(program: Program, parts: dict[str, str | int]) -> bool:
    root = program.find("program", "program")
    chosen = root.get("chosen_arrangement") if root else None
    if chosen is None or not hasattr(chosen, "records"):
        return False
    wanted = {key: value for key, value in next(chosen.records()).items() if value is not None}
    own = dict(parts)
    if "beam" in wanted and "/" not in str(wanted["beam"]):
        own["beam"] = str(own["beam"]).rpartition("/")[2]
    return all(own.get(key) == value for key, value in wanted.items())


def exposures(program: Program, made: tuple[Item, ...]) -> tuple[Item, ...]:
    """Return each barrier seen from each arrangement of its room."""
    return tuple(
        Item(
            "exposure",
            f"{barrier.id} from {arrangement.id}",
            {"title": Stated(f"{barrier.get('title') or barrier.id}", barrier.place)},
            {"arrangement": arrangement.id, "barrier": barrier.id},
            barrier.place,
        )
        for arrangement in made
        for barrier in program.of_kind("barrier")
        if barrier.owners.get("room") == arrangement.owners["room"]
    )


def measurements(program: Program) -> tuple[Item, ...]:
    """Return the measurement files as items that belong to the room, beam and tools they name."""
    return tuple(
        replace(item, owners={**item.owners, **_named(item)}) for item in program.of_kind("measurement")
    )


def _named(item: Item) -> dict[str, str]:
    named = {kind: item.get(kind) for kind in MADE["measurement"]}
    return {kind: value for kind, value in named.items() if isinstance(value, str) and value != "none"}
