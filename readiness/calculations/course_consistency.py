"""
Whether the numbers of a course agree with each other.

A course is stated as dose per cycle, cycles, sessions per cycle and sessions per week. A total that those do
not make is a contradiction that somebody has to resolve before anything is calculated from it.
"""

import math

from readiness.quantities import Table

SAME_DOSE_GY = 0.005  # doses are written to the hundredth of a gray
COLUMNS = ("contradiction", "stated", "follows", "hint")


def course_dose(*, dose_per_cycle_gy: float, cycles: int) -> float:
    """
    Return the total dose that the cycles of a course make.

    D = n D_cycle

    Args:
        dose_per_cycle_gy: Prescribed dose of one complete cycle. [Gy]
        cycles: Cycles of the course. [1]

    Returns:
        Total dose. [Gy]

    Raises:
        ValueError: If the dose or the number of cycles is not more than 0.

    Valid for: complete cycles, without boosts.
    Assumes: every cycle gives the same dose.
    Source: definition (derived).
    """
    if not dose_per_cycle_gy > 0 or cycles < 1:
        raise ValueError(f"a course of {cycles} cycles of {dose_per_cycle_gy} Gy does not exist")
    return dose_per_cycle_gy * cycles


def cycles_per_week(*, sessions_per_cycle: int, sessions_per_week: int) -> int:
    """
    Return how many complete cycles fit into one week.

    Args:
        sessions_per_cycle: Sessions that make one cycle. [1]
        sessions_per_week: Highest number of sessions in one week. [per week]

    Returns:
        Whole cycles a week; a cycle is never split over a weekend. [1]

    Raises:
        ValueError: If there are no sessions, or not even one cycle fits into the week.

    Valid for: one to seven sessions a week.
    Assumes: one session a day.
    Source: practice.
    """
    if sessions_per_cycle < 1:
        raise ValueError(f"a cycle has at least one session, not {sessions_per_cycle}")
    if not 1 <= sessions_per_week <= 7:
        raise ValueError(f"a week holds 1 to 7 sessions, one a day, not {sessions_per_week}")
    if sessions_per_week < sessions_per_cycle:
        raise ValueError(
            f"{sessions_per_week} sessions a week do not hold a cycle of {sessions_per_cycle} sessions, "
            "and a cycle is not split over a weekend"
        )
    return sessions_per_week // sessions_per_cycle


def undisturbed_weeks(
    *, cycles: int, sessions_per_cycle: int, sessions_per_week: int, break_weeks: float
) -> float:
    """
    Return the weeks a course takes without holidays, service days or missed days.

    Args:
        cycles: Cycles of the course. [1]
        sessions_per_cycle: Sessions that make one cycle. [1]
        sessions_per_week: Highest number of sessions in one week. [per week]
        break_weeks: Length of the planned break; 0 for none. [weeks]

    Returns:
        Calendar weeks that are touched. [weeks]

    Raises:
        ValueError: If a number is impossible.

    Valid for: a course that begins with the week.
    Assumes: a break of whole weeks after a complete week.
    Source: definition (derived).
    """
    if cycles < 1 or break_weeks < 0:
        raise ValueError(f"{cycles} cycles with a break of {break_weeks} weeks do not exist")
    each_week = cycles_per_week(sessions_per_cycle=sessions_per_cycle, sessions_per_week=sessions_per_week)
    return math.ceil(cycles / each_week) + break_weeks


def course_contradictions(
    *,
    total_dose_gy: float,
    dose_per_cycle_gy: float,
    cycles: int,
    sessions_per_cycle: int,
    sessions_per_week: int,
    break_after_cycle: int,
) -> Table:
    """
    Return where the stated numbers of a course contradict each other.

    Args:
        total_dose_gy: Stated total dose. [Gy]
        dose_per_cycle_gy: Stated dose of one complete cycle. [Gy]
        cycles: Stated number of cycles. [1]
        sessions_per_cycle: Sessions that make one cycle. [1]
        sessions_per_week: Highest number of sessions in one week. [per week]
        break_after_cycle: Cycle after which the planned break lies; 0 for none. [1]

    Returns:
        One row per contradiction: what, the stated number, what follows from the others, and a hint.

    Raises:
        ValueError: If a number by itself is impossible.

    Valid for: courses of equal cycles.
    Assumes: doses are written to 0.01 Gy.
    Source: definition (derived).
    """
    follows_gy = course_dose(dose_per_cycle_gy=dose_per_cycle_gy, cycles=cycles)
    if sessions_per_cycle < 1 or sessions_per_week < 1 or break_after_cycle < 0:
        raise ValueError("sessions are counted from 1, and a break lies after a cycle or (0) nowhere")
    rows: list[tuple[str, float, float, str]] = []
    if abs(total_dose_gy - follows_gy) > SAME_DOSE_GY:
        hint = _dose_hint(total_dose_gy, dose_per_cycle_gy, cycles, sessions_per_cycle)
        rows.append(("total dose in Gy against cycles times dose per cycle", total_dose_gy, follows_gy, hint))
    if sessions_per_week < sessions_per_cycle:
        what = "sessions a week against sessions of a cycle"
        rows.append((what, sessions_per_week, sessions_per_cycle, "a cycle is completed within one week"))
    if break_after_cycle >= cycles:
        what = "cycle before the break against cycles of the course"
        rows.append((what, break_after_cycle, cycles, "a break lies before the last cycle"))
    return Table.of(COLUMNS, rows)


def _dose_hint(total_gy: float, per_cycle_gy: float, cycles: int, sessions_per_cycle: int) -> str:
    """Return the slip that would explain a total which the cycles do not make."""
    if sessions_per_cycle > 1:
        if abs(total_gy - per_cycle_gy * cycles * sessions_per_cycle) <= SAME_DOSE_GY:
            return "the dose per cycle looks like the dose of one session"
        if abs(total_gy - per_cycle_gy * cycles / sessions_per_cycle) <= SAME_DOSE_GY:
            return "the number of cycles looks like the number of sessions"
    return ""
