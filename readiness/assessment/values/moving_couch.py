"""A lying patient on a moving couch: a pass, an incidence, a session."""

from collections.abc import Sequence

from readiness.assessment.definition import Definition, Measured, derived
from readiness.assessment.values.dose import LYING
from readiness.assessment.values.session_minutes import ROW_OF_STEPS, step_minutes
from readiness.calculations.course_calendar import field_sets
from readiness.calculations.moving_couch_dose import CouchPass, couch_pass
from readiness.calculations.session_timeline import SessionTimes, session_times
from readiness.errors import OutsideValidity
from readiness.quantities import Table

COUCH_DOSE_RATE = "couch-dose-rate"


def pass_of_couch(
    *,
    technique: str,
    table: Table,
    measured_rate_mu_per_min: float,
    rate_mu_per_min: float,
    couch_speed_cm_per_s: float,
    lying_passes: int,
) -> CouchPass:
    """Return a pass of the couch from the measured dose rate along its travel."""
    if technique != LYING:
        raise OutsideValidity("a moving couch is measured for a lying technique only")
    if measured_rate_mu_per_min != rate_mu_per_min:
        raise OutsideValidity(
            f"it was measured at {measured_rate_mu_per_min:g} MU/min, the mode has {rate_mu_per_min:g}"
        )
    return couch_pass(
        dose_rate_profile=table,
        couch_speed_cm_per_s=couch_speed_cm_per_s,
        passes=lying_passes,
        rate_mu_per_min=rate_mu_per_min,
    )


def number_of_incidences(*, lying_incidences: Sequence[str]) -> int:
    """Return how many incidences there are."""
    return len(lying_incidences)


def incidence_time(*, couch: CouchPass, lying_passes: int) -> float:
    """Return the beam-on minutes of one incidence."""
    return lying_passes * couch.pass_time_s / 60


def part_of_mode_limit(*, couch: CouchPass, largest_mu_per_beam_mu: float) -> float:
    """Return a pass over what the mode allows in one beam."""
    return couch.pass_mu / largest_mu_per_beam_mu


def lying_session(
    *,
    incidence_min: float,
    lying_incidences: Sequence[str],
    each_sessions_per_cycle: Sequence[int],
    steps: Table,
) -> SessionTimes:
    """Return the longest session: of the course with the fewest sessions in a cycle."""
    sessions = min(each_sessions_per_cycle, default=1)
    sets = field_sets(technique=LYING, sessions_per_cycle=sessions, incidences=lying_incidences)
    return session_times(
        positions=sets[0],
        posture="lying",
        first_beam_min=incidence_min,
        second_beam_min=0.0,
        **step_minutes(steps),
    )


_LYING_PARTS = (
    ("lying_later_session", "Session of a lying patient without detectors, minute by minute.", "later"),
    (
        "lying_first_session_min",
        "Room time of a lying patient's session with detectors.",
        "first_session_min",
    ),
    ("lying_later_session_min", "Room time of a lying patient's later session.", "later_session_min"),
)

DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.couch_pass",
        "One pass of the moving couch.",
        measured=Measured(
            COUCH_DOSE_RATE,
            by=pass_of_couch,
            takes={
                "technique": "arrangement.technique",
                "table": "measurement.table",
                "measured_rate_mu_per_min": "measurement.rate_mu_per_min",
                "rate_mu_per_min": "beam.rate_mu_per_min",
                "couch_speed_cm_per_s": "plan.couch_speed_cm_per_s",
                "lying_passes": "plan.lying_passes",
            },
        ),
        internal=True,
    ),
    derived(
        "program.lying_incidence_count",
        "Incidences of the lying technique.",
        number_of_incidences,
        {"lying_incidences": "program.lying_incidences"},
    ),
    Definition(
        "arrangement.incidence_dose_cgy",
        "Dose of one incidence of the moving couch at the calibration depth.",
        of="arrangement.couch_pass",
        part="incidence_dose_cgy",
        source="definition",
        known="derived",
        formula="D = n (integral of the dose rate along the travel)/v",
    ),
    Definition(
        "arrangement.pass_time_s",
        "Time of one pass of the couch.",
        of="arrangement.couch_pass",
        part="pass_time_s",
        source="definition",
        known="derived",
    ),
    derived(
        "arrangement.incidence_min",
        "Beam-on time of one incidence of the moving couch.",
        incidence_time,
        {"couch": "arrangement.couch_pass", "lying_passes": "plan.lying_passes"},
    ),
    derived(
        "arrangement.pass_limit_ratio",
        "A pass of the couch over what the mode allows for one beam.",
        part_of_mode_limit,
        {"couch": "arrangement.couch_pass", "largest_mu_per_beam_mu": "beam.largest_mu_per_beam_mu"},
    ),
    Definition(
        "arrangement.lying_session",
        "Session of a lying patient.",
        by=lying_session,
        takes={
            "incidence_min": "arrangement.incidence_min",
            "lying_incidences": "program.lying_incidences",
            "each_sessions_per_cycle": "each course.sessions_per_cycle",
            "steps": ROW_OF_STEPS,
        },
        internal=True,
    ),
    *(
        Definition(
            f"arrangement.{name}",
            meaning,
            of="arrangement.lying_session",
            part=part,
            source="definition",
            known="derived",
        )
        for name, meaning, part in _LYING_PARTS
    ),
)
