"""One session minute by minute."""

from itertools import pairwise

import pytest

from readiness.calculations.session_timeline import SessionTimes, beam_minutes, session_times, standing_margin

MINUTES = {
    "first_beam_min": 1.0,
    "second_beam_min": 1.0,
    "preparation_min": 10.0,
    "shields_min": 5.0,
    "in_vivo_placement_min": 60.0,
    "turning_min": 3.0,
    "gantry_move_min": 1.5,
    "mode_entry_min": 5.0,
    "mode_return_min": 6.0,
    "cleaning_min": 4.0,
}
POSITIONS = ("AP", "RPO", "LPO")


def timed(**changes) -> SessionTimes:
    return session_times(**({"positions": POSITIONS, "posture": "standing"} | MINUTES | changes))


def test_session_adds_up_by_hand() -> None:
    """5 + 10 + 5 + 3 x (3 + 1 + 1.5 + 1) + 6 + 4 are 49.5 min, with detectors 109.5 min."""
    found = timed()
    assert (109.5, 49.5) == (found.first_session_min, found.later_session_min)
    assert (6.0, 6.5, 19.5) == (found.beam_min, found.longest_position_min, found.standing_min)


def test_steps_follow_each_other() -> None:
    """Each step starts when the one before ends, and only the first session has detectors."""
    found = timed()
    for timeline in (found.first, found.later):
        rows = list(timeline.records())
        assert rows[0]["start_min"] == 0
        assert all(before["end_min"] == pytest.approx(after["start_min"]) for before, after in pairwise(rows))
    assert "place skin detectors" in found.first.column("step")
    assert "place skin detectors" not in found.later.column("step")
    assert POSITIONS == tuple(dict.fromkeys(name for name in found.later.column("position") if name))


def test_beam_time_is_monitor_units_over_rate() -> None:
    """1,919 MU at 2,000 MU/min take 58 s; at 600 MU/min more than three minutes; no MU take no time."""
    assert 57.57 == pytest.approx(60 * beam_minutes(beam_mu=1919.0, rate_mu_per_min=2000.0))
    assert beam_minutes(beam_mu=1919.0, rate_mu_per_min=600.0) > 3
    assert beam_minutes(beam_mu=0.0, rate_mu_per_min=600.0) == 0


def test_single_field_needs_no_gantry_move() -> None:
    """A moving couch with one field per incidence has neither a gantry move nor standing time."""
    found = timed(posture="lying", second_beam_min=0.0, positions=("supine", "prone"))
    assert "move the gantry" not in found.later.column("step")
    assert found.standing_min == 0
    assert 4.0 == found.longest_position_min


@pytest.mark.parametrize("part", sorted(MINUTES))
def test_every_minute_counts(part: str) -> None:
    """A longer part makes the first session longer; detectors alone leave later sessions as they are."""
    longer = timed(**{part: MINUTES[part] + 1})
    assert longer.first_session_min > timed().first_session_min
    assert (longer.later_session_min > timed().later_session_min) == (part != "in_vivo_placement_min")


def test_standing_margin_has_a_sign() -> None:
    """6.5 min leave 1.5 min to a patient who stands 8 min, and ask 2.5 min too much of one who stands 4."""
    assert 1.5 == standing_margin(longest_position_min=6.5, standing_time_min=8.0)
    assert -2.5 == standing_margin(longest_position_min=6.5, standing_time_min=4.0)


@pytest.mark.parametrize(
    ("changes", "message"),
    [
        ({"positions": ()}, "at least one position"),
        ({"posture": "sitting"}, "'sitting' is not standing or lying"),
        ({"turning_min": -1.0}, "'take the position' cannot take -1.0 min"),
        ({"cleaning_min": float("nan")}, "'clean and clear' cannot take nan min"),
    ],
)
def test_sessions_that_cannot_be(changes: dict, message: str) -> None:
    """No position, an unknown posture or a negative time is refused with words."""
    with pytest.raises(ValueError, match=message):
        timed(**changes)


def test_beams_and_margins_that_cannot_be() -> None:
    """A beam without a rate and a negative standing time are refused."""
    with pytest.raises(ValueError, match="cannot be delivered"):
        beam_minutes(beam_mu=100.0, rate_mu_per_min=0.0)
    with pytest.raises(ValueError, match="not negative"):
        standing_margin(longest_position_min=-1.0, standing_time_min=4.0)
