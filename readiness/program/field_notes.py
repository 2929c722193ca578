"""What a person must know to fill in a field, in a few words: "cm, above 0, at most 300"."""

from readiness.program.field_schema import FieldSchema
from readiness.units import printed

_FORMS = {
    "text": "text",
    "texts": "list of texts: [one, two]",
    "number": "number",
    "numbers": "list of numbers: [1, 2]",
    "whole number": "whole number",
    "yes or no": "yes or no",
    "date": "year-month-day",
    "dates": "list of dates, year-month-day: [2026-01-31]",
    "word": "one of",
    "words": "list of",
    "points": "list of points: [[x, y], [x, y], [x, y]]",
    "reference": "id of",
    "references": "list of ids of",
    "row": "a mapping with the keys below",
    "rows": "a list, each entry with the keys below",
    "file": "path under evidence/",
    "scalar": "number, yes or no, date or text",
    "scalars": "list of numbers, dates or texts",
}


def field_note(field: FieldSchema) -> str:
    """Return form, unit, range, allowed words and whether the field must be there."""
    form = _FORMS[field.type]
    if field.words:
        form = f"{form} {', '.join(_word(word, meaning) for word, meaning in field.words.items())}"
    if field.to:
        form = f"{form} {_article(field.to)}"
    if field.within:
        form = f"{form} of that {field.within}"
    parts = [form, *([field.printed_unit] if field.printed_unit else []), *_range(field)]
    if field.or_none:
        parts.append("or none")
    if field.required:
        parts.append("required")
    return ", ".join(parts)


def _range(field: FieldSchema) -> list[str]:
    if field.one_of:
        return [f"{' or '.join(printed(each) for each in field.one_of)}"]
    if field.minimum is not None and field.minimum == field.maximum:
        return [f"always {printed(field.minimum)}"]
    low = f"from {printed(field.minimum)}" if field.minimum is not None else ""
    low = f"above {printed(field.above)}" if field.above is not None else low
    high = f"to {printed(field.maximum)}" if field.maximum is not None else ""
    return [" ".join(part for part in (low, high) if part)] if low or high else []


def _word(word: str, meaning: str) -> str:
    return f"{word} ({meaning})" if meaning else word


def _article(kind: str) -> str:
    if kind == "any":
        return "any item"
    words = kind.replace("_", " ")
    return f"{'an' if words[0] in 'aeiou' else 'a'} {words}"
