"""The lines of the report page, ready to print; nothing is worked out here but where a bar begins."""

import re
from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from datetime import date, timedelta
from html import unescape

from markupsafe import Markup

from readiness.assessment.records import (
    PHASES,
    STRENGTHS,
    ArrangementRow,
    Assessment,
    Finding,
    Schedule,
    Value,
)
from readiness.outputs.assessment_rows import MatrixRow, SourceRow, matrix, short_item, sources
from readiness.outputs.thumbnails import thumbnails
from readiness.outputs.words import chosen_row, finding_words, known_words, shortened
from readiness.quantities import Table

_DECIDING = 3
_BASIS_WORDS = {
    "measured": "measured",
    "stated": "stated by the department, not measured",
    "predicted": "predicted, not measured",
    "assumed": "assumed, not measured: at least one default that nobody has stated stands behind them",
}


@dataclass(frozen=True)
class Arrangement:
    """One arrangement with the first of the findings that decide on it."""

    row: ArrangementRow
    deciding: tuple[tuple[str, str], ...]  # sentence; rule, strength, source and how we know it
    more: int
    plan: Markup


@dataclass(frozen=True)
class Group:
    """The arrangements of one room that are not feasible for the same reasons."""

    room: str
    titles: tuple[str, ...]
    deciding: tuple[tuple[str, str], ...]


@dataclass(frozen=True)
class GapLine:
    """One gap; ``phase_order`` and ``strength_order`` are what its columns sort by."""

    what: str
    item: str
    owner: str
    earliest: str
    progress: str
    strength: str
    strength_order: int
    phase: str
    phase_order: int
    due: str
    subject: str
    closes: tuple[str, ...]


@dataclass(frozen=True)
class Bar:
    """One task of the road; places in hundredths of the picture's width."""

    title: str
    owner: str
    start: str
    finish: str
    float: str
    lead_time: str
    state: str
    critical: bool
    done: bool
    x: str
    width: str


@dataclass(frozen=True)
class Road:
    """The bars with the days between which they are drawn."""

    bars: tuple[Bar, ...]
    first: str
    last: str
    months: tuple[str, ...]
    wanted: str


@dataclass(frozen=True)
class Picture:
    """A drawing with its title and its description in words."""

    svg: Markup
    title: str
    words: str


def possible(assessment: Assessment) -> tuple[Arrangement, ...]:
    """Return the arrangements that are not ruled out, the chosen one first even if it is."""
    chosen = chosen_row(assessment)
    rows = [chosen] if chosen else []
    rows += [
        row for row in assessment.arrangements if row != chosen and row.feasibility != "not feasible here"
    ]
    plans = thumbnails(rows)
    return tuple(
        Arrangement(
            row, _deciding(assessment, row.deciding[:_DECIDING]), len(row.deciding[_DECIDING:]),
            Markup(plans.get(row.item.id, "")),  # noqa: S704 - our own drawing
        )
        for row in rows
    )  # fmt: skip


def ruled_out(assessment: Assessment) -> tuple[Group, ...]:
    """Return the other arrangements in groups of one room and one set of reasons."""
    groups: dict[tuple[str, tuple[tuple[str, str], ...]], list[str]] = {}
    chosen = chosen_row(assessment)
    for row in assessment.arrangements:
        if row.feasibility == "not feasible here" and row != chosen:
            key = (dict(row.parts).get("room", ""), _deciding(assessment, row.deciding))
            groups.setdefault(key, []).append(row.title)
    return tuple(Group(room, tuple(titles), why) for (room, why), titles in groups.items())


def _deciding(assessment: Assessment, findings: Iterable[Finding]) -> tuple[tuple[str, str], ...]:
    rules = {rule.id: rule for rule in assessment.rules}
    return tuple(
        (
            finding_words(each),
            f"{each.outcome}; {each.rule}, {rules[each.rule].strength}; {known_words(rules[each.rule])}",
        )
        for each in findings
    )


def gap_lines(assessment: Assessment) -> tuple[GapLine, ...]:
    """Return every gap in the order of the assessment."""
    return tuple(
        GapLine(
            what=shortened(gap.what, assessment), item=short_item(gap.item, assessment), owner=gap.owner,
            earliest=gap.earliest.isoformat() if gap.earliest else "", progress=gap.progress,
            strength=gap.strength,
            strength_order=STRENGTHS.index(gap.strength), phase=gap.phase,
            phase_order=PHASES.index(gap.phase),
            due="later" if gap.due_later else "now", subject=gap.topic,
            closes=tuple(dict.fromkeys(rule for rule, _ in gap.findings)),
        )
        for gap in assessment.gaps
    )  # fmt: skip


def choices(lines: tuple[GapLine, ...]) -> tuple[tuple[str, str, tuple[str, ...]], ...]:
    """Return what the gaps can be filtered by: name, label, options."""
    strengths, phases = {line.strength for line in lines}, {line.phase for line in lines}
    return (
        ("owner", "Owner", tuple(sorted({line.owner for line in lines}))),
        ("strength", "Strength", tuple(each for each in STRENGTHS if each in strengths)),
        ("subject", "Subject", tuple(sorted({line.subject for line in lines}))),
        ("phase", "Phase", tuple(each for each in PHASES if each in phases)),
        ("due", "Due", tuple(sorted({line.due for line in lines}, reverse=True))),
    )


def barriers(assessment: Assessment) -> tuple[Table, str] | None:
    """Return the table of barriers before and after, and its basis in words."""
    for value in assessment.values:
        if _is_of(value, "arrangement.barriers", assessment) and isinstance(value.value, Table):
            return value.value, _BASIS_WORDS[value.basis]
    return None


def _is_of(value: Value, name: str, assessment: Assessment) -> bool:
    return value.name == name and value.item.id == assessment.verdict.arrangement


def road(schedule: Schedule | None) -> Road | None:
    """Return the tasks as bars between the first and the last day, or None where nothing is planned."""
    if schedule is None or not schedule.tasks:
        return None
    first = min(task.start for task in schedule.tasks)
    last = max([task.finish for task in schedule.tasks] + ([schedule.target] if schedule.target else []))
    days = (last - first).days + 1

    def place(day: date) -> str:
        return f"{100 * (day - first).days / days:.2f}"

    bars = tuple(
        Bar(
            task.title, task.owner, task.start.isoformat(), task.finish.isoformat(),
            f"{task.float_days:g}", task.lead_time, task.state, task.critical, task.done, place(task.start),
            f"{max(0.6, 100 * ((task.finish - task.start).days + 1) / days):.2f}",
        )
        for task in sorted(schedule.tasks, key=lambda task: (task.start, task.finish, task.id))
    )  # fmt: skip
    wanted = place(schedule.target) if schedule.target and schedule.target >= first else ""
    return Road(bars, first.isoformat(), last.isoformat(), tuple(map(place, _months(first, last))), wanted)


def movers(schedule: Schedule | None) -> tuple[tuple[str, str], ...]:
    """Return the tasks that move the date most: title, working days."""
    if schedule is None:
        return ()
    titles = {task.id: task.title for task in schedule.tasks}
    return tuple((titles.get(task, task), f"{gain:g}") for task, gain in schedule.movers)


def _months(first: date, last: date) -> list[date]:
    starts, day = [], first.replace(day=1)
    while (day := (day + timedelta(days=32)).replace(day=1)) <= last:
        starts.append(day)
    return starts


def requirements(assessment: Assessment) -> dict[str, list[MatrixRow]]:
    """Return the requirement matrix by topic."""
    topics = {rule.id: rule.topic for rule in assessment.rules}
    found: dict[str, list[MatrixRow]] = {}
    for line in matrix(assessment):
        found.setdefault(topics[line.rule], []).append(line)
    return found


def outcomes(lines: list[MatrixRow]) -> str:
    """Return how many lines have which outcome, in words."""
    order = ("not met", "not assessed", "excepted", "met", "not applicable")
    plain = [line.outcome.partition(" (")[0] for line in lines]
    return ", ".join(f"{plain.count(word)} {word}" for word in order if word in plain)


def cited(assessment: Assessment) -> tuple[SourceRow, ...]:
    """Return the publications, then what the department cites itself under its local rules."""
    rows = sources(assessment, ())
    listed = {row.key for row in rows}
    local: dict[str, dict[str, list[str]]] = {}
    for rule in assessment.rules:
        for source in rule.sources:
            if source.key not in listed:
                local.setdefault(source.key, {}).setdefault(source.known, []).append(rule.id)
    return rows + tuple(
        SourceRow(key, "as cited by the department", "", ", ".join(found), _flat(found.values()), ())
        for key, found in sorted(local.items())
    )


def _flat(groups: Iterable[list[str]]) -> tuple[str, ...]:
    return tuple(dict.fromkeys(each for group in groups for each in group))


_NOT_ON_THE_PAGE = ("six-positions", "in-vivo-body", "road")  # for the bedside, and drawn again with the road


def drawn(pictures: Mapping[str, str]) -> tuple[Picture, ...]:
    """Return the drawings for a meeting, with the title and description that stand in each."""
    return tuple(
        Picture(Markup(svg), _inside(svg, "title") or name, _inside(svg, "desc"))  # noqa: S704 - our own
        for name, svg in pictures.items()
        if name not in _NOT_ON_THE_PAGE
    )


def _inside(svg: str, tag: str) -> str:
    found = re.search(rf"<{tag}>(.*?)</{tag}>", svg, re.DOTALL)
    return unescape(found[1]).strip() if found else ""
