"""The lines of the report page's what-if tables; every number comes from an assessment made in advance."""

from collections.abc import Sequence
from dataclasses import dataclass

from readiness.assessment.difference import TurnedFinding
from readiness.assessment.what_if import FIGURES, Variant
from readiness.outputs.words import date_words, value_title, with_unit

_TURNED_SHOWN = 12
_HEADS = {
    "arrangement.vertical_uniformity_percent": "Uniformity along the height",
    "arrangement.horizontal_uniformity_percent": "Uniformity across",
    "arrangement.dose_at_4_mm_percent": "Dose at 4 mm",
    "arrangement.later_session_min": "A later session",
    "program.busiest_room_hours_per_week_h": "Room hours in the busiest week",
    "program.wait_weeks": "Wait for a start",
    "arrangement.worst_goal_ratio": "Worst barrier, as a part of its goal",
}


@dataclass(frozen=True)
class Line:
    """One variant: its answer, whether it is the present one, its cells, and what turns."""

    answer: str
    present: bool
    cells: tuple[str, ...]
    turned: tuple[str, ...]
    more: int


@dataclass(frozen=True)
class Question:
    """One choice with its variants."""

    title: str
    heads: tuple[str, ...]
    lines: tuple[Line, ...]


def questions(variants: Sequence[Variant]) -> tuple[Question, ...]:
    """Return the variants by question, with the figures that any of them has."""
    return tuple(
        _question(title, [each for each in variants if each.question == title])
        for title in dict.fromkeys(each.question for each in variants)
    )


def _question(title: str, variants: Sequence[Variant]) -> Question:
    known = {name for each in variants for name, _, _ in each.figures}
    names = [name for name in FIGURES if name in known]
    figures = (_HEADS.get(name, value_title(name)) for name in names)
    heads = ("Feasibility", "First patient not before", *figures)
    return Question(title, heads, tuple(_line(each, names) for each in variants))


def _line(variant: Variant, names: Sequence[str]) -> Line:
    figures = {name: f"{with_unit(name, value)} ({basis})" for name, value, basis in variant.figures}
    cells = (
        variant.feasibility,
        date_words(variant.first_patient),
        *(figures.get(name, "not known") for name in names),
    )
    turned = tuple(dict.fromkeys(map(_turned, variant.turned)))
    more = max(0, len(turned) - _TURNED_SHOWN)
    return Line(variant.answer, variant.present, cells, turned[:_TURNED_SHOWN], more)


def _turned(each: TurnedFinding) -> str:
    strength = f" ({each.strength})" if each.strength else ""
    return f"{each.rule}{strength}: {each.before or 'did not apply'}, then {each.after or 'does not apply'}"
