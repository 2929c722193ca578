"""Whether the conditions of a local rule can be asked of its values, and whether they can hold together."""

import difflib
import inspect
from collections.abc import Iterable, Iterator, Mapping, Sequence
from datetime import date
from functools import cache
from string import Formatter
from typing import Any

from readiness.assessment.catalogue import Catalogue
from readiness.assessment.conditions import CONDITIONS
from readiness.assessment.records import Clause
from readiness.assessment.ruleset import is_value_name
from readiness.program.field_schema import FieldSchema
from readiness.units import unit_of

HOLES = ("observed", "limit", "item")
NUMBER, DATE, YES_OR_NO, WORD, WORDS = "a number", "a date", "yes or no", "a word", "a list of words"
_OF_FIELDS = {
    "number": NUMBER, "whole number": NUMBER, "date": DATE, "yes or no": YES_OR_NO, "word": WORD,
    "text": WORD, "reference": WORD, "file": WORD, "words": WORDS, "texts": WORDS,
}  # fmt: skip
_OF_RESULTS = {bool: YES_OR_NO, str: WORD, float: NUMBER, int: NUMBER, date: DATE}
_ASKED = {
    "at_least": (NUMBER,), "at_most": (NUMBER,), "above": (NUMBER,), "below": (NUMBER,),
    "is_yes": (YES_OR_NO,), "is_no": (YES_OR_NO,), "contains": (WORD, WORDS), "one_of": (WORD, NUMBER),
    "equals": (NUMBER, DATE, YES_OR_NO, WORD), "on_or_after": (DATE,), "on_or_before": (DATE,),
}  # fmt: skip


def near(name: str, names: Iterable[str]) -> str:
    """Return a question after the nearest valid name, "" if none is near."""
    close = difflib.get_close_matches(name, list(names), n=1, cutoff=0.5)
    return f"; did you mean {close[0]}?" if close else ""


def near_value(name: str, known: Catalogue) -> str:
    """Return a question after the nearest value: of the kind that was named, or of the nearest kind."""
    kind, _, field = name.partition(".")
    nearest = [kind] if kind in known.kinds.all else difflib.get_close_matches(kind, known.kinds.all, n=1)
    own = nearest[0] if nearest else ""
    return near(f"{own}.{field}", _names_by_kind(known).get(own, ()))


@cache
def _names_by_kind(known: Catalogue) -> Mapping[str, tuple[str, ...]]:
    found: dict[str, list[str]] = {}
    for name in known.names():
        found.setdefault(name.partition(".")[0], []).append(name)
    return {kind: tuple(names) for kind, names in found.items()}


def type_of(name: str, known: Catalogue) -> str:
    """Return what a value is, "" where only its calculation knows."""
    field = field_of(name, known)
    if field is not None:
        return _OF_FIELDS.get(field.type, "")
    if unit_of(name) or name in known.criteria:
        return NUMBER
    definition = known.definitions.get(name)
    if definition is None or definition.by is None:
        return ""
    return _OF_RESULTS.get(inspect.signature(definition.by).return_annotation, "")


def field_of(name: str, known: Catalogue) -> FieldSchema | None:
    """Return the field whose type and words a value has."""
    return known.kinds.field("plan.technique" if name == "arrangement.technique" else name)


def misfit(clause: Clause, kind: str, known: Catalogue) -> str:
    """Return why a condition cannot be asked of its value in a rule on a kind of item, "" if it can."""
    seen = type_of(clause.subject, known)
    asked = _ASKED.get(clause.condition, ())
    if seen and asked and seen not in asked:
        return f"{clause.subject} is {seen}, {clause.condition} asks for {' or '.join(asked)}"
    if is_value_name(clause.limit, known):
        return _misfit_of_value(clause, str(clause.limit), seen, kind, known)
    needs = CONDITIONS[clause.condition].needs
    if needs == "number" and not _is_number(clause.limit):
        said = f"the limit must be a number in {unit_of(clause.subject)}" if unit_of(clause.subject) else (
            "the limit must be a number"
        )  # fmt: skip
        return f'{said} or the name of a value, not "{clause.limit}"{_hint(clause.limit, known)}'
    if needs == "date" and not isinstance(clause.limit, date):
        return f'the limit must be a date or the name of one, not "{clause.limit}"'
    return _misfit_of_words(clause, known)


def _hint(limit: Any, known: Catalogue) -> str:
    return near_value(limit, known) if isinstance(limit, str) and "." in limit else ""


def _misfit_of_value(clause: Clause, limit: str, seen: str, kind: str, known: Catalogue) -> str:
    if limit.partition(".")[0] not in known.kinds.reachable(kind):
        return f"the limit {limit} cannot be asked of a {kind}"
    if unit_of(limit) != unit_of(clause.subject):
        units = [unit_of(name) or "no unit" for name in (limit, clause.subject)]
        return f"the limit {limit} is in {units[0]}, but {clause.subject} is in {units[1]}"
    other = type_of(limit, known)
    if seen and other and seen != other:
        return f"the limit {limit} is {other}, {clause.subject} is {seen}"
    return ""


def _misfit_of_words(clause: Clause, known: Catalogue) -> str:
    field = field_of(clause.subject, known)
    if field is None or not field.words:
        return ""
    for word in _words(clause.limit):
        if word not in field.words:
            hint = near(word, field.words) or f"; it can be {', '.join(field.words)}"
            return f'{clause.subject} is never "{word}"{hint}'
    return ""


def never_together(clauses: Sequence[Clause], known: Catalogue) -> Iterator[str]:
    """Yield the values on which conditions contradict each other or what the value can be at all."""
    for name in dict.fromkeys(clause.subject for clause in clauses):
        own = [clause for clause in clauses if clause.subject == name]
        answers = {clause.condition for clause in own if clause.condition in {"is_yes", "is_no"}}
        numberless = _no_number_left(own, field_of(name, known))
        if len(answers) > 1 or numberless or _no_word_left(own) or _no_day_left(own):
            yield name


def _no_number_left(own: Sequence[Clause], field: FieldSchema | None) -> bool:
    floors = [(c.limit, c.condition == "above") for c in own if c.condition in {"at_least", "above"}]
    ceilings = [(c.limit, c.condition == "below") for c in own if c.condition in {"at_most", "below"}]
    exact = [c.limit for c in own if c.condition == "equals"]
    floors += [(limit, False) for limit in exact]
    ceilings += [(limit, False) for limit in exact]
    if field is not None:
        floors += [(field.minimum, False), (field.above, True)]
        ceilings += [(field.maximum, False)]
    floors, ceilings = ([each for each in ends if _is_number(each[0])] for ends in (floors, ceilings))
    if not floors or not ceilings:
        return False
    floor = max(floors)
    ceiling = min(ceilings, key=lambda each: (each[0], not each[1]))
    return bool(floor[0] > ceiling[0] or (floor[0] == ceiling[0] and (floor[1] or ceiling[1])))


def _no_word_left(own: Sequence[Clause]) -> bool:
    sets = [
        {str(word) for word in (clause.limit if isinstance(clause.limit, (tuple, list)) else (clause.limit,))}
        for clause in own
        if clause.condition in {"equals", "one_of"} and not _is_number(clause.limit)
    ]
    return bool(sets) and not set.intersection(*sets)


def _no_day_left(own: Sequence[Clause]) -> bool:
    first = [c.limit for c in own if c.condition == "on_or_after" and isinstance(c.limit, date)]
    last = [c.limit for c in own if c.condition == "on_or_before" and isinstance(c.limit, date)]
    return bool(first and last) and max(first) > min(last)


def unfillable(message: str) -> str:
    """Return which hole of a message cannot be filled, "" if all can; a hole is a plain name."""
    try:
        holes = [each[1:] for each in Formatter().parse(message) if each[1] is not None]
    except ValueError as error:
        return f"the message has a hole that is not closed ({error})"
    for hole, spec, turned in holes:
        if hole not in HOLES:
            allowed = ", ".join(f"{{{name}}}" for name in HOLES)
            hint = near(str(hole), HOLES)
            return f"the message has a hole {{{hole}}} that cannot be filled{hint} ({allowed} can)"
        if spec or turned:
            return f"the hole {{{hole}}} of the message is a plain name without a format"
    return ""


def _words(limit: Any) -> tuple[str, ...]:
    found = limit if isinstance(limit, (tuple, list)) else (limit,)
    return tuple(word for word in found if isinstance(word, str))


def _is_number(limit: Any) -> bool:
    return isinstance(limit, (int, float)) and not isinstance(limit, bool)
