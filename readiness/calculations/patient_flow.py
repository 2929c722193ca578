"""
Patient flow: how many patients are under treatment at once, and the sessions and room hours they bring.

The mix of courses is a table with the columns of :data:`COURSES`: for each course its patients a year, its
sessions, its sessions a week while it runs, and the weeks for which a patient holds a place (with breaks).
"""

import math

from readiness.calculations.course_numbers import undisturbed_weeks
from readiness.quantities import Scalar, Table

WEEKS_PER_YEAR = 365.25 / 7
COURSES = (
    "course", "patients_per_year", "sessions", "sessions_per_cycle", "sessions_per_week", "course_weeks",
)  # fmt: skip
AS_PRESCRIBED = (
    "course", "patients_per_year", "cycles", "sessions_per_cycle", "sessions_per_week", "break_weeks",
)  # fmt: skip
MOST_PATIENTS_AT_ONCE = 200


def course_mix(*, courses: Table) -> Table:
    """
    Return the mix of courses with the sessions of each and the weeks for which it holds a place.

    Args:
        courses: The courses as they are prescribed; columns of AS_PRESCRIBED.

    Returns:
        The mix, with the columns of COURSES.

    Raises:
        ValueError: If a number is missing or impossible, or a cycle does not fit into a week.

    Valid for: planning; the course calendar gives the days of one patient.
    Assumes: no holidays and no interruptions; whole cycles in a week; the place is kept during the break.
    Source: definition (derived).
    """
    rows: list[tuple[Scalar, ...]] = []
    for row in courses.records():
        counts: dict[str, int] = {}
        for column in AS_PRESCRIBED[2:5]:
            number = row[column]
            if not isinstance(number, int) or isinstance(number, bool):
                raise ValueError(f"course {row['course']!r}: {column} is not a whole number")
            counts[column] = number
        pause = row["break_weeks"]
        if not isinstance(pause, int | float) or isinstance(pause, bool):
            raise ValueError(f"course {row['course']!r}: break_weeks is not a number")
        weeks = undisturbed_weeks(**counts, break_weeks=float(pause))
        sessions = counts["cycles"] * counts["sessions_per_cycle"]
        rows.append((
            row["course"], row["patients_per_year"], sessions, counts["sessions_per_cycle"],
            counts["sessions_per_week"], weeks,
        ))  # fmt: skip
    return Table.of(COURSES, rows)


def patients_under_treatment(*, courses: Table) -> float:
    """
    Return the mean number of patients under treatment at once, over the years.

    L = sum over courses of lambda W (Little's law)

    Args:
        courses: The mix of courses, with the columns of COURSES.

    Returns:
        Mean number of patients at once. [patients]

    Raises:
        ValueError: If the table has no course or an impossible number.

    Valid for: any order of referrals, as long as all referred patients are treated in the end.
    Assumes: that the mix stays the same over the years.
    Source: little-1961, the theorem (memory).
    """
    mix = checked_courses(courses=courses)
    return sum(rate * weeks for rate, _, _, _, weeks in mix) / WEEKS_PER_YEAR


def sessions_per_year(*, courses: Table) -> float:
    """
    Return the sessions that the mix of courses brings in a year.

    Args:
        courses: The mix of courses, with the columns of COURSES.

    Returns:
        Sessions. [per year]

    Raises:
        ValueError: If the table has no course or an impossible number.

    Valid for: completed courses.
    Assumes: one patient to a session.
    Source: definition (derived).
    """
    return sum(rate * sessions for rate, sessions, _, _, _ in checked_courses(courses=courses))


def first_cycle_sessions_per_year(*, courses: Table) -> float:
    """
    Return the sessions a year that belong to somebody's first cycle (the in-vivo sessions).

    Args:
        courses: The mix of courses, with the columns of COURSES.

    Returns:
        Sessions. [per year]

    Raises:
        ValueError: If the table has no course or an impossible number.

    Valid for: one in-vivo cycle a patient.
    Assumes: that only the first cycle is measured.
    Source: definition (derived).
    """
    return sum(rate * per_cycle for rate, _, per_cycle, _, _ in checked_courses(courses=courses))


def total_patients_per_year(*, courses: Table) -> float:
    """
    Return the patients that all courses bring in a year.

    Args:
        courses: The mix of courses, with the columns of COURSES.

    Returns:
        Patients. [per year]

    Raises:
        ValueError: If the table has no course or an impossible number.

    Valid for: any mix.
    Assumes: one course a patient a year.
    Source: definition (derived).
    """
    return sum(rate for rate, _, _, _, _ in checked_courses(courses=courses))


def patient_weeks_per_year(*, courses: Table) -> float:
    """
    Return the weeks a year that patients spend under treatment, summed over patients (weekly checks).

    Args:
        courses: The mix of courses, with the columns of COURSES.

    Returns:
        Patient weeks. [per year]

    Raises:
        ValueError: If the table has no course or an impossible number.

    Valid for: completed courses.
    Assumes: that a week of a planned break is checked too.
    Source: definition (derived).
    """
    return sum(rate * weeks for rate, _, _, _, weeks in checked_courses(courses=courses))


def mean_sessions_per_week(*, courses: Table) -> float:
    """
    Return the sessions in a week, averaged over the year.

    Args:
        courses: The mix of courses, with the columns of COURSES.

    Returns:
        Sessions. [per week]

    Raises:
        ValueError: If the table has no course or an impossible number.

    Valid for: long-run means; a week at the peak has more.
    Assumes: 365.25 / 7 weeks in a year.
    Source: definition (derived).
    """
    return sessions_per_year(courses=courses) / WEEKS_PER_YEAR


def treatment_days_per_year(*, courses: Table) -> float:
    """
    Return the days a year on which at least one session is expected, where nobody has counted them.

    days = min(S, d W (1 - exp(-L)))

    Args:
        courses: The mix of courses, with the columns of COURSES.

    Returns:
        Days, never more than the sessions. [per year]

    Raises:
        ValueError: If the table has no course or an impossible number.

    Valid for: referrals at random; everybody under treatment comes on the same days of the week.
    Assumes: that nobody waits, so that the number under treatment is Poisson with mean L; holidays count.
    Source: mirasol-1963 (memory) for the share of time without a patient; the product is derived.
    """
    days_per_week = max(weekly for _, _, _, weekly, _ in checked_courses(courses=courses))
    in_use = 1 - math.exp(-patients_under_treatment(courses=courses))
    return min(sessions_per_year(courses=courses), days_per_week * WEEKS_PER_YEAR * in_use)


def peak_sessions_per_week(*, courses: Table, places: int) -> float:
    """
    Return the sessions in the busiest week: every place taken by the course with most sessions a week.

    Args:
        courses: The mix of courses, with the columns of COURSES.
        places: Patients who may be under treatment at once. [1]

    Returns:
        Sessions. [per week]

    Raises:
        ValueError: If there is no place, no course or an impossible number.

    Valid for: a fixed number of places.
    Assumes: that nobody makes up missed sessions in that week.
    Source: definition (derived).
    """
    if places < 1:
        raise ValueError(f"{places} places hold no patient")
    return places * max(weekly for _, _, _, weekly, _ in checked_courses(courses=courses))


def peak_patients(*, mean_patients: float, share_of_time: float) -> int:
    """
    Return how many patients at once are exceeded only in the rest of the time, if nobody has to wait.

    P(N <= n) = exp(-L) sum of L^k / k!, k = 0 to n

    Args:
        mean_patients: Mean number under treatment at once, L. [patients]
        share_of_time: Share of the time in which the answer is not exceeded. [1]

    Returns:
        Smallest such number of patients. [1]

    Raises:
        ValueError: If the mean is negative or the share is not between 0 and 1.

    Valid for: referrals at random (Poisson), any course lengths, no limit of places, up to 200 at once.
    Assumes: that every patient starts at once.
    Source: mirasol-1963, number in a queue with any number of servers is Poisson (memory).
    """
    if not 0 <= mean_patients <= MOST_PATIENTS_AT_ONCE:
        raise ValueError(f"{mean_patients} patients at once is not a program's number")
    if not 0 < share_of_time < 1:
        raise ValueError("the share of the time lies between 0 and 1, both excluded")
    term = cumulated = math.exp(-mean_patients)
    patients = 0
    while cumulated < share_of_time and term > 0:
        patients += 1
        term *= mean_patients / patients
        cumulated += term
    return patients


def checked_courses(*, courses: Table) -> tuple[tuple[float, float, float, float, float], ...]:
    """
    Return the numbers of a mix of courses, once they make sense.

    Args:
        courses: The mix of courses, with the columns of COURSES.

    Returns:
        For each course: patients per year, sessions, sessions per cycle and per week, weeks.

    Raises:
        ValueError: If the table has no course, or a number is missing, negative or zero where it cannot be.

    Valid for: any mix.
    Assumes: nothing.
    Source: definition (derived).
    """
    checked = []
    for row in courses.records():
        numbers = []
        for column in COURSES[1:]:
            number = row[column]
            if isinstance(number, bool) or not isinstance(number, int | float) or not math.isfinite(number):
                raise ValueError(f"course {row['course']!r}: {column} is not a number")
            if number < 0 or (number == 0 and column != "patients_per_year"):
                raise ValueError(f"course {row['course']!r}: {column} cannot be {number}")
            numbers.append(float(number))
        checked.append((numbers[0], numbers[1], numbers[2], numbers[3], numbers[4]))
    if not checked:
        raise ValueError("a program without a course has no patient flow")
    return tuple(checked)
