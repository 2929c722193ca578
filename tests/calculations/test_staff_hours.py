"""Hours and full-time equivalents of a running program and of the project before it."""

import pytest

from readiness.calculations.patient_flow import WEEKS_PER_YEAR
from readiness.calculations.staff_hours import (
    LISTED,
    PEOPLE,
    ROLES,
    TASKS,
    people_with_fte,
    profession_fte_needed,
    profession_fte_qualified,
    staffing_balance,
    task_hours,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Table

ALL = [
    ("sessions", "therapist", "session", 60, 2),
    ("first cycles", "therapist", "first-cycle-session", 60, 3),
    ("in-vivo placement", "physicist", "first-cycle-session", 120, 1),
    ("daily checks", "physicist", "treatment-day", 30, 1),
    ("read-out", "physicist", "patient", 360, 1),
    ("chart checks", "physicist", "patient-week", 30, 1),
    ("monthly checks", "physicist", "month", 180, 1),
    ("yearly checks", "physicist", "year", 1440, 1),
    ("training", "therapist", "year", 2880, 1),
    ("commissioning", "physicist", "commissioning", 240 * 60, 1),
]
CREW = Table.of(
    PEOPLE,
    [
        ("P1", "physicist", 0.10, True),
        ("P2", "physicist", 0.05, False),
        ("T1", "therapist", 0.10, True),
        ("T2", "therapist", 0.10, None),
    ],
)
NO_PHASES = Table.of(("phase", "weeks"), [])
YEAR = {
    "sessions_per_year": 216,
    "first_cycle_sessions_per_year": 16,
    "tse_days_per_year": 176,
    "patients_per_year": 8,
    "patient_weeks_per_year": 59,
}


def hours_of(*tasks: tuple[object, ...]) -> Table:
    """Return the hours of tasks in the sample year."""
    return task_hours(tasks=Table.of(TASKS, tasks), **YEAR)


def test_hours_of_each_task_close_by_hand():
    """Times a year by persons by minutes: 216 x 2 x 60 min are 432 h, 59 weeks of half an hour 29.5 h."""
    expected = [432, 48, 32, 88, 48, 29.5, 36, 24, 48, 240]
    assert hours_of(*ALL).column("total_h") == pytest.approx(expected)


def test_a_week_is_counted_for_the_whole_year():
    """An hour a week is 52.18 h a year, and 12 months are 12 h."""
    table = hours_of(("a", "nurse", "week", 60, 1), ("b", "nurse", "month", 60, 1))
    assert table.column("total_h") == pytest.approx([365.25 / 7, 12])


def test_therapists_of_the_sample_need_a_third_of_a_person():
    """432 + 48 + 48 h at 1,650 h per full-time person are 0.32 FTE."""
    needed = profession_fte_needed(hours=hours_of(*ALL), profession="therapist", hours_per_fte_h=1650)
    assert needed == pytest.approx(528 / 1650)


def test_a_role_without_recurring_tasks_needs_nobody():
    """The project's hours are no part of the running program."""
    assert profession_fte_needed(hours=hours_of(ALL[-1]), profession="physicist", hours_per_fte_h=1650) == 0


def test_only_stated_qualifications_count():
    """A person not trained, or of whom nothing is known, adds no qualified hours."""
    assert profession_fte_qualified(people=CREW, profession="physicist") == 0.10
    assert profession_fte_qualified(people=CREW, profession="therapist") == 0.10
    assert profession_fte_qualified(people=CREW, profession="nurse") == 0


def test_people_of_a_role_share_its_time():
    """Four therapists with 0.40 FTE together have 0.10 each; a role without people keeps its time without a person."""
    roles = Table.of(ROLES, [("therapists", "therapist", 0.40), ("nurse", "nurse", 0.05), ("md", "oncologist", None)])
    listed = [(f"T{n}", "therapists", n != 4, None) for n in (1, 2, 3, 4)] + [("O1", "md", True, None)]
    crew = people_with_fte(roles=roles, people=Table.of(LISTED, listed))
    assert crew.columns == PEOPLE
    assert crew.rows[:2] == (("T1", "therapist", 0.10, True), ("T2", "therapist", 0.10, True))
    assert crew.rows[3:] == (
        ("T4", "therapist", 0.10, False), (None, "nurse", 0.05, False), ("O1", "oncologist", None, True),
    )  # fmt: skip
    assert profession_fte_qualified(people=crew, profession="therapist") == pytest.approx(0.30)
    assert profession_fte_qualified(people=crew, profession="nurse") == 0


def test_a_person_of_an_unlisted_role_is_refused():
    """A slip in a role's id is named."""
    roles = Table.of(ROLES, [("therapists", "therapist", 0.40)])
    with pytest.raises(ValueError, match="'T1' has the role 'therapist', which is not listed"):
        people_with_fte(roles=roles, people=Table.of(LISTED, [("T1", "therapist", True, None)]))


def test_a_persons_own_time_counts_and_the_others_share_the_rest():
    """Of 0.15 FTE one physicist has 0.10, so that the other has 0.05; more than the role has is refused."""
    roles = Table.of(ROLES, [("physicists", "physicist", 0.15)])
    listed = [("P1", "physicists", True, 0.10), ("P2", "physicists", False, None)]
    crew = people_with_fte(roles=roles, people=Table.of(LISTED, listed))
    assert crew.column("fte") == pytest.approx((0.10, 0.05))
    with pytest.raises(ValueError, match="0.05 FTE more than the role"):
        people_with_fte(roles=roles, people=Table.of(LISTED, [("P1", "physicists", True, 0.20)]))


def test_time_that_nobody_stated_is_not_zero():
    """With the time of a qualified person blank, neither missing nor qualified FTE is told."""
    crew = Table.of(PEOPLE, [("P1", "physicist", None, True), ("P2", "physicist", 0.2, True)])
    (row,) = staffing_balance(
        hours=hours_of(ALL[2]), people=crew, phase_weeks=NO_PHASES, hours_per_fte_h=1650
    ).records()
    assert row["qualified_fte"] is None
    assert row["missing_fte"] is None
    with pytest.raises(OutsideValidity, match="time of a qualified physicist"):
        profession_fte_qualified(people=crew, profession="physicist")


def test_balance_compares_needed_with_stated_and_qualified():
    """The physicists' 257.5 h are 0.156 FTE: 0.15 are stated, 0.10 qualified, 0.056 missing."""
    balance = staffing_balance(hours=hours_of(*ALL), people=CREW, phase_weeks=NO_PHASES, hours_per_fte_h=1650)
    row = next(row for row in balance.records() if row["profession"] == "physicist" and row["phase"] == "operate")
    assert row["needed_h"] == pytest.approx(257.5)
    assert row["needed_fte"] == pytest.approx(257.5 / 1650)
    assert row["stated_fte"] == pytest.approx(0.15)
    assert row["missing_fte"] == pytest.approx(257.5 / 1650 - 0.10)


def test_a_project_phase_needs_its_hours_within_its_weeks():
    """240 h in 4 weeks, of a person with 1,650 h a year, are 1.9 full-time people; in 40 weeks a tenth of that."""
    found = []
    for weeks in (4, 40):
        phases = Table.of(("phase", "weeks"), [("commission", weeks)])
        balance = staffing_balance(hours=hours_of(ALL[-1]), people=CREW, phase_weeks=phases, hours_per_fte_h=1650)
        found.append(balance.column("needed_fte")[0])
    assert found[0] == pytest.approx(240 / (1650 * 4 / WEEKS_PER_YEAR))
    assert found[0] == pytest.approx(10 * found[1])


def test_a_phase_of_unknown_length_has_no_fte():
    """Hours are summed, full-time equivalents stay blank."""
    balance = staffing_balance(hours=hours_of(ALL[-1]), people=CREW, phase_weeks=NO_PHASES, hours_per_fte_h=1650)
    (row,) = balance.records()
    assert row["needed_h"] == 240
    assert row["needed_fte"] is None
    assert row["missing_fte"] is None


def test_enough_people_are_not_missing():
    """A surplus shows as nobody missing, not as a negative number."""
    small = hours_of(("checks", "physicist", "month", 30, 1))
    (row,) = staffing_balance(
        hours=small, people=CREW, phase_weeks=NO_PHASES, hours_per_fte_h=1650
    ).records()
    assert row["missing_fte"] == 0


def test_minutes_that_nobody_stated_are_never_zero():
    """The task is counted as open, nothing is said to be covered, and the role's need is refused."""
    hours = hours_of(("checks", "physicist", "month", None, 1))
    assert hours.column("total_h") == (None,)
    (row,) = staffing_balance(
        hours=hours, people=CREW, phase_weeks=NO_PHASES, hours_per_fte_h=1650
    ).records()
    assert row["tasks_without_minutes"] == 1
    assert row["missing_fte"] is None
    with pytest.raises(OutsideValidity, match="not stated for tasks of the physicist: 1"):
        profession_fte_needed(hours=hours, profession="physicist", hours_per_fte_h=1650)


@pytest.mark.parametrize(
    ("task", "words"),
    [
        (("a", "nurse", "fortnight", 60, 1), "per 'fortnight' is not one of session"),
        (("a", "nurse", "week", -60, 1), "minutes min of 'a' cannot be -60"),
        (("a", "nurse", "week", 60, "two"), "persons of 'a' is not a number"),
    ],
)
def test_impossible_tasks_are_refused(task, words):
    """A wrong word or amount is named with its task."""
    with pytest.raises(ValueError, match=words):
        hours_of(task)


def test_impossible_years_and_people_are_refused():
    """Negative volumes, negative FTE, full-time people without hours and phases without time are slips."""
    with pytest.raises(ValueError, match="volumes of a year"):
        task_hours(tasks=Table.of(TASKS, ALL), **YEAR | {"patients_per_year": -8})
    with pytest.raises(ValueError, match="fte of 'P1' cannot be"):
        profession_fte_qualified(people=Table.of(PEOPLE, [("P1", "physicist", -0.1, True)]), profession="physicist")
    with pytest.raises(ValueError, match="works some hours"):
        profession_fte_needed(hours=hours_of(*ALL), profession="nurse", hours_per_fte_h=0)
    with pytest.raises(ValueError, match="works some hours"):
        staffing_balance(hours=hours_of(*ALL), people=CREW, phase_weeks=NO_PHASES, hours_per_fte_h=0)
    phases = Table.of(("phase", "weeks"), [("commission", 0)])
    with pytest.raises(ValueError, match="phase commission lasts no time"):
        staffing_balance(hours=hours_of(*ALL), people=CREW, phase_weeks=phases, hours_per_fte_h=1650)
