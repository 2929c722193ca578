"""Tests of heights and head clearances."""

import pytest

from readiness.calculations.room_reach import (
    ceiling_clearance_cm,
    head_clearance,
    mid_height_off_axis_cm,
    raised_hands_height_cm,
    stand_height_for_axis_cm,
    step_caution,
)


def test_one_stand_serves_small_and_tall_patients() -> None:
    """On a stand of 42.5 cm under an axis at 130 cm, 155 cm is 10 cm low and 195 cm is 10 cm high."""
    offsets = [
        mid_height_off_axis_cm(isocentre_height_cm=130, patient_height_cm=height, stand_height_cm=42.5)
        for height in (155, 175, 195)
    ]
    assert offsets == [-10, 0, 10]


def test_stand_that_follows_brings_mid_height_to_the_axis() -> None:
    """On the stand that follows from a height the middle of the patient is on the axis."""
    stand = stand_height_for_axis_cm(isocentre_height_cm=127, patient_height_cm=171)
    assert mid_height_off_axis_cm(isocentre_height_cm=127, patient_height_cm=171, stand_height_cm=stand) == 0


def test_taller_patients_need_lower_stands() -> None:
    """A patient taller than twice the axis height would have to stand below the floor."""
    assert stand_height_for_axis_cm(isocentre_height_cm=100, patient_height_cm=210) == -5


@pytest.mark.parametrize(
    ("clearance", "ceiling", "stand", "height"),
    [(16.25, 300, 40, 195), (41.25, 300, 40, 175), (-3.25, 255, 39.5, 175), (-18.25, 255, 29.5, 195)],
)
def test_raised_hands_under_the_ceiling(clearance: float, ceiling: float, stand: float, height: float) -> None:
    """In vault-a hands at 1.25 heights clear the ceiling of 300 cm, in vault-b they do not clear 255 cm."""
    hands = raised_hands_height_cm(patient_height_cm=height, stand_height_cm=stand, coverage_ratio=1.25)
    found = ceiling_clearance_cm(ceiling_height_cm=ceiling, raised_hands_height_cm=hands)
    assert clearance == pytest.approx(found)


def test_higher_stand_needs_more_steps_and_says_so() -> None:
    """One step needs no caution; 40 cm is two steps of 20 cm; 41 cm is three."""
    assert step_caution(stand_height_cm=20, step_height_cm=20) == ""
    assert step_caution(stand_height_cm=0, step_height_cm=20) == ""
    assert "40 cm above the floor" in step_caution(stand_height_cm=40, step_height_cm=20)
    assert "2 steps with rails" in step_caution(stand_height_cm=40, step_height_cm=20)
    assert "3 steps with rails" in step_caution(stand_height_cm=41, step_height_cm=20)
    assert "5 cm below the floor" in step_caution(stand_height_cm=-5, step_height_cm=20)


def test_head_at_tilt_by_hand() -> None:
    """
    The far end of a head of radius 40 cm, 140 cm from the isocentre, at 16 degrees.

    140 x 0.275637 + 40 x 0.961262 = 38.589 + 38.450 = 77.040 below or above the isocentre.
    """
    found = head_clearance(
        tilt_deg=16, head_radius_cm=40, head_end_cm=140, isocentre_height_cm=130, ceiling_height_cm=300
    )
    assert found.head_above_floor_cm == pytest.approx(130 - 77.040, abs=0.001)
    assert found.head_below_ceiling_cm == pytest.approx(170 - 77.040, abs=0.001)


def test_level_head_needs_its_radius() -> None:
    """Without tilt only the radius counts."""
    found = head_clearance(
        tilt_deg=0, head_radius_cm=40, head_end_cm=140, isocentre_height_cm=130, ceiling_height_cm=255
    )
    assert (90, 85) == (found.head_above_floor_cm, found.head_below_ceiling_cm)


def test_head_that_would_hit_the_floor_is_returned_as_negative() -> None:
    """More tilt brings the head nearer to the floor until it would hit it; that is a result."""
    clearances = [
        head_clearance(
            tilt_deg=tilt, head_radius_cm=45, head_end_cm=150, isocentre_height_cm=110, ceiling_height_cm=300
        ).head_above_floor_cm
        for tilt in (10, 20, 35)
    ]
    assert clearances == sorted(clearances, reverse=True)
    assert clearances[-1] < 0 < clearances[0]


def test_impossible_input_is_refused() -> None:
    """Lengths of nothing, hands lower than the crown and a vertical tilt are refused."""
    with pytest.raises(ValueError, match="height of the patient must be above zero"):
        stand_height_for_axis_cm(isocentre_height_cm=130, patient_height_cm=0)
    with pytest.raises(ValueError, match="not lower than the crown"):
        raised_hands_height_cm(patient_height_cm=175, stand_height_cm=40, coverage_ratio=0.9)
    with pytest.raises(ValueError, match="height of a step"):
        step_caution(stand_height_cm=40, step_height_cm=0)
    with pytest.raises(ValueError, match="from 0 to below 90"):
        head_clearance(
            tilt_deg=90, head_radius_cm=40, head_end_cm=140, isocentre_height_cm=130, ceiling_height_cm=300
        )
