"""What is left of a network."""

from datetime import date

import pytest

from readiness.calculations.task_network import Task
from readiness.calculations.task_progress import Progress, remaining_network
from readiness.calculations.working_days import working_days

WEEK = ("monday", "tuesday", "wednesday", "thursday", "friday")
CALENDAR = working_days(weekdays=WEEK, closed_dates=[])
AS_OF = date(2027, 3, 10)  # a Wednesday
TASKS = (Task("order", 10), Task("install", 4, ("order",)), Task("check", 2, ("install",)))


def left(*progress: Progress):
    """Return what is left on the day of the plan."""
    return remaining_network(tasks=TASKS, progress=progress, calendar=CALENDAR, as_of=AS_OF)


def test_without_progress_everything_is_left():
    """No actual dates leave the network as planned."""
    assert left().tasks == TASKS
    assert left().not_before_working_days == {}


def test_a_finished_task_is_gone_and_nobody_waits_for_it():
    """After the delivery the installation waits for nothing."""
    rest = left(Progress("order", date(2027, 3, 1), date(2027, 3, 9)))
    assert [task.id for task in rest.tasks] == ["install", "check"]
    assert rest.tasks[0].waits_for == ()


def test_a_task_finished_today_lets_the_next_start_tomorrow():
    """Finished on the day of the plan, the next task starts on the working day after; finished before, today."""
    assert left(Progress("order", None, AS_OF)).not_before_working_days == {"install": 1}
    assert left(Progress("order", None, date(2027, 3, 9))).not_before_working_days == {}


@pytest.mark.parametrize(("started", "days"), [((2027, 3, 10), 10), ((2027, 3, 8), 8), ((2027, 3, 5), 7)])
def test_a_task_under_way_has_the_planned_days_less_those_gone(started, days):
    """Started on Friday the fifth, three working days are gone on Wednesday the tenth."""
    assert days == left(Progress("order", date(*started))).tasks[0].working_days


def test_an_overdue_task_takes_at_least_today():
    """A task of ten days that started in January is not taken for finished."""
    assert left(Progress("order", date(2027, 1, 4))).tasks[0].working_days == 1


def test_stated_days_replace_the_planned_ones():
    """Who knows that twenty days remain is believed."""
    assert left(Progress("order", date(2027, 3, 1), None, 20)).tasks[0].working_days == 20


def test_work_out_of_order_is_told():
    """An installation that began before the delivery goes on, and the reader is told; the delivery is still left."""
    rest = left(Progress("install", date(2027, 3, 9)))
    assert rest.out_of_order == ("install has begun although order has not ended",)
    assert [(task.id, task.waits_for) for task in rest.tasks] == [
        ("order", ()), ("install", ()), ("check", ("install",)),
    ]  # fmt: skip


@pytest.mark.parametrize(
    ("progress", "words"),
    [
        ([Progress("order", date(2027, 3, 11))], "2027-03-11 is no actual date on 2027-03-10"),
        ([Progress("order", None, date(2027, 3, 11))], "2027-03-11 is no actual date"),
        ([Progress("order", date(2027, 3, 9), date(2027, 3, 8))], "finished on 2027-03-08, before it started"),
        ([Progress("order"), Progress("order")], "progress of task 'order' is reported twice"),
        ([Progress("oder")], "'oder', which is not a task"),
        ([Progress("order", None, None, 3)], "days remain only of a task that has started"),
        ([Progress("order", date(2027, 3, 9), None, 0)], "days remain only of a task that has started"),
        ([Progress("order", date(2027, 3, 1), date(2027, 3, 9), 3)], "days remain only of a task"),
    ],
)
def test_contradictions_are_refused(progress, words):
    """The task at fault is named."""
    with pytest.raises(ValueError, match=words):
        left(*progress)
