"""Rays that pass beside a degrader."""

import pytest

from readiness.calculations.degrader_shadow import DegraderShadow, degrader_shadow


def shadow(**changes: float) -> DegraderShadow:
    """Return the shadow of a sheet of 110 x 205 cm, 45 cm before a plane at 400 cm."""
    geometry = {
        "plane_distance_cm": 400.0,
        "tilt_deg": 16.0,
        "source_axis_distance_cm": 100.0,
        "degrader_gap_cm": 45.0,
        "degrader_width_cm": 110.0,
        "degrader_height_cm": 205.0,
        "degrader_foot_height_cm": 38.0,
        "isocentre_height_cm": 130.0,
        "soles_height_cm": 40.0,
        "hands_height_cm": 40.0 + 1.25 * 175.0,
        "field_width_cm": 80.0,
        **changes,
    }
    return degrader_shadow(**geometry)


def test_rays_at_the_degrader_by_hand() -> None:
    """
    At 16 degrees and 400 cm the rays to soles and hands cross the degrader where two straight lines say.

    ahead = 400 - 100 (1 - cos 16) = 396.13; part = 351.13/396.13 = 0.88640; sources at 130 -+ 27.564;
    highest = 157.564 + (258.75 - 157.564) 0.88640 = 247.255; lowest = 102.436 + (40 - 102.436) 0.88640 = 47.093
    """
    found = shadow()
    assert found.highest_ray_cm == pytest.approx(247.255, abs=0.01)
    assert found.lowest_ray_cm == pytest.approx(47.093, abs=0.01)
    assert found.height_to_spare_cm == pytest.approx(38 + 205 - 247.255, abs=0.01)
    assert found.width_to_spare_cm == 30


def test_without_gap_the_degrader_must_be_as_tall_as_the_patient() -> None:
    """At the plane itself the rays end at soles and hands."""
    found = shadow(degrader_gap_cm=0.0)
    assert found.highest_ray_cm == pytest.approx(258.75)
    assert found.lowest_ray_cm == pytest.approx(40.0)


def test_a_taller_patient_or_a_higher_foot_leaves_less() -> None:
    """A taller patient or a higher foot of the sheet leaves less; nearer to the source leaves more."""
    here = shadow().height_to_spare_cm
    assert shadow(hands_height_cm=277.5).height_to_spare_cm < here
    assert shadow(degrader_foot_height_cm=60.0).height_to_spare_cm < here
    assert shadow(degrader_gap_cm=60.0).height_to_spare_cm > here


def test_impossible_places_are_refused() -> None:
    """The sheet stands between source and plane, and hands are above soles."""
    with pytest.raises(ValueError, match="between source and plane"):
        shadow(degrader_gap_cm=450.0)
    with pytest.raises(ValueError, match="above the soles"):
        shadow(hands_height_cm=30.0)
