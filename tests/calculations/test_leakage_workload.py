"""The leakage workload follows MU, not dose."""

import pytest

from readiness.calculations.leakage_workload import leakage_workload

CASE = {
    "cycle_mu": 22400.0,
    "dose_per_cycle_gy": 2.0,
    "output_at_1_m_cgy_per_mu": 1.0,
    "cycles_per_week": 4.0,
    "extra_week_mu": 10000.0,
}


def test_by_hand():
    """Four cycles of 22,400 MU and 10,000 MU of checks at 1 cGy per MU are 996 Gy at 1 m."""
    result = leakage_workload(**CASE)
    assert 996.0 == pytest.approx(result.per_week_gy_m2_per_week)
    assert 112.0 == pytest.approx(result.mu_per_dose)
    assert 224.0 == pytest.approx(result.per_cycle_gy_m2)


def test_no_cycles_leave_the_checks():
    """A week of checks alone still leaks."""
    assert 100.0 == pytest.approx(
        leakage_workload(**{**CASE, "cycles_per_week": 0.0}).per_week_gy_m2_per_week
    )


@pytest.mark.parametrize(("name", "number"), [("cycle_mu", 0.0), ("cycles_per_week", -1.0)])
def test_impossible(name, number):
    """Numbers outside their meaning are refused."""
    with pytest.raises(ValueError, match="zero"):
        leakage_workload(**{**CASE, name: number})
