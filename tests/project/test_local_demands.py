"""A physicist whose regulator demands 10 uSv in any one hour, and an audit more often than guidance asks."""

import json
import shutil
from pathlib import Path

import pytest

from readiness.cli import run

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"
DAY = ["--as-of", "2026-12-01"]
DEMANDS = """\
limits:
  - id: any-hour-state
    criterion: any_hour_limit_usv
    limit: 10
    unit: uSv
    strength: must
    source: Invented State, radiation protection rule 12
rules:
  - id: state-audit
    title: Audit of the reference output twice a year
    strength: must
    source: Invented State, radiation protection rule 30
    subject: reference_dosimetry.days_since_audit_days
    condition: at_most
    limit: 183
    message: "The last outside audit was {observed} days ago; the state allows {limit} days."
"""


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    """Return a copy of the sample under the regulator's demands."""
    copy = tmp_path / "program"
    shutil.copytree(SAMPLE, copy)
    (copy / "local_rules.yaml").write_text(DEMANDS, encoding="utf-8")
    return copy


def test_the_rule_is_judged_against_the_local_limit(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The rule shown whole names the local number, its regulation, and what it stands instead of."""
    assert run(["rules", "any-one-hour", str(folder), *DAY]) == 0
    printed = " ".join(capsys.readouterr().out.split())
    assert "Limit: 10 µSv, by Invented State, radiation protection rule 12" in printed
    assert "instead of 20 µSv" in printed


def test_without_a_folder_the_shipped_limit_is_shown_with_its_source(capsys: pytest.CaptureFixture[str]) -> None:
    """The number behind a criterion is not hidden."""
    assert run(["rules", "any-one-hour"]) == 0
    assert "Limit: 20 µSv; cfr-20, 20.1301(a)(2) (read)" in capsys.readouterr().out


def test_demand_and_breach_reach_findings_gaps_and_review(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The limit of every judged place is 10, and the missed audit is the first gap that blocks."""
    assert run(["assess", str(folder), "--json", *DAY]) == 1
    assessment = json.loads(capsys.readouterr().out)
    limits = {each["limit"] for each in assessment["findings"] if each["rule"] == "any-one-hour" and each["limit"]}
    assert {10} == limits
    audit = next(each for each in assessment["findings"] if each["rule"] == "state-audit")
    assert ("not met", 257, 183) == (audit["outcome"], audit["observed"], audit["limit"])
    assert any("the state allows 183 days" in gap["what"] for gap in assessment["gaps"])
    assert run(["review", str(folder), *DAY]) == 1
    printed = " ".join(capsys.readouterr().out.split())
    assert "state-audit: The last outside audit was 257 days ago" in printed
    assert "Limit on any_hour_limit_usv: 10" in printed
