"""Tests of outlines that slide along x."""

from math import inf

import pytest

from readiness.calculations.sliding import Hindrance, free_stretches, hindrance, rectangle, round_outline

STAND = rectangle(-45, 45, -45, 45)


def test_box_is_hit_from_touching_to_touching() -> None:
    """A stand of 90 cm meets a box from x 200 to 240 between positions 155 and 285."""
    assert Hindrance("box", 155, 285) == hindrance("box", STAND, rectangle(200, 240, -10, 10))


def test_box_beside_the_track_is_passed() -> None:
    """A box that begins where the stand ends does not hinder it."""
    assert hindrance("box", STAND, rectangle(200, 240, 45, 80)) is None
    assert hindrance("box", STAND, rectangle(200, 240, 44.9, 80)) is not None


def test_wall_across_the_track_is_hit_at_its_nearest_point() -> None:
    """A wall from (300, -100) to (400, 100) is nearest at y -45: x 327.5, so the stand stops at 282.5."""
    found = hindrance("wall", STAND, ((300, -100), (400, 100)))
    assert found is not None
    assert found.from_cm == pytest.approx(282.5)
    assert found.to_cm == pytest.approx(372.5 + 45)


def test_wall_along_the_track_hinders_only_inside_it() -> None:
    """A wall along x counts when it runs through the stand, not when it runs along its side."""
    assert Hindrance("wall", 55, 345) == hindrance("wall", STAND, ((100, 0), (300, 0)))
    assert hindrance("wall", STAND, ((100, 45), (300, 45))) is None


def test_point_of_a_wall_is_hit() -> None:
    """A wall whose end reaches 5 cm into the track hinders from where the stand touches that end."""
    found = hindrance("wall", STAND, ((200, 200), (200, 40)))
    assert found == Hindrance("wall", 155, 245)


def test_round_outline_reaches_its_radius_along_the_axes() -> None:
    """A circle of 60 cm meets a straight wall across its track 60 cm before, plus what it is drawn out."""
    wall = ((300.0, -100.0), (300.0, 100.0))
    for stretch in (0.0, 20.0):
        found = hindrance("wall", round_outline(60, stretch), wall)
        assert found is not None
        assert found.from_cm == pytest.approx(300 - 60 - stretch)
    assert hindrance("side", round_outline(60), ((0, 60), (300, 60))) is None


def test_free_stretches_lie_between_hindrances() -> None:
    """What is left between overlapping hindrances, from the nearest position on."""
    found = free_stretches([Hindrance("c", 300, inf), Hindrance("a", 50, 90), Hindrance("b", 80, 120)], 0)
    assert [(0, 50), (120, 300)] == found


def test_nothing_is_free_behind_an_endless_hindrance() -> None:
    """A wall that begins before the nearest position leaves no place, and no wall leaves all."""
    assert free_stretches([Hindrance("a", -10, inf)], 0) == []
    assert [(0, inf)] == free_stretches([], 0)


def test_exact_fit_is_a_place() -> None:
    """Between two hindrances that touch there is a place for an outline that touches both."""
    assert [(0, 50), (90, 90)] == free_stretches([Hindrance("a", 50, 90), Hindrance("b", 90, inf)], 0)
