"""
In-vivo readings of a cycle: what each site received, what is done about it, what a boost would have to add.

A site's dose is the sum over all sessions of the cycle. Action is taken on the mean of at least three
readings at the prescription level. Every order, of a boost as of a shield, is the physician's.
"""

from collections.abc import Sequence
from dataclasses import dataclass

from readiness.calculations.in_vivo_sites import PRESCRIPTION_SITE, Site, in_vivo_sites
from readiness.calculations.site_doses import SiteDose, refuse_factor_100, site_doses
from readiness.quantities import Scalar, Table
from readiness.units import printed

FEWEST_AT_PRESCRIPTION = 3
CGY_PER_GY = 100.0

WITHIN = "within the action level"
INVESTIGATE = "investigate before the next cycle"
STOP = "stop: no further cycle until it is explained"
NOT_JUDGED = "not judged: fewer than three complete readings at the prescription level"
AS_EXPECTED, LOW, HIGH = "no action", "low: a boost is considered", "high: a shield is considered"

SITE_COLUMNS = (
    "site",
    "readings",
    "mean_cgy",
    "scatter_cgy",
    "prescription_percent",
    "sd_percent",
    "expected_low_percent",
    "expected_high_percent",
    "against_published",
    "outcome",
)
BOOST_COLUMNS = ("site", "readings", "deficit_per_cycle_gy", "deficit_over_course_gy", "sd_per_cycle_gy")


@dataclass(frozen=True)
class InVivoResult:
    """
    A cycle's readings evaluated.

    ``sites`` has a row per site with complete readings; ``sd_percent`` is that of the mean, in per cent of
    the prescription. ``boosts`` lists the sites whose dose is low with what is missing, the largest first.
    """

    prescription_percent: float | None
    prescription_sd_percent: float | None
    readings_at_prescription: int
    action: str
    sites: Table
    boosts: Table
    remarks: tuple[str, ...]


def evaluate_in_vivo(
    *,
    cycles: Sequence[int],
    sessions: Sequence[int],
    sites: Sequence[str],
    points: Sequence[int],
    doses_cgy: Sequence[float],
    cycle: int,
    cycles_of_course: int,
    sessions_per_cycle: int,
    dose_per_cycle_gy: float,
    single_reading_sd_percent: float,
    shared_sd_percent: float,
    investigate_beyond_percent: float,
    stop_beyond_percent: float,
    boost_below_percent: float,
    shield_above_percent: float,
) -> InVivoResult:
    """
    Return what the readings of one cycle say about each site and about the prescription level.

    Args:
        cycles: Cycle of each reading, counted from 1. [1]
        sessions: Session of the cycle of each reading, counted from 1. [1]
        sites: Site of each reading, by its word.
        points: Which of several detectors at the site, counted from 1. [1]
        doses_cgy: Dose of each reading. [cGy]
        cycle: Cycle that is evaluated. [1]
        cycles_of_course: Cycles of the course, for what a boost would have to add. [1]
        sessions_per_cycle: Sessions that make one cycle. [1]
        dose_per_cycle_gy: Prescribed dose of one cycle. [Gy]
        single_reading_sd_percent: Standard deviation of one reading, of what differs between readings. [%]
        shared_sd_percent: Standard deviation of what all readings share. [%]
        investigate_beyond_percent: Deviation at the prescription level that is investigated. [%]
        stop_beyond_percent: Deviation at the prescription level that stops the course. [%]
        boost_below_percent: Part of the prescription below which a boost of the site is considered. [%]
        shield_above_percent: Part of the prescription above which a shield of the site is considered. [%]

    Returns:
        A row per site, the action at the prescription level, boosts with their deficits, remarks.

    Raises:
        ValueError: If lengths differ or a number is impossible.
        OutsideValidity: If a reading is negative, no site has readings of all sessions, or readings differ
            from the prescription by the factor between gray and centigray.

    Valid for: readings of one person or phantom.
    Assumes: readings of all sessions at one site and point belong together.
    Source: practice for action levels; expected ranges as in the table of sites.
    """
    if not dose_per_cycle_gy > 0 or sessions_per_cycle < 1 or cycles_of_course < 1:
        raise ValueError("a cycle has sessions and a dose, and a course has cycles")
    if not 0 < investigate_beyond_percent <= stop_beyond_percent:
        raise ValueError("a deviation is investigated before it stops a course")
    if not 0 < boost_below_percent < shield_above_percent:
        raise ValueError("a boost is considered below the dose at which a shield is")
    given = zip(cycles, sites, points, sessions, doses_cgy, strict=True)
    rows = [(site, point, day, dose) for number, site, point, day, dose in given if number == cycle]
    found, remarks = site_doses(rows, sessions_per_cycle, single_reading_sd_percent, shared_sd_percent)
    refuse_factor_100(list(found.values()), CGY_PER_GY * dose_per_cycle_gy)
    unknown = sorted(found.keys() - in_vivo_sites().keys())
    if unknown:
        remarks.append(f"No expected dose is known for: {', '.join(unknown)}.")
    level = found.get(PRESCRIPTION_SITE)
    action, said = _action(level, dose_per_cycle_gy, investigate_beyond_percent, stop_beyond_percent)
    low_high = boost_below_percent, shield_above_percent
    table = Table.of(SITE_COLUMNS, [_row(dose, dose_per_cycle_gy, low_high) for dose in found.values()])
    outcomes = table.column("outcome")
    low = [dose for dose, outcome in zip(found.values(), outcomes, strict=True) if outcome == LOW]
    if set(outcomes) != {AS_EXPECTED}:
        said.append("Boosts and shields are ordered by the physician; nothing here is an order.")
    return InVivoResult(
        prescription_percent=level.mean_cgy / dose_per_cycle_gy if level else None,
        prescription_sd_percent=level.sd_cgy / dose_per_cycle_gy if level else None,
        readings_at_prescription=level.readings if level else 0,
        action=action,
        sites=table,
        boosts=_boosts(low, dose_per_cycle_gy, cycles_of_course),
        remarks=(*remarks, *said),
    )


def _row(dose: SiteDose, dose_per_cycle_gy: float, low_high: tuple[float, float]) -> tuple[Scalar, ...]:
    """Return the row of one site; cGy over Gy is per cent."""
    percent = dose.mean_cgy / dose_per_cycle_gy
    known = in_vivo_sites().get(dose.site)
    return (
        dose.site,
        dose.readings,
        dose.mean_cgy,
        dose.scatter_cgy,
        percent,
        dose.sd_cgy / dose_per_cycle_gy,
        known.expected_low_percent if known else None,
        known.expected_high_percent if known else None,
        _against_published(percent, known),
        LOW if percent < low_high[0] else HIGH if percent > low_high[1] else AS_EXPECTED,
    )


def _against_published(percent: float, site: Site | None) -> str:
    """Return in words how a dose stands to what was published for its site."""
    if site is None:
        return "nothing published"
    if site.expected_low_percent is None or site.expected_high_percent is None:
        return "no range published"
    if percent < site.expected_low_percent:
        return "lower than published"
    return "higher than published" if percent > site.expected_high_percent else "as published"


def _action(
    level: SiteDose | None, dose_per_cycle_gy: float, investigate_percent: float, stop_percent: float
) -> tuple[str, list[str]]:
    """Return the action at the prescription level and what must be said about it."""
    readings = level.readings if level else 0
    if level is None or readings < FEWEST_AT_PRESCRIPTION:
        return NOT_JUDGED, [f"{readings} complete readings at the prescription level ({PRESCRIPTION_SITE})."]
    off, sd = level.mean_cgy / dose_per_cycle_gy - 100, level.sd_cgy / dose_per_cycle_gy
    away = abs(off) - 1e-9  # a deviation of exactly a level is still within it
    action = STOP if away > stop_percent else INVESTIGATE if away > investigate_percent else WITHIN
    said = [
        f"The deviation of {printed(off, 2)} % lies within one standard deviation ({printed(sd, 2)} %) of "
        f"the action level of {printed(one)} %."
        for one in (investigate_percent, stop_percent)
        if abs(abs(off) - one) < sd
    ]
    return action, said


def _boosts(low: Sequence[SiteDose], dose_per_cycle_gy: float, cycles_of_course: int) -> Table:
    """Return what is missing at the sites that are low, the largest deficit first."""
    rows = []
    for dose in sorted(low, key=lambda one: one.mean_cgy):
        deficit = dose_per_cycle_gy - dose.mean_cgy / CGY_PER_GY
        over_course = deficit * cycles_of_course
        rows.append((dose.site, dose.readings, deficit, over_course, dose.sd_cgy / CGY_PER_GY))
    return Table.of(BOOST_COLUMNS, rows)
