"""How far the stops of a stand lie from the positions that a technique needs."""

from collections.abc import Sequence


def stop_error_deg(*, stops_deg: Sequence[float], positions: int) -> float:
    """
    Return how far the worst served of some evenly spaced positions lies from the nearest stop.

    The positions are counted from the first stop on, whole turns apart.

    Args:
        stops_deg: Angles at which the stand locks. [deg]
        positions: Number of positions in a turn. [1]

    Returns:
        Largest distance; half a turn if there is no stop at all. [deg]

    Raises:
        ValueError: If there is no position.

    Valid for: positions evenly spread over a turn.
    Source: derived.
    """
    if positions < 1:
        raise ValueError("a technique has at least one position")
    if not stops_deg:
        return 180.0
    wanted = [stops_deg[0] + 360.0 * place / positions for place in range(positions)]
    return max(min(_apart(angle, stop) for stop in stops_deg) for angle in wanted)


def _apart(one: float, other: float) -> float:
    """Return the smaller angle between two directions."""
    return abs((one - other + 180.0) % 360.0 - 180.0)
