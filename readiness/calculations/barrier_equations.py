"""The equations of a barrier one by one: transmission that a design goal allows, and dose behind a wall."""

from math import isfinite

from readiness.calculations.barrier_transmission import wall_transmission

HOURS_A_WEEK = 40.0  # working hours over which a week is averaged (ncrp-151, memory)
WEEKS_A_YEAR = 50.0  # working weeks of a year (ncrp-151, read as quoted)


def primary_transmission(
    *,
    design_goal_msv_per_week: float,
    distance_m: float,
    workload_gy_m2_per_week: float,
    use_factor: float,
    occupancy: float,
) -> float:
    """
    Return the highest transmission a primary barrier may have.

    B = P d^2 / (W U T)

    Args:
        design_goal_msv_per_week: Weekly design goal P beyond the barrier. [mSv/week]
        distance_m: From the x-ray source to 0.3 m beyond the barrier, d. [m]
        workload_gy_m2_per_week: Dose at 1 m from the source, W. [Gy m²/week]
        use_factor: Part of the workload that is aimed at the barrier, U. [1]
        occupancy: Part of the time that a person is there, T. [1]

    Returns:
        Transmission B; 1 or more means that no barrier is needed. [1]

    Raises:
        ValueError: If a number is not above zero, or a factor above 1.

    Valid for: photon barriers; not for neutrons or skyshine.
    Assumes: point source, inverse square, no attenuation in the patient; 1 Gy counts as 1 Sv.
    Source: ncrp-151, Eq. 2.1 (memory).
    """
    _above_zero(design_goal_msv_per_week, distance_m, workload_gy_m2_per_week)
    _factors(use_factor, occupancy)
    return (
        design_goal_msv_per_week * 1e-3 * distance_m**2 / (workload_gy_m2_per_week * use_factor * occupancy)
    )


def leakage_transmission(
    *,
    design_goal_msv_per_week: float,
    distance_m: float,
    leakage_workload_gy_m2_per_week: float,
    leakage_percent: float,
    occupancy: float,
) -> float:
    """
    Return the highest transmission a barrier may have for head leakage.

    B = P d_L^2 / (0.001 W_L T), with the stated leakage in place of 0.001

    Args:
        design_goal_msv_per_week: Weekly design goal P beyond the barrier. [mSv/week]
        distance_m: From the head to 0.3 m beyond the barrier, d_L. [m]
        leakage_workload_gy_m2_per_week: Dose in the beam at 1 m that the leakage goes with, W_L. [Gy m²/week]
        leakage_percent: Of the dose in the beam; 0.1 is the usual upper bound. [%]
        occupancy: Part of the time that a person is there, T. [1]

    Returns:
        Transmission B; 1 or more means that no barrier is needed. [1]

    Raises:
        ValueError: If a number is not above zero, or the occupancy above 1.

    Valid for: photon leakage; not for neutrons.
    Source: ncrp-151, Eq. 2.8 (memory).
    """
    _above_zero(design_goal_msv_per_week, distance_m, leakage_workload_gy_m2_per_week, leakage_percent)
    _factors(occupancy)
    leaking = leakage_percent / 100.0 * leakage_workload_gy_m2_per_week
    return design_goal_msv_per_week * 1e-3 * distance_m**2 / (leaking * occupancy)


def scatter_transmission(
    *,
    design_goal_msv_per_week: float,
    source_patient_m: float,
    patient_point_m: float,
    field_area_cm2: float,
    scatter_fraction: float,
    workload_gy_m2_per_week: float,
    occupancy: float,
) -> float:
    """
    Return the highest transmission a barrier may have for radiation scattered by the patient.

    B = P d_sca^2 d_sec^2 (400/F) / (a W T)

    Args:
        design_goal_msv_per_week: Weekly design goal P beyond the barrier. [mSv/week]
        source_patient_m: From the source to the patient, d_sca. [m]
        patient_point_m: From the patient to 0.3 m beyond the barrier, d_sec. [m]
        field_area_cm2: Area that scatters, F, at 1 m from the source. [cm²]
        scatter_fraction: Part scattered to 1 m for 400 cm2, a. [1]
        workload_gy_m2_per_week: Dose at 1 m from the source, W. [Gy m²/week]
        occupancy: Part of the time that a person is there, T. [1]

    Returns:
        Transmission B; 1 or more means that no barrier is needed. [1]

    Raises:
        ValueError: If a number is not above zero, or the occupancy above 1.

    Source: ncrp-151, Eq. 2.7 (memory).
    """
    _above_zero(design_goal_msv_per_week, source_patient_m, patient_point_m, field_area_cm2, scatter_fraction)
    _above_zero(workload_gy_m2_per_week)
    _factors(occupancy)
    spread = source_patient_m**2 * patient_point_m**2 * 400.0 / field_area_cm2
    return design_goal_msv_per_week * 1e-3 * spread / (scatter_fraction * workload_gy_m2_per_week * occupancy)


def weekly_dose_behind_usv(
    *,
    workload_gy_m2_per_week: float,
    use_factor: float,
    occupancy: float,
    transmission: float,
    distance_m: float,
) -> float:
    """
    Return the weekly dose behind a barrier from one source.

    H = W U T B / d^2

    Args:
        workload_gy_m2_per_week: Dose at 1 m from the source, W. [Gy m²/week]
        use_factor: Part of the workload that comes this way, U; for leakage the leaking part. [1]
        occupancy: Part of the time that a person is there, T; 1 for the dose whether or not. [1]
        transmission: Of the barrier, B. [1]
        distance_m: From the source to 0.3 m beyond the barrier, d. [m]

    Returns:
        Weekly dose H. [µSv/week]

    Raises:
        ValueError: If distance or transmission is not above zero, a factor outside its meaning, or the
            workload below zero.

    Assumes: point source, inverse square; 1 Gy counts as 1 Sv.
    Source: bunker-thesis, App. B (read), from ncrp-151, Eq. 2.1.
    """
    _above_zero(distance_m, transmission)
    _factors(use_factor, occupancy)
    if not (isfinite(workload_gy_m2_per_week) and workload_gy_m2_per_week >= 0.0):
        raise ValueError(f"a workload must not be below zero, not {workload_gy_m2_per_week:g}")
    return workload_gy_m2_per_week * use_factor * occupancy * transmission / distance_m**2 * 1e6


def instantaneous_rate_usv_per_h(
    *, dose_rate_gy_m2_per_h: float, transmission: float, distance_m: float
) -> float:
    """
    Return the dose rate behind a barrier while the beam is on.

    IDR = D0 B / d^2

    Args:
        dose_rate_gy_m2_per_h: At 1 m from the source, D0. [Gy m²/h]
        transmission: Of the barrier, B. [1]
        distance_m: From the source to 0.3 m beyond the barrier, d. [m]

    Returns:
        Rate, not averaged over any time. [µSv/h]

    Raises:
        ValueError: If distance or transmission is not above zero, or the rate below zero.

    Source: bunker-thesis, App. B (read).
    """
    return weekly_dose_behind_usv(
        workload_gy_m2_per_week=dose_rate_gy_m2_per_h,
        use_factor=1.0,
        occupancy=1.0,
        transmission=transmission,
        distance_m=distance_m,
    )


def wall_dose_usv(
    *,
    workload_gy_m2_per_week: float,
    use_factor: float,
    occupancy: float,
    thickness_cm: float,
    tvl1_cm: float,
    tvle_cm: float,
    distance_m: float,
) -> float:
    """
    Return the weekly dose behind a wall of one material whose tenth-value layers are given.

    H = W U T B(t) / d^2

    Args:
        workload_gy_m2_per_week: Dose at 1 m from the source, W. [Gy m²/week]
        use_factor: Part of the workload that comes this way, U. [1]
        occupancy: Part of the time that a person is there, T. [1]
        thickness_cm: Of the wall, t. [cm]
        tvl1_cm: First tenth-value layer. [cm]
        tvle_cm: Equilibrium tenth-value layer. [cm]
        distance_m: From the source to 0.3 m beyond the wall, d. [m]

    Returns:
        Weekly dose H. [µSv/week]

    Raises:
        ValueError: If a number is outside its meaning.

    Assumes: point source, inverse square; 1 Gy counts as 1 Sv.
    Source: bunker-thesis, App. B (read), from ncrp-151, Eq. 2.1-2.3.
    """
    return weekly_dose_behind_usv(
        workload_gy_m2_per_week=workload_gy_m2_per_week,
        use_factor=use_factor,
        occupancy=occupancy,
        transmission=wall_transmission(thickness_cm=thickness_cm, tvl1_cm=tvl1_cm, tvle_cm=tvle_cm),
        distance_m=distance_m,
    )


def wall_rate_usv_per_h(
    *, dose_rate_gy_m2_per_h: float, thickness_cm: float, tvl1_cm: float, tvle_cm: float, distance_m: float
) -> float:
    """
    Return the dose rate behind a wall of one material while the beam is on.

    IDR = D0 B(t) / d^2

    Args:
        dose_rate_gy_m2_per_h: At 1 m from the source, D0. [Gy m²/h]
        thickness_cm: Of the wall, t. [cm]
        tvl1_cm: First tenth-value layer. [cm]
        tvle_cm: Equilibrium tenth-value layer. [cm]
        distance_m: From the source to the point, d. [m]

    Returns:
        Rate, not averaged over any time. [µSv/h]

    Raises:
        ValueError: If a number is outside its meaning.

    Source: bunker-thesis, App. B (read).
    """
    return instantaneous_rate_usv_per_h(
        dose_rate_gy_m2_per_h=dose_rate_gy_m2_per_h,
        transmission=wall_transmission(thickness_cm=thickness_cm, tvl1_cm=tvl1_cm, tvle_cm=tvle_cm),
        distance_m=distance_m,
    )


def hour_from_week_usv(*, weekly_rate_usv_per_week: float, busiest_hour_ratio: float) -> float:
    """
    Return the dose in any one hour of ordinary photon work, averaged from the week.

    R_h = (M/40) R_w

    Args:
        weekly_rate_usv_per_week: Dose of a week without occupancy, R_w. [µSv/week]
        busiest_hour_ratio: Most patients in one hour / mean patients an hour, M. [1]

    Returns:
        Dose in any one hour, R_h. [µSv in any one hour]

    Raises:
        ValueError: If the rate is below zero or the ratio below 1.

    Source: ncrp-151, Eq. 3.13-3.14 (memory).
    """
    if not (isfinite(weekly_rate_usv_per_week) and weekly_rate_usv_per_week >= 0.0):
        raise ValueError(f"a weekly rate must not be below zero, not {weekly_rate_usv_per_week:g}")
    if not busiest_hour_ratio >= 1.0:
        raise ValueError(f"the busiest hour cannot have fewer patients than the mean: {busiest_hour_ratio:g}")
    return busiest_hour_ratio / HOURS_A_WEEK * weekly_rate_usv_per_week


def _above_zero(*numbers: float) -> None:
    """Refuse a number that is not above zero."""
    for number in numbers:
        if not (isfinite(number) and number > 0.0):
            raise ValueError(f"must be above zero, not {number:g}")


def _factors(*factors: float) -> None:
    """Refuse a use factor or occupancy that is not above 0 and at most 1."""
    for factor in factors:
        if not 0.0 < factor <= 1.0:
            raise ValueError(f"a use factor or occupancy lies above 0 and at most at 1, not {factor:g}")
