"""What the beam meets, and which gantry angles it takes."""

import pytest

from tests.assessment.values.room_program import PILLAR, causes, department, got, thing, value


def test_a_clear_way() -> None:
    """In a bare room nothing is cut."""
    assert 0.0 == value(department(), "arrangement.beam_path_cut_percent")
    assert "nothing" == value(department(), "arrangement.beam_path_cut_by")
    assert 0.0 == value(department(), "arrangement.fixed_cut_percent")


def test_a_pillar_in_the_way() -> None:
    """A pillar beside the axis hides a part of the patient at gantry 90, and nothing at 270."""
    of = department(thing("pillar", **PILLAR, movable=False))
    cut = value(of, "arrangement.beam_path_cut_percent")
    assert 10.0 < cut < 60.0
    assert cut == value(of, "arrangement.fixed_cut_percent")
    assert "pillar" == value(of, "arrangement.beam_path_cut_by")
    assert 0.0 == value(of, "arrangement.beam_path_cut_percent", side=270)


def test_what_can_be_moved_cuts_only_until_it_is_moved() -> None:
    """A movable pillar cuts the beam in the room as it is and not in the cleared one."""
    of = department(thing("pillar", **PILLAR, movable=True))
    assert value(of, "arrangement.beam_path_cut_percent") > 0.0
    assert 0.0 == value(of, "arrangement.fixed_cut_percent")


def test_whether_it_can_be_moved_must_be_said_where_it_cuts() -> None:
    """A pillar of which nobody said whether it can be moved leaves the room undecided, one that cuts nothing does not."""
    undecided = got(department(thing("pillar", **PILLAR)), "arrangement.fixed_cut_percent")
    assert "State whether these can be moved away: pillar." in undecided.causes[0].words
    aside = thing("pillar", **{**PILLAR, "y_min_cm": -400.0, "y_max_cm": -380.0})
    assert 0.0 == value(department(aside), "arrangement.fixed_cut_percent")


def test_gantry_angles_of_both_fields() -> None:
    """At side 90 the field toward the head comes from 106, toward the feet from 74; at 270 from 254 and 286."""
    names = ("arrangement.gantry_toward_head_deg", "arrangement.gantry_toward_feet_deg")
    assert (106.0, 74.0) == tuple(value(department(), name) for name in names)
    assert (254.0, 286.0) == tuple(value(department(), name, side=270) for name in names)


def test_ranges_of_machine_and_mode() -> None:
    """A mode from 70 to 110 holds a tilt of 16 and not one of 21; a machine that turns wholly holds both."""
    steep = department(plan={"tilt_deg": 21.0})
    assert value(department(), "arrangement.mode_allows_angles") is True
    assert value(steep, "arrangement.mode_allows_angles") is False
    assert value(steep, "arrangement.gantry_angles_reachable") is True
    assert ["machine.gantry_range_deg"] == causes(
        department(machine={"gantry_range_deg": None}), "arrangement.gantry_angles_reachable"
    )


def test_a_room_is_looked_at_with_a_usual_tilt_before_one_is_chosen() -> None:
    """The tilt is the chosen one, stated; without a choice a usual one, as a prediction."""
    chosen, usual = got(department(), "arrangement.room_tilt_deg"), got(department(without=("plan",)), "arrangement.room_tilt_deg")
    assert (16.0, "stated") == (chosen.value, chosen.basis)
    assert (17.5, "predicted") == (usual.value, usual.basis)


def test_where_the_edges_of_the_fields_go() -> None:
    """The axis aimed at the head meets the wall 465 cm away 104.7 cm above the isocentre."""
    table = value(department(), "arrangement.field_edges")
    axis = next(row for row in table.records() if row["field"] == "toward head" and row["ray"] == "axis")
    assert "wall" == axis["surface"]
    assert -365.0 == axis["x_cm"]
    assert pytest.approx(130 + 104.66, abs=0.01) == axis["height_above_floor_cm"]


def test_electrons_that_do_not_arrive() -> None:
    """A sheet of 0.6 cm takes a third of a 6 MeV beam's range, one of 3 cm more than all of it."""
    assert pytest.approx(0.34, abs=0.03) == value(department(), "arrangement.range_taken_ratio")
    assert value(department(degrader={"thickness_cm": 3.0}), "arrangement.range_taken_ratio") > 1.0
