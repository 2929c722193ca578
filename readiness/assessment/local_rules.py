"""
The jurisdiction's and the department's own rules and limits.

A stricter local limit replaces ours. A looser one leaves ours governing, with an open finding until an
exception covers it. Whatever does not fit is a located problem in local_rules.yaml, never a crash.
"""

import json
from dataclasses import dataclass
from typing import Any

from readiness.assessment.catalogue import Catalogue
from readiness.assessment.conditions import CONDITIONS
from readiness.assessment.criteria import criteria
from readiness.assessment.local_fit import misfit, near, near_value, never_together, unfillable
from readiness.assessment.records import Clause, Ref, Rule, RuleSource, Value
from readiness.assessment.ruleset import check_rule, with_limit
from readiness.assessment.schedule import shipped_tasks
from readiness.errors import CatalogueError, Place, Problem, ProgramProblems
from readiness.program.items import Item, Program
from readiness.units import unit_of

MESSAGE = "Found: {observed}. Asked: {limit}."
DEFAULT_TASK = "describe-program"
WITHOUT_UNIT = {"", "1", "none"}  # how a department may write that a ratio or count has no unit


@dataclass(frozen=True)
class LocalRules:
    """The rules as they hold here, criteria replaced by local ones, and which local limits govern."""

    rules: tuple[Rule, ...]
    limits: dict[str, Value]
    governs: dict[Ref, bool]


def with_local(rules: tuple[Rule, ...], program: Program, known: Catalogue) -> LocalRules:
    """Return shipped and local rules together; raise ProgramProblems with everything that does not fit."""
    local, problems = _with_limits(rules, program)
    by_id = {rule.id: rule for rule in local.rules}
    shipped = set(by_id)
    for item in program.of_kind("local_rule"):
        rule = _local_rule(item, known, shipped, problems)
        if rule is not None:
            by_id[rule.id] = rule
    if problems:
        raise ProgramProblems(problems)
    return LocalRules(tuple(by_id.values()), local.limits, local.governs)


def check_limits(rules: tuple[Rule, ...], program: Program) -> None:
    """Raise ProgramProblems if a local limit does not fit; needs no values, so that it is quick."""
    _, problems = _with_limits(rules, program)
    if problems:
        raise ProgramProblems(problems)


def _with_limits(rules: tuple[Rule, ...], program: Program) -> tuple[LocalRules, list[Problem]]:
    problems: list[Problem] = []
    by_id = {rule.id: rule for rule in rules}
    limits: dict[str, Value] = {}
    governs: dict[Ref, bool] = {}
    for item in program.of_kind("local_limit"):
        _take_limit(item, by_id, limits, governs, problems)
    return LocalRules(tuple(by_id.values()), limits, governs), problems


def _place(item: Item, field: str) -> Place:
    stated = item.fields.get(field)
    return stated.place if stated else item.place


def _take_limit(
    item: Item, by_id: dict[str, Rule], limits: dict[str, Value], governs: dict[Ref, bool],
     problems: list[Problem],
) -> None:  # fmt: skip
    rule_id, criterion = item.get("rule"), item.get("criterion")
    if (rule_id is None) == (criterion is None):
        words = "a local limit names either a rule or a criterion whose limit it replaces"
        problems.append(Problem(item.place, words, "local limit"))
    elif criterion is not None:
        _take_criterion(item, str(criterion), limits, governs, problems)
    else:
        _take_rule_limit(item, str(rule_id), by_id, governs, problems)


def _take_criterion(
    item: Item, criterion: str, limits: dict[str, Value], governs: dict[Ref, bool],
        problems: list[Problem],
) -> None:  # fmt: skip
    name = criterion if criterion.startswith("criterion.") else f"criterion.{criterion}"
    ours = criteria().get(name)
    if ours is None:
        words = f"there is no criterion {criterion}{near(name, criteria())}"
        problems.append(Problem(_place(item, "criterion"), words, "local limit"))
        return
    if not _unit_agrees(item, unit_of(name), problems):
        return
    limit = float(item.get("limit"))  # type: ignore[arg-type]
    stricter = not ours.stricter or _at_least_as_strict(limit, float(ours.value), ours.stricter)
    governs[Ref("local_limit", item.id)] = stricter
    if stricter:
        limits[name] = Value(
            name, Ref("criterion", "criterion"), limit, unit_of(name), "stated", where=_place(item, "limit"),
            source=str(item.get("source")), known="local",
        )  # fmt: skip


def _take_rule_limit(
    item: Item, rule_id: str, by_id: dict[str, Rule], governs: dict[Ref, bool],
        problems: list[Problem],
) -> None:  # fmt: skip
    rule = by_id.get(rule_id)
    if rule is None:
        words = f"there is no rule {rule_id}{near(rule_id, by_id)}"
        problems.append(Problem(_place(item, "rule"), words, "local limit"))
        return
    direction = CONDITIONS[rule.condition].stricter
    if not direction:
        words = f"rule {rule_id} has no limit that could be stricter"
        problems.append(Problem(_place(item, "rule"), words, "local limit"))
        return
    if not _unit_agrees(item, unit_of(rule.subject), problems):
        return
    limit = float(item.get("limit"))  # type: ignore[arg-type]
    ours = rule.limit
    if isinstance(ours, str) and ours in criteria():
        ours = criteria()[ours].value
    if not isinstance(ours, (int, float)):
        words = f"the limit of rule {rule_id} is worked out ({ours}); write a local rule beside it"
        problems.append(Problem(_place(item, "rule"), words, "local limit"))
        return
    strict = _at_least_as_strict(limit, float(ours), direction)
    governs[Ref("local_limit", item.id)] = strict
    if strict:
        source = RuleSource(str(item.get("source")), "as cited by the department", "local")
        by_id[rule_id] = with_limit(rule, limit, str(item.get("strength") or rule.strength), source)


def _at_least_as_strict(theirs: float, ours: float, direction: str) -> bool:
    return theirs >= ours if direction == "higher" else theirs <= ours


def _unit_agrees(item: Item, unit: str, problems: list[Problem]) -> bool:
    stated = str(item.get("unit"))
    plain = stated.replace("u", "µ").replace(" ", "").lower()
    if plain in {unit.replace(" ", "").lower(), unit.replace(" ", "").lower().replace("u", "µ")}:
        return True
    if not unit and plain in WITHOUT_UNIT:
        return True
    words = f'the limit is given in "{stated}", but what it limits is in "{unit}"; convert it to {unit}'
    if not unit:
        words = f'the limit is given in "{stated}", but what it limits has no unit; write unit: "1"'
    problems.append(Problem(_place(item, "unit"), words, "local limit"))
    return False


def _local_rule(item: Item, known: Catalogue, taken: set[str], problems: list[Problem]) -> Rule | None:
    before = len(problems)
    if item.id in taken:
        words = f"a rule {item.id} ships with the tool; give the local rule another id, or a local limit"
        problems.append(Problem(item.place, words, "local rule"))
    _check_names(item, known, problems)
    if len(problems) == before:
        _check_fit(item, known, problems)
    if len(problems) > before:
        return None
    rule = Rule(
        id=item.id,
        title=str(item.get("title")),
        strength=str(item.get("strength")),
        sources=(RuleSource(str(item.get("source")), "as cited by the department", "local"),),
        applies_when=_clauses(item),
        subject=str(item.get("subject")),
        condition=str(item.get("condition")),
        limit=_judged(item).limit,
        basis=str(item.get("basis") or "any"),
        physical=False,
        exceptable=True,
        message=str(item.get("message") or MESSAGE),
        remedy=str(item.get("remedy") or "Bring it into line with the local rule."),
        owner=str(item.get("owner") or "medical physicist"),
        task=str(item.get("task") or DEFAULT_TASK),
        phase=str(item.get("phase") or "decide"),
        evidence=(),
        documents=(),
        topic="Local rules",
        origin="local rule",
        where=item.place,
    )
    try:
        check_rule(rule, known, "this local rule")
    except CatalogueError as error:
        problems.append(Problem(item.place, str(error), "local rule"))
        return None
    return rule


def _check_names(item: Item, known: Catalogue, problems: list[Problem]) -> None:
    subject = str(item.get("subject"))
    if not known.has(subject) or (subject in known.definitions and known.definitions[subject].internal):
        words = f"there is no value {subject}{near_value(subject, known)}"
        problems.append(Problem(_place(item, "subject"), words, "local rule"))
    for clause in _clauses(item):
        if not known.has(clause.subject):
            words = f"there is no value {clause.subject}{near_value(clause.subject, known)}"
            problems.append(Problem(_place(item, "applies_when"), words, "local rule"))
    task = item.get("task")
    if task is not None and task not in shipped_tasks():
        words = f"there is no task {task}{near(str(task), shipped_tasks())}"
        problems.append(Problem(_place(item, "task"), words, "local rule"))


def _check_fit(item: Item, known: Catalogue, problems: list[Problem]) -> None:
    """Add what does not fit of a rule whose names all exist."""
    judged = _judged(item)
    kind = judged.subject.partition(".")[0]
    found = [("limit" if item.get("limit") is not None else "condition", misfit(judged, kind, known))]
    if item.get("limits") is not None:
        found[0] = ("limits", found[0][1])
    for clause in _clauses(item):
        asked = clause.subject.partition(".")[0]
        words = misfit(clause, kind, known)
        if asked not in known.kinds.reachable(kind):
            words = f"{clause.subject} cannot be asked of a {kind}"
        found.append(("applies_when", words))
    if not any(words for _, words in found):
        found += [
            ("applies_when", f"its conditions on {name} can never hold together")
            for name in never_together(_clauses(item), known)
        ]
    found.append(("message", unfillable(str(item.get("message") or MESSAGE))))
    problems += [Problem(_place(item, field), words, "local rule") for field, words in found if words]


def _judged(item: Item) -> Clause:
    """Return what a local rule asks of its subject."""
    limit = item.get("limit") if item.get("limit") is not None else item.get("limits")
    return Clause(str(item.get("subject")), str(item.get("condition")), limit)


def _clauses(item: Item) -> tuple[Clause, ...]:
    table: Any = item.get("applies_when")
    if table is None:
        return ()
    return tuple(
        Clause(
            str(row["subject"]), str(row["condition"]),
            row.get("limit") if row.get("limit") is not None else _list_in_row(row.get("limits")),
        )
        for row in table.records()
    )  # fmt: skip


def _list_in_row(text: Any) -> Any:
    """Return the list that a table row holds as JSON text."""
    return None if text is None else tuple(json.loads(text))
