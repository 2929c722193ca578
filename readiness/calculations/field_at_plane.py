"""
Single and dual fields at the treatment plane: profiles and map.

Heights of a single field count from the isocentre; those of a dual field from the patient's mid-height, which
rarely stands exactly at the isocentre. Doses are relative to the centre of the profile or map.
"""


import numpy as np
from numpy.typing import ArrayLike, NDArray

from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.tilted_field import dual_field, tilted_fields
from readiness.quantities import Table

Array = NDArray[np.float64]

HEIGHT_STEP_CM = 1.0
ACROSS_STEP_CM = 2.0
MAP_STEP_CM = 10.0


def even_grid(*, half_length_cm: float, step_cm: float) -> Array:
    """
    Return positions from minus to plus a half length in equal steps, the ends and 0 included.

    Args:
        half_length_cm: Half of the length. [cm]
        step_cm: Largest step. [cm]

    Returns:
        Rising positions, an odd number of them. [cm]

    Raises:
        ValueError: If a length is not positive.

    Valid for: any length.
    Assumes: the step is made smaller so that it fits.
    Source: our own convention.
    """
    if half_length_cm <= 0 or step_cm <= 0:
        raise ValueError("a length and a step must be positive")
    count = max(2, int(np.ceil(half_length_cm / step_cm - 1e-9)))
    positions = np.linspace(0.0, half_length_cm, count + 1)
    return np.concatenate([-positions[:0:-1], positions])


def single_field_doses(
    *, setup: FieldSetup, plane_distance_cm: float, tilt_deg: float, heights_cm: ArrayLike
) -> Array:
    """
    Return the dose of a single field along the height, relative to the isocentre's height.

    Args:
        setup: The beam and the room, from field_setup.
        plane_distance_cm: From the nominal source to the plane. [cm]
        tilt_deg: Of the axis above the horizontal; negative for a field aimed at the feet. [°]
        heights_cm: Heights from the isocentre, shape (n,). [cm]

    Returns:
        Relative doses, shape (n,). [1]

    Raises:
        ValueError: If a number is impossible.
        OutsideValidity: If energy, distance or tilt lie outside the model, or the degrader stops the beam.

    Valid for: 4 to 12 MeV and 300 to 500 cm: within 0.04 of the centre up to 100 cm from the axis.
    Assumes: no collimator, wall or floor scatter.
    Source: own-fit (fit) to own-monte-carlo on the moments of eyges-1948.
    """
    heights = np.asarray(heights_cm, dtype=float)
    wanted = np.concatenate([[0.0], np.sign(tilt_deg or 1.0) * heights])
    middle = np.array([0.0])
    doses = tilted_fields(setup, np.array([abs(tilt_deg)]), plane_distance_cm, wanted, middle)[0, :, 0]
    result: Array = doses[1:] / doses[0]
    return result


def dual_field_doses(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    tilt_toward_head_deg: float,
    tilt_toward_feet_deg: float,
    mid_height_cm: float,
    mu_share_upper: float,
    heights_cm: ArrayLike,
    across_cm: ArrayLike,
) -> Array:
    """
    Return the dose of a dual field over a grid of the plane, relative to mid-height in the middle.

    Args:
        setup: The beam and the room, from field_setup.
        plane_distance_cm: From the nominal source to the plane. [cm]
        tilt_toward_head_deg: Of the axis aimed at the head above the horizontal. [°]
        tilt_toward_feet_deg: Of the axis aimed at the feet below the horizontal, positive. [°]
        mid_height_cm: Of the patient's mid-height above the isocentre; negative below it. [cm]
        mu_share_upper: Part of the pair's MU that the field aimed at the head gets. [1]
        heights_cm: Heights from mid-height, shape (n,). [cm]
        across_cm: Positions across, shape (m,). [cm]

    Returns:
        Relative doses, shape (n, m). [1]

    Raises:
        ValueError: If a number is impossible.
        OutsideValidity: If energy, distance or a tilt lie outside the model, or the degrader stops the beam.

    Valid for: 4 to 12 MeV and 300 to 500 cm: half-range within 2.5 %, best angle within 0.5 degrees of
        own-monte-carlo; a machine differs by its foils.
    Assumes: both fields alike but for tilt and MU; no collimator, wall or floor scatter.
    Source: own-fit (fit) to own-monte-carlo on the moments of eyges-1948.
    """
    if not 0 < mu_share_upper < 1:
        raise ValueError("the upper field's part of the MU must lie between 0 and 1")
    if tilt_toward_head_deg < 0 or tilt_toward_feet_deg < 0:
        raise ValueError("both tilts of a dual field are given as positive angles")
    heights, across = np.asarray(heights_cm, dtype=float), np.asarray(across_cm, dtype=float)
    tilts = (tilt_toward_head_deg, tilt_toward_feet_deg)

    def doses(at: Array, beside: Array) -> Array:
        """Return the dose at heights from the isocentre."""
        return dual_field(setup, *tilts, plane_distance_cm, at, beside, mu_share_upper)

    centre = doses(np.array([mid_height_cm]), np.array([0.0]))[0, 0]
    result: Array = doses(heights + mid_height_cm, across) / centre
    return result


def profile_table(*, positions_cm: ArrayLike, doses: ArrayLike, position_name: str) -> Table:
    """
    Return a profile as a table.

    Args:
        positions_cm: Positions, shape (n,). [cm]
        doses: Relative doses, shape (n,). [1]
        position_name: What the positions are: height or across.

    Returns:
        Columns position_name_cm and relative_dose.

    Raises:
        ValueError: If the lengths differ.

    Valid for: any profile.
    Assumes: nothing.
    Source: our own convention.
    """
    rows = zip(np.asarray(positions_cm, dtype=float), np.asarray(doses, dtype=float), strict=True)
    return Table.of([f"{position_name}_cm", "relative_dose"], [(float(at), float(dose)) for at, dose in rows])


def map_table(*, heights_cm: ArrayLike, across_cm: ArrayLike, doses: ArrayLike) -> Table:
    """
    Return a map of the plane as a table, one row a point.

    Args:
        heights_cm: Heights from mid-height, shape (n,). [cm]
        across_cm: Positions across, shape (m,). [cm]
        doses: Relative doses, shape (n, m). [1]

    Returns:
        Columns height_cm, across_cm and relative_dose.

    Raises:
        ValueError: If the shape of the doses does not fit.

    Valid for: any map.
    Assumes: nothing.
    Source: our own convention.
    """
    heights, across = np.asarray(heights_cm, dtype=float), np.asarray(across_cm, dtype=float)
    values = np.asarray(doses, dtype=float)
    if values.shape != (len(heights), len(across)):
        raise ValueError("a map needs one dose for each height and position across")
    rows = [
        (float(height), float(beside), float(values[i, j]))
        for i, height in enumerate(heights)
        for j, beside in enumerate(across)
    ]
    return Table.of(["height_cm", "across_cm", "relative_dose"], rows)
