"""How an assessment's pieces read on every output: one wording for terminal, page, workbook and binder."""

from collections.abc import Iterable, Sequence
from datetime import date
from typing import Any

from readiness.assessment.records import ArrangementRow, Assessment, Finding, Gap, Ref, Rule
from readiness.assessment.wording import in_words
from readiness.sources import HOW_KNOWN
from readiness.units import unit_of, words_of

VERDICT_SENTENCES = {
    "ready": "Ready: every must-rule is met or excepted and the program has been released.",
    "ready when gaps close": "Ready when gaps close: an arrangement is possible; what is missing is listed.",
    "no feasible arrangement": "No feasible arrangement: every described arrangement fails physically.",
    "not enough described": "Not enough described: the folder does not yet say enough to judge.",
}


def with_unit(name: str, value: Any) -> str:
    """Return a value with the unit of its name."""
    unit = unit_of(name)
    text = in_words(value)
    if isinstance(value, bool) or not isinstance(value, (int, float)):
        return text
    return f"{text}{unit}" if unit == "°" else f"{text} {unit}".strip()


def value_title(name: str) -> str:
    """Return the name of a value as a heading."""
    return words_of(name).capitalize()


def known_words(rule: Rule) -> str:
    """Return where a rule comes from and how we know, in one line."""
    return "; ".join(
        f"{each.key}, {each.at} ({each.known})" if each.key != "practice" else "common practice"
        for each in rule.sources
    )


def how_known(known: str) -> str:
    """Return what a word for knowledge means."""
    return HOW_KNOWN.get(known, known)


def item_words(item: Ref) -> str:
    """Return an item for people; the program itself is not named."""
    if item.id in {"all", "none"}:
        return item.kind.replace("_", " ")
    return str(item)


def chosen_row(assessment: Assessment) -> ArrangementRow | None:
    """Return the row of the chosen or recommended arrangement."""
    wanted = assessment.verdict.arrangement
    return next((row for row in assessment.arrangements if row.item.id == wanted), None)


def shortened(text: str, assessment: Assessment) -> str:
    """Return a sentence in which the arrangement that an output is for is not spelled out each time."""
    chosen = assessment.verdict.arrangement
    if not chosen:
        return text
    return text.replace(f" from {chosen}", "").replace(f"arrangement {chosen}", "this arrangement")


def short_titles(rows: Iterable[ArrangementRow]) -> tuple[str, dict[Ref, str]]:
    """Return what all arrangements have in common, and each one's title without it."""
    pieces = {row.item: row.title.split(", ") for row in rows}
    first = next(iter(pieces.values()), [])
    common = [each for each in first if all(each in others for others in pieces.values())]
    if len(pieces) < 2 or common == first:
        return "", {ref: ", ".join(own) for ref, own in pieces.items()}
    return ", ".join(common), {
        ref: ", ".join(each for each in own if each not in common) for ref, own in pieces.items()
    }


def reason_words(row: ArrangementRow, rows: Sequence[ArrangementRow]) -> tuple[str, ...]:
    """Return why an arrangement stands where it stands, the others named by what tells them apart."""
    _, titles = short_titles(rows)
    said = []
    for reason in row.reasons:
        for other in rows:
            reason = reason.replace(other.title, titles[other.item])
        said.append(reason)
    return tuple(said)


def comparison_words(row: ArrangementRow, most: int | None = None) -> tuple[str, ...]:
    """Return the rules that tell arrangements apart and that one does not keep, or has no answer to."""
    said = []
    if row.against:
        said.append(f"does not keep, or is not expected to keep: {_first_of(row.against, most)}")
    if row.unanswered:
        said.append(f"has no answer yet to: {_first_of(row.unanswered, most)}")
    return tuple(said)


def _first_of(rules: Sequence[str], most: int | None) -> str:
    named = ", ".join(rules[:most])
    left = len(rules) - len(rules[:most])
    return f"{named} and {left} more" if left else named


def chosen_by_words(assessment: Assessment) -> str:
    """Return by whom the arrangement of the documents was chosen; too little known is no recommendation."""
    if assessment.verdict.chosen_by == "department":
        return "chosen by the department"
    if assessment.verdict.words == "not enough described":
        return "the first that was described; too little is known to recommend one"
    return "recommended here; the department has not chosen"


def blocking(assessment: Assessment) -> tuple[Gap, ...]:
    """Return the must-gaps that are due in the phase where the program stands."""
    return tuple(gap for gap in assessment.gaps if gap.strength == "must" and not gap.due_later)


def date_words(day: date | None) -> str:
    """Return a date, or a dash where there is none."""
    return day.isoformat() if day else "-"


def when_words(gap: Gap) -> str:
    """Return the earliest day of a gap; or what is recorded of its task, though the gap is open."""
    if gap.earliest is None and gap.progress:
        return f"task {gap.progress}"
    return date_words(gap.earliest)


def finding_words(finding: Finding) -> str:
    """Return a finding's message; a number that is not measured says so."""
    if not finding.expected:
        return finding.message
    return f"{finding.message} That is {finding.basis}, not measured."


def outcome_words(finding: Finding) -> str:
    """Return an outcome with what to expect beside it."""
    return f"{finding.outcome} (expected: {finding.expected})" if finding.expected else finding.outcome
