"""The sources of dose behind a barrier: what is there already and what the added program brings."""

from math import isfinite
from typing import NamedTuple, cast

from readiness.calculations.tenth_value_layers import scatter_fraction
from readiness.errors import OutsideValidity
from readiness.quantities import Table

EXISTING_KINDS = ("primary", "leakage")
LARGEST_SCATTER_ANGLE_DEG = 135.0  # where both scatter tables still hold; less is scattered beyond it


class Source(NamedTuple):
    """One source of dose: H = W factor T B / d^2."""

    name: str
    added: bool
    radiation: str
    energy_mv: float
    angle_deg: float | None
    workload_gy_m2_per_week: float
    factor: float
    distance_m: float
    formula: str
    source: str


def existing_sources(
    *, existing: Table, primary_distance_m: float | None, isocentre_distance_m: float | None
) -> list[Source]:
    """
    Return the photon work that is there already.

    Args:
        existing: energy_mv, kind (primary or leakage), workload_gy_per_week at 1 m, use_factor, distance_m.
        primary_distance_m: From the source of primary beams to 0.3 m beyond the barrier. [m]
        isocentre_distance_m: From the isocentre to 0.3 m beyond the barrier, for leakage. [m]

    Returns:
        One source of dose per row, in their order.

    Raises:
        ValueError: If a kind is neither primary nor leakage.
        OutsideValidity: If a distance or use factor that is needed is not stated.

    Assumes: leakage of 0.1 %.
    Source: ncrp-151, Eq. 2.1, 2.8 (memory).
    """
    sources: list[Source] = []
    for row in existing.records():
        kind, energy = row["kind"], float(cast(float, row["energy_mv"]))
        if kind not in EXISTING_KINDS:
            raise ValueError(f"an existing workload is primary or leakage, not {kind!r}")
        workload = float(cast(float, row["workload_gy_per_week"]))
        own = row.get("distance_m")
        usual = primary_distance_m if kind == "primary" else isocentre_distance_m
        distance = usual if own is None else float(cast(float, own))
        if distance is None:
            raise OutsideValidity(f"the distance for the existing {kind} workload is not stated")
        name = f"existing {energy:g} MV {kind}"
        if kind == "leakage":
            formula, at = "0.001 W_L T B / d_L^2", "ncrp-151, Eq. 2.8 (memory)"
            sources.append(Source(name, False, kind, energy, None, workload, 1e-3, distance, formula, at))
            continue
        if row.get("use_factor") is None:
            raise OutsideValidity(f"the use factor of the existing {energy:g} MV beam is not stated")
        use = float(cast(float, row["use_factor"]))
        formula, at = "W U T B / d^2", "ncrp-151, Eq. 2.1 (memory)"
        sources.append(Source(name, False, "primary", energy, None, workload, use, distance, formula, at))
    return sources


def added_beams(
    *,
    beam_energy_mv: float,
    xray_workload_gy_m2_per_week: float,
    xray_distance_m: float | None,
    leakage_workload_gy_m2_per_week: float,
    leakage_percent: float,
    head_distance_m: float,
) -> list[Source]:
    """
    Return the x rays of the tilted fields, where they go, and the leakage of the head.

    Args:
        beam_energy_mv: End point of the x rays. [MV]
        xray_workload_gy_m2_per_week: X rays at 1 m per spot. [Gy m²/week]
        xray_distance_m: From the source to 0.3 m beyond the barrier; None where no field goes. [m]
        leakage_workload_gy_m2_per_week: Dose in the beam at 1 m that the leakage goes with. [Gy m²/week]
        leakage_percent: Of that dose. [%]
        head_distance_m: From the head to 0.3 m beyond the barrier. [m]

    Returns:
        One or two sources of dose; x rays with a use factor of 1, because the gantry stands still.

    Source: ncrp-151, Eq. 2.1, 2.8 (memory); applied to the tilted fields: derived.
    """
    energy_mv, xray_m, head_m = beam_energy_mv, xray_distance_m, head_distance_m
    workloads = (xray_workload_gy_m2_per_week, leakage_workload_gy_m2_per_week)
    sources: list[Source] = []
    if xray_m is not None:
        formula, at = "W_x T B / d^2, use factor 1", "ncrp-151, Eq. 2.1 (memory), applied to W_x"
        sources.append(
            Source("added x rays", True, "primary", energy_mv, None, workloads[0], 1.0, xray_m, formula, at)
        )
    part = leakage_percent / 100.0
    formula, at = f"{part:g} W_L T B / d_L^2", "ncrp-151, Eq. 2.8 (memory)"
    sources.append(
        Source("added leakage", True, "leakage", energy_mv, None, workloads[1], part, head_m, formula, at)
    )
    return sources


def scatter_source(
    *,
    beam_energy_mv: float,
    xray_workload_gy_m2_per_week: float,
    plane_distance_cm: float,
    patient_area_m2: float,
    scatter_distance_m: float,
    scatter_angle_deg: float,
) -> Source:
    """
    Return the scatter by the patient, whose own area is brought to 1 m.

    Args:
        beam_energy_mv: End point of the x rays. [MV]
        xray_workload_gy_m2_per_week: X rays at 1 m per spot. [Gy m²/week]
        plane_distance_cm: From the source to the patient's plane. [cm]
        patient_area_m2: Of the patient as the beam sees it. [m²]
        scatter_distance_m: From the patient to 0.3 m beyond the barrier. [m]
        scatter_angle_deg: At the patient; counted as 135 beyond it, where less is scattered. [deg]

    Returns:
        The source of dose.

    Raises:
        ValueError: If plane distance or area is not above zero.
        OutsideValidity: If energy or angle lie outside the tables.

    Source: ncrp-151, Eq. 2.7 (memory).
    """
    plane_m, angle_deg = plane_distance_cm / 100.0, min(scatter_angle_deg, LARGEST_SCATTER_ANGLE_DEG)
    if not (plane_m > 0.0 and patient_area_m2 > 0.0):
        raise ValueError("plane distance and patient area must be above zero")
    at_1_m_cm2 = patient_area_m2 * 1e4 / plane_m**2
    fraction = scatter_fraction(energy_mv=beam_energy_mv, angle_deg=angle_deg)
    return Source(
        name="added scatter by the patient",
        added=True,
        radiation="scatter",
        energy_mv=beam_energy_mv,
        angle_deg=angle_deg,
        workload_gy_m2_per_week=xray_workload_gy_m2_per_week,
        factor=fraction * at_1_m_cm2 / 400.0 / plane_m**2,
        distance_m=scatter_distance_m,
        formula="a (F/400) W_x T B / (d_sca^2 d_sec^2)",
        source="ncrp-151, Eq. 2.7 (memory)",
    )


def check_source(*, source: Source) -> None:
    """
    Refuse a source of dose with a number outside its meaning.

    Args:
        source: One of those above.

    Returns:
        Nothing.

    Raises:
        ValueError: If its distance is not above zero, its workload below it, or its factor not from 0 to 1.

    Source: derived.
    """
    if not (isfinite(source.distance_m) and source.distance_m > 0.0):
        raise ValueError(f"{source.name}: a distance must be above zero, not {source.distance_m:g}")
    if not (isfinite(source.workload_gy_m2_per_week) and source.workload_gy_m2_per_week >= 0.0):
        raise ValueError(f"{source.name}: a workload must not be below zero")
    if not 0.0 <= source.factor <= 1.0:
        raise ValueError(
            f"{source.name}: the part that comes this way lies from 0 to 1, not {source.factor:g}"
        )
