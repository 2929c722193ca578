"""Gaps: one for each thing to supply or to mend, with the owner and the phase of the rule that asks for it."""

from readiness.assessment.gaps import find_gaps
from readiness.assessment.records import Cause, Finding, Ref
from tests.assessment.small import assessed, item, program, rule

BEAM = Ref("arrangement", "a")
EARLY = rule(id="early", owner="qualified expert", task="calculate-shielding", phase="decide")
MEASURED = rule(id="measured", owner="medical physicist", task="commission-beam", phase="commission", basis="measured")
RULES = {each.id: each for each in (EARLY, MEASURED)}


def found(kind: str) -> list[Finding]:
    """Return findings of both rules that wait for the same thing."""
    cause = Cause(kind, "b-factor", BEAM, "Measure b factor for arrangement a.")
    return [Finding(name, BEAM, "not assessed", causes=(cause,)) for name in RULES]


def test_a_measurement_is_due_when_a_rule_asks_for_it_as_measured() -> None:
    """A calculation that could use it earlier does not make it due earlier, nor its owner the one to measure."""
    (gap,) = find_gaps(found("measurement"), RULES, "decide")
    assert ("medical physicist", "commission-beam", "commission", True) == (gap.owner, gap.task, gap.phase, gap.due_later)
    assert (("early", BEAM), ("measured", BEAM)) == gap.findings


def test_a_fact_is_due_when_the_earliest_rule_needs_it() -> None:
    """What can be stated at once is due in the first phase that asks for it."""
    (gap,) = find_gaps(found("field"), RULES, "decide")
    assert ("qualified expert", "describe-program", "decide", False) == (gap.owner, gap.task, gap.phase, gap.due_later)


def test_unlisted_barriers_are_one_gap_of_their_room() -> None:
    """Rules on places and rules on barriers wait for the same list."""
    of = program(
        item("room", "a", None), item("machine", "l", {"room": "a"}), item("beam", "l/e6", {"machine": "l"}),
        item("degrader", "s"), item("stand", "t"), lists=("couch",), techniques=("six-position",),
    )  # fmt: skip
    asked = [gap for gap in assessed(of).gaps if "barrier" in gap.id]
    assert ["List every barrier of room a in shielding.yaml; [] if there is none."] == [gap.what for gap in asked]
    assert len(asked[0].findings) > 5


def test_what_is_not_described_is_asked_once() -> None:
    """The verdict names each thing to supply once, and says that nothing can be recommended yet."""
    of = program(
        item("room", "a", None), item("machine", "l", {"room": "a"}), item("beam", "l/e6", {"machine": "l"}),
        item("degrader", "s"), item("stand", "t"), lists=("couch",), techniques=("six-position",),
    )  # fmt: skip
    verdict = assessed(of).verdict
    assert "not enough described" == verdict.words
    assert len(verdict.reasons) == len(set(verdict.reasons)) == 9
    assert verdict.reasons[-1].endswith("more; the gap list names them.")
