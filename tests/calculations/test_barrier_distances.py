"""Distances to a barrier depend on the beam side, and the head is a metre nearer to the wall behind it."""

from dataclasses import replace

import pytest

from readiness.calculations.barrier_distances import barrier_distances

CASE = {
    "toward": "90",
    "isocentre_distance_m": 6.1,
    "side_deg": 90.0,
    "tilt_deg": 16.0,
    "source_axis_distance_cm": 100.0,
    "plane_distance_cm": 400.0,
    "stated_head_distance_m": None,
}


def distances(**changes):
    return barrier_distances(**{**CASE, **changes})


def test_wall_that_the_beam_faces():
    """Source and head are 7.1 m away, the patient 3.1 m, straight ahead."""
    found = distances()
    assert found.faces_beam
    assert (7.1, 7.1, 7.1) == pytest.approx(
        (found.xray_distance_m, found.head_distance_m, found.primary_distance_m)
    )
    assert (3.1, 0.0) == pytest.approx((found.scatter_distance_m, found.scatter_angle_deg))


def test_wall_behind_the_head():
    """The head is a metre nearer than the isocentre, the patient farther, and no x rays go there."""
    found = distances(side_deg=270.0)
    assert not found.faces_beam
    assert found.xray_distance_m is None
    assert (5.1, 9.1, 180.0) == pytest.approx(
        (found.head_distance_m, found.scatter_distance_m, found.scatter_angle_deg)
    )


@pytest.mark.parametrize(("toward", "head"), [("across", 6.1), ("above", 5.824), ("below", 5.824)])
def test_barriers_beside_the_beam(toward, head):
    """Across the beam the nearest point counts; above and below the tilted head is nearer by SAD sin t."""
    found = distances(toward=toward)
    assert found.head_distance_m == pytest.approx(head, abs=0.001)
    assert (6.1, 90.0, None) == (found.scatter_distance_m, found.scatter_angle_deg, found.xray_distance_m)


def test_mirror():
    """Both sides of a mirrored room give the same distances."""
    assert distances() == distances(toward="270", side_deg=270.0)
    assert distances(side_deg=270.0) == distances(toward="270")


def test_measured_head_distance_is_taken():
    """A distance from the head that the department measured replaces ours and nothing else."""
    assert replace(distances(toward="across"), head_distance_m=5.68) == distances(
        toward="across", stated_head_distance_m=5.68
    )


@pytest.mark.parametrize(
    ("name", "value"),
    [
        ("toward", "north"),
        ("side_deg", 0.0),
        ("tilt_deg", 90.0),
        ("isocentre_distance_m", 0.0),
        ("isocentre_distance_m", 2.0),
        ("plane_distance_cm", float("nan")),
    ],
)
def test_impossible(name, value):
    """Unknown words, distances of zero and a wall before the patient are refused."""
    with pytest.raises(ValueError, match=r"stands toward|90 or 270|tilt|above zero|before"):
        distances(**{name: value})
