"""Items by kind, with everything that each belongs to and everything that belongs to it."""

from functools import cached_property

from readiness.assessment.kinds import MADE, Kinds
from readiness.assessment.records import Ref
from readiness.program.items import Item, Program


class ItemIndex:
    """All items of a program together with those that the assessment makes."""

    def __init__(self, program: Program, made: tuple[Item, ...], kinds: Kinds) -> None:
        """Take the program, the items that the assessment made, and the kinds there are."""
        self.program = program
        self.kinds = kinds
        self._items: dict[Ref, Item] = {Ref(item.kind, item.id): item for item in (*program.items, *made)}
        self._children: dict[tuple[str, Ref], list[Ref]] = {}
        self._owners: dict[Ref, dict[str, str]] = {}
        for ref in self._items:
            for kind, owner in self.owners(ref).items():
                self._children.setdefault((ref.kind, Ref(kind, owner)), []).append(ref)

    def children(self, kind: str, owner: Ref) -> list[Ref]:
        """Return the items of a kind that belong to an item, in their order."""
        return self._children.get((kind, owner), [])

    def item(self, ref: Ref) -> Item | None:
        """Return an item, or None."""
        return self._items.get(ref)

    def refs(self, kind: str) -> tuple[Ref, ...]:
        """Return all items of a kind in their order."""
        return self._by_kind.get(kind, ())

    @cached_property
    def _by_kind(self) -> dict[str, tuple[Ref, ...]]:
        found: dict[str, list[Ref]] = {}
        for ref in self._items:
            found.setdefault(ref.kind, []).append(ref)
        return {kind: tuple(refs) for kind, refs in found.items()}

    def owners(self, ref: Ref) -> dict[str, str]:
        """Return kind -> id of everything the item belongs to, itself included; the nearest wins."""
        known = self._owners.get(ref)
        if known is not None:
            return known
        found: dict[str, str] = {}
        waiting = [ref]
        while waiting:
            each = waiting.pop(0)
            if each.kind in found:
                continue
            found[each.kind] = each.id
            item = self._items.get(each)
            if item is not None:
                waiting.extend(Ref(kind, owner) for kind, owner in item.owners.items())
        found.setdefault("program", "program")
        self._owners[ref] = found
        return found

    def list_is_known(self, kind: str, owner: Ref) -> bool:
        """Return whether the list of a kind is present, so that what is not in it does not exist."""
        if kind in MADE and kind != "criterion" and kind != "progress":
            return True
        direct = self.kinds.owners(kind)[:1]
        owner_kind = direct[0] if direct else "program"
        if owner.kind == owner_kind or owner_kind == "program":
            return (kind, owner.id if owner.kind == owner_kind else "program") in self.program.known_lists
        holders = self._children.get((owner_kind, owner), [])
        return bool(holders) and all((kind, holder.id) in self.program.known_lists for holder in holders)
