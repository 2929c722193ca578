"""The shipped tasks, and a department's changes."""

from datetime import date

import networkx
import pytest
import yaml
from sample_networks import SAMPLE
from test_first_patient import PLAN

from readiness.calculations import task_library
from readiness.calculations.first_patient import road_to_first_patient
from readiness.calculations.network_changes import reduced_network
from readiness.calculations.task_library import PHASES, OwnTask, library_tasks, with_own_tasks
from readiness.calculations.task_network import Task, critical_path, network_times
from readiness.errors import CatalogueError
from readiness.resources import schema_file

FILE = yaml.safe_load(schema_file("tasks.yaml").read_text(encoding="utf-8"))
OWNERS = {
    "department head", "radiation oncologist", "chief physicist", "medical physicist", "second physicist",
    "chief therapist", "radiation protection officer", "engineer", "administrator",
}  # fmt: skip
NAMES = {  # the sample's tasks under the ids of the shipped list; two of them are two tasks there
    "approve": "approve-program", "recalibrate": "recalibrate-instruments", "buy-stand": "buy-stand",
    "enable-mode": "enable-mode", "cameras": "install-cameras", "mark-floor": "mark-floor",
    "notify": "notify-regulator", "survey": "survey-radiation", "commission": "commission-beam",
    "phantom": "run-phantom-cycle", "report": "review-by-second-physicist", "procedures": "write-procedures",
    "training": "train-staff", "dry-run": "dry-run", "peer-review": "review-by-outside-peer",
    "release": "release-program",
}  # fmt: skip


def own_sample() -> list[OwnTask]:
    """Return the sample department's statements about shipped tasks."""
    return [
        OwnTask(NAMES[name], days, tuple(NAMES[other] for other in waits.split()))
        for name, (days, waits) in SAMPLE.items()
    ]


def test_file_says_where_its_numbers_come_from():
    """Lead times are practice, and the file says so."""
    assert (FILE["source"], FILE["known"]) == ("practice", "practice")


@pytest.mark.parametrize("entry", FILE["tasks"], ids=lambda entry: entry["id"])
def test_a_shipped_task_is_complete(entry):
    """Each task has words for its id, a title, an owner, a phase, positive days, an order and an end to see."""
    assert set(entry) == {"id", "title", "owner", "phase", "working_days", "waits_for", "done_when"}
    assert entry["id"].replace("-", "").isalpha()
    assert entry["id"].islower()
    assert entry["owner"] in OWNERS
    assert isinstance(entry["working_days"], int)
    assert 1 <= entry["working_days"] <= 120
    assert entry["title"][0].isupper()
    assert entry["done_when"][0].isupper()
    assert not entry["title"].endswith(".")


def test_shipped_network_has_no_circle_by_an_independent_library():
    """The shipped order is a directed graph without circles, and every id it names exists."""
    graph = networkx.DiGraph((other, task.id) for task in library_tasks() for other in task.waits_for)
    assert networkx.is_directed_acyclic_graph(graph)
    assert set(graph) <= {task.id for task in library_tasks()}


def test_no_shipped_task_waits_for_a_later_phase():
    """A task waits only for tasks of its own or an earlier phase."""
    phase = {task.id: PHASES.index(task.phase) for task in library_tasks()}
    assert [(t.id, o) for t in library_tasks() for o in t.waits_for if phase[o] > phase[t.id]] == []


def test_release_comes_after_everything_before_the_first_patient():
    """Nothing that must be done before the first patient is left out of what the release waits for, at any depth."""
    graph = networkx.DiGraph((other, task.id) for task in library_tasks() for other in task.waits_for)
    before = {task.id for task in library_tasks() if task.phase != "operate"} - {"release-program"}
    assert networkx.ancestors(graph, "release-program") == before


def test_whole_library_gives_a_date():
    """The shipped tasks take as long as an independent library's longest way through them, and end with the release."""
    road = road_to_first_patient(tasks=library_tasks(), **PLAN)
    graph = networkx.DiGraph()
    days = {task.id: task.working_days for task in library_tasks() if task.phase != "operate"}
    for task in library_tasks():
        for other in task.waits_for:
            if task.id in days:
                graph.add_edge(other, task.id, weight=days[other])
    expected = networkx.dag_longest_path_length(graph) + days["release-program"]
    assert expected == road.length_working_days
    assert road.critical_path[-1] == "release-program"


def test_sample_department_keeps_its_date_among_the_shipped_tasks():
    """With its own lead times and order for sixteen tasks, the sample's first patient stays on 2027-06-09."""
    keep = [NAMES[name] for name in SAMPLE]
    tasks = reduced_network(tasks=with_own_tasks(tasks=library_tasks(), own=own_sample()), keep=keep)
    road = road_to_first_patient(tasks=tasks, **PLAN)
    assert road.length_working_days == 126
    assert road.first_patient == date(2027, 6, 9)


def test_a_department_changes_what_it_states_and_nothing_else():
    """New days leave title, owner, phase and order of a shipped task as they are."""
    before = {task.id: task for task in library_tasks()}
    after = {task.id: task for task in with_own_tasks(tasks=library_tasks(), own=[OwnTask("buy-stand", 80)])}
    assert after["buy-stand"].working_days == 80
    assert after["buy-stand"].waits_for == before["buy-stand"].waits_for
    assert after["buy-stand"].title == before["buy-stand"].title
    assert {name for name in before if before[name] != after[name]} == {"buy-stand"}


def test_a_stated_order_replaces_the_shipped_one():
    """An empty list means that the task waits for nothing."""
    after = {task.id: task for task in with_own_tasks(tasks=library_tasks(), own=[OwnTask("buy-stand", waits_for=())])}
    assert after["buy-stand"].waits_for == ()
    assert network_times(tasks=tuple(after.values()))["buy-stand"].earliest_start_working_days == 0


def test_a_new_task_is_added_at_the_end():
    """A task of the department's own stands after the shipped ones, under its own title."""
    own = OwnTask("paint-room", 3, ("mark-floor",), "Paint the room", "engineer", "install")
    added = with_own_tasks(tasks=library_tasks(), own=[own])[-1]
    assert added == Task("paint-room", 3, ("mark-floor",), "Paint the room", "engineer", "install")


@pytest.mark.parametrize(
    ("own", "words"),
    [
        ([OwnTask("paint-room")], "'paint-room' is new and needs its working days"),
        ([OwnTask("buy-stand", 1), OwnTask("buy-stand", 2)], "'buy-stand' is stated twice"),
        ([OwnTask("buy-stand", waits_for=("mark-floor",))], "circle: buy-stand waits for mark-floor, which waits for buy-stand"),
        ([OwnTask("buy-stand", waits_for=("by-magic",))], "'buy-stand' waits for 'by-magic', which is not a task"),
        ([OwnTask("buy-stand", -5)], "'buy-stand' cannot take -5 working days"),
    ],
)
def test_impossible_statements_are_refused(own, words):
    """The task at fault is named, and a circle printed."""
    with pytest.raises(ValueError, match=words):
        with_own_tasks(tasks=library_tasks(), own=own)


@pytest.mark.parametrize(
    ("change", "words"),
    [({"waits_for": ["describe-program"]}, "waits for itself"), ({"phase": "later"}, "has the phase 'later'")],
)
def test_a_faulty_shipped_list_is_our_defect(change, words, tmp_path, monkeypatch):
    """A circle or an unknown phase in the shipped file is found when it is loaded."""
    broken = tmp_path / "tasks.yaml"
    broken.write_text(yaml.safe_dump({"tasks": [FILE["tasks"][0] | change]}), encoding="utf-8")
    monkeypatch.setattr(task_library, "schema_file", lambda name: broken)
    with pytest.raises(CatalogueError, match=words):
        library_tasks.__wrapped__()


def test_critical_path_of_the_library_runs_through_what_is_bought_and_measured():
    """The stand, the beam, the phantom and the reviews decide the starting plan."""
    chain = critical_path(tasks=[task for task in library_tasks() if task.phase != "operate"])
    assert {"approve-program", "buy-stand", "commission-beam", "report-commissioning"} <= set(chain)
