"""Two tilts for a patient who does not stand at the isocentre's height."""

from typing import Any

import numpy as np
import pytest
from beam_setups import common_setup

from readiness.calculations.unequal_tilts import UnequalTilts, best_unequal_tilts

TILTS = np.arange(10.0, 22.1, 0.5)


def found(mid_height: float, **changes: Any) -> UnequalTilts:
    """Return the best pair."""
    given: dict[str, Any] = {
        "setup": common_setup(),
        "plane_distance_cm": 400.0,
        "mid_height_cm": mid_height,
        "mu_share_upper": 0.5,
        "uniformity_half_length_cm": 80.0,
        "metric": "stricter",
        "tilts_deg": TILTS,
        **changes,
    }
    return best_unequal_tilts(**given)


def test_patient_at_the_isocentre_needs_nearly_equal_tilts() -> None:
    """At the isocentre's height the best pair is equal to one step of the search."""
    pair = found(0.0)
    assert abs(pair.tilt_toward_head_deg - pair.tilt_toward_feet_deg) <= 0.5
    assert pair.vertical_percent <= pair.vertical_percent_of_equal


def test_high_patient_needs_the_larger_tilt_above() -> None:
    """A patient 10 cm too high needs the larger tilt toward the head; too low, toward the feet."""
    high, low = found(10.0), found(-10.0)
    assert high.tilt_toward_head_deg > high.tilt_toward_feet_deg
    assert (low.tilt_toward_feet_deg, low.tilt_toward_head_deg) == (high.tilt_toward_head_deg, high.tilt_toward_feet_deg)


def test_ten_centimetres_are_harmless_and_unequal_tilts_help_beyond() -> None:
    """10 cm off the axis change little; at 25 cm unequal tilts gain over a length of 2 m."""
    assert found(10.0, metric="half-range").vertical_percent_of_equal < 4
    far = found(25.0, uniformity_half_length_cm=100.0)
    assert far.vertical_percent < far.vertical_percent_of_equal - 0.5


@pytest.mark.parametrize(
    ("changes", "words"),
    [({"tilts_deg": []}, "positive and rise"), ({"tilts_deg": [16.0, 15.0]}, "positive and rise"), ({"mu_share_upper": 0.0}, "between 0 and 1")],
)
def test_impossible_searches_are_refused(changes: dict[str, Any], words: str) -> None:
    """Tilts rise and both fields get MU."""
    with pytest.raises(ValueError, match=words):
        found(0.0, **changes)
