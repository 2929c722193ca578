"""Tests of plan geometry."""

import pytest
from sample_rooms import VAULT_A

from readiness.calculations.room_plan import WayPlan, common_area, covered_percent, floor_area_m2, floor_fault

SQUARE = ((0.0, 0.0), (10.0, 0.0), (10.0, 10.0), (0.0, 10.0))


def test_sound_floor_has_no_fault() -> None:
    """A rectangle round the isocentre is a floor, in either sense of rotation."""
    assert floor_fault(floor_polygon_cm=VAULT_A) == ""
    assert floor_fault(floor_polygon_cm=VAULT_A[::-1]) == ""


@pytest.mark.parametrize(
    ("corners", "words"),
    [
        (((-100, -100), (100, 100), (100, -100), (-100, 100)), "crosses or touches itself"),
        (((100, 100), (300, 100), (300, 300)), "isocentre (0, 0) does not lie inside"),
        (((0, -100), (300, -100), (300, 300), (0, 300)), "isocentre (0, 0) does not lie inside"),
        (((-100, -100), (100, 100), (-100, -100)), "at least three corners"),
        (((-100, 0), (100, 0), (200, 0)), "crosses or touches itself"),
    ],
)
def test_fault_of_a_floor_is_named(corners: tuple[tuple[float, float], ...], words: str) -> None:
    """A bow tie, an isocentre outside or on the wall, and a line are not floors."""
    assert words in floor_fault(floor_polygon_cm=corners)


def test_area_of_a_room() -> None:
    """A room of 6.95 m by 6.90 m has 47.955 m2."""
    assert floor_area_m2(floor_polygon_cm=VAULT_A) == pytest.approx(47.955)
    with pytest.raises(ValueError, match="three corners"):
        floor_area_m2(floor_polygon_cm=())


def test_overlapping_shadows_count_once() -> None:
    """Two shadows of half and of the same half cover half; one more quarter makes three quarters."""
    left = ((0.0, 0.0), (5.0, 0.0), (5.0, 10.0), (0.0, 10.0))
    low_right = ((5.0, 0.0), (20.0, 0.0), (20.0, 5.0), (5.0, 5.0))
    assert covered_percent(SQUARE, [left, left]) == pytest.approx(50)
    assert covered_percent(SQUARE, [left, low_right]) == pytest.approx(75)
    assert covered_percent(SQUARE, []) == 0


def test_areas_that_only_touch_have_nothing_in_common() -> None:
    """Neighbours along an edge share no area."""
    assert common_area(SQUARE, ((10.0, 0.0), (20.0, 0.0), (20.0, 10.0))) == ()


def test_way_exactly_as_wide_as_asked_for_is_clear() -> None:
    """A passage of 80 cm lets a way of 80 cm through, and not one of 90 cm."""
    hourglass = (
        (-300.0, -200.0), (0.0, -200.0), (0.0, -40.0), (50.0, -40.0), (50.0, -200.0), (500.0, -200.0),
        (500.0, 200.0), (50.0, 200.0), (50.0, 40.0), (0.0, 40.0), (0.0, 200.0), (-300.0, 200.0),
    )  # fmt: skip
    stand = ((-250.0, -45.0), (-160.0, -45.0), (-160.0, 45.0), (-250.0, 45.0))
    beside = (-205.0, 90.0)
    assert WayPlan(hourglass, [], 80).is_clear(stand, beside, None)
    assert not WayPlan(hourglass, [], 90).is_clear(stand, beside, None)
    assert WayPlan(hourglass, [], 90).is_clear(stand, beside, (-150.0, -200.0))
    assert not WayPlan(hourglass, [], 90).is_clear(stand, beside, (300.0, -200.0))
