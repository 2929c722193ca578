"""Energies of a beam, the foil spread, and what a degrader does to the depth dose."""

from collections.abc import Sequence

import pytest

from readiness.assessment.records import Gone
from readiness.calculations.field_at_plane import single_field_doses
from readiness.program.items import Item
from tests.assessment.values.beam_program import (
    HEIGHTS,
    arrangement,
    department,
    finding,
    graph_of,
    measured,
    value,
    words,
)

DEPTHS = (0.0, 2.0, 5.0, 10.0, 15.0, 20.0, 22.0, 24.0, 26.0, 28.0, 29.0, 31.0, 35.0, 40.0)
DOSES = (0.85, 0.9, 0.95, 1.0, 0.97, 0.8, 0.62, 0.44, 0.26, 0.08, 0.01, 0.01, 0.01, 0.01)


def depth_dose(kind: str, depths: Sequence[float] = DEPTHS, doses: Sequence[float] = DOSES, **header: object) -> Item:
    """Return a measured depth dose."""
    rows = [(depth, dose, None) for depth, dose in zip(depths, doses, strict=True)]
    return measured(kind, ("depth_mm", "relative_dose", "relative_dose_sd"), rows, **header)


def test_most_probable_energy_follows_from_the_practical_range() -> None:
    """E_p0 = 0.22 + 1.98 x 2.95 + 0.0025 x 2.95^2 = 6.0828 MeV; some 0.23 MeV of air are added at the source."""
    assert pytest.approx(6.08276, abs=1e-5) == value(department(), "beam.most_probable_energy_mev").value
    assert pytest.approx(6.31, abs=0.02) == value(department(), "beam.energy_at_source_mev").value


def test_a_range_that_the_half_value_depth_contradicts_gives_no_energy() -> None:
    """A practical range below R50 names the suspicion instead of an energy."""
    exchanged = department(beam={"r50_cm": 2.95, "rp_cm": 2.40})
    assert "exchanged" in words(exchanged, "beam.energy_at_source_mev")
    assert "not met" == finding(exchanged, "ranges-agree").outcome


def test_a_depth_dose_at_100_cm_replaces_the_claimed_ranges() -> None:
    """
    R50 of a depth dose without degrader at 100 cm replaces the claim, which stays visible.

    Between 22 mm (62 %) and 24 mm (44 %) the dose is 50 % at 22 + 2 x 12/18 = 23.333 mm.
    """
    of = department(depth_dose("depth-dose-single", degrader="none", distance_cm=100.0, gap_cm=0.0))
    found = value(of, "beam.r50_cm")
    assert ("measured", pytest.approx(2.33333, abs=1e-4)) == (found.basis, found.value)
    assert found.instead_of is not None
    assert 2.40 == found.instead_of.value


def test_a_depth_dose_at_100_cm_is_not_asked_for_again() -> None:
    """The measurement against the energy's uncertainty is the depth dose until there is one, then profiles."""

    def against_energy(*measurements: Item) -> object:
        """Return what the table of contributions asks for."""
        table = value(department(*measurements), "arrangement.uncertainty_contributions").value
        return next(row["measurement"] for row in table.records() if row["input"] == "energy")

    assert "depth dose with R50 and Rp at 100 cm" in str(against_energy())
    assert "depth dose" in str(against_energy(depth_dose("depth-dose-single")))
    at_100_cm = depth_dose("depth-dose-single", degrader="none", distance_cm=100.0, gap_cm=0.0)
    assert "dual-field profiles at several angles" == against_energy(at_100_cm)


def test_a_depth_dose_at_the_plane_is_not_that_at_100_cm() -> None:
    """Behind a degrader at 400 cm another beam is measured: the beam's R50 stays, the plane's is known."""
    of = department(depth_dose("depth-dose-single"))
    assert ("stated", 2.40) == (value(of, "beam.r50_cm").basis, value(of, "beam.r50_cm").value)
    assert pytest.approx(23.3333, abs=1e-3) == value(of, "arrangement.single_r50_mm").value


def test_temperature_unknown_is_asked_for_not_guessed() -> None:
    """Without the room's temperature there is no energy at the source."""
    assert "temperature" in words(department(room={"temperature_celsius": None}), "beam.energy_at_source_mev")


def test_the_foil_spread_is_found_again_in_its_own_profile() -> None:
    """A profile made with a spread of 0.18 is fitted with 0.18, and the assumed 0.2 stays visible."""
    graph = graph_of(department(beam={"foil_spread": 0.18}))
    setup = graph.get("arrangement.field_setup", graph.refs("arrangement")[2]).value  # type: ignore[union-attr]
    doses = single_field_doses(setup=setup, plane_distance_cm=400.0, tilt_deg=0.0, heights_cm=HEIGHTS)
    rows = [(height, None, float(dose), None) for height, dose in zip(HEIGHTS, doses, strict=True)]
    columns = ("height_cm", "across_cm", "relative_dose", "relative_dose_sd")
    of = department(measured("single-profile", columns, rows, tilt_deg=0.0, normalisation="beam-axis"))
    found = value(of, "beam.foil_spread")
    assert ("measured", pytest.approx(0.18, abs=0.001)) == (found.basis, found.value)
    assert found.instead_of is not None
    assert ("assumed", 0.2) == (found.instead_of.basis, found.instead_of.value)


def test_each_degrader_has_its_own_predicted_depth_dose() -> None:
    """The thick sheet is predicted to miss the dose at 4 mm that the thin one keeps; both await measurement."""
    thick, thin = (finding(department(), "dose-at-4-mm", degrader) for degrader in ("thick", "thin"))
    assert ("not assessed", "not met") == (thick.outcome, thick.expected)
    assert ("not assessed", "met") == (thin.outcome, thin.expected)
    assert value(department(), "arrangement.r80_mm", "thick").value < value(department(), "arrangement.r80_mm").value


@pytest.mark.parametrize(
    ("beam", "degrader", "forecast"),
    [
        ({}, "thin", "both kept"),
        ({}, "thick", "too shallow"),
        ({"r50_cm": 3.56, "rp_cm": 4.34}, "thin", "too deep"),
    ],
)
def test_a_degrader_suits_an_energy_or_not(beam: dict[str, float], degrader: str, forecast: str) -> None:
    """At 6 MeV 0.6 cm suits and 1.0 cm is too thick; at 9 MeV 0.6 cm leaves the dose too deep, beyond the table."""
    of = department(beam=beam)
    assert forecast == value(of, "arrangement.depth_rules_forecast", degrader).value


def test_a_predicted_depth_has_two_millimetres_of_uncertainty() -> None:
    """Real beams are softer than the table."""
    assert 2.0 == value(department(), "arrangement.r80_mm").sd


def test_a_measured_composite_depth_dose_decides() -> None:
    """With 92 % at 4 mm (between 90 % at 2 and 95 % at 5 mm: 93.33 %) and 80 % at 20 mm one rule is met and one not."""
    of = department(depth_dose("depth-dose-composite", phantom_radius_cm=15.0, normalisation="maximum"))
    assert pytest.approx(93.3333, abs=1e-3) == value(of, "arrangement.dose_at_4_mm_percent").value
    assert "met" == finding(of, "dose-at-4-mm").outcome
    assert "not met" == finding(of, "dose-at-20-mm").outcome


def test_a_lying_technique_has_no_predicted_depth_dose() -> None:
    """The table is for a patient who stands and turns; a lying one's depth dose is measured."""
    graph = graph_of(department(program={"techniques": ("moving-couch",)}))
    found = graph.get("arrangement.r80_mm", arrangement("thin", technique="moving-couch"))
    assert isinstance(found, Gone)
    assert any("Measure depth dose of all dual fields together" in cause.words for cause in found.causes)


def test_a_beam_outside_the_table_is_to_be_measured() -> None:
    """At 9 MeV the table holds no thin sheet; the cause says what it holds and what to do."""
    of = department(beam={"r50_cm": 3.56, "rp_cm": 4.34})
    assert "measure the composite depth dose" in words(of, "arrangement.r80_mm")


def test_an_energy_above_the_table_breaks_the_rule_on_depth() -> None:
    """
    With 9 MeV behind 0.6 cm some 6.9 MeV arrive; the table ends at 5.04 MeV with 26 % at 20 mm, which is exceeded.

    At 4 mm nothing is broken, and nothing is said.
    """
    of = department(beam={"r50_cm": 3.56, "rp_cm": 4.34})
    deep = finding(of, "dose-at-20-mm")
    assert ("not assessed", "not met", 26.0) == (deep.outcome, deep.expected, deep.observed)
    assert "" == finding(of, "dose-at-4-mm").expected


def test_a_higher_and_wider_patient_needs_a_taller_degrader() -> None:
    """A sheet of 205 cm shadows a patient of 160 cm, not one of 190 cm with raised hands."""
    short = {"tallest_patient_cm": 160.0}
    assert "not met" == finding(department(), "degrader-large-enough").outcome
    assert "met" == finding(department(program=short), "degrader-large-enough").outcome
    assert "not met" == finding(department(program=short, thin={"width_cm": 70.0}), "degrader-large-enough").outcome


@pytest.mark.parametrize(("gap", "outcome"), [(45.0, "met"), (40.0, "met"), (20.0, "not met")])
def test_the_degrader_must_clear_the_turning_patient(gap: float, outcome: str) -> None:
    """A gap of 20 cm is impossible for a patient who turns with elbows out at 40 cm."""
    assert outcome == finding(department(plan={"degrader_gap_cm": gap}), "degrader-clears-patient").outcome


def test_an_assumed_turning_radius_never_makes_a_gap_good() -> None:
    """Where nobody stated the turning radius, a gap of 45 cm is not yet good enough."""
    found = finding(department(stand={"turning_radius_cm": None}), "degrader-clears-patient")
    assert ("not assessed", "met") == (found.outcome, found.expected)
    assert any("turning radius" in cause.words for cause in found.causes)
