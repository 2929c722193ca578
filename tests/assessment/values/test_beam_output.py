"""Output of the pair, the multiple-field factor and x rays: stated, measured and predicted kept apart."""

from datetime import date
from typing import Any

import pytest

from readiness.program.items import Item
from tests.assessment.small import item
from tests.assessment.values.beam_program import department, finding, got, measured, value, words

OUTPUT = ("distance_cm", "tilt_deg", "output_cgy_per_mu")
CYLINDER = ("fields", "around_deg", "height_cm", "mu", "dose_cgy")
XRAYS = ("fields", "depth_mm", "height_cm", "across_cm", "xray_percent", "xray_cgy_per_mu")


def output(*readings: tuple[float | None, float | None, float], **header: Any) -> Item:
    """Return a measured output of the pair."""
    return measured("output-pair", OUTPUT, readings, **{"mu_convention": "total-of-both-beams", **header})


def cylinder(around_cgy: float, point_cgy: float, **header: Any) -> Item:
    """Return a factor measured at six places of a cylinder and at the calibration point, 1000 MU each."""
    rows = [("all-dual", float(angle), 0.0, 1000.0, around_cgy) for angle in range(0, 360, 60)]
    rows += [("one-dual", None, 0.0, 1000.0, point_cgy)]  # type: ignore[list-item]
    return measured("b-factor", CYLINDER, rows, **{"phantom_radius_cm": 15.0, **header})


def xrays(*readings: tuple[str, float, float, float | None, float | None], **header: Any) -> Item:
    """Return a measured x-ray component: fields, depth, height, percent, dose per MU."""
    rows = [(fields, depth, height, None, percent, dose) for fields, depth, height, percent, dose in readings]
    return measured("xray-component", XRAYS, rows, **header)


def test_a_measured_output_is_taken_in_the_plans_convention() -> None:
    """0.02 cGy per MU of both beams together is 0.04 per MU on each."""
    readings = output((None, None, 0.02))
    assert pytest.approx(0.02) == value(department(readings), "arrangement.pair_output_cgy_per_mu").value
    each = department(readings, plan={"mu_convention": "on-each-beam"})
    assert pytest.approx(0.04) == value(each, "arrangement.pair_output_cgy_per_mu").value


def test_a_stated_output_does_not_stand_for_a_measured_one() -> None:
    """A claim is used, but the rule waits for the measurement."""
    stated = department(plan={"pair_output_cgy_per_mu": 0.02})
    assert "stated" == value(stated, "arrangement.pair_output_cgy_per_mu").basis
    found = finding(stated, "pair-output-measured")
    assert ("not assessed", "met") == (found.outcome, found.expected)
    assert "met" == finding(department(output((None, None, 0.02))), "pair-output-measured").outcome


def test_an_expired_instrument_voids_the_output() -> None:
    """A reading with a chamber whose calibration had run out that day does not count, and that is said."""
    void = department(output((None, None, 0.02), instrument="chamber"))
    assert "instrument chamber was out of calibration on 2026-10-21" in words(void, "arrangement.pair_output_cgy_per_mu")
    mended = department(
        output((None, None, 0.02), instrument="chamber"), chamber={"calibration_due_on": date(2026, 12, 31)}
    )
    assert "measured" == value(mended, "arrangement.pair_output_cgy_per_mu").basis


def test_a_change_of_the_machine_afterwards_voids_the_output() -> None:
    """What was measured before the room changed does not count."""
    of = department(output((None, None, 0.02)), room={"changed_on": date(2026, 11, 1)})
    assert "the room was changed on 2026-11-01" in words(of, "arrangement.pair_output_cgy_per_mu")


def test_output_changes_with_distance_only_where_it_was_varied() -> None:
    """Readings of 0.0202, 0.0200 and 0.0198 at 398, 400 and 402 cm fall by 0.5 % a centimetre."""
    varied = department(output((398.0, None, 0.0202), (400.0, None, 0.0200), (402.0, None, 0.0198)))
    assert pytest.approx(-0.499, abs=0.002) == value(varied, "arrangement.output_change_percent_per_cm").value
    assert "met" == finding(varied, "output-with-distance").outcome
    assert "not assessed" == finding(department(output((None, None, 0.02))), "output-with-distance").outcome


def test_the_prediction_finds_a_mixed_up_convention() -> None:
    """An output twice the prediction asks whether it is per MU on each beam."""
    spread = {"foil_spread": 0.2}
    predicted = value(department(beam=spread), "arrangement.predicted_pair_output_cgy_per_mu")
    assert pytest.approx(0.15 * predicted.value, rel=1e-4) == predicted.sd
    doubled = department(output((None, None, 2 * predicted.value)), beam=spread)
    assert pytest.approx(2.0, abs=1e-4) == value(doubled, "arrangement.output_agreement_ratio").value
    assert "per MU on each beam" in value(doubled, "arrangement.output_suggestion").value
    assert "not met" == finding(doubled, "pair-output-plausible").outcome
    alike = department(output((None, None, predicted.value)), beam=spread)
    assert "met" == finding(alike, "pair-output-plausible").outcome


def test_a_prediction_never_becomes_the_output() -> None:
    """Where nothing was measured or stated there is no output, though one is predicted."""
    assert "Measure output of the dual field" in words(department(), "arrangement.pair_output_cgy_per_mu")


def test_the_factor_is_predicted_until_it_is_measured() -> None:
    """A cylinder with 52 cGy around against 20 cGy at the point gives B = 2.6 and replaces the prediction."""
    assert "predicted" == value(department(), "arrangement.b_factor").basis
    assert "not assessed" == finding(department(), "b-factor-measured").outcome
    of = department(cylinder(52.0, 20.0))
    found = value(of, "arrangement.b_factor")
    assert ("measured", pytest.approx(2.6)) == (found.basis, found.value)
    assert "met" == finding(of, "b-factor-measured").outcome
    assert pytest.approx(2.6 / 6, rel=1e-5) == value(of, "arrangement.rotating_factor").value


def test_a_factor_of_another_definition_is_asked_about() -> None:
    """B of 1.5 lies outside what the definition gives."""
    of = department(cylinder(30.0, 20.0))
    assert "outside" in value(of, "arrangement.b_factor_question").value
    assert "none" == value(department(cylinder(52.0, 20.0)), "arrangement.b_factor_question").value


def test_a_factor_on_a_rotating_platform_is_no_factor_of_six_positions() -> None:
    """The technique must agree; the near miss is named."""
    found = finding(department(cylinder(52.0, 20.0, technique="rotating-platform")), "b-factor-measured")
    assert any("rotating-platform" in cause.words for cause in found.causes)


def test_both_xray_fractions_are_kept_apart() -> None:
    """F = (6/B) f1 = 6/2.6 x 0.9 % = 2.077 %, predicted where B is measured but F is not."""
    of = department(cylinder(52.0, 20.0), xrays(("one-dual", 50.0, 0.0, 0.9, None)))
    assert ("measured", 0.9) == (
        value(of, "arrangement.pair_xray_percent").basis,
        value(of, "arrangement.pair_xray_percent").value,
    )
    assert pytest.approx(2.07692, abs=1e-4) == value(of, "arrangement.composite_xray_percent").value
    assert 5.0 == value(of, "arrangement.pair_xray_depth_cm").value


def test_a_measured_composite_fraction_replaces_the_one_worked_out() -> None:
    """F read in a phantom from all fields stands; F worked out from f1 and a predicted B awaits it."""
    worked_out = department(xrays(("one-dual", 50.0, 0.0, 0.9, None)))
    assert "measured" != value(worked_out, "arrangement.composite_xray_percent").basis
    of = department(xrays(("one-dual", 50.0, 0.0, 0.9, None), ("all-dual", 50.0, 0.0, 1.8, None)))
    assert ("measured", 1.8) == (
        value(of, "arrangement.composite_xray_percent").basis,
        value(of, "arrangement.composite_xray_percent").value,
    )


def test_a_claimed_xray_fraction_awaits_its_measurement() -> None:
    """A claim of 0.9 % is used for what follows from it, and the rules wait."""
    claimed = department(beam={"xray_fraction_percent": 0.9, "xray_fraction_depth_cm": 10.0})
    assert "stated" == value(claimed, "arrangement.pair_xray_percent").basis
    assert "not assessed" == finding(claimed, "xray-component-low").outcome


def test_xrays_on_the_tilted_axis_are_compared_with_mid_height() -> None:
    """At 16 degrees and 400 cm the axis meets the plane 86 cm up; there 0.0004 against 0.0002 is a ratio of 2."""
    of = department(xrays(("one-dual", 50.0, 0.0, None, 0.0002), ("one-dual", 50.0, 86.0, None, 0.0004)))
    assert pytest.approx(2.0) == value(of, "arrangement.xray_axis_ratio").value
    assert "met" == finding(of, "xrays-on-tilted-axis").outcome


@pytest.mark.parametrize(
    ("protocol", "due", "outcome"),
    [
        ("tg-51", date(2026, 9, 16), "not met"),
        ("tg-51", date(2027, 9, 16), "met"),
        ("tg-51-addendum", date(2026, 9, 16), "met"),
        ("trs-398", date(2026, 9, 16), "not met"),
    ],
)
def test_the_protocol_edition_decides_on_the_chamber(protocol: str, due: date, outcome: str) -> None:
    """TG-51 as first published and TRS-398 need a plane-parallel chamber in calibration; the addendum does not."""
    of = department(program={"protocol": protocol}, chamber={"calibration_due_on": due})
    assert outcome == finding(of, "chamber-suits-protocol").outcome


def test_the_calibration_of_another_beam_is_not_that_of_this_one() -> None:
    """A calibration of e6 in another mode names another beam."""
    done = date(2026, 2, 12)
    other = department(item("reference_dosimetry", beam_calibrated="linac e9", last_done_on=done))
    own = department(item("reference_dosimetry", beam_calibrated="linac e6", last_done_on=done))
    assert "not met" == finding(other, "reference-calibration-current").outcome
    assert "met" == finding(own, "reference-calibration-current").outcome


def test_a_calibration_grows_old() -> None:
    """On 1 December 2026 a calibration of 12 February is current, one of November 2025 is not."""
    for done, outcome in ((date(2026, 2, 12), "met"), (date(2025, 11, 20), "not met")):
        of = department(item("reference_dosimetry", beam_calibrated="linac e6", last_done_on=done))
        assert outcome == finding(of, "reference-calibration-current").outcome


def test_an_output_in_gray_is_refused() -> None:
    """A factor of 100 from the prediction is a unit, not an output."""
    of = department(output((None, None, 0.0002)))
    assert "gray under a column in cGy/MU" in words(of, "arrangement.pair_output_cgy_per_mu")
    assert not hasattr(got(of, "arrangement.pair_output_cgy_per_mu"), "value")
