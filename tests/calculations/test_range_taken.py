"""Part of the range that electrons spend before the plane."""

import pytest

from readiness.calculations.range_taken import range_taken
from readiness.calculations.stopping_power import csda_range
from readiness.errors import OutsideValidity

SETUP = {"energy_at_100_cm_mev": 6.0, "plane_distance_cm": 400.0, "degrader_material": "pmma", "degrader_thickness_cm": 0.6}


def taken(**changes: object) -> float:
    """Return the part for a usual set-up with changes."""
    return range_taken(**{**SETUP, **changes})  # type: ignore[arg-type]


def test_by_hand() -> None:
    """Three metres of air are 0.361 g/cm2, 0.6 cm of PMMA 0.714: of ranges near 3.5 and 3.1 g/cm2 about a third."""
    by_hand = 0.361437 / csda_range(material="air", energy_mev=6.0) + 0.714 / csda_range(material="pmma", energy_mev=6.0)
    assert taken() == pytest.approx(by_hand, rel=1e-6)
    assert 0.3 < taken() < 0.36


def test_nothing_in_the_way() -> None:
    """At 100 cm without a degrader nothing is taken."""
    assert taken(plane_distance_cm=100.0, degrader_material=None, degrader_thickness_cm=0.0) == 0.0


def test_directions() -> None:
    """A thicker sheet and a longer way take more, a higher energy loses a smaller part."""
    assert taken(degrader_thickness_cm=1.0) > taken() > taken(energy_at_100_cm_mev=9.0)
    assert taken(plane_distance_cm=700.0) > taken()


def test_a_sheet_as_thick_as_the_range() -> None:
    """Behind 3 cm of PMMA no electron of 6 MeV arrives."""
    assert taken(degrader_thickness_cm=3.0) > 1.0


def test_impossible_input() -> None:
    """A plane within the first metre is refused, an unknown material is named."""
    with pytest.raises(ValueError, match="beyond 100 cm"):
        taken(plane_distance_cm=80.0)
    with pytest.raises(OutsideValidity, match="plywood"):
        taken(degrader_material="plywood")
