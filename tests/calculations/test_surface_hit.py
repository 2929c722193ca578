"""Tests of where rays meet the room."""

from math import sqrt
from typing import Any

import pytest

from readiness.calculations.surface_hit import SurfaceHit, first_surface_hit

ROOM = [(-365.0, -420.0), (330.0, -420.0), (330.0, 270.0), (-365.0, 270.0)]
# a room with a nook: the floor reaches to x -400 only for y below -100
NOOK = [(-400.0, -300.0), (300.0, -300.0), (300.0, 200.0), (-200.0, 200.0), (-200.0, -100.0), (-400.0, -100.0)]


def hit(direction: tuple[float, float, float], polygon: Any = ROOM, source: Any = (100, 0, 0)) -> SurfaceHit:
    """Return the hit of a ray in a room with the isocentre at 130 and the ceiling at 300 cm."""
    return first_surface_hit(
        source_cm=source,
        direction=direction,
        floor_polygon_cm=polygon,
        isocentre_height_cm=130,
        ceiling_height_cm=300,
    )


def test_level_ray_meets_the_wall_square_on() -> None:
    """A level ray along -x from x 100 meets the fourth wall at x -365, 465 cm on, square on."""
    found = hit((-1, 0, 0))
    assert ("wall", 3) == (found.surface, found.wall_index)
    assert found.point == pytest.approx((-365, 0, 0))
    assert found.path_cm == pytest.approx(465)
    assert found.obliquity_deg == 0


def test_vertical_rays_meet_floor_and_ceiling() -> None:
    """Straight down it is 130 cm to the floor, straight up 170 cm to the ceiling."""
    down, up = hit((0, 0, -1)), hit((0, 0, 1))
    assert ("floor", None, 130.0) == (down.surface, down.wall_index, down.path_cm)
    assert ("ceiling", None, 170.0) == (up.surface, up.wall_index, up.path_cm)


def test_slanted_ray_is_oblique_to_the_surface() -> None:
    """A ray falling at 45 degrees meets the floor at 45 degrees after sqrt(2) x 130 cm."""
    found = hit((-1, 0, -1))
    assert found.surface == "floor"
    assert found.path_cm == pytest.approx(130 * sqrt(2))
    assert found.obliquity_deg == pytest.approx(45)


def test_length_of_the_direction_does_not_matter() -> None:
    """Only where the ray points counts."""
    assert hit((-3, 0.3, -0.6)).path_cm == pytest.approx(hit((-1, 0.1, -0.2)).path_cm)


def test_nearer_wall_of_a_nook_is_met_first() -> None:
    """A ray that would reach the far wall of a nook meets the wall before it first."""
    assert hit((-1, 0, 0), NOOK).point.x_cm == pytest.approx(-200)
    assert hit((-1, 0, 0), NOOK).wall_index == 3
    assert hit((-1, 0, 0), NOOK, source=(100, -150, 0)).point.x_cm == pytest.approx(-400)


def test_ray_at_a_jutting_corner_is_stopped_there() -> None:
    """A ray exactly at the corner of a nook counts as meeting it."""
    found = hit((-300, -100, 0), NOOK, source=(100, 0, 0))
    assert found.point == pytest.approx((-200, -100, 0))


def test_slanted_wall_is_met_at_its_own_angle() -> None:
    """A wall at 45 degrees across the ray is met at 45 degrees."""
    triangle = [(-300.0, 0.0), (200.0, -500.0), (200.0, 500.0)]
    found = hit((-1, 0, 0), triangle, source=(0, 100, 0))
    assert found.point == pytest.approx((-200, 100, 0))
    assert found.obliquity_deg == pytest.approx(45)


def test_edge_between_floor_and_wall_counts_for_the_floor() -> None:
    """A ray into the edge between wall and floor counts for the floor."""
    assert hit((-465, 0, -130)).surface == "floor"


def test_steeper_ray_meets_the_floor_nearer() -> None:
    """The steeper the ray, the shorter its way to the floor."""
    assert hit((-1, 0, -0.6)).path_cm < hit((-1, 0, -0.5)).path_cm


def test_ray_from_outside_is_refused() -> None:
    """A ray that starts outside the room, or goes nowhere, is refused."""
    with pytest.raises(ValueError, match="starts outside the room"):
        hit((-1, 0, 0), source=(400, 0, 0))
    with pytest.raises(ValueError, match="starts outside the room"):
        hit((-1, 0, 0), source=(0, 0, 171))
    with pytest.raises(ValueError, match="needs a direction"):
        hit((0, 0, 0))
