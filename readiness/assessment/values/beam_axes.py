"""Where both beam axes meet the plane, against the body of the tallest patient."""

from readiness.assessment.definition import Definition
from readiness.calculations.beam_geometry import axis_height_at_plane_cm


def axis_above_floor(
    *,
    plane_distance_cm: float,
    tilt_deg: float,
    source_axis_distance_cm: float,
    isocentre_height_cm: float,
) -> float:
    """Return the height above the floor at which the axis aimed at the head meets the plane."""
    return isocentre_height_cm + axis_height_at_plane_cm(
        plane_distance_cm=plane_distance_cm,
        source_axis_distance_cm=source_axis_distance_cm,
        tilt_deg=tilt_deg,
    )


def lower_axis_above_floor(
    *,
    plane_distance_cm: float,
    tilt_deg: float,
    source_axis_distance_cm: float,
    isocentre_height_cm: float,
) -> float:
    """Return the height above the floor at which the axis aimed at the feet meets the plane."""
    return isocentre_height_cm + axis_height_at_plane_cm(
        plane_distance_cm=plane_distance_cm,
        source_axis_distance_cm=source_axis_distance_cm,
        tilt_deg=-tilt_deg,
    )


def clear_of_body(
    *, upper_axis_cm: float, lower_axis_cm: float, stand_height_cm: float, patient_height_cm: float
) -> float:
    """Return by how much the nearer axis clears head or soles; negative if it meets the body."""
    return min(upper_axis_cm - (stand_height_cm + patient_height_cm), stand_height_cm - lower_axis_cm)


def farthest_from_axis(
    *, isocentre_height_cm: float, stand_height_cm: float, patient_height_cm: float
) -> float:
    """Return how far soles or head of a patient on the stand lie from the height of the beam axis."""
    return max(
        abs(stand_height_cm - isocentre_height_cm),
        abs(stand_height_cm + patient_height_cm - isocentre_height_cm),
    )


_GEOMETRY = {
    "plane_distance_cm": "arrangement.study_distance_cm",
    "tilt_deg": "arrangement.study_tilt_deg",
    "source_axis_distance_cm": "machine.source_axis_distance_cm",
    "isocentre_height_cm": "room.isocentre_height_cm",
}
_PATIENT = {"stand_height_cm": "stand.height_cm", "patient_height_cm": "program.tallest_patient_cm"}

DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.upper_axis_height_cm",
        "Height above the floor at which the axis aimed at the head meets the treatment plane.",
        by=axis_above_floor,
        takes=_GEOMETRY,
        source="definition",
        known="derived",
        formula="h = h_iso + (D - SAD) tan t",
    ),
    Definition(
        "arrangement.lower_axis_height_cm",
        "Height above the floor at which the axis aimed at the feet meets the treatment plane.",
        by=lower_axis_above_floor,
        takes=_GEOMETRY,
        source="definition",
        known="derived",
        formula="h = h_iso - (D - SAD) tan t",
    ),
    Definition(
        "arrangement.axes_clear_by_cm",
        "By how much the nearer beam axis clears head or soles of the tallest patient; negative if it meets"
        " the body.",
        by=clear_of_body,
        takes={
            "upper_axis_cm": "arrangement.upper_axis_height_cm",
            "lower_axis_cm": "arrangement.lower_axis_height_cm",
            **_PATIENT,
        },
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.needed_half_length_cm",
        "Distance from the beam axis to the farther of soles and head of the tallest patient on the stand.",
        by=farthest_from_axis,
        takes={"isocentre_height_cm": "room.isocentre_height_cm", **_PATIENT},
        source="definition",
        known="derived",
    ),
)
