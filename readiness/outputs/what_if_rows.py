"""The lines of the report page's what-if tables; every number comes from an assessment made in advance."""

from collections.abc import Sequence
from dataclasses import dataclass

from readiness.assessment.difference import TurnedFinding
from readiness.assessment.what_if import FIGURES, Variant
from readiness.outputs.words import date_words, value_title, with_unit

_TURNED_SHOWN = 12
FIRST_PATIENT = "First patient not before"
_HEADS = {
    "arrangement.vertical_uniformity_percent": "Uniformity along the height",
    "arrangement.horizontal_uniformity_percent": "Uniformity across",
    "arrangement.dose_at_4_mm_percent": "Dose at 4 mm",
    "arrangement.later_session_min": "A later session",
    "program.busiest_room_hours_per_week_h": "Room hours in the busiest week",
    "program.wait_weeks": "Mean wait for a start",
    "program.started_in_time_percent": "Start within the accepted wait",
    "program.places_needed": "Places needed for that wait",
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
    """One choice with its variants; ``alike`` says what is the same in every one and has no column."""

    title: str
    heads: tuple[str, ...]
    lines: tuple[Line, ...]
    alike: tuple[str, ...]


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
    heads = ("Verdict", "Feasibility", FIRST_PATIENT, *figures)
    columns = dict(zip(heads, zip(*(_cells(each, names) for each in variants), strict=True), strict=True))
    same = {head for head, cells in columns.items() if len(set(cells)) == 1 < len(cells)}
    lines = tuple(
        _line(each, tuple(cells[index] for head, cells in columns.items() if head not in same))
        for index, each in enumerate(variants)
    )
    alike = tuple(f"{head[0].lower()}{head[1:]}: {columns[head][0]}" for head in heads if head in same)
    return Question(title, tuple(head for head in heads if head not in same), lines, alike)


def _cells(variant: Variant, names: Sequence[str]) -> tuple[str, ...]:
    figures = {name: f"{with_unit(name, value)} ({basis})" for name, value, basis in variant.figures}
    if "program.started_in_time_percent" in figures:  # the wait is asked for and has no end
        figures.setdefault("program.wait_weeks", "grows without end")
    return (
        variant.verdict,
        variant.feasibility,
        date_words(variant.first_patient),
        *(figures.get(name, "not known") for name in names),
    )


def _line(variant: Variant, cells: tuple[str, ...]) -> Line:
    turned = tuple(dict.fromkeys(map(_turned, variant.turned)))
    more = max(0, len(turned) - _TURNED_SHOWN)
    return Line(variant.answer, variant.present, cells, turned[:_TURNED_SHOWN], more)


def _turned(each: TurnedFinding) -> str:
    strength = f" ({each.strength})" if each.strength else ""
    return f"{each.rule}{strength}: {each.before or 'did not apply'}, then {each.after or 'does not apply'}"
