"""How the dose behind a barrier stands to what is allowed: in a week, in any one hour, in a year."""

from dataclasses import dataclass
from math import isfinite

from readiness.calculations.barrier_equations import WEEKS_A_YEAR, hour_from_week_usv


@dataclass(frozen=True)
class AnyHourDose:
    """Largest dose in 60 consecutive minutes, no occupancy counted, and what it is made of."""

    usv_in_any_hour: float
    photon_only_usv_in_any_hour: float
    per_session_usv: float
    sessions_usv_in_any_hour: float
    photon_rest_usv_in_any_hour: float
    governed_by: str


@dataclass(frozen=True)
class GoalMargin:
    """How a weekly dose stands to its design goal; the share is dose / goal."""

    share_of_goal: float
    within_goal: bool
    margin_is_small: bool


def goal_margin(
    *, dose_usv_per_week: float, design_goal_msv_per_week: float, survey_margin_ratio: float
) -> GoalMargin:
    """
    Return how a weekly dose stands to the design goal.

    Args:
        dose_usv_per_week: Weekly dose, occupancy counted. [µSv/week]
        design_goal_msv_per_week: Weekly design goal P. [mSv/week]
        survey_margin_ratio: Part of the goal above which the margin is named as small; 0.25, because Monte
            Carlo layers can give up to 4 times the tabulated transmission. [1]

    Returns:
        Dose / goal, whether it is within the goal (the goal itself is), and whether the margin is small.

    Raises:
        ValueError: If the dose is below zero or the goal not above zero.

    Source: derived; factor 4 as read in Monte Carlo comparisons.
    """
    if not (isfinite(dose_usv_per_week) and dose_usv_per_week >= 0.0 and design_goal_msv_per_week > 0.0):
        raise ValueError("a dose is not below zero and a design goal above zero")
    share = dose_usv_per_week / (design_goal_msv_per_week * 1e3)
    return GoalMargin(share, share <= 1.0, share > survey_margin_ratio)


def any_hour_dose(
    *,
    before_rate_usv_per_week: float,
    added_rate_usv_per_week: float,
    cycles_per_week: float,
    sessions_per_cycle: float,
    sessions_in_hour: float,
    session_room_min: float | None,
    busiest_hour_ratio: float,
) -> AnyHourDose:
    """
    Return the largest dose in any one hour, from the sessions that fit into it and photon work beside them.

    R_h = the larger of (M/40) R_w and n H_session + (1 - n t/60) (M/40) R_w

    Args:
        before_rate_usv_per_week: Existing dose of a week without occupancy, R_w. [µSv/week]
        added_rate_usv_per_week: Added dose of that week without occupancy. [µSv/week]
        cycles_per_week: Cycles that the added dose is of, extra MU included. [per week]
        sessions_per_cycle: Sessions that make a cycle. [1]
        sessions_in_hour: Sessions that can be delivered in 60 consecutive minutes, n. [1]
        session_room_min: Time for which a session keeps the room from photon work, t; None leaves the
            whole hour to photon work as well, an upper bound. [min]
        busiest_hour_ratio: Most photon patients in one hour / mean patients an hour, M. [1]

    Returns:
        The dose, its parts, and which of both cases governs.

    Raises:
        ValueError: If a number is outside its meaning.

    Valid for: limits in any one hour, which count no occupancy.
    Assumes: sessions of equal dose.
    Source: ncrp-151, Eq. 3.13-3.14 (memory) for the photon part; sessions derived.
    """
    if not (cycles_per_week > 0.0 and sessions_per_cycle > 0.0):
        raise ValueError("cycles a week and sessions a cycle must be above zero")
    if not (sessions_in_hour >= 0.0 and added_rate_usv_per_week >= 0.0):
        raise ValueError("sessions in an hour and the added dose must not be below zero")
    photon = hour_from_week_usv(
        weekly_rate_usv_per_week=before_rate_usv_per_week, busiest_hour_ratio=busiest_hour_ratio
    )
    per_session = added_rate_usv_per_week / cycles_per_week / sessions_per_cycle
    taken = 0.0 if session_room_min is None else sessions_in_hour * session_room_min / 60.0
    rest = photon * max(0.0, 1.0 - taken)
    sessions = per_session * sessions_in_hour
    largest = max(photon, sessions + rest)
    words = "photon work alone" if photon > sessions + rest else "sessions of the added program"
    return AnyHourDose(largest, photon, per_session, sessions, rest, words)


def annual_dose_msv(
    *,
    before_usv_per_week: float,
    added_usv_per_week: float,
    cycles_per_week: float,
    cycles_per_year: float | None,
) -> float:
    """
    Return the dose of a year.

    50 (before + added), or 50 before + added per cycle x cycles a year where these are known

    Args:
        before_usv_per_week: Existing dose of a week. [µSv/week]
        added_usv_per_week: Added dose of the peak week. [µSv/week]
        cycles_per_week: Cycles of that week. [per week]
        cycles_per_year: Cycles of a year; None takes 50 peak weeks, an upper bound. [per year]

    Returns:
        Dose of a year. [mSv/year]

    Raises:
        ValueError: If a number is below zero, or no cycles are in the week.

    Source: ncrp-151, 50 weeks a year (read as quoted); cycles derived.
    """
    known = (before_usv_per_week, added_usv_per_week, 0.0 if cycles_per_year is None else cycles_per_year)
    if not (all(isfinite(each) and each >= 0.0 for each in known) and cycles_per_week > 0.0):
        raise ValueError("doses and cycles must not be below zero, and the week needs cycles")
    before = WEEKS_A_YEAR * before_usv_per_week
    if cycles_per_year is None:
        return (before + WEEKS_A_YEAR * added_usv_per_week) / 1e3
    return (before + added_usv_per_week / cycles_per_week * cycles_per_year) / 1e3


def week_of_tests_usv(
    *, before_usv_per_week: float, added_usv_per_week: float, added_mu: float, tests_mu: float
) -> float:
    """
    Return the dose of a week in which the mode is used for tests alone.

    H = H_before + H_added x MU of the tests / MU of the addition

    Args:
        before_usv_per_week: Existing dose of a week. [µSv/week]
        added_usv_per_week: Added dose of the peak week. [µSv/week]
        added_mu: All MU that the added dose is of. [MU]
        tests_mu: MU of the tests in their week. [MU]

    Returns:
        Dose of that week. [µSv/week]

    Raises:
        ValueError: If a number is below zero or the addition has no MU.

    Assumes: tests with the same fields as treatments, a scattering body in the patient's place.
    Source: derived.
    """
    known = (before_usv_per_week, added_usv_per_week, tests_mu)
    if not (all(isfinite(each) and each >= 0.0 for each in known) and added_mu > 0.0):
        raise ValueError("doses and MU must not be below zero, and the addition needs MU")
    return before_usv_per_week + added_usv_per_week * tests_mu / added_mu
