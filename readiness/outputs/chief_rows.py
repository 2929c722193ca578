"""What the chief reads on one page: arrangements, exceptions, remembered sources, risks, hours and money."""

from readiness.assessment.records import ArrangementRow, Assessment, Value, weakest
from readiness.outputs.assessment_rows import short_item
from readiness.outputs.words import (
    chosen_row,
    comparison_words,
    finding_words,
    short_titles,
    value_title,
    with_unit,
)
from readiness.quantities import Table

MOST_ARRANGEMENTS = 3
_FIGURE_WORDS = {
    "arrangement.farthest_when_cleared_cm": "farthest plane",
    "arrangement.horizontal_uniformity_percent": "unevenness across",
}
_MOST_MOVERS = 3
_MOST_RULES = 2
FIGURES = (
    ("program.expected_patients_per_year",),
    ("program.sessions_per_year",),
    ("program.treatment_days_per_year",),
    ("program.busiest_room_hours_per_week_h",),
    ("program.free_room_hours_left_h",),
    ("program.wait_weeks",),
    ("program.oncologist_needed_fte", "program.oncologist_qualified_fte"),
    ("program.physicist_needed_fte", "program.physicist_qualified_fte"),
    ("program.therapist_needed_fte", "program.therapist_qualified_fte"),
    ("program.nurse_needed_fte", "program.nurse_qualified_fte"),
    ("program.commissioning_needed_h", "program.commissioning_available_h"),
    ("program.cost_once",),
    ("program.cost_each_year",),
    ("program.cost_per_patient",),
)  # what is needed, and beside it what there is


def arrangements(assessment: Assessment) -> tuple[tuple[str, str, str, str], ...]:
    """Return the best arrangements: title, feasibility, what tells them apart, figures."""
    _, titles = short_titles(assessment.arrangements)
    return tuple(
        (
            titles[row.item],
            row.feasibility,
            _apart(row),
            "; ".join(
                f"{words} {with_unit(name, value)} ({basis})"
                for name, value, basis in row.figures
                if (words := _FIGURE_WORDS.get(name))
            ),
        )
        for row in _listed(assessment)
    )


def _apart(row: ArrangementRow) -> str:
    """Return what fails physically; of the others which rules that tell arrangements apart are not kept."""
    if row.feasibility == "not feasible here" and row.deciding:
        return finding_words(row.deciding[0])
    words = "; ".join(comparison_words(row, _MOST_RULES))
    return f"{words[:1].upper()}{words[1:]}." if words else "Keeps, or is expected to keep, all of them."


def shared_by_all(assessment: Assessment) -> str:
    """Return what all arrangements have in common, "" where there is only one."""
    common, _ = short_titles(assessment.arrangements)
    return common


def arrangements_not_listed(assessment: Assessment) -> int:
    """Return how many arrangements the chief's page leaves out."""
    return len(assessment.arrangements) - len(_listed(assessment))


def _listed(assessment: Assessment) -> list[ArrangementRow]:
    """Return the arrangement that the binder is for, the best others, and the best of each further room."""
    chosen = chosen_row(assessment)
    listed = [] if chosen is None else [chosen]
    listed += [row for row in assessment.arrangements if row not in listed][: MOST_ARRANGEMENTS - len(listed)]
    rooms = {dict(row.parts)["room"] for row in listed}
    for row in assessment.arrangements:
        room = dict(row.parts)["room"]
        if room not in rooms:
            rooms.add(room)
            listed.append(row)
    return listed


def exceptions(assessment: Assessment) -> tuple[tuple[str, str, str], ...]:
    """Return what is excepted: rule, item, message."""
    return tuple(
        (finding.rule, short_item(finding.item, assessment), finding.message)
        for finding in assessment.findings
        if finding.outcome == "excepted"
    )


def remembered(assessment: Assessment) -> tuple[tuple[str, str], ...]:
    """Return the must-rules that fail, or are expected to, and rest on recalled sources alone: id, title."""
    failing = {each.rule for each in assessment.findings if "not met" in (each.outcome, each.expected)}
    return tuple(
        (rule.id, rule.title)
        for rule in assessment.rules
        if rule.id in failing
        and rule.strength == "must"
        and rule.sources
        and all(source.known == "memory" for source in rule.sources)
    )


def worst_failure_modes(assessment: Assessment) -> Table | None:
    """Return the ranking of the failure modes that the team has scored, if there is one."""
    found = [value.value for value in assessment.values if value.name == "program.worst_failure_modes"]
    return found[0] if found and isinstance(found[0], Table) else None


def movers(assessment: Assessment) -> tuple[tuple[str, int], ...]:
    """Return what moves the date of the first patient: title of the task, by up to how many working days."""
    if assessment.schedule is None:
        return ()
    titles = {task.id: task.title for task in assessment.schedule.tasks}
    return tuple(
        (titles.get(task, task), round(days)) for task, days in assessment.schedule.movers[:_MOST_MOVERS]
    )


def figures(assessment: Assessment) -> tuple[tuple[str, str, str], ...]:
    """Return money and hours of the program: what, how much, basis."""
    found = {value.name: value for value in assessment.values if value.item.kind == "program"}
    currency = f" {found['program.currency'].value}" if "program.currency" in found else ""
    lines = []
    for names in FIGURES:
        there = [found[name] for name in names if name in found]
        if there:
            numbers = (_number(value, currency) for value in there)
            what = ", ".join(value_title(value.name).lower() for value in there)
            lines.append((_shorter(what), "; ".join(numbers), weakest([value.basis for value in there])))
    return tuple(lines)


def _number(value: Value, currency: str) -> str:
    return with_unit(value.name, value.value) + (currency if ".cost_" in value.name else "")


def _shorter(what: str) -> str:
    """Return "nurse needed, nurse qualified" as "nurse needed, qualified"."""
    first, _, second = what.partition(", ")
    return f"{first}, {second.removeprefix(first.rpartition(' ')[0]).strip()}" if second else first
