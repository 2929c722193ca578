"""Best angle, band of angles and distance that follow from a study of tilts."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from readiness.calculations.tilt_study import TiltStudy
from readiness.errors import OutsideValidity
from readiness.quantities import Table

Array = NDArray[np.float64]

TIE_DIGITS = 6  # of a percentage: closer angles are equally good, and the smaller is taken


@dataclass(frozen=True)
class AngleAtDistance:
    """
    What one distance allows.

    ``lowest_passing_tilt_deg`` and ``highest_passing_tilt_deg`` bound the band of tilts around the best one
    whose vertical profile keeps its limit; both are None if not even the best does.
    """

    distance_cm: float
    best_tilt_deg: float
    vertical_percent: float
    horizontal_percent: float
    map_half_range_percent: float
    lowest_passing_tilt_deg: float | None
    highest_passing_tilt_deg: float | None
    vertical_within: bool
    horizontal_within: bool


def angle_at_distance(
    *,
    study: TiltStudy,
    distance_cm: float,
    metric: str,
    vertical_limit_percent: float,
    horizontal_limit_percent: float,
) -> AngleAtDistance:
    """
    Return the best tilt of one distance of a study and the band of tilts that keep the vertical limit.

    Args:
        study: From tilt_study.
        distance_cm: One of the study's distances. [cm]
        metric: half-range, deviation-from-mid-height or stricter.
        vertical_limit_percent: Largest departure allowed along the height. [%]
        horizontal_limit_percent: Largest departure allowed across. [%]

    Returns:
        Best tilt, its uniformity both ways and the band.

    Raises:
        ValueError: If the metric is unknown.
        OutsideValidity: If the study does not hold the distance, or its best tilt is the last one studied.

    Valid for: studies whose tilts reach beyond the best one.
    Assumes: straight lines between neighbouring tilts at the ends of the band; ties go to the smaller angle.
    Source: our own definition; the need to optimise per distance is in park-2014, yousif-2015 (read).
    """
    at = int(np.argmin(np.abs(study.distances_cm - distance_cm)))
    if abs(study.distances_cm[at] - distance_cm) > 1e-6:
        raise OutsideValidity(f"the study does not hold a distance of {distance_cm:g} cm")
    vertical = study.vertical_percent(metric)[at]
    horizontal = study.horizontal_percent(metric)[at]
    best = int(np.argmin(np.round(vertical, TIE_DIGITS)))
    if len(vertical) > 1 and best == len(vertical) - 1:
        raise OutsideValidity(
            f"at {distance_cm:g} cm the best tilt is larger than the {study.tilts_deg[best]:g} deg studied"
        )
    within = bool(vertical[best] <= vertical_limit_percent)
    low = _band_end(study.tilts_deg, vertical, best, vertical_limit_percent, -1) if within else None
    high = _band_end(study.tilts_deg, vertical, best, vertical_limit_percent, +1) if within else None
    return AngleAtDistance(
        distance_cm=float(study.distances_cm[at]),
        best_tilt_deg=float(study.tilts_deg[best]),
        vertical_percent=float(vertical[best]),
        horizontal_percent=float(horizontal[best]),
        map_half_range_percent=float(study.map_half_range_percent[at, best]),
        lowest_passing_tilt_deg=low,
        highest_passing_tilt_deg=high,
        vertical_within=within,
        horizontal_within=bool(horizontal[best] <= horizontal_limit_percent),
    )


def _band_end(tilts: Array, percent: Array, best: int, limit: float, step: int) -> float:
    """Return where the limit is crossed when going away from the best tilt, or the last tilt studied."""
    at = best
    while 0 <= at + step < len(tilts) and percent[at + step] <= limit:
        at += step
    beyond = at + step
    if not 0 <= beyond < len(tilts):
        return float(tilts[at])
    share = (limit - percent[at]) / (percent[beyond] - percent[at])
    return float(tilts[at] + share * (tilts[beyond] - tilts[at]))


def angles_by_distance(
    *, study: TiltStudy, metric: str, vertical_limit_percent: float, horizontal_limit_percent: float
) -> Table:
    """
    Return the best tilt and the band of tilts of every distance of a study.

    Args:
        study: From tilt_study.
        metric: half-range, deviation-from-mid-height or stricter.
        vertical_limit_percent: Largest departure allowed along the height. [%]
        horizontal_limit_percent: Largest departure allowed across. [%]

    Returns:
        One row a distance; the columns are the attributes of AngleAtDistance. A distance whose best tilt
        lies beyond those studied has blanks.

    Raises:
        ValueError: If the metric is unknown.

    Valid for: see angle_at_distance.
    Assumes: see angle_at_distance.
    Source: our own definition.
    """
    names = tuple(AngleAtDistance.__dataclass_fields__)
    rows = []
    for distance in study.distances_cm:
        try:
            found = angle_at_distance(
                study=study,
                distance_cm=float(distance),
                metric=metric,
                vertical_limit_percent=vertical_limit_percent,
                horizontal_limit_percent=horizontal_limit_percent,
            )
        except OutsideValidity:
            rows.append((float(distance), *(None for _ in names[1:])))
        else:
            rows.append(tuple(getattr(found, name) for name in names))
    return Table.of(names, rows)


def uniformity_over_distance_and_tilt(
    *,
    study: TiltStudy,
    metric: str,
    vertical_limit_percent: float,
    horizontal_limit_percent: float,
    every_distance: int = 1,
    every_tilt: int = 1,
) -> Table:
    """
    Return the feasible region: uniformity both ways per distance and tilt, and whether both keep their limit.

    Args:
        study: From tilt_study.
        metric: half-range, deviation-from-mid-height or stricter.
        vertical_limit_percent: Largest departure allowed along the height. [%]
        horizontal_limit_percent: Largest departure allowed across. [%]
        every_distance: List only every n-th distance. [1]
        every_tilt: List only every n-th tilt. [1]

    Returns:
        Columns distance_cm, tilt_deg, vertical_percent, horizontal_percent, within_both.

    Raises:
        ValueError: If the metric is unknown.

    Valid for: every study.
    Assumes: nothing beyond the study.
    Source: our own definition.
    """
    vertical, horizontal = study.vertical_percent(metric), study.horizontal_percent(metric)
    within = (vertical <= vertical_limit_percent) & (horizontal <= horizontal_limit_percent)
    rows = [
        (float(distance), float(tilt), float(vertical[i, j]), float(horizontal[i, j]), bool(within[i, j]))
        for i, distance in list(enumerate(study.distances_cm))[::every_distance]
        for j, tilt in list(enumerate(study.tilts_deg))[::every_tilt]
    ]
    names = ["distance_cm", "tilt_deg", "vertical_percent", "horizontal_percent", "within_both"]
    return Table.of(names, rows)


def distance_for_both_limits_cm(*, angles: Table) -> float | None:
    """
    Return the nearest distance of a study at which the best tilt keeps both limits.

    Args:
        angles: From angles_by_distance.

    Returns:
        Plane distance, or None if no distance of the study does. [cm]

    Raises:
        ValueError: If the table is another one.

    Valid for: tables of angles_by_distance.
    Assumes: the horizontal profile is cured by distance, not by tilt.
    Source: our own definition.
    """
    for row in angles.records():
        if row["vertical_within"] and row["horizontal_within"]:
            return float(row["distance_cm"] or 0.0)
    return None


def remedy_for_uniformity(*, angles: Table, plane_distance_cm: float, farthest_reachable_cm: float) -> str:
    """
    Return what would have to change for both profiles to keep their limits, in words.

    Args:
        angles: From angles_by_distance.
        plane_distance_cm: Where the plane stands now; one of the study's distances. [cm]
        farthest_reachable_cm: Farthest plane distance that the room allows on this side. [cm]

    Returns:
        A sentence; empty if nothing has to change.

    Raises:
        OutsideValidity: If the table does not hold the distance.

    Valid for: tables of angles_by_distance.
    Assumes: only the distance is free: more distance widens the scatter and evens the profile across.
    Source: our own definition.
    """
    rows = {round(float(row["distance_cm"] or 0.0), 3): row for row in angles.records()}
    here = rows.get(round(plane_distance_cm, 3))
    if here is None:
        raise OutsideValidity(f"the study does not hold a distance of {plane_distance_cm:g} cm")
    if here["vertical_within"] and here["horizontal_within"]:
        return ""
    cure = "Tilt does not cure the horizontal profile, distance does: "
    if here["horizontal_within"]:
        cure = "Not even the best tilt brings the vertical profile within its limit here, distance does: "
    needed = distance_for_both_limits_cm(angles=angles)
    if needed is None:
        last = max(rows)
        return (
            f"No distance studied, up to {last:.0f} cm, brings both profiles within their limits at its best"
            " tilt: study another beam, degrader or opening."
        )
    farther = needed - plane_distance_cm
    if needed <= farthest_reachable_cm:
        way = "farther" if farther > 0 else "nearer"
        return f"{cure}move the plane {abs(farther):.0f} cm {way}, to {needed:.0f} cm, which the room allows."
    short = needed - farthest_reachable_cm
    return (
        f"{cure}it needs the plane at {needed:.0f} cm, {farther:.0f} cm farther; the room ends {short:.0f} cm"
        " short of that. Assess the other side, another room, or a recess for the platform."
    )
