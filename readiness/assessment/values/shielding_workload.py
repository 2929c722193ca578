"""What the program adds to the barriers in its busiest week: x rays of each lobe, and leakage."""

from dataclasses import replace

from readiness.assessment.definition import Definition, derived, one_of_techniques
from readiness.assessment.values.dose import PlannedCycles
from readiness.calculations import course_numbers
from readiness.calculations.leakage_workload import LeakageWorkload, leakage_workload
from readiness.calculations.moving_couch_dose import CouchPass
from readiness.calculations.xray_workload import (
    XRayWorkload,
    attenuation_basis,
    workload_from_fraction,
    workload_from_pair_dose,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

ONE_DUAL = "one-dual"


def busiest_week_cycles(*, peak_patients: int, courses: Table) -> float:
    """Return the cycles of a week with the most patients, on the course with the most cycles a week."""
    if not courses.rows:
        raise OutsideValidity("there is no course, so that no workload can be formed")
    return peak_patients * max(
        course_numbers.cycles_per_week(
            sessions_per_cycle=int(course["sessions_per_cycle"] or 0),
            sessions_per_week=int(course["sessions_per_week"] or 0),
        )
        for course in courses.records()
    )


def largest_dose_per_cycle(*, doses_gy: tuple[float, ...]) -> float:
    """Return the largest dose that any course gives in a cycle."""
    if not doses_gy:
        raise OutsideValidity("there is no course, so that no workload can be formed")
    return max(doses_gy)


def fewest_sessions_per_cycle(*, sessions: tuple[int, ...]) -> int:
    """Return the fewest sessions in which any course gives a cycle: the most dose in a session."""
    if not sessions:
        raise OutsideValidity("there is no course, so that no workload can be formed")
    return min(sessions)


def most_mu_per_cycle(*, planned: PlannedCycles) -> int:
    """Return the most monitor units of a cycle of any course; for workloads only, never shown."""
    return max(units.cycle_mu for _, _, units in planned.courses)


def lying_mu_per_cycle(*, couch: CouchPass, incidences: int) -> int:
    """Return the monitor units of all incidences of a lying patient; for workloads only, never shown."""
    return round(couch.incidence_mu * incidences)


def xrays(
    *, xray_fraction_percent: float, depth_cm: float, dose_per_cycle_gy: float,
    b_factor: float, plane_distance_cm: float, water_attenuation: float, lobe_allowance: float,
    cycles_per_week: float, extra_mu: float | None, cycle_mu: int, energy_mev: float,
) -> XRayWorkload:  # fmt: skip
    """Return the x-ray workload of one lobe spot from f1 and its three factors."""
    return workload_from_fraction(
        xray_fraction_percent=xray_fraction_percent, fields=ONE_DUAL, depth_cm=depth_cm,
        dose_per_cycle_gy=dose_per_cycle_gy, multiple_field_factor=b_factor,
        plane_distance_cm=plane_distance_cm, water_attenuation_per_cm=water_attenuation,
        lobe_allowance=lobe_allowance, cycles_per_week=cycles_per_week, extra_week_mu=extra_mu or 0.0,
        cycle_mu=cycle_mu, water_basis=attenuation_basis(beam_energy_mev=energy_mev, depth_cm=depth_cm),
    )  # fmt: skip


def xrays_of_pair(
    *, axis_cgy_per_mu: float, mid_height_cgy_per_mu: float | None, depth_cm: float,
    water_attenuation: float, plane_distance_cm: float, cycles_per_week: float, extra_mu: float | None,
    cycle_mu: int, energy_mev: float,
) -> XRayWorkload:  # fmt: skip
    """Return the x-ray workload of one lobe spot from the dose per MU of the pair at its larger place."""
    largest = max(axis_cgy_per_mu, mid_height_cgy_per_mu or 0.0)
    return workload_from_pair_dose(
        pair_cgy_per_mu=largest, plane_distance_cm=plane_distance_cm, cycle_mu=cycle_mu,
        cycles_per_week=cycles_per_week, extra_week_mu=extra_mu or 0.0, depth_cm=depth_cm,
        water_attenuation_per_cm=water_attenuation,
        water_basis=attenuation_basis(beam_energy_mev=energy_mev, depth_cm=depth_cm),
    )  # fmt: skip


def xrays_of_vertical(
    *, cgy_per_mu: float, depth_cm: float, water_attenuation: float, plane_distance_cm: float,
    cycles_per_week: float, extra_mu: float | None, cycle_mu: int, energy_mev: float,
) -> XRayWorkload:  # fmt: skip
    """Return the x-ray workload below a vertical field, which stands still while the patient moves."""
    return xrays_of_pair(
        axis_cgy_per_mu=cgy_per_mu, mid_height_cgy_per_mu=None, depth_cm=depth_cm,
        water_attenuation=water_attenuation, plane_distance_cm=plane_distance_cm,
        cycles_per_week=cycles_per_week, extra_mu=extra_mu, cycle_mu=cycle_mu, energy_mev=energy_mev,
    )  # fmt: skip


def by_technique(name: str, meaning: str, *, standing: str, lying: str) -> Definition:
    """Return a record that is another one for a standing patient than for a lying one, never shown."""
    return replace(one_of_techniques(name, meaning, standing=standing, lying=lying), internal=True)


def leakage(
    *, cycle_mu: int, dose_per_cycle_gy: float, output_cgy_per_mu: float,
    cycles_per_week: float, extra_mu: float | None,
) -> LeakageWorkload:  # fmt: skip
    """Return the leakage workload of the busiest week."""
    return leakage_workload(
        cycle_mu=cycle_mu, dose_per_cycle_gy=dose_per_cycle_gy, output_at_1_m_cgy_per_mu=output_cgy_per_mu,
        cycles_per_week=cycles_per_week, extra_week_mu=extra_mu or 0.0,
    )  # fmt: skip


_WEEK = {
    "water_attenuation": "criterion.water_attenuation_ratio",
    "plane_distance_cm": "arrangement.study_distance_cm",
    "cycles_per_week": "program.busiest_week_cycles_per_week",
    "extra_mu": "protection.qa_mu_per_week_mu?",
    "cycle_mu": "arrangement.workload_mu",
    "energy_mev": "beam.energy_at_source_mev",
}

DEFINITIONS: tuple[Definition, ...] = (
    derived(
        "program.busiest_week_cycles_per_week",
        "Cycles of all patients in the busiest week.",
        busiest_week_cycles,
        {
            "peak_patients": "program.peak_patients",
            "courses": "rows course: sessions_per_cycle sessions_per_week",
        },
    ),
    derived(
        "program.largest_dose_per_cycle_gy",
        "Largest skin dose of a cycle of any course.",
        largest_dose_per_cycle,
        {"doses_gy": "each course.dose_per_cycle_gy"},
    ),
    derived(
        "program.fewest_sessions_per_cycle",
        "Fewest sessions in which a course gives a cycle.",
        fewest_sessions_per_cycle,
        {"sessions": "each course.sessions_per_cycle"},
    ),
    Definition(
        "arrangement.standing_workload_mu",
        "Monitor units of a cycle of a standing patient, for workloads only.",
        by=most_mu_per_cycle,
        takes={"planned": "arrangement.planned_cycles"},
        internal=True,
    ),
    Definition(
        "arrangement.lying_workload_mu",
        "Monitor units of a cycle of a lying patient, for workloads only.",
        by=lying_mu_per_cycle,
        takes={"couch": "arrangement.couch_pass", "incidences": "program.lying_incidence_count"},
        internal=True,
    ),
    by_technique(
        "arrangement.workload_mu",
        "Monitor units of a cycle, for workloads only.",
        standing="arrangement.standing_workload_mu",
        lying="arrangement.lying_workload_mu",
    ),
    by_technique(
        "arrangement.xray_workload_record",
        "X-ray workload of one spot that a field meets.",
        standing="arrangement.xray_workload_of_pair",
        lying="arrangement.xray_workload_of_vertical",
    ),
    Definition(
        "arrangement.xray_workload_of_vertical",
        "X-ray workload below a vertical field, from the dose per MU on its axis.",
        by=xrays_of_vertical,
        takes={
            "cgy_per_mu": "arrangement.xray_mid_height_cgy_per_mu",
            "depth_cm": "arrangement.xray_mid_height_depth_cm",
            **_WEEK,
        },
        model=True,
        internal=True,
    ),
    Definition(
        "arrangement.xray_workload_of_pair",
        "X-ray workload of one lobe spot: from the dose per MU on the tilted axis, else from f1.",
        by=xrays_of_pair,
        takes={
            "axis_cgy_per_mu": "arrangement.xray_axis_cgy_per_mu",
            "mid_height_cgy_per_mu": "arrangement.xray_mid_height_cgy_per_mu?",
            "depth_cm": "arrangement.xray_axis_depth_cm",
            **_WEEK,
        },
        otherwise="arrangement.xray_workload_of_fraction",
        model=True,
        internal=True,
    ),
    Definition(
        "arrangement.xray_workload_of_fraction",
        "X-ray workload of one lobe spot from f1 and its three factors, with its steps.",
        by=xrays,
        takes={
            "xray_fraction_percent": "arrangement.pair_xray_percent",
            "depth_cm": "arrangement.pair_xray_depth_cm",
            "dose_per_cycle_gy": "program.largest_dose_per_cycle_gy",
            "b_factor": "arrangement.b_factor",
            "lobe_allowance": "beam.lobe_factor",
            **_WEEK,
        },
        model=True,
        internal=True,
    ),
    Definition(
        "arrangement.xray_workload_gy_m2_per_week",
        "X rays at 1 m that one spot, of a lobe or below a vertical field, receives in the busiest week.",
        of="arrangement.xray_workload_record",
        part="per_week_gy_m2_per_week",
        source="own-arithmetic",
        known="derived",
        formula="W_x = MU x exp(mu z) d^2, or D f1 (6/B) exp(mu z) L d^2; x cycles a week",
    ),
    Definition(
        "arrangement.xray_workload_steps",
        "Steps from the x-ray fraction to the workload.",
        of="arrangement.xray_workload_record",
        part="steps",
        source="own-arithmetic",
        known="derived",
    ),
    Definition(
        "arrangement.xray_factor_ratio",
        "By how much the three factors raise the workload over the plain fraction.",
        of="arrangement.xray_workload_record",
        part="factor_over_plain",
        source="own-arithmetic",
        known="derived",
    ),
    Definition(
        "arrangement.leakage_workload_record",
        "Leakage workload of the busiest week.",
        by=leakage,
        takes={
            "cycle_mu": "arrangement.workload_mu",
            "dose_per_cycle_gy": "program.largest_dose_per_cycle_gy",
            "output_cgy_per_mu": "beam.reference_output_cgy_per_mu",
            "cycles_per_week": "program.busiest_week_cycles_per_week",
            "extra_mu": "protection.qa_mu_per_week_mu?",
        },
        internal=True,
    ),
    Definition(
        "arrangement.leakage_workload_gy_m2_per_week",
        "Leakage workload of the busiest week, as dose at 1 m in the mode.",
        of="arrangement.leakage_workload_record",
        part="per_week_gy_m2_per_week",
        source="ncrp-151",
        known="memory",
        formula="W_L = (cycles x MU per cycle + extra MU) x output at 1 m / 100",
    ),
)
