"""The x-ray component from readings behind the electrons' range."""

import pytest

from readiness.calculations.xray_component import XrayComponent, analyse_xray_component
from readiness.errors import OutsideValidity

# fields, depth, height, across, per cent, cGy per MU
PILOT = [("one-dual", 100.0, 0.0, 0.0, 0.9, 1.7e-4)]
FULL = [
    ("one-dual", 50.0, 0.0, 0.0, 1.0, 1.9e-4),
    ("one-dual", 100.0, 0.0, 0.0, 0.9, 1.7e-4),
    ("one-dual", 50.0, 86.0, 0.0, 1.9, 3.8e-4),
    ("all-dual", 50.0, 0.0, 0.0, 2.2, None),
]


def analysed(rows: list[tuple[object, ...]], **changed: object) -> XrayComponent:
    """Return the analysis at 400 cm and 16 degrees, where the axes meet the plane at 86 cm."""
    fields, depths, heights, across, percents, doses = (list(column) for column in zip(*rows, strict=True))
    stated: dict[str, object] = {"axis_height_cm": 86.0, "practical_range_mm": 15.0, "b_factor": 2.7} | changed
    return analyse_xray_component(
        fields=fields,  # type: ignore[arg-type]
        depths_mm=depths,  # type: ignore[arg-type]
        heights_cm=heights,  # type: ignore[arg-type]
        across_cm=across,  # type: ignore[arg-type]
        xray_percent=percents,  # type: ignore[arg-type]
        xray_cgy_per_mu=doses,  # type: ignore[arg-type]
        **stated,  # type: ignore[arg-type]
    )


def test_composite_fraction_is_2_2_times_that_of_one_dual_field() -> None:
    """f1 of 0.9 % and B of 2.7 make F = 2.0 %, and it is not called measured."""
    result = analysed(PILOT)
    assert (result.pair_xray_percent, result.pair_depth_mm) == (0.9, 100)
    assert result.composite_xray_percent == pytest.approx(2.0)
    assert not result.composite_is_measured


def test_measured_composite_wins_over_the_derived_one() -> None:
    """F measured is reported as measured; the derived one agrees with it here and nothing is said."""
    result = analysed(FULL)
    assert (result.composite_xray_percent, result.composite_is_measured) == (2.2, True)
    assert not any("should agree" in said for said in result.remarks)


def test_measured_composite_that_contradicts_is_said() -> None:
    """F measured that equals f1 contradicts F = (6/B) f1, and that is said."""
    result = analysed([*FULL[:3], ("all-dual", 50.0, 0.0, 0.0, 1.0, None)])
    assert any("F measured is 1 %, but 2.22 % from f1 and B" in said for said in result.remarks)


def test_shallower_of_both_usual_depths_is_taken() -> None:
    """With readings at 5 and 10 cm f1 is that at 5 cm, the higher one."""
    assert (analysed(FULL).pair_xray_percent, analysed(FULL).pair_depth_mm) == (1.0, 50)


def test_axis_is_told_from_mid_height() -> None:
    """The x-ray dose on the tilted axis, 86 cm above or below, is twice that at mid-height."""
    for height in (86.0, -86.0, 80.0):
        rows = [FULL[0], ("one-dual", 50.0, height, 0.0, 1.9, 3.8e-4)]
        assert analysed(rows).axis_over_mid_height == pytest.approx(2.0)
    assert analysed([FULL[0], ("one-dual", 50.0, 86.0, 30.0, 1.9, 3.8e-4)]).tilted_axis_cgy_per_mu is None


def test_reading_among_electrons_is_not_used() -> None:
    """A reading within the electrons' range is left out, and alone is refused."""
    shallow = ("one-dual", 10.0, 0.0, 0.0, 40.0, 8e-3)
    result = analysed([shallow, *PILOT])
    assert result.pair_xray_percent == 0.9
    assert any("1 readings less than 20 mm deep hold electrons" in said for said in result.remarks)
    with pytest.raises(OutsideValidity, match="electrons are in all of them"):
        analysed([shallow])


def test_larger_fraction_gives_larger_composite() -> None:
    """F rises with f1 and falls with B; without x rays it is 0."""
    more = analysed([("one-dual", 100.0, 0.0, 0.0, 1.8, None)])
    none = analysed([("one-dual", 100.0, 0.0, 0.0, 0.0, None)])
    assert more.composite_xray_percent == pytest.approx(4.0)
    assert none.composite_xray_percent == 0
    assert analysed(PILOT, b_factor=3.0).composite_xray_percent == pytest.approx(1.8)


@pytest.mark.parametrize(
    ("rows", "changed", "remark"),
    [
        (PILOT, {"b_factor": None}, "B is not known: F cannot be had from f1"),
        (PILOT, {"b_factor": 1.5}, "F cannot be had from f1: B of 1.5 lies outside"),
        (PILOT, {"practical_range_mm": None}, "readings from 30 mm on were used"),
        (PILOT, {}, "No reading on the tilted axis"),
        ([("one-dual", 200.0, 0.0, 0.0, 0.7, None)], {}, "f1 is for a depth of 200 mm"),
        ([FULL[3]], {}, "No reading of one dual field at mid-height gives f1"),
    ],
)
def test_what_is_missing_is_said(rows: list[tuple[object, ...]], changed: dict[str, object], remark: str) -> None:
    """Each thing that the readings do not show is said."""
    assert any(remark in said for said in analysed(rows, **changed).remarks)


def test_negative_reading_is_refused() -> None:
    """A negative x-ray reading names the background."""
    with pytest.raises(OutsideValidity, match="background subtracted twice"):
        analysed([("one-dual", 100.0, 0.0, 0.0, -0.1, None)])


def test_unknown_word_is_our_own_mistake() -> None:
    """A reading belongs to one dual field or to all."""
    with pytest.raises(ValueError, match="one-dual or all-dual"):
        analysed([("half", 100.0, 0.0, 0.0, 1.0, None)])
