"""Dose of each site over a complete cycle, from readings of all its sessions."""

from collections import defaultdict
from collections.abc import Sequence
from dataclasses import dataclass
from math import isfinite
from statistics import fmean, stdev

from readiness.calculations.reading_uncertainty import mean_sd_percent, sum_sd_percent
from readiness.errors import OutsideValidity
from readiness.units import printed

FACTOR_100_WITHIN = 3.0  # as a factor to either side

Row = tuple[str, int, int, float]  # site, point, session, dose in cGy
Key = tuple[str, int]  # site and point


@dataclass(frozen=True)
class SiteDose:
    """
    Dose of one site over all sessions, the mean of its complete points.

    ``scatter_cgy`` is the standard deviation between points, None for one point; ``sd_cgy`` is that of the
    mean, from the stated uncertainty of a reading.
    """

    site: str
    readings: int
    mean_cgy: float
    scatter_cgy: float | None
    sd_cgy: float


def site_doses(
    rows: Sequence[Row], sessions: int, single_sd_percent: float, shared_sd_percent: float
) -> tuple[dict[str, SiteDose], list[str]]:
    """Return the dose of each site that has readings of all sessions, and what must be said of the others."""
    complete, remarks = _complete_points(rows, sessions)
    if not complete:
        raise OutsideValidity(f"no site has readings of all {sessions} sessions of the cycle")
    by_site: dict[str, list[list[float]]] = defaultdict(list)
    for (site, _), doses in complete.items():
        by_site[site].append(doses)
    uncertain = single_sd_percent, shared_sd_percent
    return {site: _site_dose(site, points, uncertain) for site, points in by_site.items()}, remarks


def refuse_factor_100(doses: Sequence[SiteDose], prescribed_cgy: float) -> None:
    """Refuse readings that are a hundred times too small or too large."""
    middle = sorted(dose.mean_cgy for dose in doses)[len(doses) // 2] / prescribed_cgy
    for factor, words in ((0.01, "gray"), (100.0, "a hundredfold unit")):
        if factor / FACTOR_100_WITHIN <= middle <= factor * FACTOR_100_WITHIN:
            raise OutsideValidity(
                f"readings are about {printed(100 * middle, 2)} % of the prescription: are they {words} "
                "under a column in cGy?"
            )


def _complete_points(rows: Sequence[Row], sessions: int) -> tuple[dict[Key, list[float]], list[str]]:
    """Return the readings of all sessions at each point that has them all, and which points have not."""
    parts: dict[Key, dict[int, list[float]]] = defaultdict(lambda: defaultdict(list))
    for site, point, session, dose in rows:
        if not isfinite(dose):
            raise ValueError("a reading is not a finite number")
        if dose < 0:
            raise OutsideValidity(f"a reading at {site} is negative: was the background subtracted twice?")
        parts[site, point][session].append(dose)
    complete: dict[Key, list[float]] = {}
    remarks = []
    for (site, point), by_session in parts.items():
        missing = sorted(set(range(1, sessions + 1)) - by_session.keys())
        if missing:
            words = " and ".join(str(session) for session in missing)
            remarks.append(f"{site}, point {point}: no reading of day {words}, so that it is not added up.")
            continue
        if any(len(doses) > 1 for doses in by_session.values()):
            remarks.append(f"{site}, point {point}: several readings of one day were averaged.")
        complete[site, point] = [fmean(by_session[session]) for session in range(1, sessions + 1)]
    return complete, remarks


def _site_dose(site: str, points: Sequence[Sequence[float]], uncertain: tuple[float, float]) -> SiteDose:
    """Return the dose of one site from the readings of all sessions at each of its points."""
    single, shared = uncertain
    sums = [sum(doses) for doses in points]
    mean = fmean(sums)
    of_sum = 0.0
    if mean > 0:
        sessions = [fmean(doses) for doses in zip(*points, strict=True)]
        of_sum = sum_sd_percent(doses_cgy=sessions, single_sd_percent=single, shared_sd_percent=0.0)
    sd = mean_sd_percent(single_sd_percent=of_sum, shared_sd_percent=shared, readings=len(sums))
    return SiteDose(site, len(sums), mean, stdev(sums) if len(sums) > 1 else None, mean * sd / 100)
