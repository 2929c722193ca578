"""Measured output of the dual field: dose per MU of the pair, its change with distance and tilt, repeats."""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from readiness.calculations.monitor_units import ON_EACH, TOTAL_OF_BOTH, output_plausibility
from readiness.calculations.usable_readings import paired
from readiness.errors import OutsideValidity
from readiness.units import printed

Array = NDArray[np.float64]

GROSS_ERROR_PERCENT = 20.0  # prediction and measurement may differ by this much (practice)
FACTOR_100_WITHIN = 2.5  # as a factor to either side
POOR_REPEAT_PERCENT = 1.0
SAME_CM, SAME_DEG = 0.05, 0.05  # readings this near were taken at the same set-up
FARTHEST_CM, FARTHEST_DEG = 12.0, 2.5  # beyond, the logarithm of the output is no straight line


@dataclass(frozen=True)
class PairOutput:
    """
    Output at the planned set-up and how it changes.

    ``pair_output_cgy_per_mu`` is in the convention stated, ``total_output_cgy_per_mu`` per MU of both beams
    together. Slopes are in per cent of the output for one centimetre farther and for one degree more, None
    where the readings do not vary; a standard deviation is None where no reading is left to show it.
    ``repeat_sd_percent`` is that of a single reading.
    """

    pair_output_cgy_per_mu: float
    pair_output_sd_cgy_per_mu: float | None
    total_output_cgy_per_mu: float
    mu_convention: str
    change_percent_per_cm: float | None
    change_sd_percent_per_cm: float | None
    change_percent_per_deg: float | None
    change_sd_percent_per_deg: float | None
    repeat_sd_percent: float | None
    readings: int
    remarks: tuple[str, ...]


@dataclass(frozen=True)
class _Fit:
    """A plane through the logarithm of the outputs, with its covariance if readings are left to show it."""

    numbers: Array  # at the planned set-up, then per cm and per degree as far as they vary
    covariance: Array | None


def analyse_pair_output(
    *,
    distances_cm: ArrayLike,
    tilts_deg: ArrayLike,
    outputs_cgy_per_mu: ArrayLike,
    mu_convention: str,
    planned_distance_cm: float,
    planned_tilt_deg: float,
    predicted_output_cgy_per_mu: float | None,
) -> PairOutput:
    """
    Return the output of the dual field at the planned set-up from readings there and around it.

    ln k = ln k_planned + a (D - D_planned) + b (tilt - tilt_planned); least squares

    Args:
        distances_cm: Plane distance of each reading, (n,). [cm]
        tilts_deg: Tilt of each reading, (n,). [deg]
        outputs_cgy_per_mu: Dose per MU at the calibration point, in that convention, (n,). [cGy/MU]
        mu_convention: What one MU of the pair means: "total-of-both-beams" or "on-each-beam".
        planned_distance_cm: Plane distance of the plan. [cm]
        planned_tilt_deg: Tilt of the plan. [deg]
        predicted_output_cgy_per_mu: Predicted dose per MU of both beams together, or None. [cGy/MU]

    Returns:
        Output in both conventions, its changes, the scatter of repeats, and remarks.

    Raises:
        ValueError: If lengths differ, a number is not finite or the convention is another word.
        OutsideValidity: If a reading is not more than 0, no reading was taken near the plan, or the readings
            differ from the prediction by the factor between gray and centigray.

    Valid for: readings within 12 cm and 2.5 degrees of the plan; others are left out and that is said.
    Assumes: both beams give the same MU; output changes by the same part per centimetre and degree.
    Source: least squares (derived); aapm-23 (memory) for the calibration point.
    """
    if mu_convention not in (TOTAL_OF_BOTH, ON_EACH):
        raise ValueError(f"pair convention {mu_convention!r} is not {TOTAL_OF_BOTH} or {ON_EACH}")
    farther, values = paired(distances_cm, outputs_cgy_per_mu)
    steeper, _ = paired(tilts_deg, outputs_cgy_per_mu)
    if (values <= 0).any():
        raise OutsideValidity("a reading of the output is not more than 0 cGy/MU")
    farther, steeper = farther - planned_distance_cm, steeper - planned_tilt_deg
    near = (np.abs(farther) <= FARTHEST_CM) & (np.abs(steeper) <= FARTHEST_DEG)
    if not near.any():
        raise OutsideValidity(
            f"no output was read within {FARTHEST_CM:g} cm and {FARTHEST_DEG:g} deg of the planned set-up"
        )
    fit, varied = _fit(farther[near], steeper[near], np.log(values[near]))
    output = float(np.exp(fit.numbers[0]))
    changes = _changes(fit, varied)
    total = output / (2 if mu_convention == ON_EACH else 1)
    repeat = _repeat_sd(farther[near], steeper[near], np.log(values[near]))
    at_plan = (np.abs(farther) <= SAME_CM) & (np.abs(steeper) <= SAME_DEG)
    remarks = [
        *_refuse_or_doubt(output, mu_convention, predicted_output_cgy_per_mu),
        *_remarks(changes, repeat, int(near.sum()), int((~near).sum()), bool(at_plan.any())),
    ]
    return PairOutput(
        pair_output_cgy_per_mu=output,
        pair_output_sd_cgy_per_mu=_sd(fit, 0, output),
        total_output_cgy_per_mu=total,
        mu_convention=mu_convention,
        change_percent_per_cm=changes[0][0],
        change_sd_percent_per_cm=changes[0][1],
        change_percent_per_deg=changes[1][0],
        change_sd_percent_per_deg=changes[1][1],
        repeat_sd_percent=repeat,
        readings=int(near.sum()),
        remarks=tuple(remarks),
    )


def _fit(farther: Array, steeper: Array, logs: Array) -> tuple[_Fit, tuple[bool, bool]]:
    """Return the plane through the logarithms, and whether distance and tilt vary."""
    varied = float(np.ptp(farther)) > SAME_CM, float(np.ptp(steeper)) > SAME_DEG
    columns = [column for column, use in zip((farther, steeper), varied, strict=True) if use]
    design = np.stack([np.ones(len(logs)), *columns], axis=1)
    if np.linalg.matrix_rank(design) < design.shape[1]:
        raise OutsideValidity("distance and tilt were changed together: their effects cannot be told apart")
    numbers = np.asarray(np.linalg.lstsq(design, logs, rcond=None)[0], dtype=float)
    left = len(logs) - design.shape[1]
    if left == 0:
        return _Fit(numbers, None), varied
    variance = float(((design @ numbers - logs) ** 2).sum()) / left
    covariance = np.asarray(np.linalg.inv(design.T @ design) * variance, dtype=float)
    return _Fit(numbers, covariance), varied


def _changes(fit: _Fit, varied: tuple[bool, bool]) -> list[tuple[float | None, float | None]]:
    """Return change and standard deviation per cm and per degree, None where it did not vary."""
    found: list[tuple[float | None, float | None]] = []
    at = 1
    for use in varied:
        found.append((100 * float(np.expm1(fit.numbers[at])), _sd(fit, at, 100.0)) if use else (None, None))
        at += use
    return found


def _sd(fit: _Fit, index: int, scale: float) -> float | None:
    """Return the standard deviation of a fitted number, or None if nothing shows it."""
    return None if fit.covariance is None else scale * float(np.sqrt(fit.covariance[index, index]))


def _repeat_sd(farther: Array, steeper: Array, logs: Array) -> float | None:
    """Return the standard deviation of repeats at one set-up, pooled over set-ups, in per cent."""
    places = np.stack([np.round(farther / SAME_CM), np.round(steeper / SAME_DEG)], axis=1)
    _, group = np.unique(places, axis=0, return_inverse=True)
    counts = np.bincount(group.ravel())
    left = int((counts - 1).sum())
    if left == 0:
        return None
    means = np.bincount(group.ravel(), weights=logs) / counts
    return 100 * float(np.sqrt(((logs - means[group.ravel()]) ** 2).sum() / left))


def _refuse_or_doubt(output: float, mu_convention: str, predicted: float | None) -> list[str]:
    """Return what a comparison with the prediction says; refuse a factor of 100."""
    if predicted is None:
        return ["No prediction was available to compare with."]
    for factor, words in ((0.01, "gray"), (100.0, "a hundredfold unit")):
        if factor / FACTOR_100_WITHIN <= output / predicted <= factor * FACTOR_100_WITHIN:
            raise OutsideValidity(
                f"the output of {printed(output)} cGy/MU is about {factor:g} times the prediction: is it "
                f"{words} under a column in cGy/MU?"
            )
    compared = output_plausibility(
        pair_output_cgy_per_mu=output,
        mu_convention=mu_convention,
        predicted_output_cgy_per_mu=predicted,
        allowed_difference_percent=GROSS_ERROR_PERCENT,
    )
    if compared.agrees:
        return []
    return [f"The output is {printed(compared.ratio, 3)} times the prediction: {compared.suggestion}."]


def _remarks(
    changes: list[tuple[float | None, float | None]],
    repeat: float | None,
    used: int,
    left_out: int,
    at_plan: bool,
) -> list[str]:
    """Return what must be said beside the numbers."""
    said = []
    if left_out:
        said.append(f"{left_out} readings were taken too far from the plan and were left out.")
    if not at_plan:
        said.append("No reading was taken at the planned set-up itself; the output there is interpolated.")
    if used == 1:
        said.append("One reading only: nothing shows its scatter.")
    for (change, _), words in zip(changes, ("distance", "tilt"), strict=True):
        if change is None:
            said.append(f"The {words} was not varied: the change of output with {words} is not known.")
        elif change >= 0:
            said.append(f"The output rises with {words}, which it cannot: were readings exchanged?")
    if repeat is not None and repeat > POOR_REPEAT_PERCENT:
        said.append(f"Repeated readings scatter by {printed(repeat, 2)} %: look at the mode before going on.")
    return said
