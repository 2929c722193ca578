"""The record of a beam in a room."""

import pytest
from beam_setups import common_setup

from readiness.errors import OutsideValidity


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        ({"opening_cm": 0.0}, "opening and source-axis distance"),
        ({"source_axis_distance_cm": -100.0}, "opening and source-axis distance"),
        ({"degrader_thickness_cm": -1.0}, "cannot be negative"),
        ({"degrader_material": None}, "needs a material and a gap"),
        ({"degrader_gap_cm": None}, "needs a material and a gap"),
    ],
)
def test_impossible_setups_are_refused(changes: dict[str, float], words: str) -> None:
    """Each impossible number is named."""
    with pytest.raises(ValueError, match=words):
        common_setup(**changes)


@pytest.mark.parametrize("spread", [0.0, 113.0])
def test_foil_spread_that_is_no_tangent_is_refused(spread: float) -> None:
    """Foils spread at least a little, and a spread above 20 is no tangent that anybody means."""
    with pytest.raises(OutsideValidity, match="0.15 to 0.25 as a rule"):
        common_setup(foil_spread=spread)


def test_no_degrader_may_be_said_by_leaving_it_out() -> None:
    """Without material, thickness and gap there is no degrader."""
    bare = common_setup(degrader_material=None, degrader_thickness_cm=None, degrader_gap_cm=None)
    assert bare == common_setup().without_degrader()


def test_changed_setup_keeps_everything_else() -> None:
    """Changing one number leaves the others."""
    assert common_setup().but(foil_spread=0.25) == common_setup(foil_spread=0.25)
