"""Places needed for a stated wait, patients a year borne by the places, and what that answer hangs on."""

import math
from collections.abc import Iterator

from readiness.calculations.patient_flow import (
    checked_courses,
    patients_under_treatment,
    total_patients_per_year,
)
from readiness.calculations.room_hours import places_room_holds
from readiness.calculations.waiting_simulation import (
    check_share_in_time,
    long_run,
    share_at_rate,
    share_started_in_time,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

MOST_PLACES = 50
SESSION_CHANGES_MIN = (-15.0, -10.0, 10.0, 15.0)
SENSITIVITY = ("change", "session_min", "places", "limited_by", "patients_borne_per_year", "more_per_year")


def places_needed(*, courses: Table, longest_wait_weeks: float, share_in_time: float) -> int:
    """
    Return the fewest places with which a stated share of the patients starts within a stated wait.

    Args:
        courses: The mix of courses, with the columns of patient_flow.COURSES.
        longest_wait_weeks: Wait from referral to the first session that the department accepts. [weeks]
        share_in_time: Share of the patients who must start within it. [1]

    Returns:
        Places. [1]

    Raises:
        ValueError: If an input is impossible.
        OutsideValidity: If more than MOST_PLACES would be needed.

    Valid for: the long run.
    Assumes: referrals at random (Poisson), fixed course lengths, first come first served, no holidays.
    Source: kiefer-wolfowitz-1955 (memory), simulated.
    """
    check_share_in_time(share_in_time=share_in_time)
    first = math.floor(patients_under_treatment(courses=courses)) + 1
    for places in range(first, MOST_PLACES + 1):
        share = share_started_in_time(courses=courses, places=places, longest_wait_weeks=longest_wait_weeks)
        if share >= share_in_time:
            return places
    raise OutsideValidity(f"more than {MOST_PLACES} places would be needed; this is not one room's program")


def waits_by_places(*, courses: Table, longest_wait_weeks: float, most_places: int) -> Table:
    """
    Return wait and share started in time for each number of places.

    Args:
        courses: The mix of courses, with the columns of patient_flow.COURSES.
        longest_wait_weeks: Wait from referral to the first session that the department accepts. [weeks]
        most_places: Last number of places in the table. [1]

    Returns:
        One row per number of places; waits are blank where they grow without end.

    Raises:
        ValueError: If an input is impossible.

    Valid for: the long run.
    Assumes: referrals at random (Poisson), fixed course lengths, first come first served, no holidays.
    Source: kiefer-wolfowitz-1955 (memory), simulated.
    """
    load = patients_under_treatment(courses=courses)
    rows: list[tuple[float | int | str | None, ...]] = []
    for places in range(1, most_places + 1):
        share = share_started_in_time(courses=courses, places=places, longest_wait_weeks=longest_wait_weeks)
        if load >= places:
            rows.append((places, None, None, None, share, "the wait grows without end"))
            continue
        seen = long_run(courses=courses, places=places)
        mean = seen.mean_wait_weeks
        rows.append((places, mean.value, mean.sd, seen.nine_in_ten_wait_weeks, share, "keeps up"))
    columns = (
        "places", "mean_wait_weeks", "standard_error_weeks", "nine_in_ten_start_within_weeks",
        "share_started_in_time", "outcome",
    )  # fmt: skip
    return Table.of(columns, rows)


def patients_borne_per_year(
    *, courses: Table, places: int, longest_wait_weeks: float, share_in_time: float
) -> float:
    """
    Return how many patients a year the places bear, while a stated share still starts within a stated wait.

    Args:
        courses: The mix of courses, with the columns of patient_flow.COURSES; its proportions are kept.
        places: Patients who may be under treatment at once. [1]
        longest_wait_weeks: Wait from referral to the first session that the department accepts. [weeks]
        share_in_time: Share of the patients who must start within it. [1]

    Returns:
        Patients, rounded down to a tenth; 0 without a place. [per year]

    Raises:
        ValueError: If an input is impossible.

    Valid for: the long run; the simulation is good to about 3 %.
    Assumes: referrals at random (Poisson), fixed course lengths, first come first served, no holidays.
    Source: kiefer-wolfowitz-1955 (memory), simulated.
    """
    check_share_in_time(share_in_time=share_in_time)
    if longest_wait_weeks < 0 or places < 0:
        raise ValueError("neither an accepted wait nor a number of places can be negative")
    load = patients_under_treatment(courses=courses)
    if load <= 0:
        raise ValueError("a mix without patients has no proportions to keep")
    if places == 0:
        return 0.0
    patients = total_patients_per_year(courses=courses)
    low, high = 0.0, places / load  # multiples of the stated mix; at the upper one the wait never ends
    while (high - low) * patients > 0.01:
        middle = (low + high) / 2
        share = share_at_rate(
            courses=courses, places=places, longest_wait_weeks=longest_wait_weeks, multiple=middle
        )
        if share >= share_in_time:
            low = middle
        else:
            high = middle
    return math.floor(low * patients * 10 + 1e-9) / 10


def capacity_sensitivity(
    *,
    courses: Table,
    stated_places: int,
    free_room_hours_per_week_h: float,
    session_min: float,
    longest_wait_weeks: float,
    share_in_time: float,
) -> Table:
    """
    Return how many patients a year the program bears as stated, with other session minutes, other courses,
    one place more or fewer, and another accepted wait.

    Args:
        courses: The mix of courses, with the columns of patient_flow.COURSES.
        stated_places: Patients whom the department means to treat at once. [1]
        free_room_hours_per_week_h: Hours a week that ordinary patients leave free in the room. [h]
        session_min: Room time of one session. [min]
        longest_wait_weeks: Wait from referral to the first session that the department accepts. [weeks]
        share_in_time: Share of the patients who must start within it. [1]

    Returns:
        One row per change; the places used are the fewer of the stated and those the room holds.

    Raises:
        ValueError: If an input is impossible.

    Valid for: one change at a time.
    Assumes: as patients_borne_per_year.
    Source: kiefer-wolfowitz-1955 (memory), simulated.
    """
    rows: list[tuple[str | float | int | None, ...]] = []
    stated = 0.0
    cases = _cases(courses, stated_places, session_min, longest_wait_weeks)
    for words, mix, places_wanted, minutes, wait in cases:
        frequent = max(row[3] for row in checked_courses(courses=mix))
        held = places_room_holds(
            free_room_hours_per_week_h=free_room_hours_per_week_h,
            session_min=minutes,
            course_sessions_per_week=frequent,
        )
        places = min(places_wanted, held)
        borne = patients_borne_per_year(
            courses=mix, places=places, longest_wait_weeks=wait, share_in_time=share_in_time
        )
        if not rows:
            stated = borne
        limit = "room hours" if held < places_wanted else "stated places"
        rows.append((words, minutes, places, limit, borne, round(borne - stated, 1)))
    return Table.of(SENSITIVITY, rows)


def _cases(
    courses: Table, places: int, session_min: float, wait_weeks: float
) -> Iterator[tuple[str, Table, int, float, float]]:
    """Yield the changes: words, mix, wanted places, session minutes, accepted wait."""
    yield "as stated", courses, places, session_min, wait_weeks
    for change in SESSION_CHANGES_MIN:
        if session_min + change > 0:
            words = f"sessions {abs(change):g} min {'longer' if change > 0 else 'shorter'}"
            yield words, courses, places, session_min + change, wait_weeks
    total = total_patients_per_year(courses=courses)
    if len(courses.rows) > 1:
        rate = courses.columns.index("patients_per_year")
        for row in courses.rows:
            only = (*row[:rate], total, *row[rate + 1 :])
            words = f"every patient on course {row[courses.columns.index('course')]}"
            yield words, Table(courses.columns, (only,)), places, session_min, wait_weeks
    yield "one place more", courses, places + 1, session_min, wait_weeks
    if places > 1:
        yield "one place fewer", courses, places - 1, session_min, wait_weeks
    yield "twice the accepted wait", courses, places, session_min, 2 * wait_weeks
