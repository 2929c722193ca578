"""
Tests of what cuts the beam.

With level fields at 400 cm a field of 40 cm lights 80 cm to each side of the axis; the patient of 80 cm width
and from 50 to 210 cm above the floor, isocentre at 130, is lit altogether: 80 x 160 cm.
"""

from typing import Any

import pytest
from sample_rooms import EMPTY, IN_VAULT_A, VAULT_A, mirrored_table, table

from readiness.calculations.beam_path import BeamPath, beam_path
from readiness.errors import OutsideValidity

LEVEL = {
    "tilt_deg": 0,
    "plane_distance_cm": 400,
    "source_axis_distance_cm": 100,
    "opening_cm": 40,
    "collimator_angle_deg": 0,
    "floor_polygon_cm": VAULT_A,
    "isocentre_height_cm": 130,
    "stand_height_cm": 50,
    "patient_top_cm": 210,
    "patient_width_cm": 80,
}


def path(obstructions: Any, side: int = 90, **changes: Any) -> BeamPath:
    """Return the path in vault-a with level fields, with some arguments changed."""
    arguments: dict[str, Any] = {**LEVEL, **changes}
    return beam_path(side_deg=side, obstructions=obstructions, **arguments)


def test_thin_pillar_half_way_shadows_twice_its_width() -> None:
    """A plate of 10 cm across the beam, half way from the source at x 100 to the plane, hides 20 of 80 cm."""
    plate = table(("plate", -100, -99.999, 0, 10, 0, 300))
    found = path(plate)
    assert found.cut_percent == pytest.approx(25, abs=0.001)
    assert found.cut_by == "plate"
    assert found.cuts.column("field") == ("toward head", "toward feet")
    for row in found.cuts.rows:
        assert row[2:] == pytest.approx((25, 50, 210, 0, 20), abs=0.001)


def test_low_plate_half_way_hides_the_feet() -> None:
    """A plate that ends 10 cm under the axis half way hides what lies more than 20 cm under it: 60 of 160 cm."""
    found = path(table(("plate", -100, -99.999, -100, 100, 0, 120)))
    assert found.cut_percent == pytest.approx(37.5, abs=0.001)
    assert found.cuts.rows[0][3:5] == (50, pytest.approx(110, abs=0.001))


def test_two_things_in_one_another_s_shadow_count_once() -> None:
    """A second plate in the shadow of the first cuts nothing more, although it is named."""
    first, second = ("first", -100, -99.999, 0, 10, 0, 300), ("second", -200, -199.999, 0, 15, 0, 300)
    both = path(table(first, second))
    assert both.cut_percent == pytest.approx(25, abs=0.001)
    assert both.cut_by == "first, second"


def test_clear_path_is_clear() -> None:
    """Nothing in the room cuts nothing; nor do gantry stand, parked couch, cabinet and laser box of vault-a."""
    assert path(EMPTY) == path(IN_VAULT_A)
    assert (0, "") == (path(IN_VAULT_A).cut_percent, path(IN_VAULT_A).cut_by)
    assert path(IN_VAULT_A, side=270, plane_distance_cm=325, tilt_deg=16).cut_percent == 0


def test_couch_left_in_the_beam_cuts_it() -> None:
    """The same couch left under the beam, with its top near the axis, cuts both tilted fields."""
    couch = table(("couch", -50, 50, -25, 25, 0, 125))
    found = path(couch, tilt_deg=16)
    assert found.cut_by == "couch"
    assert found.cut_percent > 10
    assert {row[0] for row in found.cuts.rows} == {"toward head", "toward feet"}


def test_low_thing_cuts_the_field_from_below_more() -> None:
    """A low thing stands more in the way of the source below the isocentre than of the one above it."""
    low = table(("trolley", -200, -150, -40, 40, 0, 90))
    head, feet = (row[2] for row in path(low, tilt_deg=16).cuts.rows)
    assert isinstance(head, float)
    assert isinstance(feet, float)
    assert head > feet > 0


def test_things_behind_plane_or_head_cut_nothing() -> None:
    """Only what stands between the sources and the plane counts."""
    behind = table(("behind", -340, -301, -40, 40, 0, 300), ("backwards", 120, 200, -40, 40, 0, 300))
    assert path(behind, tilt_deg=16).cut_percent == 0


def test_only_the_part_before_the_plane_counts() -> None:
    """A long shelf cuts as much as its part before the plane."""
    whole = path(table(("shelf", -340, -200, 20, 60, 0, 300))).cut_percent
    assert whole == pytest.approx(path(table(("shelf", -300, -200, 20, 60, 0, 300))).cut_percent)
    # its corner (-200, 20) hides from y 20 x 400 / 300 = 26.67 on, its end at the plane from 20 on
    assert whole == pytest.approx(25)


def test_jutting_wall_cuts_the_beam() -> None:
    """
    A wall that juts into the fan is named.

    Its end at (-100, 10), half way, hides the plane from y 20 on: 20 of 80 cm.
    """
    jut = (
        (-365.0, -420.0), (330.0, -420.0), (330.0, 270.0), (-99.0, 270.0), (-99.0, 10.0), (-100.0, 10.0),
        (-100.0, 270.0), (-365.0, 270.0),
    )  # fmt: skip
    found = path(EMPTY, floor_polygon_cm=jut)
    assert found.cut_percent == pytest.approx(25, abs=0.2)
    assert "wall at x -100 cm" in found.cut_by


@pytest.mark.parametrize("tilt", [0, 16])
def test_mirror_image_is_cut_alike(tilt: int) -> None:
    """Side 270 with everything mirrored is cut as side 90 is; side 270 in the same room is not."""
    trolley = table(("trolley", -200, -150, -30, -5, 0, 120))
    mirror = tuple((-x, y) for x, y in VAULT_A)
    here = path(trolley, tilt_deg=tilt)
    there = path(mirrored_table(trolley), 270, tilt_deg=tilt, floor_polygon_cm=mirror)
    assert here.cut_percent == pytest.approx(there.cut_percent)
    assert here.cut_percent > 0
    assert path(trolley, 270, tilt_deg=tilt).cut_percent == 0


def test_nearer_to_the_source_cuts_more() -> None:
    """The same post hides more the nearer it stands to the source."""
    near, far = (path(table(("post", x, x + 5, 5, 10, 0, 300))).cut_percent for x in (-50, -250))
    assert near > far


def test_wall_of_things_cuts_all() -> None:
    """A plate across the whole beam cuts all of it."""
    assert path(table(("plate", -100, -99, -200, 200, 0, 300)), tilt_deg=16).cut_percent == pytest.approx(100)


def test_impossible_input_is_refused() -> None:
    """A patient of no height, a plane behind the head and a field past the patient are refused."""
    with pytest.raises(ValueError, match="above the standing surface"):
        path(EMPTY, patient_top_cm=50)
    with pytest.raises(ValueError, match="isocentre"):
        path(EMPTY, floor_polygon_cm=VAULT_A[:3])
    with pytest.raises(OutsideValidity, match="never meets the treatment plane"):
        path(EMPTY, tilt_deg=80)
    with pytest.raises(OutsideValidity, match="do not light the patient"):
        path(EMPTY, stand_height_cm=280, patient_top_cm=290)
