"""Tests of source and ray positions."""

from math import atan, degrees, hypot, sqrt

import pytest

from readiness.calculations.beam_geometry import (
    axis_height_at_plane_cm,
    edge_angle_deg,
    plane_x_cm,
    ray_direction,
    ray_height_cm,
    ray_reach_cm,
    source_position,
    tilted_gantry_angles,
)

SAD = {"source_axis_distance_cm": 100.0}


def test_level_pair_is_the_side_itself() -> None:
    """Without tilt both fields have the gantry angle of the side."""
    assert tilted_gantry_angles(side_deg=90, tilt_deg=0) == (90, 90)
    assert tilted_gantry_angles(side_deg=270, tilt_deg=0) == (270, 270)


@pytest.mark.parametrize("side", [90, 270])
def test_field_aimed_at_the_head_comes_from_below_and_goes_up(side: int) -> None:
    """On either side the first field has its source below the isocentre and rises."""
    head, feet = tilted_gantry_angles(side_deg=side, tilt_deg=16)
    assert source_position(gantry_angle_deg=head, **SAD).z_cm < 0 < ray_direction(gantry_angle_deg=head).z
    assert source_position(gantry_angle_deg=feet, **SAD).z_cm > 0 > ray_direction(gantry_angle_deg=feet).z


@pytest.mark.parametrize(("side", "sign"), [(90, -1), (270, 1)])
def test_plane_lies_where_the_beam_goes(side: int, sign: int) -> None:
    """The plane lies on the side of the isocentre toward which the axis points."""
    assert plane_x_cm(side_deg=side, distance_cm=400, **SAD) == sign * 300
    assert ray_direction(gantry_angle_deg=side).x == pytest.approx(sign)
    assert source_position(gantry_angle_deg=side, **SAD).x_cm == pytest.approx(-sign * 100)


@pytest.mark.parametrize("gantry", [0, 40, 74, 90, 106, 180, 254, 270, 286])
def test_axis_passes_through_the_isocentre(gantry: int) -> None:
    """The source followed along the axis for the source-axis distance is the isocentre."""
    source = source_position(gantry_angle_deg=gantry, **SAD)
    axis = ray_direction(gantry_angle_deg=gantry)
    assert [at + 100 * along for at, along in zip(source, axis, strict=True)] == pytest.approx([0, 0, 0])


@pytest.mark.parametrize("gantry", [74, 90, 106, 254, 270, 286])
def test_upward_is_up_on_both_sides(gantry: int) -> None:
    """A ray with an upward tangent rises more than the axis, one toward the gantry goes to +y."""
    axis = ray_direction(gantry_angle_deg=gantry)
    assert ray_direction(gantry_angle_deg=gantry, upward_tangent=0.2).z > axis.z
    assert ray_direction(gantry_angle_deg=gantry, sideways_tangent=0.2).y == pytest.approx(0.2 / sqrt(1.04))


def test_ray_at_an_angle_agrees_with_the_ray_at_a_tangent() -> None:
    """Height at a wall from the flat formula equals that of the ray followed in space."""
    source = source_position(gantry_angle_deg=106, **SAD)
    ray = ray_direction(gantry_angle_deg=106, upward_tangent=0.15)
    steps = (-365 - source.x_cm) / ray.x
    height = ray_height_cm(distance_cm=465, tilt_deg=16, upward_deg=degrees(atan(0.15)), **SAD)
    assert height == pytest.approx(source.z_cm + steps * ray.z)


def test_level_axis_stays_at_the_height_of_the_isocentre() -> None:
    """Without tilt the axis meets the plane at the height of the isocentre, at any distance."""
    assert axis_height_at_plane_cm(plane_distance_cm=400, tilt_deg=0, **SAD) == 0
    assert axis_height_at_plane_cm(plane_distance_cm=100, tilt_deg=16, **SAD) == pytest.approx(0)


def test_axis_rises_with_tilt_and_distance() -> None:
    """More tilt or more distance lifts the axis at the plane."""
    low = axis_height_at_plane_cm(plane_distance_cm=400, tilt_deg=14, **SAD)
    assert low < axis_height_at_plane_cm(plane_distance_cm=400, tilt_deg=16, **SAD)
    assert low < axis_height_at_plane_cm(plane_distance_cm=420, tilt_deg=14, **SAD)


def test_reach_and_height_are_inverse() -> None:
    """The ray is at the floor's height where it is said to reach the floor."""
    reach = ray_reach_cm(height_cm=-130, tilt_deg=-16, upward_deg=-11.3, **SAD)
    assert reach is not None
    assert ray_height_cm(distance_cm=reach, tilt_deg=-16, upward_deg=-11.3, **SAD) == pytest.approx(-130)


def test_level_or_rising_ray_never_meets_the_floor() -> None:
    """A ray that does not go down has no place on the floor."""
    assert ray_reach_cm(height_cm=-130, tilt_deg=0, upward_deg=0, **SAD) is None
    assert ray_reach_cm(height_cm=-130, tilt_deg=16, upward_deg=0, **SAD) is None


def test_wider_opening_has_a_wider_edge() -> None:
    """The angle to the edge grows with the opening and is half a right angle for 200 cm."""
    assert edge_angle_deg(opening_cm=200) == pytest.approx(45)
    assert edge_angle_deg(opening_cm=36) < edge_angle_deg(opening_cm=40)


def test_source_keeps_its_distance() -> None:
    """The source is at the source-axis distance from the isocentre at every angle."""
    for gantry in range(0, 360, 15):
        source = source_position(gantry_angle_deg=gantry, **SAD)
        assert hypot(source.x_cm, source.z_cm) == pytest.approx(100)


def test_impossible_input_is_refused() -> None:
    """A side that is no side, a tilt past the vertical, a plane behind the source are refused in words."""
    with pytest.raises(ValueError, match="90 or 270 degrees, not 180"):
        tilted_gantry_angles(side_deg=180, tilt_deg=16)
    with pytest.raises(ValueError, match="from 0 to below 90"):
        tilted_gantry_angles(side_deg=90, tilt_deg=-1)
    with pytest.raises(ValueError, match="must be above zero, not -1"):
        source_position(gantry_angle_deg=90, source_axis_distance_cm=-1)
    with pytest.raises(ValueError, match="behind the source"):
        ray_height_cm(distance_cm=3, tilt_deg=16, upward_deg=0, **SAD)
    with pytest.raises(ValueError, match="less than 90 degrees"):
        ray_height_cm(distance_cm=400, tilt_deg=80, upward_deg=11, **SAD)
