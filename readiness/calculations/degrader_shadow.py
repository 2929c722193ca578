"""Whether a degrader stands in the way of every ray to the patient."""

from dataclasses import dataclass
from math import cos, radians, sin

from readiness.calculations.beam_geometry import above_zero


@dataclass(frozen=True)
class DegraderShadow:
    """
    How far a degrader reaches beyond what it has to shadow; negative where rays pass beside it.

    ``height_to_spare_cm`` is the smaller of what is left above and below.
    """

    width_to_spare_cm: float
    height_to_spare_cm: float
    highest_ray_cm: float
    lowest_ray_cm: float


def degrader_shadow(
    *,
    plane_distance_cm: float,
    tilt_deg: float,
    source_axis_distance_cm: float,
    degrader_gap_cm: float,
    degrader_width_cm: float,
    degrader_height_cm: float,
    degrader_foot_height_cm: float,
    isocentre_height_cm: float,
    soles_height_cm: float,
    hands_height_cm: float,
    field_width_cm: float,
) -> DegraderShadow:
    """
    Return by how much a degrader is wider and taller than the rays to the patient need it.

    z = z_s + (z_p - z_s) (d - g)/d, with d from the tilted source to the plane and g the gap

    Args:
        plane_distance_cm: From the nominal source to the plane. [cm]
        tilt_deg: Of both axes from the horizontal. [deg]
        source_axis_distance_cm: From the source to the isocentre. [cm]
        degrader_gap_cm: From the degrader's exit face to the plane, g. [cm]
        degrader_width_cm: Width of the sheet. [cm]
        degrader_height_cm: Height of the sheet. [cm]
        degrader_foot_height_cm: Of its lower edge above the floor. [cm]
        isocentre_height_cm: Of the isocentre above the floor. [cm]
        soles_height_cm: Of the patient's soles above the floor. [cm]
        hands_height_cm: Of the raised hands above the floor. [cm]
        field_width_cm: Width of the composite field at the plane. [cm]

    Returns:
        What is left across and along the height, and the highest and lowest ray at the degrader.

    Raises:
        ValueError: If a length is not above zero, the hands are not above the soles, or the degrader does
            not stand between source and plane.

    Valid for: an upright sheet parallel to the plane, centred on the beam.
    Assumes: straight rays along the height; across, the whole width of the field, so that divergence is left
        as room for scatter.
    Source: derived.
    """
    for name, length in (("a width", degrader_width_cm), ("a height", degrader_height_cm)):
        above_zero(f"{name} of the degrader", length)
    if hands_height_cm <= soles_height_cm:
        raise ValueError("raised hands are above the soles")
    ahead = plane_distance_cm - source_axis_distance_cm * (1 - cos(radians(tilt_deg)))
    if not 0 <= degrader_gap_cm < ahead:
        raise ValueError("the degrader does not stand between source and plane")
    part = (ahead - degrader_gap_cm) / ahead
    off_axis = source_axis_distance_cm * sin(radians(tilt_deg))
    sources = [isocentre_height_cm - off_axis, isocentre_height_cm + off_axis]
    highest = max(source + (hands_height_cm - source) * part for source in sources)
    lowest = min(source + (soles_height_cm - source) * part for source in sources)
    top = degrader_foot_height_cm + degrader_height_cm
    return DegraderShadow(
        width_to_spare_cm=degrader_width_cm - field_width_cm,
        height_to_spare_cm=min(top - highest, lowest - degrader_foot_height_cm),
        highest_ray_cm=highest,
        lowest_ray_cm=lowest,
    )
