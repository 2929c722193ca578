"""The predicted field over a lying patient: evenness across, speed and dose in either direction."""

from dataclasses import replace
from datetime import date

import pytest
from scipy.integrate import simpson

from readiness.assessment.graph import Graph
from readiness.assessment.records import Ref, Value
from readiness.assessment.values import ALL
from readiness.program.items import Item
from readiness.quantities import Table
from tests.assessment.small import graph, item, program

COUCH = Ref("arrangement", "lying")


def lying(*more: Item, **plan: float) -> Graph:
    """Return a couch 170 cm below the source of a 6 MeV beam."""
    whole = {"room": "a", "machine": "l", "beam": "e6", "degrader": "s", "couch": "c", "plan": "p"}
    of = program(
        item("room", "a", None, isocentre_height_cm=130.0, site_pressure_kpa=98.5, temperature_celsius=21.0,
             floor_polygon_cm=((-400.0, -400.0), (400.0, -400.0), (400.0, 400.0), (-400.0, 400.0)), ceiling_height_cm=300.0),
        item("machine", "l", {"room": "a"}, source_axis_distance_cm=100.0),
        item("beam", "e6", {"machine": "l", "room": "a"}, r50_cm=2.4, rp_cm=2.95, opening_cm=40.0, collimator_deg=0.0, foil_spread=0.2,
             reference_output_cgy_per_mu=1.0, rate_mu_per_min=2000.0),
        item("degrader", "s", None, material="pmma", thickness_cm=0.6),
        item("couch", "c", None, surface_height_cm=60.0, length_cm=200.0, width_cm=60.0, travel_cm=420.0, travels_along="y"),
        item("plan", "p", whole, technique="moving-couch", degrader_gap_cm=30.0, **plan),
        tallest_patient_cm=180.0,
    )  # fmt: skip
    made = (item("arrangement", "lying", whole, technique="moving-couch", side_deg=0), *more)
    empty_room = replace(of, known_lists=of.known_lists | {("obstruction", "a")})
    return graph(empty_room, *ALL, made=made)


def number(of: Graph, name: str) -> float:
    """Return a number of the couch."""
    got = of.get(f"arrangement.{name}", COUCH)
    assert isinstance(got, Value), got
    assert got.basis != "measured"
    return float(got.value)


def test_dose_is_passes_times_the_integral_over_the_speed() -> None:
    """Four passes at 2 cm/s, the integral by Simpson's rule of scipy."""
    of = lying(couch_speed_cm_per_s=2.0, lying_passes=4)
    table = of.get("arrangement.couch_rate_profile", COUCH)
    assert isinstance(table, Value)
    integral = simpson(table.value.column("dose_rate_cgy_per_min"), x=table.value.column("position_cm"))
    assert number(of, "predicted_incidence_dose_cgy") == pytest.approx(4 * integral / 60 / 2.0, rel=2e-3)


def test_the_speed_for_a_dose_gives_that_dose() -> None:
    """Speed from dose and dose from speed agree; more dose is slower."""
    wanted = lying(incidence_dose_wanted_cgy=50.0, lying_passes=4)
    speed = number(wanted, "predicted_couch_speed_cm_per_s")
    assert number(lying(couch_speed_cm_per_s=speed, lying_passes=4), "predicted_incidence_dose_cgy") == pytest.approx(50.0, rel=1e-4)
    more = lying(incidence_dose_wanted_cgy=60.0, lying_passes=4)
    assert number(more, "predicted_couch_speed_cm_per_s") < speed


def test_a_short_distance_is_uneven_across() -> None:
    """A field 68 cm wide cannot be even over 60 cm; both metrics say so, the deviation more."""
    of = lying()
    assert number(of, "couch_across_half_range_percent") > 15
    assert number(of, "couch_across_deviation_percent") > number(of, "couch_across_half_range_percent")


def test_a_measured_pass_replaces_the_predicted_one() -> None:
    """5 % lower at 30 cm than in the middle is a largest deviation of 5 %, whatever was predicted."""
    table = Table.of(["across_cm", "relative_dose"], [(float(at), 1 - 0.05 * abs(at) / 30) for at in range(-40, 41, 5)])
    owners = {"room": "a", "machine": "l", "beam": "e6", "degrader": "s", "couch": "c"}
    profile = item("measurement", "across", owners, **owners, kind="couch-profile", date=date(2026, 11, 20), table=table,
                   normalisation="beam-axis", smoothing="none")  # fmt: skip
    got = lying(profile).get("arrangement.couch_across_percent", COUCH)
    assert isinstance(got, Value)
    assert ("measured", pytest.approx(5.0)) == (got.basis, got.value)
    before = lying().get("arrangement.couch_across_percent", COUCH)
    assert isinstance(before, Value)
    assert "predicted" == before.basis
    assert before.value == number(lying(), "couch_across_deviation_percent")
