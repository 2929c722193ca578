"""Energies from ranges, and ranges that contradict each other."""

import pytest

from readiness.calculations.range_energy import (
    low_mean_energy_mev,
    mean_energy_mev,
    most_probable_energy_mev,
    range_contradiction,
)
from readiness.errors import OutsideValidity


def test_mean_lies_half_an_mev_below_most_probable() -> None:
    """For a beam of R50 2.36 and Rp 2.92 cm the mean is about 0.5 MeV below the most probable energy."""
    difference = most_probable_energy_mev(rp_cm=2.92) - mean_energy_mev(r50_cm=2.36)
    assert difference == pytest.approx(0.5, abs=0.05)


def test_both_formulas_for_the_mean_agree_where_they_meet() -> None:
    """At R50 of 2 to 3 cm the formula for low energies gives 2.33 R50 within 5 %."""
    for r50 in (2.0, 2.5, 3.0):
        assert low_mean_energy_mev(r50_cm=r50) == pytest.approx(mean_energy_mev(r50_cm=r50), rel=0.05)


def test_factor_is_refused_at_the_plane() -> None:
    """An R50 of 1 cm, usual at the treatment plane, is outside the range of 2.33 R50."""
    with pytest.raises(OutsideValidity, match="holds for R50 of 2 to 13 cm, not 1 cm"):
        mean_energy_mev(r50_cm=1)
    assert low_mean_energy_mev(r50_cm=1) == pytest.approx(2.74, abs=0.01)


@pytest.mark.parametrize("function", [mean_energy_mev, low_mean_energy_mev])
def test_zero_half_value_depth_is_impossible(function: object) -> None:
    """No energy belongs to a half-value depth of 0."""
    with pytest.raises(ValueError, match="more than 0 cm"):
        function(r50_cm=0)  # type: ignore[operator]
    with pytest.raises(ValueError, match="more than 0 cm"):
        most_probable_energy_mev(rp_cm=-1)


def test_deeper_is_more_energetic() -> None:
    """Each energy rises with its range."""
    assert mean_energy_mev(r50_cm=2.4) > mean_energy_mev(r50_cm=2.3)
    assert low_mean_energy_mev(r50_cm=1.1) > low_mean_energy_mev(r50_cm=1)
    assert most_probable_energy_mev(rp_cm=3) > most_probable_energy_mev(rp_cm=2.9)


@pytest.mark.parametrize(("r50", "rp"), [(2.36, 2.92), (2.40, 2.95), (3.56, 4.34), (2.33, 2.88), (1.0, 1.5)])
def test_usual_pairs_do_not_contradict(r50: float, rp: float) -> None:
    """Ranges of real beams of 6 and 9 MeV, and of a beam behind a degrader, belong together."""
    assert range_contradiction(r50_cm=r50, rp_cm=rp) == ""


@pytest.mark.parametrize(
    ("r50", "rp", "suspicion"),
    [
        (2.92, 2.36, "were they exchanged"),
        (2.36, 29.2, "Rp looks like millimetres"),
        (23.6, 2.92, "R50 looks like millimetres"),
        (2.36, 3.9, "a mean energy of 5.5 MeV and a most probable energy of 7.98 MeV"),
        (2.36, 2.4, "most probable energy of 4.99 MeV"),
        (1.0, 1.9, "contradict each other"),
    ],
)
def test_contradiction_names_the_suspicion(r50: float, rp: float, suspicion: str) -> None:
    """Ranges that cannot belong to one beam are named with what probably happened."""
    assert suspicion in range_contradiction(r50_cm=r50, rp_cm=rp)
