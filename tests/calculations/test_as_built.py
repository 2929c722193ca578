"""As-built records against choices."""

import pytest

from readiness.calculations.as_built import AsBuilt, compare_as_built

CHOSEN = {"plane_distance_cm": 400.0, "degrader_gap_cm": 45.0, "tilt_deg": 16.0, "degrader_thickness_mm": 6.0}


def compared(chosen: dict[str, float | None] | None = None, **found: list[float]) -> AsBuilt:
    """Return the comparison with 1 cm, 0.2 deg and 0.2 mm; what is not given was found as chosen."""
    wanted = CHOSEN | (chosen or {})
    return compare_as_built(
        **{f"chosen_{name}": value for name, value in wanted.items()},  # type: ignore[arg-type]
        **{f"found_{name}": found.get(name, [value]) for name, value in CHOSEN.items()},  # type: ignore[arg-type]
        distance_tolerance_cm=1.0,
        tilt_tolerance_deg=0.2,
        thickness_tolerance_mm=0.2,
    )


def test_record_as_chosen_agrees() -> None:
    """A record in which everything is as chosen agrees."""
    result = compared()
    assert result.agrees
    assert (result.differing, result.not_recorded, result.remarks) == ((), (), ())


@pytest.mark.parametrize(
    ("name", "agreeing", "differing"),
    [
        ("plane_distance_cm", [399.0, 401.0], [401.01]),
        ("degrader_gap_cm", [46.0], [43.9]),
        ("tilt_deg", [15.8, 16.2], [16.21]),
        ("degrader_thickness_mm", [5.8, 6.2], [5.79]),
    ],
)
def test_tolerance_belongs_to_agreement(name: str, agreeing: list[float], differing: list[float]) -> None:
    """A difference equal to the tolerance agrees, one beyond it does not and is named."""
    for one in agreeing:
        assert compared(**{name: [one]}).agrees
    result = compared(**{name: differing})
    words = name.rsplit("_", 1)[0].replace("_", " ")
    assert (result.agrees, result.differing) == (False, (words,))
    assert result.outcome(words) == "differs"


def test_one_determination_out_of_many_is_enough_to_differ() -> None:
    """Two tilts that differ to both sides do not cancel."""
    result = compared(tilt_deg=[15.5, 16.5])
    assert result.differing == ("tilt",)
    assert any("Determinations of the tilt spread over 1 deg" in said for said in result.remarks)


def test_number_that_was_not_recorded_keeps_the_record_open() -> None:
    """A record without the gap does not agree, and names it."""
    result = compared(degrader_gap_cm=[])
    assert (result.agrees, result.not_recorded) == (False, ("degrader gap",))


def test_number_that_was_not_chosen_cannot_agree_or_differ() -> None:
    """Without a degrader the record agrees on the rest; with nothing chosen it agrees on nothing."""
    assert compared({"degrader_gap_cm": None, "degrader_thickness_mm": None}).agrees
    nothing = compared(dict.fromkeys(CHOSEN))
    assert not nothing.agrees
    assert set(nothing.rows.column("outcome")) == {"not chosen"}


def test_another_unit_is_suspected() -> None:
    """A thickness in centimetres under millimetres is suspected to be so."""
    assert any("0.1 times the chosen one" in said for said in compared(degrader_thickness_mm=[0.6]).remarks)
    assert any("10 times the chosen one" in said for said in compared(plane_distance_cm=[4000.0]).remarks)
