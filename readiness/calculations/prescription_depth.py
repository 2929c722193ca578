"""Composite depth dose at the depth to which a course is prescribed, and what that leaves at the surface."""

import numpy as np

from readiness.errors import OutsideValidity

DEPTHS_MM = (0.0, 4.0, 10.0, 20.0)
LEAST_FRACTION = 0.3  # below it a prescription would follow the steepest part of the fall


def fraction_at_prescription(
    *,
    prescription_depth_mm: float,
    at_4_mm_percent: float,
    at_10_mm_percent: float,
    at_20_mm_percent: float,
) -> float:
    """
    Return the composite depth dose at the prescription depth over the skin dose.

    p(d) by straight lines between the skin and 4, 10 and 20 mm

    Args:
        prescription_depth_mm: Depth d to which the dose is prescribed; 0 for the skin. [mm]
        at_4_mm_percent: Composite dose at 4 mm over the skin dose. [%]
        at_10_mm_percent: Composite dose at 10 mm. [%]
        at_20_mm_percent: Composite dose at 20 mm. [%]

    Returns:
        Fraction p; 1 at the skin. [1]

    Raises:
        ValueError: If the depth is negative, or the dose rises with depth.
        OutsideValidity: If the depth lies beyond 20 mm or where less than 0.3 of the skin dose is left.

    Valid for: composite depth doses whose highest value lies at the skin.
    Assumes: straight lines between the four depths; a measured curve serves better for treatment.
    Source: definition (derived).
    """
    doses = (100.0, at_4_mm_percent, at_10_mm_percent, at_20_mm_percent)
    if not prescription_depth_mm >= 0:
        raise ValueError(f"a prescription depth is not negative, as {prescription_depth_mm:g} mm is")
    if any(deeper > shallower for shallower, deeper in zip(doses, doses[1:], strict=False)):
        raise ValueError("a composite dose falls from the skin inward")
    if prescription_depth_mm > DEPTHS_MM[-1]:
        raise OutsideValidity(
            f"no composite dose is known beyond {DEPTHS_MM[-1]:g} mm, not at {prescription_depth_mm:g} mm"
        )
    fraction = float(np.interp(prescription_depth_mm, DEPTHS_MM, doses)) / 100
    if fraction < LEAST_FRACTION:
        raise OutsideValidity(
            f"at {prescription_depth_mm:g} mm only {100 * fraction:.0f} % of the skin dose is left: "
            "a dose prescribed there would multiply that of the skin"
        )
    return fraction
