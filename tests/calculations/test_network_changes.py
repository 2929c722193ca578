"""What moves the end of a network, and networks with some tasks only."""

import pytest
from sample_networks import random_network, sample

from readiness.calculations.network_changes import reduced_network, what_moves_it
from readiness.calculations.task_network import Task, length_working_days, network_times

SMALL = (Task("a", 10), Task("b", 6), Task("c", 4, ("a",)), Task("d", 1, ("b", "c")))


def test_the_stand_moves_the_sample_most():
    """Without the 55 days of the stand the end comes 45 days nearer: then the chamber's 25 days decide."""
    first = next(what_moves_it(tasks=sample(), shortened_by_working_days=5).records())
    assert first["task"] == "buy-stand"
    assert first["gain_if_shortened_working_days"] == 5
    assert first["gain_if_no_time_working_days"] == 45


def test_gains_stop_where_another_chain_takes_over():
    """The outside review takes 15 days, but 8 are gained without it: the dry run is then the last."""
    rows = {row["task"]: row for row in what_moves_it(tasks=sample(), shortened_by_working_days=10).records()}
    assert rows["peer-review"]["gain_if_shortened_working_days"] == 8
    assert rows["peer-review"]["gain_if_no_time_working_days"] == 8
    assert "notify" not in rows, "a task with float moves nothing"


def test_a_task_is_not_shortened_below_nothing():
    """A release of three days gains three, however much is asked."""
    rows = {row["task"]: row for row in what_moves_it(tasks=sample(), shortened_by_working_days=50).records()}
    assert rows["release"]["gain_if_shortened_working_days"] == 3


@pytest.mark.parametrize("seed", range(10))
def test_gains_are_what_recalculation_gives_and_others_gain_nothing(seed):
    """Each gain is the difference of two lengths; a task that is not in the table gains nothing."""
    tasks = random_network(seed)
    rows = {row["task"]: row for row in what_moves_it(tasks=tasks, shortened_by_working_days=4).records()}
    for task in tasks:
        less = [Task(t.id, max(0, t.working_days - 4) if t.id == task.id else t.working_days, t.waits_for) for t in tasks]
        gain = length_working_days(tasks=tasks) - length_working_days(tasks=less)
        assert gain == (rows[task.id]["gain_if_shortened_working_days"] if task.id in rows else 0)


def test_largest_gain_comes_first():
    """Rows stand in the order of what they would gain."""
    gains = what_moves_it(tasks=sample(), shortened_by_working_days=5).column("gain_if_no_time_working_days")
    assert list(gains) == sorted(gains, reverse=True)


def test_shortening_by_nothing_is_refused():
    """Nothing is learned from a change of no days."""
    with pytest.raises(ValueError, match="at least one working day"):
        what_moves_it(tasks=SMALL, shortened_by_working_days=0)


def test_what_is_left_out_hands_on_what_it_waited_for():
    """Without c, d waits for a; without a as well, d waits for b alone."""
    assert reduced_network(tasks=SMALL, keep=["a", "b", "d"])[-1].waits_for == ("b", "a")
    assert reduced_network(tasks=SMALL, keep=["b", "d"])[-1].waits_for == ("b",)
    assert reduced_network(tasks=SMALL, keep=[]) == ()


@pytest.mark.parametrize("seed", range(20))
def test_leaving_out_is_taking_no_time(seed):
    """A reduced network is as long as the whole one in which the others take no time, task by task."""
    tasks = random_network(seed)
    keep = {task.id for index, task in enumerate(tasks) if index % 2}
    empty = [Task(t.id, t.working_days if t.id in keep else 0, t.waits_for) for t in tasks]
    whole = network_times(tasks=empty)
    for name, entry in network_times(tasks=reduced_network(tasks=tasks, keep=keep)).items():
        assert entry.earliest_start_working_days == whole[name].earliest_start_working_days


def test_an_unknown_need_is_refused():
    """A needed task that nobody planned is named."""
    with pytest.raises(ValueError, match="'x' is needed but not in the network"):
        reduced_network(tasks=SMALL, keep=["a", "x"])
