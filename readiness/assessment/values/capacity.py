"""Places and waits: how many patients a year the program bears."""

from collections.abc import Callable, Mapping, Sequence
from typing import Any

from readiness.assessment.definition import Definition, derived
from readiness.calculations.capacity import (
    capacity_sensitivity,
    patients_borne_per_year,
    places_needed,
    waits_by_places,
)
from readiness.calculations.room_hours import places_room_holds
from readiness.calculations.waiting_simulation import share_started_in_time, wait_for_start
from readiness.quantities import Table, Uncertain

SIMULATED = "kiefer-wolfowitz-1955"


def places_by_room(
    *,
    free_room_hours_per_week_h: float,
    session_room_min: float,
    each_sessions_per_week: Sequence[float],
) -> int:
    """Return the patients at once whom the free hours of the room hold."""
    return places_room_holds(
        free_room_hours_per_week_h=free_room_hours_per_week_h,
        session_min=session_room_min,
        course_sessions_per_week=max(each_sessions_per_week, default=0.0),
    )


def usable_places(*, peak_patients: int, places_room_holds: int) -> int:
    """Return the fewer of the stated places and those that the room holds."""
    return min(peak_patients, places_room_holds)


def mean_wait(*, courses: Table, places: int) -> Uncertain | None:
    """Return the mean wait; none without a place."""
    return wait_for_start(courses=courses, places=places) if places else None


def started_in_time(*, courses: Table, places: int, longest_wait_weeks: float) -> float:
    """Return the part of the patients who start within the accepted wait, in per cent."""
    if places == 0:
        return 0.0
    return 100 * share_started_in_time(courses=courses, places=places, longest_wait_weeks=longest_wait_weeks)


def places_for_demand(*, courses: Table, longest_wait_weeks: float, wanted_percent: float) -> int:
    """Return the places with which the wanted part of the patients starts in time."""
    return places_needed(
        courses=courses, longest_wait_weeks=longest_wait_weeks, share_in_time=wanted_percent / 100
    )


def patients_borne(*, courses: Table, places: int, longest_wait_weeks: float, wanted_percent: float) -> float:
    """Return the patients a year whom the places bear."""
    return patients_borne_per_year(
        courses=courses,
        places=places,
        longest_wait_weeks=longest_wait_weeks,
        share_in_time=wanted_percent / 100,
    )


def waits_of_more_places(*, courses: Table, longest_wait_weeks: float, places: int) -> Table:
    """Return waits for each number of places up to two more than there are."""
    return waits_by_places(courses=courses, longest_wait_weeks=longest_wait_weeks, most_places=places + 2)


def what_capacity_hangs_on(
    *,
    courses: Table,
    peak_patients: int,
    free_room_hours_per_week_h: float,
    session_min: float,
    longest_wait_weeks: float,
    wanted_percent: float,
) -> Table:
    """Return the patients borne with one thing changed at a time."""
    return capacity_sensitivity(
        courses=courses,
        stated_places=peak_patients,
        free_room_hours_per_week_h=free_room_hours_per_week_h,
        session_min=session_min,
        longest_wait_weeks=longest_wait_weeks,
        share_in_time=wanted_percent / 100,
    )


def _simulated(name: str, meaning: str, by: Callable[..., Any], takes: Mapping[str, str]) -> Definition:
    return Definition(name, meaning, by=by, takes=takes, model=True, source=SIMULATED, known="memory")


_MIX = {"courses": "program.course_mix"}
_WAIT = {"longest_wait_weeks": "program.reached_waiting_time_weeks"}
_WANTED = {"wanted_percent": "program.share_started_in_time_percent"}
_PLACES = {"places": "program.usable_places"}

DEFINITIONS: tuple[Definition, ...] = (
    derived(
        "program.places_room_holds",
        "Patients at once whom the free room hours hold.",
        places_by_room,
        {
            "free_room_hours_per_week_h": "program.free_room_hours_per_week_h",
            "session_room_min": "program.session_room_min",
            "each_sessions_per_week": "each course.sessions_per_week",
        },
    ),
    derived(
        "program.usable_places",
        "Places for patients: the fewer of those the department states and those the room holds.",
        usable_places,
        {
            "peak_patients": "program.peak_patients",
            "places_room_holds": "program.places_room_holds",
        },
    ),
    _simulated(
        "program.wait_weeks",
        "Mean wait from referral to the first session.",
        mean_wait,
        {**_MIX, **_PLACES},
    ),
    _simulated(
        "program.started_in_time_percent",
        "Part of the patients who start within the accepted wait.",
        started_in_time,
        {**_MIX, **_PLACES, **_WAIT},
    ),
    _simulated(
        "program.places_needed",
        "Places with which the wanted part of the patients starts within the accepted wait.",
        places_for_demand,
        {**_MIX, **_WAIT, **_WANTED},
    ),
    _simulated(
        "program.patients_borne_per_year",
        "Patients a year whom the places bear at the accepted wait.",
        patients_borne,
        {**_MIX, **_PLACES, **_WAIT, **_WANTED},
    ),
    _simulated(
        "program.waits_by_places",
        "Wait, and part of the patients who start in time, for each number of places.",
        waits_of_more_places,
        {**_MIX, **_WAIT, **_PLACES},
    ),
    _simulated(
        "program.capacity_sensitivity",
        "Patients borne a year with one thing changed at a time.",
        what_capacity_hangs_on,
        {
            **_MIX,
            **_WAIT,
            **_WANTED,
            "peak_patients": "program.peak_patients",
            "free_room_hours_per_week_h": "program.free_room_hours_per_week_h",
            "session_min": "program.session_room_min",
        },
    ),
)
