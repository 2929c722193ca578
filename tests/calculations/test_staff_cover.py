"""Who is left when one person is away."""

import pytest

from readiness.calculations.staff_cover import (
    cover_with_one_away,
    persons_at_once,
    qualified_at_console,
    qualified_at_console_with_one_away,
)
from readiness.calculations.staff_hours import BALANCE, PEOPLE, TASKS
from readiness.quantities import Table

TASK_LIST = Table.of(
    TASKS,
    [
        ("sessions", "therapist", "session", 60, 2),
        ("first cycles", "therapist", "first-cycle-session", 60, 3),
        ("in-vivo placement", "physicist", "first-cycle-session", 120, 1),
    ],
)
CREW = Table.of(
    PEOPLE,
    [
        ("P1", "physicist", 0.10, True),
        ("P2", "physicist", 0.05, False),
        ("T1", "therapist", 0.10, True),
        ("T2", "therapist", 0.10, True),
        ("T3", "therapist", 0.10, True),
        ("T4", "therapist", 0.10, None),
    ],
)


def balance(**needed: float) -> Table:
    """Return a balance that needs these full-time equivalents."""
    rows = [("operate", role, 1.0, 0, 52.0, fte, 0.0, 0.0, 0.0) for role, fte in needed.items()]
    return Table.of(BALANCE, rows)


def covered(tasks: Table = TASK_LIST, people: Table = CREW, needs: Table | None = None) -> dict[str, dict]:
    """Return the cover by person away."""
    needs = needs or balance(therapist=0.32, physicist=0.15)
    return {row["away"]: row for row in cover_with_one_away(tasks=tasks, people=people, balance=needs).records()}


def test_console_counts_qualified_people_of_its_roles():
    """Three of four therapists are qualified; with one away two are left; physicists count only where stated."""
    assert qualified_at_console(people=CREW, console_professions=["therapist"]) == 3
    assert qualified_at_console_with_one_away(people=CREW, console_professions=["therapist"]) == 2
    assert qualified_at_console(people=CREW, console_professions=["therapist", "physicist"]) == 4


def test_an_empty_console_stays_empty():
    """Without anybody qualified nobody is left, not fewer than nobody."""
    nobody = Table.of(PEOPLE, [("T1", "therapist", 0.1, False)])
    assert qualified_at_console(people=nobody, console_professions=["therapist"]) == 0
    assert qualified_at_console_with_one_away(people=nobody, console_professions=["therapist"]) == 0


def test_two_therapists_left_run_a_session_but_not_a_first_cycle():
    """Sessions take two, first cycles three: with one qualified therapist away only the first is covered."""
    row = covered()["T1"]
    assert row["qualified_left_persons"] == 2
    assert row["session_covered"] is True
    assert row["first_cycle_covered"] is False
    assert row["left_fte"] == pytest.approx(0.2)
    assert row["hours_covered"] is False


def test_the_only_qualified_physicist_has_no_cover():
    """With P1 away nobody is left for a first cycle; with P2 away P1 is."""
    cover = covered()
    assert cover["P1"]["first_cycle_covered"] is False
    assert cover["P2"]["first_cycle_covered"] is True


def test_a_person_without_qualification_is_not_missed():
    """Three qualified therapists remain when the fourth, of whom nothing is known, is away."""
    assert covered()["T4"]["first_cycle_covered"] is True


def test_hours_are_covered_when_the_rest_reaches_the_need_exactly():
    """0.2 FTE left against 0.2 needed is enough."""
    assert covered(needs=balance(therapist=0.2))["T1"]["hours_covered"] is True


def test_unknown_needs_are_never_covered():
    """Blank persons or minutes leave the answer blank."""
    blank = Table.of(TASKS, [("sessions", "therapist", "session", 60, None)])
    unknown = Table.of(BALANCE, [("operate", "therapist", 1.0, 1, 52.0, 0.1, 0.0, 0.0, None)])
    row = covered(tasks=blank, needs=unknown)["T1"]
    assert row["session_covered"] is None
    assert row["first_cycle_covered"] is None
    assert row["hours_covered"] is None


def test_unknown_time_is_never_enough():
    """With the time of one of the rest blank, hours are not said to be covered."""
    crew = Table.of(PEOPLE, [("P1", "physicist", 0.1, True), ("P2", "physicist", None, True)])
    cover = covered(people=crew, needs=balance(physicist=0.05))
    assert cover["P1"]["hours_covered"] is None
    assert cover["P2"]["hours_covered"] is True


def test_a_role_of_which_nobody_is_listed_is_nobody_away():
    """Time without a person has no row of its own."""
    crew = Table.of(PEOPLE, [(None, "physicist", 0.1, False), ("P2", "physicist", 0.1, True)])
    assert set(covered(people=crew)) == {"P2"}


def test_roles_without_recurring_tasks_have_no_cover_to_show():
    """Only roles of the running program appear."""
    assert set(covered(needs=balance(physicist=0.1))) == {"P1", "P2"}


def test_largest_number_of_people_counts():
    """Two tasks of one session take the people of the larger one."""
    assert persons_at_once(tasks=TASK_LIST, profession="therapist", per="session") == 2
    assert persons_at_once(tasks=TASK_LIST, profession="nurse", per="session") == 0


def test_impossible_questions_are_refused():
    """A console without roles and persons in words have no answer."""
    with pytest.raises(ValueError, match="no profession is stated"):
        qualified_at_console(people=CREW, console_professions=[])
    words = Table.of(TASKS, [("sessions", "therapist", "session", 60, "two")])
    with pytest.raises(ValueError, match="persons of 'sessions' is not a number"):
        persons_at_once(tasks=words, profession="therapist", per="session")
