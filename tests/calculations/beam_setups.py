"""The common set-up of the beam checks."""

from typing import Any

from readiness.calculations.field_setup import FieldSetup, field_setup

COMMON: dict[str, Any] = {
    "energy_at_source_mev": 6.0,
    "foil_spread": 0.20,
    "opening_cm": 40.0,
    "collimator_deg": 0.0,
    "degrader_material": "pmma",
    "degrader_thickness_cm": 1.0,
    "degrader_gap_cm": 20.0,
    "pressure_kpa": 101.325,
    "temperature_celsius": 20.0,
    "source_axis_distance_cm": 100.0,
}
LENGTHS: dict[str, float] = {
    "uniformity_half_length_cm": 80.0,
    "uniformity_half_width_cm": 30.0,
    "field_length_cm": 200.0,
    "field_width_cm": 80.0,
}
LIMITS: dict[str, float] = {"vertical_limit_percent": 8.0, "horizontal_limit_percent": 4.0}


def common_setup(**changes: Any) -> FieldSetup:
    """Return the common set-up with changes."""
    return field_setup(**{**COMMON, **changes})
