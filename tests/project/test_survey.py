"""A survey in the mode from the blank file to findings: the sheet comes out, is filled in, and comes back."""

import shutil
from datetime import date
from pathlib import Path

import pytest

from readiness.assessment.records import Assessment, Finding
from readiness.outputs.making import assessed
from readiness.outputs.survey_sheet import survey_sheet
from readiness.program.reading import questions, read_folder

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
        "patient_place": "occupied", "note": "invented numbers",
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


def with_survey(tmp_path: Path, text: str, *, before_at_door: str = "") -> Assessment:
    """Return the assessment of the sample with a survey among its measurements."""
    folder = tmp_path / "program"
    shutil.copytree(SAMPLE, folder)
    if before_at_door:
        shielding = folder / "shielding.yaml"
        stated = f"role: door\n    existing_usv_per_week: {before_at_door}"
        shielding.write_text(shielding.read_text(encoding="utf-8").replace("role: door", stated), encoding="utf-8")
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
    """The addition is measured; its sum with a calculated dose is not, and a door counts what is stated."""
    found = with_survey(tmp_path, filled(blank, NET), before_at_door="3.5")
    added = {v.item.id.partition(" from ")[0]: v for v in found.values if v.name == "exposure.surveyed_added_usv_per_week"}
    assert {"measured"} == {each.basis for each in added.values()}
    whole = findings(found, "survey-within-goal")
    assert "assumed" == whole["a-west"].basis
    assert ("met", "stated") != (whole["a-west"].outcome, whole["a-west"].basis)
    assert ("met", "stated") == (whole["a-door"].outcome, whole["a-door"].basis)
    (ratio,) = [
        each.value for each in found.values
        if each.name == "exposure.surveyed_goal_ratio" and each.item.id.startswith("a-door")
    ]  # fmt: skip
    assert pytest.approx((3.5 + 0.374867) / 20, rel=1e-4) == ratio


def test_a_door_whose_existing_dose_is_unknown_keeps_no_goal(blank: str, tmp_path: Path) -> None:
    """The addition alone is not the dose behind it; too high an addition needs no more."""
    found = with_survey(tmp_path, filled(blank, NET))
    for rule in ("survey-within-goal", "survey-any-one-hour"):
        door = findings(found, rule)["a-door"]
        assert "not assessed" == door.outcome
        assert "state existing_usv_per_week" in door.message
    high = with_survey(tmp_path / "high", filled(blank, {**NET, "a-door": 400.0}))
    assert "not met" == findings(high, "survey-within-goal")["a-door"].outcome
    assert "not met" == findings(high, "survey-any-one-hour")["a-door"].outcome


def test_the_hour_by_the_survey_is_worked_by_hand(blank: str, tmp_path: Path) -> None:
    """Two sessions of the busiest hour, half a cycle each, and twice a fortieth of the photon week beside them."""
    found = with_survey(tmp_path, filled(blank, NET), before_at_door="3.5")
    values = {(each.name, each.item.id.partition(" from ")[0]): each.value for each in found.values}
    week, cycles = values["exposure.surveyed_added_usv_per_week", "a-door"], 4.0
    expected = 2 * week / 0.125 / cycles / 2 + 2 / 40 * 3.5 / 0.125
    assert pytest.approx(expected, rel=1e-4) == values["exposure.surveyed_hour_usv", "a-door"]
    (shown,) = [each.value for each in found.values if each.name == "arrangement.survey_judged"]
    assert pytest.approx(expected, rel=1e-4) == {row[0]: row[4] for row in shown.rows}["Door of vault A"]
    assert "a-control" not in findings(found, "survey-any-one-hour")


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
    text = filled(blank, NET).replace("patient_place: occupied", "patient_place: empty")
    whole = findings(with_survey(tmp_path, text), "survey-within-goal")
    assert {"not assessed"} == {each.outcome for each in whole.values()}
    assert "scattering body" in whole["a-door"].message


def test_an_empty_place_is_never_taken_for_an_occupied_one(blank: str, tmp_path: Path) -> None:
    """Whatever is written about a phantom, the word for the patient's place decides."""
    text = filled(blank, NET).replace("patient_place: occupied", "patient_place: empty\n# phantom: none")
    assert {"not assessed"} == {each.outcome for each in findings(with_survey(tmp_path, text), "survey-within-goal").values()}


def test_a_reading_that_has_lost_its_background_is_no_zero(blank: str, tmp_path: Path) -> None:
    """Net readings, or a meter that was off, keep no goal and agree with no expectation."""
    text = filled(blank, NET).replace("a-west,106.0,0.3,", "a-west,106.0,0.0,").replace("a-door,74.0,4.1,", "a-door,74.0,0.05,")
    found = with_survey(tmp_path, text)
    for rule, barrier in (("survey-near-prediction", "a-west"), ("survey-within-goal", "a-door")):
        finding = findings(found, rule)[barrier]
        assert "not assessed" == finding.outcome
        assert "was the background taken off already?" in finding.message


def test_the_highest_of_two_readings_is_compared(blank: str, tmp_path: Path) -> None:
    """A second reading at a joint is no contradiction: it is what the place gives."""
    found = with_survey(tmp_path, filled(blank, NET) + "a-west,106.0,0.9,at the joint\n")
    assert "not met" == findings(found, "survey-near-prediction")["a-west"].outcome


def test_one_reading_too_high_needs_no_other(blank: str, tmp_path: Path) -> None:
    """A later check of one field far above its expectation is not hidden by an older survey of both."""
    later = [
        line for line in filled(blank, {"a-west": 5.0}, day="2026-11-25").splitlines()
        if line.startswith(("#", "barrier,", "a-west,106"))
    ]  # fmt: skip
    folder = tmp_path / "first"
    folder.mkdir()
    shutil.copytree(SAMPLE, folder / "program")
    measured = folder / "program" / "measurements"
    (measured / "survey-1.csv").write_text(filled(blank, NET), encoding="utf-8")
    (measured / "survey-2.csv").write_text("\n".join(later) + "\n", encoding="utf-8")
    found = assessed(read_folder(folder / "program"), DAY)
    assert "not met" == findings(found, "survey-near-prediction")["a-west"].outcome


@pytest.mark.parametrize(
    ("stated", "instead", "said"),
    [
        ("mode: high-rate", "mode: ordinary", "measured in the ordinary mode, not in the high-rate mode of this beam"),
        ("instrument: survey-meter", "instrument: barometer", "is of type barometer-with-thermometer, not survey-meter"),
        ("degrader: sheet-06", "degrader: none", "measured with degrader none, the plan is sheet-06"),
        ("side_deg: 90", "side_deg: 270", "measured at side 270"),
    ],
)
def test_a_survey_of_something_else_does_not_count(
    blank: str, tmp_path: Path, stated: str, instead: str, said: str
) -> None:
    """Another mode, instrument, degrader or side is told and decides nothing."""
    text = filled(blank, NET)
    assert stated in text
    found = findings(with_survey(tmp_path, text.replace(stated, instead)), "survey-within-goal")
    assert {"not assessed"} == {each.outcome for each in found.values()}
    assert said in found["a-door"].message


def test_a_barrier_of_another_room_is_refused(blank: str, tmp_path: Path) -> None:
    """A reading that would be passed over in silence is named."""
    from readiness.errors import ProgramProblems

    with pytest.raises(ProgramProblems) as refused:
        with_survey(tmp_path, filled(blank, NET) + "b-west,106,0.3,store\n")
    assert "b-west is a barrier of vault-b, the survey is of vault-a" in str(refused.value.problems[0])


def test_a_rate_that_the_beam_does_not_have_is_asked_about(blank: str, tmp_path: Path) -> None:
    """Ten times the rate would make a tenth of the weekly dose."""
    folder = tmp_path / "program"
    shutil.copytree(SAMPLE, folder)
    text = filled(blank, NET).replace("rate_mu_per_min: 2000", "rate_mu_per_min: 20000")
    (folder / "measurements" / "survey-2026.csv").write_text(text, encoding="utf-8")
    assert any("surveyed at 20000 MU/min, the beam gives 2000 MU/min" in str(each) for each in questions(read_folder(folder)))


def survey_entry(tmp_path: Path, **fields: str) -> Assessment:
    """Return the assessment of the sample with one more survey in shielding.yaml."""
    folder = tmp_path / "program"
    shutil.copytree(SAMPLE, folder)
    given = {"id": "later", "room": "vault-a", "in_mode": "yes", "done_on": "2026-11-20", "instrument": "survey-meter", **fields}
    entry = ", ".join(f"{name}: {value}" for name, value in given.items())
    shielding = folder / "shielding.yaml"
    text = shielding.read_text(encoding="utf-8").replace("surveys:\n", f"surveys:\n  - {{{entry}}}\n")
    shielding.write_text(text, encoding="utf-8")
    return assessed(read_folder(folder), DAY)


def test_a_survey_of_a_day_to_come_is_none(tmp_path: Path) -> None:
    """What is planned for next year was not done."""
    assert "met" == findings(survey_entry(tmp_path / "done"), "survey-in-the-mode")["vault-a"].outcome
    planned = survey_entry(tmp_path / "planned", done_on="2027-02-01")
    assert "not met" == findings(planned, "survey-in-the-mode")["vault-a"].outcome


def test_a_survey_with_another_instrument_is_none(tmp_path: Path) -> None:
    """A barometer in calibration is no survey meter."""
    found = findings(survey_entry(tmp_path, instrument="barometer"), "survey-meter-valid")
    assert "not met" == found["later"].outcome
