"""Drawings to scale for page and binder; each shows only values that stand in the assessment."""

from readiness.assessment.records import Assessment
from readiness.outputs.barrier_picture import draw_barriers
from readiness.outputs.body_picture import draw_body
from readiness.outputs.drawing import drawn
from readiness.outputs.lookup import Lookup
from readiness.outputs.room_elevation_picture import draw_room_elevation
from readiness.outputs.room_plan_picture import draw_room_plan

# name, clockwise turn of the patient seen from above (degrees, 0 faces the beam), day of the cycle
_POSITIONS = (
    ("AP", 0, 1),
    ("RPO", -120, 1),
    ("LPO", 120, 1),
    ("PA", 180, 2),
    ("RAO", -60, 2),
    ("LAO", 60, 2),
)


def make_pictures(assessment: Assessment) -> dict[str, str]:
    """Return the drawings by name; one whose values are missing is left out."""
    lookup = Lookup(assessment)
    found = {
        "room-plan": draw_room_plan(lookup),
        "room-elevation": draw_room_elevation(lookup),
        "barriers": draw_barriers(lookup),
        "in-vivo-body": draw_body(lookup),
        "six-positions": _positions() if lookup.technique in ("", "six-position") else None,
    }
    return {name: svg for name, svg in found.items() if svg is not None}


def _positions() -> str:
    places = [
        {"name": name, "turn": turn, "day": day, "x": 60 + 120 * index}
        for index, (name, turn, day) in enumerate(_POSITIONS)
    ]
    words = "Six positions 60 degrees apart: AP, RPO and LPO on day 1; PA, RAO and LAO on day 2."
    return drawn("six-positions", {"positions": places, "words": words})
