"""The report page: one self-contained HTML file for the chief's meeting, with no request to anywhere."""

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

from jinja2 import Environment, FileSystemLoader, StrictUndefined
from markupsafe import Markup

from readiness.assessment.records import Assessment, Finding, Gap, Rule, Schedule
from readiness.outputs.contract import CAUTION, INVENTED
from readiness.outputs.words import (
    VERDICT_SENTENCES,
    blocking,
    chosen_row,
    finding_words,
    item_words,
    known_words,
    outcome_words,
    value_title,
    with_unit,
)
from readiness.quantities import Table
from readiness.resources import folder, template_file
from readiness.sources import HOW_KNOWN, publications
from readiness.units import printed, unit_of, words_of

_FILTERS = (
    ("owner", "Owner"),
    ("strength", "Strength"),
    ("subject", "Subject"),
    ("phase", "Phase"),
    ("due", "Due"),
)
_BAR_WIDTH = 300


@dataclass(frozen=True)
class Bar:
    """One task of the road as it is drawn, in units of the picture."""

    title: str
    owner: str
    start: str
    finish: str
    float: str
    lead_time: str
    critical: bool
    done: bool
    x: str
    width: str


@dataclass(frozen=True)
class GapLine:
    """One gap with the rules it closes."""

    gap: Gap
    closes: tuple[str, ...]

    def __getattr__(self, name: str) -> Any:
        """Return an attribute of the gap itself."""
        return getattr(self.gap, name)


def make_page(assessment: Assessment, pictures: Mapping[str, str]) -> bytes:
    """
    Return the page.

    Args:
        assessment: What it shows.
        pictures: Drawings by their captions, as SVG of our own.
    """
    environment = Environment(
        loader=FileSystemLoader(folder("templates") / "page"), undefined=StrictUndefined, autoescape=True,
        trim_blocks=True,
    )  # fmt: skip
    environment.filters.update(
        said=finding_words, title_of=value_title, with_unit=with_unit, item_words=item_words,
        outcome=outcome_words, known=known_words, column_title=_column_title, cell=_cell,
    )  # fmt: skip
    html = environment.get_template("report.html.j2").render(
        assessment=assessment,
        css=Markup(template_file("page", "report.css").read_text(encoding="utf-8")),
        js=Markup(template_file("page", "report.js").read_text(encoding="utf-8")),
        caution=CAUTION,
        invented=INVENTED,
        verdict=VERDICT_SENTENCES[assessment.verdict.words],
        chosen=chosen_row(assessment),
        schedule=assessment.schedule,
        arrangements=_chosen_first(assessment),
        pictures=[(name, Markup(svg)) for name, svg in pictures.items()],
        blocking=blocking(assessment),
        gaps=[
            GapLine(gap, tuple(dict.fromkeys(rule for rule, _ in gap.findings))) for gap in assessment.gaps
        ],
        filters=_filters(assessment),
        barriers=_barriers(assessment),
        bars=_bars(assessment.schedule),
        excepted=[finding for finding in assessment.findings if finding.outcome == "excepted"],
        topics=_topics(assessment),
        how_known=tuple(HOW_KNOWN.items()),
        publications=_cited(assessment),
    )
    return html.encode("utf-8")


def _column_title(name: str) -> str:
    unit = unit_of(name)
    return words_of(name).capitalize() + (f" [{unit}]" if unit else "")


def _cell(entry: object) -> str:
    if entry is None:
        return "-"
    if isinstance(entry, bool):
        return "yes" if entry else "no"
    return printed(entry) if isinstance(entry, (int, float)) else str(entry)


def _chosen_first(assessment: Assessment) -> list[Any]:
    chosen = chosen_row(assessment)
    others = [row for row in assessment.arrangements if row != chosen]
    return ([chosen] if chosen else []) + others


def _filters(assessment: Assessment) -> list[tuple[str, str, list[str]]]:
    found: dict[str, set[str]] = {name: set() for name, _ in _FILTERS}
    for gap in assessment.gaps:
        entries = (gap.owner, gap.strength, gap.topic, gap.phase, "later" if gap.due_later else "now")
        for (name, _), entry in zip(_FILTERS, entries, strict=True):
            found[name].add(entry)
    return [(name, label, sorted(found[name])) for name, label in _FILTERS]


def _barriers(assessment: Assessment) -> Table | None:
    for value in assessment.values:
        if value.name == "arrangement.barriers" and value.item.id == assessment.verdict.arrangement:
            return value.value if isinstance(value.value, Table) else None
    return None


def _bars(schedule: Schedule | None) -> list[Bar]:
    if schedule is None or not schedule.tasks:
        return []
    first = min(task.start for task in schedule.tasks)
    days = max(1, (max(task.finish for task in schedule.tasks) - first).days + 1)
    scale = _BAR_WIDTH / days
    return [
        Bar(
            task.title, task.owner, task.start.isoformat(), task.finish.isoformat(),
            f"{task.float_days:g} working days", task.lead_time, task.critical, task.done,
            f"{(task.start - first).days * scale:.2f}",
            f"{max(2.0, ((task.finish - task.start).days + 1) * scale):.2f}",
        )
        for task in sorted(schedule.tasks, key=lambda task: (task.start, task.finish, task.id))
    ]  # fmt: skip


def _topics(assessment: Assessment) -> list[tuple[str, list[tuple[Rule, Finding, bool]]]]:
    rules = {rule.id: rule for rule in assessment.rules}
    topics: dict[str, list[tuple[Rule, Finding, bool]]] = {}
    seen: set[str] = set()
    for finding in assessment.findings:
        rule = rules[finding.rule]
        topics.setdefault(rule.topic, []).append((rule, finding, rule.id not in seen))
        seen.add(rule.id)
    return list(topics.items())


def _cited(assessment: Assessment) -> list[tuple[str, str]]:
    keys = {source.key for rule in assessment.rules for source in rule.sources}
    keys |= {value.source for value in assessment.values if value.source}
    return [(key, entry.citation) for key, entry in sorted(publications().items()) if key in keys]
