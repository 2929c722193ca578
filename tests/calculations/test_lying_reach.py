"""Tests of the technique for a lying patient."""

from typing import Any

import pytest
from sample_rooms import EMPTY, IN_VAULT_A, VAULT_A, table

from readiness.calculations.lying_reach import LyingReach, lying_reach

COUCH = {
    "source_axis_distance_cm": 100,
    "isocentre_height_cm": 130,
    "opening_cm": 40,
    "couch_height_cm": 30,
    "couch_length_cm": 200,
    "couch_width_cm": 70,
    "patient_thickness_cm": 30,
    "travel_along_y": False,
    "floor_polygon_cm": VAULT_A,
    "obstructions": IN_VAULT_A,
}


def reach(**changes: Any) -> LyingReach:
    """Return the reach in vault-a with some arguments changed."""
    arguments: dict[str, Any] = {**COUCH, **changes}
    return lying_reach(**arguments)


def test_distances_by_hand() -> None:
    """230 cm to the floor, 200 cm to a couch at 30 cm, where 40 cm at 100 cm have become 80; 200 + 40 needed."""
    found = reach()
    assert (230, 200) == (found.source_to_floor_cm, found.source_to_couch_cm)
    assert (80, 240) == (found.field_length_at_couch_cm, found.needed_run_cm)


def test_shorter_run_and_its_limit() -> None:
    """Along x the cabinet at 290 cm ends the shorter run; without it the wall at 330 does."""
    assert (290, "cabinet") == (reach().clear_run_cm, reach().limited_by)
    empty = reach(obstructions=EMPTY)
    assert (330, "wall at x 330 cm") == (empty.clear_run_cm, empty.limited_by)


def test_along_y_the_parked_couch_and_then_the_gantry_stand_are_in_the_way() -> None:
    """Along y the parked couch begins 100 cm from the axis; without it the gantry stand at 130 cm."""
    assert (100, "parked couch") == (reach(travel_along_y=True).clear_run_cm, reach(travel_along_y=True).limited_by)
    stand = reach(travel_along_y=True, obstructions=table(("gantry stand", -110, 110, 130, 270, 0, 300)))
    assert (130, "gantry stand") == (stand.clear_run_cm, stand.limited_by)


def test_what_hangs_above_the_patient_does_not_hinder() -> None:
    """A shelf from 60 cm up hinders a patient 61 cm above the floor and not one of 60 cm."""
    shelf = table(("shelf", 200, 240, -60, 60, 60, 80))
    assert reach(obstructions=shelf).limited_by == "wall at x 330 cm"
    assert reach(obstructions=shelf, patient_thickness_cm=31).limited_by == "shelf"


def test_something_on_the_axis_leaves_no_run() -> None:
    """A thing under the beam leaves no run at all."""
    assert reach(obstructions=table(("box", -10, 10, -10, 10, 0, 40))).clear_run_cm == 0


def test_lower_couch_has_a_longer_field_and_needs_a_longer_run() -> None:
    """The lower the couch, the longer the field on it and the run it needs."""
    low, high = reach(couch_height_cm=10), reach(couch_height_cm=60)
    assert low.field_length_at_couch_cm > high.field_length_at_couch_cm
    assert low.needed_run_cm > high.needed_run_cm


def test_wider_couch_meets_more() -> None:
    """A wider couch meets what a narrower one passes."""
    post = table(("post", 100, 110, 40, 50, 0, 200))
    assert reach(obstructions=post).clear_run_cm == 330
    assert reach(obstructions=post, couch_width_cm=90).clear_run_cm == 100


def test_impossible_input_is_refused() -> None:
    """A couch above the source and lengths of nothing are refused."""
    with pytest.raises(ValueError, match="between the floor and the source"):
        reach(couch_height_cm=230)
    with pytest.raises(ValueError, match="width of the couch must be above zero"):
        reach(couch_width_cm=0)
    with pytest.raises(ValueError, match="isocentre"):
        reach(floor_polygon_cm=((10, 10), (300, 10), (300, 300)))
