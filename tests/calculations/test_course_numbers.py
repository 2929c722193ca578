"""What follows from the numbers of a course, and what is refused."""

import pytest

from readiness.calculations.course_numbers import (
    course_dose,
    cycles_per_week,
    undisturbed_weeks,
)


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
