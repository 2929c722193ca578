"""Arrangements are compared by what tells them apart, in words, and silence is no advantage."""

from types import SimpleNamespace
from typing import Any, cast

import pytest

from readiness.assessment.comparison import ordered, telling
from readiness.assessment.graph import Graph
from readiness.assessment.records import ArrangementRow, Finding, Gone, Ref, Value
from tests.assessment.small import rule

RULES = {
    each.id: each
    for each in (
        rule(id="uniform", tells_apart=True),
        rule(id="deep", tells_apart=True),
        rule(id="far", strength="should", tells_apart=True),
        rule(id="record"),
    )
}


def row(name: str, **changes: Any) -> ArrangementRow:
    """Return an arrangement that can be used when gaps close."""
    given: dict[str, Any] = {
        "feasibility": "feasible when gaps close", "deciding": (), "counts": (), "chosen": False, "figures": (),
        "parts": (("room", "vault"),),
    }  # fmt: skip
    return ArrangementRow(Ref("arrangement", name), item_title(name), **{**given, **changes})


def item_title(name: str) -> str:
    """Return the title of an arrangement."""
    return f"vault, {name}"


def graph(**numbers: dict[str, float]) -> Graph:
    """Return what looks like a graph that knows these numbers, by value and arrangement."""

    def get(name: str, ref: Ref) -> Value | Gone:
        found = numbers.get(name.partition(".")[2], {}).get(ref.id)
        return Gone(()) if found is None else Value(name, ref, found, "", "predicted")

    names = {f"arrangement.{name}": None for name in numbers}
    return cast(Graph, SimpleNamespace(catalogue=SimpleNamespace(definitions=names), get=get))


def names(rows: tuple[ArrangementRow, ...]) -> list[str]:
    """Return the arrangements in their order."""
    return [each.item.id for each in rows]


def finding(rule_id: str, outcome: str, expected: str = "", item: str = "a") -> Finding:
    """Return a finding of one arrangement."""
    return Finding(rule_id, Ref("exposure", item), outcome, expected=expected)


def test_only_rules_that_tell_arrangements_apart_are_compared() -> None:
    """A missing record speaks against the department, not against an arrangement."""
    said = telling([finding("record", "not met"), finding("deep", "met"), finding("far", "not met")], RULES)
    assert said == (("far",), ())


def test_an_expected_failure_speaks_against_and_an_expected_success_does_not() -> None:
    """A prediction orders arrangements, though it meets no rule."""
    found = [finding("deep", "not assessed", "not met"), finding("uniform", "not assessed", "met")]
    assert telling(found, RULES) == (("deep",), ())


def test_a_rule_counts_once_whatever_the_number_of_barriers() -> None:
    """One failing barrier is enough, and one without an answer does not make the rule count twice."""
    found = [finding("deep", "not met", item="east"), finding("deep", "not assessed", item="west"),
             finding("deep", "not met", item="door")]  # fmt: skip
    assert telling(found, RULES) == (("deep",), ())


def test_musts_stand_before_shoulds() -> None:
    """What a must-rule says is named first."""
    assert telling([finding("far", "not assessed"), finding("deep", "not assessed")], RULES) == (
        (), ("deep", "far"),
    )  # fmt: skip


def test_silence_is_no_advantage() -> None:
    """An arrangement of which little is known does not overtake one that is known to miss as many rules."""
    rows = ordered(
        [row("known", against=("deep",)), row("silent", unanswered=("deep", "uniform"))], RULES, graph()
    )
    assert names(rows) == ["known", "silent"]
    assert rows[0].reasons == (
        "It stands first. It does not keep, or is not expected to keep, deep; the next, vault, silent, has no answer"
        " yet to deep, uniform.",
    )


def test_what_is_unknown_stands_before_what_fails_where_as_many_are_open() -> None:
    """What has no answer yet may still turn out well."""
    assert names(ordered([row("fails", against=("deep",)), row("open", unanswered=("deep",))], RULES, graph())) == [
        "open", "fails",
    ]  # fmt: skip


@pytest.mark.parametrize(
    ("worse", "better"),
    [
        ({"feasibility": "not feasible here"}, {"against": ("deep", "uniform", "far")}),
        ({"against": ("uniform",)}, {"against": ("far",), "unanswered": ()}),
        ({"against": ("deep", "far")}, {"against": ("deep",)}),
    ],
)
def test_an_earlier_question_decides(worse: dict[str, Any], better: dict[str, Any]) -> None:
    """Feasibility comes before must-rules, they before should-rules, whatever the later answers are."""
    wide = graph(predicted_lowest_tilt_deg={"worse": 10, "better": 15},
                 predicted_highest_tilt_deg={"worse": 20, "better": 16})  # fmt: skip
    assert names(ordered([row("worse", **worse), row("better", **better)], RULES, wide)) == [
        "better",
        "worse",
    ]


def test_a_wider_band_of_tilts_then_shorter_beam_time_then_the_folder_decide() -> None:
    """Bands within half a degree and times within a minute are alike; then the folder's order stays."""
    tilts = {
        "predicted_lowest_tilt_deg": {"a": 15.0, "b": 15.0},
        "predicted_highest_tilt_deg": {"a": 16.0, "b": 18.0},
    }
    minutes = {"session_beam_min": {"a": 18.0, "b": 5.0}}
    rows = [row("a"), row("b")]
    assert names(ordered(rows, RULES, graph(**tilts))) == ["b", "a"]
    assert "over 3.0 degrees of tilt" in ordered(rows, RULES, graph(**tilts))[0].reasons[0]
    quick = ordered(rows, RULES, graph(**minutes))
    assert names(quick) == ["b", "a"]
    assert "needs 5 minutes of beam in a session" in quick[0].reasons[0]
    assert names(ordered(rows, RULES, graph(session_beam_min={"a": 5.3, "b": 5.0}))) == ["a", "b"]
    assert ordered(rows, RULES, graph())[0].reasons == (
        "It and the next, vault, b, stand alike; the folder lists it first.",
    )


def test_a_chosen_arrangement_that_is_not_the_first_says_what_stands_before_it() -> None:
    """The department may choose otherwise; the comparison stays visible beside its choice."""
    rows = ordered([row("own", chosen=True, against=("deep",)), row("other")], RULES, graph())
    assert names(rows) == ["other", "own"]
    assert rows[1].reasons == (
        "The department chose it: it does not keep, or is not expected to keep, deep. Compared, vault, other comes"
        " first: that one keeps, or is expected to keep, every must-rule compared.",
    )


def test_a_single_arrangement_says_so() -> None:
    """There is nothing to compare it with; of none there is nothing to say."""
    assert ordered([row("a")], RULES, graph())[0].reasons == ("It is the only arrangement described.",)
    assert ordered([], RULES, graph()) == ()
