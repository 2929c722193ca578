"""What to say of a list, a section or a field that is not there: what to supply, and where."""

from readiness.assessment.kinds import WRITTEN_BY_THE_TOOL, Kinds
from readiness.assessment.records import Cause, Ref
from readiness.units import unit_of, words_of


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
    if meaning[1:2].islower():
        meaning = meaning[0].lower() + meaning[1:]
    return Cause("field", name, ref, f"State {words_of(name)}{unit} of {ref} in {file}: {meaning}")
