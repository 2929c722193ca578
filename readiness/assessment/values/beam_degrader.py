"""The degrader as a sheet: how much it shadows, and when it was last looked at."""

from datetime import date

from readiness.assessment.definition import Definition
from readiness.calculations.degrader_shadow import DegraderShadow, degrader_shadow
from readiness.calculations.uniformity import COVERAGE_PER_HEIGHT


def shadow_of_degrader(
    *,
    plane_distance_cm: float,
    tilt_deg: float,
    source_axis_distance_cm: float,
    gap_cm: float,
    width_cm: float,
    height_cm: float,
    foot_height_cm: float,
    isocentre_height_cm: float,
    stand_height_cm: float,
    patient_height_cm: float,
    field_width_cm: float,
) -> DegraderShadow:
    """Return what the degrader shadows of the tallest patient with raised hands."""
    return degrader_shadow(
        plane_distance_cm=plane_distance_cm,
        tilt_deg=tilt_deg,
        source_axis_distance_cm=source_axis_distance_cm,
        degrader_gap_cm=gap_cm,
        degrader_width_cm=width_cm,
        degrader_height_cm=height_cm,
        degrader_foot_height_cm=foot_height_cm,
        isocentre_height_cm=isocentre_height_cm,
        soles_height_cm=stand_height_cm,
        hands_height_cm=stand_height_cm + COVERAGE_PER_HEIGHT * patient_height_cm,
        field_width_cm=field_width_cm,
    )


def width_left(*, degrader_width_cm: float, field_width_cm: float) -> float:
    """Return by how much the degrader is wider than the composite field."""
    return degrader_width_cm - field_width_cm


def gap_left(*, degrader_gap_cm: float, turning_radius_cm: float) -> float:
    """Return by how much the degrader clears the turning patient."""
    return degrader_gap_cm - turning_radius_cm


def days_since(*, inspected_on: date, as_of_date: date) -> int:
    """Return the days since the degrader was last looked at."""
    return (as_of_date - inspected_on).days


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.degrader_shadow",
        "How far the degrader reaches beyond what it has to shadow.",
        by=shadow_of_degrader,
        takes={
            "plane_distance_cm": "arrangement.study_distance_cm",
            "tilt_deg": "arrangement.study_tilt_deg",
            "source_axis_distance_cm": "machine.source_axis_distance_cm",
            "gap_cm": "arrangement.study_gap_cm",
            "width_cm": "degrader.width_cm",
            "height_cm": "degrader.height_cm",
            "foot_height_cm": "degrader.foot_height_cm",
            "isocentre_height_cm": "room.isocentre_height_cm",
            "stand_height_cm": "stand.height_cm",
            "patient_height_cm": "program.tallest_patient_cm",
            "field_width_cm": "criterion.field_width_cm",
        },
        internal=True,
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.degrader_width_to_spare_cm",
        "By how much the degrader is wider than the composite field; negative if rays pass beside it.",
        by=width_left,
        takes={"degrader_width_cm": "degrader.width_cm", "field_width_cm": "criterion.field_width_cm"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.degrader_height_to_spare_cm",
        "How far the degrader reaches above or below the rays to the tallest patient, whichever is less.",
        of="arrangement.degrader_shadow",
        part="height_to_spare_cm",
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.degrader_gap_to_spare_cm",
        "By how much the degrader clears the turning patient; negative if elbows meet it.",
        by=gap_left,
        takes={
            "degrader_gap_cm": "arrangement.degrader_gap_cm",
            "turning_radius_cm": "stand.turning_radius_cm",
        },
        source="definition",
        known="derived",
    ),
    Definition(
        "degrader.days_since_inspection_days",
        "Days since the degrader was last looked at.",
        by=days_since,
        takes={"inspected_on": "degrader.inspected_on", "as_of_date": "program.as_of_date"},
        source="definition",
        known="derived",
    ),
)
