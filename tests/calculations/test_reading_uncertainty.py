"""Uncertainty of readings against a general-purpose error propagation."""

from math import prod

import pytest
from uncertainties import ufloat

from readiness.calculations.reading_uncertainty import combined_sd_percent, mean_sd_percent, sum_sd_percent


def test_one_reading_of_five_components_has_four_to_five_percent() -> None:
    """Calibration 2, element 2, energy 2, angle 2.5 and reading 1 % make 4.4 %, as independent factors do."""
    components = (2.0, 2.0, 2.0, 2.5, 1.0)
    product = prod(ufloat(1, component / 100) for component in components)
    assert 100 * product.std_dev == pytest.approx(combined_sd_percent(components_percent=components))
    assert combined_sd_percent(components_percent=components) == pytest.approx(4.4, abs=0.05)


@pytest.mark.parametrize("readings", [1, 3, 10])
def test_mean_agrees_with_an_independent_propagation(readings: int) -> None:
    """The mean of readings that share a calibration agrees with a propagation that knows the correlation."""
    shared = ufloat(1, 0.02)
    mean = sum(shared * ufloat(200, 8) for _ in range(readings)) / readings
    ours = mean_sd_percent(single_sd_percent=4, shared_sd_percent=2, readings=readings)
    assert 100 * mean.std_dev / mean.nominal_value == pytest.approx(ours)


def test_sum_of_days_agrees_with_an_independent_propagation() -> None:
    """The sum of unequal days agrees with a propagation that knows the correlation."""
    shared = ufloat(1, 0.02)
    total = shared * ufloat(74, 0.04 * 74) + shared * ufloat(126, 0.04 * 126)
    ours = sum_sd_percent(doses_cgy=[74, 126], single_sd_percent=4, shared_sd_percent=2)
    assert 100 * total.std_dev / total.nominal_value == pytest.approx(ours)


def test_shared_part_does_not_shrink() -> None:
    """However many readings are averaged, the shared part remains; without it the mean becomes certain."""
    many = mean_sd_percent(single_sd_percent=4, shared_sd_percent=2, readings=10**6)
    assert many == pytest.approx(2, abs=1e-3)
    assert mean_sd_percent(single_sd_percent=4, shared_sd_percent=0, readings=10**6) < 0.01


def test_more_readings_are_more_certain() -> None:
    """The uncertainty of a mean falls with the number of readings."""
    three, four = (mean_sd_percent(single_sd_percent=4, shared_sd_percent=2, readings=n) for n in (3, 4))
    assert four < three


def test_impossible_uncertainties_are_refused() -> None:
    """Negative standard deviations and means of nothing do not exist."""
    with pytest.raises(ValueError, match="needs components"):
        combined_sd_percent(components_percent=())
    with pytest.raises(ValueError, match="a mean needs readings"):
        mean_sd_percent(single_sd_percent=4, shared_sd_percent=2, readings=0)
    with pytest.raises(ValueError, match="not all of them 0"):
        sum_sd_percent(doses_cgy=[0, 0], single_sd_percent=4, shared_sd_percent=2)
    with pytest.raises(ValueError, match="is not negative"):
        sum_sd_percent(doses_cgy=[1], single_sd_percent=-4, shared_sd_percent=2)
