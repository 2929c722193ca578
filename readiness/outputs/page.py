"""The report page: one self-contained HTML file for the chief's meeting, with no request to anywhere."""

import base64
import hashlib
from collections.abc import Mapping, Sequence

from jinja2 import Environment, FileSystemLoader, StrictUndefined
from markupsafe import Markup

from readiness.assessment.records import Assessment
from readiness.assessment.what_if import Variant
from readiness.outputs import page_rows
from readiness.outputs.assessment_rows import KNOWN_WORDS, commissioning_weeks, short_item
from readiness.outputs.contract import CAUTION, INVENTED
from readiness.outputs.measurement_rows import measurement_rows
from readiness.outputs.page_tables import people_and_money
from readiness.outputs.study_rows import study_rows
from readiness.outputs.what_if_rows import FIRST_PATIENT, questions
from readiness.outputs.words import (
    VERDICT_SENTENCES,
    blocking,
    chosen_by_words,
    chosen_row,
    comparison_words,
    shortened,
    value_title,
    with_unit,
)
from readiness.resources import folder, template_file
from readiness.units import printed, unit_of, words_of


def make_page(
    assessment: Assessment, pictures: Mapping[str, str], variants: Sequence[Variant] = ()
) -> bytes:
    """
    Return the page.

    Args:
        assessment: What it shows.
        pictures: Drawings by name, as SVG of our own with title and description inside.
        variants: Assessments with one choice changed.
    """
    gaps = page_rows.gap_lines(assessment)
    script = _text("report.js")
    html = _environment(assessment).get_template("report.html.j2").render(
        assessment=assessment,
        css=Markup(_text("report.css")),  # noqa: S704 - our own file
        js=Markup(script),  # noqa: S704 - our own file
        js_hash=_hash(script),
        caution=CAUTION,
        invented=INVENTED,
        verdict=VERDICT_SENTENCES[assessment.verdict.words],
        chosen=chosen_row(assessment),
        chosen_by=chosen_by_words(assessment),
        schedule=assessment.schedule,
        arrangements=page_rows.possible(assessment),
        ruled_out=page_rows.ruled_out(assessment),
        pictures=page_rows.drawn(pictures),
        study=study_rows(assessment),
        measurements=measurement_rows(assessment),
        what_if=questions(variants),
        first_patient=FIRST_PATIENT,
        blocking=blocking(assessment),
        gaps=gaps,
        filters=page_rows.choices(gaps),
        barriers=page_rows.barriers(assessment),
        road=page_rows.road(assessment.schedule),
        movers=page_rows.movers(assessment.schedule),
        weeks=commissioning_weeks(assessment),
        people_and_money=people_and_money(assessment),
        excepted=[finding for finding in assessment.findings if finding.outcome == "excepted"],
        topics=page_rows.requirements(assessment),
        how_known=KNOWN_WORDS,
        sources=page_rows.cited(assessment),
    )  # fmt: skip
    return html.encode("utf-8")


def _environment(assessment: Assessment) -> Environment:
    environment = Environment(
        loader=FileSystemLoader(folder("templates") / "page"), undefined=StrictUndefined, autoescape=True,
        trim_blocks=True,
    )  # fmt: skip
    environment.filters.update(
        title_of=value_title, with_unit=with_unit, column_title=_column_title, cell=_cell,
        compared=comparison_words, outcomes=page_rows.outcomes,
        item_words=lambda item: short_item(item, assessment),
        short=lambda text: shortened(text, assessment),
    )  # fmt: skip
    return environment


def _text(name: str) -> str:
    return template_file("page", name).read_text(encoding="utf-8")


def _hash(script: str) -> str:
    """Return the hash by which the page allows its own script and no other."""
    return "sha256-" + base64.b64encode(hashlib.sha256(script.encode("utf-8")).digest()).decode("ascii")


def _column_title(name: str) -> str:
    unit = unit_of(name)
    return words_of(name).capitalize() + (f" [{unit}]" if unit else "")


def _cell(entry: object) -> str:
    if entry is None:
        return "not known"
    if isinstance(entry, bool):
        return "yes" if entry else "no"
    return printed(entry) if isinstance(entry, (int, float)) else str(entry)
