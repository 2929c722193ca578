"""In-vivo dosimetry: what the plan takes, and what the readings of a cycle say."""

from collections.abc import Sequence
from dataclasses import replace

from readiness.assessment.definition import Definition, Measured, derived
from readiness.assessment.values.naming import named
from readiness.assessment.values.readings import numbers, numbers_or, words
from readiness.calculations.in_vivo_plan import InVivoPlan, in_vivo_plan
from readiness.calculations.in_vivo_readings import NOT_JUDGED, InVivoResult, evaluate_in_vivo
from readiness.calculations.in_vivo_sites import PRESCRIPTION_SITE, in_vivo_sites
from readiness.calculations.reading_uncertainty import mean_sd_percent
from readiness.errors import OutsideValidity
from readiness.quantities import Table, Uncertain

READINGS = "in-vivo-readings"
EXPECTED = (
    "site",
    "title",
    "expected_low_percent",
    "expected_high_percent",
    "source",
    "from_figure",
    "known",
)


def plan_in_numbers(
    *,
    sites: Sequence[str],
    readings_per_site: int,
    readings_at_prescription_level: int,
    each_sessions_per_cycle: Sequence[int],
    measured_cycles_per_patient: int,
    patients_per_year: float,
    patients_measured_at_once: int,
    control_detectors: int,
    read_out_minutes_min: float = 0.0,
) -> InVivoPlan:
    """Return what the plan takes; the course with most sessions in a cycle counts."""
    return in_vivo_plan(
        sites=sites,
        readings_per_site=readings_per_site,
        readings_at_prescription_level=readings_at_prescription_level,
        sessions_per_cycle=max(each_sessions_per_cycle, default=0),
        measured_cycles_per_patient=measured_cycles_per_patient,
        patients_per_year=patients_per_year,
        patients_measured_at_once=patients_measured_at_once,
        control_detectors=control_detectors,
        pieces=0,
        read_out_minutes_per_patient_min=read_out_minutes_min,
    )


def detectors_short(*, detectors_needed: int, pieces: int) -> int:
    """Return how many detectors are missing."""
    return max(0, detectors_needed - pieces)


def low_sites_not_measured(*, sites: Sequence[str]) -> str:
    """Return the folds and shaded sites, often low, that the plan leaves out."""
    low = (word for word, site in in_vivo_sites().items() if site.group in ("fold", "shaded"))
    return named(word for word in low if word not in sites)


def expected_at_sites(*, sites: Sequence[str]) -> Table:
    """Return what publications lead to expect at each site of the plan."""
    known = in_vivo_sites()
    blank = (None,) * (len(EXPECTED) - 1)
    rows = [
        tuple(getattr(known[word], name) for name in EXPECTED) if word in known else (word, *blank)
        for word in sites
    ]
    return Table.of(EXPECTED, rows)


def sd_of_mean(
    *, single_reading_sd_percent: float, shared_sd_percent: float, readings_at_prescription_level: int
) -> float:
    """Return the standard deviation of the mean at the prescription level."""
    return mean_sd_percent(
        single_sd_percent=single_reading_sd_percent,
        shared_sd_percent=shared_sd_percent,
        readings=readings_at_prescription_level,
    )


def result_of_readings(
    *,
    table: Table,
    prescribed_per_cycle_gy: float,
    each_cycles: Sequence[int],
    each_sessions_per_cycle: Sequence[int],
    single_reading_sd_percent: float,
    shared_sd_percent: float,
    investigate_beyond_percent: float,
    stop_beyond_percent: float,
    boost_below_percent: float,
    shield_above_percent: float,
) -> InVivoResult:
    """Return what the last cycle with readings at the prescription level says; else the first in the file."""
    if not each_cycles or not each_sessions_per_cycle:
        raise OutsideValidity("no course says how many sessions make a cycle")
    cycles = [round(cycle) for cycle in numbers(table, "cycle")]
    sites = words(table, "site", "")
    judged = max(
        (cycle for cycle, site in zip(cycles, sites, strict=True) if site == PRESCRIPTION_SITE),
        default=min(cycles),
    )
    result = evaluate_in_vivo(
        cycles=cycles,
        sessions=[round(day) for day in numbers(table, "day")],
        sites=sites,
        points=[round(point) for point in numbers_or(table, "point", 1.0)],
        doses_cgy=numbers(table, "dose_cgy"),
        cycle=judged,
        cycles_of_course=max(each_cycles),
        sessions_per_cycle=max(each_sessions_per_cycle),
        dose_per_cycle_gy=prescribed_per_cycle_gy,
        single_reading_sd_percent=single_reading_sd_percent,
        shared_sd_percent=shared_sd_percent,
        investigate_beyond_percent=investigate_beyond_percent,
        stop_beyond_percent=stop_beyond_percent,
        boost_below_percent=boost_below_percent,
        shield_above_percent=shield_above_percent,
    )
    others = ", ".join(str(cycle) for cycle in sorted(set(cycles) - {judged}))
    said = f"Cycle {judged} is judged; the file also holds readings of cycle {others}, which are left aside."
    return replace(result, remarks=(*result.remarks, said)) if others else result


def percent_at_prescription(*, result: InVivoResult) -> Uncertain | None:
    """Return the dose at the prescription level with its standard deviation; none without readings there."""
    if result.prescription_percent is None or result.prescription_sd_percent is None:
        return None
    return Uncertain(result.prescription_percent, result.prescription_sd_percent)


def deviation(*, result_percent: float, result_action: str) -> float:
    """Return how far the dose is from the prescription, either way; too few readings are judged by nobody."""
    if result_action == NOT_JUDGED:
        raise OutsideValidity(result_action)
    return abs(result_percent - 100)


_PLAN = {
    "sites": "in_vivo.sites",
    "readings_per_site": "in_vivo.readings_per_site",
    "readings_at_prescription_level": "in_vivo.readings_at_prescription_level",
    "each_sessions_per_cycle": "each course.sessions_per_cycle",
    "measured_cycles_per_patient": "in_vivo.measured_cycles_per_patient",
    "patients_per_year": "program.expected_patients_per_year",
    "patients_measured_at_once": "in_vivo.patients_measured_at_once",
    "control_detectors": "in_vivo.control_detectors",
}
_SPREAD = {
    "single_reading_sd_percent": "instrument.single_reading_sd_percent",
    "shared_sd_percent": "in_vivo.shared_sd_percent",
}


def _planned(name: str, meaning: str, part: str, of: str = "in_vivo.plan") -> Definition:
    return Definition(f"in_vivo.{name}", meaning, of=of, part=part, source="practice", known="practice")


def _found(name: str, meaning: str, part: str) -> Definition:
    return Definition(
        f"in_vivo.{name}", meaning, of="in_vivo.result", part=part, source="practice", known="practice"
    )


PLAN: tuple[Definition, ...] = (
    Definition(
        "in_vivo.plan", "What the plan takes of detectors.", by=plan_in_numbers, takes=_PLAN, internal=True
    ),
    Definition(
        "in_vivo.reader_plan",
        "What the plan takes of the reader's time.",
        by=plan_in_numbers,
        takes={**_PLAN, "read_out_minutes_min": "in_vivo.read_out_minutes_min"},
        internal=True,
    ),
    _planned("points_per_patient", "Points measured on each patient.", "points_per_patient"),
    _planned("readouts_per_patient", "Readings of each patient.", "readouts_per_patient"),
    _planned("readouts_per_year", "Readings in a year.", "readouts_per_year"),
    _planned("detectors_needed", "Detectors ready before a measured cycle begins.", "stock_needed"),
    _planned("plan_remarks", "What must be said about the plan.", "remarks"),
    _planned("reader_per_year_h", "Reader's time in a year.", "reader_h_per_year", "in_vivo.reader_plan"),
    derived(
        "in_vivo.detectors_short",
        "Detectors missing before a measured cycle.",
        detectors_short,
        {"detectors_needed": "in_vivo.detectors_needed", "pieces": "instrument.pieces"},
    ),
    derived(
        "in_vivo.low_sites_not_measured",
        "Folds and shaded sites, often low, that are not measured, or none.",
        low_sites_not_measured,
        {"sites": "in_vivo.sites"},
    ),
    derived(
        "in_vivo.expected_doses",
        "What publications lead to expect at each site, in per cent of the prescription.",
        expected_at_sites,
        {"sites": "in_vivo.sites"},
    ),
    Definition(
        "in_vivo.mean_sd_percent",
        "Standard deviation of the mean reading at the prescription level.",
        by=sd_of_mean,
        takes={
            **_SPREAD,
            "readings_at_prescription_level": "in_vivo.readings_at_prescription_level",
        },
        source="definition",
        known="derived",
        formula="s = sqrt(s_shared^2 + s_single^2/n)",
    ),
)

RESULT: tuple[Definition, ...] = (
    Definition(
        "in_vivo.result",
        "What the readings of the last cycle in the latest file say.",
        measured=Measured(
            READINGS,
            by=result_of_readings,
            takes={
                "table": "measurement.table",
                "prescribed_per_cycle_gy": "measurement.prescribed_per_cycle_gy",
                "each_cycles": "each course.cycles",
                "each_sessions_per_cycle": "each course.sessions_per_cycle",
                **_SPREAD,
                "investigate_beyond_percent": "in_vivo.investigate_beyond_percent",
                "stop_beyond_percent": "in_vivo.stop_beyond_percent",
                "boost_below_percent": "in_vivo.boost_below_percent",
                "shield_above_percent": "in_vivo.shield_above_percent",
            },
        ),
        internal=True,
    ),
    derived(
        "in_vivo.result_percent",
        "Dose at the prescription level in per cent of the prescription.",
        percent_at_prescription,
        {"result": "in_vivo.result"},
    ),
    derived(
        "in_vivo.result_deviation_percent",
        "How far that dose is from the prescription, either way.",
        deviation,
        {"result_percent": "in_vivo.result_percent", "result_action": "in_vivo.result_action"},
    ),
    _found("result_action", "Action at the prescription level, in words.", "action"),
    _found("site_results", "Dose of each site with its action.", "sites"),
    _found(
        "boost_deficits", "Sites that are low, with what is missing; boosts are the physician's.", "boosts"
    ),
    _found("result_remarks", "What must be said about the readings.", "remarks"),
)

DEFINITIONS: tuple[Definition, ...] = (*PLAN, *RESULT)
