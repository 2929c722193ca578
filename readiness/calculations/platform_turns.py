"""Turns of a platform during a beam."""


def turns_during_beam(*, beam_min: float, turn_time_s: float) -> float:
    """
    Return how often a platform turns while one beam is on.

    n = t / T

    Args:
        beam_min: Beam-on time of one beam. [min]
        turn_time_s: Time T of one turn. [s]

    Returns:
        Turns; a part of a turn counts as a part. [1]

    Raises:
        ValueError: If the beam takes no time or a turn none.

    Valid for: a platform that turns evenly from the first to the last second of the beam.
    Assumes: constant speed.
    Source: definition (derived).
    """
    if not beam_min > 0 or not turn_time_s > 0:
        raise ValueError(f"a beam of {beam_min} min with turns of {turn_time_s} s does not exist")
    return 60 * beam_min / turn_time_s
