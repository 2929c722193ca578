"""The whole way from a folder to a verdict: empty, sample, same answers."""

from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from readiness.assessment.records import Assessment
from readiness.outputs.contract import from_json, to_json
from readiness.outputs.making import assessed
from readiness.program.fields import schemas
from readiness.program.reading import read_folder
from readiness.program.starter import write_starter

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"
DAY = date(2026, 12, 1)


@pytest.fixture(scope="module")
def sample() -> Assessment:
    """Return the assessment of the sample."""
    return assessed(read_folder(SAMPLE), DAY)


@pytest.fixture(scope="module")
def untouched(tmp_path_factory: pytest.TempPathFactory) -> Assessment:
    """Return the assessment of a starter that nobody has touched."""
    folder = tmp_path_factory.mktemp("new") / "program"
    write_starter(folder, schemas())
    return assessed(read_folder(folder), DAY)


def test_an_untouched_starter_meets_nothing(untouched: Assessment) -> None:
    """Nothing is met, nothing fails, and the verdict says that not enough is described."""
    assert {finding.outcome for finding in untouched.findings} <= {"not assessed", "not applicable"}
    assert untouched.verdict.words == "not enough described"
    assert untouched.schedule is not None
    assert untouched.schedule.first_patient is None


def test_the_sample_answers_as_it_was_meant_to(sample: Assessment) -> None:
    """One room is possible when gaps close, the other fails under its ceiling."""
    assert sample.verdict.words == "ready when gaps close"
    by_room = {}
    for row in sample.arrangements:
        by_room.setdefault(dict(row.parts)["room"], set()).add(row.feasibility)
    assert by_room == {"vault-a": {"feasible when gaps close"}, "vault-b": {"not feasible here"}}
    vault_b = next(row for row in sample.arrangements if dict(row.parts)["room"] == "vault-b")
    assert "ceiling" in vault_b.deciding[0].message


def test_the_sample_misses_its_date(sample: Assessment) -> None:
    """The critical path ends after the target (126 working days, worked by hand for its own task list)."""
    assert sample.schedule is not None
    assert sample.schedule.working_days_late is not None
    assert sample.schedule.working_days_late >= 17


def test_pilot_measurements_do_not_carry_over_to_another_degrader(sample: Assessment) -> None:
    """What was measured with one sheet does not count for the other, and the cause says so."""
    words = " ".join(cause.words for finding in sample.findings for cause in finding.causes)
    assert "measured with degrader sheet-10, the plan is sheet-06" in words


def test_a_void_measurement_is_named(sample: Assessment) -> None:
    """An instrument out of calibration on the day is the reason given."""
    words = " ".join(cause.words for finding in sample.findings for cause in finding.causes)
    assert "out of calibration on 2026-10-21" in words


def test_the_exception_in_force_is_shown(sample: Assessment) -> None:
    """The rule stays visible as excepted, with its exception."""
    assert [("axes-clear-of-trunk", "axes-above-head")] == [
        (finding.rule, finding.exception) for finding in sample.findings if finding.outcome == "excepted"
    ]


def test_an_expired_exception_covers_nothing() -> None:
    """After its last day the finding is not met again."""
    later = assessed(read_folder(SAMPLE), date(2027, 11, 11))
    finding = next(each for each in later.findings if each.rule == "axes-clear-of-trunk")
    assert finding.outcome == "not met"


def test_no_must_is_met_on_a_default(sample: Assessment) -> None:
    """Whatever is met rests on nothing that was only assumed."""
    assert not [finding for finding in sample.findings if finding.outcome == "met" and finding.basis == "assumed"]


def test_rules_that_ask_for_measurement_are_met_only_by_measurement(sample: Assessment) -> None:
    """A prediction never satisfies them."""
    asked = {rule.id for rule in sample.rules if rule.basis == "measured"}
    assert not [
        finding for finding in sample.findings
        if finding.rule in asked and finding.outcome == "met" and finding.basis != "measured"
    ]  # fmt: skip


def test_the_sample_comes_back_from_json(sample: Assessment) -> None:
    """The contract holds the whole sample."""
    assert sample == from_json(to_json(sample))


def test_same_input_same_answer(sample: Assessment) -> None:
    """A second run gives the same bytes."""
    assert to_json(sample) == to_json(assessed(read_folder(SAMPLE), DAY))


def test_every_gap_has_owner_task_and_place_in_time(sample: Assessment) -> None:
    """A gap says who, which task and when."""
    assert sample.schedule is not None
    planned = {task.id for task in sample.schedule.tasks}
    for gap in sample.gaps:
        assert gap.owner
        assert gap.what
        assert gap.phase == "operate" or gap.task in planned or gap.earliest is None


def test_a_program_is_ready_only_with_a_release_record(sample: Assessment) -> None:
    """The verdict is not ready while a must-rule is open, whatever the phase."""
    program = read_folder(SAMPLE)
    root = program.items[0]
    released = replace(root, fields={**root.fields, "phase": replace(root.fields["phase"], value="release")})
    again = assessed(replace(program, items=(released, *program.items[1:])), DAY)
    assert again.verdict.words != "ready"
