"""
The multiple-field factor B and what belongs to its definition.

B is the mean skin dose near the surface of a turned cylinder from all six dual fields, divided by the dose at
the calibration point from one. A rotating platform has one sixth of it; a moving couch has none.
"""

B_LOW, B_HIGH = 2.3, 3.1  # expected for six dual fields, practice; 2.68 published (read)
POSITIONS = 6


def b_factor_question(*, b_factor: float) -> str:
    """
    Return the question that a multiple-field factor raises, or nothing.

    Args:
        b_factor: Multiple-field factor B as stated or measured. [1]

    Returns:
        "" for a factor of the expected size; otherwise a question about its definition.

    Raises:
        ValueError: If the factor is not more than 0.

    Valid for: six dual fields 60 degrees apart on a standing adult.
    Assumes: 2.3 (no degrader) to 3.1 (thin body) are the ends of what the definition gives.
    Source: aapm-23 (memory) for the definition; practice for the range.
    """
    if not b_factor > 0:
        raise ValueError(f"a multiple-field factor is more than 0, not {b_factor}")
    if B_LOW <= b_factor <= B_HIGH:
        return ""
    if B_LOW / POSITIONS <= b_factor <= B_HIGH / POSITIONS:
        return (
            f"B of {b_factor:g} looks like the factor of a rotating platform, one sixth of that of six dual "
            "fields: which definition was used?"
        )
    return (
        f"B of {b_factor:g} lies outside {B_LOW} to {B_HIGH}: was it the mean skin dose from all six dual "
        "fields divided by the calibration-point dose of one, and on which body?"
    )


def rotating_factor(*, b_factor: float) -> float:
    """
    Return the factor of a rotating platform that belongs to a multiple-field factor.

    B_rot = B / 6

    Args:
        b_factor: Multiple-field factor B of six dual fields. [1]

    Returns:
        Skin dose of a turning patient over the calibration-point dose for the same monitor units. [1]

    Raises:
        ValueError: If the factor is not more than 0.

    Valid for: whole turns, or so many that a part of one does not matter.
    Assumes: six positions sample the turn well enough.
    Source: definition (derived); 0.40 to 0.47 expected, 0.41 published.
    """
    if not b_factor > 0:
        raise ValueError(f"a multiple-field factor is more than 0, not {b_factor}")
    return b_factor / POSITIONS
