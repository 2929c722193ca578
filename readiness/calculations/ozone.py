"""Ozone in the room at the end of a session, from the dose that was given."""

from dataclasses import dataclass
from math import exp, isfinite, log
from typing import cast

from readiness.calculations.published_tables import interpolated, published_table

AIR_MOLECULES_PER_M3 = 2.5035e25  # 101.325 kPa / (k 293.15 K) (derived)
AIR_DENSITY_G_PER_CM3 = 1.20479e-3  # 20 C, 101.325 kPa
ELEMENTARY_CHARGE_C = 1.602176634e-19
CAREFUL_YIELD_PER_100EV = (
    10.3  # molecules; 6.4 to 10.3 are published (memory): the largest is the careful choice
)
DECOMPOSITION_MIN = 50.0  # mean life of ozone by itself (memory)


@dataclass(frozen=True)
class Ozone:
    """Ozone in the room at the end of a session, if that lasted for ever, and how fast it goes."""

    at_end_ppm: float
    lasting_ppm: float
    electrons_per_s: float
    beam_current_ua: float
    rate_per_s: float
    removal_per_s: float
    tenfold_decay_min: float


def ozone_rate_per_s(
    *, beam_current_ua: float, energy_mev: float, path_cm: float, yield_per_100ev: float
) -> float:
    """
    Return how many molecules of ozone a beam makes in a second.

    rate = (G/100) (I/e) S_col rho L

    Args:
        beam_current_ua: Mean current of the electrons that cross the air, I. [µA]
        energy_mev: Of the electrons. [MeV]
        path_cm: In air, L. [cm]
        yield_per_100ev: Molecules per energy given to the air, G. [per 100 eV]

    Returns:
        Molecules of ozone. [per second]

    Raises:
        ValueError: If a number is not above zero.
        OutsideValidity: If the energy lies outside the table of stopping powers.

    Valid for: 1 to 10 MeV and paths in which the electrons lose little of it.
    Source: ncrp-144 (memory); stopping power of estar.
    """
    _above_zero(beam_current_ua, energy_mev, path_cm, yield_per_100ev)
    table = published_table("air_collision_stopping_powers")
    stopping = interpolated(
        at=energy_mev,
        known_at=[float(cast(float, entry)) for entry in table.column("energy_mev")],
        values=[float(cast(float, entry)) for entry in table.column("stopping_power_mev_cm2_per_g")],
        words="an energy in MeV",
    )
    lost_ev = stopping * 1e6 * AIR_DENSITY_G_PER_CM3 * path_cm
    return yield_per_100ev / 100.0 * beam_current_ua * 1e-6 / ELEMENTARY_CHARGE_C * lost_ev


def removal_per_s(*, air_changes_per_h: float, decomposition_min: float) -> float:
    """
    Return the rate at which ventilation and decomposition take ozone away.

    lambda = air changes/3600 + 1/T_d

    Args:
        air_changes_per_h: Of the room. [per hour]
        decomposition_min: Mean life by decomposition, T_d. [min]

    Returns:
        Removal rate. [per second]

    Raises:
        ValueError: If air changes are below zero or the mean life not above it.

    Source: ncrp-144 (memory).
    """
    _above_zero(decomposition_min)
    if not (isfinite(air_changes_per_h) and air_changes_per_h >= 0.0):
        raise ValueError(f"air changes must not be below zero, not {air_changes_per_h:g}")
    return air_changes_per_h / 3600.0 + 1.0 / (decomposition_min * 60.0)


def ozone_ppm(*, rate_per_s: float, volume_m3: float, removed_per_s: float, duration_s: float) -> float:
    """
    Return the concentration of ozone after a time of beam.

    C(t) = rate/(V n lambda) (1 - exp(-lambda t)); without removal rate t/(V n)

    Args:
        rate_per_s: Molecules of ozone made. [per second]
        volume_m3: Of the room, V. [m³]
        removed_per_s: Removal rate, lambda. [per second]
        duration_s: Of the beam, t. [s]

    Returns:
        Concentration by volume, well mixed. [ppm]

    Raises:
        ValueError: If volume or duration is not above zero, or a rate below zero.

    Source: ncrp-144 (memory).
    """
    _above_zero(volume_m3, duration_s)
    if not (rate_per_s >= 0.0 and removed_per_s >= 0.0):
        raise ValueError("a rate must not be below zero")
    share = duration_s if removed_per_s == 0.0 else (1.0 - exp(-removed_per_s * duration_s)) / removed_per_s
    return rate_per_s * share / (volume_m3 * AIR_MOLECULES_PER_M3) * 1e6


def ozone_of_dose_ppm(
    *,
    plane_dose_gy: float,
    fluence_per_cm2_per_gy: float,
    field_area_m2: float,
    energy_lost_mev: float,
    volume_m3: float,
    yield_per_100ev: float,
) -> float:
    """
    Return the ozone that a dose at the plane makes if none of it goes away.

    Args:
        plane_dose_gy: Electron dose at the plane, over all fields. [Gy]
        fluence_per_cm2_per_gy: Electrons per dose. [1/(cm² Gy)]
        field_area_m2: Area that the field covers at the plane. [m²]
        energy_lost_mev: In the air, of one electron. [MeV]
        volume_m3: Of the room. [m³]
        yield_per_100ev: Molecules per energy given to the air. [per 100 eV]

    Returns:
        Concentration by volume, well mixed. [ppm]

    Raises:
        ValueError: If a number is not above zero.

    Source: derived.
    """
    _above_zero(plane_dose_gy, fluence_per_cm2_per_gy, field_area_m2, energy_lost_mev)
    _above_zero(volume_m3, yield_per_100ev)
    electrons = plane_dose_gy * fluence_per_cm2_per_gy * field_area_m2 * 1e4
    molecules = electrons * energy_lost_mev * 1e6 * yield_per_100ev / 100.0
    return molecules / (volume_m3 * AIR_MOLECULES_PER_M3) * 1e6


def ozone_after_session(
    *,
    plane_dose_gy: float,
    fluence_per_cm2_per_gy: float,
    field_area_m2: float,
    energy_lost_mev: float,
    duration_s: float,
    volume_m3: float,
    air_changes_per_h: float,
    yield_per_100ev: float,
    decomposition_min: float,
) -> Ozone:
    """
    Return the ozone in the room at the end of a session, with the beam current worked out from the dose.

    I = e x dose x fluence per dose x area / duration

    Args:
        plane_dose_gy: Electron dose at the plane in the session, over its fields. [Gy]
        fluence_per_cm2_per_gy: Electrons per dose. [1/(cm² Gy)]
        field_area_m2: Area that the field covers at the plane. [m²]
        energy_lost_mev: In the air, of one electron. [MeV]
        duration_s: From first to last beam of the session. [s]
        volume_m3: Of the room. [m³]
        air_changes_per_h: Of the room. [per hour]
        yield_per_100ev: Molecules per energy given to the air. [per 100 eV]
        decomposition_min: Mean life of ozone by decomposition. [min]

    Returns:
        Concentration at the end and if the beam stayed on, current, rates, and time for a tenfold decay.

    Raises:
        ValueError: If a number is not above zero, or air changes below it.

    Assumes: a well mixed room, even beam from first to last.
    Source: derived from ncrp-144 (memory).
    """
    _above_zero(plane_dose_gy, fluence_per_cm2_per_gy, field_area_m2, energy_lost_mev)
    _above_zero(duration_s, volume_m3, yield_per_100ev)
    electrons = plane_dose_gy * fluence_per_cm2_per_gy * field_area_m2 * 1e4 / duration_s
    rate = electrons * energy_lost_mev * 1e6 * yield_per_100ev / 100.0
    removed = removal_per_s(air_changes_per_h=air_changes_per_h, decomposition_min=decomposition_min)
    at_end = ozone_ppm(rate_per_s=rate, volume_m3=volume_m3, removed_per_s=removed, duration_s=duration_s)
    return Ozone(
        at_end_ppm=at_end,
        lasting_ppm=rate / (volume_m3 * AIR_MOLECULES_PER_M3 * removed) * 1e6,
        electrons_per_s=electrons,
        beam_current_ua=electrons * ELEMENTARY_CHARGE_C * 1e6,
        rate_per_s=rate,
        removal_per_s=removed,
        tenfold_decay_min=log(10.0) / removed / 60.0,
    )


def _above_zero(*numbers: float) -> None:
    """Refuse a number that is not above zero."""
    for number in numbers:
        if not (isfinite(number) and number > 0.0):
            raise ValueError(f"must be above zero, not {number:g}")
