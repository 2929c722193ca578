"""A session of a standing patient minute by minute."""

from dataclasses import dataclass

from readiness.assessment.definition import Definition, derived
from readiness.assessment.values.dose import ROTATING, PlannedCycles
from readiness.calculations.course_calendar import field_sets
from readiness.calculations.platform_turns import turns_during_beam
from readiness.calculations.session_timeline import (
    SessionTimes,
    beam_minutes,
    session_times,
    standing_margin,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

STEPS = (
    "preparation_min",
    "shields_min",
    "in_vivo_placement_min",
    "turning_min",
    "gantry_move_min",
    "mode_entry_min",
    "mode_return_min",
    "cleaning_min",
)
ROW_OF_STEPS = f"rows session_time: {' '.join(STEPS)}"
BY_COURSE = (
    "course", "positions", "beam_min", "first_session_min", "later_session_min", "longest_position_min",
    "standing_min",
)  # fmt: skip
_PARTS = (
    ("session_minutes_by_course", "Minutes of a session of each course.", "by_course"),
    (
        "first_session",
        "Session with detectors on the skin, minute by minute, of the longest course.",
        "first",
    ),
    ("later_session", "Session without detectors, minute by minute, of the same course.", "later"),
    ("first_session_min", "Room time of a session with detectors on the skin.", "first_session_min"),
    ("later_session_min", "Room time of a session without detectors.", "later_session_min"),
    ("session_beam_min", "Beam-on time of a session.", "beam_min"),
    ("longest_position_min", "Time in the longest position.", "longest_position_min"),
    ("standing_min", "Time standing in all positions of a session.", "standing_min"),
)


@dataclass(frozen=True)
class SessionMinutes:
    """The sessions of each course, and the session of the course with the longest."""

    by_course: Table
    first: Table
    later: Table
    first_session_min: float
    later_session_min: float
    beam_min: float
    longest_position_min: float
    standing_min: float
    longest_beam_min: float


def minutes_of_sessions(
    *, technique: str, cycles: PlannedCycles, rate_mu_per_min: float, steps: Table
) -> SessionMinutes:
    """Return the sessions of each course by a standing technique."""
    found: list[tuple[str, int, SessionTimes, float]] = []
    for course, sessions_per_cycle, units in cycles.courses:
        positions = field_sets(technique=technique, sessions_per_cycle=sessions_per_cycle)[0]
        beams = [
            beam_minutes(beam_mu=beam_mu, rate_mu_per_min=rate_mu_per_min)
            for beam_mu in (units.upper_beam_mu, units.lower_beam_mu)
        ]
        times = session_times(
            positions=positions,
            posture="standing",
            first_beam_min=beams[0],
            second_beam_min=beams[1],
            **step_minutes(steps),
        )
        found.append((course, len(positions), times, max(beams)))
    rows = [
        (course, positions, *(getattr(times, name) for name in BY_COURSE[2:]))
        for course, positions, times, _ in found
    ]
    _, _, longest, beam_min = max(found, key=lambda each: each[2].first_session_min)
    return SessionMinutes(by_course=Table.of(BY_COURSE, rows), longest_beam_min=beam_min, **vars(longest))


def step_minutes(steps: Table) -> dict[str, float]:
    """Return the minutes of each step from the one row that a department describes."""
    if not steps.rows:
        raise OutsideValidity("Describe minutes of a session in staffing.yaml.")
    row = next(steps.records())
    return {name: float(row[name] or 0.0) for name in STEPS}


def turns_of_platform(*, technique: str, minutes: SessionMinutes, turn_time_s: float) -> float | None:
    """Return the turns during the longer beam; none for a patient who does not turn during it."""
    if technique != ROTATING:
        return None
    return turns_during_beam(beam_min=minutes.longest_beam_min, turn_time_s=turn_time_s)


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.session_minutes",
        "Sessions of each course by a standing technique.",
        by=minutes_of_sessions,
        takes={
            "technique": "arrangement.technique",
            "cycles": "arrangement.planned_cycles",
            "rate_mu_per_min": "beam.rate_mu_per_min",
            "steps": ROW_OF_STEPS,
        },
        internal=True,
    ),
    *(
        Definition(
            f"arrangement.{name}",
            meaning,
            of="arrangement.session_minutes",
            part=part,
            source="definition",
            known="derived",
        )
        for name, meaning, part in _PARTS
    ),
    derived(
        "arrangement.standing_margin_min",
        "How much longer a patient is asked to stand than the longest position takes; negative if shorter.",
        standing_margin,
        {
            "longest_position_min": "arrangement.longest_position_min",
            "standing_time_min": "program.standing_time_min",
        },
    ),
    derived(
        "arrangement.turns_per_beam_ratio",
        "Turns of the platform during the longer beam.",
        turns_of_platform,
        {
            "technique": "arrangement.technique",
            "minutes": "arrangement.session_minutes",
            "turn_time_s": "stand.turn_time_s",
        },
    ),
)
