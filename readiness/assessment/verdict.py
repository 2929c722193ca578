"""The answer to the chief, in words."""

from collections.abc import Mapping

from readiness.assessment.records import ArrangementRow, Finding, Rule, Verdict
from readiness.program.items import Program

MOST_ASKED = 8


def give_verdict(
    program: Program, rows: tuple[ArrangementRow, ...], chosen: ArrangementRow | None,
    findings: tuple[Finding, ...], rules: Mapping[str, Rule],
) -> Verdict:  # fmt: skip
    """
    Return the verdict of the program.

    ``ready`` only when every must-rule is met or excepted, the phase is release or operate and a release
    record exists; nothing is weighed against anything else.
    """
    arrangement = chosen.item.id if chosen else ""
    chosen_by = "" if chosen is None else "department" if chosen.chosen else "recommendation"
    if not rows:
        nothing = ("No arrangement can be formed from what the folder describes.",)
        return Verdict("not enough described", "", "", nothing)
    if chosen is None or all(row.feasibility == "not feasible here" for row in rows):
        words = tuple(f"{row.title}: {row.deciding[0].message}" for row in rows if row.deciding)[:4]
        return Verdict("no feasible arrangement", arrangement, chosen_by, words)
    if chosen.feasibility == "not feasible here":
        said = tuple(f"The chosen arrangement is not feasible: {f.message}" for f in chosen.deciding)
        return Verdict("no feasible arrangement", arrangement, chosen_by, said)
    if chosen.feasibility == "not enough described":
        return Verdict("not enough described", arrangement, chosen_by, _unknown(chosen))
    return _possible(program, arrangement, chosen_by, findings, rules)


def _unknown(chosen: ArrangementRow) -> tuple[str, ...]:
    """Return what has to be supplied before it can be said whether the arrangement is possible, each once."""
    asked = tuple(dict.fromkeys(cause.words for finding in chosen.deciding for cause in finding.causes))
    left = len(asked) - len(asked[:MOST_ASKED])
    return (*asked[:MOST_ASKED], f"And {left} more; the gap list names them.") if left else asked


def _possible(
    program: Program, arrangement: str, chosen_by: str, findings: tuple[Finding, ...],
    rules: Mapping[str, Rule],
) -> Verdict:  # fmt: skip
    musts = [finding for finding in findings if rules[finding.rule].strength == "must"]
    failed = sum(finding.outcome == "not met" for finding in musts)
    unknown = sum(finding.outcome == "not assessed" for finding in musts)
    said = []
    if failed:
        said.append(f"{failed} must-rule findings are not met.")
    if unknown:
        said.append(f"{unknown} must-rule findings are not assessed, because something is missing.")
    root = program.find("program", "program")
    phase = str(root.get("phase") or "") if root else ""
    if phase not in {"release", "operate"}:
        said.append(f"The phase is {phase or 'not stated'}, not release.")
    if not any(item.get("type") == "release-record" and item.get("approved_by") and item.get("approved_on")
               for item in program.of_kind("evidence")):  # fmt: skip
        said.append("There is no approved release record.")
    if chosen_by == "recommendation":
        said.append("The department has not chosen an arrangement; the recommended one is shown.")
    words = "ready when gaps close" if said else "ready"
    return Verdict(words, arrangement, chosen_by, tuple(said))
