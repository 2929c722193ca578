"""How messages name what stands at a place in a file: "thickness in row 2 of layers"."""

from collections.abc import Iterable, Mapping

from readiness.program import nodes
from readiness.program.field_schema import FieldSchema
from readiness.program.wording import a_number, did_you_mean, shown

Path = tuple[str | int, ...]  # keys and positions that lead to an entry: ("layers", 1, "thickness_cm")

MOST_KEYS = 8  # longer lists of known keys are not repeated in a message

_ONE = {
    "word": "one word",
    "text": "one text",
    "reference": "one id",
    "file": "one path",
    "scalar": "one entry",
    "yes or no": "yes or no",
}

_SAY_INSTEAD = {  # words of the trade that are not keys here, because they mean two things or are measured
    "fractions": "a fraction may be a cycle or a session: write cycles and sessions_per_cycle",
    "dose_per_fraction_gy": "a fraction may be a cycle or a session: write dose_per_cycle_gy",
    "fractionation": "write dose_per_cycle_gy, cycles and sessions_per_cycle",
    "energy_mev": "a beam is described by r50_cm and rp_cm",
    "sad_cm": "write source_axis_distance_cm",
    "ssd_cm": "write plane_distance_cm in a plan",
    "name": "write title, or a role instead of a person's name",
}


def words_at(fields: Mapping[str, FieldSchema], path: Path) -> str:
    """Return what stands at a path, in the user's words."""
    schema = fields[str(path[0])]
    words = schema.in_words
    inner = path[1:]
    if not inner:
        return words
    if isinstance(inner[0], str):
        return f"{words_at(schema.columns, inner)} of {words}"
    number = inner[0] + 1
    if schema.type == "rows":
        row = f"row {number} of {words}"
        return row if len(inner) == 1 else f"{words_at(schema.columns, inner[1:])} in {row}"
    if schema.type == "points":
        point = f"point {number} of {words}"
        return point if len(inner) == 1 else f"{'y' if inner[1] else 'x'} of {point}"
    return f"entry {number} of {words}"


def field_at(fields: Mapping[str, FieldSchema], path: Path) -> FieldSchema:
    """Return the field or column that an entry at a path belongs to."""
    schema = fields[str(path[0])]
    names = [step for step in path[1:] if isinstance(step, str)]
    return field_at(schema.columns, tuple(names)) if names else schema


def in_words(node: nodes.Node) -> str:
    """Return what was written, in the user's words."""
    if isinstance(node, nodes.Scalar):
        return shown(node.text)
    return "a list" if isinstance(node, nodes.Sequence) else "a mapping (key: value)"


def is_blank(node: nodes.Node) -> bool:
    """Return whether nothing is written."""
    return isinstance(node, nodes.Scalar) and not node.text and not node.quoted


def unknown_key(key: str, known: Iterable[str], where: str = "", elsewhere: str = "") -> str:
    """Return the message for a key that nobody reads; ``elsewhere`` says where it would be read."""
    instead = _SAY_INSTEAD.get(key.casefold())
    known = list(known)
    hint = f": {instead}" if instead else did_you_mean(key, known) or elsewhere
    if not hint and len(known) <= MOST_KEYS:
        hint = f"; known are {', '.join(known)}"
    return f"{shown(key)} is not known{where}{hint}"


def one(kind: str, unit: str = "") -> str:
    """Return a single entry of a type, in the user's words."""
    if kind in {"number", "whole number"}:
        return a_number(unit, whole=kind == "whole number")
    return _ONE.get(kind, f"a {kind}")


def meaning_of(field: FieldSchema) -> str:
    """Return what a field means, to stand inside a sentence."""
    text = field.meaning.removesuffix(".")
    return text if text[:2].isupper() else text[0].lower() + text[1:]
