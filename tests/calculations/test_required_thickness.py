"""What must be added to a barrier, or how much less must be done behind it."""

from math import log10

import pytest

from readiness.calculations.required_thickness import (
    cycles_that_fit,
    required_thickness,
    sessions_that_fit,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

COLUMNS = ("radiation", "energy_mv", "angle_deg", "dose_usv_per_week")
FIT = {
    "before_usv_per_week": 4.0,
    "added_usv_per_week": 32.0,
    "cycles_per_week": 8.0,
    "patient_cycles_per_week": 2.0,
    "design_goal_msv_per_week": 0.02,
}


def needed(rows, limit=20.0):
    return required_thickness(contributions=Table.of(COLUMNS, rows), limit_usv_per_week=limit)


def test_tenfold_of_one_energy_needs_one_layer():
    """Ten times the goal at 6 MV needs one layer: 33 cm of concrete, 10 of steel, 5.7 of lead."""
    result = needed([("primary", 6, None, 200.0)])
    assert (1.0, 33.0, 10.0, 5.7) == pytest.approx(
        (result.extra_tvl, result.concrete_cm, result.steel_cm, result.lead_cm)
    )


def test_nothing_lacking():
    """A barrier at its goal lacks nothing."""
    result = needed([("primary", 6, None, 20.0)])
    assert (0.0, 0.0, 0.0, 0.0) == (
        result.extra_tvl,
        result.concrete_cm,
        result.steel_cm,
        result.lead_cm,
    )


def test_sum_behind_the_added_concrete_is_the_goal():
    """Several contributions, each with its own layer, add up to exactly the goal behind the added concrete."""
    rows = [("primary", 6, None, 60.0), ("leakage", 10, None, 30.0), ("scatter", 6, 90.0, 25.0)]
    cm = needed(rows).concrete_cm
    left = sum(dose * 10 ** -(cm / layer) for (*_, dose), layer in zip(rows, (33, 31, 17), strict=True))
    assert 20.0 == pytest.approx(left)
    assert log10(115 / 20) == pytest.approx(needed(rows).extra_tvl)


def test_harder_radiation_needs_more():
    """The same excess at 10 MV needs more concrete than at 6 MV."""
    assert (
        needed([("primary", 10, None, 90.0)]).concrete_cm > needed([("primary", 6, None, 90.0)]).concrete_cm
    )


def test_outside_the_tables():
    """An energy outside the tables is refused."""
    with pytest.raises(OutsideValidity):
        needed([("primary", 25, None, 90.0)])


def test_impossible_limit():
    """A limit of zero cannot be reached by any wall."""
    with pytest.raises(ValueError, match="limit"):
        needed([("primary", 6, None, 90.0)], limit=0.0)


def test_cycles_that_fit():
    """16 uSv are left, a cycle gives 4: four cycles, two patients at two cycles a week."""
    result = cycles_that_fit(**FIT)
    assert (True, 4, 2) == (result.fits_without_program, result.cycles_per_week, result.patients)


def test_existing_work_alone_too_much():
    """Where the existing work exceeds the goal nothing fits."""
    result = cycles_that_fit(**{**FIT, "before_usv_per_week": 21.0})
    assert (False, 0, 0) == (result.fits_without_program, result.cycles_per_week, result.patients)


def test_nothing_added_has_no_limit():
    """Where nothing is added no number of cycles is too many."""
    result = cycles_that_fit(**{**FIT, "added_usv_per_week": 0.0})
    assert (True, None) == (result.fits_without_program, result.cycles_per_week)


@pytest.mark.parametrize("name", ["cycles_per_week", "design_goal_msv_per_week", "before_usv_per_week"])
def test_impossible_cycles(name):
    """Numbers below zero are refused."""
    with pytest.raises(ValueError, match="must"):
        cycles_that_fit(**{**FIT, name: -1.0})


HOUR = {"photon_usv_in_any_hour": 2.0, "session_usv": 6.0, "limit_usv_in_any_hour": 20.0}


def test_sessions_of_an_hour():
    """Two from photons and 6 a session leave three sessions below 20; nothing is lacking at 20."""
    at_limit = sessions_that_fit(usv_in_any_hour=20.0, **HOUR)
    assert (0.0, 3) == (at_limit.extra_tvl, at_limit.sessions)
    assert pytest.approx(1.0) == sessions_that_fit(usv_in_any_hour=200.0, **HOUR).extra_tvl


def test_photon_work_alone_above_the_limit_leaves_no_session():
    """Fewer sessions do not help where photon work exceeds the limit of the hour by itself."""
    assert sessions_that_fit(usv_in_any_hour=30.0, **{**HOUR, "photon_usv_in_any_hour": 25.0}).sessions is None


def test_negative_doses_of_an_hour_are_refused():
    """A dose below zero or a limit of zero is refused."""
    with pytest.raises(ValueError, match="below zero"):
        sessions_that_fit(usv_in_any_hour=-1.0, **HOUR)
    with pytest.raises(ValueError, match="above zero"):
        sessions_that_fit(usv_in_any_hour=1.0, **{**HOUR, "limit_usv_in_any_hour": 0.0})
