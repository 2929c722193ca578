"""Every shipped rule carries its cases, and its own condition answers them as they say."""

from typing import Any

import pytest

from readiness.assessment.catalogue import catalogue
from readiness.assessment.conditions import CONDITIONS
from readiness.assessment.records import Rule
from readiness.assessment.ruleset import is_value_name, load_rules, shipped_rules
from readiness.assessment.wording import in_words
from readiness.resources import schema_file
from tests.assessment.small import assessed, program

CASES = [(rule, name) for rule in shipped_rules() for name in ("met", "not_met") if name in rule.cases]


def as_read(value: Any) -> Any:
    """Return a case as a folder's reader would give it: lists are tuples."""
    return tuple(value) if isinstance(value, list) else value


def observed_and_limit(rule: Rule, name: str) -> tuple[Any, Any]:
    """Return what a case observes and the limit it is held against."""
    case = rule.cases[name]
    if isinstance(case, dict):
        return as_read(case["observed"]), as_read(case["limit"])
    assert not is_value_name(rule.limit, catalogue()), "a limit that is a value needs its number in the case"
    return as_read(case), rule.limit


def test_rules_load_with_everything_they_name() -> None:
    """Values, criteria, tasks, documents and sources that rules name exist, and no id stands twice."""
    assert load_rules(catalogue())


@pytest.mark.parametrize(("rule", "name"), CASES, ids=[f"{rule.id}-{name}" for rule, name in CASES])
def test_a_case_is_answered_as_it_says(rule: Rule, name: str) -> None:
    """What a rule calls met is met by its condition, what it calls not met is not."""
    observed, limit = observed_and_limit(rule, name)
    assert (name == "met") is CONDITIONS[rule.condition].holds(observed, limit)


@pytest.mark.parametrize("rule", shipped_rules(), ids=lambda rule: rule.id)
def test_a_message_reads_as_a_sentence_with_its_case(rule: Rule) -> None:
    """A filled message is a sentence, and title and remedy are words for people."""
    observed, limit = observed_and_limit(rule, "met")
    said = rule.message.format(observed=in_words(observed), limit=in_words(limit), item="x")
    assert said.endswith(".")
    assert rule.remedy.endswith(".")
    assert not rule.title.endswith(".")


def test_an_empty_folder_meets_nothing() -> None:
    """A program of which nothing is said has no finding that is met, excepted or not met."""
    told = {finding.outcome for finding in assessed(program()).findings}
    assert told <= {"not assessed", "not applicable"}


def test_every_file_of_rules_has_a_topic_of_its_own() -> None:
    """Two files never share the title under which people look for a rule."""
    files = list(schema_file("rules").glob("*.yaml"))
    assert len({rule.topic for rule in shipped_rules()}) == len(files)
