"""The difference of two assessments in words and as JSON."""

import json
import textwrap

from readiness.assessment.difference import ChangedValue, Difference
from readiness.outputs.contract import CAUTION, plain
from readiness.outputs.words import with_unit
from readiness.quantities import Table


def difference_text(found: Difference, first: str, second: str, width: int) -> str:
    """Return what differs, for the terminal."""
    if found.is_none:
        files = f" {len(found.inputs)} input files differ all the same." if found.inputs else ""
        return f"{first} and {second} say the same.{files}\n"
    lines = [f"From {first} to {second}"]
    if found.verdict[0] != found.verdict[1]:
        lines += ["", f"VERDICT: {found.verdict[0]}, now {found.verdict[1]}"]
    lines += _part("MADE BY ANOTHER VERSION (differences may come from it)", list(found.versions), width)
    lines += _part(
        "FINDINGS THAT TURNED",
        [
            f"{f.rule}, {f.item}: {f.before or 'not there'}, now {f.after or 'not there'}"
            for f in found.findings
        ],
        width,
    )
    lines += _part("GAPS OPENED", list(found.gaps_opened), width)
    lines += _part("GAPS CLOSED", list(found.gaps_closed), width)
    lines += _part("DOCUMENTS", [f"{number}: {words}" for number, words in found.documents], width)
    lines += _part("VALUES", [_value(each) for each in found.values], width)
    lines += _part("INPUT FILES THAT DIFFER", list(found.inputs), width)
    return "\n".join([*lines, "", textwrap.fill(CAUTION, width)]) + "\n"


def _part(heading: str, entries: list[str], width: int) -> list[str]:
    if not entries:
        return []
    told = [textwrap.fill(each, width, initial_indent="  - ", subsequent_indent="    ") for each in entries]
    return ["", f"{heading} ({len(entries)})", *told]


def _value(each: ChangedValue) -> str:
    if isinstance(each.before, Table) or isinstance(each.after, Table):
        return f"{each.name} of {each.item}: its table changed"
    before = (
        "unknown" if each.before is None else f"{with_unit(each.name, each.before)} ({each.basis_before})"
    )
    after = "unknown" if each.after is None else f"{with_unit(each.name, each.after)} ({each.basis_after})"
    by = f", by {with_unit(each.name, each.change)}" if each.change else ""
    return f"{each.name} of {each.item}: {before}, now {after}{by}"


def difference_json(found: Difference) -> str:
    """Return what differs, for programs."""
    return json.dumps({"same": found.is_none, **plain(found)}, ensure_ascii=False, indent=1) + "\n"
