"""What the sample department's pilot measurements say, and for which arrangement they say nothing."""

from functools import cache
from pathlib import Path

import pytest

from readiness.assessment.candidates import arrangements, measurements
from readiness.assessment.catalogue import catalogue
from readiness.assessment.graph import Graph
from readiness.assessment.judge import judge_item
from readiness.assessment.records import Finding, Gone, Ref, Value
from readiness.assessment.ruleset import shipped_rules
from readiness.program.reading import read_folder
from tests.assessment.small import DAY

SAMPLE = Path(__file__).resolve().parents[3] / "sample_program"


@cache
def sample() -> Graph:
    """Return the graph of the sample department."""
    program = read_folder(SAMPLE)
    return Graph(program, (*arrangements(program), *measurements(program)), catalogue(), DAY, {})


def with_sheet(sheet: str) -> Ref:
    """Return the planned arrangement with one of the sheets."""
    return Ref("arrangement", f"vault-a/linac-1/e6-high-rate/side-90/six-position/{sheet}/turntable-1")


def finding(rule: str, sheet: str) -> Finding:
    """Return what a rule says of the arrangement with a sheet."""
    wanted = next(each for each in shipped_rules() if each.id == rule)
    return judge_item(wanted, with_sheet(sheet), sample())


def value(name: str, sheet: str) -> Value:
    """Return a value of the arrangement with a sheet."""
    found = sample().get(f"arrangement.{name}", with_sheet(sheet))
    assert isinstance(found, Value)
    return found


def test_the_pilot_sweep_gives_its_stated_half_range() -> None:
    """At 16 degrees the half-range over 80 cm is 3.1 %, across over 30 cm it is 4.5 %."""
    assert pytest.approx(3.1, abs=0.05) == value("vertical_half_range_percent", "sheet-10").value
    assert pytest.approx(4.5, abs=0.05) == value("horizontal_half_range_percent", "sheet-10").value


def test_the_pilot_finds_its_tilt_and_its_foil_spread() -> None:
    """The best tilt lies within half a degree of 16, the foil spread within 0.15 to 0.25."""
    assert pytest.approx(16, abs=0.5) == value("best_tilt_deg", "sheet-10").value
    spread = sample().get("beam.foil_spread", with_sheet("sheet-10"))
    assert isinstance(spread, Value)
    assert "measured" == spread.basis
    assert 0.15 < spread.value < 0.25


def test_the_planned_sheet_has_no_measurement_of_its_own() -> None:
    """What was measured behind the other sheet is named and not used."""
    for rule in ("vertical-uniformity", "horizontal-uniformity", "dose-at-4-mm", "tilt-found-by-measurement"):
        found = finding(rule, "sheet-06")
        assert "not assessed" == found.outcome
        assert any("measured with degrader sheet-10, the plan is sheet-06" in cause.words for cause in found.causes)


def test_the_foil_spread_belongs_to_the_beam_whatever_the_sheet() -> None:
    """The spread fitted behind one sheet serves the prediction for the other."""
    assert "predicted" == value("vertical_half_range_percent", "sheet-06").basis


def test_the_horizontal_profile_fails_where_it_was_measured() -> None:
    """With the pilot's sheet the horizontal rule is not met; with the planned one it is not expected to be."""
    assert "not met" == finding("horizontal-uniformity", "sheet-10").outcome
    assert "not met" == finding("horizontal-uniformity", "sheet-06").expected


def test_the_thick_sheet_misses_the_depth_rule_that_the_planned_one_is_expected_to_keep() -> None:
    """77 % at 4 mm was measured behind 1.0 cm; behind 0.6 cm more than 80 % are expected."""
    assert ("not met", "measured") == (finding("dose-at-4-mm", "sheet-10").outcome, finding("dose-at-4-mm", "sheet-10").basis)
    assert "met" == finding("dose-at-4-mm", "sheet-06").expected


def test_the_output_is_void_because_its_chamber_had_expired() -> None:
    """The chamber's calibration ended five weeks before it was used."""
    found = sample().get("arrangement.pair_output_cgy_per_mu", with_sheet("sheet-10"))
    assert isinstance(found, Gone)
    assert any(
        "instrument plane-parallel-chamber was out of calibration on 2026-10-21 (due 2026-09-16)" in cause.words
        for cause in found.causes
    )


def test_the_sweep_stands_three_centimetres_high() -> None:
    """The sweep's centre is said to lie above 0."""
    remarks = sample().get("measurement.remarks", Ref("measurement", "angle-sweep"))
    assert isinstance(remarks, Value)
    assert any("centred at 2.8 cm" in remark for remark in remarks.value)


def test_every_arrangement_is_predicted_or_says_why_not() -> None:
    """Vault B states no temperature: its arrangements name it, the others have a best tilt."""
    graph = sample()
    for ref in graph.refs("arrangement"):
        found = graph.get("arrangement.best_tilt_deg", ref)
        if ref.id.startswith("vault-b"):
            assert isinstance(found, Gone)
            assert any("temperature" in cause.words for cause in found.causes)
        else:
            assert isinstance(found, Value)
