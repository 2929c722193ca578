"""Turns of a platform during a beam."""

import pytest

from readiness.calculations.platform_turns import turns_during_beam


def test_turns_close_by_hand():
    """Three minutes at 20 s a turn are nine turns."""
    assert turns_during_beam(beam_min=3.0, turn_time_s=20.0) == 9.0


def test_a_slower_platform_turns_less():
    """Half the speed makes half the turns."""
    assert turns_during_beam(beam_min=3.0, turn_time_s=40.0) == 4.5


def test_a_beam_of_no_time_does_not_exist():
    """Without a beam there is no turn to count."""
    with pytest.raises(ValueError, match="does not exist"):
        turns_during_beam(beam_min=0.0, turn_time_s=20.0)
