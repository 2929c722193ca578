"""Each measurement file says what it gives, why it does not count, and what must be heeded."""

import shutil
from datetime import date
from pathlib import Path

import pytest

from readiness.assessment.records import Assessment, MeasurementUse
from readiness.outputs.making import assessed
from readiness.outputs.measurement_rows import NOTHING_ASKED, ONLY_POINTS, MeasurementRow, measurement_rows
from readiness.program.reading import read_folder

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"


@pytest.fixture(scope="module")
def sample() -> Assessment:
    """Return the assessment of the sample."""
    return assessed(read_folder(SAMPLE), date(2026, 12, 1))


@pytest.fixture(scope="module")
def uses(sample: Assessment) -> dict[str, MeasurementUse]:
    """Return the files of the sample by id."""
    return {each.item.id: each for each in sample.measurements}


def test_every_measurement_file_has_its_line(uses: dict[str, MeasurementUse]) -> None:
    """The five files of the folder, in its order, each with kind and day."""
    files = sorted(path.stem for path in (SAMPLE / "measurements").glob("*.csv"))
    assert files == list(uses)
    assert {date(2026, 10, 21)} == {each.done_on for each in uses.values()}
    assert "Profiles at several tilts" == uses["angle-sweep"].kind


def test_a_file_that_does_not_count_says_every_reason(uses: dict[str, MeasurementUse]) -> None:
    """The output was measured with another degrader and with a chamber out of calibration."""
    assert uses["output-pair"].gives == ()
    assert uses["output-pair"].why_not == (
        "instrument plane-parallel-chamber was out of calibration on 2026-10-21 (due 2026-09-16)",
        "measured with degrader sheet-10, the plan is sheet-06",
    )


def test_a_file_that_counts_names_the_values_that_it_gives(uses: dict[str, MeasurementUse]) -> None:
    """The foil spread belongs to the beam and holds whatever the degrader."""
    assert uses["single-profile"].gives == ("beam.foil_spread",)
    assert uses["single-profile"].why_not == ()


def test_what_an_analysis_remarks_is_not_hidden(uses: dict[str, MeasurementUse]) -> None:
    """A sweep whose centre lies off the axis says so, also where it does not count (invented: 3 cm high)."""
    assert "centred at 2.8 cm" in uses["angle-sweep"].remarks[0]


def test_the_printed_line_says_the_use_in_words(sample: Assessment) -> None:
    """Gives, does not count, or counts without being asked for."""
    rows = {row.file: row for row in measurement_rows(sample)}
    assert "Gives foil spread." == rows["single-profile.csv"].use
    assert rows["angle-sweep.csv"].use.startswith("Does not count here: measured with degrader sheet-10")
    assert NOTHING_ASKED not in {row.use for row in rows.values()}


def folder_with(tmp_path: Path, **files: str) -> dict[str, MeasurementRow]:
    """Return the printed lines of a copy of the sample whose measurements are these."""
    folder = tmp_path / "program"
    shutil.copytree(SAMPLE, folder)
    for old in (folder / "measurements").glob("*.csv"):
        old.unlink()
    for name, text in files.items():
        (folder / "measurements" / f"{name}.csv").write_text(text, encoding="utf-8")
    return {row.file: row for row in measurement_rows(assessed(read_folder(folder), date(2026, 12, 1)))}


def profile(reach_cm: int = 100, mode: str = "high-rate", day: str = "2026-10-21", peak: float = 1.0) -> str:
    """Return a dual profile that agrees with the chosen arrangement."""
    head = (SAMPLE / "measurements" / "horizontal-profile.csv").read_text(encoding="utf-8")
    head = head.partition("height_cm,")[0].replace("sheet-10", "sheet-06").replace("2026-10-21", day)
    rows = [f"{at},{peak - 0.05 * (at / 100) ** 2:.4f}" for at in range(-reach_cm, reach_cm + 1, 10)]
    return head.replace("mode: high-rate", f"mode: {mode}") + "\n".join(["height_cm,relative_dose", *rows, ""])


def test_two_files_of_one_kind_say_which_is_used(tmp_path: Path) -> None:
    """The newer of two profiles is used, and the older says so."""
    rows = folder_with(tmp_path, old=profile(), new=profile(day="2026-10-28", peak=1.001))
    assert "Does not count here: new.csv is used, newer, of 2026-10-28." == rows["old.csv"].use
    assert rows["new.csv"].use.startswith("Gives ")


def test_a_profile_that_does_not_reach_its_limits_says_so(tmp_path: Path) -> None:
    """A profile over 70 cm either way is drawn, not judged, and the reason stands beside it."""
    row = folder_with(tmp_path, short=profile(70))["short.csv"]
    assert row.use == ONLY_POINTS
    assert any("does not reach the limits" in remark for remark in row.remarks)


def test_a_profile_of_another_mode_does_not_count(tmp_path: Path) -> None:
    """What was measured in the ordinary mode is nothing of a beam of the high-rate mode."""
    row = folder_with(tmp_path, other=profile(mode="ordinary"))["other.csv"]
    expected = "Does not count here: measured in the ordinary mode, not in the high-rate mode of this beam."
    assert expected == row.use
