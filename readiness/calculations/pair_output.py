"""
Predicted output of the pair per MU: a check for gross errors, such as a mixed-up MU convention.

It never replaces a measured output and never serves to calculate MU.
"""

from dataclasses import dataclass

import numpy as np

from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.tilted_field import dual_field

REFERENCE_DISTANCE_CM = 100.0
TILT_STEP_DEG, DISTANCE_STEP_CM = 0.1, 2.0
OUTPUT_SD = 0.15  # relative: gross errors only (practice)


@dataclass(frozen=True)
class PredictedPairOutput:
    """
    Predicted dose at mid-height per MU of the pair, the pair's MU counted as the total of both beams.

    ``per_degree_percent`` and ``per_2_cm_percent`` are its changes with both tilts and with the distance.
    """

    pair_output_cgy_per_mu: float
    sd_cgy_per_mu: float
    without_degrader_cgy_per_mu: float
    per_degree_percent: float
    per_2_cm_percent: float


def predicted_pair_output(
    *,
    setup: FieldSetup,
    reference_output_cgy_per_mu: float,
    plane_distance_cm: float,
    tilt_toward_head_deg: float,
    tilt_toward_feet_deg: float,
    mid_height_cm: float,
    mu_share_upper: float,
) -> PredictedPairOutput:
    """
    Return the output of the pair at mid-height, from the reference output and the geometry.

    k = k_100 sum over both fields of share x dose(plane)/emission on the axis x 100^2

    Args:
        setup: The beam and the room, from field_setup.
        reference_output_cgy_per_mu: Dose per MU at 100 cm at the depth of maximum in the mode. [cGy/MU]
        plane_distance_cm: From the nominal source to the plane. [cm]
        tilt_toward_head_deg: Of the axis aimed at the head above the horizontal. [°]
        tilt_toward_feet_deg: Of the axis aimed at the feet below the horizontal, positive. [°]
        mid_height_cm: Of the patient's mid-height above the isocentre; negative below it. [cm]
        mu_share_upper: Part of the pair's MU that the field aimed at the head gets. [1]

    Returns:
        Output with and without the degrader's losses and its changes with tilt and distance.

    Raises:
        ValueError: If a number is impossible.
        OutsideValidity: If energy, distance or a tilt lie outside the model, or the degrader stops the beam.

    Valid for: differences of 15 % and more; never an independent second check.
    Assumes: scatter before the reference point changes nothing there; the dose per electron is the same.
    Source: own-fit (fit) to own-monte-carlo on the moments of eyges-1948.
    """
    if reference_output_cgy_per_mu <= 0:
        raise ValueError("a reference output must be positive")
    if not 0 < mu_share_upper < 1:
        raise ValueError("the upper field's part of the MU must lie between 0 and 1")

    def output(beam: FieldSetup, steeper_deg: float = 0.0, farther_cm: float = 0.0) -> float:
        """Return the output of the pair with both tilts and the distance changed."""
        level, middle = np.array([mid_height_cm]), np.array([0.0])
        tilts = (tilt_toward_head_deg + steeper_deg, tilt_toward_feet_deg + steeper_deg)
        dose = dual_field(beam, *tilts, plane_distance_cm + farther_cm, level, middle, mu_share_upper)[0, 0]
        return float(reference_output_cgy_per_mu * REFERENCE_DISTANCE_CM**2 * dose)

    here = output(setup)
    steep = output(setup, steeper_deg=TILT_STEP_DEG) / here - 1
    far = output(setup, farther_cm=DISTANCE_STEP_CM) / here - 1
    return PredictedPairOutput(
        pair_output_cgy_per_mu=here,
        sd_cgy_per_mu=OUTPUT_SD * here,
        without_degrader_cgy_per_mu=output(setup.without_degrader()),
        per_degree_percent=100 * steep / TILT_STEP_DEG,
        per_2_cm_percent=100 * far,
    )
