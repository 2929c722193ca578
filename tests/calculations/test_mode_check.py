"""Monitor and dose behaviour in the mode."""

import numpy as np
import pytest

from readiness.calculations.mode_check import ModeCheck, analyse_mode_check
from readiness.errors import OutsideValidity

MU = [100.0, 500.0, 1000.0, 2000.0, 2000.0]


def analysed(doses: object, **changed: object) -> ModeCheck:
    """Return the check of readings at 100 to 2000 MU."""
    stated: dict[str, object] = {"mu": MU, "backup_mu": MU, "largest_planned_mu": 1800.0} | changed
    return analyse_mode_check(doses_cgy=doses, **stated)  # type: ignore[arg-type]


def test_exact_proportion_is_linear() -> None:
    """Doses proportional to MU show no departure, no end effect and no scatter."""
    result = analysed([0.01 * mu for mu in MU])
    numbers = (result.linearity_percent, result.end_effect_mu, result.repeat_sd_percent, result.backup_percent)
    assert numbers == pytest.approx((0, 0, 0, 0), abs=1e-9)
    assert result.remarks == ()


def test_end_effect_is_found_and_seen_at_few_mu() -> None:
    """One MU too many in each beam is 1 % at 100 MU and 0.05 % at 2000 MU: a departure of 0.95 %."""
    result = analysed([0.01 * (mu + 1) for mu in MU])
    assert result.end_effect_mu == pytest.approx(1, abs=1e-6)
    assert result.linearity_percent == pytest.approx(100 * (1.01 / 1.0005 - 1))


def test_repeats_scatter_by_their_standard_deviation() -> None:
    """Repeats of 19.9 and 20.1 cGy scatter by 0.71 %, as numpy's sample standard deviation says."""
    result = analysed([1, 5, 10, 19.9, 20.1])
    assert 100 * float(np.std([19.9, 20.1], ddof=1)) / 20 == pytest.approx(result.repeat_sd_percent)


def test_backup_channel_is_compared() -> None:
    """A second channel 2 % high at one reading shows 2 %."""
    assert analysed([0.01 * mu for mu in MU], backup_mu=[102.0, *MU[1:]]).backup_percent == pytest.approx(2)


@pytest.mark.parametrize(
    ("changed", "remark"),
    [
        ({"mu": [100.0] * 5}, "1 different numbers of MU"),
        ({"mu": [100.0, 200, 300, 400, 500]}, "No number of MU was repeated"),
        ({"backup_mu": [None] * 5}, "The second monitor channel was not noted"),
        ({"largest_planned_mu": 2400.0}, "The largest check had 2000 MU, less than the 2400 MU planned"),
    ],
)
def test_what_the_readings_do_not_show_is_said(changed: dict[str, object], remark: str) -> None:
    """Each thing that was not checked is said."""
    assert any(remark in said for said in analysed([1.0, 5, 10, 20, 20], **changed).remarks)


def test_impossible_readings_are_refused() -> None:
    """A reading of 0 is no check."""
    with pytest.raises(OutsideValidity, match="MU and doses above 0"):
        analysed([0.0, 5, 10, 20, 20])
