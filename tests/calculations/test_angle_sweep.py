"""Sweeps of the tilt: which tilts pass and which is best."""

from pathlib import Path

import numpy as np
import pytest
import yaml

from readiness.calculations.angle_sweep import AngleSweep, evaluate_angle_sweep
from readiness.errors import OutsideValidity

HEIGHTS = np.arange(-110.0, 111.0, 10.0)
PILOT = yaml.safe_load((Path(__file__).parents[1] / "data" / "pilot_readings.yaml").read_text(encoding="utf-8"))
READINGS = {tilt: np.array(values) for tilt, values in PILOT["sweep"].items()}
EXACT_BEST_DEG = 15.3


def swept(profiles: dict[float, np.ndarray], words: str = "dual", **changed: object) -> AngleSweep:
    """Return a sweep over +-80 cm with a limit of 8 %, all profiles at the same heights."""
    count = len(HEIGHTS)
    stated: dict[str, object] = {
        "fields": [words] * count * len(profiles),
        "half_length_cm": 80.0,
        "limit_percent": 8.0,
        "metric": "stricter",
        "normalisation": "mid-height",
        "smoothing": "none",
    }
    return evaluate_angle_sweep(
        tilts_deg=np.repeat(list(profiles), count),
        positions_cm=np.tile(HEIGHTS, len(profiles)),
        readings=np.concatenate(list(profiles.values())),
        **(stated | changed),  # type: ignore[arg-type]
    )


def exact(tilt: float) -> np.ndarray:
    """Return a profile that is flat at one tilt and rises or falls by 5 % of its edge per degree elsewhere."""
    return 1 + 0.05 * (tilt - EXACT_BEST_DEG) * (HEIGHTS / 80) ** 2


def test_smallest_tilt_that_passes_is_a_measured_one() -> None:
    """Of 12, 14, 16 and 18 degrees only 16 passes 8 % in both metrics; as half-range 18 passes too."""
    assert swept(READINGS).smallest_passing_tilt_deg == 16
    assert swept(READINGS).tilts.column("within_limit") == (False, False, True, False)
    assert swept(READINGS, metric="half-range").tilts.column("within_limit") == (False, False, True, True)


def test_best_tilt_of_the_noisy_sweep_lies_near_16_degrees() -> None:
    """The best tilt is 16.0 degrees within 0.4, with a band from about 15 to 17 around it."""
    best = swept(READINGS).best
    assert best is not None
    assert best.tilt_deg.value == pytest.approx(16.0, abs=0.4)
    assert 0.05 <= best.tilt_deg.sd <= 0.5
    assert best.passes_from_deg == pytest.approx(15.1, abs=0.3)
    assert best.passes_to_deg == pytest.approx(17.0, abs=0.3)


def test_shift_of_all_tilts_is_said_once() -> None:
    """The common shift of 3 cm is found from all tilts together and said once, not for each tilt."""
    result = swept(READINGS)
    assert result.centre_shift_cm is not None
    assert result.centre_shift_cm.value == pytest.approx(3, abs=0.5)
    assert sum("centred at" in remark for remark in result.remarks) == 1


def test_best_tilt_between_measured_ones_is_exact_without_scatter() -> None:
    """Without scatter and with profiles linear in tilt the best tilt and the band's ends are exact."""
    best = swept({tilt: exact(tilt) for tilt in (12.0, 14.0, 15.0, 16.0, 18.0)}).best
    assert best is not None
    assert best.tilt_deg.value == pytest.approx(EXACT_BEST_DEG, abs=0.051)
    assert best.passes_from_deg == pytest.approx(EXACT_BEST_DEG - 8 / 5, abs=0.11)
    assert best.passes_to_deg == pytest.approx(EXACT_BEST_DEG + 8 / 5, abs=0.11)


def test_head_and_feet_fields_add_up_to_the_dual_field() -> None:
    """Fields measured alone and added give the result of the dual field."""
    slope = HEIGHTS / 400
    tilts = (14.0, 15.0, 16.0)
    both = {tilt: exact(tilt) for tilt in tilts}
    result = evaluate_angle_sweep(
        tilts_deg=np.repeat(tilts + tilts, len(HEIGHTS)),
        positions_cm=np.tile(HEIGHTS, 6),
        readings=np.concatenate(
            [both[t] / 2 * (1 + slope) for t in tilts] + [both[t] / 2 * (1 - slope) for t in tilts]
        ),
        fields=["head"] * 3 * len(HEIGHTS) + ["feet"] * 3 * len(HEIGHTS),
        half_length_cm=80.0,
        limit_percent=8.0,
        metric="stricter",
        normalisation="mid-height",
        smoothing="none",
    )
    assert result.tilts.column("judged_percent") == pytest.approx(swept(both).tilts.column("judged_percent"))


def test_tilt_without_its_mirror_is_left_out_and_named() -> None:
    """A tilt measured with one field only is not judged, and the missing field is named."""
    profiles = {14.0: exact(14), 15.0: exact(15), 16.0: exact(16)}
    words = ["dual"] * 2 * len(HEIGHTS) + ["head"] * len(HEIGHTS)
    result = swept(profiles, fields=words)
    assert result.tilts.column("tilt_deg") == (14, 15)
    assert any("At 16 deg the head field has no mirror: the feet field was not" in said for said in result.remarks)
    with pytest.raises(OutsideValidity, match="no tilt has a profile that can be judged.*no mirror"):
        swept(profiles, words="feet")


def test_best_at_the_end_of_the_sweep_is_said() -> None:
    """A sweep that ends before the best tilt says so."""
    said = swept({tilt: exact(tilt) for tilt in (12.0, 13.0, 14.0)}).remarks
    assert any("the largest measured: go beyond it" in remark for remark in said)
    assert any("goes beyond the tilts measured" in remark for remark in said)


def test_profile_that_is_too_short_is_named_with_its_tilt() -> None:
    """A tilt whose profile does not reach the limits is left out with the reason; the others are judged."""
    heights = np.concatenate([HEIGHTS, HEIGHTS, HEIGHTS[6:-6]])
    result = evaluate_angle_sweep(
        tilts_deg=np.repeat([14.0, 15.0, 16.0], [23, 23, 11]),
        positions_cm=heights,
        readings=np.ones(len(heights)),
        fields=(),
        half_length_cm=80.0,
        limit_percent=8.0,
        metric="stricter",
        normalisation="none",
        smoothing="none",
    )
    assert result.tilts.column("tilt_deg") == (14, 15)
    assert any("At 16 deg: the profile covers -50 to 50 cm" in remark for remark in result.remarks)


def test_tie_goes_to_the_smaller_tilt() -> None:
    """When every tilt is equally flat the smallest is the best."""
    best = swept({tilt: np.ones(len(HEIGHTS)) for tilt in (14.0, 15.0)}).best
    assert best is not None
    assert best.tilt_deg.value == 14


def test_same_sweep_gives_the_same_answer_twice() -> None:
    """The uncertainty of the best tilt does not change from run to run."""
    assert swept(READINGS) == swept(READINGS)


def test_one_tilt_has_no_best_between() -> None:
    """A single tilt is judged but has no best tilt."""
    result = swept({16: READINGS[16]})
    assert (result.smallest_passing_tilt_deg, result.best) == (16, None)


def test_sample_program_holds_these_readings() -> None:
    """The sweep in the sample program is the one whose half-ranges are stated here."""
    path = Path(__file__).parents[2] / "sample_program" / "measurements" / "angle-sweep.csv"
    rows = [line.split(",") for line in path.read_text(encoding="utf-8").splitlines() if line[0] not in "#t"]
    found = {tilt: [float(dose) for at, _, dose in rows if float(at) == tilt] for tilt in READINGS}
    assert {tilt: list(values) for tilt, values in READINGS.items()} == found
