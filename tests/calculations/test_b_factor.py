"""The multiple-field factor from cylinder readings."""

import numpy as np
import pytest
from uncertainties import ufloat, unumpy

from readiness.calculations.b_factor import BFactor, analyse_b_factor
from readiness.errors import OutsideValidity

AROUND = np.arange(0.0, 360.0, 30.0)
SCALLOPED = 262.0 + 8.0 * np.cos(np.radians(6 * AROUND))
POINT = np.array([99.0, 100.0, 101.0])


def analysed(cylinder: object = SCALLOPED, point: object = POINT, around: object = AROUND, **changed: object) -> BFactor:
    """Return the factor of readings with 1000 MU each."""
    stated: dict[str, object] = {
        "cylinder_mu": np.full(len(np.asarray(cylinder)), 1000.0),
        "calibration_mu": np.full(len(np.asarray(point)), 1000.0),
        "technique": "six-position",
        "cylinder_radius_cm": 15.0,
    } | changed
    return analyse_b_factor(
        around_deg=around,  # type: ignore[arg-type]
        cylinder_doses_cgy=cylinder,  # type: ignore[arg-type]
        calibration_doses_cgy=point,  # type: ignore[arg-type]
        **stated,  # type: ignore[arg-type]
    )


def test_factor_is_the_ratio_of_means() -> None:
    """A mean of 262 cGy around the cylinder and 100 cGy at the calibration point make B = 2.62."""
    result = analysed()
    assert result.factor.value == pytest.approx(2.62)
    assert result.spread_percent == pytest.approx(100 * 8 / 262)
    assert (result.question, result.remarks) == ("", ())


def test_uncertainty_agrees_with_an_independent_propagation() -> None:
    """The standard deviation is that of general-purpose error propagation of both means."""
    result = analysed()
    top = ufloat(SCALLOPED.mean(), SCALLOPED.std(ddof=1) / np.sqrt(len(SCALLOPED)))
    bottom = ufloat(POINT.mean(), POINT.std(ddof=1) / np.sqrt(len(POINT)))
    expected = unumpy.std_devs(np.array([top / bottom]))[0]
    assert expected == pytest.approx(result.factor.sd)


def test_monitor_units_are_taken_out() -> None:
    """Half the MU and half the dose at the calibration point give the same factor."""
    halved = analysed(point=POINT / 2, calibration_mu=np.full(3, 500.0))
    assert halved.factor.value == pytest.approx(analysed().factor.value)


def test_more_skin_dose_means_a_larger_factor() -> None:
    """B rises with the dose on the cylinder."""
    assert analysed(1.05 * SCALLOPED).factor.value > analysed().factor.value


def test_equal_readings_have_no_spread_and_no_uncertainty() -> None:
    """Equal readings give a spread and a standard deviation of 0."""
    result = analysed(np.full(12, 240.0), np.full(3, 100.0))
    assert (result.spread_percent, result.factor.sd) == (0, pytest.approx(0, abs=1e-12))


def test_rotating_platform_has_a_sixth() -> None:
    """A turning cylinder of 43 cGy per 100 cGy has a factor of 0.43, which belongs to B = 2.58."""
    result = analysed(np.full(12, 43.0), technique="rotating-platform")
    assert (result.factor.value, result.six_position_factor) == (pytest.approx(0.43), pytest.approx(2.58))
    assert result.question == ""


@pytest.mark.parametrize(
    ("dose", "technique", "question"),
    [
        (150.0, "six-position", "lies outside 2.3 to 3.1"),
        (330.0, "six-position", "lies outside 2.3 to 3.1"),
        (43.0, "six-position", "rotating platform"),
        (260.0, "rotating-platform", "were the MU those of the whole rotation"),
    ],
)
def test_unusual_factor_asks_which_definition_was_used(dose: float, technique: str, question: str) -> None:
    """A factor outside its expected range raises a question and stands first among the remarks."""
    result = analysed(np.full(12, dose), technique=technique)
    assert question in result.question
    assert result.remarks[0] == result.question


def test_gray_under_centigray_is_refused() -> None:
    """Cylinder doses in gray with the calibration dose in centigray are refused."""
    with pytest.raises(OutsideValidity, match="gray under a column in cGy"):
        analysed(SCALLOPED / 100)


def test_moving_couch_has_no_factor() -> None:
    """A moving couch has no B."""
    with pytest.raises(OutsideValidity, match="a moving couch has no B"):
        analysed(technique="moving-couch")


@pytest.mark.parametrize(
    ("changed", "remark"),
    [
        ({"cylinder": SCALLOPED[::3], "around": AROUND[::3]}, "Only 4 places on the cylinder"),
        ({"cylinder": SCALLOPED[:7], "around": AROUND[:7]}, "No reading over 180 deg"),
        ({"point": POINT[:1]}, "its scatter is not in the standard deviation"),
        ({"cylinder": 262 + 60 * np.cos(np.radians(AROUND))}, "was a position left out or given twice"),
        ({"cylinder_radius_cm": 5.0}, "B is larger on thin ones"),
    ],
)
def test_doubtful_readings_are_used_and_that_is_said(changed: dict[str, object], remark: str) -> None:
    """Readings that do not stand for the whole circumference are said to be so."""
    assert remark in " ".join(analysed(**changed).remarks)  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("changed", "message"),
    [
        ({"cylinder": SCALLOPED[:2], "around": AROUND[:2]}, "2 readings on the cylinder"),
        ({"cylinder": SCALLOPED - 262}, "not more than 0"),
        ({"point": np.array([])}, "both need readings"),
    ],
)
def test_unusable_readings_are_refused(changed: dict[str, object], message: str) -> None:
    """Too few readings, or readings of nothing, give no factor."""
    with pytest.raises(OutsideValidity, match=message):
        analysed(**changed)  # type: ignore[arg-type]


def test_impossible_arguments_are_our_own_mistake() -> None:
    """An unknown technique or a radius of 0 is an impossible input."""
    with pytest.raises(ValueError, match="six-position or rotating-platform"):
        analysed(technique="sitting")
    with pytest.raises(ValueError, match="more than 0 cm"):
        analysed(cylinder_radius_cm=0)
