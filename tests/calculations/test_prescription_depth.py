"""Composite depth dose at a prescription depth."""

import pytest

from readiness.calculations.prescription_depth import fraction_at_prescription
from readiness.errors import OutsideValidity

SOFT = {"at_4_mm_percent": 90.0, "at_10_mm_percent": 60.0, "at_20_mm_percent": 5.0}


def test_the_skin_has_the_skin_dose():
    """At depth 0 the fraction is 1, whatever lies deeper."""
    assert fraction_at_prescription(prescription_depth_mm=0.0, **SOFT) == 1.0


@pytest.mark.parametrize(("depth_mm", "expected"), [(2.0, 0.95), (4.0, 0.90), (7.0, 0.75), (10.0, 0.60)])
def test_between_the_depths_the_dose_runs_straight(depth_mm, expected):
    """Half way from the skin to 4 mm half of the 10 % is lost."""
    assert fraction_at_prescription(prescription_depth_mm=depth_mm, **SOFT) == pytest.approx(expected)


def test_a_deeper_prescription_has_a_smaller_fraction():
    """The fraction falls with depth."""
    fractions = [fraction_at_prescription(prescription_depth_mm=depth, **SOFT) for depth in (0.0, 1.0, 5.0, 12.0)]
    assert fractions == sorted(fractions, reverse=True)


def test_where_little_is_left_no_dose_is_prescribed():
    """At 18 mm 16 % is left, and beyond 20 mm nothing is known."""
    with pytest.raises(OutsideValidity, match="only 16 % of the skin dose"):
        fraction_at_prescription(prescription_depth_mm=18.0, **SOFT)
    with pytest.raises(OutsideValidity, match="beyond 20 mm"):
        fraction_at_prescription(prescription_depth_mm=21.0, **SOFT)


def test_a_dose_that_rises_inward_is_a_slip():
    """Two depths exchanged are refused."""
    with pytest.raises(ValueError, match="falls from the skin inward"):
        fraction_at_prescription(
            prescription_depth_mm=1.0, at_4_mm_percent=60.0, at_10_mm_percent=90.0, at_20_mm_percent=5.0
        )
