"""Measured profiles: what they give, and what is said about doubtful ones."""

import re
from pathlib import Path

import numpy as np
import pytest
import yaml

from readiness.calculations.profile_analysis import ProfileEvaluation, evaluate_profile, symmetric_curve
from readiness.errors import OutsideValidity

HEIGHTS = np.arange(-110.0, 111.0, 10.0)
BELL = 1 - 0.2 * (HEIGHTS / 110) ** 2
PILOT = yaml.safe_load((Path(__file__).parents[1] / "data" / "pilot_readings.yaml").read_text(encoding="utf-8"))
READINGS = {tilt: np.array(values) for tilt, values in PILOT["sweep"].items()}


def evaluated(positions: np.ndarray, readings: np.ndarray, **changed: object) -> ProfileEvaluation:
    """Return a profile judged over +-80 cm by the stricter metric."""
    stated = {"half_length_cm": 80.0, "metric": "stricter", "normalisation": "none", "smoothing": "none"} | changed
    return evaluate_profile(positions_cm=positions, readings=readings, **stated)  # type: ignore[arg-type]


@pytest.mark.parametrize(("tilt", "half_range"), PILOT["half_ranges_percent"].items())
def test_half_ranges_are_the_stated_ones(tilt: int, half_range: float) -> None:
    """The half-range over +-80 cm is the stated one within the rounding of it (0.05) and of readings (0.03)."""
    assert half_range == pytest.approx(evaluated(HEIGHTS, READINGS[tilt]).half_range_percent, abs=0.08)


def test_deviation_from_mid_height_is_the_stated_one() -> None:
    """At 18 degrees the profile rises 16.8 % above mid-height while its half-range is 7.8 %."""
    result = evaluated(HEIGHTS, READINGS[18])
    stated = PILOT["deviation_at_18_deg_percent"]
    assert (stated, stated) == (pytest.approx(result.deviation_percent), pytest.approx(result.judged_percent))


def test_horizontal_half_range_is_the_stated_one() -> None:
    """The horizontal half-range over +-30 cm is the stated 4.5 %, above a limit of 4 %."""
    readings = np.array(PILOT["horizontal"]["readings"])
    result = evaluated(np.arange(-50.0, 51.0, 10.0), readings, half_length_cm=30.0, metric="half-range")
    assert PILOT["horizontal"]["half_range_percent"] == pytest.approx(result.judged_percent, abs=0.0501)


@pytest.mark.parametrize("tilt", [12, 14])
def test_centre_that_was_put_3_cm_high_is_found(tilt: int) -> None:
    """A sweep centred 3 cm high is found to be so within two standard deviations, and that is said."""
    result = evaluated(HEIGHTS, READINGS[tilt])
    assert result.centre_shift_cm is not None
    assert abs(result.centre_shift_cm.value - 3) < 2 * result.centre_shift_cm.sd
    assert any("centred at" in remark for remark in result.remarks)


def test_symmetric_profile_has_no_shift() -> None:
    """A profile that is symmetric about 0 has its centre at 0 and no remark."""
    result = evaluated(HEIGHTS, BELL)
    assert result.centre_shift_cm is not None
    assert result.centre_shift_cm.value == pytest.approx(0, abs=1e-6)
    assert result.remarks == ()


def test_shift_follows_the_profile() -> None:
    """A profile moved up by 4 cm has its centre 4 cm higher."""
    moved = symmetric_curve(HEIGHTS, 1 - 0.2 * ((HEIGHTS - 4) / 110) ** 2)
    assert moved.centre_cm.value == pytest.approx(4, abs=1e-6)


def test_metric_that_is_judged_is_the_one_asked_for() -> None:
    """The half-range is judged when it is asked for, the stricter one otherwise."""
    assert evaluated(HEIGHTS, BELL, metric="half-range").judged_percent < evaluated(HEIGHTS, BELL).judged_percent
    with pytest.raises(ValueError, match="judged by one of stricter, half-range"):
        evaluated(HEIGHTS, BELL, metric="best")


def test_normalisation_does_not_change_the_result() -> None:
    """Readings a hundred times larger give the same uniformity."""
    assert evaluated(HEIGHTS, 100 * BELL).judged_percent == pytest.approx(evaluated(HEIGHTS, BELL).judged_percent)


@pytest.mark.parametrize(
    ("positions", "readings", "suspicion"),
    [
        (HEIGHTS * 10, BELL, "are they millimetres under a column in cm"),
        (HEIGHTS / 100, BELL, "are they metres under a column in cm"),
        (BELL, HEIGHTS, "are the columns swapped"),
        (HEIGHTS, BELL - 0.9, "are negative, the lowest -0.1 at -110 cm"),
        (HEIGHTS, 0 * BELL, "all readings are zero"),
        (HEIGHTS[4:-4], BELL[4:-4], "does not reach the limits of -80 to 80 cm"),
        (HEIGHTS[::11], BELL[::11], "has 3 points within"),
        (HEIGHTS, np.minimum(BELL, BELL[HEIGHTS == 30][0]), r"saturated\? A cut-off profile shows less unevenness"),
    ],
    ids=["millimetres", "metres", "swapped", "negative", "zero", "short", "few", "saturated"],
)
def test_unusable_profile_is_refused_with_the_suspicion(
    positions: np.ndarray, readings: np.ndarray, suspicion: str
) -> None:
    """A profile that cannot be used is refused in words that name what probably happened."""
    with pytest.raises(OutsideValidity, match=suspicion):
        evaluated(positions, readings)


@pytest.mark.parametrize(
    ("positions", "readings", "changed", "remark"),
    [
        (HEIGHTS, np.minimum(BELL, BELL[HEIGHTS == 20][0]), {}, "The 5 readings from -20 to 20 cm all equal the highest"),
        (HEIGHTS[::3], BELL[::3], {}, "Only 6 readings lie within 80 cm"),
        (HEIGHTS, BELL, {"smoothing": "running mean over 5"}, r"smoothed before \(running mean over 5\)"),
        (HEIGHTS, BELL * 0.9, {"normalisation": "mid-height"}, "at position 0 they are 0.9"),
        (HEIGHTS, BELL * 0.9, {"normalisation": "maximum"}, "at the highest reading they are 0.9"),
        (HEIGHTS + 5, BELL, {}, "No reading was taken at position 0"),
        (np.append(HEIGHTS, 20), np.append(BELL, 1), {}, "averaged: 20 cm"),
        (HEIGHTS[::4], BELL[::4], {}, "a shift of the centre cannot be seen"),
    ],
    ids=["saturated", "few", "smoothed", "mid-height", "maximum", "no-centre", "repeated", "too-few-for-centre"],
)
def test_doubtful_profile_is_used_and_that_is_said(
    positions: np.ndarray, readings: np.ndarray, changed: dict[str, object], remark: str
) -> None:
    """A doubtful profile is evaluated, and the doubt stands beside the numbers."""
    remarks = " ".join(evaluated(positions, readings, **changed).remarks)
    assert re.search(remark, remarks), remarks


def test_lengths_that_differ_are_our_own_mistake() -> None:
    """Columns of different lengths are an impossible input."""
    with pytest.raises(ValueError, match="one reading for each place"):
        evaluated(HEIGHTS, BELL[1:])
