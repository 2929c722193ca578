"""Depth dose of six dual fields, and the degraders that follow from it."""

import pytest

from readiness.calculations.composite_depth_dose import (
    DEPTH_SD_MM,
    CompositeDepthDose,
    b_factor_of_radius,
    composite_depth_dose,
    energy_for_table_mev,
    thickness_range_cm,
)
from readiness.calculations.degrader_choice import (
    degraders_by_depth_rules,
    depth_rules_in_words,
    pmma_equivalent_cm,
)
from readiness.errors import OutsideValidity


def found(energy: float, pmma: float) -> CompositeDepthDose:
    """Return the depth dose."""
    return composite_depth_dose(energy_at_source_mev=energy, pmma_cm=pmma)


def test_row_left_out_is_found_between_the_others() -> None:
    """Half a centimetre at 6 MeV lies between its neighbours to a few tenths of a millimetre."""
    low, high = found(6.0, 0.3), found(6.0, 1.0)
    share = (0.5 - 0.3) / 0.7
    assert low.r80_mm.value * (1 - share) + high.r80_mm.value * share == pytest.approx(found(6.0, 0.5).r80_mm.value, abs=0.6)


def test_thicker_is_shallower_and_raises_b() -> None:
    """A thicker degrader lowers energy and R80 and raises B."""
    depths = [found(6.2, pmma) for pmma in (0.15, 0.3, 0.5, 0.7, 0.9, 1.0)]
    assert [one.r80_mm.value for one in depths] == sorted((one.r80_mm.value for one in depths), reverse=True)
    assert [one.energy_at_plane_mev for one in depths] == sorted((one.energy_at_plane_mev for one in depths), reverse=True)
    assert [one.b_factor.value for one in depths] == sorted(one.b_factor.value for one in depths)


def test_more_energy_is_deeper() -> None:
    """Behind the same degrader a faster beam reaches deeper."""
    depths = [found(energy, 1.0).r80_mm.value for energy in (6.0, 6.3, 7.0, 8.0)]
    assert depths == sorted(depths)


def test_depths_are_never_surer_than_two_millimetres() -> None:
    """R80 has two millimetres, and doses what a shift of two millimetres makes of them."""
    one = found(6.3, 0.6)
    assert one.r80_mm.sd >= DEPTH_SD_MM == 2.0
    assert one.dose_at_4_mm_percent.sd > 3
    assert one.dose_at_10_mm_percent.sd > 5


@pytest.mark.parametrize(
    ("energy", "pmma", "words"),
    [
        (5.8, 0.6, "holds 6 to 9 MeV at the source, not 5.8 MeV; measure"),
        (9.5, 1.5, "holds 6 to 9 MeV"),
        (6.3, 0.0, "holds 0.15 to 1.10 cm of PMMA, not 0 cm; measure"),
        (9.0, 1.0, "holds 1.50 to 2.00 cm"),
    ],
)
def test_nothing_is_extrapolated(energy: float, pmma: float, words: str) -> None:
    """Outside the rows of the table the answer is to measure."""
    with pytest.raises(OutsideValidity, match=words):
        found(energy, pmma)


def test_impossible_entries_are_refused() -> None:
    """Negative numbers are impossible."""
    with pytest.raises(ValueError, match="cannot be negative"):
        found(6.0, -0.1)


def test_range_of_thickness_narrows_toward_nine_mev() -> None:
    """At 6 MeV the table starts without a degrader, at 9 MeV with 1.5 cm."""
    assert thickness_range_cm(energy_at_source_mev=6.0) == pytest.approx((0.0, 1.0))
    assert thickness_range_cm(energy_at_source_mev=9.0) == pytest.approx((1.5, 2.0))


def test_thin_body_raises_b() -> None:
    """B falls with the radius, from a child's arm to a large trunk."""
    factors = [b_factor_of_radius(radius_cm=radius).value for radius in (2.5, 4.0, 5.0, 10.0, 15.0, 20.0)]
    assert factors == sorted(factors, reverse=True)
    assert (factors[0], factors[-1]) == (3.07, 2.63)
    with pytest.raises(OutsideValidity, match="radii in cm"):
        b_factor_of_radius(radius_cm=25.0)


def test_table_radius_and_depth_dose_agree_on_b() -> None:
    """Both tables give B of the same cylinder within their errors."""
    assert found(6.3, 0.6).b_factor.value == pytest.approx(b_factor_of_radius(radius_cm=15.0).value, abs=0.05)


def test_table_is_entered_with_the_energy_that_arrives() -> None:
    """Thinner air and a nearer plane count as more energy, sea level at 400 cm as none."""
    def energy(distance: float, pressure: float) -> float:
        """Return the energy for the table."""
        return energy_for_table_mev(
            energy_at_source_mev=6.3, plane_distance_cm=distance, pressure_kpa=pressure, temperature_celsius=20.0
        )

    assert energy(400, 101.325) == pytest.approx(6.3)
    assert energy(400, 85.0) > 6.3
    assert energy(350, 101.325) == pytest.approx(6.3 + 0.5 * 0.24, abs=0.01)


def test_plastics_count_by_the_energy_they_take() -> None:
    """Polycarbonate is like PMMA, polyethylene lighter, no degrader is none."""
    assert pmma_equivalent_cm(degrader_material="pmma", degrader_thickness_cm=0.6) == pytest.approx(0.6)
    assert pmma_equivalent_cm(degrader_material="polyethylene", degrader_thickness_cm=0.6) < 0.55
    assert pmma_equivalent_cm(degrader_material="polycarbonate", degrader_thickness_cm=0.6) == pytest.approx(0.6, abs=0.02)
    assert pmma_equivalent_cm(degrader_material=None, degrader_thickness_cm=None) == 0


def test_aluminium_has_no_plastic_equivalent() -> None:
    """A metal scatters more for the same loss, and a degrader needs a thickness."""
    with pytest.raises(OutsideValidity, match="aluminium scatters more"):
        pmma_equivalent_cm(degrader_material="aluminium", degrader_thickness_cm=0.3)
    with pytest.raises(ValueError, match="needs a thickness"):
        pmma_equivalent_cm(degrader_material="pmma", degrader_thickness_cm=None)


def test_sample_degraders_are_told_apart() -> None:
    """At 6.3 MeV 0.6 cm keeps both depth rules and 1.0 cm misses the one at 4 mm."""
    table = degraders_by_depth_rules(energy_at_source_mev=6.3, least_at_4_mm_percent=80.0, most_at_20_mm_percent=20.0)
    keeps = dict(zip(table.column("pmma_cm"), table.column("keeps_both"), strict=True))
    assert keeps[0.6] is True
    assert keeps[1.0] is False
    assert depth_rules_in_words(degraders=table).startswith("PMMA of 0.25 to 0.90 cm is predicted to keep both")


def test_energy_that_cannot_keep_both_rules_is_said_so() -> None:
    """With rules that nothing can keep the sentence asks for another energy."""
    table = degraders_by_depth_rules(energy_at_source_mev=9.0, least_at_4_mm_percent=95.0, most_at_20_mm_percent=5.0)
    assert depth_rules_in_words(degraders=table) == (
        "No thickness of PMMA from 1.50 to 2.00 cm is predicted to keep both depth rules at this energy: "
        "another energy is needed."
    )


def test_dose_at_20_mm_must_stay_under_its_limit_and_that_at_4_mm_may_equal_it() -> None:
    """Without a degrader 6 MeV give 26 % at 20 mm and 96 % at 4 mm: "under 26 %" is missed, "96 % or more" kept."""
    for most, keeps in ((26.0, False), (26.5, True)):
        table = degraders_by_depth_rules(
            energy_at_source_mev=6.0, least_at_4_mm_percent=96.0, most_at_20_mm_percent=most
        )
        assert next(row["keeps_both"] for row in table.records() if row["pmma_cm"] == 0) is keeps
