"""
Dose of a lying patient carried through a vertical field.

A point that crosses the field at constant speed collects the integral of the dose rate along the travel,
divided by the speed, once per pass. There is no multiple-field factor: each incidence is commissioned.
"""

from dataclasses import dataclass

from scipy.integrate import trapezoid

from readiness.errors import OutsideValidity
from readiness.quantities import Table

HIGHEST_END_PERCENT = 5.0  # of the peak dose rate: more at an end and the travel does not leave the field


@dataclass(frozen=True)
class CouchPass:
    """One pass of the couch: its dose, its time and its monitor units."""

    pass_dose_cgy: float
    incidence_dose_cgy: float
    pass_time_s: float
    pass_mu: float
    incidence_mu: float


def couch_pass(
    *, dose_rate_profile: Table, couch_speed_cm_per_s: float, passes: int, rate_mu_per_min: float
) -> CouchPass:
    """
    Return dose, time and monitor units of one incidence on a moving couch.

    D = n (integral of the dose rate along the travel) / v

    Args:
        dose_rate_profile: Columns position_cm and dose_rate_cgy_per_min at the calibration depth.
        couch_speed_cm_per_s: Speed v of the couch. [cm/s]
        passes: Passes n per incidence. [1]
        rate_mu_per_min: Rate of the mode during the profile and the treatment. [MU/min]

    Returns:
        Dose per pass and incidence, time per pass, monitor units per pass and incidence.

    Raises:
        ValueError: If a number is impossible or the positions do not increase.
        OutsideValidity: If the profile does not reach out of the field on both sides.

    Valid for: points that pass through the entire profile.
    Assumes: constant speed, constant dose rate, beam on over the entire profile.
    Source: definition (derived).
    """
    if not couch_speed_cm_per_s > 0 or passes < 1 or not rate_mu_per_min > 0:
        raise ValueError("speed and rate are more than 0, and there is at least one pass")
    travel_cm, integral_cgy_cm_per_min = _profile_integral(dose_rate_profile)
    pass_dose_cgy = integral_cgy_cm_per_min / (60 * couch_speed_cm_per_s)
    pass_time_s = travel_cm / couch_speed_cm_per_s
    pass_mu = rate_mu_per_min * pass_time_s / 60
    return CouchPass(pass_dose_cgy, passes * pass_dose_cgy, pass_time_s, pass_mu, passes * pass_mu)


def couch_speed_needed(*, dose_rate_profile: Table, incidence_dose_cgy: float, passes: int) -> float:
    """
    Return the couch speed that gives a dose per incidence in a whole number of passes.

    v = n (integral of the dose rate along the travel) / D

    Args:
        dose_rate_profile: Columns position_cm and dose_rate_cgy_per_min at the calibration depth.
        incidence_dose_cgy: Dose D wanted from one incidence. [cGy]
        passes: Passes n per incidence. [1]

    Returns:
        Speed of the couch. [cm/s]

    Raises:
        ValueError: If a number is impossible or the positions do not increase.
        OutsideValidity: If the profile does not reach out of the field on both sides.

    Valid for: points that pass through the entire profile.
    Assumes: constant speed and dose rate.
    Source: definition (derived).
    """
    if not incidence_dose_cgy > 0 or passes < 1:
        raise ValueError(f"{incidence_dose_cgy} cGy in {passes} passes cannot be given")
    _, integral_cgy_cm_per_min = _profile_integral(dose_rate_profile)
    return passes * integral_cgy_cm_per_min / (60 * incidence_dose_cgy)


def _profile_integral(profile: Table) -> tuple[float, float]:
    """Return the length of a dose-rate profile and its integral, in cm and cGy cm/min."""
    positions = [_number(entry) for entry in profile.column("position_cm")]
    rates = [_number(entry) for entry in profile.column("dose_rate_cgy_per_min")]
    if len(positions) < 3 or any(b <= a for a, b in zip(positions, positions[1:], strict=False)):
        raise ValueError("a dose-rate profile has at least three positions in increasing order")
    if min(rates) < 0 or max(rates) <= 0:
        raise ValueError("a dose-rate profile has no negative rate and at least one above 0")
    end_percent = 100 * max(rates[0], rates[-1]) / max(rates)
    if end_percent > HIGHEST_END_PERCENT:
        raise OutsideValidity(
            f"the profile still has {end_percent:.0f} % of its peak at an end: measure further, "
            f"down to {HIGHEST_END_PERCENT:.0f} %, or the dose of a pass is too low"
        )
    return positions[-1] - positions[0], float(trapezoid(rates, positions))


def _number(entry: object) -> float:
    """Return an entry of a profile as a number; blanks and words are refused."""
    if isinstance(entry, bool) or not isinstance(entry, int | float):
        raise ValueError(f"a dose-rate profile holds numbers, not {entry!r}")
    return float(entry)
