"""Monitor units: directions, limits, both pair conventions, and slips that are asked about."""

import math

import pytest

from readiness.calculations.field_factor import b_factor_question, rotating_factor
from readiness.calculations.monitor_units import (
    BeamLimit,
    beam_against_limit,
    dual_field_mu,
    output_plausibility,
    rotating_mu,
)
from readiness.errors import OutsideValidity

CASE = {
    "dose_per_cycle_gy": 2.0,
    "b_factor": 2.7,
    "pair_output_cgy_per_mu": 0.0193,
    "mu_convention": "total-of-both-beams",
    "depth_dose_fraction": 1.0,
    "mu_share_upper": 0.5,
    "sessions_per_cycle": 2,
}


def test_monitor_units_give_the_cycle_dose_back() -> None:
    """Pair MU times k, B and p is the cycle's dose: all six dual fields make it, each with its full MU."""
    found = dual_field_mu(**(CASE | {"depth_dose_fraction": 0.93}))
    assert 2.0 == pytest.approx(found.pair_mu * 0.0193 * 2.7 * 0.93 / 100)


@pytest.mark.parametrize(
    "changes",
    [{"dose_per_cycle_gy": 1.9}, {"b_factor": 2.8}, {"pair_output_cgy_per_mu": 0.02}, {"depth_dose_fraction": 1.05}],
)
def test_directions(changes: dict) -> None:
    """Less dose, or more B, output or depth dose, takes fewer MU."""
    assert dual_field_mu(**(CASE | changes)).pair_mu < dual_field_mu(**CASE).pair_mu


def test_wrong_convention_is_a_factor_of_two() -> None:
    """The same k read in the other convention doubles what is delivered."""
    total, each = dual_field_mu(**CASE), dual_field_mu(**(CASE | {"mu_convention": "on-each-beam"}))
    assert total.stated_mu == each.stated_mu
    assert 2 * total.pair_mu == each.pair_mu
    assert 2 == pytest.approx(each.largest_beam_mu / total.largest_beam_mu, rel=1e-3)


def test_split_and_rounding() -> None:
    """A share of 0.52 goes to the upper beam; beams are whole MU and their rounding is reported."""
    found = dual_field_mu(**(CASE | {"mu_share_upper": 0.52}))
    assert (1996, 1842, 1996) == (found.upper_beam_mu, found.lower_beam_mu, found.largest_beam_mu)
    assert 100 * (3838 / found.pair_mu - 1) == pytest.approx(found.rounding_percent)
    assert 3 * 3838 == found.session_mu
    assert 6 * 3838 == found.cycle_mu


def test_rounding_is_small() -> None:
    """Whole MU change the dose by less than 0.03 % when a pair takes thousands."""
    doses = [1.0 + 0.01 * step for step in range(100)]
    errors = [dual_field_mu(**(CASE | {"dose_per_cycle_gy": dose})).rounding_percent for dose in doses]
    assert max(map(abs, errors)) < 100 / dual_field_mu(**(CASE | {"dose_per_cycle_gy": 1.0})).pair_mu


def test_one_session_holds_all_six_dual_fields() -> None:
    """With one session a cycle, the session's MU are the cycle's."""
    found = dual_field_mu(**(CASE | {"sessions_per_cycle": 1}))
    assert found.cycle_mu == found.session_mu == 6 * (found.upper_beam_mu + found.lower_beam_mu)


def test_rotating_platform_takes_the_same_mu_per_cycle() -> None:
    """B/6 and one dual field a session take, per cycle, what six dual fields take, up to rounding."""
    assert dual_field_mu(**CASE).cycle_mu == pytest.approx(rotating_mu(**CASE).cycle_mu, abs=6)
    assert rotating_mu(**CASE).session_mu == pytest.approx(rotating_mu(**CASE).cycle_mu / 2)


def test_usual_b_gives_the_usual_rotating_factor() -> None:
    """B of 2.4 to 2.82 are factors of 0.40 to 0.47 on a rotating platform."""
    assert [0.40, 0.47] == pytest.approx([rotating_factor(b_factor=2.4), rotating_factor(b_factor=2.82)])


@pytest.mark.parametrize("b_factor", [2.3, 2.4, 2.68, 3.07, 3.1])
def test_expected_b_raises_no_question(b_factor: float) -> None:
    """Factors of six dual fields, without a degrader or on a thin cylinder, are not questioned."""
    assert b_factor_question(b_factor=b_factor) == ""


@pytest.mark.parametrize(
    ("b_factor", "words"), [(0.45, "rotating platform"), (1.5, "outside 2.3 to 3.1"), (3.2, "on which body")]
)
def test_unusual_b_asks_for_its_definition(b_factor: float, words: str) -> None:
    """An unusual B is a question, no MU are calculated until its definition is confirmed."""
    assert words in b_factor_question(b_factor=b_factor)
    for calculation in (dual_field_mu, rotating_mu):
        with pytest.raises(OutsideValidity, match=words):
            calculation(**(CASE | {"b_factor": b_factor}))
        assert calculation(**(CASE | {"b_factor": b_factor, "definition_confirmed": True})).pair_mu > 0


def test_beam_over_the_limit_is_told() -> None:
    """1,919 MU leave 81 under a limit of 2,000; 3,838 exceed it and would take two parts."""
    assert BeamLimit(81.0, 1) == beam_against_limit(largest_beam_mu=1919, mode_limit_mu=2000)
    assert BeamLimit(-1838.0, 2) == beam_against_limit(largest_beam_mu=3838, mode_limit_mu=2000)
    assert BeamLimit(0.0, 1) == beam_against_limit(largest_beam_mu=2000, mode_limit_mu=2000)


@pytest.mark.parametrize(
    ("output", "convention", "agrees", "suggestion"),
    [
        (0.0193, "total-of-both-beams", True, ""),
        (0.0386, "on-each-beam", True, ""),
        (0.0386, "total-of-both-beams", False, "per MU on each beam"),
        (0.0193, "on-each-beam", False, "per MU of both beams"),
        (0.0280, "total-of-both-beams", False, "geometry, degrader"),
        (0.0097, "total-of-both-beams", False, "geometry, degrader"),
    ],
)
def test_output_far_from_the_prediction(output: float, convention: str, agrees: bool, suggestion: str) -> None:
    """A factor of two in the direction of the other convention is named as such, no other difference is."""
    found = output_plausibility(
        pair_output_cgy_per_mu=output,
        mu_convention=convention,
        predicted_output_cgy_per_mu=0.0198,
        allowed_difference_percent=20.0,
    )
    assert agrees == found.agrees
    assert suggestion in found.suggestion


@pytest.mark.parametrize(
    ("changes", "error", "message"),
    [
        ({"dose_per_cycle_gy": 0.0}, ValueError, "above 0 and up to 40 Gy"),
        ({"dose_per_cycle_gy": 200.0}, ValueError, "above 0 and up to 40 Gy"),
        ({"dose_per_cycle_gy": math.nan}, ValueError, "above 0 and up to 40 Gy"),
        ({"pair_output_cgy_per_mu": 0.0}, ValueError, "more than 0 cGy/MU"),
        ({"depth_dose_fraction": 93.0}, ValueError, "fraction of the skin dose"),
        ({"mu_share_upper": 1.0}, ValueError, "between 0 and 1"),
        ({"mu_convention": ""}, ValueError, "pair convention '' is not"),
        ({"b_factor": 0.0}, ValueError, "more than 0"),
        ({"mu_convention": "on-each-beam", "mu_share_upper": 0.52}, OutsideValidity, "equal beams"),
    ],
)
@pytest.mark.parametrize("calculation", [dual_field_mu, rotating_mu])
def test_impossible_numbers_are_refused(calculation, changes: dict, error: type, message: str) -> None:
    """Numbers and conventions that nobody can mean are refused with words; there is no default convention."""
    with pytest.raises(error, match=message):
        calculation(**(CASE | changes))


def test_sessions_that_do_not_share_six_positions() -> None:
    """Six positions over three sessions are not described; a cycle of no session is impossible."""
    with pytest.raises(OutsideValidity, match="one or two sessions, not 3"):
        dual_field_mu(**(CASE | {"sessions_per_cycle": 3}))
    with pytest.raises(ValueError, match="at least one session"):
        rotating_mu(**(CASE | {"sessions_per_cycle": 0}))


@pytest.mark.parametrize(
    ("call", "arguments"),
    [
        (beam_against_limit, {"largest_beam_mu": 1.0, "mode_limit_mu": 0.0}),
        (rotating_factor, {"b_factor": -1.0}),
        (
            output_plausibility,
            {
                "pair_output_cgy_per_mu": 0.02,
                "mu_convention": "on-each-beam",
                "predicted_output_cgy_per_mu": 0.02,
                "allowed_difference_percent": 50.0,
            },
        ),
        (
            output_plausibility,
            {
                "pair_output_cgy_per_mu": 0.02,
                "mu_convention": "on-each-beam",
                "predicted_output_cgy_per_mu": 0.0,
                "allowed_difference_percent": 20.0,
            },
        ),
    ],
)
def test_checks_refuse_what_they_cannot_compare(call, arguments: dict) -> None:
    """Checks on nothing are refused."""
    with pytest.raises(ValueError):  # noqa: PT011  (each message is a sentence of its own)
        call(**arguments)
