"""X-ray workload that a total skin electron program aims at the wall behind the patient."""

from dataclasses import dataclass
from math import exp, isfinite

from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table

WATER_ATTENUATION_PER_CM = 0.058  # x rays of a 6 MeV electron beam at distance (derived)
NEAR_6_MEV = (5.0, 8.0)  # where that attenuation is used as it stands (practice)
LOBE_ALLOWANCE = 2.0  # the lobes miss the body in which the fraction was measured (assumed)
FIELDS = ("one-dual", "all-dual")
STEP_COLUMNS = ("step", "symbol", "amount", "unit", "basis", "source")


@dataclass(frozen=True)
class XRayWorkload:
    """X-ray dose at 1 m per spot that a tilted beam hits, with the steps that lead to it."""

    per_cycle_gy_m2: float
    per_week_gy_m2_per_week: float
    cycles_per_week: float
    factor_over_plain: float
    steps: Table


def attenuation_basis(*, beam_energy_mev: float, depth_cm: float) -> str:
    """
    Return how far the attenuation in water near 6 MeV holds for the x rays of a beam.

    Args:
        beam_energy_mev: Of the electrons at the source, the end point of the x rays. [MeV]
        depth_cm: Of water in front of the point where the x rays were measured. [cm]

    Returns:
        Words for the steps: as given near 6 MeV and without water; careful above, where water takes less.

    Raises:
        ValueError: If the energy is not above zero or the depth below it.
        OutsideValidity: Below 5 MeV, where water takes more and the workload would come out too small.

    Valid for: electrons of 5 MeV or more.
    Source: practice.
    """
    _check(above=(beam_energy_mev,), at_least=(depth_cm,))
    low, high = NEAR_6_MEV
    if depth_cm == 0.0 or low <= beam_energy_mev <= high:
        return "as given"
    if beam_energy_mev < low:
        raise OutsideValidity(
            f"the attenuation of x rays in water is that near 6 MeV; for {beam_energy_mev:.3g} MeV it would "
            f"understate what {depth_cm:g} cm of water took away: let the qualified expert state the x rays "
            "at the plane without water"
        )
    return "of 6 MeV, careful above 8 MeV"


def workload_from_axis_dose(
    *,
    axis_cgy_per_mu: float,
    double_tilt_cgy_per_mu: float,
    plane_distance_cm: float,
    cycle_mu: float,
    cycles_per_week: float,
    extra_week_mu: float,
) -> XRayWorkload:
    """
    Return the x-ray workload of one spot from the x-ray dose per MU on the tilted axis and 2t off it.

    W_x = (MU/2) [x(0) + x(2t)] d^2

    Args:
        axis_cgy_per_mu: X-ray dose per MU at the plane on the tilted axis, without water, x(0). [cGy/MU]
        double_tilt_cgy_per_mu: The same at twice the tilt from the axis, x(2t). [cGy/MU]
        plane_distance_cm: From the source to the plane where both were measured, d. [cm]
        cycle_mu: All MU of a cycle, both beams of all dual fields. [MU]
        cycles_per_week: Cycles of all patients in the week. [per week]
        extra_week_mu: MU of quality assurance and commissioning in that week. [MU]

    Returns:
        Workload per cycle and week, and the steps.

    Raises:
        ValueError: If a distance or MU is not above zero, or another number below zero.

    Assumes: both beams get the same MU; inverse square from the plane.
    Source: ncrp-151, sec. 3.2.2 for the far plane (memory); sum over both beams derived.
    """
    _check(above=(plane_distance_cm, cycle_mu), at_least=(axis_cgy_per_mu, double_tilt_cgy_per_mu))
    square = (plane_distance_cm / 100.0) ** 2
    at_plane = cycle_mu / 2.0 * (axis_cgy_per_mu + double_tilt_cgy_per_mu) / 100.0
    per_cycle = at_plane * square
    cycles = _all_cycles(cycles_per_week, extra_week_mu, cycle_mu)
    steps: list[tuple[Scalar, ...]] = [
        ("x rays on the tilted axis", "x(0)", axis_cgy_per_mu, "cGy/MU", "as given", "measurement"),
        ("x rays at twice the tilt", "x(2t)", double_tilt_cgy_per_mu, "cGy/MU", "as given", "measurement"),
        ("both fields, over the MU of a cycle", "D_x", at_plane, "Gy", "product", "program"),
        ("distance of the plane, squared", "d^2", square, "m²", "as given", "program"),
    ]
    return _workload(per_cycle, cycles, 1.0, steps)


def workload_from_pair_dose(
    *,
    pair_cgy_per_mu: float,
    plane_distance_cm: float,
    cycle_mu: float,
    cycles_per_week: float,
    extra_week_mu: float,
    depth_cm: float = 0.0,
    water_attenuation_per_cm: float | None = None,
    water_basis: str = "as given",
) -> XRayWorkload:
    """
    Return the x-ray workload of one spot from the x-ray dose per MU of the pair at the height of its axis.

    W_x = MU x exp(mu z) d^2

    Args:
        pair_cgy_per_mu: Highest x-ray dose per MU of the pair over the plane, x. [cGy/MU]
        plane_distance_cm: From the source to the plane where it was measured, d. [cm]
        cycle_mu: All MU of a cycle, both beams of all dual fields. [MU]
        cycles_per_week: Cycles of all patients in the week. [per week]
        extra_week_mu: MU of quality assurance and commissioning in that week. [MU]
        depth_cm: Of water in front of the point where it was measured, z. [cm]
        water_attenuation_per_cm: Of the x rays in water, mu; None assumes that of 6 MeV. [1/cm]
        water_basis: How that attenuation is known, in words.

    Returns:
        Workload per cycle and week, and the steps.

    Raises:
        ValueError: If a distance or MU is not above zero, or another number below zero.

    Valid for: attenuation of 6 MeV, careful for more.
    Assumes: MU counted as the total of both beams; inverse square from the plane.
    Source: ncrp-151, sec. 3.2.2 for the far plane (memory); water derived.
    """
    mu = WATER_ATTENUATION_PER_CM if water_attenuation_per_cm is None else water_attenuation_per_cm
    _check(above=(plane_distance_cm, cycle_mu), at_least=(pair_cgy_per_mu, depth_cm, mu))
    square, water = (plane_distance_cm / 100.0) ** 2, exp(mu * depth_cm)
    at_plane, basis = cycle_mu * pair_cgy_per_mu / 100.0, _basis(water_attenuation_per_cm, water_basis)
    cycles = _all_cycles(cycles_per_week, extra_week_mu, cycle_mu)
    steps: list[tuple[Scalar, ...]] = [
        ("x rays of the pair", "x", pair_cgy_per_mu, "cGy/MU", "as given", "measurement"),
        ("over the MU of a cycle", "D_x", at_plane, "Gy", "product", "program"),
        ("water in front of it", "exp(mu z)", water, "", basis, "derived"),
        ("distance of the plane, squared", "d^2", square, "m²", "as given", "program"),
    ]
    return _workload(at_plane * water * square, cycles, 1.0, steps)


def workload_from_fraction(
    *,
    xray_fraction_percent: float,
    fields: str | None,
    depth_cm: float | None,
    dose_per_cycle_gy: float,
    multiple_field_factor: float,
    plane_distance_cm: float,
    water_attenuation_per_cm: float | None,
    lobe_allowance: float | None,
    cycles_per_week: float,
    extra_week_mu: float,
    cycle_mu: float | None,
    water_basis: str = "as given",
) -> XRayWorkload:
    """
    Return the x-ray workload of one spot from an x-ray fraction, with the three factors that belong to it.

    W_x = D f1 (6/B) exp(mu z) L d^2; for the fraction F of all dual fields without 6/B

    Left out, the three factors understate the dose behind the wall by about eight.

    Args:
        xray_fraction_percent: X-ray dose as a part of the calibration-point (f1) or skin dose (F). [%]
        fields: ``one-dual`` for f1, ``all-dual`` for F; None if nobody said which.
        depth_cm: Of water in front of the point where it was measured; None if nobody said. [cm]
        dose_per_cycle_gy: Skin dose of a cycle, D. [Gy]
        multiple_field_factor: B: skin dose of all six dual fields / calibration-point dose of one. [1]
        plane_distance_cm: From the source to the plane, d. [cm]
        water_attenuation_per_cm: Of the x rays in water, mu; None assumes that of 6 MeV. [1/cm]
        lobe_allowance: X rays on the axis of a lobe / in the body, L; None assumes 2. [1]
        cycles_per_week: Cycles of all patients in the week. [per week]
        extra_week_mu: MU of quality assurance and commissioning in that week. [MU]
        cycle_mu: All MU of a cycle; needed only for extra MU. [MU]
        water_basis: How the attenuation in water is known, in words.

    Returns:
        Workload per cycle and week, the factor over the plain fraction, and the steps.

    Raises:
        ValueError: If a number is outside its meaning.
        OutsideValidity: If depth or definition of the fraction is missing, or it is not believable, or
            extra MU are given without the MU of a cycle.

    Valid for: six standing positions and the rotating platform; attenuation of 6 MeV, careful for more.
    Assumes: inverse square from the plane.
    Source: derived; definitions of f1 and F as in the physics of the technique.
    """
    mu = WATER_ATTENUATION_PER_CM if water_attenuation_per_cm is None else water_attenuation_per_cm
    lobe = LOBE_ALLOWANCE if lobe_allowance is None else lobe_allowance
    if fields is None or depth_cm is None:
        raise OutsideValidity(
            "an x-ray fraction says nothing about a wall without the depth at which it was measured and "
            "whether it is of one dual field (f1) or of all of them (F)"
        )
    if fields not in FIELDS:
        raise ValueError(f"the fields of an x-ray fraction are one-dual or all-dual, not {fields!r}")
    if not 0.05 <= xray_fraction_percent <= 20.0:
        raise OutsideValidity(
            f"an x-ray fraction of {xray_fraction_percent:g} % is not believable; air alone gives 0.1 %"
        )
    _check(above=(dose_per_cycle_gy, multiple_field_factor, plane_distance_cm))
    _check(above=(lobe,), at_least=(mu, depth_cm))
    turned = 6.0 / multiple_field_factor if fields == "one-dual" else 1.0
    water, basis = exp(mu * depth_cm), _basis(water_attenuation_per_cm, water_basis)
    square = (plane_distance_cm / 100.0) ** 2
    plain = dose_per_cycle_gy * xray_fraction_percent / 100.0 * square
    symbol = "f1" if fields == "one-dual" else "F"
    steps: list[tuple[Scalar, ...]] = [
        ("skin dose of a cycle", "D", dose_per_cycle_gy, "Gy", "as given", "program"),
        ("x-ray fraction", symbol, xray_fraction_percent, "%", "as given", "stated or measured"),
        ("six dual fields against the skin dose", "6/B", turned, "", "as given", "derived"),
        ("water in front of it", "exp(mu z)", water, "", basis, "derived"),
        ("lobes that miss the body", "L", lobe, "", _basis(lobe_allowance), "derived"),
        ("distance of the plane, squared", "d^2", square, "m²", "as given", "program"),
    ]
    factor = turned * water * lobe
    cycles = _all_cycles(cycles_per_week, extra_week_mu, cycle_mu)
    return _workload(plain * factor, cycles, factor, steps)


def _workload(
    per_cycle: float, cycles: float, factor: float, steps: list[tuple[Scalar, ...]]
) -> XRayWorkload:
    """Return the record with its last steps added."""
    steps = [
        *steps,
        ("x rays at 1 m in a cycle", "W_x", per_cycle, "Gy m²", "product", "derived"),
        ("cycles in the week, with extra MU", "N", cycles, "per week", "as given", "program"),
        ("x rays at 1 m in the week", "W_x N", per_cycle * cycles, "Gy m²/week", "product", "derived"),
    ]
    return XRayWorkload(per_cycle, per_cycle * cycles, cycles, factor, Table.of(STEP_COLUMNS, steps))


def _all_cycles(cycles_per_week: float, extra_week_mu: float, cycle_mu: float | None) -> float:
    """Return the cycles of a week, extra MU counted in cycles."""
    _check(at_least=(cycles_per_week, extra_week_mu))
    if extra_week_mu == 0.0:
        return cycles_per_week
    if cycle_mu is None:
        raise OutsideValidity("MU of quality assurance cannot be counted without the MU of a cycle")
    _check(above=(cycle_mu,))
    return cycles_per_week + extra_week_mu / cycle_mu


def _basis(given: float | None, words: str = "as given") -> str:
    """Return whether a factor was given or assumed."""
    return "assumed" if given is None else words


def _check(*, above: tuple[float, ...] = (), at_least: tuple[float, ...] = ()) -> None:
    """Refuse numbers that are not above, or not at least, zero."""
    for number in above:
        if not (isfinite(number) and number > 0.0):
            raise ValueError(f"must be above zero, not {number:g}")
    for number in at_least:
        if not (isfinite(number) and number >= 0.0):
            raise ValueError(f"must not be below zero, not {number:g}")
