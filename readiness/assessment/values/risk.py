"""Failure modes with the team's scores: the worst, the severe, and those that lack a score or a control."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass, replace
from datetime import date
from typing import Any

from readiness.assessment.definition import Definition, derived
from readiness.assessment.values.naming import named
from readiness.calculations.failure_mode_ranking import (
    Scores,
    failure_mode_ranking,
    open_failure_modes,
    severe_failure_modes,
    worst_failure_modes,
)
from readiness.calculations.failure_modes import FailureMode, shipped_failure_modes
from readiness.errors import OutsideValidity
from readiness.quantities import Table

_ROWS = (
    "rows failure_mode: id step? failure? cause? effect? controls? documents? occurrence? severity?"
    " lack_of_detection?"
)
_LISTS = ("controls", "documents")
_RECORD = {"risks": "program.risk_analysis"}
METHOD, KNOWN = "tg-100", "memory"
DAYS_PER_MONTH = 365.25 / 12


@dataclass(frozen=True)
class RiskAnalysis:
    """The modes of the program, shipped and the department's own, and the team's scores by id."""

    modes: tuple[FailureMode, ...]
    scores: dict[str, Scores]


def risk_analysis(*, modes: Table) -> RiskAnalysis:
    """Return the shipped modes with the department's words and scores, and its own modes after them."""
    known = {mode.id: mode for mode in shipped_failure_modes()}
    scores: dict[str, Scores] = {}
    for row in modes.records():
        name = str(row["id"])
        if name in known or row["failure"] is not None:
            known[name] = _mode(name, row, known.get(name))
        scores[name] = Scores(row["occurrence"], row["severity"], row["lack_of_detection"])  # type: ignore[arg-type]
    return RiskAnalysis(tuple(known.values()), scores)


def _mode(name: str, row: dict[str, Any], shipped: FailureMode | None) -> FailureMode:
    """Return a mode with what the department wrote in place of what ships."""
    mode = shipped or FailureMode(name, "not stated", "", "not stated", "not stated", (), ())
    parts = {key: row[key] for key in ("step", "failure", "cause", "effect", *_LISTS) if row[key] is not None}
    own: dict[str, Any] = {key: tuple(part) if key in _LISTS else str(part) for key, part in parts.items()}
    return replace(mode, **own)


def ranking(*, risks: RiskAnalysis) -> Table:
    """Return all modes, the worst first and those without scores last."""
    return failure_mode_ranking(modes=risks.modes, scores=risks.scores)


def worst(*, risks: RiskAnalysis) -> Table:
    """Return the ten worst scored modes."""
    return worst_failure_modes(modes=risks.modes, scores=risks.scores)


def still_open(*, risks: RiskAnalysis) -> Table:
    """Return the modes that lack a control, a document or a score."""
    return open_failure_modes(modes=risks.modes, scores=risks.scores)


def severe(*, risks: RiskAnalysis) -> tuple[str, ...]:
    """Return the modes of severity 9 or 10."""
    return severe_failure_modes(modes=risks.modes, scores=risks.scores)


def severe_with_one_control(*, risks: RiskAnalysis) -> str:
    """Return the modes of severity 9 or 10 against which fewer than two controls stand."""
    grave = severe(risks=risks)
    few = [mode.id for mode in risks.modes if mode.id in grave and len(mode.controls) < 2]
    blank = sum(risks.scores.get(mode.id, Scores()).severity is None for mode in risks.modes)
    if blank and not few:
        raise OutsideValidity(f"Score in risks.yaml the severity of failure modes; without one: {blank}.")
    return named(few)


def mode_count(*, risks: RiskAnalysis) -> int:
    """Return the number of modes."""
    return len(risks.modes)


def unscored(*, risks: RiskAnalysis) -> int:
    """Return the number of modes without all three scores."""
    return sum(risks.scores.get(mode.id, Scores()).product is None for mode in risks.modes)


def uncontrolled(*, risks: RiskAnalysis) -> int:
    """Return the number of modes without a control."""
    return sum(not any(control.strip() for control in mode.controls) for mode in risks.modes)


def undocumented(*, risks: RiskAnalysis) -> int:
    """Return the number of modes whose controls stand in no document."""
    return sum(not mode.documents for mode in risks.modes)


def months_since_scoring(*, scored_on: Sequence[date | None], as_of_date: date) -> float:
    """Return the age of the oldest session of scoring."""
    dates = [day for day in scored_on if day is not None]
    if not dates:
        raise OutsideValidity("State the date of the team's scores (scored_on) in risks.yaml.")
    return (as_of_date - min(dates)).days / DAYS_PER_MONTH


def _of(
    name: str, meaning: str, by: Callable[..., Any], source: str = METHOD, known: str = KNOWN
) -> Definition:
    return Definition(f"program.{name}", meaning, by=by, takes=_RECORD, source=source, known=known)


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "program.risk_analysis",
        "Failure modes with the team's scores.",
        by=risk_analysis,
        takes={"modes": _ROWS},
        internal=True,
    ),
    _of("failure_mode_count", "Number of failure modes, the department's own included.", mode_count),
    _of("failure_mode_ranking", "Failure modes by the product of the team's scores.", ranking),
    _of(
        "worst_failure_modes", "The ten worst scored failure modes with their controls and documents.", worst
    ),
    _of("open_failure_modes", "Failure modes that lack a control, a document or a score.", still_open),
    _of("failure_modes_without_score_count", "Failure modes without all three scores of the team.", unscored),
    _of("failure_modes_without_control_count", "Failure modes without a control.", uncontrolled),
    _of(
        "failure_modes_without_document_count",
        "Failure modes whose controls no document holds.",
        undocumented,
    ),
    _of("severe_failure_modes", "Failure modes of severity 9 or 10.", severe, "practice", "practice"),
    _of(
        "severe_modes_with_one_control",
        "Failure modes of severity 9 or 10 against which fewer than two controls stand, or none.",
        severe_with_one_control,
        "practice",
        "practice",
    ),
    derived(
        "program.failure_mode_scores_age_months",
        "Age of the oldest scores of failure modes.",
        months_since_scoring,
        {"scored_on": "each failure_mode.scored_on?", "as_of_date": "program.as_of_date"},
    ),
)
