"""
Depth dose and multiple-field factor of six dual fields, between the rows of a Monte Carlo table.

They decide which degrader can keep the depth rules; real beams are softer than the table's.
"""

from dataclasses import dataclass
from functools import cache

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import LinearNDInterpolator, PchipInterpolator

from readiness.calculations.air_transport import pencil_beam_in_air
from readiness.calculations.published_tables import interpolated, published_table
from readiness.errors import OutsideValidity
from readiness.quantities import Uncertain

Array = NDArray[np.float64]

DEPTH_SD_MM = 2.0  # real beams are softer than monoenergetic primaries without a head
B_SD = 0.05  # spread of the table against radius and energy
TABLE_DISTANCE_CM, TABLE_PRESSURE_KPA, TABLE_TEMPERATURE_CELSIUS = 400.0, 101.325, 20.0
LOWEST_TABLE_MEV, LOSS_MEV_PER_CM_PMMA, ENERGY_WEIGHT = 6.0, 2.3, 0.2  # decide which rows are neighbours


@dataclass(frozen=True)
class CompositeDepthDose:
    """
    Predicted depth dose of six dual fields and their factor B.

    ``energy_at_plane_mev`` is the mean energy at the table's plane; doses are parts of the skin dose.
    """

    r80_mm: Uncertain
    dose_at_4_mm_percent: Uncertain
    dose_at_10_mm_percent: Uncertain
    dose_at_20_mm_percent: Uncertain
    b_factor: Uncertain
    energy_at_plane_mev: float
    r50_at_plane_cm: float


def composite_depth_dose(*, energy_at_source_mev: float, pmma_cm: float) -> CompositeDepthDose:
    """
    Return the depth dose of six dual fields and B for an energy and a thickness of PMMA.

    Linear between neighbouring rows of the table, over energy and thickness.

    Args:
        energy_at_source_mev: Most probable energy at the source, for a plane at 400 cm. [MeV]
        pmma_cm: Thickness of PMMA, 0 for no degrader. [cm]

    Returns:
        R80, doses at 4, 10 and 20 mm, B; depths with a standard deviation of at least 2 mm.

    Raises:
        ValueError: If energy or thickness is impossible.
        OutsideValidity: If energy and thickness lie outside the table.

    Valid for: the area between the table's rows (6 to 9 MeV, 0 to 2 cm, thicker at higher energy).
    Assumes: 400 cm, cylinder of 15 cm radius, monoenergetic primaries.
    Source: own-monte-carlo (mc).
    """
    if energy_at_source_mev <= 0 or pmma_cm < 0:
        raise ValueError("an energy must be positive and a thickness cannot be negative")
    row = _table_surface()(*_level(energy_at_source_mev, pmma_cm))
    if not np.isfinite(row).all():
        low, high = thickness_range_cm(energy_at_source_mev=energy_at_source_mev)
        raise OutsideValidity(
            f"at {energy_at_source_mev:.3g} MeV the depth-dose table holds {low:.2f} to {high:.2f} cm of"
            f" PMMA, not {pmma_cm:g} cm; measure the composite depth dose"
        )
    plane, r80, at4, at10, at20, r50, b_factor = (round(float(entry), 9) for entry in row)
    doses = dict(zip((4.0, 10.0, 20.0), (at4, at10, at20), strict=True))
    percent = {depth: Uncertain(100 * dose, 100 * _shifted(doses, depth)) for depth, dose in doses.items()}
    return CompositeDepthDose(
        r80_mm=Uncertain(r80, DEPTH_SD_MM),
        dose_at_4_mm_percent=percent[4.0],
        dose_at_10_mm_percent=percent[10.0],
        dose_at_20_mm_percent=percent[20.0],
        b_factor=Uncertain(b_factor, B_SD),
        energy_at_plane_mev=plane,
        r50_at_plane_cm=r50,
    )


def thickness_range_cm(*, energy_at_source_mev: float) -> tuple[float, float]:
    """
    Return the thinnest and thickest PMMA that the table holds at an energy.

    Args:
        energy_at_source_mev: Most probable energy at the source. [MeV]

    Returns:
        Lowest and highest thickness. [cm]

    Raises:
        OutsideValidity: If the table does not hold the energy.

    Valid for: 6 to 9 MeV.
    Assumes: the hull of the table's rows.
    Source: own-monte-carlo (mc).
    """
    rows = [(float(e or 0), float(t or 0)) for e, t, *_ in published_table("composite_depth_dose").rows]
    energies = [energy for energy, _ in rows]
    low, high = min(energies), max(energies)
    if not low <= energy_at_source_mev <= high:
        raise OutsideValidity(
            f"the depth-dose table holds {low:g} to {high:g} MeV at the source, not "
            f"{energy_at_source_mev:.3g} MeV; measure the composite depth dose"
        )
    crossings = [
        first[1] + (second[1] - first[1]) * (energy_at_source_mev - first[0]) / (second[0] - first[0])
        for first in rows
        for second in rows
        if first[0] <= energy_at_source_mev <= second[0] and first[0] < second[0]
    ]
    return max(0.0, min(crossings)), max(crossings)


def energy_for_table_mev(
    *,
    energy_at_source_mev: float,
    plane_distance_cm: float,
    pressure_kpa: float,
    temperature_celsius: float,
) -> float:
    """
    Return the energy with which to enter the table: the same energy arrives behind 400 cm of sea-level air.

    Args:
        energy_at_source_mev: Energy at the source. [MeV]
        plane_distance_cm: From the nominal source to the plane. [cm]
        pressure_kpa: Air pressure on the site. [kPa]
        temperature_celsius: Air temperature. [°C]

    Returns:
        Equivalent energy at the source. [MeV]

    Raises:
        ValueError: If a number is impossible.
        OutsideValidity: If the energy lies outside the beam model.

    Valid for: 300 to 500 cm.
    Assumes: only the energy at the degrader matters, not the angles.
    Source: derived.
    """
    here = pencil_beam_in_air(
        energy_at_source_mev=energy_at_source_mev,
        path_cm=plane_distance_cm,
        pressure_kpa=pressure_kpa,
        temperature_celsius=temperature_celsius,
    )
    table = pencil_beam_in_air(
        energy_at_source_mev=energy_at_source_mev,
        path_cm=TABLE_DISTANCE_CM,
        pressure_kpa=TABLE_PRESSURE_KPA,
        temperature_celsius=TABLE_TEMPERATURE_CELSIUS,
    )
    return energy_at_source_mev + here.mean_energy_mev - table.mean_energy_mev


def b_factor_of_radius(*, radius_cm: float) -> Uncertain:
    """
    Return how B depends on the body: its value for a cylinder of a given radius.

    Args:
        radius_cm: Radius of the cylinder. [cm]

    Returns:
        B for 6.3 MeV behind 0.6 cm of PMMA; compare it with the value at 15 cm.

    Raises:
        OutsideValidity: If the radius lies outside 2.5 to 20 cm.

    Valid for: 2.5 to 20 cm.
    Assumes: round body, turned in the beam.
    Source: own-monte-carlo (mc).
    """
    table = published_table("b_factor_by_radius")
    radii = [float(entry or 0) for entry in table.column("radius_cm")]
    values = [float(entry or 0) for entry in table.column("b_factor")]
    found = interpolated(at=radius_cm, known_at=radii, values=values, words="radii in cm")
    return Uncertain(found, 0.03)


@cache
def _table_surface() -> LinearNDInterpolator:
    """Return the table as a surface over energy and thickness, not a number outside its hull."""
    rows = np.array(published_table("composite_depth_dose").rows, dtype=float)
    return LinearNDInterpolator(np.column_stack(_level(rows[:, 0], rows[:, 1])), rows[:, 2:])


def _level(energy_mev: Array | float, pmma_cm: Array | float) -> tuple[Array, Array]:
    """Return coordinates in which rows of like energy at the plane are neighbours."""
    above = np.asarray(energy_mev, dtype=float) - LOWEST_TABLE_MEV
    return ENERGY_WEIGHT * above, pmma_cm - above / LOSS_MEV_PER_CM_PMMA


def _shifted(doses: dict[float, float], depth_mm: float) -> float:
    """Return the standard deviation of the dose at a depth if the whole curve may shift by 2 mm."""
    depths = [0.0, *doses]
    curve = PchipInterpolator(depths, [1.0, *doses.values()])
    before, behind = depth_mm - DEPTH_SD_MM, min(depth_mm + DEPTH_SD_MM, depths[-1])
    return float(abs(curve(before) - curve(behind)) * DEPTH_SD_MM / (behind - before))
