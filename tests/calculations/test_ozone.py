"""Ozone rises toward its balance and falls with ventilation."""

import pytest

from readiness.calculations.ozone import (
    ELEMENTARY_CHARGE_C,
    ozone_after_session,
    ozone_of_dose_ppm,
    ozone_ppm,
    ozone_rate_per_s,
    removal_per_s,
)
from readiness.errors import OutsideValidity

CYCLE = {
    "plane_dose_gy": 4.14,
    "fluence_per_cm2_per_gy": 3.27e9,
    "field_area_m2": 5.0,
    "energy_lost_mev": 0.90,
    "volume_m3": 150.0,
    "yield_per_100ev": 10.3,
}
SESSION = {**CYCLE, "duration_s": 600.0, "air_changes_per_h": 6.0, "decomposition_min": 50.0}


def test_no_removal_is_the_limit():
    """With hardly any removal a session leaves what its dose makes."""
    still = ozone_after_session(**{**SESSION, "air_changes_per_h": 0.0, "decomposition_min": 1e9})
    assert ozone_of_dose_ppm(**CYCLE) == pytest.approx(still.at_end_ppm)


def test_without_removal_it_rises_in_proportion():
    """Twice the time is twice the ozone where none goes away."""
    one, two = (
        ozone_ppm(rate_per_s=1e17, volume_m3=100.0, removed_per_s=0.0, duration_s=t) for t in (60.0, 120.0)
    )
    assert 2.0 == pytest.approx(two / one)


def test_it_never_passes_its_balance():
    """After a very long time the concentration is the lasting one, and before that below it."""
    long = ozone_after_session(**{**SESSION, "duration_s": 1e6})
    assert long.lasting_ppm == pytest.approx(long.at_end_ppm)
    short = ozone_after_session(**SESSION)
    assert short.at_end_ppm < short.lasting_ppm


def test_current_from_dose():
    """The beam current is the charge of all electrons of the dose over the time."""
    found = ozone_after_session(**SESSION)
    electrons = 4.14 * 3.27e9 * 5e4
    assert electrons / 600.0 == pytest.approx(found.electrons_per_s)
    assert electrons / 600.0 * ELEMENTARY_CHARGE_C * 1e6 == pytest.approx(found.beam_current_ua)


@pytest.mark.parametrize(
    ("name", "factor", "rises"),
    [
        ("plane_dose_gy", 2.0, True),
        ("yield_per_100ev", 0.6, False),
        ("air_changes_per_h", 2.0, False),
        ("volume_m3", 2.0, False),
        ("decomposition_min", 2.0, True),
    ],
)
def test_directions(name, factor, rises):
    """More dose and longer life raise it; less yield, more air and a larger room lower it."""
    changed = ozone_after_session(**{**SESSION, name: SESSION[name] * factor}).at_end_ppm
    assert rises == (changed > ozone_after_session(**SESSION).at_end_ppm)


def test_a_session_stays_far_below_limits():
    """A cycle at the most careful yield stays below 0.02 ppm in an ordinary vault."""
    assert ozone_after_session(**SESSION).at_end_ppm < 0.02


def test_outside_the_table():
    """Below 1 and above 10 MeV the table of stopping powers ends."""
    for energy in (0.9, 10.1):
        with pytest.raises(OutsideValidity, match="energy in MeV from 1 to 10"):
            ozone_rate_per_s(beam_current_ua=1.0, energy_mev=energy, path_cm=300.0, yield_per_100ev=10.3)


@pytest.mark.parametrize("name", sorted(SESSION))
def test_impossible(name):
    """Numbers below zero are refused, each of them."""
    with pytest.raises(ValueError, match="zero"):
        ozone_after_session(**{**SESSION, name: -1.0})


def test_impossible_rates():
    """A rate below zero and air changes below zero are refused."""
    with pytest.raises(ValueError, match="rate must not be below zero"):
        ozone_ppm(rate_per_s=-1.0, volume_m3=100.0, removed_per_s=0.1, duration_s=1.0)
    with pytest.raises(ValueError, match="air changes"):
        removal_per_s(air_changes_per_h=-1.0, decomposition_min=50.0)
