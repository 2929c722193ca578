"""
What to measure when the field is commissioned, in an order that can stop early, with expected readings.

Readings to compare at once are predictions: a reading far from its expectation asks for a look at geometry
and beam before the next step, nothing more.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from readiness.calculations.composite_depth_dose import CompositeDepthDose
from readiness.calculations.field_at_plane import dual_field_doses, even_grid, single_field_doses
from readiness.calculations.field_setup import STEEPEST_TILT_DEG, FieldSetup
from readiness.quantities import Scalar, Table

Array = NDArray[np.float64]

SINGLE_STEP_CM, DUAL_STEP_CM, ACROSS_STEP_CM = 20.0, 10.0, 10.0
BEYOND_LIMIT_CM = 20.0  # profiles go this far beyond the limits, so that a shifted centre can be seen
DEPTHS_MM = (1.0, 2.0, 4.0, 6.0, 8.0, 10.0, 15.0, 20.0, 50.0, 100.0)

STEPS = (
    (
        "geometry",
        "distance, gap, degrader thickness, gantry angle with an inclinometer",
        "go on when each agrees with the choice",
    ),
    (
        "single field",
        "one field at normal incidence along the height, degrader in place",
        "fit the foil spread and predict again before the sweep",
    ),
    (
        "angle sweep",
        "both fields one after the other, tilts in the order given",
        "stop when one tilt keeps the limit and the tilts on both sides of it are worse",
    ),
    (
        "across",
        "dual field across the middle at the tilt found",
        "if it misses its limit, no tilt cures it: change the distance and begin again",
    ),
    (
        "depth dose",
        "all six dual fields on a turned cylinder, and one dual field, with depth",
        "if a depth rule fails, change the degrader and begin again",
    ),
    (
        "x rays",
        "x-ray dose of one dual field at the stated depth, on and off the tilted axes",
        "if the whole-course limit is missed, look at the tilt and at the head before going on",
    ),
    (
        "output",
        "dose per MU of the pair at the calibration point, and its change with distance and tilt",
        "if it is far from the expectation, look for a mixed-up convention first",
    ),
    (
        "multiple-field factor",
        "skin dose of all six dual fields on the cylinder against one dual field",
        "if it lies outside the expected range, ask how it was defined",
    ),
)


@dataclass(frozen=True)
class CommissioningPlan:
    """
    Steps in order and the readings to expect.

    ``steps``: order, name, measure, then. ``single_field``: height_cm, expected. ``angle_sweep``: order,
    tilt_deg, height_cm, expected. ``across``: across_cm, expected. ``depth_dose``: depth_mm,
    expected_percent, sd_percent, blank where nothing is predicted.
    """

    steps: Table
    single_field: Table
    angle_sweep: Table
    across: Table
    depth_dose: Table


def commissioning_plan(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    tilts_in_order_deg: ArrayLike,
    mid_height_cm: float,
    mu_share_upper: float,
    uniformity_half_length_cm: float,
    uniformity_half_width_cm: float,
    depth_dose: CompositeDepthDose | None,
) -> CommissioningPlan:
    """
    Return the measurements of the commissioning in order, with expected relative readings.

    Args:
        setup: The beam and the room, from field_setup.
        plane_distance_cm: From the nominal source to the plane. [cm]
        tilts_in_order_deg: Tilts of the sweep, from tilts_to_measure. [°]
        mid_height_cm: Of the patient's mid-height above the isocentre; negative below it. [cm]
        mu_share_upper: Part of the pair's MU that the field aimed at the head gets. [1]
        uniformity_half_length_cm: Half of the length over which the vertical profile is judged. [cm]
        uniformity_half_width_cm: Half of the width over which the horizontal profile is judged. [cm]
        depth_dose: From composite_depth_dose, none if energy and degrader lie outside its table.

    Returns:
        Steps and tables of expected readings, relative to mid-height (single field: to the axis).

    Raises:
        ValueError: If a number is impossible or there is no tilt to measure.
        OutsideValidity: If energy, distance or a tilt lie outside the model, or the degrader stops the beam.

    Valid for: 4 to 12 MeV and 300 to 500 cm.
    Assumes: detectors in the first millimetres behind the degrader.
    Source: own-fit (fit); the order is ours, the contents are those of aapm-23 (memory).
    """
    tilts = [float(tilt) for tilt in np.atleast_1d(np.asarray(tilts_in_order_deg, dtype=float))]
    if not tilts:
        raise ValueError("an angle sweep needs at least one tilt")

    def doses(tilt: float, heights: Array, across: Array) -> Array:
        """Return a dual field relative to mid-height."""
        return dual_field_doses(
            setup=setup,
            plane_distance_cm=plane_distance_cm,
            tilt_toward_head_deg=tilt,
            tilt_toward_feet_deg=tilt,
            mid_height_cm=mid_height_cm,
            mu_share_upper=mu_share_upper,
            heights_cm=heights,
            across_cm=across,
        )

    reach = uniformity_half_length_cm + BEYOND_LIMIT_CM
    level = even_grid(half_length_cm=reach, step_cm=SINGLE_STEP_CM)
    single = single_field_doses(
        setup=setup, plane_distance_cm=plane_distance_cm, tilt_deg=0.0, heights_cm=level
    )
    heights = even_grid(half_length_cm=reach, step_cm=DUAL_STEP_CM)
    across = even_grid(half_length_cm=uniformity_half_width_cm + BEYOND_LIMIT_CM, step_cm=ACROSS_STEP_CM)
    middle = np.array([0.0])
    sweep = [
        (order, tilt, float(height), float(dose))
        for order, tilt in enumerate(tilts, start=1)
        for height, dose in zip(heights, doses(tilt, heights, middle)[:, 0], strict=True)
    ]
    beside = zip(across, doses(tilts[0], middle, across)[0], strict=True)
    return CommissioningPlan(
        steps=Table.of(
            ["order", "name", "measure", "then"], [(i, *step) for i, step in enumerate(STEPS, start=1)]
        ),
        single_field=Table.of(
            ["height_cm", "expected"],
            [(float(at), float(dose)) for at, dose in zip(level, single, strict=True)],
        ),
        angle_sweep=Table.of(["order", "tilt_deg", "height_cm", "expected"], sweep),
        across=Table.of(["across_cm", "expected"], [(float(at), float(dose)) for at, dose in beside]),
        depth_dose=_depths(depth_dose),
    )


def tilts_to_measure(
    *, best_tilt_deg: float, band_half_width_deg: float, step_deg: float
) -> tuple[float, ...]:
    """
    Return the tilts of a sweep, the predicted best first, then outward, the smaller before the larger.

    Args:
        best_tilt_deg: Predicted best tilt. [°]
        band_half_width_deg: How far the sweep may have to go either way. [°]
        step_deg: Between tilts; the first is the multiple of it nearest to the best. [°]

    Returns:
        Tilts in order. [°]

    Raises:
        ValueError: If a number is not positive.

    Valid for: tilts from 0 to 25 degrees.
    Assumes: the sweep stops as soon as a tilt that passes has a worse one on either side.
    Source: our own convention; an optimisation by measurement is in park-2014, yousif-2015 (read).
    """
    if best_tilt_deg <= 0 or band_half_width_deg <= 0 or step_deg <= 0:
        raise ValueError("best tilt, band and step must be positive")
    first = np.floor(best_tilt_deg / step_deg + 0.5 - 1e-9) * step_deg
    steps = int(np.ceil(band_half_width_deg / step_deg - 1e-9))
    wanted = [first] + [first + sign * k * step_deg for k in range(1, steps + 1) for sign in (-1, 1)]
    return tuple(round(float(tilt), 6) for tilt in wanted if 0 < tilt <= STEEPEST_TILT_DEG)


def _depths(found: CompositeDepthDose | None) -> Table:
    """Return the depths to measure with the expected dose where the table predicts one."""
    expected: dict[float, tuple[Scalar, Scalar]] = {}
    if found is not None:
        for depth, dose in (
            (4.0, found.dose_at_4_mm_percent),
            (10.0, found.dose_at_10_mm_percent),
            (20.0, found.dose_at_20_mm_percent),
        ):
            expected[depth] = (dose.value, dose.sd)
    rows = [(depth, *expected.get(depth, (None, None))) for depth in DEPTHS_MM]
    return Table.of(["depth_mm", "expected_percent", "sd_percent"], rows)
