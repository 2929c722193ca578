"""Patient flow: sessions of a year and week, the room hours they take, and what they displace."""

from readiness.assessment.definition import Definition, derived
from readiness.calculations.patient_flow import (
    AS_PRESCRIBED,
    course_mix,
    first_cycle_sessions_per_year,
    mean_sessions_per_week,
    patient_weeks_per_year,
    patients_under_treatment,
    peak_sessions_per_week,
    sessions_per_year,
    total_patients_per_year,
    treatment_days_per_year,
)
from readiness.calculations.room_hours import (
    displaced_appointments_per_year,
    displaced_room_hours_per_year,
    free_room_hours_left,
    room_hours_per_week,
)
from readiness.quantities import Table


def mix_of_courses(*, courses: Table) -> Table:
    """Return the courses with their sessions and the weeks for which each holds a place."""
    return course_mix(courses=Table(AS_PRESCRIBED, courses.rows))


def busiest_sessions(*, courses: Table, peak_patients: int) -> float:
    """Return the sessions of a week in which every place is taken."""
    return peak_sessions_per_week(courses=courses, places=peak_patients)


def booked_for_first_cycle(*, session_room_min: float, first_cycle_extra_min: float) -> float:
    """Return the room minutes booked for a session of a first cycle."""
    return session_room_min + first_cycle_extra_min


_MIX = {"courses": "program.course_mix"}
_COURSES = "rows course: id patients_per_year cycles sessions_per_cycle sessions_per_week break_weeks"

DEFINITIONS: tuple[Definition, ...] = (
    derived(
        "program.course_mix",
        "Courses with patients a year, sessions, and the weeks for which each holds a place.",
        mix_of_courses,
        {"courses": _COURSES},
    ),
    Definition(
        "program.patients_at_once_patients",
        "Mean number of patients under treatment at once.",
        by=patients_under_treatment,
        takes=_MIX,
        source="little-1961",
        known="memory",
        formula="L = sum of lambda W",
    ),
    derived(
        "program.expected_patients_per_year",
        "Patients whom all courses bring in a year.",
        total_patients_per_year,
        _MIX,
    ),
    derived("program.sessions_per_year", "Sessions in a year.", sessions_per_year, _MIX),
    derived(
        "program.first_cycle_sessions_per_year",
        "Sessions a year of patients' first cycles.",
        first_cycle_sessions_per_year,
        _MIX,
    ),
    derived(
        "program.patient_weeks_per_year",
        "Weeks under treatment in a year, summed over patients.",
        patient_weeks_per_year,
        _MIX,
    ),
    derived(
        "program.sessions_per_week",
        "Sessions in a week, averaged over the year.",
        mean_sessions_per_week,
        _MIX,
    ),
    derived(
        "program.busiest_sessions_per_week",
        "Sessions in a week in which every place is taken.",
        busiest_sessions,
        {**_MIX, "peak_patients": "program.peak_patients"},
    ),
    Definition(
        "program.treatment_days_per_year",
        "Days a year with at least one session.",
        by=treatment_days_per_year,
        takes=_MIX,
        model=True,
        source="mirasol-1963",
        known="memory",
        formula="min(S, d W (1 - exp(-L)))",
    ),
    derived(
        "program.first_cycle_room_min",
        "Room minutes booked for a session of a patient's first cycle.",
        booked_for_first_cycle,
        {
            "session_room_min": "program.session_room_min",
            "first_cycle_extra_min": "program.first_cycle_extra_min",
        },
    ),
    derived(
        "program.room_hours_per_week_h",
        "Room hours that sessions take in a week, averaged over the year.",
        room_hours_per_week,
        {"sessions_per_week": "program.sessions_per_week", "session_min": "program.session_room_min"},
    ),
    derived(
        "program.busiest_room_hours_per_week_h",
        "Room hours that sessions take in the busiest week.",
        room_hours_per_week,
        {"sessions_per_week": "program.busiest_sessions_per_week", "session_min": "program.session_room_min"},
    ),
    derived(
        "program.free_room_hours_left_h",
        "Free room hours that remain in the busiest week; negative when there are too few.",
        free_room_hours_left,
        {
            "free_room_hours_per_week_h": "program.free_room_hours_per_week_h",
            "room_use_per_week_h": "program.busiest_room_hours_per_week_h",
        },
    ),
    derived(
        "program.displaced_room_hours_per_year_h",
        "Room hours a year that the program takes from other patients.",
        displaced_room_hours_per_year,
        {
            "sessions_per_year": "program.sessions_per_year",
            "session_min": "program.session_room_min",
            "first_cycle_sessions_per_year": "program.first_cycle_sessions_per_year",
            "first_cycle_extra_min": "program.first_cycle_extra_min",
            "tse_days_per_year": "program.treatment_days_per_year",
            "quality_assurance_min": "program.daily_check_room_min",
            "other_room_hours_per_year_h": "program.other_room_hours_per_year_h",
        },
    ),
    derived(
        "program.displaced_appointments_per_year",
        "Ordinary appointments that those hours would have held on a full machine.",
        displaced_appointments_per_year,
        {
            "displaced_hours_per_year_h": "program.displaced_room_hours_per_year_h",
            "appointment_min": "program.ordinary_appointment_min",
        },
    ),
)
