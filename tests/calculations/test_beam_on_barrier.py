"""The tilted fields are traced to what they hit, axes and edges, from both sides."""

from math import cos, radians, sqrt, tan

import pytest

from readiness.calculations.beam_on_barrier import (
    beam_spots,
    nearest_spot_distance_m,
    primary_belt,
    vertical_spots,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

ROOM = ((-365.0, -420.0), (330.0, -420.0), (330.0, 270.0), (-365.0, 270.0))
WALL = Table.of(("material", "thickness_cm", "density_g_per_cm3"), [("concrete", 100.0, 2.35)])
CASE = {
    "side_deg": 90.0,
    "tilt_deg": 16.0,
    "source_axis_distance_cm": 100.0,
    "opening_cm": 40.0,
    "collimator_angle_deg": 0.0,
    "floor_polygon_cm": ROOM,
    "isocentre_height_cm": 130.0,
    "ceiling_height_cm": 300.0,
}


def spots(**changes):
    return beam_spots(**{**CASE, **changes})


def row(found, field, ray):
    return next(each for each in found.spots.records() if each["field"] == field and each["ray"] == ray)


def test_axes_meet_the_wall_where_geometry_says():
    """At gantry 106 and 74 the axes meet the wall 365 cm away at +-365 tan 16 from the isocentre's height."""
    found = spots()
    for field, sign, gantry in (("head", 1, 106.0), ("feet", -1, 74.0)):
        axis = row(found, field, "axis")
        assert gantry == axis["gantry_deg"]
        assert axis["height_above_floor_cm"] == pytest.approx(130 + sign * 365 * tan(radians(16)))
        assert axis["path_cm"] == pytest.approx(100 + 365 / cos(radians(16)))
        assert axis["obliquity_deg"] == pytest.approx(16.0)
    assert "x-min-wall" == found.axes_on
    assert found.axes_on_one_wall
    assert 16.0 == pytest.approx(found.largest_axis_obliquity_deg)


def test_edges_reach_floor_and_ceiling():
    """The edges at 16 + 11.3 degrees reach ceiling and floor, which axes alone would not show."""
    found = spots()
    assert "ceiling" == row(found, "head", "upper edge")["surface"]
    assert "floor" == row(found, "feet", "lower edge")["surface"]
    assert found.reaches_ceiling
    assert found.reaches_floor
    level = spots(tilt_deg=0.0)
    assert (False, False) == (level.reaches_ceiling, level.reaches_floor)


def test_width_of_the_field_at_the_wall():
    """Side edges of a 40 cm opening are 0.4 times the way along the axis apart."""
    assert 0.4 * (100 + 365 / cos(radians(16))) == pytest.approx(spots().widest_cm)


def test_turned_collimator_reaches_to_its_corners():
    """Turned by 45 degrees the field is wider by the square root of two."""
    turned = spots(collimator_angle_deg=45.0, tilt_deg=0.0)
    assert sqrt(2) == pytest.approx(turned.widest_cm / spots(tilt_deg=0.0).widest_cm)


def test_mirror():
    """Side 270 in the mirrored room gives mirrored spots."""
    mirrored = tuple((-x, y) for x, y in reversed(ROOM))
    here, there = spots(), spots(side_deg=270.0, floor_polygon_cm=mirrored)
    assert "x-max-wall" == there.axes_on
    for one, other in zip(here.spots.records(), there.spots.records(), strict=True):
        assert (one["field"], one["ray"]) == (other["field"], other["ray"])
        assert one["surface"] == other["surface"].replace("max", "min")
        assert one["x_cm"] == pytest.approx(-other["x_cm"])
        assert one["y_cm"] == pytest.approx(other["y_cm"], abs=1e-9)
        assert one["height_above_floor_cm"] == pytest.approx(other["height_above_floor_cm"])


def test_a_nearer_wall_takes_the_beam():
    """In a room with a pillar before the wall, the beam stops at the pillar."""
    pillar = (
        (-365.0, -420.0),
        (330.0, -420.0),
        (330.0, 270.0),
        (-365.0, 270.0),
        (-365.0, 60.0),
        (-320.0, 60.0),
        (-320.0, -60.0),
        (-365.0, -60.0),
    )
    assert -320.0 == pytest.approx(row(spots(floor_polygon_cm=pillar), "head", "axis")["x_cm"])


def test_nearest_spot():
    """Through the ceiling the shortest way of an edge counts, through a wall that no ray meets there is none."""
    found = spots()
    path = row(found, "head", "upper edge")["path_cm"]
    there = nearest_spot_distance_m(spots=found.spots, surface="ceiling", layers=WALL)
    assert (path + 130.0) / 100.0 == pytest.approx(there)
    assert nearest_spot_distance_m(spots=found.spots, surface="x-max-wall", layers=WALL) is None


def test_belt():
    """40 cm at 5.8 m have a diagonal of 328 cm and need 388 cm; a belt of 350 lacks 38."""
    belt = primary_belt(opening_cm=40.0, distance_cm=580.0, belt_width_cm=350.0)
    assert belt.beam_diagonal_cm == pytest.approx(328.1, abs=0.1)
    assert belt.needed_width_cm == pytest.approx(388.1, abs=0.1)
    assert belt.spare_cm == pytest.approx(-38.1, abs=0.1)
    assert primary_belt(opening_cm=40.0, distance_cm=580.0, belt_width_cm=None).spare_cm is None


def test_room_without_the_source():
    """A room in which the source would stand outside is refused."""
    with pytest.raises(OutsideValidity, match="source stands outside"):
        spots(floor_polygon_cm=((-365.0, -420.0), (50.0, -420.0), (50.0, 270.0), (-365.0, 270.0)))


def test_impossible():
    """Lengths of zero, another side and a tilt of a right angle are refused."""
    with pytest.raises(ValueError, match="opening"):
        spots(opening_cm=0.0)
    with pytest.raises(ValueError, match="90 or 270"):
        spots(side_deg=180.0)
    with pytest.raises(ValueError, match="tilt"):
        spots(tilt_deg=90.0)
    with pytest.raises(ValueError, match="above zero"):
        primary_belt(opening_cm=40.0, distance_cm=0.0, belt_width_cm=None)
    with pytest.raises(ValueError, match="width"):
        primary_belt(opening_cm=40.0, distance_cm=100.0, belt_width_cm=0.0)
    with pytest.raises(OutsideValidity, match="no layers"):
        nearest_spot_distance_m(spots=spots().spots, surface="x-min-wall", layers=Table.of(WALL.columns, ()))


def test_vertical_field_meets_the_floor():
    """From 100 cm above an isocentre at 130 cm: axis 230 cm long, edges 46 cm out to all four sides."""
    found = vertical_spots(**{key: value for key, value in CASE.items() if key not in ("side_deg", "tilt_deg")})
    assert "floor" == found.all_on
    assert 92.0 == pytest.approx(found.widest_cm)
    axis = row(found, "down", "axis")
    assert (0.0, 0.0, 0.0, 230.0, 0.0) == pytest.approx(
        (axis["x_cm"], axis["y_cm"], axis["height_above_floor_cm"], axis["path_cm"], axis["obliquity_deg"])
    )
    assert 46.0 == pytest.approx(row(found, "down", "edge toward +x")["x_cm"])
    assert -46.0 == pytest.approx(row(found, "down", "edge toward -x")["x_cm"])
