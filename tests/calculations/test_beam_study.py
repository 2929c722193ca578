"""The study of one arrangement and the choice between several."""

from typing import Any

import pytest
from beam_setups import LENGTHS, LIMITS, common_setup

from readiness.calculations.arrangement_choice import Candidate, recommended_arrangement
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


def candidate(name: str, **changes: Any) -> Candidate:
    """Return an arrangement that keeps all limits."""
    given = {"forbidden_by": "", "misses": (), "band_width_deg": 3.0, "output_cgy_per_mu": 0.019, "change": ""}
    return Candidate(arrangement=name, **{**given, **changes})


def test_forbidden_arrangement_is_never_recommended() -> None:
    """Whatever it predicts, an arrangement that cannot stand in the room comes last and says why."""
    found = recommended_arrangement(
        candidates=[candidate("a", forbidden_by="the plane ends at 290 cm", band_width_deg=9.0), candidate("b", misses=("horizontal uniformity",))]
    )
    assert (found.recommended, found.runner_up) == ("b", "")
    assert "cannot be used: the plane ends at 290 cm" in found.because


def test_fewer_missed_limits_decide_before_band_and_output() -> None:
    """A wide band does not make up for a missed limit."""
    found = recommended_arrangement(candidates=[candidate("wide", misses=("dose at 4 mm",), band_width_deg=6.0), candidate("narrow")])
    assert (found.recommended, found.runner_up) == ("narrow", "wide")
    assert found.because == "narrow is predicted to keep all limits; fewer than the next (dose at 4 mm)."


def test_wider_band_then_output_then_name_decide() -> None:
    """What is equal in limits is told apart by band, then output, then name, and the reason is given."""
    band = recommended_arrangement(candidates=[candidate("a"), candidate("b", band_width_deg=4.0)])
    assert (band.recommended, "band of tilts is wider, 4.0 against 3.0" in band.because) == ("b", True)
    output = recommended_arrangement(candidates=[candidate("a"), candidate("b", output_cgy_per_mu=0.03)])
    assert (output.recommended, "output is higher" in output.because) == ("b", True)
    equal = recommended_arrangement(candidates=[candidate("b"), candidate("a", band_width_deg=3.1)])
    assert (equal.recommended, "ordered by name" in equal.because) == ("a", True)


def test_order_of_description_does_not_matter() -> None:
    """The same arrangements in another order give the same recommendation."""
    some = [candidate("a", misses=("x",)), candidate("b"), candidate("c", forbidden_by="no reach"), candidate("d", output_cgy_per_mu=None)]
    assert recommended_arrangement(candidates=some) == recommended_arrangement(candidates=some[::-1])


def test_nothing_possible_is_said_with_every_reason() -> None:
    """If every arrangement is forbidden the reasons are listed; if there is none, that is said."""
    none = recommended_arrangement(candidates=[candidate("a", forbidden_by="ceiling 230 cm"), candidate("b", forbidden_by="no reach")])
    assert none.recommended == ""
    assert none.because == "No arrangement is possible. a: ceiling 230 cm; b: no reach."
    assert recommended_arrangement(candidates=[]).because == "No arrangement has been described."


def test_arrangement_named_twice_is_refused() -> None:
    """Two arrangements of one name cannot be told apart."""
    with pytest.raises(ValueError, match="stands twice"):
        recommended_arrangement(candidates=[candidate("a"), candidate("a")])
