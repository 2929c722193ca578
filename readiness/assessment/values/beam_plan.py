"""What to measure when the field is commissioned, in what order, and the readings to expect."""

from functools import lru_cache

from readiness.assessment.definition import Definition
from readiness.assessment.values.beam_field import PREDICTION, upper_share
from readiness.calculations.commissioning_plan import CommissioningPlan, commissioning_plan, tilts_to_measure
from readiness.calculations.composite_depth_dose import CompositeDepthDose
from readiness.calculations.field_setup import FieldSetup
from readiness.quantities import Table
from readiness.units import printed


@lru_cache(maxsize=32)
def plan_of_arrangement(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    mu_share_upper: float | None,
    best_tilt_deg: float,
    lowest_tilt_deg: float,
    highest_tilt_deg: float,
    step_deg: float,
    half_length_cm: float,
    half_width_cm: float,
    depth_dose: CompositeDepthDose | None,
) -> CommissioningPlan:
    """Return the steps and the readings to expect, the sweep as wide as the band of the best tilt."""
    tilts = tilts_to_measure(
        best_tilt_deg=best_tilt_deg,
        band_half_width_deg=max(highest_tilt_deg - best_tilt_deg, best_tilt_deg - lowest_tilt_deg),
        step_deg=step_deg,
    )
    return commissioning_plan(
        setup=setup,
        plane_distance_cm=plane_distance_cm,
        tilts_in_order_deg=tilts,
        mid_height_cm=0.0,
        mu_share_upper=upper_share(mu_share_upper),
        uniformity_half_length_cm=half_length_cm,
        uniformity_half_width_cm=half_width_cm,
        depth_dose=depth_dose,
    )


def sweep_sheet(*, expected_sweep: Table) -> Table:
    """Return the readings to expect of a sweep with a column for each tilt, in the order to measure."""
    order, tilt, height, dose = (
        expected_sweep.columns.index(name) for name in ("order", "tilt_deg", "height_cm", "expected")
    )
    tilts = dict(sorted((int(row[order] or 0), float(row[tilt] or 0)) for row in expected_sweep.rows))
    by_height: dict[float, dict[int, float]] = {}
    for row in expected_sweep.rows:
        by_height.setdefault(float(row[height] or 0), {})[int(row[order] or 0)] = float(row[dose] or 0)
    heads = [f"expected_at_{printed(each)}_deg" for each in tilts.values()]
    levels = sorted(by_height.items(), reverse=True)
    rows = [[level, *(found.get(each) for each in tilts)] for level, found in levels]
    return Table.of(["height_cm", *heads], rows)


def _of(name: str, meaning: str, part: str) -> Definition:
    """Return a table of the plan."""
    return Definition(
        f"arrangement.{name}",
        meaning,
        of="arrangement.measurement_plan",
        part=part,
        source="own-fit",
        known="fit",
    )


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.measurement_plan",
        "Steps of commissioning with the readings to expect.",
        by=plan_of_arrangement,
        takes={
            **PREDICTION,
            "best_tilt_deg": "arrangement.predicted_best_tilt_deg",
            "lowest_tilt_deg": "arrangement.likely_lowest_tilt_deg",
            "highest_tilt_deg": "arrangement.likely_highest_tilt_deg",
            "step_deg": "criterion.sweep_step_deg",
            "half_length_cm": "criterion.uniformity_half_length_cm",
            "half_width_cm": "criterion.uniformity_half_width_cm",
            "depth_dose": "arrangement.predicted_depth_dose?",
        },
        model=True,
        internal=True,
        source="own-fit",
        known="fit",
    ),
    _of("commissioning_plan", "Steps of commissioning in an order that can stop early.", "steps"),
    _of("expected_single_field", "Readings to expect of one field along the height.", "single_field"),
    _of("expected_sweep", "Readings to expect of a sweep of tilts, in the order to measure.", "angle_sweep"),
    Definition(
        "arrangement.expected_sweep_sheet",
        "Readings to expect of a sweep, a column for each tilt in the order to measure.",
        by=sweep_sheet,
        takes={"expected_sweep": "arrangement.expected_sweep"},
        source="own-fit",
        known="fit",
    ),
    _of("expected_across", "Readings to expect of the dual field across.", "across"),
    _of("expected_depth_dose", "Composite depth doses to expect.", "depth_dose"),
)
