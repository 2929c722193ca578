"""What the chief reads on one page: arrangements, exceptions, remembered sources, risks, hours and money."""

from readiness.assessment.records import ArrangementRow, Assessment
from readiness.outputs.assessment_rows import short_item
from readiness.outputs.words import chosen_row, finding_words, value_title, with_unit
from readiness.quantities import Table

MOST_ARRANGEMENTS = 3
FIGURES = (
    "program.expected_patients_per_year",
    "program.sessions_per_year",
    "program.treatment_days_per_year",
    "program.busiest_room_hours_per_week_h",
    "program.free_room_hours_left_h",
    "program.wait_weeks",
    *(
        f"program.{profession}_{what}_fte"
        for profession in ("oncologist", "physicist", "therapist", "nurse")
        for what in ("needed", "qualified")
    ),
    "program.commissioning_needed_h",
    "program.commissioning_available_h",
    "program.cost_once",
    "program.cost_each_year",
    "program.cost_per_patient",
)


def arrangements(assessment: Assessment) -> tuple[tuple[str, str, str, str], ...]:
    """Return the best arrangements: title, feasibility, what decides, figures."""
    return tuple(
        (
            row.title,
            row.feasibility,
            finding_words(row.deciding[0]) if row.deciding else "",
            "; ".join(
                f"{value_title(name).lower()} {with_unit(name, value)} ({basis})"
                for name, value, basis in row.figures[:3]
            ),
        )
        for row in _listed(assessment)
    )


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


def figures(assessment: Assessment) -> tuple[tuple[str, str, str], ...]:
    """Return money and hours of the program: what, how much, basis."""
    found = {value.name: value for value in assessment.values if value.item.kind == "program"}
    currency = f" {found['program.currency'].value}" if "program.currency" in found else ""
    return tuple(
        (
            value_title(name).lower(),
            with_unit(name, found[name].value) + (currency if ".cost_" in name else ""),
            found[name].basis,
        )
        for name in FIGURES
        if name in found
    )
