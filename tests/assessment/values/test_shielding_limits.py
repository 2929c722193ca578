"""Hour, year, dose rate, commissioning week and remedies of the sample's walls; the measured x-ray workload."""

from dataclasses import replace
from datetime import date
from math import exp
from typing import Any

import pytest

from readiness.assessment.candidates import arrangements, exposures, measurements
from readiness.assessment.catalogue import catalogue
from readiness.assessment.graph import Graph
from readiness.assessment.records import Finding, Gone, Ref, Value
from readiness.assessment.values.shielding_remedies import hour_would_do, would_do
from readiness.assessment.values.shielding_workload import xrays
from readiness.calculations.dose_limits import AnyHourDose
from readiness.errors import OutsideValidity, Place
from readiness.program.items import Item, Program, Stated
from readiness.program.reading import read_folder
from readiness.quantities import Table
from tests.assessment.values.test_shielding import CHOSEN, SAMPLE, number, outcome

DAY = date(2026, 12, 1)
ARRANGEMENT = Ref("arrangement", CHOSEN)


def graph(program: Program) -> Graph:
    """Return the values of a program."""
    made = arrangements(program)
    return Graph(program, (*made, *exposures(program, made), *measurements(program)), catalogue(), DAY, {})


def changed(kind: str, item_id: str, **fields: object) -> Program:
    """Return the sample with fields of one item changed; None takes a field away."""
    program = read_folder(SAMPLE)
    items = []
    for item in program.items:
        if (item.kind, item.id) == (kind, item_id):
            stated = {**item.fields, **{name: Stated(value, item.place) for name, value in fields.items()}}  # type: ignore[arg-type]
            item = replace(item, fields={name: each for name, each in stated.items() if each.value is not None})
        items.append(item)
    return replace(program, items=tuple(items))


def protected(**fields: object) -> Graph:
    """Return the sample's values with other figures of radiation protection."""
    return graph(changed("protection", "protection", **fields))


def finding(found: Graph, rule: str, barrier: str = "a-west") -> Finding:
    """Return what a rule says of a barrier."""
    return outcome(found, rule, barrier)


def test_a_commissioning_week_without_its_mu_is_not_assessed() -> None:
    """The sample does not state them; the gap names the field."""
    found = finding(graph(read_folder(SAMPLE)), "commissioning-week")
    assert "not assessed" == found.outcome
    assert "protection.commissioning_mu_per_week_mu" in {cause.what for cause in found.causes}


def test_a_commissioning_week_with_the_mu_of_a_week_gives_the_dose_of_that_week() -> None:
    """The addition scales with MU: those of the busiest week, from the leakage workload, give its own dose."""
    found = graph(read_folder(SAMPLE))
    workload = found.get("arrangement.leakage_workload_gy_m2_per_week", ARRANGEMENT)
    assert isinstance(workload, Value)
    same = protected(commissioning_mu_per_week_mu=float(workload.value) * 100)
    week = number(same, "exposure.weekly_dose_usv_per_week", "a-west")
    assert week == pytest.approx(number(same, "exposure.commissioning_week_usv_per_week", "a-west"), rel=1e-4)
    none = protected(commissioning_mu_per_week_mu=0.0)
    before = number(none, "exposure.before_usv_per_week", "a-west")
    assert before == pytest.approx(number(none, "exposure.commissioning_week_usv_per_week", "a-west"))


def test_the_dose_rate_counts_only_where_a_jurisdiction_limits_it() -> None:
    """Not limited: not applicable. Limited without a number: not assessed. Limited: judged."""
    assert "not applicable" == finding(graph(read_folder(SAMPLE)), "instantaneous-rate").outcome
    unknown = finding(protected(instantaneous_rate_limited=True), "instantaneous-rate")
    assert "not assessed" == unknown.outcome
    assert "protection.instantaneous_limit_usv_per_h" in {cause.what for cause in unknown.causes}
    low = protected(instantaneous_rate_limited=True, instantaneous_limit_usv_per_h=0.1)
    assert "not met" == finding(low, "instantaneous-rate").outcome
    silent = finding(protected(instantaneous_rate_limited=None), "instantaneous-rate")
    assert "not assessed" == silent.outcome


def test_the_dose_rate_follows_from_the_week() -> None:
    """Leakage alone reaches the corridor: dose of the week without occupancy over the minutes of beam."""
    found = graph(read_folder(SAMPLE))
    table = found.get("exposure.contributions", Ref("exposure", f"a-east from {CHOSEN}"))
    assert isinstance(table, Value)
    (leakage,) = [row for row in table.value.records() if row["contribution"] == "added leakage"]
    workload = found.get("arrangement.leakage_workload_gy_m2_per_week", ARRANGEMENT)
    assert isinstance(workload, Value)
    hours = float(workload.value) * 100 / 2000 / 60
    expected = leakage["dose_usv_per_week"] / 0.2 / hours
    assert expected == pytest.approx(number(found, "exposure.instantaneous_usv_per_h", "a-east"), rel=1e-3)


def test_a_year_is_fifty_busiest_weeks() -> None:
    """An upper bound in millisievert, judged in unrestricted areas only."""
    found = graph(read_folder(SAMPLE))
    week = number(found, "exposure.weekly_dose_usv_per_week", "a-west")
    assert 50 * week / 1000 == pytest.approx(number(found, "exposure.annual_dose_msv_per_year", "a-west"), rel=1e-4)
    assert "not applicable" == finding(found, "annual-dose", "a-control").outcome


def test_remedies_of_a_thin_wall_name_material_and_shorter_lists() -> None:
    """Thirty centimetres are too little: layers to add, and fewer cycles a week than the busiest week has."""
    layers = Table(("material", "thickness_cm", "density_g_per_cm3"), (("concrete", 60.0, 2.35),))
    existing = Table(("energy_mv", "kind", "workload_gy_per_week", "use_factor", "distance_m"), ((6.0, "leakage", 1.0, None, None),))
    thin = graph(changed("barrier", "a-control", layers=layers, existing_workload=existing))
    table = thin.get("arrangement.barrier_remedies", ARRANGEMENT)
    assert isinstance(table, Value)
    (row,) = [each for each in table.value.records() if each["place"] == "Control room of vault A"]
    assert row["extra_tvl"] > 0
    assert row["or_concrete_cm"] > row["or_steel_cm"] > row["or_lead_cm"] > 0
    assert 0 <= row["or_cycles_at_most_per_week"] < 4


def thin_control(cm: float) -> Graph:
    """Return the sample with a control wall of so much concrete and next to no photon work."""
    layers = Table(("material", "thickness_cm", "density_g_per_cm3"), (("concrete", cm, 2.35),))
    columns = ("energy_mv", "kind", "workload_gy_per_week", "use_factor", "distance_m")
    existing = Table(columns, ((6.0, "leakage", 1.0, None, None),))
    return graph(changed("barrier", "a-control", layers=layers, existing_workload=existing))


def test_a_failing_wall_says_with_numbers_what_would_do_instead() -> None:
    """Message: material, cycles and patients, and the arrangement elsewhere that keeps every goal."""
    found = finding(thin_control(60.0), "weekly-goal", "a-control")
    assert "not met" == found.outcome
    table = thin_control(60.0).get("arrangement.barrier_remedies", ARRANGEMENT)
    assert isinstance(table, Value)
    (row,) = [each for each in table.value.records() if each["place"] == "Control room of vault A"]
    assert f"{row['or_concrete_cm']:.3g} cm of concrete outside" in found.message
    assert f"at most {row['or_cycles_at_most_per_week']} cycles a week" in found.message
    assert "side-270" not in found.message  # said by title, not by id


def test_a_wall_that_keeps_its_goal_needs_nothing() -> None:
    """What would do is said only where something is lacking."""
    found = graph(read_folder(SAMPLE))
    got = found.get("exposure.would_do", Ref("exposure", f"a-control from {CHOSEN}"))
    assert isinstance(got, Value)
    assert "Nothing is needed: the goal of the week is kept." == got.value
    assert "cm of concrete" not in finding(found, "weekly-goal", "a-control").message


def test_what_would_do_elsewhere_names_the_best_arrangement_that_keeps_every_goal() -> None:
    """The first of the others that stays at or below its goals; none that exceeds one."""
    columns = ("arrangement", "worst_place", "part_of_goal_ratio")
    extra = Table(("extra_tvl", "concrete_cm", "steel_cm", "lead_cm"), ((1.0, 33.0, 10.0, 5.7),))
    asked: dict[str, Any] = {
        "extra": extra, "before_usv_per_week": 2.0, "goal_msv_per_week": 0.02, "cycles_per_week": 3, "patients": 1,
        "arrangement": "here",
    }  # fmt: skip
    both = Table(columns, (("here", "wall", 0.1), ("there", "store", 0.4), ("far", "roof", 2.0)))
    assert "there takes at most 0.4 of a goal, at store" in would_do(**asked, others=both)
    none = Table(columns, (("here", "wall", 0.1), ("far", "roof", 2.0)))
    assert "No other arrangement" in would_do(**asked, others=none)
    assert "not even one cycle" in would_do(**{**asked, "cycles_per_week": 0, "patients": 0}, others=None)
    assert "already is above the goal" in would_do(**{**asked, "before_usv_per_week": 21.0}, others=None)


def test_an_hour_that_gives_too_much_says_how_many_sessions_it_may_hold() -> None:
    """Two sessions of 15 beside 2 of photon work exceed 20; one does not."""
    hour = AnyHourDose(32.0, 2.0, 15.0, 30.0, 2.0, "sessions of the added program")
    assert "It would take 0.204 tenth-value layers outside, or at most 1 sessions in 60 minutes." == hour_would_do(
        hour=hour, limit_usv=20.0
    )


def test_a_survey_that_is_missing_is_one_thing_to_do() -> None:
    """Every place waits for the same survey of the room."""
    found = graph(read_folder(SAMPLE))
    causes = {
        cause
        for place in ("a-west", "a-east", "a-control")
        for cause in finding(found, "survey-within-goal", place).causes
        if cause.kind == "measurement"
    }
    assert {Ref("room", "vault-a")} == {cause.item for cause in causes}


def test_another_side_is_compared() -> None:
    """Every arrangement with a workload stands with its worst place, the best first."""
    found = graph(read_folder(SAMPLE)).get("program.barriers_by_arrangement", Ref("program", "program"))
    assert isinstance(found, Value)
    ratios = found.value.column("part_of_goal_ratio")
    assert sorted(ratios) == list(ratios)
    assert any("side 270" in title for title in found.value.column("arrangement"))


def xray_readings(convention: str | None = None, **given: float | None) -> Graph:
    """Return the sample's values with x rays measured on and off the tilted axis, 5 cm deep (invented)."""
    program = read_folder(SAMPLE)
    single = next(item for item in program.items if item.kind == "measurement" and item.get("kind") == "single-profile")
    columns = ("fields", "depth_mm", "height_cm", "across_cm", "xray_percent", "xray_cgy_per_mu")
    rows = (
        ("one-dual", 50.0, 0.0, None, 0.9, given["mid"]),
        ("one-dual", 50.0, 85.0, None, 0.9, given["axis"]),
    )
    stated = {
        "kind": "xray-component", "degrader": "sheet-06", "side_deg": 90, "distance_cm": 400.0, "gap_cm": 45.0,
        "tilt_deg": 16.0, "technique": "six-position", "date": date(2026, 11, 20), "instrument": "cylindrical-chamber",
        "table": Table(columns, rows),
    }  # fmt: skip
    place = Place("measurements/x.csv", 1, 1)
    if convention is not None:
        stated["mu_convention"] = convention
    fields = {name: Stated(value, place) for name, value in stated.items()}  # type: ignore[arg-type]
    owners = {**single.owners, "degrader": "sheet-06", "instrument": "cylindrical-chamber"}
    return graph(replace(program, items=(*program.items, Item("measurement", "x", fields, owners, place))))


def test_the_measured_dose_on_the_axis_comes_before_the_fraction() -> None:
    """W_x = MU of the week x dose per MU on the axis x water in front x distance squared, by hand."""
    found = xray_readings(mid=1.5e-4, axis=2.0e-4)
    got = found.get("arrangement.xray_workload_gy_m2_per_week", ARRANGEMENT)
    leakage = found.get("arrangement.leakage_workload_gy_m2_per_week", ARRANGEMENT)
    assert isinstance(got, Value), got
    assert isinstance(leakage, Value)
    week_mu = float(leakage.value) * 100
    expected = week_mu * 2.0e-4 / 100 * exp(0.058 * 5) * 16
    assert expected == pytest.approx(float(got.value), rel=1e-3)


def test_mu_set_on_each_beam_are_counted_together() -> None:
    """The same dose for MU set on each of both beams is half as much per MU of both."""
    total, each = (
        xray_readings(mid=1.5e-4, axis=2.0e-4, convention=word).get("arrangement.xray_axis_cgy_per_mu", ARRANGEMENT)
        for word in ("total-of-both-beams", "on-each-beam")
    )
    assert isinstance(total, Value)
    assert isinstance(each, Value)
    assert 1.0e-4 == pytest.approx(float(each.value))
    assert 2.0e-4 == pytest.approx(float(total.value))


def test_a_fraction_of_4_mev_behind_water_is_not_enough() -> None:
    """The attenuation near 6 MeV would understate it: no workload, with the reason."""
    asked: dict[str, Any] = {
        "xray_fraction_percent": 0.9, "depth_cm": 10.0, "dose_per_cycle_gy": 2.0,
        "b_factor": 2.7, "plane_distance_cm": 400.0, "water_attenuation": 0.058, "lobe_allowance": 2.0,
        "cycles_per_week": 4.0, "extra_mu": None, "cycle_mu": 20000,
    }  # fmt: skip
    with pytest.raises(OutsideValidity, match="would understate"):
        xrays(**asked, energy_mev=4.4)
    assert xrays(**asked, energy_mev=6.4).per_week_gy_m2_per_week > 0


def test_without_it_the_fraction_with_its_three_factors_stands() -> None:
    """The sample has only a stated f1."""
    found = graph(read_folder(SAMPLE)).get("arrangement.xray_workload_steps", ARRANGEMENT)
    assert isinstance(found, Value)
    assert "lobes that miss the body" in found.value.column("step")


def test_neither_measured_nor_stated_names_both_ways() -> None:
    """What to supply: the measurement, or the fraction."""
    program = changed("beam", "linac-1/e6-high-rate", xray_fraction_percent=None)
    got = graph(program).get("arrangement.xray_workload_gy_m2_per_week", ARRANGEMENT)
    assert isinstance(got, Gone)
    assert {"xray-component", "beam.xray_fraction_percent"} <= {cause.what for cause in got.causes}


def test_work_at_an_energy_outside_the_tables_leaves_the_wall_not_assessed() -> None:
    """At 25 MV nothing is calculated behind the wall; the cause names the energies of the table."""
    columns = ("energy_mv", "kind", "workload_gy_per_week", "use_factor", "distance_m")
    existing = Table(columns, ((25.0, "leakage", 100.0, None, None),))
    found = finding(graph(changed("barrier", "a-west", existing_workload=existing)), "weekly-goal")
    assert "not assessed" == found.outcome
    assert any("from 4 to 18, not 25" in cause.words for cause in found.causes)


def test_the_workload_shows_what_it_was_worked_out_from() -> None:
    """However many records stand between, the fraction, its depth and the multiple-field factor are its inputs."""
    got = graph(read_folder(SAMPLE)).get("arrangement.xray_workload_gy_m2_per_week", ARRANGEMENT)
    assert isinstance(got, Value)
    names = {each.name for each in got.inputs}
    assert {"arrangement.pair_xray_percent", "arrangement.pair_xray_depth_cm", "arrangement.b_factor"} <= names
