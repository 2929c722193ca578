"""Walls of the sample before and after, openings left to the survey, air at the end of a session."""

from datetime import date
from pathlib import Path

import pytest

from readiness.assessment.candidates import arrangements, exposures, measurements
from readiness.assessment.catalogue import catalogue
from readiness.assessment.graph import Graph
from readiness.assessment.judge import judge_rule
from readiness.assessment.records import Finding, Gone, Ref, Value
from readiness.assessment.ruleset import load_rules
from readiness.program.reading import read_folder

SAMPLE = Path(__file__).resolve().parents[3] / "sample_program"
CHOSEN = "vault-a/linac-1/e6-high-rate/side-90/six-position/sheet-06/turntable-1"


@pytest.fixture(scope="module")
def sample() -> Graph:
    """Return the values of the sample."""
    program = read_folder(SAMPLE)
    made = arrangements(program)
    items = (*made, *exposures(program, made), *measurements(program))
    return Graph(program, items, catalogue(), date(2026, 12, 1), {})


def number(graph: Graph, name: str, barrier: str, arrangement: str = CHOSEN) -> float:
    """Return a value of a barrier seen from an arrangement."""
    got = graph.get(name, Ref("exposure", f"{barrier} from {arrangement}"))
    assert isinstance(got, Value), got
    return float(got.value)


def outcome(graph: Graph, rule_id: str, barrier: str) -> Finding:
    """Return what a rule says of a barrier seen from the chosen arrangement."""
    rule = next(rule for rule in load_rules(catalogue()) if rule.id == rule_id)
    wanted = barrier if rule.kind == "barrier" else f"{barrier} from {CHOSEN}"
    return next(finding for finding in judge_rule(rule, graph) if finding.item.id == wanted)


@pytest.mark.parametrize(("barrier", "before"), [("a-west", 2.08), ("a-east", 1.77)])
def test_before_is_the_photon_work_alone(sample: Graph, barrier: str, before: float) -> None:
    """The dose before the program is that of the walls calculated alone (2 % for rounded distances)."""
    assert number(sample, "exposure.before_usv_per_week", barrier) == pytest.approx(before, rel=0.02)


@pytest.mark.parametrize("barrier", ["a-west", "a-east", "a-control"])
def test_the_walls_of_vault_a_keep_their_goal(sample: Graph, barrier: str) -> None:
    """Behind thick walls the program adds something and the goal is kept."""
    before = number(sample, "exposure.before_usv_per_week", barrier)
    after = number(sample, "exposure.weekly_dose_usv_per_week", barrier)
    assert before < after
    assert number(sample, "exposure.goal_ratio", barrier) < 1


def test_a_kept_goal_that_rests_on_defaults_is_not_met(sample: Graph) -> None:
    """Leakage and lobe factor are only assumed: not assessed, expected to be met."""
    finding = outcome(sample, "weekly-goal", "a-west")
    assert ("not assessed", "met") == (finding.outcome, finding.expected)
    assert {"beam.leakage_percent", "beam.lobe_factor"} <= {cause.what for cause in finding.causes}


def test_a_door_is_left_to_the_survey(sample: Graph) -> None:
    """No number stands beside a door; it needs a survey in the mode."""
    assert isinstance(sample.get("exposure.weekly_dose_usv_per_week", Ref("exposure", f"a-door from {CHOSEN}")), Gone)
    assert outcome(sample, "weekly-goal", "a-door").outcome == "not applicable"
    assert outcome(sample, "survey-within-goal", "a-door").outcome == "not assessed"


def test_the_three_factors_are_shown(sample: Graph) -> None:
    """The workload says by how much 6/B, water and lobe raise it: between 7 and 10 for this set-up."""
    got = sample.get("arrangement.xray_factor_ratio", Ref("arrangement", CHOSEN))
    assert isinstance(got, Value)
    assert 7 < float(got.value) < 10


def test_without_depth_an_xray_fraction_is_not_enough(sample: Graph) -> None:
    """A plain f1 without its depth gives no workload and names the depth."""
    program = read_folder(SAMPLE)
    from dataclasses import replace

    items = tuple(
        replace(item, fields={k: v for k, v in item.fields.items() if k != "xray_fraction_depth_cm"})
        for item in program.items
    )
    less = replace(program, items=items)
    made = arrangements(less)
    graph = Graph(less, (*made, *exposures(less, made), *measurements(less)), catalogue(), date(2026, 12, 1), {})
    got = graph.get("arrangement.xray_workload_gy_m2_per_week", Ref("arrangement", CHOSEN))
    assert isinstance(got, Gone)
    assert "beam.xray_fraction_depth_cm" in {cause.what for cause in got.causes}


def test_contributions_add_up(sample: Graph) -> None:
    """The lines of the record sum to the dose."""
    got = sample.get("exposure.contributions", Ref("exposure", f"a-west from {CHOSEN}"))
    assert isinstance(got, Value)
    total = sum(float(row["dose_usv_per_week"]) for row in got.value.records())
    assert total == pytest.approx(number(sample, "exposure.weekly_dose_usv_per_week", "a-west"), rel=1e-4)


def test_ozone_stays_far_below_its_limit(sample: Graph) -> None:
    """A session in the ventilated room gives hundredths of a part in a million."""
    got = sample.get("arrangement.ozone_ppm", Ref("arrangement", CHOSEN))
    assert isinstance(got, Value)
    assert 0.0005 < float(got.value) < 0.05
    assert got.basis == "predicted"


def test_the_survey_of_the_sample_was_not_in_the_mode(sample: Graph) -> None:
    """A photon survey does not count; the rule is not met whatever the margin."""
    rule = next(rule for rule in load_rules(catalogue()) if rule.id == "survey-in-the-mode")
    finding = next(each for each in judge_rule(rule, sample) if each.item.id == "vault-a")
    assert finding.outcome == "not met"
