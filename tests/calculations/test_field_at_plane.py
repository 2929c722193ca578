"""Profiles and maps at the plane."""

import numpy as np
import pytest
from beam_setups import common_setup

from readiness.calculations.field_at_plane import (
    dual_field_doses,
    even_grid,
    map_table,
    profile_table,
    single_field_doses,
)
from readiness.calculations.plane_uniformity import uniformity_of_plane
from readiness.errors import OutsideValidity

HEIGHTS = np.linspace(-100, 100, 41)


def dual(mid_height: float = 0.0, tilts: tuple[float, float] = (16.0, 16.0), share: float = 0.5) -> np.ndarray:
    """Return the vertical profile of a dual field."""
    return dual_field_doses(
        setup=common_setup(),
        plane_distance_cm=400.0,
        tilt_toward_head_deg=tilts[0],
        tilt_toward_feet_deg=tilts[1],
        mid_height_cm=mid_height,
        mu_share_upper=share,
        heights_cm=HEIGHTS,
        across_cm=np.array([0.0]),
    )[:, 0]


def test_doses_are_one_at_mid_height() -> None:
    """A dual field is relative to mid-height, wherever that stands."""
    for mid_height in (0.0, -12.0, 9.0):
        assert dual(mid_height)[20] == pytest.approx(1.0)


def test_ten_centimetres_off_the_axis_are_harmless_and_twenty_five_are_not() -> None:
    """At 400 cm and 16 degrees patients 10 cm off the axis keep 8 % of mid-height over +-80 cm, 25 cm off do not."""
    judged = np.abs(HEIGHTS) <= 80

    def departure(mid_height: float) -> float:
        """Return the largest departure from mid-height in per cent."""
        return float(100 * np.max(np.abs(dual(mid_height)[judged] - 1)))

    assert departure(10.0) < 5
    assert departure(-10.0) < 5
    assert departure(25.0) > 8
    assert departure(-25.0) > 8


def test_mid_height_above_the_isocentre_starves_the_head() -> None:
    """A patient who stands 10 cm too high gets less at the head than at the feet, and the mirror image if too low."""
    high = dual(10.0)
    assert high[-1] < high[0]
    assert dual(-10.0) == pytest.approx(high[::-1])


def test_unequal_tilts_answer_an_unequal_height() -> None:
    """Aiming the upper field higher gives the head of a patient who stands high more dose."""
    assert dual(10.0, (17.5, 15.5))[-1] > dual(10.0)[-1]


def test_zero_tilt_is_the_single_field() -> None:
    """Two horizontal fields are one."""
    single = single_field_doses(setup=common_setup(), plane_distance_cm=400.0, tilt_deg=0.0, heights_cm=HEIGHTS)
    assert dual(tilts=(0.0, 0.0)) == pytest.approx(single)


def test_field_aimed_down_is_the_mirror_image() -> None:
    """A negative tilt aims at the feet."""
    up, down = (
        single_field_doses(setup=common_setup(), plane_distance_cm=400.0, tilt_deg=tilt, heights_cm=HEIGHTS) for tilt in (16, -16)
    )
    assert down == pytest.approx(up[::-1])
    assert up[-1] > up[0]


@pytest.mark.parametrize(("tilts", "share", "words"), [((16.0, -16.0), 0.5, "positive angles"), ((16.0, 16.0), 1.0, "between 0 and 1")])
def test_impossible_pairs_are_refused(tilts: tuple[float, float], share: float, words: str) -> None:
    """Both tilts are positive and both fields get MU."""
    with pytest.raises(ValueError, match=words):
        dual(tilts=tilts, share=share)


def test_grid_holds_its_ends_and_the_middle() -> None:
    """A grid is symmetric, with an odd number of points and steps no larger than asked."""
    grid = even_grid(half_length_cm=77.0, step_cm=5.0)
    assert (grid[0], grid[len(grid) // 2], grid[-1]) == (-77, 0, 77)
    assert np.diff(grid).max() <= 5.0
    with pytest.raises(ValueError, match="must be positive"):
        even_grid(half_length_cm=0.0, step_cm=1.0)


def test_tables_carry_the_doses() -> None:
    """Profile and map become rows with units in the names of their columns."""
    profile = profile_table(positions_cm=[0, 10], doses=[1, 0.9], position_name="height")
    assert profile.columns == ("height_cm", "relative_dose")
    assert profile.rows == ((0.0, 1.0), (10.0, 0.9))
    plane = map_table(heights_cm=[0, 10], across_cm=[-5, 0, 5], doses=np.arange(6).reshape(2, 3))
    assert plane.rows[3] == (10.0, -5.0, 3.0)
    with pytest.raises(ValueError, match="each height and position"):
        map_table(heights_cm=[0], across_cm=[-5, 0, 5], doses=np.arange(6).reshape(2, 3))


def plane_doses() -> tuple[np.ndarray, np.ndarray]:
    """Return positions across and a dual field over the plane."""
    across = np.linspace(-40, 40, 17)
    doses = dual_field_doses(
        setup=common_setup(),
        plane_distance_cm=400.0,
        tilt_toward_head_deg=16.0,
        tilt_toward_feet_deg=16.0,
        mid_height_cm=0.0,
        mu_share_upper=0.5,
        heights_cm=HEIGHTS,
        across_cm=across,
    )
    return across, doses


def test_plane_is_never_more_even_than_its_profiles() -> None:
    """The rectangle contains both profiles, so that its departures are at least theirs."""
    across, doses = plane_doses()
    found = uniformity_of_plane(
        heights_cm=HEIGHTS,
        across_cm=across,
        doses=doses,
        uniformity_half_length_cm=80.0,
        uniformity_half_width_cm=30.0,
        field_length_cm=200.0,
        field_width_cm=80.0,
    )
    assert found.map_half_range_percent >= max(found.vertical_half_range_percent, found.horizontal_half_range_percent)
    assert found.map_deviation_percent >= max(found.vertical_deviation_percent, found.horizontal_deviation_percent)
    assert abs(found.lowest_in_map_at_across_cm) == 40


def test_plane_smaller_than_its_rectangle_is_refused() -> None:
    """A map 200 cm tall says nothing about 240 cm."""
    across, doses = plane_doses()
    with pytest.raises(OutsideValidity, match="does not reach"):
        uniformity_of_plane(
            heights_cm=HEIGHTS,
            across_cm=across,
            doses=doses,
            uniformity_half_length_cm=80.0,
            uniformity_half_width_cm=30.0,
            field_length_cm=240.0,
            field_width_cm=80.0,
        )
