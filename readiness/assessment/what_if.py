"""
What would be if one choice were another: the whole assessment again, with the plane distance, the beam or the
number of patients changed.

A measurement that no longer agrees with the changed choice does not count there, so that what was measured
becomes a prediction and no rule that asks for a measurement is met by it.
"""

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from datetime import date

from readiness.assessment.assessment import assess
from readiness.assessment.difference import TurnedFinding, difference
from readiness.assessment.graph import Memory
from readiness.assessment.records import PROGRAM, ArrangementRow, Assessment, Value
from readiness.program.items import FieldValue, Item, Program, Stated
from readiness.quantities import Table
from readiness.units import printed

DISTANCE_STEPS_CM = (-50.0, -25.0, 25.0, 50.0)
PATIENT_FACTORS = (0.5, 1.5, 2.0, 3.0)
FIGURES = (
    "arrangement.vertical_uniformity_percent",
    "arrangement.horizontal_uniformity_percent",
    "arrangement.best_tilt_deg",
    "arrangement.dose_at_4_mm_percent",
    "arrangement.later_session_min",
    "program.busiest_room_hours_per_week_h",
    "program.wait_weeks",
    "program.started_in_time_percent",
    "program.places_needed",
    "arrangement.worst_goal_ratio",
)
_WANTED = ("arrangement.plane_distance_cm", *FIGURES)
_TOLD = {"arrangement", "exposure", "program", "course"}  # kinds whose findings a choice may turn


@dataclass(frozen=True)
class Variant:
    """
    One choice changed, or the present choice.

    Attributes:
        question: What was changed: "plane distance", "beam" or "patients a year".
        answer: To what: "375 cm".
        present: Whether this is how the folder has it.
        feasibility: Of the arrangement that the department chose, so changed.
        figures: Value name, value, basis; what cannot be had is left out.
        turned: Findings that differ from the present ones.
    """

    question: str
    answer: str
    present: bool
    verdict: str
    feasibility: str
    first_patient: date | None
    figures: tuple[tuple[str, object, str], ...]
    turned: tuple[TurnedFinding, ...]


def what_ifs(
    program: Program, as_of: date, say: Callable[[str], None] = lambda words: None
) -> tuple[Variant, ...]:
    """
    Return the variants of what the department chose, the present one first under each question.

    Without a chosen arrangement there is nothing to vary.
    """
    memory: Memory = {}
    base = assess(program, as_of, memory=memory, wanted=_WANTED)
    row = next((row for row in base.arrangements if row.chosen), None)
    if row is None:
        return ()
    found: list[Variant] = []
    for question, answer, changed in _changes(program, base, row):
        if changed is None:
            found.append(_variant(question, answer, base, base))
        else:
            say(f"what if: {question} {answer}")
            again = assess(changed, as_of, memory=memory, wanted=_WANTED)
            found.append(_variant(question, answer, base, again))
    return tuple(found)


def _changes(
    program: Program, base: Assessment, row: ArrangementRow
) -> Iterator[tuple[str, str, Program | None]]:
    values = {(value.name, value.item): value for value in base.values}
    yield from _distances(program, values.get(("arrangement.plane_distance_cm", row.item)))
    yield from _beams(program, dict(row.parts))
    yield from _patients(program)


def _distances(program: Program, stated: Value | None) -> Iterator[tuple[str, str, Program | None]]:
    plan = program.find("plan", stated.inputs[0].item.id) if stated and stated.inputs else None
    if stated is None or plan is None or plan.get("plane_distance_cm") is None:
        return
    question, now = "plane distance", float(stated.value)
    yield question, f"{printed(now)} cm", None
    for step in DISTANCE_STEPS_CM:
        there = now + step
        yield question, f"{printed(there)} cm", _with(program, plan, plane_distance_cm=there)


def _beams(program: Program, parts: dict[str, str]) -> Iterator[tuple[str, str, Program | None]]:
    chosen = parts["beam"]
    others = [
        beam for beam in program.of_kind("beam")
        if beam.owners.get("machine") == parts["machine"] and beam.id != chosen
    ]  # fmt: skip
    if not others:
        return
    yield "beam", _short(chosen), None
    for beam in others:
        yield "beam", _short(beam.id), _with_beam(program, chosen, beam.id)


def _patients(program: Program) -> Iterator[tuple[str, str, Program | None]]:
    counts = {course.id: course.get("patients_per_year") for course in program.of_kind("course")}
    known = {name: float(count) for name, count in counts.items() if isinstance(count, (int, float))}
    total = sum(known.values())
    if not total:
        return
    yield "patients a year", printed(total), None
    for factor in PATIENT_FACTORS:
        changed = program
        for name, count in known.items():
            course = changed.find("course", name)
            if course is not None:
                changed = _with(changed, course, patients_per_year=count * factor)
        yield "patients a year", printed(total * factor), changed


def _short(item_id: str) -> str:
    return item_id.rpartition("/")[2]


def _with(program: Program, item: Item, **fields: FieldValue) -> Program:
    """Return the program with fields of one item changed, at the place where they stood."""
    stated = dict(item.fields)
    for name, value in fields.items():
        place = stated[name].place if name in stated else item.place
        stated[name] = Stated(value, place)
    return _replaced(program, item, replace(item, fields=stated))


def _replaced(program: Program, old: Item, new: Item) -> Program:
    items = tuple(new if each is old else each for each in program.items)
    return replace(program, items=items)


def _with_beam(program: Program, chosen: str, other: str) -> Program:
    """Return the program with another beam in the chosen arrangement and in the plan that fits it."""
    names = {chosen: other, _short(chosen): _short(other)}
    changed = program
    for item in program.items:
        if item.kind not in ("program", "plan"):
            continue
        fields = {name: replace(each, value=_renamed(each.value, names)) for name, each in item.fields.items()
                  if (item.kind, name) in {("program", "chosen_arrangement"), ("plan", "beam")}}  # fmt: skip
        if fields:
            owners = {kind: names.get(owner, owner) for kind, owner in item.owners.items()}
            changed = _replaced(changed, item, replace(item, fields={**item.fields, **fields}, owners=owners))
    return changed


def _renamed(value: FieldValue, names: dict[str, str]) -> FieldValue:
    if isinstance(value, Table):
        rows = tuple(tuple(names.get(each, each) if isinstance(each, str) else each for each in row)
                     for row in value.rows)  # fmt: skip
        return Table(value.columns, rows)
    return names.get(value, value) if isinstance(value, str) else value


def _variant(question: str, answer: str, base: Assessment, found: Assessment) -> Variant:
    row = next((each for each in found.arrangements if each.chosen), None)
    own = {PROGRAM, row.item} if row else {PROGRAM}
    values = {value.name: value for value in found.values if value.item in own}
    turned = difference(_named_alike(base), _named_alike(found)).findings if found is not base else ()
    return Variant(
        question=question,
        answer=answer,
        present=found is base,
        verdict=found.verdict.words,
        feasibility=row.feasibility if row else "",
        first_patient=found.schedule.first_patient if found.schedule else None,
        figures=tuple((name, values[name].value, values[name].basis) for name in FIGURES if name in values),
        turned=tuple(each for each in turned if each.item.kind in _TOLD),
    )


def _named_alike(assessment: Assessment) -> Assessment:
    """Return an assessment in which the chosen arrangement has one name, so that another beam compares."""
    own = assessment.verdict.arrangement
    findings = tuple(
        replace(finding, item=finding.item._replace(id=finding.item.id.replace(own, "chosen")))
        if own and own in finding.item.id
        else finding
        for finding in assessment.findings
    )
    return replace(assessment, findings=findings, values=(), gaps=(), documents=())
