"""Room hours taken, free and displaced."""

import pytest

from readiness.calculations.room_hours import (
    displaced_appointments_per_year,
    displaced_room_hours_per_year,
    free_room_hours_left,
    places_room_holds,
    room_hours_per_week,
)

YEAR = {
    "sessions_per_year": 216,
    "session_min": 60,
    "first_cycle_sessions_per_year": 16,
    "first_cycle_extra_min": 60,
    "tse_days_per_year": 176,
    "quality_assurance_min": 30,
    "other_room_hours_per_year_h": 60,
}


def test_eight_sessions_of_an_hour_take_eight_hours():
    """Room hours are sessions times minutes."""
    assert room_hours_per_week(sessions_per_week=8, session_min=60) == 8
    assert room_hours_per_week(sessions_per_week=0, session_min=60) == 0


@pytest.mark.parametrize(
    ("free", "minutes", "expected"), [(8, 60, 2), (7.99, 60, 1), (8, 61, 1), (3.9, 60, 0), (0, 60, 0), (8, 30, 4)]
)
def test_places_are_whole_patients(free, minutes, expected):
    """Eight free hours hold two patients with four sessions a week of one hour, and a minute more holds one."""
    assert expected == places_room_holds(
        free_room_hours_per_week_h=free, session_min=minutes, course_sessions_per_week=4
    )


def test_places_do_not_suffer_from_rounding():
    """Ten patients in exactly the hours of ten patients fit, though 0.7 is not a binary number."""
    assert places_room_holds(free_room_hours_per_week_h=7.0, session_min=42, course_sessions_per_week=1) == 10


def test_missing_room_hours_are_negative():
    """An unfavourable balance is returned, not refused."""
    assert free_room_hours_left(free_room_hours_per_week_h=6, room_use_per_week_h=8) == -2


def test_displaced_hours_of_a_year_close_by_hand():
    """216 h of sessions, 16 h of first cycles, 88 h of daily checks and 60 h of others are 380 h."""
    assert displaced_room_hours_per_year(**YEAR) == 216 + 16 + 88 + 60


def test_every_part_displaces_something():
    """Each part that grows makes the displaced hours grow."""
    for name in YEAR:
        grown = YEAR | {name: YEAR[name] + 4}
        assert displaced_room_hours_per_year(**grown) > displaced_room_hours_per_year(**YEAR)


def test_hours_displace_appointments():
    """An hour holds four appointments of a quarter of an hour."""
    assert displaced_appointments_per_year(displaced_hours_per_year_h=380, appointment_min=15) == 1520
    assert displaced_appointments_per_year(displaced_hours_per_year_h=0, appointment_min=15) == 0


def test_impossible_numbers_are_refused():
    """Negative hours, sessions without time and more days than sessions are slips."""
    with pytest.raises(ValueError, match="cannot be negative"):
        room_hours_per_week(sessions_per_week=-1, session_min=60)
    with pytest.raises(ValueError, match="takes time"):
        places_room_holds(free_room_hours_per_week_h=8, session_min=0, course_sessions_per_week=4)
    with pytest.raises(ValueError, match="cannot be negative"):
        free_room_hours_left(free_room_hours_per_week_h=-1, room_use_per_week_h=0)
    with pytest.raises(ValueError, match="outnumber the sessions"):
        displaced_room_hours_per_year(**YEAR | {"tse_days_per_year": 217})
    with pytest.raises(ValueError, match="cannot be negative"):
        displaced_room_hours_per_year(**YEAR | {"session_min": -60})
    with pytest.raises(ValueError, match="takes time"):
        displaced_appointments_per_year(displaced_hours_per_year_h=1, appointment_min=0)
