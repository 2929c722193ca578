"""The study of one arrangement and the choice between several."""

from typing import Any

import pytest
from beam_setups import LENGTHS, LIMITS, common_setup

from readiness.calculations.beam_study import ArrangementStudy, arrangement_study
from readiness.errors import OutsideValidity


def study(**changes: Any) -> ArrangementStudy:
    """Return the study of a room that reaches from 300 to 445 cm."""
    given: dict[str, Any] = {
        "setup": common_setup(energy_at_source_mev=6.3, degrader_thickness_cm=0.6, degrader_gap_cm=45.0, pressure_kpa=98.5),
        "plane_distance_cm": 400.0,
        "nearest_reachable_cm": 300.0,
        "farthest_reachable_cm": 445.0,
        "mid_height_cm": 0.0,
        "mu_share_upper": 0.5,
        "metric": "half-range",
        **LENGTHS,
        **LIMITS,
        **changes,
    }
    return arrangement_study(**given)


USUAL = study()


def test_room_that_reaches_far_enough_gets_the_nearest_distance_that_keeps_both() -> None:
    """The horizontal profile fails at 400 cm and is kept a little farther, which the room allows."""
    assert (USUAL.vertical_within, USUAL.horizontal_within) == (True, False)
    assert 400 < USUAL.recommended_distance_cm == USUAL.distance_for_both_limits_cm <= 445
    assert "which the room allows" in USUAL.remedy


def test_short_room_gets_its_farthest_distance_and_hears_how_much_is_missing() -> None:
    """A room that ends at 353 cm is told how much farther the plane would have to stand."""
    short = study(plane_distance_cm=353.0, farthest_reachable_cm=353.0)
    assert short.recommended_distance_cm == 353
    needed = short.distance_for_both_limits_cm or 0
    assert f"the room ends {needed - 353:.0f} cm short" in short.remedy


def test_best_tilt_lies_in_its_band() -> None:
    """The band surrounds the best tilt."""
    assert (USUAL.lowest_passing_tilt_deg or 99) < USUAL.best_tilt_deg < (USUAL.highest_passing_tilt_deg or 0)


def test_tables_hold_the_chosen_distance() -> None:
    """A distance that is no multiple of the step is studied itself."""
    odd = study(plane_distance_cm=397.3)
    assert 397.3 in odd.by_distance.column("distance_cm")
    row = next(row for row in odd.by_distance.records() if row["distance_cm"] == 397.3)
    assert row["best_tilt_deg"] == odd.best_tilt_deg


def test_looser_limits_widen_the_band() -> None:
    """Allowing more departure allows more angles."""
    loose = study(vertical_limit_percent=12.0)
    assert (loose.highest_passing_tilt_deg or 0) > (USUAL.highest_passing_tilt_deg or 99)
    assert (loose.lowest_passing_tilt_deg or 99) < (USUAL.lowest_passing_tilt_deg or 0)


def test_distances_outside_a_study_are_refused() -> None:
    """Two metres is no distance for a standing patient, and an empty reach is impossible."""
    with pytest.raises(OutsideValidity, match="250 to 600 cm, not 200"):
        study(plane_distance_cm=200.0)
    with pytest.raises(ValueError, match="beyond the farthest"):
        study(nearest_reachable_cm=450.0)
