"""Sharing out the hours of people among tasks."""

import random

import pytest
from sample_networks import random_network

from readiness.calculations.levelling import CAPACITY, WORK, levelled_network
from readiness.calculations.task_network import Task, critical_path, length_working_days, network_times
from readiness.errors import OutsideValidity
from readiness.quantities import Table

PEOPLE = Table.of(CAPACITY, [("P1", 8.0), ("P2", 4.0)])


def levelled(tasks, *work, capacity=PEOPLE, **more):
    """Return the levelled network."""
    return levelled_network(tasks=tasks, work=Table.of(WORK, work), capacity=capacity, **more)


def test_without_work_nothing_changes():
    """Tasks that take nobody's hours keep their order and days."""
    tasks = random_network(3)
    assert levelled(tasks) == tasks


def test_one_person_does_two_tasks_one_after_the_other():
    """Two tasks of 40 h in 5 days fill the days of a person: ten days, and the chain runs through the person."""
    found = levelled((Task("a", 5), Task("b", 5)), ("a", "P1", 40), ("b", "P1", 40))
    assert length_working_days(tasks=found) == 10
    assert critical_path(tasks=found) == ("a", "b")


def test_two_people_do_two_tasks_at_once():
    """Different people do not wait for each other."""
    found = levelled((Task("a", 5), Task("b", 5)), ("a", "P1", 40), ("b", "P2", 20))
    assert length_working_days(tasks=found) == 5


def test_halves_of_a_day_fit_side_by_side():
    """Two tasks that take half of a person's hours each run together."""
    found = levelled((Task("a", 5), Task("b", 5)), ("a", "P1", 20), ("b", "P1", 20))
    assert length_working_days(tasks=found) == 5


@pytest.mark.parametrize(("hours", "days"), [(8, 5), (40, 5), (40.1, 6), (240, 30)])
def test_a_task_lasts_as_long_as_the_hours_need(hours, days):
    """240 h of a person with 8 h a day take 30 days, whatever the lead time says; few hours do not shorten it."""
    assert days == length_working_days(tasks=levelled((Task("a", 5),), ("a", "P1", hours)))


def test_commissioning_beside_the_clinic_takes_most_of_a_year():
    """240 h at 0.10 FTE of 1,650 h in 250 days (0.66 h a day) take 364 working days, not 20."""
    capacity = Table.of(CAPACITY, [("P1", 0.66)])
    found = levelled((Task("commission", 20),), ("commission", "P1", 240), capacity=capacity)
    assert length_working_days(tasks=found) == 364


def test_the_task_that_can_wait_waits():
    """Of two tasks of one person, the one on the longer chain goes first."""
    tasks = (Task("a", 5), Task("b", 5), Task("then", 20, ("b",)))
    found = levelled(tasks, ("a", "P1", 40), ("b", "P1", 40))
    times = network_times(tasks=found)
    assert times["b"].earliest_start_working_days == 0
    assert times["a"].earliest_start_working_days == 5


def test_earliest_days_hold():
    """A task that cannot start before day 7 does not."""
    found = levelled((Task("a", 5),), ("a", "P1", 40), not_before={"a": 7})
    assert length_working_days(tasks=found, not_before={"a": 7}) == 12


@pytest.mark.parametrize("seed", range(15))
def test_nobody_works_more_than_there_is(seed):
    """On random networks no day of anybody holds more hours than there are, all hours are done, order is kept."""
    chance = random.Random(seed)
    tasks = random_network(seed)
    work = [(t.id, chance.choice(("P1", "P2")), chance.uniform(0, 60)) for t in tasks if t.working_days]
    found = levelled(tasks, *work)
    times = network_times(tasks=found)
    used: dict[tuple[str, int], float] = {}
    for name, who, hours in work:
        entry = times[name]
        days = range(entry.earliest_start_working_days, entry.earliest_finish_working_days)
        for day in days:
            used[who, day] = used.get((who, day), 0.0) + hours / len(days)
    free = dict(PEOPLE.rows)
    assert all(hours <= free[who] + 1e-6 for (who, _), hours in used.items())
    assert sum(used.values()) == pytest.approx(sum(hours for _, _, hours in work))
    for before, after in zip(tasks, found, strict=True):
        assert set(before.waits_for) <= set(after.waits_for)
        assert after.working_days >= before.working_days
    assert length_working_days(tasks=found) >= length_working_days(tasks=tasks)


def test_work_that_nobody_can_do_is_refused():
    """Hours of somebody without hours, and plans beyond twenty years, are outside what a plan can say."""
    with pytest.raises(OutsideValidity, match="task a needs 40 h of the P3, who has no hours"):
        levelled((Task("a", 5),), ("a", "P3", 40))
    with pytest.raises(OutsideValidity, match="which is no plan"):
        levelled((Task("a", 5),), ("a", "P1", 1e6))


@pytest.mark.parametrize("hours", [-1, None, "ten", float("inf")])
def test_impossible_hours_are_refused(hours):
    """Hours are numbers from 0; and their task exists."""
    with pytest.raises(ValueError, match="cannot take"):
        levelled((Task("a", 5),), ("a", "P1", hours))
    with pytest.raises(ValueError, match="'b', which is not a task"):
        levelled((Task("a", 5),), ("b", "P1", 1))
