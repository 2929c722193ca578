"""Weekly dose behind one barrier, before and after the added program, contribution by contribution."""

from dataclasses import dataclass

from readiness.calculations.barrier_transmission import Layer, barrier_layers, layers_transmission
from readiness.calculations.dose_sources import (
    Source,
    added_beams,
    check_source,
    existing_sources,
    scatter_source,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

ROLES = ("primary", "secondary", "door", "maze", "penetration")
SMALLEST_SCATTER_ANGLE_DEG = 15.0  # below it the table of layers ends; the x rays go there unweakened anyway
NEUTRONS_FROM_MV = 10.0
COLUMNS = (
    "contribution",
    "added",
    "radiation",
    "energy_mv",
    "angle_deg",
    "workload_gy_m2_per_week",
    "factor",
    "occupancy",
    "distance_m",
    "transmission",
    "dose_usv_per_week",
    "share_percent",
    "formula",
    "source",
)


@dataclass(frozen=True)
class WeeklyDose:
    """
    Dose of a week behind a barrier and what it is made of.

    Doses count the occupancy, rates are those of the place itself. ``photon_part_only`` says that neutrons
    are not in it; ``beam_on_secondary`` that the tilted fields meet a barrier built as secondary only.
    """

    before_usv_per_week: float
    added_usv_per_week: float
    after_usv_per_week: float
    before_rate_usv_per_week: float
    added_rate_usv_per_week: float
    after_rate_usv_per_week: float
    largest_contribution: str
    beam_on_secondary: bool
    photon_part_only: bool
    contributions: Table


def weekly_dose(
    *,
    layers: Table,
    role: str,
    occupancy: float,
    recess_depth_cm: float,
    existing: Table,
    primary_distance_m: float | None,
    isocentre_distance_m: float | None,
    beam_energy_mv: float,
    xray_workload_gy_m2_per_week: float,
    xray_distance_m: float | None,
    leakage_workload_gy_m2_per_week: float,
    leakage_percent: float,
    head_distance_m: float,
    plane_distance_cm: float,
    patient_area_m2: float,
    scatter_distance_m: float,
    scatter_angle_deg: float,
) -> WeeklyDose:
    """
    Return the weekly dose behind a barrier before and after the program, contribution by contribution.

    H = W x factor x T x B / d^2 for each; the factor is the use factor of a primary beam (1 for the tilted
    fields), the leaking part of a leakage workload, or a (F/400)/d_sca^2 for scatter by the patient.

    Args:
        layers: From inside outwards: material, thickness_cm, density_g_per_cm3 (blank for steel or lead).
        role: What the barrier was built for: ``primary`` or ``secondary``; others are for the survey.
        occupancy: Part of the time that a person is beyond it, T. [1]
        recess_depth_cm: Material missing along the beam: laser recess, niche, conduits. [cm]
        existing: Workloads already there: energy_mv, kind (primary or leakage), workload_gy_per_week at 1 m,
            use_factor (blank for leakage), distance_m (blank unless it has its own).
        primary_distance_m: From the source of existing primary beams to 0.3 m beyond; None without any. [m]
        isocentre_distance_m: From the isocentre to 0.3 m beyond, for existing leakage; None without any. [m]
        beam_energy_mv: End point of the electron beam's x rays, equal to the electrons' energy. [MV]
        xray_workload_gy_m2_per_week: Added x rays at 1 m per spot, W_x. [Gy m²/week]
        xray_distance_m: From the source to 0.3 m beyond; None where no tilted field goes. [m]
        leakage_workload_gy_m2_per_week: Added leakage workload, W_L. [Gy m²/week]
        leakage_percent: Leakage in the electron mode; 0.1 is an upper bound. [%]
        head_distance_m: From the head at the beam side to 0.3 m beyond. [m]
        plane_distance_cm: From the source to the patient's plane, d_sca. [cm]
        patient_area_m2: Of the patient as the beam sees it. [m²]
        scatter_distance_m: From the patient to 0.3 m beyond. [m]
        scatter_angle_deg: At the patient, between beam and barrier; held at 135 beyond it. [deg]

    Returns:
        Doses and rates before, added and after, the contributions, and what a reader must know.

    Raises:
        ValueError: If a number is outside its meaning or a word is none of those listed.
        OutsideValidity: For doors and penetrations (survey in the mode only), without layers or a distance
            that is needed, or outside the tables.

    Valid for: photons of 4 to 18 MV through walls, floors and ceilings; not for neutrons, mazes or skyshine.
    Assumes: point sources, inverse square, normal incidence, no attenuation in the patient, 1 Gy counts as
        1 Sv; existing leakage is 0.1 % and spreads from the isocentre.
    Source: ncrp-151, Eq. 2.1, 2.7, 2.8 (memory); the tilted fields derived.
    """
    _check_barrier(role, occupancy)
    sources = existing_sources(
        existing=existing, primary_distance_m=primary_distance_m, isocentre_distance_m=isocentre_distance_m
    )
    sources += added_beams(
        beam_energy_mv=beam_energy_mv,
        xray_workload_gy_m2_per_week=xray_workload_gy_m2_per_week,
        xray_distance_m=xray_distance_m,
        leakage_workload_gy_m2_per_week=leakage_workload_gy_m2_per_week,
        leakage_percent=leakage_percent,
        head_distance_m=head_distance_m,
    )
    if scatter_angle_deg >= SMALLEST_SCATTER_ANGLE_DEG:
        sources.append(
            scatter_source(
                beam_energy_mv=beam_energy_mv,
                xray_workload_gy_m2_per_week=xray_workload_gy_m2_per_week,
                plane_distance_cm=plane_distance_cm,
                patient_area_m2=patient_area_m2,
                scatter_distance_m=scatter_distance_m,
                scatter_angle_deg=scatter_angle_deg,
            )
        )
    elif xray_distance_m is None:
        raise OutsideValidity("scatter below 15 degrees is counted with the x rays, which do not go there")
    met = barrier_layers(layers=layers, recess_depth_cm=recess_depth_cm)
    return _added_up(sources, met, occupancy, role == "secondary" and xray_distance_m is not None)


def _check_barrier(role: str, occupancy: float) -> None:
    """Refuse what is no barrier that can be computed."""
    if role not in ROLES:
        raise ValueError(f"the role of a barrier is one of {', '.join(ROLES)}, not {role!r}")
    if role in ("door", "maze", "penetration"):
        raise OutsideValidity("doors, mazes and penetrations are not computed: survey in the mode")
    if not 0.0 < occupancy <= 1.0:
        raise ValueError(f"an occupancy lies above 0 and at most at 1, not {occupancy:g}")


def _added_up(
    sources: list[Source], layers: tuple[Layer, ...], occupancy: float, beam_on_secondary: bool
) -> WeeklyDose:
    """Return the sum of all contributions and the table of them."""
    through: list[tuple[Source, float, float]] = []
    for source in sources:
        check_source(source=source)
        transmission = layers_transmission(
            layers=layers,
            radiation=source.radiation,
            energy_mv=source.energy_mv,
            angle_deg=source.angle_deg,
        )
        at_point = source.workload_gy_m2_per_week * source.factor / source.distance_m**2
        through.append((source, transmission, at_point * transmission * 1e6))
    before = sum(rate for source, _, rate in through if not source.added)
    added = sum(rate for source, _, rate in through if source.added)
    total = before + added
    rows = [
        (
            *source[:7],
            occupancy,
            source.distance_m,
            transmission,
            rate * occupancy,
            100.0 * rate / total if total else 0.0,
            source.formula,
            source.source,
        )
        for source, transmission, rate in through
    ]
    return WeeklyDose(
        before_usv_per_week=before * occupancy,
        added_usv_per_week=added * occupancy,
        after_usv_per_week=total * occupancy,
        before_rate_usv_per_week=before,
        added_rate_usv_per_week=added,
        after_rate_usv_per_week=total,
        largest_contribution=max(through, key=lambda each: each[2])[0].name if through else "",
        beam_on_secondary=beam_on_secondary,
        photon_part_only=any(source.energy_mv >= NEUTRONS_FROM_MV for source in sources),
        contributions=Table.of(COLUMNS, rows),
    )
