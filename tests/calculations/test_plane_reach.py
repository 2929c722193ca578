"""
Tests of the farthest treatment plane.

By hand, for a stand of 90 x 90 cm with 20 cm behind it: the plane lies 45 + 20 = 65 cm before what limits it,
and the nominal source 100 cm on the other side of the isocentre.

- vault-a, side 90: laser box to x -350, so 350 - 65 + 100 = 385; without it the wall at -365 gives 400.
- vault-a, side 270: cabinet from x 290, so 290 - 65 + 100 = 325; without it the wall at 330 gives 365.
- vault-b: walls at -253 and 305 give 288 and 340.
"""

from typing import Any

import pytest
from sample_rooms import EMPTY, IN_VAULT_A, IN_VAULT_B, VAULT_A, VAULT_B, mirrored_table, table

from readiness.calculations.plane_reach import (
    PlaneReach,
    farthest_plane,
    what_hinders_plane,
    what_would_change,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

STAND = {
    "source_axis_distance_cm": 100,
    "isocentre_height_cm": 130,
    "stand_width_cm": 90,
    "stand_depth_cm": 90,
    "stand_outline_turns": False,
    "stand_off_cm": 20,
    "access_width_cm": 80,
    "access_headroom_cm": 210,
    "patient_top_cm": 260,
}


def reach(side: int, floor: Any = VAULT_A, obstructions: Any = IN_VAULT_A, **changes: Any) -> PlaneReach:
    """Return the reach of the stand in a room, with some arguments changed."""
    arguments = {**STAND, **changes}
    return farthest_plane(side_deg=side, floor_polygon_cm=floor, obstructions=obstructions, **arguments)


@pytest.mark.parametrize(
    ("distance", "limit", "side", "floor", "obstructions"),
    [
        (385, "laser box", 90, VAULT_A, IN_VAULT_A),
        (325, "cabinet", 270, VAULT_A, IN_VAULT_A),
        (400, "wall at x -365 cm", 90, VAULT_A, EMPTY),
        (365, "wall at x 330 cm", 270, VAULT_A, EMPTY),
        (288, "wall at x -253 cm", 90, VAULT_B, IN_VAULT_B),
        (340, "wall at x 305 cm", 270, VAULT_B, IN_VAULT_B),
    ],
)
def test_reach_of_the_sample_rooms(distance: float, limit: str, side: int, floor: Any, obstructions: Any) -> None:
    """Each side of each sample room reaches as far as worked by hand, and what limits it is named."""
    found = reach(side, floor, obstructions)
    assert (distance, limit) == (pytest.approx(found.farthest_plane_distance_cm), found.limited_by)


@pytest.mark.parametrize("side", [90, 270])
def test_mirrored_room_seen_from_the_other_side_is_the_same(side: int) -> None:
    """Exchanging left and right of an asymmetric room exchanges the reach of the two sides, and nothing else."""
    corner_cut = ((-365.0, -420.0), (250.0, -420.0), (330.0, -100.0), (330.0, 270.0), (-240.0, 270.0), (-365.0, 20.0))
    mirror = tuple((-x, y) for x, y in corner_cut)
    here = reach(side, corner_cut)
    there = reach(360 - side, mirror, mirrored_table(IN_VAULT_A))
    assert here.farthest_plane_distance_cm == pytest.approx(there.farthest_plane_distance_cm)
    assert here.access_beside_stand == there.access_beside_stand
    assert here.farthest_plane_distance_cm != pytest.approx(reach(360 - side, corner_cut).farthest_plane_distance_cm)


def test_sense_of_rotation_and_closing_corner_do_not_matter() -> None:
    """A polygon given the other way round, or with its first corner repeated, is the same room."""
    assert reach(90) == reach(90, VAULT_A[::-1])
    assert reach(90) == reach(90, (*VAULT_A, VAULT_A[0]))


def test_gantry_stand_and_parked_couch_out_of_the_way_do_not_limit() -> None:
    """Taking both out of either sample room changes nothing."""
    assert reach(90, VAULT_B, IN_VAULT_B) == reach(90, VAULT_B, EMPTY)
    assert reach(270, VAULT_B, IN_VAULT_B) == reach(270, VAULT_B, EMPTY)


def test_stand_whose_outline_turns_needs_the_circle_through_its_corners() -> None:
    """A square of 90 cm that turns takes a radius of 63.64 cm instead of 45."""
    found = reach(90, obstructions=EMPTY, stand_outline_turns=True)
    assert found.farthest_plane_distance_cm == pytest.approx(365 - 20 - 63.64 + 100, abs=0.01)


def test_no_stand_off_and_a_point_of_a_stand_reach_the_wall() -> None:
    """In the limit of no stand and no stand-off the plane reaches the wall."""
    found = reach(90, obstructions=EMPTY, stand_depth_cm=1e-6, stand_off_cm=0)
    assert found.farthest_plane_distance_cm == pytest.approx(465, abs=0.001)


@pytest.mark.parametrize("change", [{"stand_off_cm": 30}, {"stand_depth_cm": 100}, {"stand_outline_turns": True}])
def test_needing_more_room_brings_the_plane_nearer(change: dict[str, Any]) -> None:
    """More stand-off, a deeper stand or a turning one cannot stand as far away."""
    nearer, far = reach(90, **change).farthest_plane_distance_cm, reach(90).farthest_plane_distance_cm
    assert nearer is not None
    assert far is not None
    assert nearer < far


def test_slanted_wall_limits_at_the_corner_that_meets_it_first() -> None:
    """
    The stand stops where its corner meets a slanted wall.

    The wall runs through x = -350 + y/2... at y 45 it stands at x -327.5, so the plane is at 327.5 - 65 = 262.5.
    """
    slanted = ((300.0, -300.0), (300.0, 200.0), (-250.0, 200.0), (-500.0, -300.0))
    found = reach(90, slanted, EMPTY)
    assert found.farthest_plane_distance_cm == pytest.approx(362.5)
    assert found.limited_by == "wall from (-250, 200) to (-500, -300) cm"


def test_what_hangs_above_the_raised_hands_does_not_limit() -> None:
    """A screen from 250 cm up limits raised hands at 260 cm and not at 250 cm."""
    screen = table(("screen", -365, -340, -60, 60, 250, 290))
    assert reach(90, obstructions=screen).limited_by == "screen"
    assert reach(90, obstructions=screen, patient_top_cm=250).limited_by == "wall at x -365 cm"


def test_staff_need_a_strip_on_one_side_only() -> None:
    """With shelves on one side of the stand staff use the other; with shelves on both the stand moves."""
    low = ("shelf one", -365, -250, -420, -60, 0, 200)
    high = ("shelf two", -365, -250, 60, 270, 0, 200)
    one_side = reach(90, obstructions=table(low))
    assert (400, "toward the gantry") == (one_side.farthest_plane_distance_cm, one_side.access_beside_stand)
    both = reach(90, obstructions=table(low, high))
    # the strip, 45 cm to either side of the plane, has to end before x -250
    assert both.farthest_plane_distance_cm == pytest.approx(250 - 45 + 100)
    assert both.limited_by == "staff access at shelf one"


def test_strip_needs_the_floor_of_the_room() -> None:
    """A corridor as wide as the stand has no strip, so that the stand stays where the room is wide."""
    corridor = (
        (300.0, -300.0), (300.0, 200.0), (-100.0, 200.0), (-100.0, 50.0), (-400.0, 50.0), (-400.0, -50.0),
        (-100.0, -50.0), (-100.0, -300.0),
    )  # fmt: skip
    found = reach(90, corridor, EMPTY)
    assert found.farthest_plane_distance_cm == pytest.approx(100 - 45 + 100)
    assert found.limited_by == "staff access at wall at y -50 cm, staff access at wall at x -100 cm"


def partition(gap_half_width: float) -> Any:
    """Return a partition from x -140 to -150 with a gap round the axis."""
    return table(
        ("partition one", -150, -140, -420, -gap_half_width, 0, 300),
        ("partition two", -150, -140, gap_half_width, 270, 0, 300),
    )


def test_stand_behind_a_partition_needs_a_way_through() -> None:
    """A gap of 80 cm lets staff of 80 cm width through, and not of 90 cm; then the stand stays in front."""
    assert reach(90, obstructions=partition(40)).farthest_plane_distance_cm == pytest.approx(400)
    found = reach(90, obstructions=partition(40), access_width_cm=90)
    assert found.farthest_plane_distance_cm == pytest.approx(140 - 65 + 100)
    assert found.limited_by == "partition one, partition two"


def test_way_starts_at_the_door_where_one_is_stated() -> None:
    """With the door behind the partition staff reach the stand there, and no stand in front of it."""
    behind, front = (-300.0, -420.0), (200.0, -420.0)
    narrow = {"obstructions": partition(30)}
    assert reach(90, **narrow, door_cm=behind).farthest_plane_distance_cm == pytest.approx(400)
    assert reach(90, **narrow, door_cm=front).farthest_plane_distance_cm == pytest.approx(175)


def test_stand_that_would_close_the_way_stays_nearer() -> None:
    """
    A stand that would close the way to its own strip stays where the way is still open.

    A divider beside the stand parts the room up to x -250. The door is in the upper half, where a post takes
    the strip; the lower half is reached only past the back of the stand, which has to leave 80 cm to the wall
    at -365: its back at -285, the plane at -240.
    """
    divided = table(("divider", -250, 330, 45, 50, 0, 200), ("post", -262, -250, 118, 125, 0, 200))
    found = reach(90, obstructions=divided, door_cm=(0.0, 270.0))
    assert found.farthest_plane_distance_cm == pytest.approx(340, abs=0.3)
    assert ("no clear way to the stand", "away from the gantry") == (found.limited_by, found.access_beside_stand)
    below = reach(90, obstructions=divided, door_cm=(0.0, -420.0))
    assert (400, "wall at x -365 cm") == (below.farthest_plane_distance_cm, below.limited_by)


def test_way_between_stand_and_partition_counts() -> None:
    """A gap that staff fit through does not help where the stand stands too close behind it."""
    close = table(
        ("partition one", -200, -190, -420, -40, 0, 300), ("partition two", -200, -190, 40, 270, 0, 300)
    )
    assert reach(90, obstructions=close).farthest_plane_distance_cm == pytest.approx(190 - 65 + 100)


def test_obstruction_on_the_level_axis_stops_the_plane_as_a_wall() -> None:
    """A pillar on the axis stops the plane; one that ends below the isocentre leaves the place behind it."""
    pillar = table(("pillar", -150, -140, -20, 20, 0, 300))
    assert reach(90, obstructions=pillar).farthest_plane_distance_cm == pytest.approx(140 - 65 + 100)
    stool = table(("stool", -150, -140, -20, 20, 0, 45))
    assert reach(90, obstructions=stool).farthest_plane_distance_cm == pytest.approx(400)


def test_room_without_a_place_says_what_is_in_the_way() -> None:
    """A room too narrow for the stand has no plane, and its walls are named."""
    narrow = ((-300.0, -40.0), (300.0, -40.0), (300.0, 40.0), (-300.0, 40.0))
    found = reach(90, narrow, EMPTY)
    assert found.farthest_plane_distance_cm is None
    assert "wall at y -40 cm" in found.limited_by


def test_chosen_plane_is_free_or_its_hindrance_is_named() -> None:
    """At 385 cm nothing hinders, at 386 the laser box does, and a plane beyond the wall meets the wall."""

    def hinders(distance: float, obstructions: Any = IN_VAULT_A) -> str:
        return what_hinders_plane(
            plane_distance_cm=distance,
            side_deg=90,
            floor_polygon_cm=VAULT_A,
            obstructions=obstructions,
            **STAND,
        )

    assert hinders(385) == ""
    assert hinders(386) == "laser box"
    assert hinders(600) == "wall at x -365 cm, laser box"
    # a cabinet half way is no hindrance at the farthest plane, but at one in between
    trolley = table(("trolley", -150, -130, -30, -10, 0, 90))
    assert hinders(400, trolley) == ""
    assert hinders(240, trolley) == "trolley"
    assert hinders(260, partition(30)) == "partition one, partition two"
    assert hinders(400, partition(30)) == "no clear way to the stand"


def test_what_would_change_names_the_one_thing_to_move() -> None:
    """In vault-a 400 cm fall short by 15 cm, and only taking the laser box away mends it."""
    changes = what_would_change(
        wanted_plane_distance_cm=400, side_deg=90, floor_polygon_cm=VAULT_A, obstructions=IN_VAULT_A, **STAND
    )
    assert changes.rows == (
        ("as it is", None, 385, 0, 15, "laser box"),
        ("without gantry stand", None, 385, 0, 15, "laser box"),
        ("without parked couch", None, 385, 0, 15, "laser box"),
        ("without laser box", None, 400, 15, 0, "wall at x -365 cm"),
        ("without cabinet", None, 385, 0, 15, "laser box"),
        ("without all of these", None, 400, 15, 0, "wall at x -365 cm"),
    )


def test_what_would_change_in_an_empty_room_is_only_the_room() -> None:
    """An empty room that is too small stays short whatever is moved."""
    changes = what_would_change(
        wanted_plane_distance_cm=400, side_deg=90, floor_polygon_cm=VAULT_B, obstructions=EMPTY, **STAND
    )
    assert changes.rows == (("as it is", None, 288, 0, 112, "wall at x -253 cm"),)


def test_what_cannot_be_moved_is_not_proposed() -> None:
    """Obstructions stated as fixed get no row; where nobody said, the row says so by a blank."""
    rows = [
        ("pillar", -365, -300, -20, 20, 0, 300, False),
        ("laser box", -300, -290, -8, 8, 122, 138, True),
        ("hook", -300, -295, -8, 8, 222, 238, None),
    ]
    stated = Table.of([*IN_VAULT_A.columns, "movable"], rows)
    changes = what_would_change(
        wanted_plane_distance_cm=400, side_deg=90, floor_polygon_cm=VAULT_A, obstructions=stated, **STAND
    )
    expected = ("as it is", "without laser box", "without hook", "without all of these")
    assert expected == changes.column("change")
    assert (None, True, None, None) == changes.column("movable")
    assert (325, 330, 325, 335) == changes.column("farthest_plane_distance_cm")


def test_two_things_in_one_place_have_to_go_together() -> None:
    """Where two obstructions limit alike, one alone gains nothing and both together do."""
    pair = table(("hook", -365, -350, -20, -10, 100, 120), ("shelf", -365, -350, 10, 20, 100, 120))
    changes = what_would_change(
        wanted_plane_distance_cm=400, side_deg=90, floor_polygon_cm=VAULT_A, obstructions=pair, **STAND
    )
    assert changes.column("gain_cm") == (0, 0, 0, 15)
    assert changes.column("limited_by")[0] == "hook, shelf"


def test_impossible_input_is_refused() -> None:
    """A floor with a fault, lengths below zero and unknown edges are refused in words."""
    with pytest.raises(ValueError, match="isocentre"):
        reach(90, ((10.0, 10.0), (300.0, 10.0), (300.0, 300.0)))
    with pytest.raises(ValueError, match="stand-off"):
        reach(90, stand_off_cm=-1)
    with pytest.raises(ValueError, match="width of the stand must be above zero"):
        reach(90, stand_width_cm=0)
    with pytest.raises(ValueError, match="90 or 270"):
        reach(0)
    with pytest.raises(OutsideValidity, match="not stated"):
        reach(90, obstructions=table(("shelf", -365, -250, None, -60, 0, 200)))
