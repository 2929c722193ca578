"""A phantom cycle with two types of detector."""

import pytest

from readiness.calculations.end_to_end import EndToEnd, analyse_end_to_end
from readiness.errors import OutsideValidity

ROWS = [
    ("umbilicus", "film", 198.0),
    ("umbilicus", "film", 202.0),
    ("umbilicus", "osld", 204.0),
    ("sole", "film", 120.0),
    ("sole", "osld", 130.0),
]


def analysed(rows: list[tuple[str, str, float]]) -> EndToEnd:
    """Return the analysis of a cycle of 2 Gy."""
    sites, detectors, doses = zip(*rows, strict=True) if rows else ((), (), ())
    return analyse_end_to_end(sites=sites, detectors=detectors, doses_cgy=doses, dose_per_cycle_gy=2.0)


def test_detectors_are_compared_site_by_site() -> None:
    """Film and OSLD differ by 4 of 202 cGy at the umbilicus and by 10 of 125 at the sole: 2 and 8 %."""
    result = analysed(ROWS)
    assert result.pairs.column("difference_percent") == pytest.approx((100 * 4 / 202, 8))
    assert result.largest_difference_percent == pytest.approx(8)
    assert (result.detector_types, result.remarks) == (2, ())


def test_prescription_level_is_the_mean_of_both_types() -> None:
    """200 and 204 cGy of 2 Gy are 101 % at the prescription level."""
    assert analysed(ROWS).prescription_percent == pytest.approx(101)


def test_equal_readings_do_not_differ() -> None:
    """The same dose with both types differs by 0, even where it is 0."""
    result = analysed([("palm", "film", 0.0), ("palm", "osld", 0.0), ("umbilicus", "film", 200.0)])
    assert result.largest_difference_percent == 0


def test_three_types_make_three_pairs() -> None:
    """Three types at one site are compared two by two."""
    assert len(analysed([("back", kind, 200.0) for kind in ("film", "osld", "tld")]).pairs.rows) == 3


@pytest.mark.parametrize(
    ("rows", "remark"),
    [
        (ROWS[:2], "One type of detector only"),
        ([ROWS[0], ROWS[4]], "No site was read with two types"),
        (ROWS[3:], "No reading at the prescription level"),
        ([("umbilicus", "film", 2.0), ("umbilicus", "osld", 2.0)], "another unit than cGy"),
    ],
)
def test_what_the_cycle_does_not_show_is_said(rows: list[tuple[str, str, float]], remark: str) -> None:
    """A cycle that confirms nothing says so."""
    assert any(remark in said for said in analysed(rows).remarks)


def test_impossible_cycle_is_refused() -> None:
    """No readings, or a negative one, is no cycle."""
    for rows in ([], [("sole", "film", -1.0)]):
        with pytest.raises(OutsideValidity, match="a phantom cycle needs readings"):
            analysed(rows)
    with pytest.raises(ValueError, match="a dose above 0"):
        analyse_end_to_end(sites=["sole"], detectors=["film"], doses_cgy=[1.0], dose_per_cycle_gy=0)
