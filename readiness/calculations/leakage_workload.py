"""Dose in the beam at 1 m that the leakage of the head goes with."""

from dataclasses import dataclass
from math import isfinite

LEAKAGE_UPPER_BOUND_PERCENT = 0.1  # of the dose in the beam; an upper bound for electron modes (derived)


@dataclass(frozen=True)
class LeakageWorkload:
    """Leakage workload of the added program."""

    per_cycle_gy_m2: float
    per_week_gy_m2_per_week: float
    mu_per_dose: float


def leakage_workload(
    *,
    cycle_mu: float,
    dose_per_cycle_gy: float,
    output_at_1_m_cgy_per_mu: float,
    cycles_per_week: float,
    extra_week_mu: float,
) -> LeakageWorkload:
    """
    Return the leakage workload of a total skin electron program.

    W_L = (cycles x MU per cycle + extra MU) x output at 1 m / 100;  C = MU per cycle / (100 x Gy per cycle)

    Args:
        cycle_mu: All MU of a cycle, both beams of all dual fields. [MU]
        dose_per_cycle_gy: Skin dose of a cycle. [Gy]
        output_at_1_m_cgy_per_mu: Of the mode at 1 m. [cGy/MU]
        cycles_per_week: Cycles of all patients in the week. [per week]
        extra_week_mu: MU of quality assurance and commissioning in that week. [MU]

    Returns:
        Workload per cycle and week, and MU per dose C (about 110 at a plane distance of 4 m).

    Raises:
        ValueError: If MU, dose or output is not above zero, or another number below zero.

    Source: derived, as ncrp-151, Eq. 3.3-3.5 (memory), for treatment with many MU per dose.
    """
    for number in (cycle_mu, dose_per_cycle_gy, output_at_1_m_cgy_per_mu):
        if not (isfinite(number) and number > 0.0):
            raise ValueError(f"must be above zero, not {number:g}")
    for number in (cycles_per_week, extra_week_mu):
        if not (isfinite(number) and number >= 0.0):
            raise ValueError(f"must not be below zero, not {number:g}")
    per_mu = output_at_1_m_cgy_per_mu / 100.0
    return LeakageWorkload(
        per_cycle_gy_m2=cycle_mu * per_mu,
        per_week_gy_m2_per_week=(cycles_per_week * cycle_mu + extra_week_mu) * per_mu,
        mu_per_dose=cycle_mu / (100.0 * dose_per_cycle_gy),
    )
