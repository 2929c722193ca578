"""Whether a gantry angle lies in the ranges that a machine or a mode allows."""

from collections.abc import Sequence

from readiness.errors import OutsideValidity

SAME_ANGLE_DEG = 1e-6


def angle_within(*, gantry_angle_deg: float, gantry_ranges_deg: Sequence[float]) -> bool:
    """
    Return whether a gantry angle lies in one of some ranges, whole turns apart.

    Args:
        gantry_angle_deg: Gantry angle. [deg]
        gantry_ranges_deg: Lowest and highest angle of each range, one range after the other; a range may pass
            through 0, as from -180 to 180. [deg]

    Returns:
        Whether it lies in a range, ends included.

    Raises:
        OutsideValidity: If an end of a range is missing or a range ends before it begins.

    Valid for: angles in IEC 61217 scale, on any turn.
    Source: iec-61217 (memory).
    """
    if not gantry_ranges_deg or len(gantry_ranges_deg) % 2:
        raise OutsideValidity("each gantry range needs its lowest and its highest angle")
    ends = list(zip(gantry_ranges_deg[::2], gantry_ranges_deg[1::2], strict=True))
    for low, high in ends:
        if high < low:
            raise OutsideValidity(f"a gantry range ends at {high:g} before it begins at {low:g}")
    return any(
        (gantry_angle_deg - low + SAME_ANGLE_DEG) % 360.0 <= high - low + 2 * SAME_ANGLE_DEG
        for low, high in ends
    )
