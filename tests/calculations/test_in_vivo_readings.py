"""In-vivo readings: sums over sessions, action, boosts, and readings that cannot be used."""

import pytest

from readiness.calculations.day_one_gate import GATE_OPEN, GATE_SHUT, day_one_gate, expected_day_one_percent
from readiness.calculations.in_vivo_readings import (
    HIGH,
    INVESTIGATE,
    LOW,
    NOT_JUDGED,
    STOP,
    WITHIN,
    InVivoResult,
    evaluate_in_vivo,
)
from readiness.errors import OutsideValidity

Row = tuple[int, int, str, int, float]  # cycle, day, site, point, dose


def both_days(site: str, *sums: float, share: float = 0.4, cycle: int = 1) -> list[Row]:
    """Return readings of both days that add up to each sum at points 1, 2, ..."""
    return [
        (cycle, day, site, point, dose)
        for point, total in enumerate(sums, 1)
        for day, dose in ((1, share * total), (2, (1 - share) * total))
    ]


def evaluated(rows: list[Row], **changed: object) -> InVivoResult:
    """Return the evaluation of a cycle of 2 Gy with 5 and 10 % as action levels, 85 and 115 % for sites."""
    cycles, days, sites, points, doses = (list(column) for column in zip(*rows, strict=True))
    stated: dict[str, object] = {
        "cycle": 1,
        "cycles_of_course": 18,
        "sessions_per_cycle": 2,
        "dose_per_cycle_gy": 2.0,
        "single_reading_sd_percent": 4.0,
        "shared_sd_percent": 2.0,
        "investigate_beyond_percent": 5.0,
        "stop_beyond_percent": 10.0,
        "boost_below_percent": 85.0,
        "shield_above_percent": 115.0,
    }
    return evaluate_in_vivo(
        cycles=cycles,  # type: ignore[arg-type]
        sessions=days,  # type: ignore[arg-type]
        sites=sites,  # type: ignore[arg-type]
        points=points,  # type: ignore[arg-type]
        doses_cgy=doses,  # type: ignore[arg-type]
        **(stated | changed),  # type: ignore[arg-type]
    )


@pytest.mark.parametrize(
    ("mean", "action"),
    [(200, WITHIN), (209, WITHIN), (210, WITHIN), (211, INVESTIGATE), (189, INVESTIGATE), (221, STOP), (170, STOP)],
)
def test_action_follows_the_mean_at_the_prescription_level(mean: float, action: str) -> None:
    """Beyond 5 % the mean of three readings is investigated, beyond 10 % the course stops, either way."""
    result = evaluated(both_days("umbilicus", mean - 6, mean, mean + 6))
    assert action == result.action
    assert result.prescription_percent == pytest.approx(mean / 2)
    assert result.readings_at_prescription == 3


def test_fewer_than_three_readings_are_not_judged() -> None:
    """Two readings, or none, at the prescription level give no action, whatever they say."""
    assert evaluated(both_days("umbilicus", 100, 100)).action == NOT_JUDGED
    nothing = evaluated(both_days("chest", 200, 200, 200))
    assert (nothing.action, nothing.prescription_percent) == (NOT_JUDGED, None)
    assert any("0 complete readings at the prescription level" in said for said in nothing.remarks)


def test_uncertainty_of_the_mean_by_hand() -> None:
    """Three sums of two days 40:60 have sqrt(2^2 + 4^2 (0.4^2 + 0.6^2) / 3) = 2.6 % of uncertainty."""
    expected = (4 + 16 * 0.52 / 3) ** 0.5
    result = evaluated(both_days("umbilicus", 200, 200, 200))
    assert expected == pytest.approx(result.prescription_sd_percent)


def test_deviation_near_an_action_level_is_said() -> None:
    """A deviation nearer to an action level than its own uncertainty is said to be so."""
    said = evaluated(both_days("umbilicus", 208, 208, 208)).remarks
    assert any("The deviation of 4 % lies within one standard deviation (2.7 %) of the action level of 5 %" in s for s in said)


def test_low_sites_get_their_deficit_from_both_days() -> None:
    """A sole at 60 % lacks 0.8 Gy a cycle and 14.4 Gy over 18 cycles; the largest deficit stands first."""
    rows = both_days("palm", 160) + both_days("sole", 120, 120) + both_days("chest", 199)
    boosts = evaluated(rows).boosts
    assert ("sole", "palm") == boosts.column("site")
    assert (0.8, 0.4) == pytest.approx(boosts.column("deficit_per_cycle_gy"))
    assert (14.4, 7.2) == pytest.approx(boosts.column("deficit_over_course_gy"))
    assert boosts.column("readings") == (2, 1)


def test_outcome_of_each_site_is_a_word() -> None:
    """Low, high and ordinary sites are told apart, and the order is left to the physician."""
    result = evaluated(both_days("sole", 120) + both_days("foot-dorsum", 248) + both_days("chest", 200))
    assert result.sites.column("outcome") == (LOW, HIGH, "no action")
    assert any("ordered by the physician" in said for said in result.remarks)
    assert not any("physician" in said for said in evaluated(both_days("chest", 200)).remarks)


def test_dose_is_compared_with_what_was_published() -> None:
    """A chest at 80 % is lower than published, an ear at 110 % as published, for a sole there is no figure."""
    rows = both_days("chest", 160) + both_days("ear", 220) + both_days("sole", 190) + both_days("knee", 200)
    result = evaluated(rows)
    words = ("lower than published", "as published", "no range published", "nothing published")
    assert words == result.sites.column("against_published")
    assert "No expected dose is known for: knee." in result.remarks


def test_point_without_one_day_is_left_out_and_named() -> None:
    """A point read on one day only is not added up; a site with nothing else is missing from the table."""
    rows = [*both_days("umbilicus", 200, 200, 200), (1, 1, "sole", 1, 60.0), (1, 2, "umbilicus", 4, 120.0)]
    result = evaluated(rows)
    assert result.sites.column("site") == ("umbilicus",)
    assert "sole, point 1: no reading of day 2, so that it is not added up." in result.remarks
    assert "umbilicus, point 4: no reading of day 1, so that it is not added up." in result.remarks
    with pytest.raises(OutsideValidity, match="no site has readings of all 2 sessions"):
        evaluated([(1, 1, "sole", 1, 60.0)])


def test_other_cycles_do_not_mix_in() -> None:
    """Only the cycle asked for is evaluated."""
    rows = both_days("umbilicus", 200, 200, 200) + both_days("umbilicus", 100, 100, 100, cycle=2)
    assert evaluated(rows).prescription_percent == pytest.approx(100)
    assert evaluated(rows, cycle=2).prescription_percent == pytest.approx(50)


def test_repeats_of_one_day_are_averaged_and_that_is_said() -> None:
    """Two readings of one detector on one day count as their mean."""
    result = evaluated([*both_days("chest", 200), (1, 1, "chest", 1, 100.0)])
    assert result.sites.column("mean_cgy") == (210,)
    assert any("several readings of one day were averaged" in said for said in result.remarks)


def test_scatter_between_points_is_that_of_the_sums() -> None:
    """Sums of 190, 200 and 210 cGy scatter by 10 cGy; one point has no scatter."""
    assert evaluated(both_days("back", 190, 200, 210)).sites.column("scatter_cgy") == (pytest.approx(10),)
    assert evaluated(both_days("back", 190)).sites.column("scatter_cgy") == (None,)


def test_one_session_cycle_needs_one_day() -> None:
    """With one session in a cycle a single day is complete."""
    rows: list[Row] = [(1, 1, "umbilicus", point, 100.0) for point in (1, 2, 3)]
    assert evaluated(rows, sessions_per_cycle=1, dose_per_cycle_gy=1.0).action == WITHIN


@pytest.mark.parametrize(("factor", "unit"), [(0.01, "gray"), (100, "a hundredfold unit")])
def test_factor_of_a_hundred_is_refused(factor: float, unit: str) -> None:
    """Readings in gray under a column in centigray are refused with that suspicion, and the other way round."""
    rows = both_days("chest", *(factor * dose for dose in (150, 190, 210)))
    with pytest.raises(OutsideValidity, match=f"are they {unit} under a column in cGy"):
        evaluated(rows)


def test_low_readings_are_not_taken_for_gray() -> None:
    """A shielded eyelid at 10 % of the prescription among ordinary sites is evaluated."""
    result = evaluated(both_days("chest", 200) + both_days("eyelid", 20) + both_days("back", 200))
    assert result.sites.column("outcome")[1] == LOW


def test_site_that_received_nothing_is_low_and_certain_of_it() -> None:
    """A site with readings of 0 lacks the whole dose."""
    boosts = evaluated(both_days("sole", 0.0) + both_days("chest", 200) + both_days("back", 200)).boosts
    assert boosts.column("deficit_per_cycle_gy") == (2.0,)


def test_negative_reading_is_refused() -> None:
    """A negative reading names the background."""
    with pytest.raises(OutsideValidity, match="a reading at sole is negative"):
        evaluated([(1, 1, "sole", 1, -5.0), (1, 2, "sole", 1, 60.0)])


@pytest.mark.parametrize(
    ("changed", "message"),
    [
        ({"dose_per_cycle_gy": 0}, "a cycle has sessions and a dose"),
        ({"stop_beyond_percent": 4}, "investigated before it stops"),
        ({"boost_below_percent": 120}, "a boost is considered below"),
    ],
)
def test_impossible_levels_are_our_own_mistake(changed: dict[str, object], message: str) -> None:
    """Levels in the wrong order or a dose of 0 are impossible inputs."""
    with pytest.raises(ValueError, match=message):
        evaluated(both_days("chest", 200), **changed)


@pytest.mark.parametrize(
    ("dose", "gate"),
    [(74, GATE_OPEN), (54, GATE_OPEN), (103, GATE_OPEN), (52, GATE_SHUT), (105, GATE_SHUT)]
    + [(37 * 1.1, GATE_SHUT), (148 * 0.9, GATE_SHUT)],
)
def test_gate_after_day_one_finds_a_factor_of_two(dose: float, gate: str) -> None:
    """With 37 % expected on day 1 of 2 Gy, 74 cGy are expected; half and twice, read 10 % off, shut the gate."""
    doses = [dose - 3, dose, dose + 3]
    assert gate == day_one_gate(prescription_doses_cgy=doses, dose_per_cycle_gy=2, expected_day_one_percent=37)


def test_gate_needs_a_reading() -> None:
    """Without a reading there is no gate to pass."""
    with pytest.raises(OutsideValidity, match="no reading at the prescription level"):
        day_one_gate(prescription_doses_cgy=[], dose_per_cycle_gy=2, expected_day_one_percent=37)
    with pytest.raises(ValueError, match="a part of the cycle's dose"):
        day_one_gate(prescription_doses_cgy=[1], dose_per_cycle_gy=2, expected_day_one_percent=0)


def test_front_field_gives_one_part_in_b_on_day_one() -> None:
    """With B = 2.7 the front of the trunk gets 37 % of the cycle's dose from the front field alone."""
    assert expected_day_one_percent(b_factor=2.7) == pytest.approx(37.04, abs=0.01)
    assert expected_day_one_percent(b_factor=3) < expected_day_one_percent(b_factor=2.5)
    with pytest.raises(ValueError, match="B is more than 1"):
        expected_day_one_percent(b_factor=0.45)
