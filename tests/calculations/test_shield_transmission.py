"""Transmission and backscatter of a shield."""

import pytest

from readiness.calculations.shield_transmission import ShieldTransmission, analyse_shield_transmission
from readiness.errors import OutsideValidity


def analysed(*rows: tuple[str, float, float]) -> ShieldTransmission:
    """Return the analysis of (place, with, without)."""
    places, shielded, free = zip(*rows, strict=True) if rows else ((), (), ())
    return analyse_shield_transmission(
        places=places, with_shield_cgy=shielded, without_shield_cgy=free
    )


def test_worst_reading_decides() -> None:
    """Of 2 and 4 cGy behind a shield of 100 cGy the transmission is 4 %, of 120 and 130 the backscatter 30 %."""
    result = analysed(("behind", 2, 100), ("behind", 4, 100), ("beam-side", 120, 100), ("beam-side", 130, 100))
    assert (result.transmission_percent, result.backscatter_percent) == (pytest.approx(4), pytest.approx(30))
    assert (result.readings, result.remarks) == (4, ())


def test_no_shield_transmits_everything_and_scatters_nothing() -> None:
    """Equal readings give 100 % and 0 %."""
    result = analysed(("behind", 100, 100), ("beam-side", 100, 100))
    assert (result.transmission_percent, result.backscatter_percent) == (100, 0)


def test_more_dose_behind_is_more_transmission() -> None:
    """Transmission rises with the reading behind."""
    assert analysed(("behind", 5, 100)).transmission_percent > analysed(("behind", 4, 100)).transmission_percent  # type: ignore[operator]


@pytest.mark.parametrize(
    ("row", "remark"),
    [
        (("behind", 4, 100), "its backscatter is not known"),
        (("beam-side", 120, 100), "its transmission is not known"),
        (("behind", 100, 4), "were the two readings exchanged"),
        (("beam-side", 4, 100), "A backscatter that no shield has"),
    ],
)
def test_what_is_missing_or_exchanged_is_said(row: tuple[str, float, float], remark: str) -> None:
    """A place that was not read and readings that look exchanged are said."""
    assert any(remark in said for said in analysed(row).remarks)


def test_impossible_readings_are_refused() -> None:
    """No readings, or a dose of 0 without the shield, say nothing about it."""
    for rows in ((), (("behind", 1.0, 0.0),), (("behind", -1.0, 100.0),)):
        with pytest.raises(OutsideValidity, match="a shield needs readings"):
            analysed(*rows)
    with pytest.raises(ValueError, match="behind or beam-side"):
        analysed(("beside", 1, 100))
