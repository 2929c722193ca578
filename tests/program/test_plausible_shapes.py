"""Crossings and insides by hand agree with shapely."""

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely.geometry import Point, Polygon

from readiness.program.plausibility.shapes import area, extent, first_crossing, holds, touches

SQUARE = ((-1, -1), (1, -1), (1, 1), (-1, 1))
coordinates = st.integers(-6, 6)
polygons = st.lists(st.tuples(coordinates, coordinates), min_size=3, max_size=7, unique=True).map(tuple)


def test_a_square_crosses_nothing():
    """The sides of a square meet at its corners only."""
    assert first_crossing(SQUARE) is None
    assert area(SQUARE) == 4
    assert extent(SQUARE) == (-1, -1, 1, 1)


def test_a_bow_tie_crosses_itself():
    """The first side of a bow tie meets the third."""
    assert first_crossing(((-1, -1), (1, 1), (1, -1), (-1, 1))) == (1, 3)


@pytest.mark.parametrize("spike", [((0, 0), (4, 0), (2, 0), (2, 2)), ((0, 0), (0, 2), (2, 2), (2, 0), (4, 0))])
def test_a_side_that_folds_back_is_a_crossing(spike):
    """Two neighbouring sides that lie on each other are no corner."""
    assert first_crossing(spike) is not None


def test_the_border_is_not_inside():
    """A point on a side or corner is not inside."""
    assert holds(SQUARE, (0, 0))
    assert not holds(SQUARE, (1, 0))
    assert not holds(SQUARE, (1, 1))
    assert not holds(SQUARE, (2, 0))


def test_shapes_beside_each_other_do_not_touch():
    """A box against the outside of a wall is outside; one that reaches through it is not."""
    assert not touches(SQUARE, ((1, -1), (2, -1), (2, 1), (1, 1)))
    assert touches(SQUARE, ((0.5, -3), (0.6, -3), (0.6, 3), (0.5, 3)))
    assert touches(SQUARE, SQUARE)


@settings(deadline=None)
@given(polygons)
def test_crossings_agree_with_shapely(polygon):
    """A polygon has no crossing exactly when shapely calls it valid, apart from areas of zero."""
    if area(polygon) > 0:
        assert (first_crossing(polygon) is None) == Polygon(polygon).is_valid


@settings(deadline=None)
@given(polygons, coordinates, coordinates)
def test_insides_agree_with_shapely(polygon, x, y):
    """A point is inside a floor exactly when shapely says that the floor contains it."""
    if area(polygon) > 0 and first_crossing(polygon) is None:
        assert holds(polygon, (x, y)) == Polygon(polygon).contains(Point(x, y))
