"""
Waiting for a start: random referrals, courses of fixed length, a number of places, first come first served.

Everything is repeatable: one seed, and the same random numbers for every number of places and every rate of
referral, so that two answers differ only because their inputs do.
"""

import heapq
import math
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from readiness.calculations.patient_flow import WEEKS_PER_YEAR, checked_courses, patients_under_treatment
from readiness.errors import OutsideValidity
from readiness.quantities import Table, Uncertain

SEED = 20_261_201
SIMULATED_PATIENTS = 60_000
NOT_COUNTED = 0.1  # share of the patients at the beginning, while the program fills up
BATCHES = 20  # for the standard error of a mean from one long run
FloatArray = NDArray[np.float64]


@dataclass(frozen=True)
class Waiting:
    """What a long run shows: waits, and means over the time."""

    mean_wait_weeks: Uncertain
    nine_in_ten_wait_weeks: float
    share_with_wait: float
    mean_under_treatment_patients: float
    mean_waiting_patients: float
    share_of_time_in_use: float


def simulated_starts(
    *, gaps_weeks: FloatArray, stays_weeks: FloatArray, places: int
) -> tuple[FloatArray, FloatArray]:
    """
    Return when patients are referred and when they start.

    Each starts when referred or when the next place is free, whichever is later (Kiefer and Wolfowitz).

    Args:
        gaps_weeks: Time from the referral before to each referral, shape (n,). [weeks]
        stays_weeks: Length of each patient's course, shape (n,). [weeks]
        places: Patients who may be under treatment at once. [1]

    Returns:
        Times of referral and of start, in weeks from the beginning, each of shape (n,).

    Raises:
        ValueError: If there is no place, or the two arrays differ in length.

    Valid for: first come, first served; nobody gives up waiting.
    Assumes: that the program is empty at the beginning.
    Source: kiefer-wolfowitz-1955, recursion for many servers (memory).
    """
    if places < 1:
        raise ValueError(f"{places} places hold no patient")
    if gaps_weeks.shape != stays_weeks.shape:
        raise ValueError("each referral needs a gap and a stay")
    referred = np.cumsum(gaps_weeks)
    free = [0.0] * places
    starts = np.empty_like(referred)
    for index, (moment, stay) in enumerate(zip(referred.tolist(), stays_weeks.tolist(), strict=True)):
        start = max(moment, free[0])
        heapq.heapreplace(free, start + stay)
        starts[index] = start
    return referred, starts


def observed_waiting(
    *, referred_weeks: FloatArray, starts_weeks: FloatArray, stays_weeks: FloatArray
) -> Waiting:
    """
    Return waits and means over the time of one long run.

    Args:
        referred_weeks: Times of referral, in order, shape (n,). [weeks]
        starts_weeks: Times of start, shape (n,). [weeks]
        stays_weeks: Lengths of the courses, shape (n,). [weeks]

    Returns:
        The waits, and the numbers of patients integrated over the time that is counted.

    Raises:
        ValueError: If the run is shorter than 1,000 patients.

    Valid for: a program that keeps up with its referrals.
    Assumes: that after the first tenth of the patients the beginning is forgotten.
    Source: law-kelton, batch means (memory).
    """
    count = len(referred_weeks)
    if count < 1_000:
        raise ValueError(f"a run of {count} patients says nothing about the long run")
    first = int(count * NOT_COUNTED)
    opened, closed = referred_weeks[first], referred_weeks[-1]
    ends = starts_weeks + stays_weeks
    waits = (starts_weeks - referred_weeks)[first:]
    batches = np.array([part.mean() for part in np.array_split(waits, BATCHES)])
    ended_before = np.concatenate(([0.0], np.maximum.accumulate(ends)[:-1]))
    return Waiting(
        mean_wait_weeks=Uncertain(float(waits.mean()), float(batches.std(ddof=1) / math.sqrt(BATCHES))),
        nine_in_ten_wait_weeks=float(np.quantile(waits, 0.9)),
        share_with_wait=float(np.mean(waits > 1e-9)),
        mean_under_treatment_patients=_mean_present(starts_weeks, ends, opened, closed),
        mean_waiting_patients=_mean_present(referred_weeks, starts_weeks, opened, closed),
        share_of_time_in_use=_mean_present(np.maximum(starts_weeks, ended_before), ends, opened, closed),
    )


@lru_cache(maxsize=64)
def long_run(*, courses: Table, places: int) -> Waiting:
    """
    Return what a long run of the stated mix shows.

    Args:
        courses: The mix of courses, with the columns of patient_flow.COURSES.
        places: Patients who may be under treatment at once. [1]

    Returns:
        Waits and means over the time.

    Raises:
        ValueError: If the mix or the number of places is impossible.

    Valid for: places that keep up with the referrals.
    Assumes: referrals at random (Poisson), fixed course lengths, first come first served, no holidays.
    Source: kiefer-wolfowitz-1955 (memory), simulated.
    """
    gaps, stays = _draws(courses)
    referred, starts = simulated_starts(gaps_weeks=gaps, stays_weeks=stays, places=places)
    return observed_waiting(referred_weeks=referred, starts_weeks=starts, stays_weeks=stays)


def wait_for_start(*, courses: Table, places: int) -> Uncertain:
    """
    Return the mean wait from referral to the first session.

    Args:
        courses: The mix of courses, with the columns of patient_flow.COURSES.
        places: Patients who may be under treatment at once. [1]

    Returns:
        Mean wait, with the standard error of the simulation. [weeks]

    Raises:
        ValueError: If the mix or the number of places is impossible.
        OutsideValidity: If the referrals exceed the places, so that the wait grows without end.

    Valid for: the long run; the wait beyond the work-up that every patient needs.
    Assumes: referrals at random (Poisson), fixed course lengths, first come first served, no holidays.
    Source: kiefer-wolfowitz-1955 (memory), simulated.
    """
    load = patients_under_treatment(courses=courses)
    if load >= places:
        raise OutsideValidity(
            f"referrals for {load:.2f} patients at once are more than the places ({places}): the wait grows "
            "without end"
        )
    return long_run(courses=courses, places=places).mean_wait_weeks


def share_started_in_time(*, courses: Table, places: int, longest_wait_weeks: float) -> float:
    """
    Return the share of patients who start within a stated wait; 0 when the wait grows without end.

    Args:
        courses: The mix of courses, with the columns of patient_flow.COURSES.
        places: Patients who may be under treatment at once. [1]
        longest_wait_weeks: Wait from referral to the first session that the department accepts. [weeks]

    Returns:
        Share of the patients. [1]

    Raises:
        ValueError: If the mix, the number of places or the wait is impossible.

    Valid for: the long run.
    Assumes: referrals at random (Poisson), fixed course lengths, first come first served, no holidays.
    Source: kiefer-wolfowitz-1955 (memory), simulated.
    """
    if longest_wait_weeks < 0:
        raise ValueError("an accepted wait cannot be negative")
    if patients_under_treatment(courses=courses) >= places:
        return 0.0
    return share_at_rate(courses=courses, places=places, longest_wait_weeks=longest_wait_weeks, multiple=1.0)


@lru_cache(maxsize=512)
def share_at_rate(*, courses: Table, places: int, longest_wait_weeks: float, multiple: float) -> float:
    """
    Return the share of patients who start in time when the stated mix comes a multiple as often.

    Args:
        courses: The mix of courses, with the columns of patient_flow.COURSES.
        places: Patients who may be under treatment at once. [1]
        longest_wait_weeks: Wait from referral to the first session that the department accepts. [weeks]
        multiple: Referrals as a multiple of the stated ones. [1]

    Returns:
        Share of the patients in one long run. [1]

    Raises:
        ValueError: If the mix or the number of places is impossible.

    Valid for: multiples at which the places keep up; beyond, the share depends on the length of the run.
    Assumes: the same random numbers for every multiple, so that the share falls steadily with it.
    Source: kiefer-wolfowitz-1955 (memory), simulated.
    """
    if multiple <= 0:
        return 1.0
    gaps, stays = _draws(courses)
    referred, starts = simulated_starts(gaps_weeks=gaps / multiple, stays_weeks=stays, places=places)
    counted = int(len(gaps) * NOT_COUNTED)
    return float(np.mean((starts - referred)[counted:] <= longest_wait_weeks + 1e-9))


def check_share_in_time(*, share_in_time: float) -> None:
    """
    Refuse a share that no number of places reaches for certain.

    Args:
        share_in_time: Share of the patients who must start in time. [1]

    Returns:
        Nothing.

    Raises:
        ValueError: If the share is not between 0 and 1.

    Valid for: shares asked of a long run.
    Assumes: nothing.
    Source: definition (derived).
    """
    if not 0 < share_in_time < 1:
        raise ValueError("the share that starts in time lies between 0 and 1, both excluded")


@lru_cache(maxsize=64)
def _draws(courses: Table) -> tuple[FloatArray, FloatArray]:
    """Return the gaps between referrals in weeks and the stays, from the one seed."""
    mix = checked_courses(courses=courses)
    rates = np.array([row[0] for row in mix])
    if rates.sum() <= 0:
        raise ValueError("a mix without patients brings no referral")
    generator = np.random.default_rng(SEED)
    gaps = generator.exponential(1.0, SIMULATED_PATIENTS) * (WEEKS_PER_YEAR / rates.sum())
    which = np.searchsorted(np.cumsum(rates / rates.sum()), generator.random(SIMULATED_PATIENTS))
    stays = np.array([row[4] for row in mix])[np.minimum(which, len(mix) - 1)]
    return gaps, stays


def _mean_present(arrivals: FloatArray, departures: FloatArray, opened: float, closed: float) -> float:
    """Return the mean number present between two moments, integrated over the time."""
    overlap = np.minimum(departures, closed) - np.maximum(arrivals, opened)
    return float(np.maximum(overlap, 0.0).sum() / (closed - opened))
