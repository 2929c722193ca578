"""Where the stand fits, and what hinders a plane that was chosen."""

import pytest

from tests.assessment.values.room_program import LASER, PILLAR, causes, department, got, thing, value

FARTHEST = "arrangement.farthest_plane_distance_cm"


def test_the_stand_before_the_bare_wall() -> None:
    """Half a stand of 90 cm and 20 cm behind it leave 300 of 365 cm beyond the isocentre: 400 cm."""
    assert 400.0 == value(department(), FARTHEST)
    assert "wall at x -365 cm" == value(department(), "arrangement.plane_limited_by")


def test_sides_are_mirrored() -> None:
    """At gantry 90 the plane lies at negative x; at 270 the nearer east wall, at 330 cm, counts."""
    assert 365.0 == value(department(), FARTHEST, side=270)
    assert "wall at x 330 cm" == value(department(), "arrangement.plane_limited_by", side=270)


def test_a_box_on_the_wall_that_can_be_moved() -> None:
    """A laser box of 15 cm on the axis costs 15 cm, until it is moved away; on the other side it costs nothing."""
    of = department(thing("laser", **LASER))
    assert 385.0 == value(of, FARTHEST)
    assert "Laser box" == value(of, "arrangement.plane_limited_by")
    assert 400.0 == value(of, "arrangement.farthest_when_cleared_cm")
    assert "Laser box" == value(of, "arrangement.plane_hindered_by")
    assert 365.0 == value(of, FARTHEST, side=270)


def test_a_chosen_plane_with_room_around_it() -> None:
    """Nothing hinders a plane at 380 cm before the laser box."""
    of = department(thing("laser", **LASER), plan={"plane_distance_cm": 380.0})
    assert "nothing" == value(of, "arrangement.plane_hindered_by")


def test_what_is_not_stated_to_be_movable_stays() -> None:
    """A box of which nobody said that it can be moved is not moved away."""
    of = department(thing("laser", **{**LASER, "movable": None}))
    assert 385.0 == value(of, "arrangement.farthest_when_cleared_cm")


def test_a_stand_that_fits_nowhere() -> None:
    """A pillar before the isocentre leaves no place: 0 cm when cleared, and no farthest plane at all."""
    of = department(thing("pillar", **{**PILLAR, "x_min_cm": -30.0, "x_max_cm": -5.0, "y_min_cm": -20.0}))
    assert 0.0 == value(of, "arrangement.farthest_when_cleared_cm")
    assert [FARTHEST] == causes(of, FARTHEST)


def test_a_stand_whose_outline_turns_takes_more_room() -> None:
    """The circle through the corners of a square of 90 cm has a radius of 63.6 cm."""
    of = department(stand={"outline_turns": True})
    assert pytest.approx(100 + 365 - 20 - 45 * 2**0.5, abs=0.06) == value(of, FARTHEST)


def test_the_smallest_distance_that_reaches_crown_and_soles() -> None:
    """With axes at 25 and edges at 36.3 degrees a crown 100 cm above the axis is reached at 203 cm."""
    assert pytest.approx(203.2, abs=0.3) == value(department(), "arrangement.smallest_possible_distance_cm")
    wider = department(beam={"opening_cm": 50.0})
    assert value(wider, "arrangement.smallest_possible_distance_cm") < 203.0


def test_the_distance_studied_is_the_chosen_one_else_the_farthest() -> None:
    """What was chosen is stated; the farthest stands in as a prediction."""
    chosen, farthest = (
        got(department(), "arrangement.study_distance_cm"),
        got(department(without=("plan",)), "arrangement.study_distance_cm"),
    )
    assert (400.0, "stated") == (chosen.value, chosen.basis)
    assert (400.0, "predicted") == (farthest.value, farthest.basis)


def test_what_would_have_to_change() -> None:
    """The table names the room as it is and the room without the laser box."""
    table = value(department(thing("laser", **LASER)), "arrangement.room_changes")
    found = {row["change"]: row["shortfall_cm"] for row in table.records()}
    assert {"as it is": 15.0, "without Laser box": 0.0} == found


def test_an_unknown_list_of_obstructions_is_asked_for() -> None:
    """Nobody knows how far the plane can be before the obstructions are listed, even as none."""
    of = department()
    bare = type(of)(of.items, of.known_lists - {("obstruction", "room")}, ())
    assert ["obstruction"] == causes(bare, FARTHEST)


def test_the_door_against_the_narrower_side() -> None:
    """A stand of 90 by 120 cm goes through a door of 130 cm with 40 to spare."""
    assert 40.0 == value(department(stand={"depth_cm": 120.0}), "arrangement.door_to_spare_cm")


def test_the_field_is_wider_farther_away() -> None:
    """An opening of 40 cm at 100 cm is 160 cm wide at 400."""
    assert 160.0 == value(department(), "arrangement.lit_width_cm")
