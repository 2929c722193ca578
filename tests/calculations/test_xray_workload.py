"""The x-ray workload of a spot, from measured x rays or from a fraction with its three factors."""

from math import exp

import pytest

from readiness.calculations.xray_workload import (
    attenuation_basis,
    workload_from_axis_dose,
    workload_from_fraction,
    workload_from_pair_dose,
)
from readiness.errors import OutsideValidity

FRACTION = {
    "xray_fraction_percent": 1.0,
    "fields": "one-dual",
    "depth_cm": 10.0,
    "dose_per_cycle_gy": 2.0,
    "multiple_field_factor": 2.7,
    "plane_distance_cm": 380.0,
    "water_attenuation_per_cm": None,
    "lobe_allowance": None,
    "cycles_per_week": 8.0,
    "extra_week_mu": 0.0,
    "cycle_mu": None,
}
AXIS = {
    "axis_cgy_per_mu": 2e-4,
    "double_tilt_cgy_per_mu": 1e-4,
    "plane_distance_cm": 400.0,
    "cycle_mu": 22000.0,
    "cycles_per_week": 4.0,
    "extra_week_mu": 0.0,
}


def test_axis_dose_by_hand():
    """22,000 MU, 2e-4 and 1e-4 cGy per MU at 4 m: 11,000 x 3e-6 Gy x 16 m2 = 0.528 Gy m2 a cycle."""
    result = workload_from_axis_dose(**AXIS)
    assert 0.528 == pytest.approx(result.per_cycle_gy_m2)
    assert 4 * 0.528 == pytest.approx(result.per_week_gy_m2_per_week)


def test_pair_dose_is_the_same_number():
    """The dose per MU of the pair on one axis is the mean of both fields, so both ways agree."""
    pair = {key: value for key, value in AXIS.items() if "cgy" not in key}
    assert workload_from_axis_dose(**AXIS).per_cycle_gy_m2 == pytest.approx(
        workload_from_pair_dose(**pair, pair_cgy_per_mu=1.5e-4).per_cycle_gy_m2
    )


def test_extra_mu_count_in_their_week():
    """11,000 MU of quality assurance count as half a cycle more."""
    assert 4.5 == workload_from_axis_dose(**{**AXIS, "extra_week_mu": 11000.0}).cycles_per_week


def test_three_factors_make_about_eight():
    """6/B, water and lobes together are about eight, each shown with its basis."""
    result = workload_from_fraction(**FRACTION)
    factor = 6 / 2.7 * exp(0.058 * 10) * 2.0
    assert factor == pytest.approx(result.factor_over_plain)
    assert 8.0 == pytest.approx(factor, rel=0.01)
    steps = {row["symbol"]: row for row in result.steps.records()}
    assert steps["6/B"]["amount"] == pytest.approx(2.222, abs=0.001)
    assert (steps["exp(mu z)"]["basis"], steps["L"]["basis"]) == ("assumed", "assumed")
    stated = workload_from_fraction(**{**FRACTION, "lobe_allowance": 1.5})
    assert "as given" == next(row["basis"] for row in stated.steps.records() if row["symbol"] == "L")


def test_no_water_no_lobes_and_b_of_six_leave_the_plain_fraction():
    """With depth 0, no lobe allowance and B = 6 the three factors vanish."""
    plain = workload_from_fraction(
        **{**FRACTION, "depth_cm": 0.0, "lobe_allowance": 1.0, "multiple_field_factor": 6.0}
    )
    assert 1.0 == plain.factor_over_plain
    assert 2 * 0.01 * 3.8**2 == pytest.approx(plain.per_cycle_gy_m2)


def test_fraction_of_all_fields_needs_no_turning_factor():
    """F = (6/B) f1 gives the same workload as f1."""
    of_all = workload_from_fraction(
        **{**FRACTION, "fields": "all-dual", "xray_fraction_percent": 1.0 * 6 / 2.7}
    )
    assert workload_from_fraction(**FRACTION).per_cycle_gy_m2 == pytest.approx(of_all.per_cycle_gy_m2)


@pytest.mark.parametrize("missing", ["fields", "depth_cm"])
def test_plain_fraction_refuses(missing):
    """A fraction without depth or definition is not a workload, and says so."""
    with pytest.raises(OutsideValidity, match="without the depth at which it was measured"):
        workload_from_fraction(**{**FRACTION, missing: None})


@pytest.mark.parametrize("percent", [0.0, 0.009, 21.0])
def test_unbelievable_fraction_refuses(percent):
    """Zero, a fraction written where per cent are expected, and 21 % are not believed."""
    with pytest.raises(OutsideValidity, match="is not believable"):
        workload_from_fraction(**{**FRACTION, "xray_fraction_percent": percent})


def test_extra_mu_without_mu_of_a_cycle():
    """MU of quality assurance cannot be weighed if nobody knows the MU of a cycle."""
    with pytest.raises(OutsideValidity, match="without the MU of a cycle"):
        workload_from_fraction(**{**FRACTION, "extra_week_mu": 5000.0})
    counted = workload_from_fraction(**{**FRACTION, "extra_week_mu": 5000.0, "cycle_mu": 20000.0})
    assert 8.25 == counted.cycles_per_week


@pytest.mark.parametrize(
    ("name", "more"), [("depth_cm", 5.0), ("lobe_allowance", 3.0), ("xray_fraction_percent", 2.0)]
)
def test_directions_up(name, more):
    """More water in front, more lobe, more x rays: each raises the workload."""
    low = {**FRACTION, "depth_cm": 2.0, "lobe_allowance": 2.0}
    assert (
        workload_from_fraction(**{**low, name: more}).per_cycle_gy_m2
        > workload_from_fraction(**low).per_cycle_gy_m2
    )


def test_larger_b_lowers_it():
    """A larger B needs less dose at the calibration point."""
    assert (
        workload_from_fraction(**{**FRACTION, "multiple_field_factor": 3.0}).per_cycle_gy_m2
        < workload_from_fraction(**FRACTION).per_cycle_gy_m2
    )


@pytest.mark.parametrize(
    ("name", "number"),
    [
        ("multiple_field_factor", 0.0),
        ("plane_distance_cm", -1.0),
        ("depth_cm", -1.0),
        ("cycles_per_week", -1.0),
    ],
)
def test_impossible(name, number):
    """Numbers outside their meaning are refused."""
    with pytest.raises(ValueError, match="zero"):
        workload_from_fraction(**{**FRACTION, name: number})


def test_unknown_definition():
    """A definition that is none of the two is refused."""
    with pytest.raises(ValueError, match="one-dual or all-dual"):
        workload_from_fraction(**{**FRACTION, "fields": "single"})


def test_attenuation_in_water_is_that_near_6_mev():
    """From 5 to 8 MeV as given; above, where water takes less, careful; without water at any energy."""
    assert ["as given"] * 3 == [attenuation_basis(beam_energy_mev=each, depth_cm=10.0) for each in (5.0, 6.4, 8.0)]
    assert "careful" in attenuation_basis(beam_energy_mev=9.0, depth_cm=10.0)
    assert "as given" == attenuation_basis(beam_energy_mev=3.0, depth_cm=0.0)


def test_attenuation_below_5_mev_would_understate_and_is_refused():
    """Water takes more from softer x rays: the factor would come out too small."""
    with pytest.raises(OutsideValidity, match="near 6 MeV; for 4 MeV it would understate what 10 cm"):
        attenuation_basis(beam_energy_mev=4.0, depth_cm=10.0)


def test_the_steps_say_how_the_attenuation_is_known():
    """A careful attenuation stands as such beside its factor."""
    steps = workload_from_fraction(**{**FRACTION, "water_attenuation_per_cm": 0.058}, water_basis="careful").steps
    assert ["careful"] == [row["basis"] for row in steps.records() if row["symbol"] == "exp(mu z)"]


def test_steps_never_hold_the_monitor_units():
    """The dose at the plane over a cycle stands in their place, with or without both places measured."""
    pair = {key: value for key, value in AXIS.items() if "cgy" not in key}
    for steps in (workload_from_axis_dose(**AXIS).steps, workload_from_pair_dose(**pair, pair_cgy_per_mu=1.5e-4).steps):
        assert AXIS["cycle_mu"] not in steps.column("amount")
        assert [pytest.approx(0.033)] == [row["amount"] for row in steps.records() if row["symbol"] == "D_x"]
