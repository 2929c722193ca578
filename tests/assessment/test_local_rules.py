"""Local rules and limits that do not fit: each is told at its place, with the nearest valid name."""

from datetime import date
from typing import Any

import pytest

from readiness.assessment.catalogue import catalogue
from readiness.assessment.judge import judge_item
from readiness.assessment.local_rules import with_local
from readiness.assessment.records import Ref, Rule
from readiness.assessment.ruleset import load_rules
from readiness.errors import Place, ProgramProblems
from readiness.program.items import Item, Stated
from readiness.quantities import Table
from tests.assessment.small import graph, item, program, rule

RULE: dict[str, Any] = {
    "title": "High ceiling", "strength": "must", "source": "Invented State, 1", "subject": "room.ceiling_height_cm",
    "condition": "at_least", "limit": 300, "message": "The ceiling is at {observed} cm; {limit} cm is asked.",
}  # fmt: skip
CLAUSE = ("subject", "condition", "limit", "limits")


def local(kind: str, name: str, fields: dict[str, Any]) -> Item:
    """Return an item whose fields stand on lines of their own, in order."""
    stated = {
        key: Stated(value, Place("local_rules.yaml", line, 5))
        for line, (key, value) in enumerate(fields.items(), start=3)
        if value is not None
    }
    return Item(kind, name, stated, {"program": "program"}, Place("local_rules.yaml", 2, 5))


def told(*items: Item) -> list[tuple[str, str]]:
    """Return field by line and words of each problem, nothing if everything fits."""
    try:
        with_local(load_rules(catalogue()), program(*items), catalogue())
    except ProgramProblems as found:
        return [(str(problem.place), problem.message) for problem in found.problems]
    return []


def when(*clauses: tuple[Any, ...]) -> Table:
    """Return what applies_when is read as."""
    return Table.of(CLAUSE, [(*clause, None, None)[:4] for clause in clauses])


def test_a_rule_that_fits_is_taken() -> None:
    """A number, the name of a value in the same unit and no message at all are accepted."""
    for changes in ({}, {"limit": "program.tallest_patient_cm"}, {"message": None}):
        assert [] == told(local("local_rule", "own", {**RULE, **changes}))


@pytest.mark.parametrize(
    ("changes", "field", "words"),
    [
        ({"subject": "room.celing_height_cm"}, "subject", "there is no value room.celing_height_cm; did you mean room.ceiling_height_cm?"),
        ({"subject": "rooms.ceiling_height_cm"}, "subject", "did you mean room.ceiling_height_cm?"),
        ({"subject": "arrangement.plane_energy"}, "subject", "there is no value arrangement.plane_energy"),
        ({"limit": "3,5 m"}, "limit", 'the limit must be a number in cm or the name of a value, not "3,5 m"'),
        ({"limit": "program.heaviest_patient_kg"}, "limit", "is in kg, but room.ceiling_height_cm is in cm"),
        ({"limit": "barrier.occupancy"}, "limit", "cannot be asked of a room"),
        ({"condition": "is_yes", "limit": None}, "condition", "room.ceiling_height_cm is a number, is_yes asks for yes or no"),
        ({"subject": "room.intercom"}, "limit", "room.intercom is a word, at_least asks for a number"),
        ({"subject": "room.intercom", "condition": "equals", "limit": "twoway"}, "limit", 'never "twoway"; did you mean two-way?'),
        ({"subject": "room.changed_on", "condition": "on_or_after", "limit": "soon"}, "limit", "must be a date"),
        ({"message": "At {observd} cm."}, "message", "{observd} that cannot be filled; did you mean observed?"),
        ({"message": "At {observed.__class__}."}, "message", "cannot be filled"),
        ({"message": "At {observed:d}."}, "message", "a plain name without a format"),
        ({"message": "At {observed"}, "message", "not closed"),
        ({"task": "choose-rom"}, "task", "there is no task choose-rom; did you mean choose-room?"),
        ({"applies_when": when(("room.ceilng_height_cm", "above", 5))}, "applies_when", "did you mean room.ceiling_height_cm?"),
        ({"applies_when": when(("beam.r50_cm", "above", 5))}, "applies_when", "beam.r50_cm cannot be asked of a room"),
    ],
)  # fmt: skip
def test_what_does_not_fit_is_told_at_its_place(changes: dict[str, Any], field: str, words: str) -> None:
    """The place is that of the field at fault, the words name what would fit."""
    fields = {**RULE, **changes}
    line = list(fields).index(field) + 3
    ((place, message),) = told(local("local_rule", "own", fields))
    assert (f"local_rules.yaml:{line}:5", True) == (place, words in message), message


CEILING, TECHNIQUE = "room.ceiling_height_cm", "arrangement.technique"


@pytest.mark.parametrize(
    ("subject", "clauses"),
    [
        (CEILING, [(CEILING, "at_least", 300), (CEILING, "below", 200)]),
        (CEILING, [(CEILING, "at_least", 300), (CEILING, "below", 300)]),
        (CEILING, [(CEILING, "above", 300), (CEILING, "at_most", 300)]),
        (CEILING, [(CEILING, "equals", 300), (CEILING, "above", 310)]),
        (CEILING, [(CEILING, "above", 5000)]),
        (CEILING, [("room.door_interlock", "is_yes"), ("room.door_interlock", "is_no")]),
        (CEILING, [("room.changed_on", "on_or_after", date(2026, 5, 1)), ("room.changed_on", "on_or_before", date(2026, 4, 1))]),
        ("arrangement.plane_distance_cm", [(TECHNIQUE, "equals", "six-position"), (TECHNIQUE, "one_of", None, '["moving-couch"]')]),
    ],
)  # fmt: skip
def test_conditions_that_can_never_hold_together(subject: str, clauses: list[tuple[Any, ...]]) -> None:
    """A rule that could never apply is refused: limits that cross, words that exclude each other, what no room has."""
    ((place, message),) = told(local("local_rule", "own", {**RULE, "subject": subject, "applies_when": when(*clauses)}))
    assert ("local_rules.yaml:10:5", True) == (place, "can never hold together" in message), message


def test_conditions_that_meet_at_one_number_can_hold() -> None:
    """At least 300 and at most 300 leaves 300."""
    clauses = when((CEILING, "at_least", 300), (CEILING, "at_most", 300))
    assert [] == told(local("local_rule", "own", {**RULE, "applies_when": clauses}))


LIMIT: dict[str, Any] = {"rule": "plane-distance", "limit": 350.0, "unit": "cm", "source": "Invented State, 2"}


@pytest.mark.parametrize(
    ("changes", "field", "words"),
    [
        ({"rule": "plane-distnce"}, "rule", "there is no rule plane-distnce; did you mean plane-distance?"),
        ({"unit": "m"}, "unit", 'given in "m", but what it limits is in "cm"; convert it to cm'),
        ({"rule": "survey-within-goal"}, "unit", 'has no unit; write unit: "1"'),
        ({"rule": "room-sweep"}, "rule", "has no limit that could be stricter"),
        ({"rule": "stand-finds-a-place"}, "rule", "is worked out (arrangement.smallest_possible_distance_cm)"),
        ({"rule": None, "criterion": "any_hour_limit_us", "unit": "uSv"}, "criterion", "did you mean criterion.any_hour_limit_usv?"),
    ],
)  # fmt: skip
def test_a_limit_that_does_not_fit(changes: dict[str, Any], field: str, words: str) -> None:
    """Unknown rule or criterion, another unit, a rule without a number of its own."""
    fields = {**LIMIT, **changes}
    line = list(fields).index(field) + 3
    ((place, message),) = told(local("local_limit", "own", fields))
    assert (f"local_rules.yaml:{line}:5", True) == (place, words in message), message


def test_a_ratio_is_limited_without_a_unit() -> None:
    """The unit of a part of something is written 1."""
    assert [] == told(local("local_limit", "own", {**LIMIT, "rule": "survey-within-goal", "limit": 0.5, "unit": "1"}))


def taken(limit: float) -> tuple[Rule, bool]:
    """Return the rule on the distance under a local limit, and whether that governs."""
    own = local("local_limit", "own", {**LIMIT, "limit": limit})
    found = with_local(load_rules(catalogue()), program(own), catalogue())
    distance = next(each for each in found.rules if each.id == "plane-distance")
    return distance, found.governs[Ref("local_limit", "own")]


def test_the_stricter_of_two_limits_governs() -> None:
    """350 cm replaces our 300; 250 cm does not, and is an open finding."""
    stricter, governs = taken(350.0)
    assert (350.0, "local limit", True) == (stricter.limit, stricter.origin, governs)
    looser, governs = taken(250.0)
    assert ("criterion.smallest_plane_distance_cm", False) == (looser.limit, governs)
    assert any(each.subject == "local_limit.governs" for each in load_rules(catalogue()))


def test_five_thousand_rules_are_each_told_once() -> None:
    """Good ones are all taken, and each bad one gives its own problem with its own hint."""
    good = [local("local_rule", f"own-{number}", RULE) for number in range(5000)]
    assert [] == told(*good)
    bad = [{**RULE, "subject": f"room.celing_height_{number}_cm"} for number in range(500)]
    found = told(*(local("local_rule", f"own-{number}", fields) for number, fields in enumerate(bad)))
    assert (500, True) == (len(found), all("did you mean room.ceiling_height_cm?" in words for _, words in found))


def test_what_is_not_of_one_kind_is_never_judged() -> None:
    """A word held against a number is not assessed, and the cause says why."""
    of = graph(program(item("room", "a", ceiling_height_cm="high")))
    found = judge_item(rule(), Ref("room", "a"), of)
    assert ("not assessed", True) == (found.outcome, "cannot compare" in found.causes[0].words)
