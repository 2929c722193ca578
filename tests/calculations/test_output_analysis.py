"""Output of the pair from readings at and around the plan."""

import numpy as np
import pytest

from readiness.calculations.output_analysis import PairOutput, analyse_pair_output
from readiness.errors import OutsideValidity

DISTANCES = np.array([400.0, 400, 400, 392, 396, 404, 408, 400, 400])
TILTS = np.array([16.0, 16, 16, 16, 16, 16, 16, 15, 17])
PER_CM, PER_DEG, AT_PLAN = -0.007, -0.10, 0.0198
OUTPUTS = AT_PLAN * (1 + PER_CM) ** (DISTANCES - 400) * (1 + PER_DEG) ** (TILTS - 16)


def analysed(outputs: object = OUTPUTS, **changed: object) -> PairOutput:
    """Return the output at 400 cm and 16 degrees."""
    stated: dict[str, object] = {
        "distances_cm": DISTANCES,
        "tilts_deg": TILTS,
        "mu_convention": "total-of-both-beams",
        "planned_distance_cm": 400.0,
        "planned_tilt_deg": 16.0,
        "predicted_output_cgy_per_mu": 0.0198,
    }
    return analyse_pair_output(outputs_cgy_per_mu=outputs, **(stated | changed))  # type: ignore[arg-type]


def one(output: float, **changed: object) -> PairOutput:
    """Return the analysis of one reading at the plan."""
    return analysed([output], distances_cm=[400.0], tilts_deg=[16.0], **changed)


def test_output_and_both_changes_are_found_exactly_without_scatter() -> None:
    """Readings that follow the law give its output and both changes."""
    result = analysed()
    assert result.pair_output_cgy_per_mu == pytest.approx(AT_PLAN)
    assert result.change_percent_per_cm == pytest.approx(-0.7)
    assert result.change_percent_per_deg == pytest.approx(-10)
    assert result.repeat_sd_percent == pytest.approx(0)
    assert result.remarks == ()


def test_repeatability_is_the_scatter_at_one_set_up() -> None:
    """Three repeats at 0, +1 and -1 % have a standard deviation of 1 %."""
    outputs = OUTPUTS * np.array([1, 1.01, 0.99, 1, 1, 1, 1, 1, 1])
    result = analysed(outputs)
    assert result.repeat_sd_percent == pytest.approx(1, rel=0.01)
    assert result.change_sd_percent_per_cm is not None
    assert 0 < result.change_sd_percent_per_cm < 0.1


def test_standard_deviation_of_a_mean_shrinks_with_readings() -> None:
    """Four repeats know the output half as well as one of them does."""
    outputs = np.array([0.99, 1.01, 0.99, 1.01]) * 0.02
    result = analysed(outputs, distances_cm=[400.0] * 4, tilts_deg=[16.0] * 4)
    assert result.pair_output_sd_cgy_per_mu is not None
    assert result.repeat_sd_percent is not None
    assert result.repeat_sd_percent / 2 * 0.0002 == pytest.approx(result.pair_output_sd_cgy_per_mu, rel=0.01)


def test_convention_changes_the_total_only() -> None:
    """A reading per MU on each beam is twice that per MU of both together."""
    total, each = one(0.0198), one(0.0396, mu_convention="on-each-beam")
    assert each.total_output_cgy_per_mu == pytest.approx(total.total_output_cgy_per_mu)
    assert (total.remarks, each.remarks) == (one(0.0198).remarks, one(0.0198).remarks)
    with pytest.raises(ValueError, match="pair convention 'both'"):
        one(0.0198, mu_convention="both")


def test_mixed_up_convention_is_named() -> None:
    """An output of twice the prediction looks as if it were per MU on each beam."""
    assert any("per MU on each beam" in said for said in one(0.0396).remarks)
    assert any("per MU of both beams" in said for said in one(0.0198, mu_convention="on-each-beam").remarks)


@pytest.mark.parametrize(("output", "unit"), [(0.000198, "gray"), (1.98, "a hundredfold unit")])
def test_factor_of_a_hundred_is_refused(output: float, unit: str) -> None:
    """An output a hundred times too small or large is refused with the unit that is suspected."""
    with pytest.raises(OutsideValidity, match=f"is it {unit} under a column in cGy/MU"):
        one(output)


def test_one_reading_has_no_scatter_and_no_change() -> None:
    """One reading gives an output but no uncertainty and no change, and that is said."""
    result = one(0.0193)
    assert (result.pair_output_sd_cgy_per_mu, result.change_percent_per_cm, result.repeat_sd_percent) == (None,) * 3
    assert "One reading only: nothing shows its scatter." in result.remarks
    assert any("distance was not varied" in said for said in result.remarks)
    assert any("tilt was not varied" in said for said in result.remarks)


def test_farther_readings_are_left_out_and_that_is_said() -> None:
    """Readings 20 cm away do not enter; with none nearer there is no output."""
    result = analysed(np.append(OUTPUTS, 0.05), distances_cm=np.append(DISTANCES, 420), tilts_deg=np.append(TILTS, 16))
    assert result.pair_output_cgy_per_mu == pytest.approx(AT_PLAN)
    assert any("1 readings were taken too far" in said for said in result.remarks)
    with pytest.raises(OutsideValidity, match="no output was read within 12 cm"):
        analysed(planned_distance_cm=450.0)


def test_output_that_rises_with_distance_is_questioned() -> None:
    """Readings that rise with distance raise the question of an exchange."""
    assert any("rises with distance" in said for said in analysed(OUTPUTS[::-1], tilts_deg=[16.0] * 9).remarks)


def test_distance_and_tilt_changed_together_cannot_be_told_apart() -> None:
    """Readings in which tilt follows distance are refused."""
    with pytest.raises(OutsideValidity, match="cannot be told apart"):
        analysed([0.02, 0.019, 0.018], distances_cm=[398.0, 400, 402], tilts_deg=[15.0, 16, 17])


def test_plan_between_readings_is_interpolated_and_that_is_said() -> None:
    """Without a reading at the plan the output is interpolated, and that is said."""
    result = analysed(planned_distance_cm=398.0)
    assert result.pair_output_cgy_per_mu == pytest.approx(AT_PLAN * (1 + PER_CM) ** -2)
    assert any("No reading was taken at the planned set-up itself" in said for said in result.remarks)


def test_output_of_zero_is_refused() -> None:
    """A reading of 0 is no output."""
    with pytest.raises(OutsideValidity, match="not more than 0"):
        one(0.0)


def test_missing_prediction_is_said() -> None:
    """Without a prediction the gross-error check is said to be missing."""
    assert "No prediction was available to compare with." in one(0.0193, predicted_output_cgy_per_mu=None).remarks


def test_poor_repeats_are_said() -> None:
    """Repeats that scatter by more than 1 % are said."""
    outputs = OUTPUTS * np.array([1, 1.03, 0.97, 1, 1, 1, 1, 1, 1])
    assert any("Repeated readings scatter by 3" in said for said in analysed(outputs).remarks)
