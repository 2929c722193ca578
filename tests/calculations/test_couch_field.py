"""Vertical field of a lying patient."""

from typing import Any

import numpy as np
import pytest
from beam_setups import common_setup
from scipy.integrate import trapezoid

from readiness.calculations.couch_field import CouchField, couch_field
from readiness.calculations.moving_couch_dose import couch_pass


def found(**changes: Any) -> CouchField:
    """Return the field under a vertical beam."""
    given: dict[str, Any] = {
        "setup": common_setup(),
        "source_to_surface_cm": 200.0,
        "reference_output_cgy_per_mu": 1.0,
        "rate_mu_per_min": 600.0,
        "uniformity_half_width_cm": 25.0,
        **changes,
    }
    return couch_field(**given)


def test_dose_of_a_pass_is_the_integral_over_the_travel() -> None:
    """Peak rate times equivalent length over the speed is the dose of a pass, as for a measured profile."""
    field = found()
    along = np.array([row[0] for row in field.dose_rate_profile.rows], dtype=float)
    rates = np.array([row[1] for row in field.dose_rate_profile.rows], dtype=float)
    assert field.peak_dose_rate_cgy_per_min * field.equivalent_length_cm == pytest.approx(trapezoid(rates, along))
    one = couch_pass(dose_rate_profile=field.dose_rate_profile, couch_speed_cm_per_s=2.0, passes=1, rate_mu_per_min=600.0)
    assert one.pass_dose_cgy == pytest.approx(field.peak_dose_rate_cgy_per_min * field.equivalent_length_cm / 120)


def test_profile_reaches_out_of_the_field() -> None:
    """The predicted profile ends below half a percent of its peak, so that a pass can be integrated."""
    field = found()
    rates = [float(entry or 0) for entry in field.dose_rate_profile.column("dose_rate_cgy_per_min")]
    assert max(rates[0], rates[-1]) <= 0.005 * max(rates)


def test_more_distance_evens_the_width_and_lowers_the_rate() -> None:
    """Farther below the source the field is wider across and weaker."""
    near, far = found(), found(source_to_surface_cm=260.0)
    assert far.across_half_range_percent < near.across_half_range_percent
    assert far.peak_dose_rate_cgy_per_min < near.peak_dose_rate_cgy_per_min


def test_rate_follows_output_and_rate_of_the_mode() -> None:
    """Twice the MU per minute give twice the dose rate."""
    assert found(rate_mu_per_min=1200.0).peak_dose_rate_cgy_per_min == pytest.approx(2 * found().peak_dose_rate_cgy_per_min)


def test_across_profile_is_one_in_the_middle_and_symmetric() -> None:
    """The dose after a pass is relative to the middle."""
    doses = [float(entry or 0) for entry in found().across_profile.column("relative_dose")]
    assert doses[len(doses) // 2] == 1
    assert doses == pytest.approx(doses[::-1])


def test_impossible_rates_are_refused() -> None:
    """A rate of zero is refused."""
    with pytest.raises(ValueError, match="must be positive"):
        found(rate_mu_per_min=0.0)
