"""What a reviewer works through: the matrix, and what to look at first."""

from dataclasses import replace
from datetime import date

from readiness.assessment.completeness import Completeness, completeness
from readiness.assessment.evidence import evidence_register
from readiness.assessment.records import Assessment, Finding, Gap, Ref, Rule
from readiness.program.items import InputFile, Item, Program
from tests.assessment.small import DAY, item, program, rule
from tests.assessment.test_evidence import paper
from tests.outputs.fakes import empty, states

ROOM = Ref("room", "vault-a")
RULE = rule(evidence=("room-survey-drawing",), documents=("4.1",))


def gap(finding: Finding, **changes: object) -> Gap:
    """Return the gap of a finding."""
    entries = {
        "id": "g", "kind": "supply", "what": "State the ceiling.", "item": ROOM,
        "findings": ((finding.rule, finding.item),), "task": "choose-room", "owner": "engineer",
        "strength": "must", "phase": "decide", "topic": "Room", "due_later": False,
        "earliest": date(2027, 1, 4),
    }  # fmt: skip
    return Gap(**{**entries, **changes})  # type: ignore[arg-type]


def held(*items: Item) -> Program:
    """Return a program with a drawing among its files."""
    files = (InputFile("evidence/a.txt", "ab" * 32, 12),)
    return replace(program(*items, lists=("evidence",)), files=files)


def reviewed(assessment: Assessment, of: Program | None = None) -> Completeness:
    """Return the completeness of an assessment."""
    of = of or held(paper())
    return completeness(of, assessment, evidence_register(of, assessment, DAY))


def judged(*findings: Finding, rules: tuple[Rule, ...] = (RULE,), gaps: tuple[Gap, ...] = ()) -> Assessment:
    """Return an assessment with a chosen arrangement and approved documents."""
    verdict = replace(empty().verdict, arrangement="a", chosen_by="department")
    return replace(
        empty(), rules=rules, findings=findings, gaps=gaps, verdict=verdict, documents=states("approved")
    )


def headings(found: Completeness) -> list[str]:
    """Return what there is to look at."""
    return [look.heading for look in found.looks]


def test_everything_closed_with_its_paper_is_complete() -> None:
    """Nothing is left to look at."""
    found = reviewed(judged(Finding("ceiling", ROOM, "met", basis="stated", message="m")))
    assert found.is_complete
    assert [] == headings(found)
    (line,) = found.lines
    assert (("drawing-a",), (), (("4.1", "approved"),)) == (line.evidence, line.lacking, line.documents)
    assert date(2026, 10, 6) == line.day


def test_a_must_rule_not_met_comes_first() -> None:
    """It keeps the program incomplete and names its owner."""
    failed = Finding("ceiling", ROOM, "not met", message="Too low.")
    found = reviewed(judged(failed, gaps=(gap(failed, kind="mend"),)))
    assert not found.is_complete
    assert "Must-rules not met" == found.looks[0].heading
    assert ("ceiling: Too low. [engineer]",) == found.looks[0].lines
    assert date(2027, 1, 4) == found.lines[0].day


def test_what_cannot_be_judged_is_told_once_by_its_cause() -> None:
    """Two rules left open by one missing number are one line."""
    other = replace(RULE, id="lift")
    first, second = Finding("ceiling", ROOM, "not assessed"), Finding("lift", ROOM, "not assessed")
    missing = gap(first, findings=(("ceiling", ROOM), ("lift", ROOM)))
    found = reviewed(judged(first, second, rules=(RULE, other), gaps=(missing,)))
    assert ("State the ceiling. [engineer; leaves open: ceiling, lift]",) == found.looks[0].lines
    assert not found.is_complete


def test_a_should_rule_not_met_does_not_keep_it_incomplete() -> None:
    """It stands in the matrix."""
    soft = replace(RULE, strength="should")
    failed = Finding("ceiling", ROOM, "not met", message="Too low.")
    assert reviewed(judged(failed, rules=(soft,))).is_complete


def test_a_must_rule_of_a_later_phase_is_counted_and_does_not_keep_it_incomplete() -> None:
    """What is due later is not late."""
    failed = Finding("ceiling", ROOM, "not met", message="Too low.")
    found = reviewed(judged(failed, gaps=(gap(failed, due_later=True),)))
    assert found.is_complete
    assert ["Must-rules of later phases"] == headings(found)


def test_evidence_that_does_not_stand_keeps_it_incomplete() -> None:
    """A paper whose file is missing is named."""
    found = reviewed(judged(Finding("ceiling", ROOM, "met")), program(paper(), lists=("evidence",)))
    assert not found.is_complete
    assert ["Evidence that does not stand", "Met on a statement alone, without the paper that shows it"] == headings(
        found
    )


def test_met_by_a_measurement_needs_no_paper_to_be_believed() -> None:
    """The measurement is in the folder itself."""
    found = reviewed(judged(Finding("ceiling", ROOM, "met", basis="measured")), held())
    assert "Met on a statement alone, without the paper that shows it" not in headings(found)


def test_a_document_changed_after_approval_keeps_it_incomplete() -> None:
    """The approval no longer covers what it says."""
    changed = replace(judged(), documents=states("changed after approval"))
    found = reviewed(changed)
    assert not found.is_complete
    assert "Documents changed after their approval" in headings(found)


def test_drafts_are_told() -> None:
    """They are counted; the rules say whether that is too late."""
    found = reviewed(replace(judged(), documents=states("draft")))
    assert "Documents not approved" in headings(found)
    assert found.is_complete


def test_a_prediction_expected_to_fail_stands_before_one_expected_to_hold() -> None:
    """And neither is called met."""
    other = replace(RULE, id="lift")
    good = Finding("ceiling", ROOM, "not assessed", expected="met", message="High.", basis="predicted")
    bad = Finding("lift", ROOM, "not assessed", expected="not met", message="Narrow.", basis="assumed")
    found = reviewed(judged(good, bad, rules=(RULE, other)))
    look = next(each for each in found.looks if each.heading.startswith("Predicted"))
    assert (
        "lift (must): Narrow. That is assumed; expected: not met.",
        "ceiling (must): High. That is predicted; expected: met.",
    ) == look.lines


def test_an_exception_that_covers_nothing_says_so() -> None:
    """It stands beside those in force."""
    granted = item("exception", "low", rule="ceiling", approver="chief", expires_on=date(2027, 1, 1))
    unused = reviewed(judged(), held(paper(), granted))
    (line,) = next(look.lines for look in unused.looks if look.heading == "Exceptions")
    assert "low: rule ceiling, granted by chief until 2027-01-01; covers nothing: not in force, or not needed." == line
    covered = judged(Finding("ceiling", ROOM, "excepted", exception="low"))
    (line,) = next(look.lines for look in reviewed(covered, held(paper(), granted)).looks if look.heading == "Exceptions")
    assert line.endswith("in force.")


def test_a_recommendation_is_no_choice() -> None:
    """The department must choose what is judged."""
    verdict = replace(empty().verdict, arrangement="a", chosen_by="recommendation")
    found = reviewed(replace(judged(), verdict=verdict))
    assert "Arrangement" in headings(found)
    assert not found.is_complete


def test_the_matrix_is_ordered_by_subject_and_strength() -> None:
    """Must before should within a subject, subjects in the order of the rules."""
    rules = (
        replace(RULE, id="a", topic="Room", strength="should"), replace(RULE, id="b", topic="Beam"),
        replace(RULE, id="c", topic="Room"),
    )  # fmt: skip
    found = reviewed(judged(*(Finding(each.id, ROOM, "met") for each in rules), rules=rules))
    assert ["c", "a", "b"] == [line.rule for line in found.lines]


def test_what_does_not_apply_asks_for_no_paper() -> None:
    """No evidence, nothing lacking."""
    (line,) = reviewed(judged(Finding("ceiling", ROOM, "not applicable"))).lines
    assert ((), (), ()) == (line.asked, line.evidence, line.lacking)
