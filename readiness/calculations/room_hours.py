"""Room hours: what the sessions of a program take from the treatment room, and what they displace."""

import math


def room_hours_per_week(*, sessions_per_week: float, session_min: float) -> float:
    """
    Return the room hours that a number of sessions takes in a week.

    Args:
        sessions_per_week: Sessions in that week. [per week]
        session_min: Room time of one session, cleaning and return to normal mode included. [min]

    Returns:
        Room hours of that week. [h]

    Raises:
        ValueError: If a number is negative.

    Valid for: sessions that do not overlap.
    Assumes: the same minutes every session; first cycles are counted in the yearly hours.
    Source: definition (derived).
    """
    if sessions_per_week < 0 or session_min < 0:
        raise ValueError("sessions and minutes cannot be negative")
    return sessions_per_week * session_min / 60


def places_room_holds(
    *, free_room_hours_per_week_h: float, session_min: float, course_sessions_per_week: float
) -> int:
    """
    Return how many patients at once the free hours of the room can treat.

    places = floor(free hours / (session hours * sessions a week of the most frequent course))

    Args:
        free_room_hours_per_week_h: Hours a week that ordinary patients leave free. [h]
        session_min: Room time of one session. [min]
        course_sessions_per_week: Sessions a week of one patient, the course with most of them. [per week]

    Returns:
        Places; 0 when one patient does not fit. [1]

    Raises:
        ValueError: If the hours are negative or a session takes no time.

    Valid for: hours free in blocks that hold whole sessions.
    Assumes: that the hours lie on the days on which the patients come.
    Source: definition (derived).
    """
    if free_room_hours_per_week_h < 0 or session_min <= 0 or course_sessions_per_week <= 0:
        raise ValueError("free hours cannot be negative, and a session takes time every week")
    needed_h = course_sessions_per_week * session_min / 60
    return math.floor(free_room_hours_per_week_h / needed_h + 1e-9)


def free_room_hours_left(*, free_room_hours_per_week_h: float, room_use_per_week_h: float) -> float:
    """
    Return the free hours that remain; negative when the room has fewer than the sessions take.

    Args:
        free_room_hours_per_week_h: Hours a week that ordinary patients leave free. [h]
        room_use_per_week_h: Hours a week that the program takes. [h]

    Returns:
        Hours left. [h]

    Raises:
        ValueError: If a number of hours is negative.

    Valid for: the same kind of week on both sides (mean or peak).
    Assumes: hours free in blocks that hold whole sessions.
    Source: definition (derived).
    """
    if free_room_hours_per_week_h < 0 or room_use_per_week_h < 0:
        raise ValueError("hours cannot be negative")
    return free_room_hours_per_week_h - room_use_per_week_h


def displaced_room_hours_per_year(
    *,
    sessions_per_year: float,
    session_min: float,
    first_cycle_sessions_per_year: float,
    first_cycle_extra_min: float,
    tse_days_per_year: float,
    quality_assurance_min: float,
    other_room_hours_per_year_h: float,
) -> float:
    """
    Return the room hours that the program takes from other patients in a year.

    H = (S m + S1 m1 + D q) / 60 + other

    Args:
        sessions_per_year: Sessions, first cycles included. [per year]
        session_min: Room time of one session, cleaning and return to normal mode included. [min]
        first_cycle_sessions_per_year: Sessions of first cycles. [per year]
        first_cycle_extra_min: Room time that a first-cycle session takes on top. [min]
        tse_days_per_year: Days with at least one session. [per year]
        quality_assurance_min: Room time of the checks on such a day. [min]
        other_room_hours_per_year_h: Monthly and yearly checks, drills and training in the room. [h]

    Returns:
        Room hours of that week. [h]

    Raises:
        ValueError: If a number is negative, or first cycles or days outnumber the sessions.

    Valid for: work inside the hours in which the room treats other patients.
    Assumes: that none of it is done after hours; hours moved there are not displaced.
    Source: definition (derived).
    """
    parts = (sessions_per_year, session_min, first_cycle_sessions_per_year, first_cycle_extra_min,
             tse_days_per_year, quality_assurance_min, other_room_hours_per_year_h)  # fmt: skip
    if min(parts) < 0:
        raise ValueError("sessions, minutes, days and hours cannot be negative")
    if first_cycle_sessions_per_year > sessions_per_year or tse_days_per_year > sessions_per_year:
        raise ValueError("neither first-cycle sessions nor treatment days can outnumber the sessions")
    minutes = sessions_per_year * session_min + first_cycle_sessions_per_year * first_cycle_extra_min
    return (minutes + tse_days_per_year * quality_assurance_min) / 60 + other_room_hours_per_year_h


def displaced_appointments_per_year(*, displaced_hours_per_year_h: float, appointment_min: float) -> float:
    """
    Return the ordinary appointments that the displaced room hours would have held.

    Args:
        displaced_hours_per_year_h: Room hours that the program takes. [h]
        appointment_min: Length of an ordinary appointment on that machine. [min]

    Returns:
        Appointments. [per year]

    Raises:
        ValueError: If the hours are negative or an appointment takes no time.

    Valid for: a machine whose appointments are all taken; on a machine with free hours none is displaced.
    Assumes: one length of appointment.
    Source: definition (derived).
    """
    if displaced_hours_per_year_h < 0 or appointment_min <= 0:
        raise ValueError("hours cannot be negative, and an appointment takes time")
    return displaced_hours_per_year_h * 60 / appointment_min
