"""Tests of field corners and edges in the room."""

from math import sqrt
from typing import Any

import pytest
from sample_rooms import VAULT_A

from readiness.calculations.field_edges import corner_rays, field_edges_in_room

HERE = {
    "tilt_deg": 16,
    "opening_cm": 40,
    "collimator_angle_deg": 0,
    "source_axis_distance_cm": 100,
    "floor_polygon_cm": VAULT_A,
    "isocentre_height_cm": 130,
    "ceiling_height_cm": 300,
}


def rays(side: int, **changes: Any) -> dict[tuple[str, str], dict[str, Any]]:
    """Return the rows by field and ray."""
    arguments: dict[str, Any] = {**HERE, **changes}
    table = field_edges_in_room(side_deg=side, **arguments)
    return {(str(row["field"]), str(row["ray"])): row for row in table.records()}


def test_edges_go_where_they_were_worked_out() -> None:
    """
    In vault-a, side 90, the lower edge falls on the floor and the upper edge on the ceiling.

    Floor: 309.02 from the nominal source, x -209.02. Ceiling: source 96.126, 382.612 forward, x -286.49.
    Axes: 365 x tan 16 = 104.66 above and below the isocentre on the wall.
    """
    found = rays(90)
    floor, ceiling = found["toward feet", "lower edge"], found["toward head", "upper edge"]
    assert ("floor", pytest.approx(-209.02, abs=0.01)) == (floor["surface"], floor["x_cm"])
    assert ("ceiling", pytest.approx(-286.49, abs=0.01)) == (ceiling["surface"], ceiling["x_cm"])
    for field, height in (("toward head", 130 + 104.66), ("toward feet", 130 - 104.66)):
        axis = found[field, "axis"]
        assert ("wall", 4, -365) == (axis["surface"], axis["wall"], pytest.approx(axis["x_cm"]))
        assert axis["height_above_floor_cm"] == pytest.approx(height, abs=0.01)
        assert axis["obliquity_deg"] == pytest.approx(16)


def test_mirrored_room_has_mirrored_edges() -> None:
    """Side 270 in the mirrored room meets the same heights at opposite x; in the same room it does not."""
    mirror = tuple((-x, y) for x, y in reversed(VAULT_A))
    here, there, same_room = rays(90), rays(270, floor_polygon_cm=mirror), rays(270)
    for key in (("toward head", "axis"), ("toward feet", "lower edge"), ("toward head", "upper edge")):
        assert here[key]["surface"] == there[key]["surface"]
        assert here[key]["x_cm"] == pytest.approx(-there[key]["x_cm"])
        assert here[key]["height_above_floor_cm"] == pytest.approx(there[key]["height_above_floor_cm"])
    assert same_room["toward head", "axis"]["x_cm"] == pytest.approx(330)


def test_level_pair_has_both_axes_at_the_isocentre() -> None:
    """Without tilt both axes meet the wall at the height of the isocentre."""
    found = rays(90, tilt_deg=0)
    heights = [found[field, "axis"]["height_above_floor_cm"] for field in ("toward head", "toward feet")]
    assert heights == pytest.approx([130, 130])


def test_more_tilt_lifts_the_head_field() -> None:
    """More tilt lifts where the axis aimed at the head meets the wall and lowers the other."""
    low, high = rays(90, tilt_deg=12), rays(90, tilt_deg=18)
    height = "height_above_floor_cm"
    assert low["toward head", "axis"][height] < high["toward head", "axis"][height]
    assert low["toward feet", "axis"][height] > high["toward feet", "axis"][height]


def test_corners_of_a_straight_field_lie_a_half_opening_off_the_axis() -> None:
    """At gantry 270 the corners are (20, 20) off the axis at 100 cm, in order round the field."""
    offsets = [
        (ray.z / ray.x, ray.y / ray.x)
        for ray in corner_rays(gantry_angle_deg=270, opening_cm=40, collimator_angle_deg=0)
    ]
    expected = [(0.2, 0.2), (0.2, -0.2), (-0.2, -0.2), (-0.2, 0.2)]
    assert offsets == [pytest.approx(one) for one in expected]


@pytest.mark.parametrize("side", [90, 270])
def test_diamond_reaches_higher_than_the_square(side: int) -> None:
    """With the collimator at 45 degrees a corner is straight above the axis, sqrt(2) times as far."""
    tops = [
        max(ray.z / abs(ray.x) for ray in corner_rays(gantry_angle_deg=side, opening_cm=40, collimator_angle_deg=turn))
        for turn in (0, 45)
    ]
    assert tops == pytest.approx([0.2, 0.2 * sqrt(2)])
    edge = rays(side, collimator_angle_deg=45, tilt_deg=0)["toward head", "upper edge"]["height_above_floor_cm"]
    wall = 465 if side == 90 else 430
    assert edge == pytest.approx(130 + 0.2 * sqrt(2) * wall)


def test_corners_turn_counter_clockwise_seen_from_the_source() -> None:
    """
    A small turn moves the corner at (+x, +y) of the gantry's own axes toward -x.

    At gantry 0 these axes are those of the room.
    """
    first = corner_rays(gantry_angle_deg=0, opening_cm=40, collimator_angle_deg=0)[0]
    turned = corner_rays(gantry_angle_deg=0, opening_cm=40, collimator_angle_deg=5)[0]
    assert first.x > 0
    assert first.y > 0
    assert turned.x < first.x
    assert turned.y > first.y


def test_impossible_input_is_refused() -> None:
    """No opening, and a head outside the room, are refused."""
    with pytest.raises(ValueError, match="opening must be above zero"):
        rays(90, opening_cm=0)
    with pytest.raises(ValueError, match="outside the room"):
        rays(90, source_axis_distance_cm=400)
