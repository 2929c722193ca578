"""Studies of an arrangement: distance, tilt, uncertainty, and what to measure."""

from typing import Any

import pytest

from readiness.assessment.records import Gone, Value
from readiness.program.items import Program
from readiness.quantities import Table
from tests.assessment.values.beam_program import (
    arrangement,
    department,
    finding,
    got,
    graph_of,
    measured,
    value,
    words,
)

SPREAD = {"foil_spread": 0.2}


def table(of: Program, name: str) -> Table:
    """Return a value that holds a table."""
    found = value(of, name).value
    assert isinstance(found, Table)
    return found


def single_profile(of: Program) -> Any:
    """Return a measured profile of one field that fits what the model expects of this department."""
    rows = [
        (float(row["height_cm"] or 0), None, float(row["expected"] or 0), None)
        for row in table(of, "arrangement.expected_single_field").records()
    ]
    columns = ("height_cm", "across_cm", "relative_dose", "relative_dose_sd")
    return measured("single-profile", columns, rows, tilt_deg=0.0, normalisation="beam-axis")


def test_the_best_tilt_falls_with_distance() -> None:
    """Farther away the same offset along the height needs a smaller angle."""
    band = table(department(), "arrangement.tilt_band")
    best = [float(row["best_tilt_deg"] or 0) for row in band.records() if 300 <= float(row["distance_cm"] or 0) <= 500]
    assert best[0] > best[-1]


def test_the_map_covers_distances_and_whole_degrees() -> None:
    """The map is a grid of moderate size; somewhere far away both limits are kept, nearby nowhere."""
    rows = list(table(department(), "arrangement.uniformity_map").records())
    assert 300 < len(rows) < 1000
    assert all(float(row["tilt_deg"] or 0) == int(row["tilt_deg"] or 0) for row in rows)
    assert not any(row["within_both"] for row in rows if float(row["distance_cm"] or 0) <= 400)
    assert any(row["within_both"] for row in rows)


def test_the_sentence_says_that_distance_cures_the_horizontal() -> None:
    """Where the room's reach is unknown the sentence gives the distance and says so."""
    needed = value(department(), "arrangement.distance_for_both_limits_cm").value
    assert needed > 450
    assert f"at {needed:.0f} cm" in value(department(), "arrangement.study_reason").value
    assert "not known" in value(department(), "arrangement.study_reason").value


def test_a_looser_metric_needs_less_distance() -> None:
    """The half-range keeps its limit nearer than the stricter metric."""
    strict = value(department(), "arrangement.distance_for_both_limits_cm").value
    loose = value(department(program={"uniformity_metric": "half-range"}), "arrangement.distance_for_both_limits_cm").value
    assert loose < strict


def test_the_chosen_tilt_is_compared_with_the_best() -> None:
    """A tilt of 12 degrees lies farther than one degree from the best; 16 does not."""
    for plan, expected in (({"tilt_deg": 12.0}, "not met"), ({}, "met")):
        found = finding(department(plan=plan, beam=SPREAD), "tilt-found-by-measurement")
        assert ("not assessed", expected) == (found.outcome, found.expected)


def test_without_a_plan_the_best_tilt_is_studied() -> None:
    """No tilt chosen: the field is predicted at the best one, whose deviation is smaller than at 12 degrees."""
    free = department(plan={"tilt_deg": None})
    assert value(free, "arrangement.study_tilt_deg").value == value(free, "arrangement.predicted_best_tilt_deg").value
    steep = value(department(plan={"tilt_deg": 12.0}), "arrangement.vertical_deviation_percent").value
    assert value(free, "arrangement.vertical_deviation_percent").value < steep


def test_an_unfitted_foil_spread_means_two_degrees_and_no_probability() -> None:
    """Before the foil spread is fitted the band is two degrees either way, and nobody says how likely it passes."""
    of = department()
    best = value(of, "arrangement.predicted_best_tilt_deg").value
    assert value(of, "arrangement.likely_lowest_tilt_deg").value <= best - 1.9
    assert value(of, "arrangement.likely_highest_tilt_deg").value >= best + 1.9
    assert isinstance(got(of, "arrangement.passing_probability_ratio"), Gone)
    assert "single-field profile" in value(of, "arrangement.helpful_measurement").value


def test_a_fitted_foil_spread_narrows_the_band() -> None:
    """With a measured profile the band is narrower, a probability is given, and another measurement helps most."""
    fitted = department(single_profile(department()))
    assert "measured" == value(fitted, "beam.foil_spread").basis
    wide = value(department(), "arrangement.likely_highest_tilt_deg").value
    assert value(fitted, "arrangement.likely_highest_tilt_deg").value < wide
    assert 0 < value(fitted, "arrangement.passing_probability_ratio").value < 1
    assert "single-field profile" not in value(fitted, "arrangement.helpful_measurement").value


def test_the_predicted_profile_has_a_band_where_it_is_judged() -> None:
    """Low and high stand around the prediction within 80 cm and are blank beyond."""
    rows = {row["height_cm"]: row for row in table(department(), "arrangement.profile_height").records()}
    within, beyond = rows[60.0], rows[120.0]
    assert float(within["low"] or 0) < float(within["predicted"] or 0) < float(within["high"] or 0)
    assert (None, None) == (beyond["low"], beyond["high"])


def test_the_sweep_begins_at_the_predicted_best_and_goes_outward() -> None:
    """The first tilt of the planned sweep is the whole degree nearest to the best, the next one below it."""
    rows = list(table(department(), "arrangement.expected_sweep").records())
    tilts = list(dict.fromkeys(float(row["tilt_deg"] or 0) for row in rows))
    best = value(department(), "arrangement.predicted_best_tilt_deg").value
    assert abs(tilts[0] - best) <= 0.5
    assert [tilts[0] - 1, tilts[0] + 1] == tilts[1:3]
    assert 8 == len(table(department(), "arrangement.commissioning_plan").rows)


def test_soles_and_hands_of_a_tall_patient_get_less() -> None:
    """A patient of 150 cm is covered better than one of 190 cm, whose raised hands leave the field."""
    tall, short = department(), department(program={"tallest_patient_cm": 150.0})
    name = "arrangement.lowest_dose_to_patient_percent"
    assert value(tall, name).value < value(short, name).value
    assert value(tall, "arrangement.dose_at_hands_percent").value < value(tall, "arrangement.dose_at_soles_percent").value


@pytest.mark.parametrize(("distance", "clear"), [(400.0, -13.98), (700.0, 72.05)])
def test_axes_clear_head_and_feet_only_far_away(distance: float, clear: float) -> None:
    """
    At 16 degrees the axes are (D - 100) tan 16 from 130 cm: 86.02 cm at 400, 172.05 cm at 700.

    Head of 190 cm on 40 cm is at 230, soles at 40: at 400 cm min(216.02 - 230, 40 - 43.98) = -13.98;
    at 700 cm min(302.05 - 230, 40 + 42.05) = 72.05.
    """
    of = department(plan={"plane_distance_cm": distance})
    assert pytest.approx(clear, abs=0.02) == value(of, "arrangement.axes_clear_by_cm").value
    assert ("met" if clear > 0 else "not met") == finding(of, "axes-clear-of-trunk").outcome


def test_both_sides_of_a_room_are_predicted_alike() -> None:
    """At the same distance the field toward either side is the same."""
    graph = graph_of(department(beam=SPREAD))
    sides = [graph.get("arrangement.vertical_half_range_percent", arrangement("thin", side)) for side in (90, 270)]
    assert all(isinstance(each, Value) for each in sides)
    assert sides[0].value == sides[1].value  # type: ignore[union-attr]


def test_a_degrader_that_stops_the_beam_says_so() -> None:
    """Three centimetres of acrylic leave nothing of 6 MeV: a cause, not a number."""
    of = department(thin={"thickness_cm": 4.0})
    assert "stops the beam" in words(of, "arrangement.vertical_half_range_percent")
    assert "stops the beam" in words(of, "arrangement.energy_at_plane_mev")


def test_thinner_air_moves_the_best_tilt() -> None:
    """At altitude the field is narrower, and the best tilt smaller."""
    high = department(room={"site_pressure_kpa": 80.0})
    assert (
        value(high, "arrangement.predicted_best_tilt_deg").value
        < value(department(), "arrangement.predicted_best_tilt_deg").value
    )


def test_the_descent_of_a_prediction_names_what_decides_the_field() -> None:
    """Records that hold the set-up are never shown; in their place stand energy, foil spread, degrader and air."""
    names = {each.name for each in value(department(), "arrangement.predicted_vertical_half_range_percent").inputs}
    assert {
        "beam.energy_at_source_mev",
        "beam.foil_spread",
        "degrader.thickness_cm",
        "room.site_pressure_kpa",
        "arrangement.study_distance_cm",
        "arrangement.study_tilt_deg",
    } <= names
    assert "arrangement.field_setup" not in names


@pytest.mark.parametrize(("stand_cm", "expected"), [(40.0, "met"), (75.0, "not met"), (5.0, "not met")])
def test_a_stand_that_lifts_patients_off_the_axis_is_named(stand_cm: float, expected: str) -> None:
    """
    Patients of 150 to 190 cm on 40 cm have their middles at most 15 cm from an axis at 130 cm.

    On 75 cm it is 75 + 95 - 130 = 40 cm, on 5 cm 130 - 5 - 75 = 50 cm.
    """
    of = department(program={"shortest_patient_cm": 150.0}, stand={"height_cm": stand_cm})
    assert expected == finding(of, "patients-level-with-axis").outcome


def test_two_unequal_tilts_are_never_worse_than_two_equal_ones() -> None:
    """About the same mid-height, off the axis, the evenest pair is at least as even as the evenest equal pair."""
    of = department(program={"shortest_patient_cm": 150.0}, stand={"height_cm": 60.0})
    unequal, equal = (value(of, f"arrangement.{name}_vertical_percent").value for name in ("unequal", "equal"))
    assert unequal < equal
    head, feet = (value(of, f"arrangement.unequal_tilt_toward_{end}_deg").value for end in ("head", "feet"))
    assert head > value(of, "arrangement.equal_tilt_deg").value > feet
