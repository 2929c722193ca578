"""
One session minute by minute, first and later ones, and how long the patient stands.

The first cycle carries detectors on the skin; later sessions do not. The gantry moves once in each position:
the order of the two fields alternates from one position to the next.
"""

from collections.abc import Sequence
from dataclasses import dataclass

from readiness.quantities import Table

COLUMNS = ("start_min", "end_min", "duration_min", "step", "position", "patient")
POSTURES = ("standing", "lying")


@dataclass(frozen=True)
class SessionTimes:
    """The session with skin detectors and the session without, and what they ask of the patient."""

    first: Table
    later: Table
    first_session_min: float
    later_session_min: float
    beam_min: float
    longest_position_min: float
    standing_min: float


def beam_minutes(*, beam_mu: float, rate_mu_per_min: float) -> float:
    """
    Return how long one beam takes.

    t = MU / rate

    Args:
        beam_mu: Monitor units of the beam. [MU]
        rate_mu_per_min: Rate of the mode. [MU/min]

    Returns:
        Beam-on time. [min]

    Raises:
        ValueError: If the monitor units are negative or the rate is not more than 0.

    Valid for: a constant rate.
    Assumes: no pauses.
    Source: definition (derived).
    """
    if not beam_mu >= 0 or not rate_mu_per_min > 0:
        raise ValueError(f"{beam_mu} MU at {rate_mu_per_min} MU/min cannot be delivered")
    return beam_mu / rate_mu_per_min


def session_times(
    *,
    positions: Sequence[str],
    posture: str,
    first_beam_min: float,
    second_beam_min: float,
    preparation_min: float,
    shields_min: float,
    in_vivo_placement_min: float,
    turning_min: float,
    gantry_move_min: float,
    mode_entry_min: float,
    mode_return_min: float,
    cleaning_min: float,
) -> SessionTimes:
    """
    Return the timelines of a session with skin detectors and of one without.

    Args:
        positions: The positions or incidences of one session, in order.
        posture: "standing" or "lying".
        first_beam_min: Beam-on time of the first field of a position. [min]
        second_beam_min: Beam-on time of the second field; 0 where there is one field. [min]
        preparation_min: Arrival, undressing, checks. [min]
        shields_min: Placing shields. [min]
        in_vivo_placement_min: Placing skin detectors. [min]
        turning_min: Taking a position, with staff leaving the room. [min]
        gantry_move_min: Gantry move between the two fields of a position. [min]
        mode_entry_min: Entering the mode and its checks. [min]
        mode_return_min: Return to ordinary use with its checks. [min]
        cleaning_min: Cleaning and clearing. [min]

    Returns:
        Both timelines, their lengths, beam-on time, the longest position and the time standing in all.

    Raises:
        ValueError: If there is no position, a time is negative, or the posture is not known.

    Valid for: one patient after the other.
    Assumes: the steps follow each other; every position takes the same time; no rest between positions.
    Source: definition (derived); the minutes are the department's.
    """
    if not positions:
        raise ValueError("a session has at least one position")
    if posture not in POSTURES:
        raise ValueError(f"posture {posture!r} is not standing or lying")
    before = [
        ("enter the mode and check", mode_entry_min, "outside"),
        ("prepare the patient", preparation_min, "with staff"),
        ("place shields", shields_min, "with staff"),
    ]
    detectors = [("place skin detectors", in_vivo_placement_min, "with staff")]
    position = [
        ("take the position", turning_min, posture),
        ("first field", first_beam_min, posture),
        ("move the gantry", gantry_move_min if second_beam_min else 0.0, posture),
        ("second field", second_beam_min, posture),
    ]
    after = [
        ("return to ordinary use and check", mode_return_min, "outside"),
        ("clean and clear", cleaning_min, "outside"),
    ]
    first = _timeline(before + detectors, positions, position, after)
    later = _timeline(before, positions, position, after)
    position_min = sum(minutes for _, minutes, _ in position)
    return SessionTimes(
        first=first,
        later=later,
        first_session_min=_length(first),
        later_session_min=_length(later),
        beam_min=len(positions) * (first_beam_min + second_beam_min),
        longest_position_min=position_min,
        standing_min=len(positions) * position_min if posture == "standing" else 0.0,
    )


def standing_margin(*, longest_position_min: float, standing_time_min: float) -> float:
    """
    Return how much longer a patient could stand than the longest position asks.

    Args:
        longest_position_min: Time in the longest position. [min]
        standing_time_min: Longest time a patient is asked to stand without a rest. [min]

    Returns:
        Margin; negative when the position takes longer than the patient is asked to stand. [min]

    Raises:
        ValueError: If a time is negative.

    Valid for: standing techniques with a rest between positions.
    Assumes: the patient may sit between positions.
    Source: definition (derived).
    """
    if not longest_position_min >= 0 or not standing_time_min >= 0:
        raise ValueError("times are not negative")
    return standing_time_min - longest_position_min


_Step = tuple[str, float, str]


def _timeline(
    before: list[_Step], positions: Sequence[str], position: list[_Step], after: list[_Step]
) -> Table:
    """Return the steps of a session one after the other; steps that take no time are left out."""
    steps = [(*step, "") for step in before]
    steps += [(*step, name) for name in positions for step in position]
    steps += [(*step, "") for step in after]
    rows = []
    start = 0.0
    for words, minutes, patient, name in steps:
        if not minutes >= 0:
            raise ValueError(f"the step {words!r} cannot take {minutes} min")
        if minutes > 0:
            rows.append((start, start + minutes, minutes, words, name, patient))
            start += minutes
    return Table.of(COLUMNS, rows)


def _length(timeline: Table) -> float:
    """Return the end of the last step."""
    return sum(float(minutes or 0) for minutes in timeline.column("duration_min"))
