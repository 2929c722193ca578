"""A lying patient is not asked for what only a standing one has."""

import pytest

from readiness.assessment.absence import is_for_standing_only, unknown_owner
from readiness.assessment.records import Ref
from tests.assessment.small import item

LYING = Ref("arrangement", "a/linac/e6/vertical/moving-couch/sheet/carrier")


@pytest.mark.parametrize(
    ("name", "plan", "only_standing"),
    [
        ("plan.plane_distance_cm", {"technique": "moving-couch"}, True),
        ("plan.b_factor", {"couch": "carrier"}, True),
        ("plan.couch_speed_cm_per_s", {"technique": "moving-couch"}, False),
        ("plan.plane_distance_cm", {"technique": "six-position"}, False),
        ("plan.plane_distance_cm", {}, False),
    ],
)
def test_fields_of_a_standing_patient(name: str, plan: dict[str, str], only_standing: bool) -> None:
    """The plan of a couch has no plane distance to state; one without a technique may be for either."""
    assert only_standing is is_for_standing_only(name, item("plan", "p", **plan))


def test_an_arrangement_with_a_couch_is_not_told_to_choose_a_stand() -> None:
    """With a couch the answer is that it is measured; without either a stand is asked for."""
    with_couch = unknown_owner("stand", LYING, {"couch": "carrier"})
    assert ("validity", True) == (with_couch.kind, with_couch.words.startswith("Measure for a patient on a moving couch"))
    assert "Describe or choose a stand" in unknown_owner("stand", LYING, {}).words
