"""What a barrier lacks: tenth-value layers, centimetres of a material, or the cycles that fit instead."""

from dataclasses import dataclass
from math import floor, log10
from typing import cast

from readiness.calculations.tenth_value_layers import material_named, tenth_value_layers
from readiness.errors import OutsideValidity
from readiness.quantities import Table


@dataclass(frozen=True)
class RequiredThickness:
    """What must be added outside of a barrier; all zero where nothing is lacking."""

    extra_tvl: float
    concrete_cm: float
    steel_cm: float
    lead_cm: float


@dataclass(frozen=True)
class FittingCycles:
    """How many cycles a week stay within the design goal; None where nothing is added behind the barrier."""

    fits_without_program: bool
    cycles_per_week: int | None
    patients: int | None


@dataclass(frozen=True)
class FittingSessions:
    """How many sessions stay within the limit of an hour; None where photon work alone exceeds it."""

    extra_tvl: float
    sessions: int | None


def required_thickness(*, contributions: Table, limit_usv_per_week: float) -> RequiredThickness:
    """
    Return the material that brings the sum of all contributions down to a limit.

    sum of H_i 10^-(t/TVLe_i) = P, solved for t; extra TVL = log10(sum of H_i / P)

    Args:
        contributions: As ``weekly_dose`` gives them; for an hour, rows and limit scaled alike.
        limit_usv_per_week: What the sum may be, P. [µSv/week]

    Returns:
        Tenth-value layers, and centimetres of concrete (2.35 g/cm3), steel or lead, each alone.

    Raises:
        ValueError: If the limit is not above zero.
        OutsideValidity: If an energy lies outside the tables.

    Valid for: material added outside, behind at least one tenth-value layer.
    Assumes: equilibrium tenth-value layers; distances as they are.
    Source: derived from ncrp-151, Eq. 2.2-2.3 (memory).
    """
    if not limit_usv_per_week > 0.0:
        raise ValueError(f"a limit must be above zero, not {limit_usv_per_week:g}")
    total = sum(cast(float, dose) for dose in contributions.column("dose_usv_per_week"))
    if total <= limit_usv_per_week:
        return RequiredThickness(0.0, 0.0, 0.0, 0.0)
    return RequiredThickness(
        log10(total / limit_usv_per_week),
        *(
            _added_cm(contributions, limit_usv_per_week, material)
            for material in ("concrete", "steel", "lead")
        ),
    )


def cycles_that_fit(
    *,
    before_usv_per_week: float,
    added_usv_per_week: float,
    cycles_per_week: float,
    patient_cycles_per_week: float,
    design_goal_msv_per_week: float,
) -> FittingCycles:
    """
    Return how many cycles a week, and patients at once, stay within the design goal.

    Args:
        before_usv_per_week: Existing dose of a week. [µSv/week]
        added_usv_per_week: Added dose of the week that was computed. [µSv/week]
        cycles_per_week: Cycles in that week. [per week]
        patient_cycles_per_week: Cycles that a patient has in a week. [per week]
        design_goal_msv_per_week: Weekly design goal. [mSv/week]

    Returns:
        Whole cycles and patients; none fit where the existing work alone exceeds the goal.

    Raises:
        ValueError: If a dose is below zero or another number not above it.

    Source: derived.
    """
    if not (before_usv_per_week >= 0.0 and added_usv_per_week >= 0.0):
        raise ValueError("a dose must not be below zero")
    if not (cycles_per_week > 0.0 and patient_cycles_per_week > 0.0 and design_goal_msv_per_week > 0.0):
        raise ValueError("cycles and design goal must be above zero")
    left = design_goal_msv_per_week * 1e3 - before_usv_per_week
    if left < 0.0:
        return FittingCycles(False, 0, 0)
    if added_usv_per_week == 0.0:
        return FittingCycles(True, None, None)
    cycles = floor(left / (added_usv_per_week / cycles_per_week) + 1e-9)
    return FittingCycles(True, cycles, floor(cycles / patient_cycles_per_week + 1e-9))


def sessions_that_fit(
    *,
    usv_in_any_hour: float,
    photon_usv_in_any_hour: float,
    session_usv: float,
    limit_usv_in_any_hour: float,
) -> FittingSessions:
    """
    Return what the limit of an hour lacks: tenth-value layers, or how many sessions an hour may hold.

    extra TVL = log10(R_h / limit); n = (limit - photon part) / dose of a session

    Args:
        usv_in_any_hour: Largest dose in 60 minutes, R_h. [µSv in any one hour]
        photon_usv_in_any_hour: Of it from photon work beside the sessions. [µSv in any one hour]
        session_usv: Dose of one session. [µSv]
        limit_usv_in_any_hour: What the hour may give. [µSv in any one hour]

    Returns:
        Tenth-value layers, zero where nothing is lacking, and whole sessions.

    Raises:
        ValueError: If a dose is below zero or the limit not above it.

    Source: derived.
    """
    if not (usv_in_any_hour >= 0.0 and photon_usv_in_any_hour >= 0.0 and session_usv >= 0.0):
        raise ValueError("a dose must not be below zero")
    if not limit_usv_in_any_hour > 0.0:
        raise ValueError(f"a limit must be above zero, not {limit_usv_in_any_hour:g}")
    missing = max(0.0, log10(usv_in_any_hour / limit_usv_in_any_hour)) if usv_in_any_hour else 0.0
    left = limit_usv_in_any_hour - photon_usv_in_any_hour
    if left < 0.0 or not session_usv:
        return FittingSessions(missing, None)
    return FittingSessions(missing, floor(left / session_usv + 1e-9))


def _added_cm(contributions: Table, limit: float, material: str) -> float:
    """Return the thickness of one material, by halving the interval in which it lies."""
    density = material_named(material=material).reference_density_g_per_cm3
    parts: list[tuple[float, float]] = []
    for row in contributions.records():
        angle = row["angle_deg"]
        layer = tenth_value_layers(
            material=material,
            density_g_per_cm3=density,
            radiation=str(row["radiation"]),
            energy_mv=float(cast(float, row["energy_mv"])),
            angle_deg=None if angle is None else float(angle),
        )
        parts.append((float(cast(float, row["dose_usv_per_week"])), layer.tvle_cm))
    tenths = log10(sum(dose for dose, _ in parts) / limit)
    low, high = 0.0, tenths * max(layer for _, layer in parts)
    for _ in range(60):
        middle = (low + high) / 2.0
        if sum(dose * 10.0 ** -(middle / layer) for dose, layer in parts) > limit:
            low = middle
        else:
            high = middle
    if not high < 1e4:
        raise OutsideValidity("the missing thickness is beyond any wall")
    return high
