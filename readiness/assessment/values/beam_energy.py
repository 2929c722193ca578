"""Energies of a beam: from its depth dose in water, at the source, and at the treatment plane."""

from dataclasses import dataclass
from functools import lru_cache

from readiness.assessment.definition import Definition, Measured
from readiness.assessment.values.readings import numbers
from readiness.calculations.depth_dose_analysis import DepthDose, analyse_depth_dose
from readiness.calculations.energy_at_plane import energy_at_plane
from readiness.calculations.range_energy import (
    mean_energy_mev,
    most_probable_energy_mev,
    range_contradiction,
)
from readiness.calculations.source_energy import REFERENCE_DISTANCE_CM, energy_at_source_mev
from readiness.errors import OutsideValidity
from readiness.quantities import Table

SAME_DISTANCE_CM = 1.0
SINGLE, COMPOSITE = "depth-dose-single", "depth-dose-composite"


@dataclass(frozen=True)
class ReferenceRanges:
    """Ranges of a beam at 100 cm."""

    r50_cm: float
    rp_cm: float | None


def depth_dose_of(*, kind: str, table: Table, normalisation: str) -> DepthDose | None:
    """Return what a measured depth dose says; None for another kind of measurement."""
    if kind not in (SINGLE, COMPOSITE):
        return None
    return analyse_depth_dose(
        depths_mm=numbers(table, "depth_mm"),
        readings=numbers(table, "relative_dose"),
        normalisation=normalisation,
        composite=kind == COMPOSITE,
    )


def reference_ranges(*, depth_dose: DepthDose, degrader: str, distance_cm: float) -> ReferenceRanges:
    """Return R50 and Rp of a depth dose in reference geometry; one at the plane is another quantity."""
    if degrader != "none" or abs(distance_cm - REFERENCE_DISTANCE_CM) > SAME_DISTANCE_CM:
        raise OutsideValidity(
            "this depth dose was not measured at 100 cm without a degrader, so that it does not give the"
            " beam's R50 and Rp"
        )
    rp = None if depth_dose.rp_mm is None else depth_dose.rp_mm / 10
    return ReferenceRanges(depth_dose.r50_mm / 10, rp)


def contradiction_of_ranges(*, r50_cm: float, rp_cm: float) -> str:
    """Return what contradicts between R50 and Rp in words, none if nothing does."""
    return range_contradiction(r50_cm=r50_cm, rp_cm=rp_cm) or "none"


def most_probable_energy(*, rp_cm: float, r50_cm: float | None) -> float:
    """Return the most probable energy at 100 cm; refuse a practical range that R50 contradicts."""
    said = range_contradiction(r50_cm=r50_cm, rp_cm=rp_cm) if r50_cm is not None else ""
    if said:
        raise ValueError(said)
    return most_probable_energy_mev(rp_cm=rp_cm)


_IN_AIR = {"pressure_kpa": "room.site_pressure_kpa", "temperature_celsius": "room.temperature_celsius"}
_REFERENCE = Measured(
    SINGLE,
    by=reference_ranges,
    takes={
        "depth_dose": "measurement.depth_dose",
        "degrader": "measurement.degrader",
        "distance_cm": "measurement.distance_cm",
    },
    part="r50_cm",
)

DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "measurement.depth_dose",
        "Ranges, energies and doses at depth that a measured depth dose gives.",
        by=depth_dose_of,
        takes={
            "kind": "measurement.kind",
            "table": "measurement.table",
            "normalisation": "measurement.normalisation",
        },
        internal=True,
        source="tg-25, icru-35",
        known="memory",
    ),
    Definition(
        "beam.reference_ranges",
        "Ranges of this beam's own depth dose at 100 cm.",
        measured=Measured(SINGLE, by=reference_ranges, takes=_REFERENCE.takes),
        internal=True,
    ),
    Definition("beam.r50_cm", "Half-value depth in water at 100 cm.", measured=_REFERENCE),
    Definition(
        "beam.rp_cm",
        "Practical range in water at 100 cm.",
        measured=Measured(SINGLE, by=reference_ranges, takes=_REFERENCE.takes, part="rp_cm"),
    ),
    Definition(
        "beam.range_contradiction",
        "What contradicts between the half-value depth and the practical range, none if nothing does.",
        by=contradiction_of_ranges,
        takes={"r50_cm": "beam.r50_cm", "rp_cm": "beam.rp_cm"},
        source="tg-25",
        known="memory",
    ),
    Definition(
        "beam.mean_energy_mev",
        "Mean energy at 100 cm.",
        by=mean_energy_mev,
        takes={"r50_cm": "beam.r50_cm"},
        source="tg-25, icru-35",
        known="memory",
        formula="E_0 = 2.33 R_50",
    ),
    Definition(
        "beam.most_probable_energy_mev",
        "Most probable energy at 100 cm, with which the field is predicted.",
        by=most_probable_energy,
        takes={"rp_cm": "beam.rp_cm", "r50_cm": "beam.r50_cm?"},
        source="tg-25, icru-35",
        known="memory",
        formula="E_p0 = 0.22 + 1.98 R_p + 0.0025 R_p^2",
    ),
    Definition(
        "beam.energy_at_source_mev",
        "Most probable energy at the source: that at 100 cm and what the air before it took.",
        by=lru_cache(energy_at_source_mev),
        takes={"surface_energy_mev": "beam.most_probable_energy_mev", **_IN_AIR},
        source="icru-37",
        known="memory",
    ),
    Definition(
        "arrangement.plane_energy",
        "Energy at the treatment plane and what the degrader lets through.",
        by=lru_cache(energy_at_plane),
        takes={
            "energy_at_source_mev": "beam.energy_at_source_mev",
            "plane_distance_cm": "arrangement.study_distance_cm",
            "degrader_material": "degrader.material",
            "degrader_thickness_cm": "degrader.thickness_cm",
            "degrader_gap_cm": "arrangement.study_gap_cm",
            **_IN_AIR,
        },
        model=True,
        internal=True,
        source="icru-37",
        known="memory",
    ),
    Definition(
        "arrangement.energy_at_plane_mev",
        "Most probable energy at the treatment plane, behind the degrader.",
        of="arrangement.plane_energy",
        part="energy_mev",
        source="icru-37",
        known="memory",
    ),
    Definition(
        "arrangement.transmitted_percent",
        "Electrons that the degrader lets through.",
        of="arrangement.plane_energy",
        part="transmitted_percent",
        source="ebert-1969",
        known="memory",
    ),
    Definition(
        "arrangement.residual_range_cm",
        "Range in water that the electrons have left at the plane.",
        of="arrangement.plane_energy",
        part="residual_range_cm",
        source="icru-37",
        known="memory",
    ),
)
