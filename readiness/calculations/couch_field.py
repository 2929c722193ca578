"""
Vertical field of the technique that carries a lying patient under the beam: predicted rate and evenness.

Travel makes the dose even along the body by itself; across the body it is what the field gives. There is no
factor B: each incidence is commissioned.
"""

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray
from scipy.integrate import trapezoid

from readiness.calculations.field_at_plane import even_grid, profile_table
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.pair_output import REFERENCE_DISTANCE_CM
from readiness.calculations.tilted_field import tilted_fields
from readiness.calculations.uniformity import uniformity_of_profile
from readiness.quantities import Table

Array = NDArray[np.float64]

TRAVEL_STEP_CM = 2.0
END_OF_FIELD = 0.005  # of the peak: the profile along the travel goes at least this far out


@dataclass(frozen=True)
class CouchField:
    """
    Predicted field under the vertical beam.

    ``dose_rate_profile`` along the travel has position_cm and dose_rate_cgy_per_min; ``across_profile`` is
    the dose after a pass, relative to the middle, with across_cm and relative_dose. ``equivalent_length_cm``
    times the peak dose rate is the integral along the travel.
    """

    dose_rate_profile: Table
    across_profile: Table
    across_half_range_percent: float
    across_deviation_percent: float
    peak_dose_rate_cgy_per_min: float
    equivalent_length_cm: float


def couch_field(
    *,
    setup: FieldSetup,
    source_to_surface_cm: float,
    reference_output_cgy_per_mu: float,
    rate_mu_per_min: float,
    uniformity_half_width_cm: float,
) -> CouchField:
    """
    Return the predicted dose rate along the travel and the evenness across a lying patient.

    Args:
        setup: The beam and the room, from field_setup; its gap counts to the patient's surface.
        source_to_surface_cm: From the source down to the patient's surface. [cm]
        reference_output_cgy_per_mu: Dose per MU at 100 cm at the depth of maximum in the mode. [cGy/MU]
        rate_mu_per_min: Rate in the mode. [MU/min]
        uniformity_half_width_cm: Half of the width over which the profile across is judged. [cm]

    Returns:
        Profiles along and across, evenness across, peak dose rate and equivalent length.

    Raises:
        ValueError: If a number is impossible.
        OutsideValidity: If energy or distance lie outside the model, or the degrader stops the beam.

    Valid for: 150 to 500 cm; dose rates to about 15 %: to be measured before use.
    Assumes: gantry 0, travel along one axis of the collimator's plane, constant speed.
    Source: own-fit (fit) on the moments of eyges-1948; translation is derived.
    """
    if reference_output_cgy_per_mu <= 0 or rate_mu_per_min <= 0:
        raise ValueError("output and rate must be positive")
    across = even_grid(half_length_cm=uniformity_half_width_cm, step_cm=1.0)
    along, doses = _along_and_across(setup, source_to_surface_cm, across)
    middle = len(across) // 2
    per_minute = reference_output_cgy_per_mu * rate_mu_per_min * REFERENCE_DISTANCE_CM**2
    rates = per_minute * doses[:, middle]
    passed = trapezoid(doses, along, axis=0)
    evenness = uniformity_of_profile(
        positions_cm=across, doses=passed, half_length_cm=uniformity_half_width_cm
    )
    rows = [(float(at), float(rate)) for at, rate in zip(along, rates, strict=True)]
    return CouchField(
        dose_rate_profile=Table.of(["position_cm", "dose_rate_cgy_per_min"], rows),
        across_profile=profile_table(
            positions_cm=across, doses=passed / passed[middle], position_name="across"
        ),
        across_half_range_percent=evenness.half_range_percent,
        across_deviation_percent=evenness.deviation_percent,
        peak_dose_rate_cgy_per_min=float(rates.max()),
        equivalent_length_cm=float(passed[middle] / doses[:, middle].max()),
    )


def _along_and_across(setup: FieldSetup, distance: float, across: Array) -> tuple[Array, Array]:
    """Return positions along the travel out to the end of the field, and doses of shape (along, across)."""
    reach = distance * setup.opening_cm / 100
    while True:
        along = even_grid(half_length_cm=reach, step_cm=TRAVEL_STEP_CM)
        doses = tilted_fields(setup, np.array([0.0]), distance, along, across)[0]
        if doses[0].max() <= END_OF_FIELD * doses.max():
            return along, doses
        reach *= 1.25
