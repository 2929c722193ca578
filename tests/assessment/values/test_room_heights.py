"""Heights of stand, patient, ceiling and treatment head."""

import pytest

from tests.assessment.values.room_program import causes, department, value


def test_raised_hands_and_ceiling_by_hand() -> None:
    """On a stand of 40 cm the hands of 190 cm reach 277.5 cm: 22.5 cm below a ceiling of 300, too high for 255."""
    assert 277.5 == value(department(), "arrangement.raised_hands_height_cm")
    assert 22.5 == value(department(), "arrangement.ceiling_clearance_cm")
    low = department(room={"ceiling_height_cm": 255.0})
    assert -22.5 == value(low, "arrangement.ceiling_clearance_cm")
    assert 172.0 == value(low, "arrangement.tallest_under_ceiling_cm")


def test_a_lower_stand_leaves_more_under_the_ceiling() -> None:
    """Each centimetre of stand is one of clearance."""
    assert 32.5 == value(department(stand={"height_cm": 30.0}), "arrangement.ceiling_clearance_cm")


def test_middle_of_the_patient_on_the_axis() -> None:
    """With patients of 150 to 190 cm a stand of 45 cm is wanted; at 40 cm the shortest is 15 cm low."""
    assert 45.0 == value(department(), "arrangement.stand_height_wanted_cm")
    assert 15.0 == value(department(), "arrangement.mid_height_off_axis_cm")
    assert 10.0 == value(department(stand={"height_cm": 45.0}), "arrangement.mid_height_off_axis_cm")


@pytest.mark.parametrize(("height", "steps"), [(0.0, 0), (20.0, 1), (40.0, 2), (41.0, 3)])
def test_steps_no_higher_than_a_stair(height: float, steps: int) -> None:
    """A stand takes a step for every 20 cm that it is begun."""
    assert steps == value(department(stand={"height_cm": height}), "stand.steps_needed")


def test_the_head_between_floor_and_ceiling() -> None:
    """152 sin 16 + 42 cos 16 = 82.27 cm below or above an isocentre at 130 cm."""
    assert pytest.approx(130 - 82.27, abs=0.01) == value(department(), "arrangement.head_above_floor_cm")
    assert pytest.approx(170 - 82.27, abs=0.01) == value(department(), "arrangement.head_below_ceiling_cm")


def test_a_missing_height_is_named() -> None:
    """Without a ceiling or a tallest patient there is no clearance, and that is what is asked for."""
    assert ["room.ceiling_height_cm"] == causes(
        department(room={"ceiling_height_cm": None}), "arrangement.ceiling_clearance_cm"
    )
    assert ["program.tallest_patient_cm"] == causes(
        department(program={"tallest_patient_cm": None}), "arrangement.ceiling_clearance_cm"
    )
