"""Heights of a standing arrangement: stand, patient with raised arms, ceiling, treatment head."""

from math import ceil

from readiness.assessment.definition import Definition
from readiness.calculations.room_reach import (
    ceiling_clearance_cm,
    head_clearance,
    mid_height_off_axis_cm,
    raised_hands_height_cm,
    stand_height_for_axis_cm,
    step_caution,
)

SAME_STEP = 1e-9


def wanted_stand_height(
    *, isocentre_height_cm: float, shortest_patient_cm: float, tallest_patient_cm: float
) -> float:
    """Return the height of a stand that brings the middle of the patients' range to the beam axis."""
    middle = (shortest_patient_cm + tallest_patient_cm) / 2
    return stand_height_for_axis_cm(isocentre_height_cm=isocentre_height_cm, patient_height_cm=middle)


def largest_mid_height_offset(
    *,
    isocentre_height_cm: float,
    stand_height_cm: float,
    shortest_patient_cm: float,
    tallest_patient_cm: float,
) -> float:
    """Return how far half the height of the shortest or tallest patient lies from the axis at most."""
    return max(
        abs(
            mid_height_off_axis_cm(
                isocentre_height_cm=isocentre_height_cm,
                patient_height_cm=height,
                stand_height_cm=stand_height_cm,
            )
        )
        for height in (shortest_patient_cm, tallest_patient_cm)
    )


def tallest_under_ceiling(
    *, ceiling_height_cm: float, stand_height_cm: float, coverage_ratio: float
) -> float:
    """Return the height of the tallest patient whose raised hands stay under the ceiling."""
    return (ceiling_height_cm - stand_height_cm) / coverage_ratio


def under_ceiling_in_words(
    *, tallest_under_ceiling_cm: float, stand_height_cm: float, ceiling_clearance_cm: float
) -> str:
    """Return who would fit under the ceiling on this stand, and how high a stand may be for everybody."""
    who = f"On this stand patients up to {tallest_under_ceiling_cm:.0f} cm fit"
    height = stand_height_cm + ceiling_clearance_cm
    if height < 0:
        return f"{who}; the tallest would not fit even without a stand."
    return f"{who}; the tallest would fit on a stand of at most {height:.0f} cm."


def caution(*, stand_height_cm: float, step_height_cm: float) -> str:
    """Return what to heed about climbing the stand."""
    return step_caution(stand_height_cm=stand_height_cm, step_height_cm=step_height_cm) or "nothing"


def steps_needed(*, stand_height_cm: float, step_height_cm: float) -> int:
    """Return how many steps lead up to a stand."""
    return ceil(stand_height_cm / step_height_cm - SAME_STEP)


_STAND = {"stand_height_cm": "stand.height_cm"}
_AXIS = {"isocentre_height_cm": "room.isocentre_height_cm"}
_RANGE = {
    "shortest_patient_cm": "program.shortest_patient_cm",
    "tallest_patient_cm": "program.tallest_patient_cm",
}
_STEP = {**_STAND, "step_height_cm": "criterion.step_height_cm"}


def _made(name: str, meaning: str, by: object, takes: dict[str, str], formula: str = "") -> Definition:
    """Return a value that follows from lengths alone."""
    return Definition(
        name, meaning, by=by, takes=takes, source="definition", known="derived", formula=formula  # type: ignore[arg-type]
    )


def _head(name: str, meaning: str, part: str) -> Definition:
    """Return a clearance of the treatment head."""
    return Definition(
        f"arrangement.{name}", meaning, of="arrangement.head_clearance", part=part,
        source="definition", known="derived",
    )  # fmt: skip


DEFINITIONS: tuple[Definition, ...] = (
    _made(
        "arrangement.stand_height_wanted_cm",
        "Height of the stand that brings half the height of a patient of middling height to the beam axis.",
        wanted_stand_height,
        {**_AXIS, **_RANGE},
        "h_stand = h_iso - L/2",
    ),
    _made(
        "arrangement.mid_height_off_axis_cm",
        "Distance from the beam axis to half the height of the shortest or tallest patient, the larger one.",
        largest_mid_height_offset,
        {**_AXIS, **_STAND, **_RANGE},
        "|h_stand + L/2 - h_iso|",
    ),
    _made(
        "arrangement.raised_hands_height_cm",
        "Height of the tallest patient's raised hands above the floor.",
        raised_hands_height_cm,
        {
            **_STAND,
            "patient_height_cm": "program.tallest_patient_cm",
            "coverage_ratio": "criterion.coverage_ratio",
        },
        "h_stand + 1.25 L",
    ),
    _made(
        "arrangement.ceiling_clearance_cm",
        "Clearance between the tallest patient's raised hands and the ceiling; negative if they do not fit.",
        ceiling_clearance_cm,
        {
            "ceiling_height_cm": "room.ceiling_height_cm",
            "raised_hands_height_cm": "arrangement.raised_hands_height_cm",
        },
    ),
    _made(
        "arrangement.tallest_under_ceiling_cm",
        "Height of the tallest patient whose raised hands stay under the ceiling on this stand.",
        tallest_under_ceiling,
        {
            **_STAND,
            "ceiling_height_cm": "room.ceiling_height_cm",
            "coverage_ratio": "criterion.coverage_ratio",
        },
    ),
    _made(
        "arrangement.ceiling_would_do",
        "Who fits under the ceiling on this stand, and what stand the tallest would need.",
        under_ceiling_in_words,
        {
            **_STAND,
            "tallest_under_ceiling_cm": "arrangement.tallest_under_ceiling_cm",
            "ceiling_clearance_cm": "arrangement.ceiling_clearance_cm",
        },
    ),
    _made("stand.steps_needed", "Number of steps that lead up to its surface.", steps_needed, _STEP),
    _made("stand.step_caution", "What to heed about climbing it.", caution, _STEP),
    Definition(
        "arrangement.head_clearance",
        "Clearances of the treatment head at the two tilted angles.",
        by=head_clearance,
        takes={
            **_AXIS,
            "tilt_deg": "arrangement.room_tilt_deg",
            "head_radius_cm": "machine.head_radius_cm",
            "head_end_cm": "machine.head_end_cm",
            "ceiling_height_cm": "room.ceiling_height_cm",
        },
        model=True,
        internal=True,
    ),
    _head(
        "head_above_floor_cm",
        "Clearance of the treatment head above the floor with the field aimed at the head.",
        "head_above_floor_cm",
    ),
    _head(
        "head_below_ceiling_cm",
        "Clearance of the treatment head below the ceiling with the field aimed at the feet.",
        "head_below_ceiling_cm",
    ),
)
