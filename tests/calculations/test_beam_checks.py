"""Whole fields at the plane agree with the records in tests/published/beam."""

from pathlib import Path
from typing import Any

import numpy as np
import pytest
import yaml
from beam_setups import LENGTHS, LIMITS, common_setup

from readiness.calculations.angle_choice import AngleAtDistance, angle_at_distance
from readiness.calculations.field_at_plane import dual_field_doses
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.pair_output import PredictedPairOutput, predicted_pair_output
from readiness.calculations.tilt_study import HALF_RANGE, tilt_study
from readiness.calculations.tilted_field import tilted_fields
from readiness.calculations.uniformity import uniformity_of_profile

FOLDER = Path(__file__).parents[1] / "published" / "beam"
CASES = [
    pytest.param(case, id=f"{path.stem}: {case['id']}")
    for path in sorted(FOLDER.glob("*.yaml"))
    for case in yaml.safe_load(path.read_text(encoding="utf-8"))["checks"]
]
PLANE: dict[str, Any] = {"distance_cm": 400.0, "tilt_deg": 16.0, "half_length_cm": 80.0, "metric": HALF_RANGE}


def _single_dose(setup: FieldSetup, plane: dict[str, Any]) -> float:
    """Return the dose of a single field at a height, over 30 cm either way, relative to the axis."""
    across = np.linspace(-30, 30, 31)
    heights = np.array([0.0, plane["height_cm"]])
    doses = tilted_fields(setup, np.array([0.0]), plane["distance_cm"], heights, across)[0].mean(axis=1)
    return float(doses[1] / doses[0])


def _dual(setup: FieldSetup, plane: dict[str, Any], heights: np.ndarray, across: np.ndarray) -> np.ndarray:
    """Return a dual field with equal tilts."""
    return dual_field_doses(
        setup=setup,
        plane_distance_cm=plane["distance_cm"],
        tilt_toward_head_deg=plane["tilt_deg"],
        tilt_toward_feet_deg=plane["tilt_deg"],
        mid_height_cm=0.0,
        mu_share_upper=0.5,
        heights_cm=heights,
        across_cm=across,
    )


def _vertical_half_range(setup: FieldSetup, plane: dict[str, Any]) -> float:
    """Return the half-range along the height as a fraction."""
    heights = np.linspace(-80, 80, 81)
    doses = _dual(setup, plane, heights, np.array([0.0]))[:, 0]
    found = uniformity_of_profile(positions_cm=heights, doses=doses, half_length_cm=80.0)
    return found.half_range_percent / 100


def _horizontal_half_range(setup: FieldSetup, plane: dict[str, Any]) -> float:
    """Return the half-range across 60 cm as a fraction."""
    across = np.linspace(-30, 30, 31)
    doses = _dual(setup, plane, np.array([0.0]), across)[0]
    return uniformity_of_profile(positions_cm=across, doses=doses, half_length_cm=30.0).half_range_percent / 100


def _angle(setup: FieldSetup, plane: dict[str, Any]) -> AngleAtDistance:
    """Return best tilt and band."""
    study = tilt_study(
        setup=setup,
        distances_cm=[plane["distance_cm"]],
        tilts_deg=np.arange(8.0, 24.01, 0.1),
        mid_height_cm=0.0,
        mu_share_upper=0.5,
        **{**LENGTHS, "uniformity_half_length_cm": plane["half_length_cm"]},
    )
    return angle_at_distance(study=study, distance_cm=plane["distance_cm"], metric=plane["metric"], **LIMITS)


def _output(setup: FieldSetup, plane: dict[str, Any]) -> PredictedPairOutput:
    """Return the predicted output for 1 cGy per MU at 100 cm."""
    return predicted_pair_output(
        setup=setup,
        reference_output_cgy_per_mu=1.0,
        plane_distance_cm=plane["distance_cm"],
        tilt_toward_head_deg=plane["tilt_deg"],
        tilt_toward_feet_deg=plane["tilt_deg"],
        mid_height_cm=0.0,
        mu_share_upper=0.5,
    )


ANSWERS = {
    "single_dose": _single_dose,
    "vertical_half_range": _vertical_half_range,
    "horizontal_half_range": _horizontal_half_range,
    "best_tilt": lambda setup, plane: _angle(setup, plane).best_tilt_deg,
    "band_low": lambda setup, plane: _angle(setup, plane).lowest_passing_tilt_deg,
    "band_high": lambda setup, plane: _angle(setup, plane).highest_passing_tilt_deg,
    "output_without_degrader": lambda setup, plane: _output(setup, plane).without_degrader_cgy_per_mu,
    "output_per_degree": lambda setup, plane: _output(setup, plane).per_degree_percent,
    "output_per_2_cm": lambda setup, plane: _output(setup, plane).per_2_cm_percent,
}


@pytest.mark.parametrize("case", CASES)
def test_field_at_the_plane_agrees_with_the_record(case: dict[str, Any]) -> None:
    """The predicted field agrees within the tolerance on record."""
    assert {"source", "at", "known", "why"} <= case.keys()
    found = ANSWERS[case["ask"]](common_setup(**case.get("setup", {})), {**PLANE, **case.get("plane", {})})
    (kind, amount), = case["tolerance"].items()
    allowed = {"absolute": amount, "relative": amount * abs(case["expected"])}[kind]
    assert abs(found - case["expected"]) <= allowed, f"expected {case['expected']}, got {found}"
