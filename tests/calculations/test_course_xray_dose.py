"""X-ray dose over a course: the two fractions are never mixed."""

import pytest

from readiness.calculations.course_xray_dose import (
    composite_xray_percent,
    course_xray_dose,
    highest_composite_xray_percent,
)
from readiness.errors import OutsideValidity


def test_thirty_six_gray_stay_within_the_consensus_limit() -> None:
    """36 Gy with F of 1.9 % are 0.68 Gy, not more than 0.7; with 2.0 % they are more."""
    assert 0.68 == round(course_xray_dose(total_dose_gy=36.0, composite_xray_percent=1.9), 2)
    assert course_xray_dose(total_dose_gy=36.0, composite_xray_percent=1.9) <= 0.7
    assert course_xray_dose(total_dose_gy=36.0, composite_xray_percent=2.0) > 0.7


def test_one_dual_field_understates_the_body_dose() -> None:
    """F is 2.2 times f1 at a usual B, and a smaller B means a larger F."""
    assert 2.2 == pytest.approx(composite_xray_percent(pair_xray_percent=1.0, b_factor=2.73), abs=0.01)
    assert composite_xray_percent(pair_xray_percent=1.0, b_factor=2.4) > composite_xray_percent(
        pair_xray_percent=1.0, b_factor=2.9
    )


def test_no_x_rays_no_dose() -> None:
    """A fraction of nothing gives no dose."""
    assert composite_xray_percent(pair_xray_percent=0.0, b_factor=2.7) == 0
    assert course_xray_dose(total_dose_gy=36.0, composite_xray_percent=0.0) == 0


def test_limit_and_dose_are_inverse() -> None:
    """The highest fraction gives exactly the limit; for 36 Gy and 0.7 Gy it is 1.94 %."""
    highest = highest_composite_xray_percent(total_dose_gy=36.0, xray_limit_gy=0.7)
    assert 1.94 == round(highest, 2)
    assert 0.7 == pytest.approx(course_xray_dose(total_dose_gy=36.0, composite_xray_percent=highest))


def test_unusual_b_is_asked_about() -> None:
    """B of a rotating platform is not put into the formula of six dual fields."""
    with pytest.raises(OutsideValidity, match="rotating platform"):
        composite_xray_percent(pair_xray_percent=0.9, b_factor=0.45)
    found = composite_xray_percent(pair_xray_percent=0.9, b_factor=3.2, definition_confirmed=True)
    assert 1.6875 == pytest.approx(found)


@pytest.mark.parametrize(
    ("call", "arguments"),
    [
        (composite_xray_percent, {"pair_xray_percent": -1.0, "b_factor": 2.7}),
        (course_xray_dose, {"total_dose_gy": 0.0, "composite_xray_percent": 1.0}),
        (course_xray_dose, {"total_dose_gy": 36.0, "composite_xray_percent": 101.0}),
        (highest_composite_xray_percent, {"total_dose_gy": 36.0, "xray_limit_gy": 0.0}),
    ],
)
def test_impossible_numbers_raise(call, arguments: dict) -> None:
    """Negative fractions and empty courses are refused."""
    with pytest.raises(ValueError):  # noqa: PT011  (each message is a sentence of its own)
        call(**arguments)
