"""Stops of a stand against the positions that are needed."""

import pytest

from readiness.calculations.indexed_stops import stop_error_deg

SIX = [0.0, 60.0, 120.0, 180.0, 240.0, 300.0]


def test_six_stops_serve_six_positions() -> None:
    """Six stops 60 degrees apart are without error, from whichever angle they are counted."""
    assert stop_error_deg(stops_deg=SIX, positions=6) == 0.0
    assert stop_error_deg(stops_deg=[angle + 17.0 for angle in SIX], positions=6) == pytest.approx(0.0, abs=1e-9)


def test_one_stop_off() -> None:
    """A stop that is 3 degrees off is found, on either side of zero."""
    assert stop_error_deg(stops_deg=[0, 60, 123, 180, 240, 300], positions=6) == pytest.approx(3.0)
    assert stop_error_deg(stops_deg=[0, 60, 120, 180, 240, 297], positions=6) == pytest.approx(3.0)


def test_too_few_stops() -> None:
    """Four stops leave a position 30 degrees away; no stop at all half a turn."""
    assert stop_error_deg(stops_deg=[0, 90, 180, 270], positions=6) == pytest.approx(30.0)
    assert stop_error_deg(stops_deg=[], positions=6) == 180.0


def test_more_stops_serve_no_worse() -> None:
    """Twelve stops serve six positions as well as six do."""
    assert stop_error_deg(stops_deg=[30.0 * place for place in range(12)], positions=6) == pytest.approx(0.0)


def test_no_position() -> None:
    """A technique without positions does not exist."""
    with pytest.raises(ValueError, match="at least one position"):
        stop_error_deg(stops_deg=SIX, positions=0)
