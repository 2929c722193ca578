"""In-vivo dosimetry planned: points, detectors, read-outs and reader time for each patient and year."""

from collections.abc import Sequence
from dataclasses import dataclass

from readiness.calculations.in_vivo_sites import PRESCRIPTION_SITE, in_vivo_sites

FEWEST_POINTS, MOST_POINTS = 20, 45  # practice; 26 films a patient published (film-2022, read)
FEWEST_AT_PRESCRIPTION = 3  # readings whose mean is acted upon


@dataclass(frozen=True)
class InVivoPlan:
    """
    What the plan takes.

    A detector is read once after each session it was worn; ``stock_needed`` are the detectors that must be
    ready before a measured cycle begins, for all patients measured in the same cycle, controls included.
    """

    points_per_patient: int
    detectors_per_session: int
    readouts_per_patient: int
    readouts_per_year: float
    reader_h_per_patient: float
    reader_h_per_year: float
    stock_needed: int
    stock_short: int
    remarks: tuple[str, ...]


def in_vivo_plan(
    *,
    sites: Sequence[str],
    readings_per_site: int,
    readings_at_prescription_level: int,
    sessions_per_cycle: int,
    measured_cycles_per_patient: int,
    patients_per_year: float,
    patients_measured_at_once: int,
    control_detectors: int,
    pieces: int,
    read_out_minutes_per_patient_min: float,
) -> InVivoPlan:
    """
    Return detectors, read-outs and reader time that an in-vivo plan takes, and where it falls short.

    Args:
        sites: Sites measured, by their words.
        readings_per_site: Detectors at each site but the prescription level. [1]
        readings_at_prescription_level: Detectors at the prescription level. [1]
        sessions_per_cycle: Sessions that make one cycle; each has its own detectors. [1]
        measured_cycles_per_patient: Cycles measured for each patient. [1]
        patients_per_year: Patients a year. [per year]
        patients_measured_at_once: Patients whose measured cycle falls into the same days. [1]
        control_detectors: Detectors that are carried along without being irradiated. [1]
        pieces: Detectors owned. [1]
        read_out_minutes_per_patient_min: Minutes to read and evaluate one patient's measured cycle. [min]

    Returns:
        The plan in numbers, with remarks.

    Raises:
        ValueError: If a number is negative, there is no site, or a site stands twice.

    Valid for: detectors that are read and used again between measured cycles.
    Assumes: no detector is worn in two sessions of one cycle.
    Source: practice; film-2022 (read) for the number of points.
    """
    counts = (readings_per_site, sessions_per_cycle, patients_measured_at_once)
    rest = (readings_at_prescription_level, measured_cycles_per_patient, control_detectors, pieces)
    if min(counts) < 1 or min(rest) < 0 or min(patients_per_year, read_out_minutes_per_patient_min) < 0:
        raise ValueError("a plan has sites, readings, sessions and patients, and no number is negative")
    if not sites or len(set(sites)) < len(sites):
        raise ValueError("a plan names each of its sites once")
    elsewhere = [site for site in sites if site != PRESCRIPTION_SITE]
    points = len(elsewhere) * readings_per_site + readings_at_prescription_level
    readouts = points * sessions_per_cycle * measured_cycles_per_patient
    minutes = read_out_minutes_per_patient_min * measured_cycles_per_patient
    stock = points * sessions_per_cycle * patients_measured_at_once + control_detectors
    return InVivoPlan(
        points_per_patient=points,
        detectors_per_session=points,
        readouts_per_patient=readouts,
        readouts_per_year=readouts * patients_per_year,
        reader_h_per_patient=minutes / 60,
        reader_h_per_year=minutes / 60 * patients_per_year,
        stock_needed=stock,
        stock_short=max(0, stock - pieces),
        remarks=tuple(_remarks(sites, points, readings_at_prescription_level, measured_cycles_per_patient)),
    )


def _remarks(sites: Sequence[str], points: int, at_prescription: int, cycles: int) -> list[str]:
    """Return what must be said about the plan."""
    known = in_vivo_sites()
    said = []
    if not FEWEST_POINTS <= points <= MOST_POINTS:
        said.append(f"{points} points for each patient; {FEWEST_POINTS} to {MOST_POINTS} are usual.")
    if at_prescription < FEWEST_AT_PRESCRIPTION:
        said.append(
            f"{at_prescription} readings at the prescription level; a dose is acted upon only from the mean "
            f"of {FEWEST_AT_PRESCRIPTION} or more."
        )
    if cycles < 1:
        said.append("No cycle is measured; every new patient's first full cycle should be.")
    strange = [site for site in sites if site not in known]
    if strange:
        said.append(f"No expected dose is known for: {', '.join(strange)}.")
    missing = [word for word, site in known.items() if site.group in ("fold", "shaded") and word not in sites]
    if missing:
        said.append(f"Sites that are often low are not measured: {', '.join(missing)}.")
    return said
