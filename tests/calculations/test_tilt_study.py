"""Many distances and tilts at once, and the angles chosen from them."""

import numpy as np
import pytest
from beam_setups import LENGTHS, LIMITS, common_setup

from readiness.calculations.angle_choice import (
    angle_at_distance,
    angles_by_distance,
    distance_for_both_limits_cm,
    remedy_for_uniformity,
    uniformity_over_distance_and_tilt,
)
from readiness.calculations.field_at_plane import dual_field_doses
from readiness.calculations.plane_uniformity import uniformity_of_plane
from readiness.calculations.tilt_study import (
    DEVIATION,
    HALF_RANGE,
    STRICTER,
    TiltStudy,
    profile_percents,
    tilt_study,
)
from readiness.errors import OutsideValidity

TILTS = np.arange(10.0, 22.1, 0.5)
DISTANCES = np.array([340.0, 400.0, 460.0])


def study(mid_height: float = 0.0, **changes: float) -> TiltStudy:
    """Return a small study."""
    return tilt_study(
        setup=common_setup(**changes),
        distances_cm=DISTANCES,
        tilts_deg=TILTS,
        mid_height_cm=mid_height,
        mu_share_upper=0.5,
        **LENGTHS,
    )


USUAL = study()


@pytest.mark.parametrize(("mid_height", "collimator"), [(0.0, 0.0), (8.0, 0.0), (-5.0, 30.0)])
def test_study_gives_what_single_fields_judged_one_by_one_give(mid_height: float, collimator: float) -> None:
    """Any entry of a study is the uniformity of that dual field on a grid of its own."""
    found = study(mid_height, collimator_deg=collimator)
    heights, across = np.linspace(-100, 100, 201), np.linspace(-40, 40, 41)
    for i, j in ((0, 3), (1, 12), (2, 20)):
        doses = dual_field_doses(
            setup=common_setup(collimator_deg=collimator),
            plane_distance_cm=float(DISTANCES[i]),
            tilt_toward_head_deg=float(TILTS[j]),
            tilt_toward_feet_deg=float(TILTS[j]),
            mid_height_cm=mid_height,
            mu_share_upper=0.5,
            heights_cm=heights,
            across_cm=across,
        )
        one = uniformity_of_plane(heights_cm=heights, across_cm=across, doses=doses, **LENGTHS)
        assert found.vertical_half_range_percent[i, j] == pytest.approx(one.vertical_half_range_percent, abs=0.01)
        assert found.vertical_deviation_percent[i, j] == pytest.approx(one.vertical_deviation_percent, abs=0.01)
        assert found.horizontal_half_range_percent[i, j] == pytest.approx(one.horizontal_half_range_percent, abs=0.01)
        assert found.horizontal_deviation_percent[i, j] == pytest.approx(one.horizontal_deviation_percent, abs=0.01)
        assert found.map_half_range_percent[i, j] == pytest.approx(one.map_half_range_percent, abs=0.01)


def test_distance_cures_the_horizontal_and_tilt_does_not() -> None:
    """Across, 120 cm more distance halve the departure; ten degrees of tilt change it by a tenth of itself."""
    across = USUAL.horizontal_half_range_percent
    assert across[2, 12] < 0.6 * across[0, 12]
    assert np.ptp(across[1]) < 0.1 * across[1].mean()


def test_output_falls_with_distance_and_tilt() -> None:
    """Farther and steeper fields give less at mid-height."""
    assert (np.diff(USUAL.output, axis=0) < 0).all()
    assert (np.diff(USUAL.output, axis=1) < 0).all()


def test_stricter_metric_is_the_larger_one() -> None:
    """Judged by the stricter metric a field is never better than by either."""
    stricter = USUAL.vertical_percent(STRICTER)
    assert (stricter == np.maximum(USUAL.vertical_percent(HALF_RANGE), USUAL.vertical_percent(DEVIATION))).all()
    with pytest.raises(ValueError, match="half-range, deviation-from-mid-height, stricter, not 'best'"):
        USUAL.vertical_percent("best")


def test_profiles_with_a_dark_middle_cannot_be_judged() -> None:
    """A profile without dose at mid-height is refused."""
    with pytest.raises(OutsideValidity, match="no dose reaches mid-height"):
        profile_percents(np.array([[1.0, 0.0, 1.0]]), HALF_RANGE)


@pytest.mark.parametrize(
    ("changes", "words"),
    [
        ({"distances_cm": [400.0, 400.0]}, "must rise"),
        ({"tilts_deg": []}, "must rise"),
        ({"tilts_deg": [-5.0, 5.0]}, "positive angle"),
        ({"mu_share_upper": 1.0}, "between 0 and 1"),
    ],
)
def test_impossible_studies_are_refused(changes: dict[str, object], words: str) -> None:
    """Distances and tilts rise, tilts are positive, both fields get MU."""
    given = {"distances_cm": [400.0], "tilts_deg": [16.0], "mu_share_upper": 0.5, **changes}
    with pytest.raises(ValueError, match=words):
        tilt_study(setup=common_setup(), mid_height_cm=0.0, **LENGTHS, **given)  # type: ignore[arg-type]


def made(vertical: list[float], horizontal: float = 3.0) -> TiltStudy:
    """Return a study with given vertical departures at 400 cm, for tilts of 14, 15, 16..."""
    row = np.array([vertical])
    flat = np.full_like(row, horizontal)
    tilts = 14.0 + np.arange(len(vertical))
    return TiltStudy(np.array([400.0]), tilts, row, row, flat, flat, row, np.ones_like(row))


def test_ties_go_to_the_smaller_angle() -> None:
    """Of two equally good angles the smaller is taken."""
    found = angle_at_distance(study=made([9.0, 2.0, 2.0, 9.0]), distance_cm=400, metric=HALF_RANGE, **LIMITS)
    assert found.best_tilt_deg == 15


def test_band_ends_where_the_limit_is_crossed() -> None:
    """Between 14 deg at 10 % and 15 deg at 6 % the limit of 8 % is crossed half way."""
    found = angle_at_distance(study=made([10.0, 6.0, 2.0, 7.0, 9.0]), distance_cm=400, metric=HALF_RANGE, **LIMITS)
    assert (found.lowest_passing_tilt_deg, found.highest_passing_tilt_deg) == (14.5, 17.5)
    assert (found.vertical_within, found.horizontal_within) == (True, True)


def test_band_is_the_one_around_the_best_angle() -> None:
    """A second dip that also keeps the limit does not belong to the band."""
    found = angle_at_distance(study=made([7.0, 9.0, 3.0, 9.0, 9.0]), distance_cm=400, metric=HALF_RANGE, **LIMITS)
    assert found.lowest_passing_tilt_deg == pytest.approx(16 - 5 / 6)


def test_no_band_if_the_best_misses() -> None:
    """If not even the best angle keeps the limit there is no band."""
    found = angle_at_distance(study=made([12.0, 9.0, 11.0]), distance_cm=400, metric=HALF_RANGE, **LIMITS)
    assert (found.lowest_passing_tilt_deg, found.vertical_within) == (None, False)


def test_best_angle_at_the_end_of_the_study_is_no_answer() -> None:
    """A minimum at the last tilt may not be the minimum, and an unknown distance is refused."""
    with pytest.raises(OutsideValidity, match="larger than the 16 deg studied"):
        angle_at_distance(study=made([9.0, 8.0, 7.0]), distance_cm=400, metric=HALF_RANGE, **LIMITS)
    with pytest.raises(OutsideValidity, match="does not hold a distance of 410 cm"):
        angle_at_distance(study=made([9.0, 7.0, 8.0]), distance_cm=410, metric=HALF_RANGE, **LIMITS)


def test_distance_without_an_answer_has_blanks() -> None:
    """In the table a distance whose best angle was not reached has blanks, not a guess."""
    table = angles_by_distance(study=made([9.0, 8.0, 7.0]), metric=HALF_RANGE, **LIMITS)
    assert table.rows[0][0] == 400.0
    assert set(table.rows[0][1:]) == {None}


def test_best_angle_falls_with_distance() -> None:
    """The farther the plane, the smaller the best angle."""
    tilts = angles_by_distance(study=USUAL, metric=HALF_RANGE, **LIMITS).column("best_tilt_deg")
    assert list(tilts) == sorted(tilts, reverse=True)


def test_feasible_region_agrees_with_its_limits() -> None:
    """A row of the region is within both if both numbers keep their limits."""
    table = uniformity_over_distance_and_tilt(study=USUAL, metric=HALF_RANGE, **LIMITS)
    assert len(table.rows) == len(DISTANCES) * len(TILTS)
    for row in table.records():
        assert row["within_both"] == (row["vertical_percent"] <= 8 and row["horizontal_percent"] <= 4)
    thinned = uniformity_over_distance_and_tilt(study=USUAL, metric=HALF_RANGE, every_tilt=5, **LIMITS)
    assert len(thinned.rows) == len(DISTANCES) * 5


def test_room_that_is_too_short_is_told_by_how_much() -> None:
    """The remedy names the distance needed and how far the room ends before it."""
    table = angles_by_distance(study=USUAL, metric=HALF_RANGE, **LIMITS)
    assert distance_for_both_limits_cm(angles=table) == 460
    words = remedy_for_uniformity(angles=table, plane_distance_cm=400, farthest_reachable_cm=425)
    assert "needs the plane at 460 cm, 60 cm farther; the room ends 35 cm short" in words
    assert "Tilt does not cure the horizontal profile, distance does" in words
    words = remedy_for_uniformity(angles=table, plane_distance_cm=400, farthest_reachable_cm=470)
    assert "move the plane 60 cm farther, to 460 cm, which the room allows" in words


def test_nothing_to_remedy_where_both_limits_are_kept() -> None:
    """A distance that keeps both limits needs no change."""
    table = angles_by_distance(study=USUAL, metric=HALF_RANGE, **LIMITS)
    assert remedy_for_uniformity(angles=table, plane_distance_cm=460, farthest_reachable_cm=470) == ""


def test_no_distance_is_said_to_help_if_none_does() -> None:
    """If no distance studied keeps both limits, that is said, and what else can be studied."""
    table = angles_by_distance(study=made([12.0, 9.0, 11.0], horizontal=6.0), metric=HALF_RANGE, **LIMITS)
    assert distance_for_both_limits_cm(angles=table) is None
    words = remedy_for_uniformity(angles=table, plane_distance_cm=400, farthest_reachable_cm=500)
    assert words.startswith("No distance studied, up to 400 cm,")
    assert "study another beam, degrader or opening" in words
    with pytest.raises(OutsideValidity, match="does not hold a distance of 390"):
        remedy_for_uniformity(angles=table, plane_distance_cm=390, farthest_reachable_cm=500)
