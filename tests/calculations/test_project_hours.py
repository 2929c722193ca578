"""Hours wanted in each week."""

from datetime import date

import pytest

from readiness.calculations.first_patient import road_to_first_patient
from readiness.calculations.levelling import CAPACITY, WORK
from readiness.calculations.project_hours import hours_by_week, work_of_phase
from readiness.calculations.task_network import Task
from readiness.calculations.task_progress import Progress
from readiness.calculations.working_days import working_days
from readiness.quantities import Table

WEEK = ("monday", "tuesday", "wednesday", "thursday", "friday")
CALENDAR = working_days(weekdays=WEEK, closed_dates=[date(2027, 3, 16)])
MONDAY = date(2027, 3, 8)
TASKS = (Task("commission", 9), Task("write", 5), Task("later", 5, ("commission",)))
PEOPLE = Table.of(CAPACITY, [("physicist", 2.0)])


def weeks(*work, progress=(), as_of=MONDAY, **more):
    """Return the hours by week and person."""
    road = road_to_first_patient(tasks=TASKS, progress=progress, calendar=CALENDAR, as_of=as_of, target=None, **more)
    table = hours_by_week(
        road=road, work=Table.of(WORK, work), capacity=PEOPLE, calendar=CALENDAR, as_of=as_of
    )
    return {(row["week_of"], row["who"]): row for row in table.records()}


def test_hours_fall_into_the_weeks_of_their_task():
    """Nine days are five in the first week and four in the second, which has a closed day: 90 h are 50 and 40."""
    found = weeks(("commission", "physicist", 90))
    assert found["2027-03-08", "physicist"]["needed_h"] == pytest.approx(50)
    assert found["2027-03-15", "physicist"]["needed_h"] == pytest.approx(40)
    assert found["2027-03-15", "physicist"]["free_h"] == 8
    assert found["2027-03-15", "physicist"]["missing_h"] == pytest.approx(32)


def test_tasks_of_one_week_add_up_and_are_named():
    """Commissioning and writing both want the physicist in the first week."""
    row = weeks(("commission", "physicist", 90), ("write", "physicist", 10))["2027-03-08", "physicist"]
    assert row["needed_h"] == pytest.approx(60)
    assert row["tasks"] == "commission, write"


def test_enough_hours_leave_none_missing():
    """Ten hours in a week of ten are not too many."""
    assert weeks(("write", "physicist", 10))["2027-03-08", "physicist"]["missing_h"] == 0


def test_somebody_without_stated_hours_has_none():
    """A role whose hours nobody stated is missing all of them."""
    row = weeks(("write", "nurse", 3))["2027-03-08", "nurse"]
    assert (row["free_h"], row["missing_h"]) == (0, pytest.approx(3))


def test_levelled_hours_do_not_exceed_those_there_are():
    """Once shared out, no week wants more than it has."""
    work = [("commission", "physicist", 30), ("write", "physicist", 10)]
    found = weeks(*work, work=Table.of(WORK, work), capacity=PEOPLE)
    assert max(row["missing_h"] for row in found.values()) == 0
    assert sum(row["needed_h"] for row in found.values()) == pytest.approx(40)


def test_finished_tasks_want_nobody_and_begun_ones_from_today():
    """Finished work takes no hours; what is under way spreads its hours from the day of the plan."""
    done = [Progress("write", MONDAY, date(2027, 3, 9)), Progress("commission", MONDAY)]
    found = weeks(("write", "physicist", 10), ("commission", "physicist", 70), progress=done, as_of=date(2027, 3, 10))
    assert found["2027-03-08", "physicist"]["needed_h"] == pytest.approx(30)
    assert found["2027-03-08", "physicist"]["free_h"] == 6
    assert sum(row["needed_h"] for row in found.values()) == pytest.approx(70)


def test_hours_of_a_phase_follow_its_days():
    """240 h over tasks of 20, 8 and 10 working days are 126.3, 50.5 and 63.2 h; other phases take none."""
    tasks = [Task("beam", 20, phase="commission"), Task("phantom", 8, phase="commission"),
             Task("report", 10, phase="commission"), Task("train", 8, phase="train")]  # fmt: skip
    work = work_of_phase(tasks=tasks, phase="commission", hours=Table.of(("who", "work_h"), [("physicist", 240)]))
    assert work.column("task") == ("beam", "phantom", "report")
    assert work.column("work_h") == pytest.approx([240 * 20 / 38, 240 * 8 / 38, 240 * 10 / 38])


def test_hours_of_a_phase_without_tasks_are_refused():
    """Hours cannot be laid on a phase that takes no time."""
    with pytest.raises(ValueError, match="'build' has no task that takes time"):
        work_of_phase(tasks=TASKS, phase="build", hours=Table.of(("who", "work_h"), [("physicist", 1)]))


def test_impossible_work_is_refused():
    """Hours of a task that is not on the road, and negative ones, are slips."""
    with pytest.raises(ValueError, match="'paint', which is not on the road"):
        weeks(("paint", "physicist", 1))
    with pytest.raises(ValueError, match="cannot take -1 hours"):
        weeks(("write", "physicist", -1))
