"""A lying patient under a vertical field: dose, speed and monitor units of a pass."""

import math

import numpy as np
import pytest

from readiness.calculations.moving_couch_dose import couch_pass, couch_speed_needed
from readiness.errors import OutsideValidity
from readiness.quantities import Table

COLUMNS = ("position_cm", "dose_rate_cgy_per_min")


def gaussian(peak: float = 60.0, sigma: float = 30.0, reach: float = 150.0) -> Table:
    positions = np.linspace(-reach, reach, 121)
    return Table.of(COLUMNS, [(float(x), float(peak * math.exp(-((x / sigma) ** 2) / 2))) for x in positions])


CASE = {"couch_speed_cm_per_s": 2.0, "passes": 4, "rate_mu_per_min": 1000.0}


def test_gaussian_field_has_its_exact_integral() -> None:
    """A Gaussian of 60 cGy/min and 30 cm gives 60 x 30 x sqrt(2 pi) / (60 x 2) = 37.6 cGy per pass."""
    found = couch_pass(dose_rate_profile=gaussian(), **CASE)
    assert 15 * math.sqrt(2 * math.pi) == pytest.approx(found.pass_dose_cgy, rel=1e-5)
    assert 4 * found.pass_dose_cgy == found.incidence_dose_cgy


def test_uniform_field_is_rate_times_time_in_it() -> None:
    """A point that spends 20 s in a field of 30 cGy/min collects 10 cGy."""
    profile = Table.of(COLUMNS, [(0.0, 0.0), (1e-9, 30.0), (40.0, 30.0), (40.000000001, 0.0)])
    assert 10.0 == pytest.approx(couch_pass(dose_rate_profile=profile, **CASE).pass_dose_cgy)


def test_time_and_monitor_units_of_a_pass() -> None:
    """300 cm at 2 cm/s take 150 s, 2,500 MU at 1,000 MU/min, and four times that per incidence."""
    found = couch_pass(dose_rate_profile=gaussian(), **CASE)
    assert (150.0, 2500.0, 10000.0) == (found.pass_time_s, found.pass_mu, found.incidence_mu)


def test_slower_couch_gives_more_dose() -> None:
    """Half the speed doubles the dose; an ever faster couch gives none."""
    usual = couch_pass(dose_rate_profile=gaussian(), **CASE)
    slower = couch_pass(dose_rate_profile=gaussian(), **(CASE | {"couch_speed_cm_per_s": 1.0}))
    fastest = couch_pass(dose_rate_profile=gaussian(), **(CASE | {"couch_speed_cm_per_s": 1e9}))
    assert 2 * usual.pass_dose_cgy == pytest.approx(slower.pass_dose_cgy)
    assert fastest.pass_dose_cgy < 1e-6


def test_speed_and_dose_are_inverse() -> None:
    """The speed found for a dose gives that dose."""
    speed = couch_speed_needed(dose_rate_profile=gaussian(), incidence_dose_cgy=100.0, passes=4)
    found = couch_pass(dose_rate_profile=gaussian(), **(CASE | {"couch_speed_cm_per_s": speed}))
    assert 100.0 == pytest.approx(found.incidence_dose_cgy)


def test_profile_that_stops_inside_the_field_is_refused() -> None:
    """A travel of 2 sigma leaves 14 % of the peak at its ends, and the dose of a pass would be too low."""
    with pytest.raises(OutsideValidity, match="still has 14 % of its peak"):
        couch_pass(dose_rate_profile=gaussian(reach=60.0), **CASE)


@pytest.mark.parametrize(
    ("rows", "message"),
    [
        ([(0.0, 1.0), (1.0, 2.0)], "at least three positions"),
        ([(0.0, 0.0), (2.0, 2.0), (1.0, 0.0)], "increasing order"),
        ([(0.0, 0.0), (1.0, -2.0), (2.0, 0.0)], "no negative rate"),
        ([(0.0, 0.0), (1.0, 0.0), (2.0, 0.0)], "at least one above 0"),
        ([(0.0, 0.0), (1.0, None), (2.0, 0.0)], "holds numbers, not None"),
    ],
)
def test_profiles_that_cannot_be(rows: list, message: str) -> None:
    """Profiles that are too short, out of order, negative, empty or blank are refused."""
    with pytest.raises(ValueError, match=message):
        couch_speed_needed(dose_rate_profile=Table.of(COLUMNS, rows), incidence_dose_cgy=100.0, passes=4)


@pytest.mark.parametrize("changes", [{"couch_speed_cm_per_s": 0.0}, {"passes": 0}, {"rate_mu_per_min": -1.0}])
def test_couch_that_cannot_be(changes: dict) -> None:
    """A couch that stands still, makes no pass or has no rate is refused."""
    with pytest.raises(ValueError, match="more than 0"):
        couch_pass(dose_rate_profile=gaussian(), **(CASE | changes))
    with pytest.raises(ValueError, match="cannot be given"):
        couch_speed_needed(dose_rate_profile=gaussian(), incidence_dose_cgy=0.0, passes=1)
