"""One question asked of a standing and of a lying technique, each answered by its own value."""

from readiness.assessment.definition import Definition, derived, one_of_techniques


def time_to_spare(
    *, booked_min: float, taken_min: float, first_booked_min: float, first_taken_min: float
) -> float:
    """Return the smaller excess of booked time over a session, with or without detectors."""
    return min(booked_min - taken_min, first_booked_min - first_taken_min)


DEFINITIONS: tuple[Definition, ...] = (
    one_of_techniques(
        "arrangement.gantry_reaches",
        "The gantry reaches the angles that the technique needs.",
        standing="arrangement.gantry_angles_reachable",
        lying="arrangement.vertical_reachable",
    ),
    one_of_techniques(
        "arrangement.mode_allows_gantry",
        "The mode allows the gantry angles that the technique needs.",
        standing="arrangement.mode_allows_angles",
        lying="arrangement.mode_allows_vertical",
    ),
    one_of_techniques(
        "arrangement.field_at_patient_cm",
        "Width of the geometric field where the patient stands or lies.",
        standing="arrangement.lit_width_cm",
        lying="arrangement.field_length_at_couch_cm",
    ),
    one_of_techniques(
        "arrangement.range_spent_ratio",
        "Part of their range that the electrons spend in air and degrader; from 1 on none arrives.",
        standing="arrangement.range_taken_ratio",
        lying="arrangement.lying_range_taken_ratio",
    ),
    one_of_techniques(
        "arrangement.tested_load_kg",
        "Load with which the stand or the couch was tested.",
        standing="stand.tested_load_kg",
        lying="couch.tested_load_kg",
    ),
    one_of_techniques(
        "arrangement.support_papers",
        "Types of papers in force that name the stand or the couch.",
        standing="stand.papers",
        lying="couch.papers",
    ),
    one_of_techniques(
        "arrangement.support_owned",
        "The department has the stand or the couch.",
        standing="stand.owned",
        lying="couch.owned",
    ),
    one_of_techniques(
        "arrangement.beam_limit_ratio",
        "Largest beam of a cycle, or pass of the couch, over what the mode allows for one beam.",
        standing="arrangement.mode_limit_ratio",
        lying="arrangement.pass_limit_ratio",
    ),
    one_of_techniques(
        "arrangement.session_taken_min",
        "Room time of a session without detectors.",
        standing="arrangement.later_session_min",
        lying="arrangement.lying_later_session_min",
    ),
    one_of_techniques(
        "arrangement.first_session_taken_min",
        "Room time of a session with detectors.",
        standing="arrangement.first_session_min",
        lying="arrangement.lying_first_session_min",
    ),
    derived(
        "arrangement.session_to_spare_min",
        "By how much the booked time exceeds a session's, with or without detectors, whichever is less.",
        time_to_spare,
        {
            "booked_min": "program.session_room_min",
            "taken_min": "arrangement.session_taken_min",
            "first_booked_min": "program.first_cycle_room_min",
            "first_taken_min": "arrangement.first_session_taken_min",
        },
    ),
)
