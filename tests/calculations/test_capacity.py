"""Places needed, patients borne, and what they hang on."""

import pytest

from readiness.calculations.capacity import (
    capacity_sensitivity,
    patients_borne_per_year,
    places_needed,
    waits_by_places,
)
from readiness.calculations.patient_flow import COURSES, WEEKS_PER_YEAR
from readiness.calculations.waiting_simulation import share_started_in_time
from readiness.errors import OutsideValidity
from readiness.quantities import Table

MIX = Table.of(COURSES, [("long", 5, 36, 2, 4, 10), ("short", 3, 12, 2, 4, 3)])
PROGRAM = {
    "courses": MIX,
    "stated_places": 2,
    "free_room_hours_per_week_h": 8.0,
    "session_min": 60.0,
    "longest_wait_weeks": 2.0,
    "share_in_time": 0.8,
}


def scaled(multiple: float) -> Table:
    """Return the mix with all referrals multiplied."""
    return Table.of(COURSES, [(name, rate * multiple, *rest) for name, rate, *rest in MIX.rows])


def test_places_needed_are_the_fewest_that_keep_the_wait():
    """The answer keeps the share in time, and one place fewer does not."""
    needed = places_needed(courses=MIX, longest_wait_weeks=2, share_in_time=0.9)
    assert share_started_in_time(courses=MIX, places=needed, longest_wait_weeks=2) >= 0.9
    assert share_started_in_time(courses=MIX, places=needed - 1, longest_wait_weeks=2) < 0.9


def test_a_patient_who_may_wait_forever_needs_only_the_load():
    """With any wait accepted, the places are those that keep up: two for 1.13 patients at once."""
    assert places_needed(courses=MIX, longest_wait_weeks=1e6, share_in_time=0.99) == 2


def test_a_shorter_wait_needs_more_places():
    """Starting at once takes more places than starting within eight weeks."""
    at_once = places_needed(courses=MIX, longest_wait_weeks=0, share_in_time=0.95)
    assert at_once > places_needed(courses=MIX, longest_wait_weeks=8, share_in_time=0.95)


def test_a_load_beyond_one_room_is_refused():
    """A mix that needs more than fifty places is a slip of the keyboard."""
    with pytest.raises(OutsideValidity, match="more than 50 places"):
        places_needed(courses=scaled(60), longest_wait_weeks=0, share_in_time=0.9)


def test_table_of_places_blanks_waits_that_grow_without_end():
    """One place does not keep up with 1.13 patients at once: no wait is shown, and nobody starts in time."""
    table = waits_by_places(courses=MIX, longest_wait_weeks=2, most_places=3)
    first, second, third = table.records()
    assert first["mean_wait_weeks"] is None
    assert first["share_started_in_time"] == 0
    assert first["outcome"] == "the wait grows without end"
    assert second["mean_wait_weeks"] > third["mean_wait_weeks"]


def test_patients_borne_start_in_time_and_one_more_in_ten_does_not():
    """At the answer the share in time holds; with a tenth more patients it does not."""
    borne = patients_borne_per_year(courses=MIX, places=2, longest_wait_weeks=2, share_in_time=0.9)
    at_answer = share_started_in_time(courses=scaled(borne / 8), places=2, longest_wait_weeks=2)
    beyond = share_started_in_time(courses=scaled(borne * 1.1 / 8), places=2, longest_wait_weeks=2)
    assert at_answer >= 0.9 > beyond


def test_one_place_without_wait_bears_what_the_theory_says():
    """With one place, fixed courses and no wait, the share that starts at once is 1 - load: 20 % of a full place."""
    courses = Table.of(COURSES, [("long", 1, 36, 2, 4, 10)])
    borne = patients_borne_per_year(courses=courses, places=1, longest_wait_weeks=0, share_in_time=0.8)
    assert borne == pytest.approx(0.2 * WEEKS_PER_YEAR / 10, abs=0.11)


def test_patients_borne_never_exceed_the_places():
    """Even with any wait accepted, the places hold no more than they can treat, and nearly that."""
    borne = patients_borne_per_year(courses=MIX, places=2, longest_wait_weeks=1e6, share_in_time=0.5)
    full = 2 * WEEKS_PER_YEAR * 8 / 59
    assert full - 0.2 < borne <= full


def test_no_place_bears_nobody():
    """Without a place the program bears no patient."""
    assert patients_borne_per_year(courses=MIX, places=0, longest_wait_weeks=2, share_in_time=0.9) == 0


def test_sensitivity_names_what_limits():
    """In eight free hours two places fit; sessions ten minutes longer lose one place to the room."""
    rows = {row["change"]: row for row in capacity_sensitivity(**PROGRAM).records()}
    assert rows["as stated"]["more_per_year"] == 0
    assert rows["as stated"]["limited_by"] == "stated places"
    assert rows["sessions 10 min longer"]["limited_by"] == "room hours"
    assert rows["sessions 10 min longer"]["places"] == 1
    assert rows["sessions 10 min longer"]["more_per_year"] < 0
    assert rows["one place more"]["places"] == 2, "the room holds no third place"
    assert rows["twice the accepted wait"]["more_per_year"] > 0


def test_sensitivity_shows_the_choice_of_course():
    """Short courses only: more patients a year; long courses only: fewer."""
    rows = {row["change"]: row for row in capacity_sensitivity(**PROGRAM).records()}
    assert rows["every patient on course short"]["more_per_year"] > 0
    assert rows["every patient on course long"]["more_per_year"] < 0


def test_sensitivity_leaves_out_sessions_without_time():
    """Ten minutes off a session of ten minutes is not a case."""
    rows = capacity_sensitivity(**PROGRAM | {"session_min": 10.0}).column("change")
    assert "sessions 10 min shorter" not in rows
    assert "sessions 10 min longer" in rows


def test_impossible_questions_are_refused():
    """Certainty, negative waits and a mix without patients have no answer."""
    with pytest.raises(ValueError, match="between 0 and 1"):
        places_needed(courses=MIX, longest_wait_weeks=2, share_in_time=1)
    with pytest.raises(ValueError, match="can be negative"):
        patients_borne_per_year(courses=MIX, places=2, longest_wait_weeks=-1, share_in_time=0.9)
    with pytest.raises(ValueError, match="no proportions"):
        patients_borne_per_year(courses=scaled(0), places=2, longest_wait_weeks=2, share_in_time=0.9)
