"""The date of the first patient."""

from datetime import date, timedelta

import numpy as np
import pytest
from sample_networks import random_network, sample

from readiness.calculations.first_patient import (
    phase_weeks,
    road_to_first_patient,
    tasks_before_first_patient,
    what_moves_first_patient,
)
from readiness.calculations.levelling import CAPACITY, WORK
from readiness.calculations.task_network import Task
from readiness.calculations.task_progress import Progress
from readiness.calculations.working_days import working_days
from readiness.quantities import Table

WEEK = ("monday", "tuesday", "wednesday", "thursday", "friday")
CLOSED = [
    *(date(2026, 12, day) for day in (24, 25, 28, 29, 30, 31)),
    *(date(2027, month, day) for month, day in ((1, 1), (3, 26), (3, 29), (5, 3))),
]
CALENDAR = working_days(weekdays=WEEK, closed_dates=CLOSED)
AS_OF, TARGET = date(2026, 12, 1), date(2027, 5, 17)
PLAN = {"progress": (), "calendar": CALENDAR, "as_of": AS_OF, "target": TARGET}
SMALL = (
    Task("order", 3, (), phase="decide"),
    Task("install", 2, ("order",), phase="install"),
    Task("write", 4, (), phase="train"),
    Task("review", 5, ("install",), phase="operate"),
)


def dated(road):
    """Return the scheduled tasks by id."""
    return {row.task.id: row for row in road.tasks}


def test_sample_misses_its_target():
    """126 working days from 2026-12-01, over ten closed days, end on 2027-06-08: first patient on 2027-06-09, 17
    working days after the target of 2027-05-17.
    """
    road = road_to_first_patient(tasks=sample(), **PLAN)
    assert road.length_working_days == 126
    assert road.first_patient == date(2027, 6, 9)
    assert road.late_working_days == 17
    assert dated(road)["release"].finish == date(2027, 6, 8)
    assert not road.levelled


def test_sample_date_agrees_with_numpy():
    """An independent calendar counts the same 126 working days."""
    day = np.busday_offset(AS_OF, 126, holidays=np.array(CLOSED, dtype="datetime64[D]"))
    assert day.astype(date) == road_to_first_patient(tasks=sample(), **PLAN).first_patient


def test_dates_of_a_chain_by_hand():
    """Three days from Tuesday 1 December end on Thursday; the next task has Friday and Monday; then the patient."""
    road = road_to_first_patient(tasks=SMALL[:2], **PLAN)
    order, install = road.tasks
    assert (order.start, order.finish) == (date(2026, 12, 1), date(2026, 12, 3))
    assert (install.start, install.finish) == (date(2026, 12, 4), date(2026, 12, 7))
    assert road.first_patient == date(2026, 12, 8)


def test_a_plan_made_on_a_closed_day_begins_on_the_next_open_one():
    """A plan of Saturday is that of Monday."""
    saturday = PLAN | {"as_of": date(2026, 12, 5)}
    monday = PLAN | {"as_of": date(2026, 12, 7)}
    assert road_to_first_patient(tasks=SMALL, **saturday) == road_to_first_patient(tasks=SMALL, **monday)


def test_float_shows_in_the_dates():
    """Writing takes 4 of 5 days: it may start one day later, and is not critical."""
    row = dated(road_to_first_patient(tasks=SMALL, **PLAN))["write"]
    assert (row.start, row.latest_start) == (date(2026, 12, 1), date(2026, 12, 2))
    assert (row.finish, row.latest_finish) == (date(2026, 12, 4), date(2026, 12, 7))
    assert row.float_working_days == 1
    assert not row.critical


def test_tasks_after_the_first_patient_do_not_delay_it():
    """A task of phase operate stands outside the road; a task before the patient cannot wait for it."""
    road = road_to_first_patient(tasks=SMALL, **PLAN)
    assert "review" not in dated(road)
    assert road.length_working_days == 5
    with pytest.raises(ValueError, match="'release' waits for 'review', which comes after the first patient"):
        tasks_before_first_patient(tasks=[*SMALL, Task("release", 1, ("review",), phase="release")])


def test_an_early_road_is_negative_and_no_target_is_never_late():
    """Days before the target are negative; without a target there is no lateness."""
    assert road_to_first_patient(tasks=SMALL, **PLAN).late_working_days < 0
    assert road_to_first_patient(tasks=SMALL, **PLAN | {"target": None}).late_working_days is None
    on_time = PLAN | {"target": date(2026, 12, 8)}
    assert road_to_first_patient(tasks=SMALL, **on_time).late_working_days == 0


def test_with_nothing_left_the_patient_can_come_today():
    """No tasks, or only finished ones, leave today."""
    assert road_to_first_patient(tasks=(), **PLAN).first_patient == AS_OF
    done = [Progress(task.id, AS_OF - timedelta(20), AS_OF - timedelta(5)) for task in SMALL[:3]]
    road = road_to_first_patient(tasks=SMALL, **PLAN | {"progress": done})
    assert road.first_patient == AS_OF
    assert {row.state for row in road.tasks} == {"finished"}
    assert {row.critical for row in road.tasks} == {False}


def test_progress_as_planned_leaves_the_date_alone():
    """After ten working days with the approval just given and the rest on its way, the date is the same."""
    as_of = CALENDAR.add(AS_OF, 10)
    done = [
        Progress("approve", AS_OF, CALENDAR.add(AS_OF, 9)),
        Progress("recalibrate", AS_OF),
    ]
    road = road_to_first_patient(tasks=sample(), **PLAN | {"progress": done, "as_of": as_of})
    assert road.first_patient == date(2027, 6, 9)
    assert dated(road)["recalibrate"].state == "under way"
    assert dated(road)["recalibrate"].start == AS_OF


def test_an_approval_a_week_late_costs_a_week():
    """The stand is ordered five working days later, and the patient comes five working days later."""
    as_of = CALENDAR.add(AS_OF, 15)
    done = [Progress("approve", AS_OF, CALENDAR.add(AS_OF, 14)), Progress("recalibrate", AS_OF)]
    road = road_to_first_patient(tasks=sample(), **PLAN | {"progress": done, "as_of": as_of})
    assert road.first_patient == CALENDAR.add(date(2027, 6, 9), 5)
    assert road.late_working_days == 22


def test_what_moves_the_first_patient_has_dates():
    """Five days off the stand bring the patient to 2027-06-02; without the stand, 45 days earlier, to 2027-04-06."""
    plan = {key: PLAN[key] for key in ("progress", "calendar", "as_of")}
    first = next(what_moves_first_patient(tasks=sample(), **plan, shortened_by_working_days=5).records())
    assert first["task"] == "buy-stand"
    assert first["first_patient_if_shortened"] == "2027-06-02"
    assert first["first_patient_if_no_time"] == "2027-04-06"
    assert "2027-04-06" == np.busday_offset(
        "2026-12-01", 81, holidays=np.array(CLOSED, dtype="datetime64[D]")
    ).astype(str)


def test_what_is_finished_moves_nothing():
    """Once the approval is given it is no longer among the tasks that could be shortened."""
    done = (Progress("approve", AS_OF - timedelta(20), AS_OF - timedelta(1)),)
    table = what_moves_first_patient(
        tasks=sample(), progress=done, calendar=CALENDAR, as_of=AS_OF, shortened_by_working_days=5
    )
    assert "approve" not in table.column("task")
    assert table.column("task")[0] == "buy-stand"


def test_phases_last_from_their_first_to_their_last_day():
    """Tuesday to Thursday are three days of seven."""
    rows = dict(phase_weeks(road=road_to_first_patient(tasks=SMALL, **PLAN)).rows)
    assert rows["decide"] == pytest.approx(3 / 7)
    assert set(rows) == {"decide", "install", "train"}


def test_sharing_out_hours_is_said_and_delays():
    """Two tasks of one person for whole days follow each other, and the road says that it is levelled."""
    tasks = (Task("a", 5), Task("b", 5))
    work = Table.of(WORK, [("a", "P1", 40), ("b", "P1", 40)])
    capacity = Table.of(CAPACITY, [("P1", 8)])
    road = road_to_first_patient(tasks=tasks, **PLAN, work=work, capacity=capacity)
    assert road.levelled
    assert road.length_working_days == 10
    assert road.critical_path == ("a", "b")
    assert road_to_first_patient(tasks=tasks, **PLAN).length_working_days == 5


def test_hours_of_finished_tasks_are_left_aside_and_of_unknown_ones_refused():
    """Finished work needs nobody; work for a task that does not exist is a slip."""
    tasks, capacity = (Task("a", 5), Task("b", 5)), Table.of(CAPACITY, [("P1", 8)])
    work = Table.of(WORK, [("a", "P1", 40), ("b", "P1", 40)])
    plan = PLAN | {"progress": [Progress("a", None, AS_OF - timedelta(1))]}
    assert road_to_first_patient(tasks=tasks, **plan, work=work, capacity=capacity).length_working_days == 5
    with pytest.raises(ValueError, match="'c', which is not a task"):
        road_to_first_patient(tasks=tasks, **PLAN, work=Table.of(WORK, [("c", "P1", 1)]), capacity=capacity)


@pytest.mark.parametrize("seed", range(10))
def test_dates_respect_what_tasks_wait_for(seed):
    """On random networks no task starts before everything it waits for has ended, nor on a closed day."""
    road = road_to_first_patient(tasks=random_network(seed), **PLAN)
    rows = dated(road)
    for row in road.tasks:
        assert CALENDAR.is_open(row.start)
        assert CALENDAR.is_open(row.finish)
        for other in row.task.waits_for:
            ended = rows[other].finish if rows[other].task.working_days else rows[other].finish - timedelta(1)
            assert ended < row.start
        assert row.finish < road.first_patient or row.task.working_days == 0
