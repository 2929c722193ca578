"""The reference calibration behind the dose at the plane, and the papers that close the commissioning."""

from datetime import date

from readiness.assessment.definition import Definition
from readiness.quantities import Scalar, Table

PLANE_PARALLEL = "plane-parallel-chamber"
TG51, TRS398 = "tg-51", "trs-398"  # editions that ask for such a chamber
REPORT, REVIEW = "commissioning-report", "second-physicist-review"


def days_between(*, last_done_on: date, as_of_date: date) -> int:
    """Return the days since the last reference calibration."""
    return (as_of_date - last_done_on).days


def calibration_names_beam(*, calibrated: tuple[str, ...], machine: str, beam: str) -> bool:
    """Return whether the calibration's own words name both the machine and the beam of the arrangement."""
    named = set(" ".join(calibrated).replace(",", " ").replace("/", " ").split())
    return {machine, beam.rpartition("/")[2]} <= named


def chambers_in_calibration(*, instruments: Table, as_of_date: date) -> int:
    """Return how many plane-parallel chambers are in calibration."""
    return sum(
        1
        for row in instruments.records()
        if row["type"] == PLANE_PARALLEL and _in_calibration(row, as_of_date)
    )


def _in_calibration(instrument: dict[str, Scalar], as_of_date: date) -> bool:
    """Return whether an instrument's calibration holds on a day; without dates it does not."""
    since, until = instrument["calibrated_on"], instrument["calibration_due_on"]
    return isinstance(since, date) and isinstance(until, date) and since <= as_of_date <= until


def chamber_suits(*, protocol: str, r50_cm: float, chambers: int, tg51_cm: float, trs398_cm: float) -> bool:
    """Return whether a plane-parallel chamber is in calibration where the protocol's edition asks for one."""
    asked = (protocol == TG51 and r50_cm <= tg51_cm) or (protocol == TRS398 and r50_cm < trs398_cm)
    return chambers >= 1 or not asked


def reports_on_arrangement(*, evidence: Table, machine: str, beam: str, room: str, as_of_date: date) -> int:
    """Return how many signed commissioning reports speak of the arrangement."""
    return len(_signed(evidence, REPORT, (machine, beam, room), as_of_date))


def reviews_of_arrangement(*, evidence: Table, machine: str, beam: str, room: str, as_of_date: date) -> int:
    """Return how many signed reviews by a second physicist are not older than the arrangement's report."""
    about = (machine, beam, room)
    reports = _signed(evidence, REPORT, about, as_of_date)
    reviews = _signed(evidence, REVIEW, about, as_of_date)
    return sum(1 for review in reviews if reports and review >= max(reports))


def _signed(evidence: Table, kind: str, about: tuple[str, ...], as_of_date: date) -> list[date]:
    """Return the dates of papers of a kind that are signed, in force and about the arrangement."""
    found: list[date] = []
    for row in evidence.records():
        signed, expires, covers = row["approved_on"], row["expires_on"], row["covers"]
        if row["type"] != kind or not isinstance(signed, date) or signed > as_of_date:
            continue
        if isinstance(expires, date) and expires < as_of_date:
            continue
        if _covers(covers, about):
            found.append(signed)
    return found


def _covers(covers: object, about: tuple[str, ...]) -> bool:
    """Return whether a paper names machine, beam or room of an arrangement."""
    named = {str(each) for each in covers} if isinstance(covers, tuple) else set()
    short = {each.rpartition("/")[2] for each in about}
    return bool(named & {*about, *short})


_PAPERS = {
    "evidence": "rows evidence: type approved_on? expires_on? covers?",
    "machine": "machine.id",
    "beam": "beam.id",
    "room": "room.id",
    "as_of_date": "program.as_of_date",
}

DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "reference_dosimetry.days_since_calibration_days",
        "Days since the last reference calibration of the beam.",
        by=days_between,
        takes={"last_done_on": "reference_dosimetry.last_done_on", "as_of_date": "program.as_of_date"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.reference_calibration_names_beam",
        "The reference calibration was done for the machine and beam of the arrangement.",
        by=calibration_names_beam,
        takes={
            "calibrated": "each reference_dosimetry.beam_calibrated",
            "machine": "machine.id",
            "beam": "beam.id",
        },
        source="definition",
        known="derived",
    ),
    Definition(
        "beam.plane_parallel_chambers",
        "Number of plane-parallel chambers whose calibration holds today.",
        by=chambers_in_calibration,
        takes={
            "instruments": "rows instrument: type? calibrated_on? calibration_due_on?",
            "as_of_date": "program.as_of_date",
        },
        source="definition",
        known="derived",
    ),
    Definition(
        "beam.chamber_suits_protocol",
        "A plane-parallel chamber is in calibration where the edition of the protocol asks for one.",
        by=chamber_suits,
        takes={
            "protocol": "program.protocol",
            "r50_cm": "beam.r50_cm",
            "chambers": "beam.plane_parallel_chambers",
            "tg51_cm": "criterion.plane_parallel_r50_cm",
            "trs398_cm": "criterion.plane_parallel_trs_r50_cm",
        },
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.commissioning_reports",
        "Number of signed commissioning reports that name machine, beam or room of the arrangement.",
        by=reports_on_arrangement,
        takes=_PAPERS,
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.commissioning_reviews",
        "Number of signed reviews by a second physicist that are not older than the commissioning report.",
        by=reviews_of_arrangement,
        takes=_PAPERS,
        source="definition",
        known="derived",
    ),
)
