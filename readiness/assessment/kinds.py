"""Which kinds of item there are, what belongs to what, and where a value of another kind is looked for."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache, cached_property

from readiness.program.field_schema import FieldSchema
from readiness.program.fields import Schemas, schemas

# kinds that the assessment itself makes, with what they belong to
MADE: Mapping[str, tuple[str, ...]] = {
    "arrangement": ("beam", "machine", "room", "degrader", "stand", "couch", "plan", "program"),
    "exposure": ("arrangement", "barrier"),
    "criterion": ("program",),
    "document": ("program",),
    "measurement": (
        "beam", "machine", "room", "degrader", "stand", "couch", "instrument", "patient_shield", "program",
    ),
    "progress": ("program",),
}
# fields that the assessment itself gives, kind -> name -> meaning
GIVEN: Mapping[str, Mapping[str, str]] = {
    "program": {"as_of_date": "Day for which the assessment is made."},
    "arrangement": {
        "title": "The arrangement in words.",
        "room": "Room.",
        "machine": "Machine.",
        "beam": "Beam.",
        "degrader": "Degrader.",
        "stand": "Stand.",
        "couch": "Couch.",
        "side_deg": "IEC 61217 gantry angle of the side, 90 or 270.",
        "technique": "Technique.",
        "chosen": "The department has chosen it.",
    },
    "exposure": {"title": "Barrier and arrangement in words."},
    "local_limit": {"governs": "It is at least as strict as the limit that ships with the tool."},
    "exception": {
        "answers_a_finding": "The rule would not be met without it.",
        "may_be_granted": "Its rule is one that may be excepted.",
    },
    "document": {
        "title": "Title.",
        "number": "Number.",
        "approved": "Every approver has approved the body as it is now.",
        "changed_after_approval": "The body changed after it was approved.",
        "shown": "It belongs to the chosen technique.",
    },
    "measurement": {"kind": "Kind.", "table": "The readings."},
    "progress": {"task": "Task.", "started_on": "Day begun.", "finished_on": "Day finished."},
}
# lists that the tool writes itself: what a person does instead of writing them
WRITTEN_BY_THE_TOOL: Mapping[str, str] = {
    "approval": "Approve each document with: readiness approve FOLDER DOCUMENT.",
}
PARTS = ("room", "machine", "beam", "degrader", "stand", "couch", "plan")  # of an arrangement


@dataclass(frozen=True)
class Kinds:
    """The kinds of the field schemas together with those that the assessment makes."""

    described: Schemas

    @cached_property
    def all(self) -> tuple[str, ...]:
        """Return every kind."""
        return (*self.described.kinds, *(kind for kind in MADE if kind not in self.described.kinds))

    def owners(self, kind: str) -> tuple[str, ...]:
        """Return the kinds an item belongs to directly."""
        if kind in MADE:
            return MADE[kind]
        return self.described.owner_kinds(kind)

    @cached_property
    def _closures(self) -> dict[str, tuple[str, ...]]:
        return {kind: self._closure(kind) for kind in self.all}

    def _closure(self, kind: str) -> tuple[str, ...]:
        found: list[str] = []
        waiting = list(self.owners(kind))
        while waiting:
            owner = waiting.pop(0)
            if owner not in found:
                found.append(owner)
                waiting.extend(self.owners(owner))
        return tuple(sorted(found, key=lambda each: each == "program"))

    def ancestors(self, kind: str) -> tuple[str, ...]:
        """Return every kind an item belongs to, the program last."""
        return self._closures[kind]

    @cached_property
    def sections(self) -> frozenset[str]:
        """Return the kinds that the program has once, which every item may ask for."""
        kinds = self.described.kinds.values()
        return frozenset(each.kind for each in kinds if each.form == "section" and each.owner == "program")

    def reachable(self, kind: str) -> frozenset[str]:
        """Return the kinds of which an item of this kind may ask for a value."""
        return frozenset((kind, "criterion", *self.ancestors(kind))) | self.sections

    def anchor(self, asking: str, listed: str) -> str | None:
        """
        Return the kind whose lists are meant when an item of one kind asks for "each" of another.

        It is the nearest kind that both belong to: the arrangement's own exposures, its room's barriers,
        the program's instruments.
        """
        candidates = [kind for kind in (asking, *self.ancestors(asking)) if kind in self.ancestors(listed)]
        if not candidates:
            return None
        deepest = [
            kind
            for kind in candidates
            if not any(kind in self.ancestors(other) for other in candidates if other != kind)
        ]
        return deepest[0] if deepest else candidates[0]

    def field(self, name: str) -> FieldSchema | None:
        """Return the field that a value name belongs to, or None."""
        return self.described.field(name)

    def is_given(self, name: str) -> bool:
        """Return whether the assessment itself supplies this value."""
        kind, _, field = name.partition(".")
        return field in GIVEN.get(kind, {}) or (field == "id" and kind in self.all)


@cache
def kinds() -> Kinds:
    """Return the kinds that ship with the tool."""
    return Kinds(schemas())
