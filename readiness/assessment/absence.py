"""What to say of a list, a section or a field that is not there: what to supply, and where."""

from collections.abc import Mapping

from readiness.assessment.kinds import WRITTEN_BY_THE_TOOL, Kinds
from readiness.assessment.records import PROGRAM, Cause, Ref
from readiness.program.items import Item
from readiness.units import unit_of, words_of

LYING = "moving-couch"
STANDING_ONLY = frozenset(
    f"plan.{name}"
    for name in ("plane_distance_cm", "tilt_deg", "mu_convention", "mu_share_upper",
                 "pair_output_cgy_per_mu", "b_factor")
)  # fmt: skip


def is_for_standing_only(name: str, item: Item) -> bool:
    """Return whether a field is one that a plan for a lying patient does not have."""
    return name in STANDING_ONLY and (item.get("technique") == LYING or item.get("couch") is not None)


def for_standing_only() -> Cause:
    """Return why nothing is worked out that only a standing patient has: one cause for all of it."""
    words = (
        "Measure for a patient on a moving couch what is worked out for a standing one only; the requirements"
        " that wait for this say what."
    )
    return Cause("validity", "standing patient", PROGRAM, words)


def unknown_owner(kind: str, asking: Ref, owners: Mapping[str, str]) -> Cause:
    """Return the cause for something that an item does not have."""
    if kind == "stand" and "couch" in owners:
        return for_standing_only()
    return Cause("item", kind, asking, f"Describe or choose a {words_of(kind)} for {asking}.")


def unknown_list(kind: str, owner: Ref, known: Kinds) -> Cause:
    """Return the cause for a list or section that the folder does not hold."""
    if kind in WRITTEN_BY_THE_TOOL:
        return Cause("record", kind, owner, WRITTEN_BY_THE_TOOL[kind])
    schema = known.described.kinds[kind]
    of = "" if owner.kind == "program" else f" of {owner}"
    title = schema.title.lower()
    if schema.form == "list":
        return Cause("list", kind, owner, f"List every {title}{of} in {schema.file}; [] if there is none.")
    return Cause("list", kind, owner, f"Describe {title}{of} in {schema.file}.")


def unknown_field(name: str, ref: Ref, known: Kinds) -> Cause:
    """Return the cause for a value that nobody stated."""
    unit = f" ({unit_of(name)})" if unit_of(name) else ""
    field = known.field(name)
    if field is None:
        return Cause("item", name, ref, f"Supply {words_of(name)}{unit} of {ref}.")
    file = known.described.kinds[field.kind].file
    meaning = field.meaning
    if meaning[1:2].islower() or meaning.startswith("A "):
        meaning = meaning[0].lower() + meaning[1:]
    return Cause("field", name, ref, f"State {words_of(name)}{unit} of {ref} in {file}: {meaning}")
