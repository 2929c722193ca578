"""The department's tasks, their actual dates and their costs, beside the tasks that ship with the tool."""

from collections.abc import Iterator, Mapping
from functools import cache

import yaml

from readiness.errors import Problem
from readiness.program.items import Item, Program
from readiness.program.plausibility.stated import Check, impossible, number, place, word, words
from readiness.program.wording import near_miss, shown
from readiness.resources import schema_file

OPERATE = "operate"
REFERENCE = "reference"


@cache
def _shipped() -> Mapping[str, tuple[str, tuple[str, ...]]]:
    """Return phase and what is waited for of each task that ships with the tool."""
    loader = getattr(yaml, "CSafeLoader", yaml.SafeLoader)
    data = yaml.load(schema_file("tasks.yaml").read_text(encoding="utf-8"), Loader=loader)
    return {entry["id"]: (entry["phase"], tuple(entry["waits_for"])) for entry in data["tasks"]}


def _known(program: Program) -> Mapping[str, tuple[str, tuple[str, ...]]]:
    """Return phase and what is waited for of all tasks, with what the department states about them."""
    known = dict(_shipped())
    for task in program.of_kind("task"):
        phase, waits = known.get(task.id, ("", ()))
        stated = words(task, "waits_for")
        known[task.id] = (word(task, "phase") or phase, waits if stated is None else stated)
    return known


def _unknown(item: Item, name: str, task: str, known: Mapping[str, object]) -> Problem:
    close = near_miss(task, known)
    hint = f": did you mean {close}?" if close else "; the tool has none of that name, nor has program.yaml"
    return Problem(place(item, name), f"there is no task {shown(task)}{hint}", REFERENCE)


def names_of_tasks(program: Program) -> Iterator[Problem]:
    """What a task waits for, what has begun and what is paid for are tasks that exist."""
    if not any(program.of_kind(kind) for kind in ("task", "progress", "cost")):
        return
    known = _known(program)
    for task in program.of_kind("task"):
        for waited in words(task, "waits_for") or ():
            if waited not in known:
                yield _unknown(task, "waits_for", waited, known)
    for kind in ("progress", "cost"):
        for item in program.of_kind(kind):
            name = word(item, "task")
            if name is not None and name not in known:
                yield _unknown(item, "task", name, known)


def times_of_tasks(program: Program) -> Iterator[Problem]:
    """A task that the tool does not know has working days, and working days are whole."""
    for task in program.of_kind("task"):
        days = number(task, "working_days")
        if days is None and task.id not in _shipped():
            close = near_miss(task.id, _shipped())
            hint = f" (did you mean {close}, which it has?)" if close else ""
            yield impossible(task, "working_days", f"the tool has no such task{hint}; state its working days")
        elif days is not None and days != round(days):
            yield impossible(task, "working_days", f"working days are whole days, not {days:g}")


def order_of_tasks(program: Program) -> Iterator[Problem]:
    """No task waits, through others, for itself, and none before the first patient for one after it."""
    own = program.of_kind("task")
    if not own:
        return
    known = _known(program)
    waits = {name: waited for name, (_, waited) in known.items()}
    told: set[str] = set()
    for task in own:
        circle = _circle(task.id, waits)
        if circle and not told & set(circle):
            told |= set(circle)
            message = f"it waits for itself: {' waits for '.join(circle)}"
            yield impossible(task, "waits_for", message)
        late = [each for each in waits[task.id] if known.get(each, ("", ()))[0] == OPERATE]
        if late and known[task.id][0] != OPERATE and not circle:
            message = f"it waits for {late[0]}, which comes only after the first patient (phase {OPERATE})"
            yield impossible(task, "waits_for", message)


def _circle(start: str, waits: Mapping[str, tuple[str, ...]]) -> list[str]:
    """Return the shortest way from a task back to itself, or nothing."""
    paths = [[start]]
    seen = set()
    for path in paths:
        for waited in waits.get(path[-1], ()):
            if waited == start:
                return [*path, start]
            if waited not in seen:
                seen.add(waited)
                paths.append([*path, waited])
    return []


CHECKS: tuple[Check, ...] = (names_of_tasks, times_of_tasks, order_of_tasks)
