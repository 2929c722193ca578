"""Earliest and latest times, floats and the critical path."""

import networkx
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from sample_networks import random_network, sample

from readiness.calculations.task_network import (
    Task,
    circle,
    circle_in_words,
    critical_path,
    length_working_days,
    network_times,
)


def as_graph(tasks: tuple[Task, ...]) -> networkx.DiGraph:
    """Return the network as a graph whose edges carry the duration of the task they leave."""
    graph = networkx.DiGraph()
    graph.add_nodes_from(["begin", "end"])
    for task in tasks:
        graph.add_edge("begin", task.id, weight=0)
        graph.add_edge(task.id, "end", weight=task.working_days)
        for other in task.waits_for:
            graph.add_edge(other, task.id, weight=next(t.working_days for t in tasks if t.id == other))
    return graph


def longest(graph: networkx.DiGraph, first: str, last: str) -> int:
    """Return the longest way between two nodes, found by an independent library."""
    between = (networkx.descendants(graph, first) | {first}) & (networkx.ancestors(graph, last) | {last})
    return networkx.dag_longest_path_length(graph.subgraph(between))


def test_sample_by_hand():
    """10 + 55 + 5 + 20 + 8 + 10 + 15 + 3 are 126 working days, through stand, floor and outside review."""
    chain = ("approve", "buy-stand", "mark-floor", "commission", "phantom", "report", "peer-review", "release")
    assert length_working_days(tasks=sample()) == 126
    assert critical_path(tasks=sample()) == chain


def test_sample_floats_by_hand():
    """The chamber can come 45 days late (70 - 25), the notification 83 (123 - 40), the dry run 8 (121 - 113)."""
    times = network_times(tasks=sample())
    assert times["recalibrate"].float_working_days == 45
    assert times["notify"].float_working_days == 83
    assert times["dry-run"].float_working_days == 8
    assert times["procedures"].free_float_working_days == 0
    assert times["training"].free_float_working_days == 0
    assert {name for name, entry in times.items() if entry.critical} == set(critical_path(tasks=sample()))


@pytest.mark.parametrize("seed", range(40))
def test_random_networks_agree_with_networkx(seed):
    """Length, earliest starts, latest starts and floats of random networks agree with an independent library."""
    tasks = random_network(seed)
    graph = as_graph(tasks)
    end = longest(graph, "begin", "end")
    assert end == length_working_days(tasks=tasks)
    for name, entry in network_times(tasks=tasks).items():
        before, after = longest(graph, "begin", name), longest(graph, name, "end")
        assert before == entry.earliest_start_working_days
        assert end - after == entry.latest_start_working_days
        assert end - after - before == entry.float_working_days


@pytest.mark.parametrize("seed", range(40))
def test_critical_path_is_a_chain_of_the_whole_length(seed):
    """Each task of the path waits for the one before it, and their durations add up to the length."""
    tasks = random_network(seed)
    known = {task.id: task for task in tasks}
    chain = critical_path(tasks=tasks)
    assert all(first in known[second].waits_for for first, second in zip(chain, chain[1:], strict=False))
    assert sum(known[name].working_days for name in chain) == length_working_days(tasks=tasks)


@pytest.mark.parametrize("seed", range(20))
def test_float_is_the_slip_that_does_no_harm(seed):
    """A task held back by its float leaves the length alone; one day more does not. Free float delays nobody."""
    tasks = random_network(seed)
    times = network_times(tasks=tasks)
    length = length_working_days(tasks=tasks)
    for name, entry in times.items():
        late = entry.earliest_start_working_days + entry.float_working_days
        assert length_working_days(tasks=tasks, not_before={name: late}) == length
        assert length_working_days(tasks=tasks, not_before={name: late + 1}) > length
        slipped = entry.earliest_start_working_days + entry.free_float_working_days
        after = network_times(tasks=tasks, not_before={name: slipped})
        others = [other for other in times if other != name]
        assert all(
            after[other].earliest_start_working_days == times[other].earliest_start_working_days for other in others
        )


@settings(max_examples=60, deadline=None)
@given(st.lists(st.tuples(st.integers(0, 12), st.integers(0, 12)), max_size=40))
def test_circles_are_found_exactly_when_there_are_some(pairs):
    """A circle is reported if and only if an independent library finds one, and each in it waits for the next."""
    waits: dict[int, list[int]] = {}
    for task, other in pairs:
        waits.setdefault(task, []).append(other)
    tasks = tuple(Task(str(n), 1, tuple(map(str, waits.get(n, [])))) for n in range(13))
    graph = networkx.DiGraph((str(task), str(other)) for task, other in pairs)
    found = circle(tasks=tasks)
    assert bool(found) is not networkx.is_directed_acyclic_graph(graph)
    known = {task.id: task for task in tasks}
    for index, name in enumerate(found):
        assert found[(index + 1) % len(found)] in known[name].waits_for


def test_a_circle_is_printed():
    """The message names every task of the circle in the order in which they wait."""
    tasks = (Task("train", 3, ("write",)), Task("write", 3, ("review",)), Task("review", 3, ("train",)))
    words = "review waits for train, which waits for write, which waits for review"
    with pytest.raises(ValueError, match=f"in a circle: {words}"):
        network_times(tasks=tasks)


def test_a_task_that_waits_for_itself_is_printed():
    """The shortest circle has its own words."""
    with pytest.raises(ValueError, match="in a circle: train waits for itself"):
        network_times(tasks=(Task("train", 3, ("train",)),))


def test_no_circle_has_no_words():
    """A circle of nothing cannot be printed."""
    with pytest.raises(ValueError, match="there is no circle"):
        circle_in_words(circle=())


def test_nothing_to_do_takes_no_time():
    """Without tasks the length is 0 and no path is critical."""
    assert length_working_days(tasks=()) == 0
    assert critical_path(tasks=()) == ()
    assert network_times(tasks=()) == {}


def test_a_longer_critical_task_lengthens_the_network_day_by_day():
    """Ten days more on the stand are ten days more; ten days more on the notification are none."""
    for name, more in (("buy-stand", 10), ("notify", 0)):
        longer = tuple(Task(t.id, t.working_days + 10 * (t.id == name), t.waits_for) for t in sample())
        assert length_working_days(tasks=longer) == 126 + more


def test_an_order_of_chains_equally_long_is_fixed():
    """Of two equal chains the path names the alphabetically first, whatever the order of the list."""
    tasks = (Task("z", 5), Task("b", 5), Task("end", 1, ("z", "b")))
    assert critical_path(tasks=tasks) == ("b", "end")
    assert critical_path(tasks=tasks[::-1]) == ("b", "end")


@pytest.mark.parametrize(
    ("tasks", "words"),
    [
        ((Task("a", 1), Task("a", 2)), "two tasks have the id 'a'"),
        ((Task("a", 1, ("b",)),), "'a' waits for 'b', which is not a task"),
        ((Task("a", -1),), "'a' cannot take -1 working days"),
    ],
)
def test_impossible_networks_are_refused(tasks, words):
    """The task at fault is named."""
    with pytest.raises(ValueError, match=words):
        network_times(tasks=tasks)
