"""A survey in the mode from the blank file to findings: the sheet comes out, is filled in, and comes back."""

import shutil
from datetime import date
from pathlib import Path

import pytest

from readiness.assessment.records import Assessment, Finding
from readiness.outputs.making import assessed
from readiness.outputs.survey_sheet import survey_sheet
from readiness.program.reading import read_folder

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"
DAY = date(2026, 12, 1)
NET = {"a-west": 0.2, "a-east": 0.02, "a-control": 6.0, "a-door": 4.0}  # invented, in microsievert an hour
BACKGROUND = 0.1


@pytest.fixture(scope="module")
def blank() -> str:
    """Return the sheet of the sample as it comes out."""
    sheet = survey_sheet(assessed(read_folder(SAMPLE), DAY))
    assert sheet is not None
    return sheet.decode("utf-8")


def filled(blank: str, net: dict[str, float], *, day: str = "2026-11-20") -> str:
    """Return the sheet with conditions and readings, all invented."""
    given = {
        "mode": "high-rate", "rate_mu_per_min": "2000", "background_usv_per_h": str(BACKGROUND),
        "instrument": "survey-meter", "date": day, "measured_by": "medical-physicist",
        "phantom": "water-equivalent slab 30 cm", "note": "invented numbers",
    }  # fmt: skip
    lines = []
    for line in blank.splitlines():
        key = line.removeprefix("# ").partition(":")[0]
        barrier = line.partition(",")[0]
        if line.startswith("# ") and key in given:
            lines.append(f"# {key}: {given[key]}")
        elif barrier in net:
            lines.append(line.replace(",,", f",{net[barrier] + BACKGROUND:g},"))
        else:
            lines.append(line)
    return "\n".join(lines) + "\n"


def with_survey(tmp_path: Path, text: str) -> Assessment:
    """Return the assessment of the sample with a survey among its measurements."""
    folder = tmp_path / "program"
    shutil.copytree(SAMPLE, folder)
    (folder / "measurements" / "survey-2026.csv").write_text(text, encoding="utf-8")
    return assessed(read_folder(folder), DAY)


def findings(assessment: Assessment, rule: str) -> dict[str, Finding]:
    """Return what a rule says, by the id of the barrier."""
    found = [each for each in assessment.findings if each.rule == rule]
    return {each.item.id.partition(" from ")[0]: each for each in found if each.outcome != "not applicable"}


def test_the_blank_names_every_place_with_either_field(blank: str) -> None:
    """What the program knows is filled in; readings and conditions are not."""
    lines = blank.splitlines()
    assert {"# kind: survey", "# room: vault-a", "# machine: linac-1", "# beam: e6-high-rate"} <= set(lines)
    assert "# date:" in lines
    for barrier in NET:
        assert 2 == sum(line.startswith(f"{barrier},") for line in lines)
    assert "a-west,106.0,,Office west of vault A" in lines


def test_a_blank_put_back_unfilled_is_refused_by_name(blank: str, tmp_path: Path) -> None:
    """Every condition and reading that is missing is named with its line."""
    from readiness.errors import ProgramProblems

    with pytest.raises(ProgramProblems) as refused:
        with_survey(tmp_path, blank)
    said = "\n".join(map(str, refused.value.problems))
    assert "measurements/survey-2026.csv:" in said
    assert "reading" in said
    assert "date" in said


def test_a_filled_survey_is_compared_place_by_place(blank: str, tmp_path: Path) -> None:
    """Expected and measured stand side by side, and the rules that ask for a measurement are judged."""
    found = with_survey(tmp_path, filled(blank, NET))
    (table,) = [each for each in found.values if each.name == "arrangement.survey_compared"]
    west = [row for row in table.value.records() if row["place"] == "Office west of vault A"]
    assert [pytest.approx(0.2)] * 2 == [row["measured_usv_per_h"] for row in west]
    assert [pytest.approx(0.2 / 0.240784, rel=1e-4)] * 2 == [row["measured_over_predicted"] for row in west]
    assert {"met"} == {each.outcome for each in findings(found, "survey-near-prediction").values()}
    (covers,) = findings(found, "survey-covers-places").values()
    assert ("met", "measured") == (covers.outcome, covers.basis)


def test_what_was_surveyed_is_never_called_measured_where_the_existing_dose_is_calculated(
    blank: str, tmp_path: Path
) -> None:
    """The addition is measured; its sum with a calculated dose is not, and a door counts the addition alone."""
    found = with_survey(tmp_path, filled(blank, NET))
    added = {v.item.id.partition(" from ")[0]: v for v in found.values if v.name == "exposure.surveyed_added_usv_per_week"}
    assert {"measured"} == {each.basis for each in added.values()}
    whole = findings(found, "survey-within-goal")
    assert "assumed" == whole["a-west"].basis
    assert ("met", "stated") != (whole["a-west"].outcome, whole["a-west"].basis)
    assert "met" == whole["a-door"].outcome


def test_the_week_by_the_survey_is_worked_by_hand(blank: str, tmp_path: Path) -> None:
    """Mean of both fields, times the hours of beam in the busiest week, times the occupancy."""
    found = with_survey(tmp_path, filled(blank, NET))
    values = {(each.name, each.item.id.partition(" from ")[0]): each.value for each in found.values}
    # leakage workload = MU of the week x 1 cGy/MU at 1 m / 100
    (leakage,) = [each.value for each in found.values if each.name == "arrangement.leakage_workload_gy_m2_per_week"]
    hours = leakage * 100 / (2000 * 60)
    assert pytest.approx(6.0 * hours, rel=1e-3) == values["exposure.surveyed_added_usv_per_week", "a-control"]
    assert pytest.approx(4.0 * hours * 0.125, rel=1e-3) == values["exposure.surveyed_added_usv_per_week", "a-door"]


def test_a_reading_far_above_its_expectation_is_not_met(blank: str, tmp_path: Path) -> None:
    """Three times the expected rate is looked into; a place above its goal locks the mode."""
    found = with_survey(tmp_path, filled(blank, {**NET, "a-west": 0.8, "a-door": 400.0}))
    assert "not met" == findings(found, "survey-near-prediction")["a-west"].outcome
    assert "not met" == findings(found, "survey-within-goal")["a-door"].outcome


def test_a_place_left_out_is_named_and_not_judged(blank: str, tmp_path: Path) -> None:
    """The survey does not cover the room; the place itself is not assessed."""
    text = "\n".join(line for line in filled(blank, NET).splitlines() if not line.startswith("a-east,74"))
    found = with_survey(tmp_path, text + "\n")
    (covers,) = findings(found, "survey-covers-places").values()
    assert "not met" == covers.outcome
    assert "Corridor east of vault A with the gantry at 74 degrees" in covers.message
    east = findings(found, "survey-near-prediction")["a-east"]
    assert "not assessed" == east.outcome
    assert "no reading of a-east at gantry 74" in east.message


def test_a_survey_before_the_last_change_of_workload_does_not_count(blank: str, tmp_path: Path) -> None:
    """The workload changed on 2026-11-02; a survey of October says nothing of it."""
    found = with_survey(tmp_path, filled(blank, NET, day="2026-10-20"))
    (covers,) = findings(found, "survey-covers-places").values()
    assert "not assessed" == covers.outcome
    assert "workload" in covers.message


def test_a_survey_with_a_meter_out_of_calibration_does_not_count(blank: str, tmp_path: Path) -> None:
    """The meter's calibration begins on 2026-03-04 and ends a year later."""
    found = with_survey(tmp_path, filled(blank, NET, day="2027-03-10"))
    (covers,) = findings(found, "survey-covers-places").values()
    assert "not assessed" == covers.outcome


def test_a_survey_without_scattering_body_gives_no_weekly_dose(blank: str, tmp_path: Path) -> None:
    """The patient's scatter would be missing."""
    text = filled(blank, NET).replace("# phantom: water-equivalent slab 30 cm\n", "")
    whole = findings(with_survey(tmp_path, text), "survey-within-goal")
    assert {"not assessed"} == {each.outcome for each in whole.values()}
    assert "scattering body" in whole["a-door"].message
