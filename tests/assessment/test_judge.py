"""A rule meets an item: five outcomes, never "met" on what is missing or assumed."""

from dataclasses import replace
from datetime import date

import pytest

from readiness.assessment.conditions import CONDITIONS, fits
from readiness.assessment.definition import Definition, Measured
from readiness.assessment.exceptions import excepted
from readiness.assessment.gaps import find_gaps
from readiness.assessment.judge import judge, judge_item
from readiness.assessment.records import Clause, Ref
from readiness.assessment.ruleset import check_rule
from readiness.errors import CatalogueError
from tests.assessment.small import DAY, graph, item, program, rule, small_catalogue

ROOM = Ref("room", "a")


def outcome(of: object, **changes: object) -> str:
    """Return the outcome of the ceiling rule for room a."""
    return judge_item(rule(**changes), ROOM, graph(of)).outcome  # type: ignore[arg-type]


def test_met_and_not_met() -> None:
    """A ceiling at the limit meets it, one below does not."""
    assert outcome(program(item("room", "a", ceiling_height_cm=260.0))) == "met"
    assert outcome(program(item("room", "a", ceiling_height_cm=259.9))) == "not met"


def test_what_is_missing_is_not_assessed() -> None:
    """A room without a ceiling height is not assessed, and the cause names field and file."""
    finding = judge_item(rule(), ROOM, graph(program(item("room", "a"))))
    assert finding.outcome == "not assessed"
    assert finding.message == (
        "State ceiling height (cm) of room a in rooms.yaml: lowest height of the ceiling above the floor."
    )


def test_a_rule_that_does_not_apply() -> None:
    """False conditions make a rule not applicable; unknown ones leave it not assessed."""
    applies = (Clause("room.camera_views", "at_least", 1),)
    with_camera = program(item("room", "a", ceiling_height_cm=300.0, camera_views=2))
    without = program(item("room", "a", ceiling_height_cm=300.0, camera_views=0))
    unknown = program(item("room", "a", ceiling_height_cm=300.0))
    assert outcome(with_camera, applies_when=applies) == "met"
    assert outcome(without, applies_when=applies) == "not applicable"
    assert outcome(unknown, applies_when=applies) == "not assessed"


def test_an_assumed_number_is_never_met() -> None:
    """A default that holds is not assessed with "met" expected; one that fails is not met."""
    of = graph(program(item("room", "a")))
    air = rule(subject="room.air_changes_per_h", limit=6)
    finding = judge_item(air, ROOM, of)
    assert ("not assessed", "met") == (finding.outcome, finding.expected)
    assert "only assumed" in finding.causes[0].words
    assert judge_item(replace(air, limit=7), ROOM, of).outcome == "not met"


def test_a_prediction_does_not_satisfy_a_rule_that_asks_for_a_measurement() -> None:
    """What is not measured is not assessed, and says what to expect."""
    spread = Definition("beam.foil_spread", "Spread.", measured=Measured("single-profile", takes={"x": "measurement.date"}))
    of = graph(program(item("machine", "m"), item("beam", "m/e", {"machine": "m"}, foil_spread=0.2)), spread)
    asked = rule(subject="beam.foil_spread", condition="at_most", limit=0.3, basis="measured")
    finding = judge_item(asked, Ref("beam", "m/e"), of)
    assert ("not assessed", "met") == (finding.outcome, finding.expected)
    assert finding.causes[0].kind == "measurement"


def test_the_kind_is_the_quantifier() -> None:
    """One finding for each item; one for an unknown list; not applicable for an empty one."""
    of = program(item("room", "a", ceiling_height_cm=300.0), item("room", "b", ceiling_height_cm=200.0))
    assert ["met", "not met"] == [finding.outcome for finding in judge([rule()], graph(of))]
    assert ["not assessed"] == [finding.outcome for finding in judge([rule()], graph(program()))]
    assert ["not applicable"] == [finding.outcome for finding in judge([rule()], graph(program(lists=("room",))))]


def test_a_limit_may_be_another_value() -> None:
    """A limit that is a value is looked up for the item, and missing it is not assessed."""
    asked = {"limit": "room.isocentre_height_cm"}
    assert outcome(program(item("room", "a", ceiling_height_cm=300.0, isocentre_height_cm=130.0)), **asked) == "met"
    assert outcome(program(item("room", "a", ceiling_height_cm=300.0)), **asked) == "not assessed"


@pytest.mark.parametrize(
    ("name", "value", "limit", "holds"),
    [
        ("at_least", 3.0, 3.0, True), ("at_most", 3.0, 3.0, True), ("above", 3.0, 3.0, False),
        ("below", 2.9, 3.0, True), ("equals", "yes", "no", False), ("one_of", "a", ("a", "b"), True),
        ("is_yes", True, None, True), ("is_yes", 1, None, False), ("is_no", False, None, True),
        ("present", 0, None, True), ("contains", ("a", "b"), ("a",), True), ("contains", ("a",), ("a", "b"), False),
        ("on_or_after", DAY, DAY, True), ("on_or_before", date(2026, 12, 2), DAY, False),
    ],
)  # fmt: skip
def test_conditions(name: str, value: object, limit: object, holds: bool) -> None:
    """Each condition says what its name says, also at its limit."""
    assert CONDITIONS[name].holds(value, limit) is holds
    assert fits(CONDITIONS[name], limit)


def exception(**changes: object) -> object:
    """Return an exception for the ceiling of room a, in force unless changed."""
    entries = {"rule": "ceiling", "item": "a", "reason": "built in 1970", "approver": "chief physicist",
               "approved_on": date(2026, 11, 1), "expires_on": date(2027, 11, 1), **changes}  # fmt: skip
    return item("exception", "low", **{key: value for key, value in entries.items() if value is not None})


def excepted_outcome(granted: object, **changes: object) -> str:
    """Return the outcome of the failing ceiling rule with an exception."""
    of = program(item("room", "a", ceiling_height_cm=200.0), granted)  # type: ignore[arg-type]
    asked = rule(**changes)
    findings, _ = excepted(judge([asked], graph(of)), {asked.id: asked}, of, DAY)
    return findings[0].outcome


def test_an_exception_covers_one_rule_and_item_while_it_is_in_force() -> None:
    """Signed, dated and not expired, for exactly this rule and item."""
    assert excepted_outcome(exception()) == "excepted"
    assert excepted_outcome(exception(expires_on=date(2026, 11, 30))) == "not met"
    assert excepted_outcome(exception(approver=None)) == "not met"
    assert excepted_outcome(exception(item="b")) == "not met"
    assert excepted_outcome(exception(approved_on=date(2026, 12, 2))) == "not met"


def test_an_exception_never_covers_a_physical_or_not_exceptable_rule() -> None:
    """Two persons, interlocks and walls stay as they are."""
    assert excepted_outcome(exception(), exceptable=False) == "not met"


def test_one_missing_field_is_one_gap_however_many_rules_wait_for_it() -> None:
    """Two rules on one field close with one thing to supply, in the strictest strength."""
    rules = (rule(), rule(id="ceiling-again", strength="consider", phase="build"))
    findings = judge(rules, graph(program(item("room", "a"))))
    gaps = find_gaps(findings, {each.id: each for each in rules}, "decide")
    assert len(gaps) == 1
    assert ("must", "decide", False) == (gaps[0].strength, gaps[0].phase, gaps[0].due_later)
    assert gaps[0].findings == (("ceiling", ROOM), ("ceiling-again", ROOM))


def test_a_later_phase_is_due_later() -> None:
    """A rule of a later phase makes a gap that does not block yet."""
    late = rule(phase="commission")
    findings = judge([late], graph(program(item("room", "a", ceiling_height_cm=200.0))))
    assert [True] == [gap.due_later for gap in find_gaps(findings, {late.id: late}, "decide")]


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        ({"subject": "room.ceiling"}, "does not exist"), ({"condition": "is_big"}, "does not exist"),
        ({"limit": "high"}, "does not fit"), ({"strength": "shall"}, "none of"),
        ({"message": "The {ceiling} is low."}, "hole"),
        ({"would_do": "stand.width_cm"}, "no value of a room"),
        ({"applies_when": (Clause("stand.width_cm", "at_least", 1),)}, "cannot be asked"),
    ],
)  # fmt: skip
def test_a_rule_that_refers_to_nothing_is_refused(changes: dict[str, object], words: str) -> None:
    """Loading a rule checks everything it refers to."""
    with pytest.raises(CatalogueError, match=words):
        check_rule(rule(**changes), small_catalogue(), "rule")
