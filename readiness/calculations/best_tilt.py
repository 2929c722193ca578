"""
The best tilt between measured tilts, and the band of tilts around it that pass.

Each measured profile becomes a smooth curve, symmetric about its own centre, which is moved to 0; between
measured tilts each position is interpolated. The scatter of single readings then does not decide the best
tilt, and how far it moves it is found by repeating the sweep with scatter of the same size.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.interpolate import PchipInterpolator

from readiness.calculations.profile_analysis import SymmetricCurve, judged_percent, symmetric_curve
from readiness.errors import OutsideValidity
from readiness.quantities import Uncertain
from readiness.units import printed

Array = NDArray[np.float64]

STEP_DEG = 0.05  # between tilts tried; ties go to the smaller one
POINTS_WITHIN = 81
REPEATS = 200
SEED = 20260000


@dataclass(frozen=True)
class BestTilt:
    """
    The best tilt with the scatter of the readings as its standard deviation, and what it gives.

    ``passes_from_deg`` and ``passes_to_deg`` bound the tilts around it that pass, None if not even the best
    does; a bound at the end of the tilts measured is no bound of the band, and the remarks say so.
    """

    tilt_deg: Uncertain
    judged_percent: float
    passes_from_deg: float | None
    passes_to_deg: float | None
    remarks: tuple[str, ...]


@dataclass(frozen=True)
class _Smooth:
    """Smooth curves of all tilts within the limits, relative to their centre."""

    tilts: Array
    curves: Array  # (tilts, positions)
    projections: tuple[Array, ...]  # from readings to the curve within the limits, one per tilt
    scatters: tuple[float, ...]


def best_tilt(
    profiles: dict[float, tuple[Array, Array]], half_length_cm: float, limit_percent: float, metric: str
) -> BestTilt:
    """Return the best tilt between the tilts of profiles in rising order, each (positions, readings)."""
    if len(profiles) < 2:
        raise OutsideValidity("fewer than two tilts have enough readings: there is no best tilt between them")
    smooth = _smoothed(profiles, half_length_cm)
    steps = round(float(np.ptp(smooth.tilts)) / STEP_DEG)
    tried = np.minimum(smooth.tilts[0] + np.arange(steps + 1) * STEP_DEG, smooth.tilts[-1])
    judged = _judged(smooth.tilts, smooth.curves, tried, metric)
    lowest = int(np.argmin(judged))
    first, last = _band(judged, lowest, limit_percent)
    remarks = []
    if lowest in (0, len(tried) - 1):
        end = "smallest" if lowest == 0 else "largest"
        found = printed(float(tried[lowest]))
        remarks.append(f"The best tilt is {found} deg, the {end} measured: go beyond it.")
    if first == 0 or last == len(tried) - 1:
        remarks.append("The band of tilts that pass goes beyond the tilts measured.")
    return BestTilt(
        tilt_deg=Uncertain(float(tried[lowest]), max(_scatter_deg(smooth, tried, metric), STEP_DEG)),
        judged_percent=float(judged[lowest]),
        passes_from_deg=None if first is None else float(tried[first]),
        passes_to_deg=None if last is None else float(tried[last]),
        remarks=tuple(remarks),
    )


def _scatter_deg(smooth: _Smooth, tried: Array, metric: str) -> float:
    """Return the standard deviation of the best tilt when the sweep is repeated with its own scatter."""
    generator = np.random.default_rng(SEED)
    found = []
    for _ in range(REPEATS):
        moved = [
            projection @ generator.normal(0.0, scatter, projection.shape[1])
            for projection, scatter in zip(smooth.projections, smooth.scatters, strict=True)
        ]
        judged = _judged(smooth.tilts, smooth.curves + np.array(moved), tried, metric)
        found.append(float(tried[np.argmin(judged)]))
    return float(np.std(found))


def _smoothed(profiles: dict[float, tuple[Array, Array]], half_length_cm: float) -> _Smooth:
    """Return smooth curves within the limits, and how scatter of readings moves them."""
    at = np.linspace(-half_length_cm, half_length_cm, POINTS_WITHIN)
    curves, projections, scatters = [], [], []
    for places, readings in profiles.values():
        curve = symmetric_curve(places, readings)
        centre = float(curve.at(np.zeros(1))[0])
        curves.append(curve.at(at) / centre)
        projections.append(_projection(curve, places, at) / centre)
        scatters.append(curve.scatter)
    return _Smooth(np.array(list(profiles)), np.array(curves), tuple(projections), tuple(scatters))


def _projection(curve: SymmetricCurve, places: Array, at: Array) -> Array:
    """Return the matrix from readings at their places to the fitted curve at other places."""
    powers = np.arange(len(curve.coefficients)) * 2
    design = ((places - curve.centre_cm.value) / curve.length_cm)[:, None] ** powers
    wanted = (at / curve.length_cm)[:, None] ** powers
    return np.asarray(wanted @ np.linalg.pinv(design), dtype=float)


def _judged(tilts: Array, curves: Array, tried: Array, metric: str) -> Array:
    """Return the judged metric of the interpolated profile at each tilt tried."""
    between = np.asarray(PchipInterpolator(tilts, curves, axis=0)(tried), dtype=float)
    relative = between / between[:, [curves.shape[1] // 2]]
    highest, lowest = relative.max(axis=1), relative.min(axis=1)
    half_ranges = 100 * (highest - lowest) / (highest + lowest)
    deviations = 100 * np.maximum(highest - 1, 1 - lowest)
    pairs = zip(half_ranges.tolist(), deviations.tolist(), strict=True)
    return np.array([judged_percent(half_range, deviation, metric) for half_range, deviation in pairs])


def _band(judged: Array, lowest: int, limit_percent: float) -> tuple[int | None, int | None]:
    """Return the ends of the unbroken band of passing tilts around the best one."""
    if judged[lowest] > limit_percent + 1e-9:
        return None, None
    failing = np.flatnonzero(judged > limit_percent + 1e-9)
    below, above = failing[failing < lowest], failing[failing > lowest]
    return (
        int(below[-1]) + 1 if len(below) else 0,
        int(above[0]) - 1 if len(above) else len(judged) - 1,
    )
