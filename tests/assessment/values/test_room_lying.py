"""The technique that carries a lying patient through a vertical field."""

from tests.assessment.values.room_program import causes, department, thing, value

LYING = {"side": 0, "technique": "moving-couch"}
PARKED = {
    "x_min_cm": -50.0, "x_max_cm": 50.0, "y_min_cm": -260.0, "y_max_cm": -200.0, "bottom_cm": 0.0, "top_cm": 70.0,
}  # fmt: skip


def test_distances_under_the_source() -> None:
    """Source to floor 230 cm, to a couch at 40 cm 190 cm, where an opening of 40 cm is 76 cm long."""
    assert 230.0 == value(department(), "arrangement.source_to_floor_cm", **LYING)
    assert 190.0 == value(department(), "arrangement.source_to_couch_cm", **LYING)
    assert 76.0 == value(department(), "arrangement.field_length_at_couch_cm", **LYING)


def test_the_run_that_the_couch_needs_and_has() -> None:
    """A couch of 200 cm and a field of 76 cm need 238 cm on each side and a travel of 276; 270 cm are clear."""
    assert 238.0 == value(department(), "arrangement.couch_needed_run_cm", **LYING)
    assert 32.0 == value(department(), "arrangement.couch_run_to_spare_cm", **LYING)
    assert 276.0 == value(department(), "arrangement.couch_travel_needed_cm", **LYING)
    assert 24.0 == value(department(), "arrangement.couch_travel_to_spare_cm", **LYING)


def test_the_other_axis_of_the_room() -> None:
    """Across the gantry's axis the nearer wall is 330 cm away."""
    assert 92.0 == value(department(couch={"travels_along": "x"}), "arrangement.couch_run_to_spare_cm", **LYING)


def test_what_can_be_moved_out_of_the_way() -> None:
    """A parked couch 200 cm away is in the way until it is moved."""
    of = department(thing("parked", **PARKED, movable=True))
    assert -38.0 == value(of, "arrangement.couch_run_to_spare_cm", **LYING)
    assert 32.0 == value(of, "arrangement.couch_run_when_cleared_cm", **LYING)
    assert "parked" == value(of, "arrangement.couch_run_limited_by", **LYING)


def test_the_vertical_beam() -> None:
    """A whole turn holds gantry 0, a mode for the horizontal does not."""
    assert value(department(), "arrangement.vertical_reachable", **LYING) is True
    assert value(department(), "arrangement.mode_allows_vertical", **LYING) is False


def test_a_standing_value_has_no_answer_for_a_couch() -> None:
    """A lying arrangement has no stand, and that is what a standing value says."""
    assert ["standing patient"] == causes(department(), "arrangement.ceiling_clearance_cm", **LYING)


def test_electrons_reach_a_nearer_patient_more_easily() -> None:
    """The couch is nearer than a standing plane, so that less of the range is taken."""
    lying = value(department(), "arrangement.lying_range_taken_ratio", **LYING)
    assert 0.0 < lying < value(department(), "arrangement.range_taken_ratio")
