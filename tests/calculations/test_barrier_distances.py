"""Distances to a barrier depend on the beam side, and the head is a metre nearer to the wall behind it."""

import pytest

from readiness.calculations.barrier_distances import barrier_distances
from readiness.errors import OutsideValidity
from readiness.quantities import Table

LAYERS = Table.of(("material", "thickness_cm", "density_g_per_cm3"), [("concrete", 215.0, 2.35)])
CASE = {
    "surface": "x-min-wall",
    "layers": LAYERS,
    "inner_face_cm": -365.0,
    "distance_m": None,
    "isocentre_distance_m": None,
    "leakage_distance_m": None,
    "isocentre_height_cm": 130.0,
    "side_deg": 90.0,
    "tilt_deg": 16.0,
    "source_axis_distance_cm": 100.0,
    "plane_distance_cm": 400.0,
}


def distances(**changes):
    return barrier_distances(**{**CASE, **changes})


def test_wall_that_the_beam_faces():
    """365 + 215 + 30 cm: source and head are 7.1 m away, the patient 3.1 m, straight ahead."""
    found = distances()
    assert found.faces_beam
    assert (7.1, 7.1, 7.1, 6.1) == pytest.approx(
        (
            found.xray_distance_m,
            found.head_distance_m,
            found.primary_distance_m,
            found.isocentre_distance_m,
        )
    )
    assert (3.1, 0.0) == pytest.approx((found.scatter_distance_m, found.scatter_angle_deg))


def test_wall_behind_the_head():
    """The head is a metre nearer than the isocentre, the patient farther, and no x rays go there."""
    found = distances(side_deg=270.0)
    assert not found.faces_beam
    assert found.xray_distance_m is None
    assert (5.1, 9.1, 180.0, 7.1) == pytest.approx(
        (found.head_distance_m, found.scatter_distance_m, found.scatter_angle_deg, found.primary_distance_m)
    )


def test_stated_distances_give_the_same():
    """From the source or from the isocentre, what is stated and what follows from the inner face agree."""
    by_face = distances()
    for stated in ({"distance_m": 7.1}, {"isocentre_distance_m": 6.1}):
        found = distances(inner_face_cm=None, **stated)
        assert found.head_distance_m == pytest.approx(by_face.head_distance_m)
        assert found.isocentre_distance_m == pytest.approx(by_face.isocentre_distance_m)
        assert found.scatter_distance_m == pytest.approx(by_face.scatter_distance_m)


@pytest.mark.parametrize(
    ("surface", "face", "iso", "head"),
    [
        ("y-min-wall", -420.0, 6.65, 6.65),
        ("y-max-wall", 270.0, 5.15, 5.15),
        ("ceiling", 300.0, 4.15, 3.874),
        ("floor", 0.0, 3.75, 3.474),
    ],
)
def test_barriers_beside_the_beam(surface, face, iso, head):
    """Across the beam the nearest point counts; above and below the tilted head is nearer by SAD sin t."""
    found = distances(surface=surface, inner_face_cm=face)
    assert (iso, iso, 90.0) == pytest.approx(
        (found.isocentre_distance_m, found.scatter_distance_m, found.scatter_angle_deg)
    )
    assert found.head_distance_m == pytest.approx(head, abs=0.001)
    assert found.xray_distance_m is None


def test_mirror():
    """Both sides of a mirrored room give the same distances."""
    mirrored = {"surface": "x-max-wall", "inner_face_cm": 365.0}
    assert distances() == distances(**mirrored, side_deg=270.0)
    assert distances(side_deg=270.0) == distances(**mirrored)


def test_stated_leakage_distance():
    """A distance from the head that the department states counts beside the head, in line it follows."""
    beside = distances(surface="y-min-wall", inner_face_cm=-420.0, leakage_distance_m=5.68)
    assert 5.68 == beside.head_distance_m
    assert 7.1 == pytest.approx(distances(leakage_distance_m=5.0).head_distance_m)


@pytest.mark.parametrize("surface", ["door", "maze", "penetration"])
def test_doors(surface):
    """Doors, mazes and penetrations are for the survey."""
    with pytest.raises(OutsideValidity, match="survey in the mode"):
        distances(surface=surface)


@pytest.mark.parametrize(
    "changes",
    [
        {"inner_face_cm": None},
        {"layers": Table.of(LAYERS.columns, ())},
        {"surface": "ceiling", "isocentre_height_cm": None},
        {"surface": "y-min-wall", "inner_face_cm": None, "distance_m": 6.0},
    ],
)
def test_nothing_stated(changes):
    """Without a distance and without what it follows from, nothing is computed."""
    with pytest.raises(OutsideValidity, match="no distance to the barrier is stated"):
        distances(**changes)


@pytest.mark.parametrize(
    ("name", "value"),
    [
        ("surface", "north"),
        ("side_deg", 45.0),
        ("tilt_deg", 90.0),
        ("isocentre_distance_m", 0.0),
        ("isocentre_distance_m", 2.0),
        ("plane_distance_cm", float("nan")),
    ],
)
def test_impossible(name, value):
    """Unknown words, distances of zero and a wall before the patient are refused."""
    with pytest.raises(ValueError, match=r"a barrier is|90 or 270|tilt|above zero|before"):
        distances(**{name: value})


def test_vertical_beam_faces_the_floor_with_the_ceiling_opposite():
    """Isocentre at 130 cm, 215 + 30 cm: floor 3.75 m and source 4.75 m; the head is a metre nearer to the ceiling."""
    floor = distances(surface="floor", inner_face_cm=0.0, side_deg=0.0, tilt_deg=0.0, plane_distance_cm=200.0)
    assert floor.faces_beam
    assert (4.75, 4.75, 2.75, 0.0) == pytest.approx(
        (floor.xray_distance_m, floor.head_distance_m, floor.scatter_distance_m, floor.scatter_angle_deg)
    )
    ceiling = distances(surface="ceiling", inner_face_cm=300.0, side_deg=0.0, tilt_deg=0.0)
    assert ceiling.xray_distance_m is None
    assert (1.7 + 2.45 - 1.0, 180.0) == pytest.approx((ceiling.head_distance_m, ceiling.scatter_angle_deg))


def test_walls_are_beside_a_vertical_beam():
    """The head stands above the isocentre; a distance stated for gantry 90 or 270 does not count."""
    wall = distances(side_deg=0.0, tilt_deg=0.0, leakage_distance_m=9.0)
    assert not wall.faces_beam
    assert (6.1, 90.0) == pytest.approx((wall.head_distance_m, wall.scatter_angle_deg))
