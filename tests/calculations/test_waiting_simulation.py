"""Waits, against theory and against an independent simulator."""

import math

import numpy as np
import pytest

from readiness.calculations.patient_flow import COURSES, WEEKS_PER_YEAR, patients_under_treatment
from readiness.calculations.waiting_simulation import (
    long_run,
    observed_waiting,
    share_at_rate,
    share_started_in_time,
    simulated_starts,
    wait_for_start,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

MIX = Table.of(COURSES, [("long", 5, 36, 2, 4, 10), ("short", 3, 12, 2, 4, 3)])


def one_course(patients_per_year: float, weeks: float = 10.0) -> Table:
    """Return a mix of one course."""
    return Table.of(COURSES, [("long", patients_per_year, 36, 2, 4, weeks)])


def erlang_wait(*, rate: float, mean_stay: float, places: int) -> tuple[float, float]:
    """Return the chance of a wait and the mean wait with random referrals and exponential stays (Erlang, 1917)."""
    load = rate * mean_stay
    blocked = 1.0
    for servers in range(1, places + 1):  # Erlang's loss formula, server by server
        blocked = load * blocked / (servers + load * blocked)
    waits = places * blocked / (places - load * (1 - blocked))
    return waits, waits * mean_stay / (places - load)


def exponential_run(*, rate: float, mean_stay: float, places: int, patients: int = 200_000):
    """Return what our simulator shows when the stays are exponential."""
    generator = np.random.default_rng(5)
    gaps = generator.exponential(1 / rate, patients)
    stays = generator.exponential(mean_stay, patients)
    referred, starts = simulated_starts(gaps_weeks=gaps, stays_weeks=stays, places=places)
    return observed_waiting(referred_weeks=referred, starts_weeks=starts, stays_weeks=stays)


def test_erlangs_formula_closes_by_hand():
    """Two places with a load of 1.5 make 9 in 14 wait: 2 r^2 / (1 + r) with r = 0.75."""
    assert erlang_wait(rate=0.15, mean_stay=10, places=2)[0] == pytest.approx(9 / 14)


@pytest.mark.parametrize(("load", "places"), [(0.5, 1), (1.13, 2), (1.5, 2), (2.0, 3)])
def test_exponential_stays_give_erlangs_formula(load, places):
    """The share that waits and the mean wait agree with Erlang's within four standard errors."""
    chance, mean = erlang_wait(rate=load / 10, mean_stay=10, places=places)
    seen = exponential_run(rate=load / 10, mean_stay=10, places=places)
    assert abs(seen.mean_wait_weeks.value - mean) < 4 * seen.mean_wait_weeks.sd
    assert seen.share_with_wait == pytest.approx(chance, abs=0.02)


@pytest.mark.parametrize("load", [0.3, 0.6])
def test_one_place_and_fixed_stays_give_half_of_the_exponential_wait(load):
    """With one place and fixed courses the mean wait is r W / (2 (1 - r)) (Pollaczek and Khinchine)."""
    seen = wait_for_start(courses=one_course(load * WEEKS_PER_YEAR / 10), places=1)
    assert abs(seen.value - load * 10 / (2 * (1 - load))) < 4 * seen.sd


def test_one_place_and_mixed_stays_follow_the_second_moment():
    """With one place the mean wait of a mix is lambda E[W^2] / (2 (1 - load)) (Pollaczek and Khinchine)."""
    courses = Table.of(COURSES, [("long", 2, 36, 2, 4, 10), ("short", 4, 12, 2, 4, 3)])
    rate, second = 6 / WEEKS_PER_YEAR, (2 * 100 + 4 * 9) / 6
    expected = rate * second / (2 * (1 - patients_under_treatment(courses=courses)))
    seen = wait_for_start(courses=courses, places=1)
    assert abs(seen.value - expected) < 4 * seen.sd


@pytest.mark.parametrize("places", [2, 3, 4])
def test_numbers_present_follow_littles_law(places):
    """Means over the time equal rate times mean duration, though they are integrated and not multiplied."""
    seen = long_run(courses=MIX, places=places)
    assert seen.mean_under_treatment_patients == pytest.approx(patients_under_treatment(courses=MIX), rel=0.02)
    waiting = 8 / WEEKS_PER_YEAR * seen.mean_wait_weeks.value
    assert seen.mean_waiting_patients == pytest.approx(waiting, rel=0.02)


def test_without_limit_of_places_the_time_in_use_is_that_of_the_poisson_law():
    """With ample places nobody waits, and the room is in use in 1 - exp(-L) of the time."""
    seen = long_run(courses=MIX, places=30)
    assert seen.mean_wait_weeks.value == 0
    assert seen.nine_in_ten_wait_weeks == 0
    in_use = 1 - math.exp(-patients_under_treatment(courses=MIX))
    assert seen.share_of_time_in_use == pytest.approx(in_use, abs=0.01)


def test_one_place_is_in_use_for_its_load():
    """With one place the time in use is the load itself."""
    seen = long_run(courses=one_course(0.6 * WEEKS_PER_YEAR / 10), places=1)
    assert seen.share_of_time_in_use == pytest.approx(0.6, rel=0.02)


@pytest.mark.parametrize("places", [2, 3])
def test_fixed_stays_agree_with_an_independent_simulator(places):
    """An independent open simulator of queues (ciw) gives the same mean wait within its spread and ours."""
    import ciw

    network = ciw.create_network(
        arrival_distributions=[ciw.dists.Exponential(rate=8 / WEEKS_PER_YEAR)],
        service_distributions=[ciw.dists.Empirical(observations=[10.0] * 5 + [3.0] * 3)],
        number_of_servers=[places],
    )
    means = []
    for seed in range(8):
        ciw.seed(seed)
        simulation = ciw.Simulation(network)
        simulation.simulate_until_max_time(11_000.0)
        waits = [record.waiting_time for record in simulation.get_all_records() if record.arrival_date > 1_000]
        means.append(np.mean(waits))
    seen = wait_for_start(courses=MIX, places=places)
    spread = math.hypot(np.std(means, ddof=1) / math.sqrt(len(means)), seen.sd)
    assert abs(seen.value - np.mean(means)) < 4 * spread
    assert spread < 0.1 * seen.value, "the comparison must be able to fail"


def test_starts_by_hand():
    """With two places the third patient starts when the first ends, the fourth when the third ends before the second."""
    referred, starts = simulated_starts(
        gaps_weeks=np.array([1.0, 1.0, 1.0, 1.0]), stays_weeks=np.array([5.0, 9.0, 2.0, 4.0]), places=2
    )
    assert [1, 2, 3, 4] == referred.tolist()
    assert [1, 2, 6, 8] == starts.tolist()


def test_same_input_gives_same_numbers():
    """The simulation is repeatable to the last digit."""
    first = long_run(courses=MIX, places=2)
    long_run.cache_clear()
    assert first == long_run(courses=MIX, places=2)


def test_more_places_shorten_the_wait_and_more_referrals_lengthen_it():
    """The wait falls with places, and the share in time falls with referrals and grows with the accepted wait."""
    assert wait_for_start(courses=MIX, places=2).value > wait_for_start(courses=MIX, places=3).value
    shares = [share_at_rate(courses=MIX, places=2, longest_wait_weeks=2, multiple=m) for m in (0, 0.5, 1, 1.5)]
    assert shares == sorted(shares, reverse=True)
    assert shares[0] == 1
    assert share_started_in_time(courses=MIX, places=2, longest_wait_weeks=6) > shares[2]


def test_too_few_places_let_the_wait_grow_without_end():
    """A mean wait is refused with the reason, and no patient is said to start in time."""
    assert share_started_in_time(courses=MIX, places=1, longest_wait_weeks=50) == 0
    with pytest.raises(OutsideValidity, match=r"1\.13 patients at once are more than the places \(1\)"):
        wait_for_start(courses=MIX, places=1)


def test_impossible_questions_are_refused():
    """No place, negative waits, mixes without patients and short runs have no answer."""
    some = np.ones(5)
    with pytest.raises(ValueError, match="hold no patient"):
        simulated_starts(gaps_weeks=some, stays_weeks=some, places=0)
    with pytest.raises(ValueError, match="a gap and a stay"):
        simulated_starts(gaps_weeks=some, stays_weeks=np.ones(4), places=1)
    with pytest.raises(ValueError, match="run of 5 patients"):
        observed_waiting(referred_weeks=some, starts_weeks=some, stays_weeks=some)
    with pytest.raises(ValueError, match="cannot be negative"):
        share_started_in_time(courses=MIX, places=2, longest_wait_weeks=-1)
    with pytest.raises(ValueError, match="brings no referral"):
        wait_for_start(courses=one_course(0), places=1)
