"""Measured depth doses: ranges against an analytic curve, doses, and what is said about doubtful ones."""

from pathlib import Path

import numpy as np
import pytest
import yaml
from scipy.special import erfc

from readiness.calculations.depth_dose_analysis import DepthDose, analyse_depth_dose
from readiness.errors import OutsideValidity

PILOT = yaml.safe_load((Path(__file__).parents[1] / "data" / "pilot_readings.yaml").read_text(encoding="utf-8"))
R50_MM, WIDTH_MM, TAIL = 24.0, 4.0, 0.01
DEPTHS = np.arange(0.0, 60.1, 0.5)


def fall(depths: np.ndarray) -> np.ndarray:
    """Return a smooth fall with its half-value depth and steepest place at R50, on a flat tail."""
    return (1 - TAIL) * 0.5 * erfc((depths - R50_MM) / (np.sqrt(2) * WIDTH_MM)) + TAIL


def analysed(depths: object = DEPTHS, readings: object = None, **changed: object) -> DepthDose:
    """Return the analysis of a single beam's depth dose."""
    stated: dict[str, object] = {"normalisation": "maximum", "composite": False} | changed
    values = fall(np.asarray(depths)) if readings is None else readings
    return analyse_depth_dose(depths_mm=depths, readings=values, **stated)  # type: ignore[arg-type]


def test_half_value_depth_is_that_of_the_curve() -> None:
    """The half-value depth of an analytic curve is found within 0.1 mm."""
    # The tail lifts the half level by TAIL / 2, over the slope at R50.
    slope = (1 - TAIL) / (WIDTH_MM * np.sqrt(2 * np.pi))
    assert R50_MM + TAIL / 2 / slope == pytest.approx(analysed().r50_mm, abs=0.02)


def test_practical_range_is_where_the_tangent_meets_the_tail() -> None:
    """The practical range of an analytic curve is R50 + w sqrt(pi/2), found within 2 % of it."""
    assert R50_MM + WIDTH_MM * np.sqrt(np.pi / 2) == pytest.approx(analysed().rp_mm, rel=0.02)


def test_tail_is_the_xray_dose() -> None:
    """A flat tail of 1 % is reported as 1 % and does not move with its normalisation."""
    assert analysed().xray_tail_percent == pytest.approx(1.0, abs=0.02)
    assert analysed(readings=50 * fall(DEPTHS), normalisation="none").xray_tail_percent == pytest.approx(1.0, abs=0.02)


def test_energies_follow_from_the_ranges() -> None:
    """Mean and most probable energy are the formulas at the ranges found."""
    result = analysed()
    assert result.mean_energy_mev == pytest.approx(0.233 * result.r50_mm)
    assert result.rp_mm is not None
    assert result.most_probable_energy_mev == pytest.approx(0.22 + 0.198 * result.rp_mm + 2.5e-5 * result.rp_mm**2)


def test_doses_of_the_pilot_composite_are_its_readings() -> None:
    """The pilot composite has 77 % at 4 mm, 31 % at 10 mm, nothing at 20 mm, and 80 % at 3.6 mm."""
    pilot = PILOT["composite_depth_dose"]
    result = analysed(pilot["depths_mm"], pilot["readings"], composite=True)
    assert (77, 31, 0) == pytest.approx((result.at_4_mm_percent, result.at_10_mm_percent, result.at_20_mm_percent))
    assert result.r80_mm == pytest.approx(3 + 4 / 7)
    assert any("the highest is 0.97" in remark for remark in result.remarks)


def test_composite_has_no_energy() -> None:
    """A composite has ranges, but energies are not derived from it."""
    result = analysed(composite=True)
    assert (result.mean_energy_mev, result.low_mean_energy_mev, result.most_probable_energy_mev) == (None,) * 3
    assert any("no energy of its own" in remark for remark in result.remarks)


def test_deeper_curve_has_larger_ranges() -> None:
    """A curve moved 3 mm deeper has all ranges 3 mm larger, the tangent found within 0.15 mm."""
    first, deeper = analysed(), analysed(readings=fall(DEPTHS - 3))
    assert deeper.r50_mm - first.r50_mm == pytest.approx(3, abs=0.01)
    assert deeper.rp_mm is not None
    assert first.rp_mm is not None
    assert deeper.rp_mm - first.rp_mm == pytest.approx(3, abs=0.15)


def test_order_and_repeats_do_not_matter() -> None:
    """Readings in any order give the same; repeats are averaged, and that is said."""
    assert analysed(DEPTHS[::-1]) == analysed()
    twice = analysed(np.append(DEPTHS, 24.0), np.append(fall(DEPTHS), fall(np.array([24.0]))))
    assert any("averaged: 24 mm" in remark for remark in twice.remarks)


@pytest.mark.parametrize(
    ("depths", "readings", "suspicion"),
    [
        (DEPTHS / 10, fall(DEPTHS), "centimetres under a column in mm"),
        (DEPTHS * 10, fall(DEPTHS), "tenths of a millimetre under a column"),
        (fall(DEPTHS), DEPTHS, "are the columns swapped"),
        (DEPTHS, fall(DEPTHS) - 0.02, "readings are negative, the lowest -0.01 at"),
        (DEPTHS - 1, fall(DEPTHS), "a depth is negative"),
        (DEPTHS[:40], fall(DEPTHS)[:40], "the depth of that dose is not seen"),
        (DEPTHS[::30], fall(DEPTHS)[::30], "a depth dose of 5 readings says too little"),
    ],
    ids=["cm", "tenths", "swapped", "negative", "negative-depth", "short", "few"],
)
def test_unusable_depth_dose_is_refused_with_the_suspicion(
    depths: np.ndarray, readings: np.ndarray, suspicion: str
) -> None:
    """A depth dose that cannot be used is refused in words that name what probably happened."""
    with pytest.raises(OutsideValidity, match=suspicion):
        analysed(depths, readings)


def test_curve_without_tail_has_no_practical_range() -> None:
    """Readings that end on the falling part give R50 but no practical range, and that is said."""
    depths = DEPTHS[DEPTHS <= 26]
    result = analysed(depths)
    assert result.r50_mm == pytest.approx(R50_MM, abs=0.1)
    assert (result.rp_mm, result.xray_tail_percent) == (None, None)
    assert any("end before the x-ray tail" in remark for remark in result.remarks)


@pytest.mark.parametrize(
    ("depths", "remark"),
    [
        (DEPTHS[3:], "the surface is not known"),
        (DEPTHS[2:], "the surface is found by a straight line"),
        (DEPTHS[::15], "Only 9 depths"),
        (DEPTHS[::10], "more than 3 mm apart"),
    ],
)
def test_doubtful_depth_dose_is_used_and_that_is_said(depths: np.ndarray, remark: str) -> None:
    """A depth dose with gaps is analysed, and the gap stands beside the numbers."""
    assert any(remark in said for said in analysed(depths).remarks)


def test_depth_beyond_the_readings_is_unknown() -> None:
    """The dose at 20 mm is not known when the readings end before."""
    depths = np.arange(0.0, 18.1, 0.5)
    result = analysed(depths, 0.5 * erfc((depths - 10) / 3))
    assert result.at_20_mm_percent is None
    assert any("dose at 20 mm is not known" in remark for remark in result.remarks)


def test_small_half_value_depth_has_only_the_formula_for_low_energies() -> None:
    """At an R50 of 1 cm no 2.33 R50 is given, the other formula is, and that is said."""
    result = analysed(readings=fall(DEPTHS + 14))
    assert result.mean_energy_mev is None
    assert result.low_mean_energy_mev == pytest.approx(2.74, abs=0.1)
    assert any("2.33 R50 does not hold" in remark for remark in result.remarks)


def test_saturated_readings_are_said() -> None:
    """A flat top of equal readings raises the question of saturation."""
    assert any("saturated" in said for said in analysed(readings=np.minimum(fall(DEPTHS), 0.9)).remarks)


@pytest.mark.parametrize("seed", range(8))
def test_scatter_of_the_readings_hides_no_tail(seed: int) -> None:
    """With 0.3 % scatter a tail of 1 % over 20 mm is found within 0.15 %, never as one reading at the end."""
    depths = np.arange(0.0, 60.1, 1.0)
    scatter = 0.003 * np.random.default_rng(seed).standard_normal(len(depths))
    found = analysed(depths, np.abs(fall(depths) + scatter), normalisation="calibration-point")
    assert 100 * TAIL == pytest.approx(found.xray_tail_percent, abs=0.15)
    assert R50_MM + WIDTH_MM * np.sqrt(np.pi / 2) == pytest.approx(found.rp_mm, rel=0.03)


def test_readings_that_end_on_the_fall_have_no_tail() -> None:
    """Readings that end a centimetre behind R50, where electrons are left, give no x-ray dose."""
    found = analysed(np.arange(0.0, R50_MM + 8.1, 1.0))
    assert found.xray_tail_percent is None
    assert found.rp_mm is None
