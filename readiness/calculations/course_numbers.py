"""What follows from the numbers of a course: its dose, cycles of a week, and weeks if nothing disturbs it."""

import math


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
