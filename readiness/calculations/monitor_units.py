"""
Monitor units of six dual fields and of a rotating platform: for planning, limits and checks.

These numbers say whether the mode can deliver a cycle. They are not monitor units to deliver: those come from
the department's own measured factors, calculated and checked by two people for each patient.
"""

import math
from dataclasses import dataclass

from readiness.calculations.field_factor import POSITIONS, b_factor_question, rotating_factor
from readiness.errors import OutsideValidity

TOTAL_OF_BOTH = "total-of-both-beams"
ON_EACH = "on-each-beam"


@dataclass(frozen=True)
class MonitorUnits:
    """Monitor units of one dual field, and of the session and cycle that it belongs to."""

    stated_mu: float  # as the formula gives them, in the pair convention of the output
    pair_mu: float  # both beams together, before rounding
    upper_beam_mu: int
    lower_beam_mu: int
    largest_beam_mu: int
    rounding_percent: float
    session_mu: int
    cycle_mu: int


@dataclass(frozen=True)
class BeamLimit:
    """The largest beam against the highest number that the mode allows in one beam."""

    margin_mu: float
    parts: int


@dataclass(frozen=True)
class OutputPlausibility:
    """Measured over predicted output of the pair, and what it suggests."""

    ratio: float
    agrees: bool
    suggestion: str


def dual_field_mu(
    *,
    dose_per_cycle_gy: float,
    b_factor: float,
    pair_output_cgy_per_mu: float,
    mu_convention: str,
    depth_dose_fraction: float,
    mu_share_upper: float,
    sessions_per_cycle: int,
    definition_confirmed: bool = False,
) -> MonitorUnits:
    """
    Return the monitor units of one of six dual fields.

    MU = 100 D_cycle / (B k p)

    Args:
        dose_per_cycle_gy: Prescribed dose D_cycle of one complete cycle, not of a session. [Gy]
        b_factor: Multiple-field factor B of six dual fields. [1]
        pair_output_cgy_per_mu: Dose k at the calibration point per MU of the pair. [cGy/MU]
        mu_convention: What one MU of the pair means: "total-of-both-beams" or "on-each-beam".
        depth_dose_fraction: Composite depth dose p at the prescription depth over the skin dose. [1]
        mu_share_upper: Part of both beams' MU that the beam aimed at the head delivers. [1]
        sessions_per_cycle: Sessions over which the six positions are shared, 1 or 2. [1]
        definition_confirmed: Whether the definition of an unusual B has been confirmed.

    Returns:
        Monitor units per dual field, beam, session and cycle; beams are rounded to whole MU.

    Raises:
        ValueError: If a number or the convention is impossible.
        OutsideValidity: If B is unusual and not confirmed, the share contradicts the convention, or six
            positions are not shared over one or two sessions.

    Valid for: six positions, each with its full MU on its day.
    Assumes: k was measured with the same share, degrader and distance.
    Source: aapm-23 (memory) for the factors; the formula is derived from their definitions.
    """
    _refuse_impossible(dose_per_cycle_gy, pair_output_cgy_per_mu, depth_dose_fraction, mu_share_upper)
    question = b_factor_question(b_factor=b_factor)
    if question and not definition_confirmed:
        raise OutsideValidity(question)
    if sessions_per_cycle not in (1, 2):
        raise OutsideValidity(f"six positions are shared over one or two sessions, not {sessions_per_cycle}")
    stated = 100 * dose_per_cycle_gy / (b_factor * pair_output_cgy_per_mu * depth_dose_fraction)
    pair = stated * _beams_counted(mu_convention, mu_share_upper)
    return _record(stated, pair, mu_share_upper, POSITIONS // sessions_per_cycle, sessions_per_cycle)


def rotating_mu(
    *,
    dose_per_cycle_gy: float,
    b_factor: float,
    pair_output_cgy_per_mu: float,
    mu_convention: str,
    depth_dose_fraction: float,
    mu_share_upper: float,
    sessions_per_cycle: int,
    definition_confirmed: bool = False,
) -> MonitorUnits:
    """
    Return the monitor units of one session on a rotating platform.

    MU = 100 (D_cycle / n) / ((B / 6) k p)

    Args:
        dose_per_cycle_gy: Prescribed dose D_cycle of one complete cycle. [Gy]
        b_factor: Multiple-field factor B of six dual fields. [1]
        pair_output_cgy_per_mu: Dose k at the calibration point per MU of the pair, patient absent. [cGy/MU]
        mu_convention: What one MU of the pair means: "total-of-both-beams" or "on-each-beam".
        depth_dose_fraction: Composite depth dose p at the prescription depth over the skin dose. [1]
        mu_share_upper: Part of both beams' MU that the beam aimed at the head delivers. [1]
        sessions_per_cycle: Sessions n of a cycle, each with all angles. [1]
        definition_confirmed: Whether the definition of an unusual B has been confirmed.

    Returns:
        Monitor units of the one dual field of a session, per beam, session and cycle.

    Raises:
        ValueError: If a number or the convention is impossible.
        OutsideValidity: If B is unusual and not confirmed, or the share contradicts the convention.

    Valid for: a turning patient, both beams over whole turns.
    Assumes: B/6 stands for the turning patient until it has been measured.
    Source: definition (derived).
    """
    _refuse_impossible(dose_per_cycle_gy, pair_output_cgy_per_mu, depth_dose_fraction, mu_share_upper)
    question = b_factor_question(b_factor=b_factor)
    if question and not definition_confirmed:
        raise OutsideValidity(question)
    if sessions_per_cycle < 1:
        raise ValueError(f"a cycle has at least one session, not {sessions_per_cycle}")
    factor = rotating_factor(b_factor=b_factor)
    session_dose_gy = dose_per_cycle_gy / sessions_per_cycle
    stated = 100 * session_dose_gy / (factor * pair_output_cgy_per_mu * depth_dose_fraction)
    pair = stated * _beams_counted(mu_convention, mu_share_upper)
    return _record(stated, pair, mu_share_upper, 1, sessions_per_cycle)


def beam_against_limit(*, largest_beam_mu: float, mode_limit_mu: float) -> BeamLimit:
    """
    Return how the largest beam stands against the highest number of MU that the mode allows in one beam.

    Args:
        largest_beam_mu: MU of the largest beam. [MU]
        mode_limit_mu: Highest MU that the mode allows in one beam. [MU]

    Returns:
        The margin (negative when the limit is exceeded) and the parts the beam would have to be given in.

    Raises:
        ValueError: If a number is not more than 0.

    Valid for: any mode with a limit per beam.
    Assumes: parts of equal size, each below the limit.
    Source: definition (derived).
    """
    if not largest_beam_mu > 0 or not mode_limit_mu > 0:
        raise ValueError(f"a beam of {largest_beam_mu} MU under a limit of {mode_limit_mu} MU does not exist")
    return BeamLimit(mode_limit_mu - largest_beam_mu, math.ceil(largest_beam_mu / mode_limit_mu))


def output_plausibility(
    *,
    pair_output_cgy_per_mu: float,
    mu_convention: str,
    predicted_output_cgy_per_mu: float,
    allowed_difference_percent: float,
) -> OutputPlausibility:
    """
    Return whether a measured output of the pair is of the predicted size: a check for gross errors only.

    Args:
        pair_output_cgy_per_mu: Measured or stated dose k per MU of the pair. [cGy/MU]
        mu_convention: What one MU of that pair means: "total-of-both-beams" or "on-each-beam".
        predicted_output_cgy_per_mu: Predicted dose per MU, as the total of both beams. [cGy/MU]
        allowed_difference_percent: Difference that is still no sign of a gross error. [%]

    Returns:
        The ratio in the same convention, whether it agrees, and what a disagreement looks like.

    Raises:
        ValueError: If a number or the convention is impossible.

    Valid for: differences of 10 to 20 % and more; never an independent second check.
    Assumes: both beams give the same number of MU.
    Source: practice; the convention's factor of two is derived.
    """
    if not pair_output_cgy_per_mu > 0 or not predicted_output_cgy_per_mu > 0:
        raise ValueError("an output is more than 0 cGy/MU")
    if not 0 < allowed_difference_percent < 33:
        raise ValueError(f"{allowed_difference_percent} % could not be told from a factor of two")
    ratio = pair_output_cgy_per_mu / _beams_counted(mu_convention, 0.5) / predicted_output_cgy_per_mu
    allowed = allowed_difference_percent / 100
    if abs(ratio - 1) <= allowed:
        return OutputPlausibility(ratio, True, "")
    if mu_convention == TOTAL_OF_BOTH and abs(ratio / 2 - 1) <= allowed:
        return OutputPlausibility(ratio, False, "the output looks as if it were per MU on each beam")
    if mu_convention == ON_EACH and abs(ratio * 2 - 1) <= allowed:
        return OutputPlausibility(ratio, False, "the output looks as if it were per MU of both beams")
    return OutputPlausibility(ratio, False, "geometry, degrader, reference output or reading differ")


def _beams_counted(mu_convention: str, mu_share_upper: float) -> int:
    """Return how many times the stated MU are delivered in all: once, or once on each of two beams."""
    if mu_convention == TOTAL_OF_BOTH:
        return 1
    if mu_convention != ON_EACH:
        raise ValueError(f"pair convention {mu_convention!r} is not {TOTAL_OF_BOTH} or {ON_EACH}")
    if not math.isclose(mu_share_upper, 0.5):
        raise OutsideValidity("an output per MU on each beam belongs to equal beams; state it for the total")
    return 2


def _refuse_impossible(dose_gy: float, output: float, depth_dose_fraction: float, share: float) -> None:
    """Refuse numbers that nobody can mean."""
    if not 0 < dose_gy <= 40:
        raise ValueError(f"the dose per cycle must lie above 0 and up to 40 Gy, not {dose_gy}")
    if not output > 0:
        raise ValueError(f"the output of the pair must be more than 0 cGy/MU, not {output}")
    if not 0 < depth_dose_fraction <= 1.1:
        raise ValueError(f"depth dose is a fraction of the skin dose up to 1.1, not {depth_dose_fraction}")
    if not 0 < share < 1:
        raise ValueError(f"the upper beam's share lies between 0 and 1, not {share}")


def _record(stated: float, pair: float, share: float, fields_per_session: int, sessions: int) -> MonitorUnits:
    """Return the rounded beams and their sums."""
    upper, lower = round(pair * share), round(pair * (1 - share))
    return MonitorUnits(
        stated_mu=stated,
        pair_mu=pair,
        upper_beam_mu=upper,
        lower_beam_mu=lower,
        largest_beam_mu=max(upper, lower),
        rounding_percent=100 * ((upper + lower) / pair - 1),
        session_mu=(upper + lower) * fields_per_session,
        cycle_mu=(upper + lower) * fields_per_session * sessions,
    )
