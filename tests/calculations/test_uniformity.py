"""Uniformity of profiles and maps."""

import numpy as np
import pytest

from readiness.calculations.uniformity import (
    coverage_length_cm,
    coverage_of_profile,
    ordered_profile,
    uniformity_of_map,
    uniformity_of_profile,
)
from readiness.errors import OutsideValidity

HEIGHTS = np.linspace(-110, 110, 23)


def test_flat_profile_has_no_departure_in_either_metric() -> None:
    """A flat profile has a half-range and a deviation of exactly zero."""
    result = uniformity_of_profile(positions_cm=HEIGHTS, doses=np.full(23, 0.7), half_length_cm=80)
    assert (result.half_range_percent, result.deviation_percent) == (0, 0)


def test_both_metrics_of_a_triangle_by_hand() -> None:
    """A profile falling from 1 to 0.8 at both limits has a half-range of 11.1 % and a deviation of 20 %."""
    result = uniformity_of_profile(positions_cm=HEIGHTS, doses=1 - 0.2 * abs(HEIGHTS) / 80, half_length_cm=80)
    assert result.half_range_percent == pytest.approx(100 * 0.2 / 1.8)
    assert result.deviation_percent == pytest.approx(20)
    assert (result.highest_at_cm, abs(result.lowest_at_cm)) == (0, 80)
    assert result.stricter_percent == result.deviation_percent


def test_half_range_can_exceed_half_the_deviation_but_never_the_deviation() -> None:
    """The deviation from the centre is never smaller than the half-range."""
    random = np.random.default_rng(3)
    for _ in range(50):
        result = uniformity_of_profile(positions_cm=HEIGHTS, doses=random.uniform(0.5, 1.5, 23), half_length_cm=90)
        assert result.deviation_percent >= result.half_range_percent - 1e-9


def test_normalisation_does_not_matter() -> None:
    """Readings in any unit give the same uniformity."""
    doses = 1 - 0.1 * (HEIGHTS / 100) ** 2
    one, other = (
        uniformity_of_profile(positions_cm=HEIGHTS, doses=factor * doses, half_length_cm=80) for factor in (1, 37)
    )
    assert other.half_range_percent == pytest.approx(one.half_range_percent)
    assert other.deviation_percent == pytest.approx(one.deviation_percent)


def test_order_of_readings_does_not_matter() -> None:
    """Readings taken in any order give the same uniformity."""
    doses = 1 - 0.1 * (HEIGHTS / 100) ** 2
    backwards = uniformity_of_profile(positions_cm=HEIGHTS[::-1], doses=doses[::-1], half_length_cm=80)
    assert uniformity_of_profile(positions_cm=HEIGHTS, doses=doses, half_length_cm=80) == backwards


def test_limits_between_points_are_interpolated() -> None:
    """A limit that falls between two readings uses the straight line between them."""
    result = uniformity_of_profile(positions_cm=HEIGHTS, doses=1 - 0.2 * abs(HEIGHTS) / 80, half_length_cm=75)
    assert result.lowest == pytest.approx(1 - 0.2 * 75 / 80)


def test_a_longer_length_is_never_more_uniform() -> None:
    """Judging over a longer length cannot improve the half-range."""
    doses = 1 + 0.05 * np.sin(HEIGHTS / 15)
    ranges = [
        uniformity_of_profile(positions_cm=HEIGHTS, doses=doses, half_length_cm=half).half_range_percent
        for half in (40, 60, 80, 100)
    ]
    assert ranges == sorted(ranges)


def test_profile_that_does_not_reach_the_limits_is_refused() -> None:
    """A profile to +-70 cm says nothing about +-80 cm, and the message gives both."""
    part = HEIGHTS[(HEIGHTS >= -70) & (HEIGHTS <= 70)]
    with pytest.raises(OutsideValidity, match=r"covers -70 to 70 cm and does not reach the limits of -80 to 80"):
        uniformity_of_profile(positions_cm=part, doses=np.ones_like(part), half_length_cm=80)


def test_profile_that_reaches_one_limit_only_is_refused() -> None:
    """A profile shifted to one side is refused, not extrapolated."""
    with pytest.raises(OutsideValidity, match="does not reach"):
        uniformity_of_profile(positions_cm=HEIGHTS + 40, doses=np.ones(23), half_length_cm=80)


def test_too_few_points_are_refused() -> None:
    """Three points do not make a profile."""
    with pytest.raises(OutsideValidity, match="at least 5 are needed"):
        uniformity_of_profile(positions_cm=[-90, 0, 90], doses=[1, 1, 1], half_length_cm=80)


@pytest.mark.parametrize(
    ("positions", "doses", "words"),
    [
        ([-90, 0, 0, 90], [1, 1, 1, 1], "stands twice"),
        ([-90, 0, 90], [1, -0.1, 1], "negative reading"),
        ([-90, 0, 90], [1, 1], "one dose for each position"),
        ([-90, 0, float("nan")], [1, 1, 1], "not finite"),
    ],
)
def test_what_is_not_a_profile_is_refused(positions: list[float], doses: list[float], words: str) -> None:
    """Impossible profiles raise an error that names the fault."""
    with pytest.raises(ValueError, match=words):
        ordered_profile(positions_cm=positions, doses=doses)


def test_nothing_but_zeros_is_refused() -> None:
    """Dark film has no uniformity."""
    with pytest.raises(ValueError, match="zeros"):
        uniformity_of_profile(positions_cm=HEIGHTS, doses=np.zeros(23), half_length_cm=80)


def test_length_must_be_positive() -> None:
    """A length of zero is impossible."""
    with pytest.raises(ValueError, match="must be positive"):
        uniformity_of_profile(positions_cm=HEIGHTS, doses=np.ones(23), half_length_cm=0)


def test_map_of_a_product_has_its_extremes_at_centre_and_corner() -> None:
    """A map that falls both ways is lowest in a corner of the rectangle, by the product of both falls."""
    across = np.linspace(-40, 40, 17)
    doses = np.outer(1 - 0.1 * (HEIGHTS / 100) ** 2, 1 - 0.2 * (across / 40) ** 2)
    result = uniformity_of_map(
        heights_cm=HEIGHTS, across_cm=across, doses=doses, half_length_cm=100, half_width_cm=40
    )
    assert result.lowest == pytest.approx(0.9 * 0.8)
    assert (abs(result.lowest_at_height_cm), abs(result.lowest_at_across_cm)) == (100, 40)
    assert result.half_range_percent == pytest.approx(100 * (1 - 0.72) / 1.72)
    assert result.deviation_percent == pytest.approx(28)


def test_map_that_does_not_reach_its_rectangle_is_refused() -> None:
    """A map 80 cm wide says nothing about 100 cm."""
    across = np.linspace(-40, 40, 17)
    with pytest.raises(OutsideValidity, match="does not reach"):
        uniformity_of_map(
            heights_cm=HEIGHTS, across_cm=across, doses=np.ones((23, 17)), half_length_cm=100, half_width_cm=50
        )


def test_map_with_swapped_axes_is_refused() -> None:
    """A map handed over with height and width swapped is refused."""
    across = np.linspace(-40, 40, 17)
    with pytest.raises(ValueError, match="each height and position across"):
        uniformity_of_map(
            heights_cm=HEIGHTS, across_cm=across, doses=np.ones((17, 23)), half_length_cm=100, half_width_cm=40
        )


def test_coverage_of_an_adult() -> None:
    """A patient of 175 cm with raised arms needs 219 cm."""
    assert coverage_length_cm(standing_height_cm=175) == pytest.approx(218.75)


def test_ends_of_the_patient_are_referred_to_mid_height() -> None:
    """Soles and hands are given relative to mid-height, extremes included."""
    doses = 0.5 * (1 + 0.2 * HEIGHTS / 100)
    result = coverage_of_profile(positions_cm=HEIGHTS, doses=doses, soles_cm=-100, hands_cm=105)
    assert (result.at_soles, result.at_hands) == pytest.approx((0.8, 1.21))
    assert (result.lowest, result.highest) == pytest.approx((0.8, 1.21))


def test_hands_beyond_the_measured_length_are_refused() -> None:
    """A patient taller than the measured length is not judged from it."""
    with pytest.raises(OutsideValidity, match="does not reach"):
        coverage_of_profile(positions_cm=HEIGHTS, doses=np.ones(23), soles_cm=-100, hands_cm=120)
