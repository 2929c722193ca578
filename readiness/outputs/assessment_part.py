"""The part of the binder that speaks of the assessment: cover, contents, chief's page, lists and matrix."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from functools import cache
from typing import Any

from jinja2 import Environment, FileSystemLoader, StrictUndefined

from readiness.assessment.records import Assessment
from readiness.outputs import assessment_rows as rows
from readiness.outputs import chief_rows as chief
from readiness.outputs.contract import CAUTION, INVENTED
from readiness.outputs.documents import RenderedDocument
from readiness.outputs.frame import SAFETY, foot_words
from readiness.outputs.frame import anchor as place
from readiness.outputs.measurement_rows import measurement_rows
from readiness.outputs.words import VERDICT_SENTENCES, chosen_by_words, chosen_row, reason_words
from readiness.resources import folder


@dataclass(frozen=True)
class Sheet:
    """One piece of the assessment part: where links lead, its title and its HTML."""

    anchor: str
    title: str
    html: str


@dataclass(frozen=True)
class Entry:
    """One line of the contents; ``page`` counts from the cover, 0 for a heading."""

    level: int
    target: str
    title: str
    status: str
    pages: int
    page: int


# anchor, title, template
SHEETS = (
    ("chief", "For the chief: where the program stands", "chief.html.j2"),
    ("gap-list", "What is to be done: the gap list", "gaps.html.j2"),
    ("road", "The road to the first patient", "road.html.j2"),
    ("matrix", "Requirements and what was found", "matrix.html.j2"),
    ("values", "Values, their basis and their descent", "values.html.j2"),
    ("measurements", "Measurements: what each file gives", "measurements.html.j2"),
    ("evidence", "Evidence and input files", "evidence.html.j2"),
    ("sources", "Sources, and how we know them", "sources.html.j2"),
    ("words", "Words used in this binder", "words.html.j2"),
)


@cache
def _environment() -> Environment:
    environment = Environment(
        loader=FileSystemLoader(folder("templates") / "binder"), undefined=StrictUndefined, autoescape=True,
        trim_blocks=True, lstrip_blocks=True,
    )  # fmt: skip
    environment.filters["anchor"] = place
    return environment


def assessment_sheets(assessment: Assessment, rendered: Sequence[RenderedDocument]) -> tuple[Sheet, ...]:
    """Return every sheet between the contents and the first document."""
    context: dict[str, Any] = {
        "verdict": VERDICT_SENTENCES[assessment.verdict.words],
        "verdict_reasons": assessment.verdict.reasons,
        "chosen": chosen_row(assessment),
        "chosen_by": chosen_by_words(assessment),
        "arrangements": chief.arrangements(assessment),
        "shared": chief.shared_by_all(assessment),
        "why_chosen": _why_chosen(assessment),
        "not_listed": chief.arrangements_not_listed(assessment),
        "blocking": rows.gaps(assessment, blocking_only=True),
        "gaps": rows.gaps(assessment),
        "exceptions": chief.exceptions(assessment),
        "remembered": chief.remembered(assessment),
        "worst_modes": chief.worst_failure_modes(assessment),
        "figures": chief.figures(assessment),
        "movers": chief.movers(assessment),
        "schedule": assessment.schedule,
        "tasks": rows.tasks(assessment),
        "weeks": rows.commissioning_weeks(assessment),
        "matrix": rows.matrix(assessment),
        "values": rows.values(assessment),
        "not_printed": rows.values_not_printed(assessment),
        "measurements": measurement_rows(assessment),
        "evidence": rows.evidence(assessment),
        "inputs": assessment.inputs,
        "sources": rows.sources(assessment, rendered),
        "known_words": rows.KNOWN_WORDS,
        "versions": assessment.versions,
    }
    return tuple(_sheet(*each, assessment, context) for each in SHEETS)


def _why_chosen(assessment: Assessment) -> tuple[str, ...]:
    chosen = chosen_row(assessment)
    return reason_words(chosen, assessment.arrangements) if chosen else ()


def cover_sheet(assessment: Assessment, unprintable: Sequence[str]) -> Sheet:
    """Return the cover."""
    context = {
        "program": assessment.program,
        "as_of": assessment.as_of.isoformat(),
        "phase": assessment.phase,
        "verdict": VERDICT_SENTENCES[assessment.verdict.words],
        "chosen": chosen_row(assessment),
        "chosen_by": chosen_by_words(assessment),
        "caution": f"{CAUTION} {SAFETY}",
        "invented": INVENTED if assessment.invented else "",
        "versions": assessment.versions,
        "approved": sum(state.status == "approved" for state in assessment.documents),
        "documents": len(assessment.documents),
        "unprintable": unprintable,
    }
    return _sheet("cover", "Cover", "cover.html.j2", assessment, context)


def contents_sheet(assessment: Assessment, entries: Sequence[Entry]) -> Sheet:
    """Return the contents."""
    return _sheet("contents", "Contents", "contents.html.j2", assessment, {"entries": entries})


def _sheet(
    anchor: str, title: str, template: str, assessment: Assessment, context: Mapping[str, Any]
) -> Sheet:
    around = {"anchor": anchor, "title": title, "foot": foot_words(assessment)}
    return Sheet(anchor, title, _environment().get_template(template).render({**context, **around}))
