"""Shields on the patient: thickness, cover, and their use over a course with its boosts."""

from datetime import date

import pytest

from readiness.calculations.boost_calendar import boost_calendar, last_day
from readiness.calculations.course_calendar import course_calendar, field_sets
from readiness.calculations.patient_shields import (
    cover_margin,
    highest_energy,
    needed_thickness,
    shield_schedule,
    shield_use,
    thickness_margin,
)
from readiness.calculations.treatment_days import treatment_days
from readiness.calculations.working_days import WEEKDAYS, working_days
from readiness.errors import OutsideValidity
from readiness.quantities import Table

DAYS = treatment_days(
    calendar=working_days(weekdays=WEEKDAYS[:5], closed_dates=()),
    treatment_weekdays=("monday", "tuesday", "thursday", "friday"),
    service_days=(),
)
COURSE = course_calendar(
    first_day=date(2027, 5, 17),
    days=DAYS,
    fields=field_sets(technique="six-position", sessions_per_cycle=2),
    cycles=6,
    sessions_per_week=4,
    dose_per_cycle_gy=2.0,
    break_after_cycle=0,
    break_weeks=0.0,
)
SHIELDS = Table.of(
    ("organ", "first_cycle", "last_cycle"),
    [("eyes-external", 1, None), ("nails", 2, 3), ("nails", 5, 5), ("feet", 6, 9)],
)
BOOSTS = Table.of(
    ("site", "dose_per_session_gy", "sessions", "first_cycle"),
    [("soles", 1.0, 4, 2), ("perineum", 1.5, 3, 5)],
)
NO_BOOSTS = Table.of(("date", "site", "dose_gy"), [])


def test_thickness_grows_with_energy_from_the_margin() -> None:
    """4 mm of lead at 6 MeV, 3 mm at 4 MeV; towards no energy the margin of 1 mm remains."""
    needed = [needed_thickness(material="lead", energy_at_shield_mev=energy) for energy in (1e-9, 4.0, 6.0)]
    assert [1.0, 3.0, 4.0] == pytest.approx(needed)


def test_four_millimetres_of_goggles_stop_six_mev_but_one_millimetre_of_nail_shield_does_not() -> None:
    """External goggles of 4 mm lead are just enough at 6 MeV; nail shields of 1 mm are too thin at 4 MeV."""
    assert thickness_margin(material="lead", thickness_mm=4.0, energy_at_shield_mev=6.0) == 0
    assert -2.0 == thickness_margin(material="lead", thickness_mm=1.0, energy_at_shield_mev=4.0)


def test_rule_exceeds_the_range_in_lead() -> None:
    """The rule gives more than the range of 6 MeV electrons in lead, 4.239 g/cm2 (estar) at 11.35 g/cm3."""
    assert needed_thickness(material="lead", energy_at_shield_mev=6.0) > 10 * 4.239 / 11.35


def test_rule_against_what_was_observed() -> None:
    """10 mm of alloy pass at 9 MeV, as observed; 5 mm pass at 6 MeV, but were found ineffective (rustgi-1986)."""
    alloy = {"material": "low-melting-alloy"}
    assert 3.4 == pytest.approx(thickness_margin(**alloy, thickness_mm=10.0, energy_at_shield_mev=9.0))
    assert 0.2 == pytest.approx(thickness_margin(**alloy, thickness_mm=5.0, energy_at_shield_mev=6.0))


@pytest.mark.parametrize("material", ["lead", "low-melting-alloy"])
@pytest.mark.parametrize("energy", [2.0, 5.0, 12.0])
def test_highest_energy_is_the_inverse(material: str, energy: float) -> None:
    """The highest energy for the needed thickness is the energy itself."""
    thickness = needed_thickness(material=material, energy_at_shield_mev=energy)
    assert energy == pytest.approx(highest_energy(material=material, thickness_mm=thickness))


def test_highest_energy_stays_within_the_rule() -> None:
    """A block of 50 mm is said to hold up to 20 MeV only, a foil of 0.5 mm for nothing."""
    assert highest_energy(material="lead", thickness_mm=50.0) == 20
    assert highest_energy(material="lead", thickness_mm=0.5) == 0


def test_cover_of_the_lid_side() -> None:
    """2 mm are 1 mm more than the least; bare metal is 1 mm short."""
    assert [1.0, -1.0] == [cover_margin(cover_mm=2.0), cover_margin(cover_mm=0.0)]


def test_rule_is_not_stretched() -> None:
    """Tungsten has no rule here, and 21 MeV lie beyond it."""
    with pytest.raises(OutsideValidity, match="no thickness rule for tungsten"):
        needed_thickness(material="tungsten", energy_at_shield_mev=6.0)
    with pytest.raises(OutsideValidity, match="up to 20 MeV"):
        needed_thickness(material="lead", energy_at_shield_mev=21.0)


def test_boosts_follow_complete_cycles_and_then_the_treatment_days() -> None:
    """Soles are boosted with cycles 2 to 5; the third boost of the perineum falls on Monday after the course."""
    table = boost_calendar(sessions=COURSE.sessions, boosts=BOOSTS, days=DAYS)
    soles = [row for row in table.records() if row["site"] == "soles"]
    perineum = [row for row in table.records() if row["site"] == "perineum"]
    assert ["2027-05-21", "2027-05-25", "2027-05-28", "2027-06-01"] == [row["date"] for row in soles]
    assert [5, 6, None] == [row["cycle"] for row in perineum]
    assert "2027-06-07" == perineum[-1]["date"]
    assert 4.5 == perineum[-1]["site_dose_after_gy"]
    assert date(2027, 6, 7) == last_day(sessions=COURSE.sessions, boosts=table)
    assert COURSE.end_date == last_day(sessions=COURSE.sessions, boosts=NO_BOOSTS)


def test_boost_skips_a_missed_day() -> None:
    """A boost after the course moves to Tuesday when Monday is missed."""
    table = boost_calendar(sessions=COURSE.sessions, boosts=BOOSTS, days=DAYS, missed_days=[date(2027, 6, 7)])
    assert "2027-06-08" == table.column("date")[-1]


def test_schedule_brings_shields_and_boosts_to_each_session() -> None:
    """Eyes are shielded in all twelve sessions, nails in cycles 2, 3 and 5, and boosts stand on their days."""
    boosts = boost_calendar(sessions=COURSE.sessions, boosts=BOOSTS, days=DAYS)
    rows = list(shield_schedule(sessions=COURSE.sessions, shields=SHIELDS, boosts=boosts).records())
    assert 13 == len(rows)
    assert all(str(row["shields"]).startswith("eyes-external") for row in rows[:12])
    assert {2, 3, 5} == {row["cycle"] for row in rows if "nails" in str(row["shields"])}
    assert "perineum 1.5 Gy, soles 1 Gy" == rows[9]["boosts"]
    assert (None, "2027-06-07", "perineum 1.5 Gy") == tuple(rows[12][name] for name in ("session", "date", "boosts"))
    assert {"soles": 4, "perineum": 3} == {
        site: sum(site in str(row["boosts"]) for row in rows) for site in ("soles", "perineum")
    }


def test_use_counts_cycles_once() -> None:
    """Nails: 3 of 6 cycles shielded, 6 Gy prescribed to the rest; a shield past the end counts to the end."""
    rows = shield_use(cycles=6, dose_per_cycle_gy=2.0, shields=SHIELDS).rows
    assert (("eyes-external", 6, 0, 0.0), ("nails", 3, 3, 6.0), ("feet", 1, 5, 10.0)) == rows
    twice = Table.of(SHIELDS.columns, [("nails", 1, 3), ("nails", 2, 4)])
    assert 4 == shield_use(cycles=6, dose_per_cycle_gy=2.0, shields=twice).rows[0][1]


def test_no_shields_no_boosts() -> None:
    """Without shields and boosts the schedule has one bare row per session."""
    schedule = shield_schedule(sessions=COURSE.sessions, shields=Table.of(SHIELDS.columns, []), boosts=NO_BOOSTS)
    assert ("",) * 12 == schedule.column("shields") == schedule.column("boosts")


@pytest.mark.parametrize(
    ("call", "arguments", "message"),
    [
        (needed_thickness, {"material": "lead", "energy_at_shield_mev": 0.0}, "more than 0 MeV"),
        (thickness_margin, {"material": "lead", "thickness_mm": 0.0, "energy_at_shield_mev": 6.0}, "is none"),
        (highest_energy, {"material": "lead", "thickness_mm": -1.0}, "is none"),
        (cover_margin, {"cover_mm": -1.0}, "cannot be -1.0 mm"),
        (
            shield_use,
            {"cycles": 6, "dose_per_cycle_gy": 2.0, "shields": Table.of(SHIELDS.columns, [("nails", 3, 2)])},
            "cannot be worn from cycle 3 to 2",
        ),
        (shield_use, {"cycles": 0, "dose_per_cycle_gy": 2.0, "shields": SHIELDS}, "does not exist"),
        (
            boost_calendar,
            {"sessions": Table.of(COURSE.sessions.columns, []), "boosts": BOOSTS, "days": DAYS},
            "a course that has sessions",
        ),
        (
            boost_calendar,
            {"sessions": COURSE.sessions, "boosts": Table.of(BOOSTS.columns, [("soles", 0.0, 1, 1)]), "days": DAYS},
            "soles: a boost has a dose",
        ),
        (last_day, {"sessions": Table.of(("date",), []), "boosts": NO_BOOSTS}, "no last day"),
    ],
)
def test_impossible_shields_and_boosts_raise(call, arguments: dict, message: str) -> None:
    """Shields of no thickness, worn backwards, and boosts without dose are refused with words."""
    with pytest.raises(ValueError, match=message):
        call(**arguments)
