"""Hours of commissioning inside their weeks: shown, not shared out, and silent where nothing is stated."""

from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from readiness.assessment.assessment import assess
from readiness.assessment.records import Schedule
from readiness.program.items import Program
from readiness.program.reading import read_folder
from tests.assessment.small import item

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"


def road(program: Program) -> Schedule:
    """Return the schedule of a program."""
    found = assess(program, date(2026, 12, 1)).schedule
    assert found is not None
    return found


def without(kind: str, field: str) -> Program:
    """Return the sample with a field of every item of a kind taken away."""
    program = read_folder(SAMPLE)
    items = tuple(
        replace(each, fields={name: value for name, value in each.fields.items() if name != field})
        if each.kind == kind
        else each
        for each in program.items
    )
    return replace(program, items=items)


def test_the_weeks_hold_all_hours_that_are_stated() -> None:
    """240 hours of the physicists, each week beside what the two can give: 240 hours over 8 weeks of 5 days."""
    weeks = road(read_folder(SAMPLE)).by_week
    assert 240 == pytest.approx(sum(week.needed_h for week in weeks))
    assert {"physicist"} == {week.who for week in weeks}
    assert 30 == max(week.free_h for week in weeks)
    assert all(week.week_of.weekday() == 0 for week in weeks)


def test_a_week_that_wants_too_much_is_named() -> None:
    """Five tasks fall into one week; the remark names it and the date is said not to be shared out."""
    found = road(read_folder(SAMPLE))
    (short,) = [week for week in found.by_week if week.missing_h]
    assert short.needed_h - short.free_h == pytest.approx(short.missing_h)
    said = " ".join(found.remarks)
    assert f"physicist in the week of {short.week_of.isoformat()}" in said
    assert "not shared out" in said


@pytest.mark.parametrize(("kind", "field"), [("role", "commissioning_hours_h"), ("program", "commissioning_weeks"), ("staff_task", "minutes_min")])  # fmt: skip
def test_what_is_not_stated_gives_no_weeks(kind: str, field: str) -> None:
    """Without hours, people's time or weeks nothing is made up; the remark says what to state."""
    found = road(without(kind, field))
    assert () == found.by_week
    assert "state minutes per commissioning" in " ".join(found.remarks)


def test_what_has_ended_wants_no_hours() -> None:
    """A finished task takes none, and the road says that it is done."""
    program = read_folder(SAMPLE)
    done = item("progress", "p1", task="calibrate-reference-output", started_on=date(2026, 11, 2), finished_on=date(2026, 11, 3))
    found = road(replace(program, items=(*program.items, done)))
    assert not any("calibrate-reference-output" in week.tasks for week in found.by_week)
    assert next(task for task in found.tasks if task.id == "calibrate-reference-output").done
