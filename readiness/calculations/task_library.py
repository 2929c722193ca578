"""The shipped list of tasks, and what a department changes in it."""

from collections.abc import Sequence
from dataclasses import dataclass, replace
from functools import cache

import yaml

from readiness.calculations.task_network import Task, checked_network
from readiness.errors import CatalogueError
from readiness.resources import schema_file

PHASES = ("decide", "build", "install", "commission", "train", "release", "operate")


@dataclass(frozen=True)
class OwnTask:
    """What a department states about a task, shipped or its own; None is not stated."""

    id: str
    working_days: int | None = None
    waits_for: tuple[str, ...] | None = None
    title: str | None = None
    owner: str | None = None
    phase: str | None = None


@cache
def library_tasks() -> tuple[Task, ...]:
    """
    Return the shipped tasks.

    Returns:
        The tasks, in the order of the file.

    Raises:
        CatalogueError: If the file is not a network without circles, or a phase is not known.

    Valid for: a first plan; lead times are starting values that a department replaces.
    Assumes: nothing.
    Source: practice.
    """
    data = yaml.safe_load(schema_file("tasks.yaml").read_text(encoding="utf-8"))
    tasks = tuple(Task(**entry | {"waits_for": tuple(entry["waits_for"])}) for entry in data["tasks"])
    try:
        checked_network(tasks=tasks)
    except ValueError as error:
        raise CatalogueError(f"tasks.yaml: {error}") from error
    for task in tasks:
        if task.phase not in PHASES:
            raise CatalogueError(f"tasks.yaml: task {task.id!r} has the phase {task.phase!r}")
    return tasks


def with_own_tasks(*, tasks: Sequence[Task], own: Sequence[OwnTask]) -> tuple[Task, ...]:
    """
    Return the tasks with what a department states about them, and with its own added.

    Args:
        tasks: The shipped tasks.
        own: The department's statements; what it does not state of a shipped task stays.

    Returns:
        The shipped tasks in their order, then the department's own.

    Raises:
        ValueError: If the department states a task twice, adds one without working days, or makes a network
            with a circle (it is printed) or with an unknown task.

    Valid for: any statements.
    Assumes: that a task of the department without a stated order waits for nothing.
    Source: definition (derived).
    """
    stated: dict[str, OwnTask] = {}
    for entry in own:
        if entry.id in stated:
            raise ValueError(f"task {entry.id!r} is stated twice")
        stated[entry.id] = entry
    changed = [_changed(task, stated.pop(task.id)) if task.id in stated else task for task in tasks]
    for name, entry in stated.items():
        if entry.working_days is None:
            raise ValueError(f"task {name!r} is new and needs its working days")
        changed.append(_changed(Task(name, entry.working_days, title=name), entry))
    checked_network(tasks=changed)
    return tuple(changed)


def _changed(task: Task, entry: OwnTask) -> Task:
    """Return a task with what is stated about it."""
    return replace(
        task,
        working_days=task.working_days if entry.working_days is None else entry.working_days,
        waits_for=task.waits_for if entry.waits_for is None else entry.waits_for,
        title=entry.title or task.title,
        owner=entry.owner or task.owner,
        phase=entry.phase or task.phase,
    )
