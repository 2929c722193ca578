"""The summary that a chief reads in a minute."""

import textwrap

from readiness.assessment.records import ArrangementRow, Assessment, Gap
from readiness.outputs.contract import CAUTION, INVENTED
from readiness.outputs.words import (
    VERDICT_SENTENCES,
    blocking,
    chosen_by_words,
    comparison_words,
    date_words,
    reason_words,
    short_titles,
    with_unit,
)

_MOST = 12
_MOST_ARRANGEMENTS = 4
_FIGURES = {
    "arrangement.plane_distance_cm": "plane planned at",
    "arrangement.farthest_plane_distance_cm": "farthest plane as the room is",
    "arrangement.farthest_when_cleared_cm": "with movable things out of the way",
    "arrangement.ceiling_clearance_cm": "raised hands under the ceiling by",
    "arrangement.best_tilt_deg": "evenest at a tilt of",
}


def summary(assessment: Assessment, width: int = 100) -> str:
    """Return verdict, arrangements compared, what blocks with owner and date, and what to do first."""
    parts = [_head(assessment, width), _arrangements(assessment, width), _blocking(assessment, width),
             _first_steps(assessment, width), _exceptions(assessment, width), _road(assessment, width),
             _wrapped(CAUTION, width)]  # fmt: skip
    return "\n\n".join(part for part in parts if part) + "\n"


def _wrapped(text: str, width: int, indent: str = "", first: str = "") -> str:
    return textwrap.fill(text, width, initial_indent=first or indent, subsequent_indent=indent)


def _head(assessment: Assessment, width: int) -> str:
    head = f"{assessment.program}, as of {assessment.as_of.isoformat()}, phase {assessment.phase}"
    lines = [_wrapped(head, width)]
    if assessment.invented:
        lines.append(_wrapped(INVENTED, width))
    lines += ["", _wrapped(f"VERDICT: {VERDICT_SENTENCES[assessment.verdict.words]}", width)]
    if assessment.verdict.arrangement:
        who = chosen_by_words(assessment)
        lines.append(_wrapped(f"Arrangement ({who}): {assessment.verdict.arrangement}", width))
    lines += [_wrapped(reason, width, "  ", "- ") for reason in assessment.verdict.reasons]
    return "\n".join(lines)


def _arrangements(assessment: Assessment, width: int) -> str:
    rows = assessment.arrangements
    if not rows:
        return ""
    common, titles = short_titles(rows)
    possible = [row for row in rows if row.feasibility != "not feasible here"]
    chosen = [row for row in rows if row.chosen]
    shown = chosen + [row for row in possible if row not in chosen][: _MOST_ARRANGEMENTS - len(chosen)]
    heading = "ARRANGEMENTS COMPARED, the best first"
    if chosen and chosen[0] != rows[0]:
        heading += " after the one that the department chose"
    lines = [_wrapped(f"{heading}{f'; all: {common}' if common else ''}", width)]
    for row in shown:
        lines += _arrangement(row, titles[row.item], reason_words(row, rows), width)
    left = len(possible) - len([row for row in shown if row in possible])
    if left > 0:
        words = f"{left} more are possible; the report page and assessment.json list them."
        lines.append(_wrapped(words, width, "  "))
    return "\n".join(lines + _not_feasible(assessment, width))


def _not_feasible(assessment: Assessment, width: int) -> list[str]:
    """Return each room in which arrangements fail, with what they fail by and what would have to change."""
    rules = {rule.id: rule for rule in assessment.rules}
    failed: dict[tuple[str, tuple[str, ...]], int] = {}
    for row in assessment.arrangements:
        if row.feasibility == "not feasible here" and not row.chosen:
            said = tuple(f"{each.message} {rules[each.rule].remedy}" for each in row.deciding[:1])
            key = (dict(row.parts)["room"], said)
            failed[key] = failed.get(key, 0) + 1
    lines = []
    for (room, said), number in failed.items():
        what = "1 arrangement" if number == 1 else f"{number} arrangements"
        lines.append(_wrapped(f"{room}, {what}: not feasible here. {' '.join(said)}", width, "    ", "  "))
    return lines


def _arrangement(row: ArrangementRow, title: str, reasons: tuple[str, ...], width: int) -> list[str]:
    mark = "*" if row.chosen else " "
    known = {name: (value, basis) for name, value, basis in row.figures}
    figures = "; ".join(
        f"{words} {with_unit(name, known[name][0])} ({known[name][1]})"
        for name, words in _FIGURES.items()
        if name in known
    )
    lines = [_wrapped(f"{title}: {row.feasibility}", width, "    ", f"{mark} ")]
    if figures:
        lines.append(_wrapped(figures, width, "    "))
    said = reasons or comparison_words(row)
    return lines + [_wrapped(words, width, "    ") for words in said]


def _gap_line(gap: Gap, width: int) -> str:
    when = f"; earliest {date_words(gap.earliest)}" if gap.earliest else ""
    when += f"; its task is {gap.progress}" if gap.progress else ""
    return _wrapped(f"{gap.what} [{gap.owner}{when}]", width, "    ", "  - ")


def _blocking(assessment: Assessment, width: int) -> str:
    gaps = blocking(assessment)
    later = sum(gap.strength == "must" and gap.due_later for gap in assessment.gaps)
    others = len(assessment.gaps) - len(gaps) - later
    if not assessment.gaps:
        return "No open gaps."
    counts = f"{len(gaps)} must-gaps due in this phase; {later} due later; {others} others"
    lines = [_wrapped(f"WHAT BLOCKS NOW ({counts})", width)]
    lines += [_gap_line(gap, width) for gap in gaps[:_MOST]]
    if len(gaps) > _MOST:
        lines.append(f"  and {len(gaps) - _MOST} more in the gap list")
    return "\n".join(lines)


def _first_steps(assessment: Assessment, width: int) -> str:
    schedule = assessment.schedule
    if schedule is None:
        return ""
    done = {task.id for task in schedule.tasks if task.done}
    ready = [task for task in schedule.tasks if not task.done and set(task.waits_for) <= done]
    ready.sort(key=lambda task: (task.float_days, task.id))
    if not ready:
        return ""
    lines = ["WHAT TO DO FIRST (nothing else has to be finished before these)"]
    for task in ready[:6]:
        slack = "on the critical path" if task.critical else f"{task.float_days:g} working days of float"
        lines.append(
            _wrapped(
                f"{task.title} [{task.owner}; until {task.finish.isoformat()}; {slack}]",
                width,
                "    ",
                "  - ",
            )
        )
    return "\n".join(lines)


def _exceptions(assessment: Assessment, width: int) -> str:
    excepted = [finding for finding in assessment.findings if finding.outcome == "excepted"]
    if not excepted:
        return ""
    lines = ["EXCEPTIONS IN FORCE"]
    lines += [_wrapped(f"{f.rule}, {f.item} (exception {f.exception}): {f.message}", width, "    ", "  - ")
              for f in excepted]  # fmt: skip
    return "\n".join(lines)


def _road(assessment: Assessment, width: int) -> str:
    schedule = assessment.schedule
    if schedule is None:
        return ""
    if schedule.first_patient is None:
        return "\n".join(_wrapped(remark, width) for remark in schedule.remarks)
    text = f"FIRST PATIENT not before {schedule.first_patient.isoformat()}"
    if schedule.target:
        late = schedule.working_days_late or 0
        text += f"; wanted {schedule.target.isoformat()}"
        text += f", {late} working days too late" if late > 0 else ", which the plan keeps"
    lines = [_wrapped(text, width)]
    titles = {task.id: task.title for task in schedule.tasks}
    for task, gain in schedule.movers[:3]:
        words = f"{titles.get(task, task)}: its time moves the date by up to {gain:g} working days"
        lines.append(_wrapped(words, width, "    ", "  - "))
    lines += [_wrapped(remark, width, "  ") for remark in schedule.remarks]
    return "\n".join(lines)
