"""Which degraders are predicted to keep the depth rules at an energy."""

import numpy as np

from readiness.calculations.composite_depth_dose import composite_depth_dose, thickness_range_cm
from readiness.calculations.degrader_transport import WATER_LIKE_BELOW
from readiness.calculations.electron_materials import electron_material
from readiness.calculations.stopping_power import total_stopping_power
from readiness.errors import OutsideValidity
from readiness.quantities import Table

THICKNESS_STEP_CM = 0.05
COMPARED_AT_MEV = 4.0  # energy at which plastics are compared with PMMA


def pmma_equivalent_cm(*, degrader_material: str | None, degrader_thickness_cm: float | None) -> float:
    """
    Return the thickness of PMMA that takes as much energy as a degrader of another plastic.

    Args:
        degrader_material: Name of the material, none for no degrader.
        degrader_thickness_cm: Thickness, none for no degrader. [cm]

    Returns:
        Thickness of PMMA. [cm]

    Raises:
        ValueError: If the thickness is negative or missing.
        OutsideValidity: If the material is no plastic: heavier ones scatter more for the same loss.

    Valid for: plastics.
    Assumes: ratio of the stopping powers at 4 MeV.
    Source: icru-37 (memory) for the stopping power; derived.
    """
    if degrader_material is None:
        return 0.0
    if degrader_thickness_cm is None or degrader_thickness_cm < 0:
        raise ValueError("a degrader needs a thickness that is not negative")
    found, pmma = electron_material(name=degrader_material), electron_material(name="pmma")
    if any(part.atomic_number >= WATER_LIKE_BELOW for part in found.elements):
        raise OutsideValidity(
            f"the depth-dose table is for PMMA; {degrader_material} scatters more for the same loss of energy"
        )
    losses = [
        total_stopping_power(material=part.name, energy_mev=COMPARED_AT_MEV) * part.density_g_per_cm3
        for part in (found, pmma)
    ]
    return degrader_thickness_cm * losses[0] / losses[1]


def degraders_by_depth_rules(
    *, energy_at_source_mev: float, least_at_4_mm_percent: float, most_at_20_mm_percent: float
) -> Table:
    """
    Return which thicknesses of PMMA are predicted to keep both depth rules at an energy.

    Args:
        energy_at_source_mev: Most probable energy at the source, for a plane at 400 cm. [MeV]
        least_at_4_mm_percent: Smallest dose at 4 mm as a part of the skin dose. [%]
        most_at_20_mm_percent: Dose at 20 mm, as a part of the skin dose, that must not be reached. [%]

    Returns:
        Columns pmma_cm, r80_mm, dose_at_4_mm_percent, dose_at_20_mm_percent, b_factor, keeps_both.

    Raises:
        OutsideValidity: If the table does not hold the energy.

    Valid for: 6 to 9 MeV.
    Assumes: predictions only: a standard deviation of 2 mm stands beside each depth.
    Source: own-monte-carlo (mc); the rules are in eortc-2002 (memory).
    """
    low, high = thickness_range_cm(energy_at_source_mev=energy_at_source_mev)
    first = int(np.ceil(low / THICKNESS_STEP_CM - 1e-9))
    last = int(np.floor(high / THICKNESS_STEP_CM + 1e-9))
    rows = []
    for index in range(first, last + 1):
        pmma = min(max(round(index * THICKNESS_STEP_CM, 6), low), high)
        found = composite_depth_dose(energy_at_source_mev=energy_at_source_mev, pmma_cm=pmma)
        at4, at20 = found.dose_at_4_mm_percent.value, found.dose_at_20_mm_percent.value
        keeps = at4 >= least_at_4_mm_percent and at20 < most_at_20_mm_percent
        rows.append((pmma, found.r80_mm.value, at4, at20, found.b_factor.value, keeps))
    names = ["pmma_cm", "r80_mm", "dose_at_4_mm_percent", "dose_at_20_mm_percent", "b_factor", "keeps_both"]
    return Table.of(names, rows)


def depth_rules_in_words(*, degraders: Table) -> str:
    """
    Return which thicknesses of PMMA keep both depth rules, as a sentence.

    Args:
        degraders: From degraders_by_depth_rules.

    Returns:
        A sentence for the chief; it says so if no thickness studied keeps both.

    Valid for: tables of degraders_by_depth_rules.
    Assumes: thicknesses between two that keep the rules keep them too.
    Source: our own words.
    """
    kept = [float(row["pmma_cm"] or 0) for row in degraders.records() if row["keeps_both"]]
    everything = [float(entry or 0) for entry in degraders.column("pmma_cm")]
    prediction = "is predicted to keep both depth rules at this energy"
    if not kept:
        reach = f"{min(everything):.2f} to {max(everything):.2f} cm"
        return f"No thickness of PMMA from {reach} {prediction}: another energy is needed."
    return f"PMMA of {min(kept):.2f} to {max(kept):.2f} cm {prediction}."
