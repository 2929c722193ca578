"""The two-source rule, which adds barriers in thickness where exact work adds doses."""

from math import isfinite

HALF_VALUE_LAYER_TVL = 0.301


def two_source_thickness_cm(*, thicknesses_cm: tuple[float, ...], tvl_cm: float) -> float:
    """
    Return the thickness against several sources, from the thickness that each of them alone needs.

    Within one tenth-value layer: larger + 0.301 TVL; else the larger alone. With more than two sources the
    rule is applied to the two largest.

    Args:
        thicknesses_cm: What each source alone needs. [cm]
        tvl_cm: Larger of the tenth-value layers that are involved. [cm]

    Returns:
        Thickness against all of them. [cm]

    Raises:
        ValueError: If there are no thicknesses, one is below zero, or the layer is not above zero.

    Valid for: new walls; for standing walls the doses are added. With three equal sources it falls short.
    Source: control-wall-course (read), after ncrp-151.
    """
    if not thicknesses_cm or not all(isfinite(each) and each >= 0.0 for each in thicknesses_cm):
        raise ValueError("the two-source rule needs thicknesses that are not below zero")
    if not tvl_cm > 0.0:
        raise ValueError(f"a tenth-value layer must be above zero, not {tvl_cm:g}")
    ordered = sorted(thicknesses_cm, reverse=True)
    if len(ordered) > 1 and ordered[0] - ordered[1] < tvl_cm:
        return ordered[0] + HALF_VALUE_LAYER_TVL * tvl_cm
    return ordered[0]
