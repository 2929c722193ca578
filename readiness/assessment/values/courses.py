"""Courses: what their numbers make, and each of them day by day from the wanted first patient on."""

from collections.abc import Sequence
from datetime import date

from readiness.assessment.definition import Definition, derived
from readiness.calculations.boost_calendar import boost_calendar, last_day
from readiness.calculations.course_calendar import CourseCalendar, course_calendar, field_sets
from readiness.calculations.course_numbers import course_dose, cycles_per_week, undisturbed_weeks
from readiness.calculations.patient_shields import shield_schedule, shield_use
from readiness.calculations.treatment_days import TreatmentDays, treatment_days
from readiness.calculations.working_days import working_days, years_without_closed_dates
from readiness.quantities import Table


def planned_technique(*, chosen_arrangement: Table | None, techniques: Sequence[str]) -> str | None:
    """Return the technique of the chosen arrangement, else the first that the department considers."""
    if chosen_arrangement is not None:
        return str(next(chosen_arrangement.records())["technique"])
    return techniques[0] if techniques else None


def department_treatment_days(
    *,
    treatment_weekdays: Sequence[str],
    closed_dates: Sequence[date],
    service_dates: Sequence[date],
    holidays_country: str | None,
) -> TreatmentDays:
    """Return the days on which sessions can be given."""
    calendar = working_days(
        weekdays=treatment_weekdays, closed_dates=closed_dates, country=holidays_country or ""
    )
    return treatment_days(
        calendar=calendar, treatment_weekdays=treatment_weekdays, service_days=service_dates
    )


def course_count(*, courses: Sequence[str]) -> int:
    """Return how many courses there are."""
    return len(courses)


def session_count(*, cycles: int, sessions_per_cycle: int) -> int:
    """Return the sessions of a course."""
    return cycles * sessions_per_cycle


def weekly_dose(*, dose_per_cycle_gy: float, cycles_per_week: float) -> float:
    """Return the dose of an undisturbed week in Gy."""
    return dose_per_cycle_gy * cycles_per_week


def calendar_of_course(
    *,
    target_first_patient_date: date,
    days: TreatmentDays,
    technique: str,
    lying_incidences: Sequence[str] | None,
    cycles: int,
    sessions_per_cycle: int,
    sessions_per_week: int,
    dose_per_cycle_gy: float,
    break_after_cycle: int,
    break_weeks: float,
    measured_cycles: Sequence[float] | None,
    missed_dates: Sequence[date] | None,
) -> CourseCalendar:
    """Return a course that starts with the first patient; dose is measured in the first cycle at least."""
    return course_calendar(
        first_day=target_first_patient_date,
        days=days,
        fields=field_sets(
            technique=technique, sessions_per_cycle=sessions_per_cycle, incidences=lying_incidences or ()
        ),
        cycles=cycles,
        sessions_per_week=sessions_per_week,
        dose_per_cycle_gy=dose_per_cycle_gy,
        break_after_cycle=break_after_cycle,
        break_weeks=break_weeks,
        missed_days=missed_dates or (),
        in_vivo_cycles=(1,) if measured_cycles is None else [round(cycle) for cycle in measured_cycles],
    )


def boosts_of_course(
    *, sessions: Table, boosts: Table, days: TreatmentDays, missed_dates: Sequence[date] | None
) -> Table:
    """Return the boosts of a course day by day."""
    return boost_calendar(sessions=sessions, boosts=boosts, days=days, missed_days=missed_dates or ())


def years_without_days_off(
    *, closed_dates: Sequence[date], first_date: date, end_date: date, holidays_country: str | None
) -> int:
    """Return how many years of a course have no day off, as if a list of another year had been left in."""
    if holidays_country:
        return 0
    return len(years_without_closed_dates(closed_dates=closed_dates, first_day=first_date, last_day=end_date))


def prescribed_at(*, point: str, depth_mm: float) -> str:
    """Return where the dose is prescribed, in words."""
    return f"{point}, {depth_mm:g} mm"


_CALENDAR = {
    "target_first_patient_date": "program.target_first_patient_date",
    "days": "program.treatment_days",
    "technique": "program.planned_technique",
    "lying_incidences": "program.lying_incidences?",
    "cycles": "course.cycles",
    "sessions_per_cycle": "course.sessions_per_cycle",
    "sessions_per_week": "course.sessions_per_week",
    "dose_per_cycle_gy": "course.dose_per_cycle_gy",
    "break_after_cycle": "course.break_after_cycle",
    "break_weeks": "course.break_weeks",
    "measured_cycles": "course.measured_cycles?",
    "missed_dates": "course.missed_dates?",
}


def _part(name: str, meaning: str, part: str) -> Definition:
    return Definition(
        name, meaning, of="course.calendar_record", part=part, source="practice", known="practice"
    )


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "program.planned_technique",
        "Technique of the chosen arrangement, or the first one considered while none is chosen.",
        by=planned_technique,
        takes={"chosen_arrangement": "program.chosen_arrangement?", "techniques": "program.techniques"},
    ),
    derived("program.course_count", "Courses of the program.", course_count, {"courses": "each course.id"}),
    Definition(
        "program.treatment_days",
        "Days on which sessions can be given.",
        by=department_treatment_days,
        takes={
            "treatment_weekdays": "program.treatment_weekdays",
            "closed_dates": "program.closed_dates",
            "service_dates": "program.service_dates",
            "holidays_country": "program.holidays_country?",
        },
        internal=True,
    ),
    Definition(
        "course.prescribed_at",
        "Point and depth at which the dose is prescribed.",
        by=prescribed_at,
        takes={"point": "course.prescription_point", "depth_mm": "course.prescription_depth_mm"},
        source="definition",
        known="derived",
    ),
    Definition(
        "course.dose_from_cycles_gy",
        "Total dose that the cycles of the course make.",
        by=course_dose,
        takes={"dose_per_cycle_gy": "course.dose_per_cycle_gy", "cycles": "course.cycles"},
        source="definition",
        known="derived",
        formula="D = n D_cycle",
    ),
    Definition(
        "course.session_count",
        "Sessions of the course.",
        by=session_count,
        takes={"cycles": "course.cycles", "sessions_per_cycle": "course.sessions_per_cycle"},
        source="definition",
        known="derived",
    ),
    Definition(
        "course.cycles_per_week",
        "Whole cycles that fit into a week; a cycle is never split over a weekend.",
        by=cycles_per_week,
        takes={
            "sessions_per_cycle": "course.sessions_per_cycle",
            "sessions_per_week": "course.sessions_per_week",
        },
        source="practice",
        known="practice",
    ),
    Definition(
        "course.dose_per_week_gy",
        "Skin dose of an undisturbed week.",
        by=weekly_dose,
        takes={"dose_per_cycle_gy": "course.dose_per_cycle_gy", "cycles_per_week": "course.cycles_per_week"},
        source="definition",
        known="derived",
    ),
    Definition(
        "course.undisturbed_weeks",
        "Weeks that the course takes without holidays, service days and missed days, its break included.",
        by=undisturbed_weeks,
        takes={
            "cycles": "course.cycles",
            "sessions_per_cycle": "course.sessions_per_cycle",
            "sessions_per_week": "course.sessions_per_week",
            "break_weeks": "course.break_weeks",
        },
        source="definition",
        known="derived",
    ),
    Definition(
        "course.calendar_record",
        "The course day by day.",
        by=calendar_of_course,
        takes=_CALENDAR,
        internal=True,
    ),
    _part("course.calendar", "Sessions of the course day by day, begun with the first patient.", "sessions"),
    _part("course.first_date", "First session, if the course is the first patient's.", "first_date"),
    _part("course.end_date", "Last session, if the course is the first patient's.", "end_date"),
    _part("course.duration_weeks", "First to last session, days off included.", "duration_weeks"),
    _part("course.made_up_sessions", "Sessions that make up for missed days.", "made_up_sessions"),
    _part("course.longest_gap_days", "Longest time between two sessions of one cycle.", "longest_gap_days"),
    Definition(
        "course.years_without_days_off",
        "Years that the course touches for which no day off is listed.",
        by=years_without_days_off,
        takes={
            "closed_dates": "program.closed_dates",
            "first_date": "course.first_date",
            "end_date": "course.end_date",
            "holidays_country": "program.holidays_country?",
        },
        source="definition",
        known="derived",
    ),
    Definition(
        "course.boost_calendar",
        "Boosts of the course day by day.",
        by=boosts_of_course,
        takes={
            "sessions": "course.calendar",
            "boosts": "course.boosts",
            "days": "program.treatment_days",
            "missed_dates": "course.missed_dates?",
        },
        source="practice",
        known="practice",
    ),
    Definition(
        "course.complete_date",
        "Day on which course and boosts are complete.",
        by=last_day,
        takes={"sessions": "course.calendar", "boosts": "course.boost_calendar"},
        source="definition",
        known="derived",
    ),
    Definition(
        "course.shield_calendar",
        "Shields worn and boosts given at each session.",
        by=shield_schedule,
        takes={"sessions": "course.calendar", "shields": "course.shields", "boosts": "course.boost_calendar"},
        source="definition",
        known="derived",
    ),
    Definition(
        "course.shield_use",
        "Cycles for which each organ is shielded, and the prescribed dose of the others.",
        by=shield_use,
        takes={
            "cycles": "course.cycles",
            "dose_per_cycle_gy": "course.dose_per_cycle_gy",
            "shields": "course.shields",
        },
        source="definition",
        known="derived",
    ),
)
