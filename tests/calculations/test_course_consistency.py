"""The numbers of a course agree with each other, or the slip is named."""

import pytest

from readiness.calculations.course_consistency import (
    course_contradictions,
    course_dose,
    cycles_per_week,
    undisturbed_weeks,
)

STANDARD = {
    "total_dose_gy": 36.0,
    "dose_per_cycle_gy": 2.0,
    "cycles": 18,
    "sessions_per_cycle": 2,
    "sessions_per_week": 4,
    "break_after_cycle": 10,
}


def test_standard_course_is_consistent() -> None:
    """36 Gy are 18 cycles of 2 Gy in nine weeks, ten with the break week."""
    assert () == course_contradictions(**STANDARD).rows
    assert 36.0 == course_dose(dose_per_cycle_gy=2.0, cycles=18)
    weeks = {"cycles": 18, "sessions_per_cycle": 2, "sessions_per_week": 4}
    assert 9.0 == undisturbed_weeks(**weeks, break_weeks=0.0)
    assert 10.0 == undisturbed_weeks(**weeks, break_weeks=1.0)


@pytest.mark.parametrize(
    ("changes", "follows", "hint"),
    [
        ({"dose_per_cycle_gy": 1.0}, 18.0, "looks like the dose of one session"),
        ({"cycles": 36, "break_after_cycle": 0}, 72.0, "looks like the number of sessions"),
        ({"total_dose_gy": 30.0}, 36.0, ""),
    ],
)
def test_total_that_the_cycles_do_not_make(changes: dict, follows: float, hint: str) -> None:
    """A total that does not follow is one contradiction, with the slip that would explain it."""
    ((what, _, found, said),) = course_contradictions(**(STANDARD | changes)).rows
    assert "total dose in Gy against cycles times dose per cycle" == what
    assert follows == found
    assert hint in said


def test_hundredth_of_a_gray_is_not_a_contradiction() -> None:
    """Thirteen cycles of 1.54 Gy are stated as 20.02 Gy."""
    course = STANDARD | {"total_dose_gy": 20.02, "dose_per_cycle_gy": 1.54, "cycles": 13}
    assert () == course_contradictions(**course).rows


def test_each_contradiction_has_its_row() -> None:
    """Too few sessions a week and a break after the end are two rows."""
    rows = course_contradictions(**(STANDARD | {"sessions_per_week": 1, "break_after_cycle": 18})).rows
    assert [
        "sessions a week against sessions of a cycle",
        "cycle before the break against cycles of the course",
    ] == [row[0] for row in rows]


def test_odd_sessions_are_not_used() -> None:
    """Five sessions a week hold two cycles of two sessions; the fifth is not half a cycle."""
    assert 2 == cycles_per_week(sessions_per_cycle=2, sessions_per_week=5)


@pytest.mark.parametrize(
    ("sessions_per_cycle", "sessions_per_week", "message"),
    [(2, 1, "do not hold a cycle of 2"), (0, 4, "at least one session"), (2, 8, "1 to 7 sessions")],
)
def test_weeks_that_cannot_be(sessions_per_cycle: int, sessions_per_week: int, message: str) -> None:
    """A week without room for one cycle is refused with words."""
    with pytest.raises(ValueError, match=message):
        cycles_per_week(sessions_per_cycle=sessions_per_cycle, sessions_per_week=sessions_per_week)


@pytest.mark.parametrize(
    ("call", "arguments"),
    [
        (course_dose, {"dose_per_cycle_gy": -2.0, "cycles": 18}),
        (course_dose, {"dose_per_cycle_gy": 2.0, "cycles": 0}),
        (course_contradictions, STANDARD | {"sessions_per_cycle": 0}),
        (
            undisturbed_weeks,
            {"cycles": 18, "sessions_per_cycle": 2, "sessions_per_week": 4, "break_weeks": -1.0},
        ),
    ],
)
def test_impossible_numbers_raise(call, arguments: dict) -> None:
    """Negative doses, no cycles and negative breaks are refused."""
    with pytest.raises(ValueError):  # noqa: PT011  (each message is a sentence of its own)
        call(**arguments)
