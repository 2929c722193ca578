"""
Profiles at several tilts: which tilts pass, the smallest that does, and the best one.

Each measured tilt is judged by its own readings; best_tilt.py looks between them.
"""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from readiness.calculations.best_tilt import BestTilt, best_tilt
from readiness.calculations.profile_analysis import (
    CERTAIN_SHIFT,
    FEWEST_FOR_CENTRE,
    SHIFT_WORTH_SAYING_CM,
    ProfileEvaluation,
    evaluate_profile,
    shift_remark,
)
from readiness.calculations.usable_readings import in_order, paired
from readiness.errors import OutsideValidity
from readiness.quantities import Table, Uncertain
from readiness.units import printed

Array = NDArray[np.float64]

DUAL, HEAD, FEET = "dual", "head", "feet"
COLUMNS = (
    "tilt_deg",
    "half_range_percent",
    "deviation_percent",
    "judged_percent",
    "within_limit",
    "centre_shift_cm",
    "readings",
)


@dataclass(frozen=True)
class AngleSweep:
    """
    A sweep of tilts against a limit.

    ``smallest_passing_tilt_deg`` is a measured tilt, None if none passes. ``best`` looks between the measured
    tilts, None if fewer than two have enough readings. ``centre_shift_cm`` is the weighted mean over all
    tilts, None if no tilt shows its centre.
    """

    tilts: Table
    smallest_passing_tilt_deg: float | None
    best: BestTilt | None
    centre_shift_cm: Uncertain | None
    limit_percent: float
    metric: str
    remarks: tuple[str, ...]


def evaluate_angle_sweep(
    *,
    tilts_deg: ArrayLike,
    positions_cm: ArrayLike,
    readings: ArrayLike,
    fields: Sequence[str],
    half_length_cm: float,
    limit_percent: float,
    metric: str,
    normalisation: str,
    smoothing: str,
) -> AngleSweep:
    """
    Return how each measured tilt stands against the limit, and the best tilt between them.

    Args:
        tilts_deg: Tilt of each reading from the horizontal, (n,). [deg]
        positions_cm: Where each reading was taken, from mid-height or the middle of the width, (n,). [cm]
        readings: Relative readings as measured, (n,). [1]
        fields: "dual" for readings of both fields, "head" or "feet" for one, a word per reading; empty if all
            are dual.
        half_length_cm: The limits stand this far on either side of position 0. [cm]
        limit_percent: Highest value of the judged metric. [%]
        metric: What is judged: "stricter" of the two, "half-range" or "deviation-from-centre".
        normalisation: Where the file says that readings are 1.
        smoothing: How the file says that readings were smoothed.

    Returns:
        A row per tilt, the smallest measured tilt that passes, the best tilt with its band, remarks.

    Raises:
        ValueError: If the lengths differ, a number is not finite, or a word is not one of those above.
        OutsideValidity: If no tilt has a profile that can be judged.

    Valid for: tilts a few degrees apart, vertical or horizontal profiles.
    Assumes: between measured tilts the smooth profile changes monotonically at each position; head and feet
        fields measured alone add up.
    Source: park-2014, yousif-2015 (read) for optimising the tilt by measurement; method derived.
    """
    profiles, remarks = _profiles(tilts_deg, positions_cm, readings, fields)
    summed = _summed_tilts(tilts_deg, fields)
    judged: dict[float, ProfileEvaluation] = {}
    for tilt, (places, values) in profiles.items():
        try:
            judged[tilt] = evaluate_profile(
                positions_cm=places,
                readings=values,
                half_length_cm=half_length_cm,
                metric=metric,
                normalisation="none" if tilt in summed else normalisation,
                smoothing=smoothing,
            )
        except OutsideValidity as reason:
            remarks.append(f"At {printed(tilt)} deg: {reason}.")
    if not judged:
        raise OutsideValidity("no tilt has a profile that can be judged: " + " ".join(remarks))
    centre = _mean_centre(judged)
    remarks += _remarks_of_tilts(judged, centre)
    seen = {tilt: in_order(*profiles[tilt], "cm")[:2] for tilt in judged}
    enough = {tilt: profile for tilt, profile in seen.items() if len(profile[0]) >= FEWEST_FOR_CENTRE}
    best = best_tilt(enough, half_length_cm, limit_percent, metric) if len(enough) > 1 else None
    remarks += best.remarks if best else ["Fewer than two tilts have enough readings to look between them."]
    passing = [tilt for tilt, profile in judged.items() if _passes(profile, limit_percent)]
    return AngleSweep(
        tilts=Table.of(COLUMNS, [_row(tilt, profile, limit_percent) for tilt, profile in judged.items()]),
        smallest_passing_tilt_deg=min(passing, default=None),
        best=best,
        centre_shift_cm=centre,
        limit_percent=limit_percent,
        metric=metric,
        remarks=tuple(remarks),
    )


def _passes(profile: ProfileEvaluation, limit_percent: float) -> bool:
    """Return whether a profile is within the limit, up to the last digit of a floating-point number."""
    return profile.judged_percent <= limit_percent + 1e-9


def _mean_centre(judged: dict[float, ProfileEvaluation]) -> Uncertain | None:
    """Return the centre of all tilts together, each weighted by its own uncertainty."""
    centres = [profile.centre_shift_cm for profile in judged.values() if profile.centre_shift_cm]
    if not centres:
        return None
    weights = [1 / max(centre.sd, 1e-6) ** 2 for centre in centres]
    mean = sum(weight * centre.value for weight, centre in zip(weights, centres, strict=True)) / sum(weights)
    return Uncertain(mean, sum(weights) ** -0.5)


def _remarks_of_tilts(judged: dict[float, ProfileEvaluation], centre: Uncertain | None) -> list[str]:
    """Return what must be said about each tilt, and once for all if they are all shifted alike."""
    said = []
    shifted = centre and abs(centre.value) > max(SHIFT_WORTH_SAYING_CM, CERTAIN_SHIFT * centre.sd)
    if centre and shifted:
        said.append(
            f"All tilts together are centred at {printed(centre.value, 2)} cm "
            f"(sd {printed(centre.sd, 2)} cm), not at 0: look at the detector's position and "
            "the zero of the gantry."
        )
    for tilt, profile in judged.items():
        own = shift_remark(profile.centre_shift_cm) if shifted and profile.centre_shift_cm else ()
        said += [f"At {printed(tilt)} deg: {remark}" for remark in profile.remarks if remark not in own]
    return said


def _row(
    tilt: float, profile: ProfileEvaluation, limit_percent: float
) -> tuple[float, float, float, float, bool, float | None, int]:
    """Return the row of one tilt."""
    return (
        tilt,
        profile.half_range_percent,
        profile.deviation_percent,
        profile.judged_percent,
        _passes(profile, limit_percent),
        profile.centre_shift_cm.value if profile.centre_shift_cm else None,
        profile.points_within,
    )


def _profiles(
    tilts_deg: ArrayLike, positions_cm: ArrayLike, readings: ArrayLike, fields: Sequence[str]
) -> tuple[dict[float, tuple[Array, Array]], list[str]]:
    """Return the profile of the dual field at each tilt in rising order, and what is missing."""
    tilts, places = paired(tilts_deg, positions_cm)
    _, values = paired(tilts_deg, readings)
    words = np.array(list(fields) if fields else [DUAL] * len(tilts))
    if len(words) != len(tilts) or not set(words.tolist()) <= {DUAL, HEAD, FEET}:
        raise ValueError(f"each reading belongs to {DUAL}, {HEAD} or {FEET}")
    found: dict[float, tuple[Array, Array]] = {}
    remarks: list[str] = []
    for tilt in np.unique(tilts).tolist():
        of = {word: (tilts == tilt) & (words == word) for word in (DUAL, HEAD, FEET)}
        if of[DUAL].any():
            found[tilt] = places[of[DUAL]], values[of[DUAL]]
        elif of[HEAD].any() != of[FEET].any():
            there, missing = (HEAD, FEET) if of[HEAD].any() else (FEET, HEAD)
            remarks.append(
                f"At {printed(tilt)} deg the {there} field has no mirror: the {missing} field was not "
                "measured, and the tilt is left out."
            )
        else:
            found[tilt] = _sum(places[of[HEAD]], values[of[HEAD]], places[of[FEET]], values[of[FEET]])
            if len(found[tilt][0]) < max(of[HEAD].sum(), of[FEET].sum()):
                remarks.append(f"At {printed(tilt)} deg only positions measured with both fields were added.")
    return found, remarks


def _sum(head_at: Array, head: Array, feet_at: Array, feet: Array) -> tuple[Array, Array]:
    """Return the sum of two fields where both were measured."""
    head_at, head, _ = in_order(head_at, head, "cm")
    feet_at, feet, _ = in_order(feet_at, feet, "cm")
    common, first, second = np.intersect1d(head_at, feet_at, return_indices=True)
    return common, head[first] + feet[second]


def _summed_tilts(tilts_deg: ArrayLike, fields: Sequence[str]) -> set[float]:
    """Return the tilts whose profile is added up from single fields."""
    tilts = np.atleast_1d(np.asarray(tilts_deg, dtype=float)).tolist()
    words = fields or [DUAL] * len(tilts)
    return set(tilts) - {tilt for tilt, word in zip(tilts, words, strict=True) if word == DUAL}
