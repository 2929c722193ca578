"""
How sure a predicted best angle and a predicted uniformity are, and which measurement would help most.

Each input is moved by its standard deviation both ways. Until the foil spread has been fitted to a measured
profile the band of angles is at least 2 degrees either way, and no probability of passing is given.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from readiness.calculations.field_at_plane import HEIGHT_STEP_CM, dual_field_doses, even_grid
from readiness.calculations.field_setup import NARROWEST_SPREAD, STEEPEST_TILT_DEG, FieldSetup
from readiness.calculations.helpful_measurement import measurement_against, measurement_that_helps_most
from readiness.calculations.normal_samples import SAMPLES, normal_samples
from readiness.calculations.tilt_study import profile_percents, tilt_study
from readiness.quantities import Table, Uncertain

Array = NDArray[np.float64]

SCATTER_SD = 0.02  # of the width of the scatter: agreement of the model with own-monte-carlo (fit)
LEAST_BAND_DEG = 2.0
BAND_COVERAGE = 2.0  # standard deviations
COARSE_STEP_DEG, FINE_STEP_DEG, FINE_REACH_DEG = 0.5, 0.05, 1.0
LOWEST_TILT_DEG = 5.0


@dataclass(frozen=True)
class PredictionUncertainty:
    """
    Best tilt with its band, the profile at the chosen tilt with its band, and what contributes most.

    ``profile_band`` has height_cm, relative_dose, sd; ``band_across`` has across_cm instead.
    ``contributions`` has one row an input: its change of best tilt, vertical and horizontal uniformity for
    one standard deviation, and the measurement that would reduce it. ``probability_of_passing`` is None until
    the foil spread is fitted.
    """

    best_tilt_deg: Uncertain
    lowest_tilt_of_band_deg: float
    highest_tilt_of_band_deg: float
    vertical_percent: Uncertain
    horizontal_percent: Uncertain
    probability_of_passing: float | None
    profile_band: Table
    band_across: Table
    contributions: Table
    measurement_that_helps_most: str


@dataclass(frozen=True)
class _Judged:
    """How a prediction is judged."""

    plane_distance_cm: float
    tilt_deg: float
    mid_height_cm: float
    mu_share_upper: float
    half_length_cm: float
    half_width_cm: float
    metric: str


@dataclass(frozen=True)
class _Outcome:
    """What one set of inputs gives."""

    best_tilt_deg: float
    vertical: Array
    horizontal: Array


def prediction_uncertainty(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    tilt_deg: float,
    mid_height_cm: float,
    mu_share_upper: float,
    uniformity_half_length_cm: float,
    uniformity_half_width_cm: float,
    metric: str,
    vertical_limit_percent: float,
    horizontal_limit_percent: float,
    energy_sd_mev: float,
    foil_spread_sd: float,
    distance_sd_cm: float,
    tilt_sd_deg: float,
    foil_spread_fitted: bool,
    energy_measured: bool,
) -> PredictionUncertainty:
    """
    Return the uncertainty of a prediction and its sources.

    Args:
        setup: The beam and the room, from field_setup.
        plane_distance_cm: From the nominal source to the plane. [cm]
        tilt_deg: Chosen tilt of both fields. [°]
        mid_height_cm: Of the patient's mid-height above the isocentre; negative below it. [cm]
        mu_share_upper: Part of the pair's MU that the field aimed at the head gets. [1]
        uniformity_half_length_cm: Half of the length over which the vertical profile is judged. [cm]
        uniformity_half_width_cm: Half of the width over which the horizontal profile is judged. [cm]
        metric: half-range, deviation-from-mid-height or stricter.
        vertical_limit_percent: Largest departure allowed along the height. [%]
        horizontal_limit_percent: Largest departure allowed across. [%]
        energy_sd_mev: Standard deviation of the energy; 0.3 unless better known. [MeV]
        foil_spread_sd: Standard deviation of the foil spread. [1]
        distance_sd_cm: Standard deviation of the plane distance. [cm]
        tilt_sd_deg: Standard deviation of the tilt. [°]
        foil_spread_fitted: Whether the foil spread was fitted to a measured profile of this machine.
        energy_measured: Whether this beam's own depth dose at 100 cm is measured.

    Returns:
        Best tilt, uniformity and profile with their bands, contributions, and what helps most.

    Raises:
        ValueError: If a number is impossible.
        OutsideValidity: If an input moved by its standard deviation leaves the model.

    Valid for: inputs small enough that profiles change in proportion.
    Assumes: independent, normal inputs; the scatter model agrees to 2 %.
    Source: first-order propagation (derived); 2 % is own-fit (fit), the 2 degrees are ours (practice).
    """
    judged = _Judged(
        plane_distance_cm,
        tilt_deg,
        mid_height_cm,
        mu_share_upper,
        uniformity_half_length_cm,
        uniformity_half_width_cm,
        metric,
    )
    sds = {
        "foil spread": foil_spread_sd,
        "energy": energy_sd_mev,
        "scatter model": SCATTER_SD,
        "distance": distance_sd_cm,
        "tilt": tilt_sd_deg,
    }
    if min(sds.values()) < 0:
        raise ValueError("a standard deviation cannot be negative")
    limits = (vertical_limit_percent, horizontal_limit_percent)
    return _propagated(setup, judged, sds, foil_spread_fitted, energy_measured, *limits)


def _propagated(
    setup: FieldSetup,
    judged: _Judged,
    sds: dict[str, float],
    foil_spread_fitted: bool,
    energy_measured: bool,
    vertical_limit: float,
    horizontal_limit: float,
) -> PredictionUncertainty:
    """Return what the inputs moved one by one do to angle, profiles and uniformity."""
    centre = _outcome(setup, judged)
    moves = {
        name: (_outcome(*_moved(setup, judged, name, -sd)), _outcome(*_moved(setup, judged, name, sd)))
        for name, sd in sds.items()
        if sd > 0
    }
    steps = np.array([0.5 * (up.vertical - down.vertical) for down, up in moves.values()])
    across = np.array([0.5 * (up.horizontal - down.horizontal) for down, up in moves.values()])
    angles = np.array([0.5 * (up.best_tilt_deg - down.best_tilt_deg) for down, up in moves.values()])
    tilt_sd = float(np.sqrt(np.sum(angles**2)))
    reach = BAND_COVERAGE * tilt_sd
    if not foil_spread_fitted:
        reach = max(reach, LEAST_BAND_DEG)
    metric = judged.metric
    vertical = _spread(centre.vertical, steps, metric)
    horizontal = _spread(centre.horizontal, across, metric)
    passing = float(np.mean((vertical <= vertical_limit) & (horizontal <= horizontal_limit)))
    contributions = _contributions(centre, moves, metric, energy_measured)
    return PredictionUncertainty(
        best_tilt_deg=Uncertain(centre.best_tilt_deg, tilt_sd),
        lowest_tilt_of_band_deg=max(0.0, centre.best_tilt_deg - reach),
        highest_tilt_of_band_deg=centre.best_tilt_deg + reach,
        vertical_percent=Uncertain(_percent(centre.vertical, metric), float(np.std(vertical))),
        horizontal_percent=Uncertain(_percent(centre.horizontal, metric), float(np.std(horizontal))),
        probability_of_passing=_never_certain(passing) if foil_spread_fitted else None,
        profile_band=_band("height_cm", judged.half_length_cm, centre.vertical, steps),
        band_across=_band("across_cm", judged.half_width_cm, centre.horizontal, across),
        contributions=contributions,
        measurement_that_helps_most=measurement_that_helps_most(contributions=contributions),
    )


def _moved(setup: FieldSetup, judged: _Judged, name: str, by: float) -> tuple[FieldSetup, _Judged]:
    """Return setup and geometry with one input moved, as far as it has a meaning."""
    numbers = dict(judged.__dict__)
    if name == "foil spread":
        setup = setup.but(foil_spread=max(NARROWEST_SPREAD, setup.foil_spread + by))
    elif name == "energy":
        setup = setup.but(energy_at_source_mev=setup.energy_at_source_mev + by)
    elif name == "scatter model":
        setup = setup.but(scatter_scale=setup.scatter_scale + by)
    elif name == "distance":
        numbers["plane_distance_cm"] += by
    else:
        numbers["tilt_deg"] = max(0.0, numbers["tilt_deg"] + by)
    return setup, _Judged(**numbers)


def _outcome(setup: FieldSetup, judged: _Judged) -> _Outcome:
    """Return best tilt and profiles of one set of inputs."""
    profiles = []
    for heights, across in (
        (even_grid(half_length_cm=judged.half_length_cm, step_cm=HEIGHT_STEP_CM), np.array([0.0])),
        (np.array([0.0]), even_grid(half_length_cm=judged.half_width_cm, step_cm=HEIGHT_STEP_CM)),
    ):
        doses = dual_field_doses(
            setup=setup,
            plane_distance_cm=judged.plane_distance_cm,
            tilt_toward_head_deg=judged.tilt_deg,
            tilt_toward_feet_deg=judged.tilt_deg,
            mid_height_cm=judged.mid_height_cm,
            mu_share_upper=judged.mu_share_upper,
            heights_cm=heights,
            across_cm=across,
        )
        profiles.append(doses.ravel())
    return _Outcome(_best_tilt(setup, judged), profiles[0], profiles[1])


def _best_tilt(setup: FieldSetup, judged: _Judged) -> float:
    """Return the tilt with the evenest vertical profile to a twentieth of a degree; ties to the smaller."""
    best = LOWEST_TILT_DEG
    tilts = np.arange(LOWEST_TILT_DEG, STEEPEST_TILT_DEG + 1e-9, COARSE_STEP_DEG)
    for _ in range(2):
        study = tilt_study(
            setup=setup,
            distances_cm=[judged.plane_distance_cm],
            tilts_deg=tilts,
            mid_height_cm=judged.mid_height_cm,
            mu_share_upper=judged.mu_share_upper,
            uniformity_half_length_cm=judged.half_length_cm,
            uniformity_half_width_cm=2.0,
            field_length_cm=2.0,
            field_width_cm=4.0,
        )
        percent = study.vertical_percent(judged.metric)[0]
        best = float(tilts[int(np.argmin(np.round(percent, 6)))])
        low, high = max(0.0, best - FINE_REACH_DEG), min(STEEPEST_TILT_DEG, best + FINE_REACH_DEG)
        tilts = np.linspace(low, high, 1 + round((high - low) / FINE_STEP_DEG))
    return round(best, 6)


def _percent(profile: Array, metric: str) -> float:
    """Return the uniformity of one profile whose middle entry is the centre."""
    return float(profile_percents(profile[None, :], metric)[0])


def _spread(centre: Array, steps: Array, metric: str) -> Array:
    """Return the uniformity of evenly spread samples of the inputs."""
    if len(steps) == 0:
        return profile_percents(centre[None, :], metric)
    return profile_percents(np.maximum(centre + normal_samples(inputs=len(steps)) @ steps, 1e-9), metric)


def _never_certain(part: float) -> float:
    """Return a part of the samples as a probability that their number can support."""
    return min(max(part, 1 / SAMPLES), 1 - 1 / SAMPLES)


def _band(name: str, half_cm: float, profile: Array, steps: Array) -> Table:
    """Return a profile with its standard deviation."""
    places = even_grid(half_length_cm=half_cm, step_cm=HEIGHT_STEP_CM)
    sds = np.sqrt(np.sum(steps**2, axis=0)) if len(steps) else np.zeros_like(profile)
    rows = [(float(at), float(dose), float(sd)) for at, dose, sd in zip(places, profile, sds, strict=True)]
    return Table.of([name, "relative_dose", "sd"], rows)


def _contributions(
    centre: _Outcome, moves: dict[str, tuple[_Outcome, _Outcome]], metric: str, energy_measured: bool
) -> Table:
    """Return what one standard deviation of each input changes, the larger of both ways."""

    def change(sides: tuple[_Outcome, _Outcome], way: str) -> float:
        """Return the larger change of a profile's uniformity."""
        before = _percent(getattr(centre, way), metric)
        return max(abs(_percent(getattr(side, way), metric) - before) for side in sides)

    rows = []
    for name, sides in moves.items():
        tilt = max(abs(side.best_tilt_deg - centre.best_tilt_deg) for side in sides)
        against = measurement_against(uncertain_input=name, energy_measured=energy_measured)
        rows.append((name, tilt, change(sides, "vertical"), change(sides, "horizontal"), against))
    changes = ["best_tilt_change_deg", "vertical_change_percent", "horizontal_change_percent"]
    return Table.of(["input", *changes, "measurement"], rows)
