"""Gantry ranges of machines and modes."""

import pytest

from readiness.calculations.gantry_range import angle_within
from readiness.errors import OutsideValidity


@pytest.mark.parametrize("angle", [70.0, 90.0, 110.0, 250.0, 290.0, 90.0 - 360.0, 270.0 + 720.0])
def test_inside_on_any_turn(angle: float) -> None:
    """Ends belong to a range, and whole turns do not matter."""
    assert angle_within(gantry_angle_deg=angle, gantry_ranges_deg=[70, 110, 250, 290])


@pytest.mark.parametrize("angle", [69.9, 110.1, 180.0, 0.0])
def test_outside(angle: float) -> None:
    """Between two ranges nothing is allowed."""
    assert not angle_within(gantry_angle_deg=angle, gantry_ranges_deg=[70, 110, 250, 290])


def test_a_range_through_zero() -> None:
    """From -180 to 180 is a whole turn; from -20 to 20 holds 350 and not 90."""
    assert all(angle_within(gantry_angle_deg=angle, gantry_ranges_deg=[-180, 180]) for angle in range(0, 361, 10))
    assert angle_within(gantry_angle_deg=350.0, gantry_ranges_deg=[-20, 20])
    assert not angle_within(gantry_angle_deg=90.0, gantry_ranges_deg=[-20, 20])


def test_a_wider_range_holds_no_less() -> None:
    """What a narrow range holds, a wider one holds too."""
    for angle in range(360):
        if angle_within(gantry_angle_deg=angle, gantry_ranges_deg=[70, 110]):
            assert angle_within(gantry_angle_deg=angle, gantry_ranges_deg=[60, 120])


@pytest.mark.parametrize("ranges", [[], [70], [110, 70]])
def test_a_range_without_its_ends(ranges: list[float]) -> None:
    """A range needs a lowest and a highest angle in this order."""
    with pytest.raises(OutsideValidity, match="gantry range"):
        angle_within(gantry_angle_deg=90.0, gantry_ranges_deg=ranges)
