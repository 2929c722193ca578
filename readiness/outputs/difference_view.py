"""The difference of two assessments in words, as JSON and as a page."""

import json
import textwrap
from collections.abc import Iterable
from dataclasses import dataclass

from readiness.assessment.difference import (
    Change,
    ChangedValue,
    ColumnChange,
    Difference,
    DocumentChange,
    TurnedFinding,
    TurnedGap,
)
from readiness.outputs.contract import CAUTION, plain
from readiness.outputs.holes import plain as escaped
from readiness.outputs.plain_page import section, whole_page
from readiness.outputs.words import item_words, with_unit
from readiness.quantities import Table
from readiness.units import words_of


@dataclass(frozen=True)
class Group:
    """One kind of difference: heading and one line for each."""

    heading: str
    lines: tuple[str, ...]


NOW = "now"  # what stands before the second side


def groups(found: Difference, now: str = NOW) -> tuple[Group, ...]:
    """Return what differs in the order in which people ask for it, without empty groups."""
    all_groups = (
        Group("Verdict", tuple(_pair(found, now))),
        Group("Made by another version (differences may come from it)", _changes(found.versions, now)),
        Group("Findings that turned", tuple(finding_line(each, now) for each in found.findings)),
        Group("Gaps opened", tuple(map(_gap, found.gaps_opened))),
        Group("Gaps closed", tuple(map(_gap, found.gaps_closed))),
        Group("Documents", tuple(_document(each, now) for each in found.documents)),
        Group("Values", tuple(value_line(each, now) for each in found.values)),
        Group("Input files that differ", found.inputs),
        Group("Details that differ though no result does", found.elsewhere),
    )
    return tuple(group for group in all_groups if group.lines)


def _pair(found: Difference, now: str) -> Iterable[str]:
    said = (("", found.verdict), ("arrangement ", found.arrangement), ("first patient ", found.first_patient))
    for what, (before, after) in said:
        if before != after:
            yield f"{what}{before or 'none'}, {now} {after or 'none'}"


def _changes(changes: Iterable[Change], now: str) -> tuple[str, ...]:
    return tuple(f"{each.what} {each.before}, {now} {each.after}" for each in changes)


def _document(each: DocumentChange, now: str) -> str:
    said = [each.what] if each.what else []
    return f"{each.number} {each.title}: {'; '.join((*said, *_changes(each.changes, now)))}"


def finding_line(found: TurnedFinding, now: str = NOW) -> str:
    """Return a turned finding on one line."""
    strength = f" ({found.strength})" if found.strength else ""
    return (
        f"{found.rule}{strength}, {item_words(found.item)}: {found.before or 'not there'}, "
        f"{now} {found.after or 'not there'}"
    )


def _gap(gap: TurnedGap) -> str:
    return f"{gap.what} [{gap.strength}; {gap.owner}]"


def value_line(each: ChangedValue, now: str = NOW) -> str:
    """Return a changed value on one line, with the size of the change."""
    head = f"{each.name} of {item_words(each.item)}"
    if isinstance(each.before, Table) and isinstance(each.after, Table):
        return f"{head}: {_table_words(each, now)}"
    before = _side(each.name, each.before, each.basis_before)
    after = _side(each.name, each.after, each.basis_after)
    by = f", by {with_unit(each.name, each.change)}" if each.change else ""
    return f"{head}: {before}, {now} {after}{by}"


def _side(name: str, value: object, basis: str) -> str:
    if value is None:
        return "unknown"
    if isinstance(value, Table):
        return f"a table of {len(value.rows)} rows ({basis})"
    return f"{with_unit(name, value)} ({basis})"


def _table_words(each: ChangedValue, now: str) -> str:
    if each.columns:
        return "its table differs: " + "; ".join(map(_column, each.columns))
    if each.before == each.after:
        return f"its table was {each.basis_before}, {now} {each.basis_after}"
    return f"its table had {len(each.before.rows)} rows, {now} {len(each.after.rows)}"


def _column(each: ColumnChange) -> str:
    rows = f"{words_of(each.column)} in {each.rows} row{'s' if each.rows != 1 else ''}"
    return rows if each.largest is None else f"{rows} by up to {with_unit(each.column, each.largest)}"


def difference_text(found: Difference, first: str, second: str, width: int) -> str:
    """Return what differs, for the terminal."""
    if found.is_none:
        return textwrap.fill(f"{first} and {second} say the same.{_all_the_same(found)}", width) + "\n"
    lines = [textwrap.fill(f"From {first} to {second}", width)]
    for group in groups(found):
        lines += ["", f"{group.heading.upper()} ({len(group.lines)})"]
        lines += [
            textwrap.fill(
                each, width, initial_indent="  - ", subsequent_indent="    ", break_on_hyphens=False
            )
            for each in group.lines
        ]
    return "\n".join([*lines, "", textwrap.fill(CAUTION, width)]) + "\n"


def _all_the_same(found: Difference) -> str:
    said = ""
    if found.inputs:
        said += f" Input files that differ all the same: {', '.join(found.inputs)}."
    if found.elsewhere:
        said += f" Details differ, such as the lines where something stands: {', '.join(found.elsewhere)}."
    return said


def difference_json(found: Difference) -> str:
    """Return what differs, for programs."""
    data = {"caution": CAUTION, "same": found.is_none, **plain(found)}
    return json.dumps(data, ensure_ascii=False, indent=1) + "\n"


def difference_section(found: Difference) -> str:
    """Return what differs as a section of a page."""
    parts = []
    for group in groups(found):
        entries = "".join(f"<li>{escaped(line)}</li>" for line in group.lines)
        parts.append(f"<h3>{escaped(group.heading)} ({len(group.lines)})</h3><ul>{entries}</ul>")
    body = "".join(parts) or f"<p>They say the same.{escaped(_all_the_same(found))}</p>"
    return section("difference", "What differs", body)


def difference_page(found: Difference, first: str, second: str) -> bytes:
    """Return a page of its own."""
    lead = f"<p>From <b>{escaped(first)}</b> to <b>{escaped(second)}</b>.</p>"
    return whole_page("What differs between two assessments", lead + difference_section(found))
