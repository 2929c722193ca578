"""Spread of the scattering foil and shift of the centre, fitted to a measured single-field profile."""

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.optimize import least_squares

from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.tilted_field import tilted_fields
from readiness.calculations.usable_readings import plateau_remarks, usable_profile
from readiness.errors import OutsideValidity
from readiness.quantities import Uncertain
from readiness.units import printed

Array = NDArray[np.float64]
Model = Callable[[Array, float], Array]

LOWEST_SPREAD, HIGHEST_SPREAD = 0.02, 0.60  # tangents; 0.15 to 0.25 is usual
USUAL_SPREAD = 0.20
FEWEST_POINTS = 5  # three numbers are fitted, two readings are left to show the scatter
FEW_POINTS = 9
UNCERTAIN_SPREAD = 0.03  # the range 0.15 to 0.25 moves the best angle by a degree
SHIFT_WORTH_SAYING_CM = 2.0  # the stated tolerance of distances in the room
POOR_RESIDUAL_PERCENT = 2.0
OTHER_UNIT = (("millimetres", 10.0), ("inches", 1 / 2.54), ("decimetres", 0.1))  # as many in one cm column
UNIT_WITHIN = 0.12


@dataclass(frozen=True)
class FoilSpreadFit:
    """
    What a single-field profile says about the beam.

    ``foil_spread`` is the standard deviation of the tangents at the foil; ``centre_shift_cm`` is where the
    profile has its centre; ``residual_percent`` is the root mean square departure of the readings from the
    fitted curve in per cent of the highest reading. Standard deviations come from that scatter alone.
    """

    foil_spread: Uncertain
    centre_shift_cm: Uncertain
    scale: float
    residual_percent: float
    points: int
    remarks: tuple[str, ...]


def fit_foil_spread(
    *, positions_cm: ArrayLike, readings: ArrayLike, normalisation: str, model: Model
) -> FoilSpreadFit:
    """
    Return the foil spread and the shift of the centre that fit a single-field profile best.

    reading(y) = scale model(y - shift, spread); least squares over scale, shift and spread

    Args:
        positions_cm: Where the readings were taken, from mid-height or the middle of the width, (n,). [cm]
        readings: Relative readings, any normalisation, (n,). [1]
        normalisation: Where the file says that readings are 1; only compared with them.
        model: Relative dose of the single field at given positions for a given foil spread.

    Returns:
        Both numbers with standard deviations, the scatter, and what must be said about the readings.

    Raises:
        ValueError: If the lengths differ or a number is not finite.
        OutsideValidity: If the readings cannot be used, are too few, or no foil spread between 0.02 and 0.60
            fits them.

    Valid for: one field at normal incidence, along a line through its axis.
    Assumes: readings of equal and independent scatter; everything but the spread in the model is right.
    Source: least squares with its covariance (derived).
    """
    usable = usable_profile(positions_cm=positions_cm, readings=readings, normalisation=normalisation)
    places, values = usable.places, usable.readings
    if len(places) < FEWEST_POINTS:
        raise OutsideValidity(
            f"a foil spread cannot be fitted to {len(places)} readings; at least {FEWEST_POINTS} are needed"
        )
    _refuse_other_unit(places, values, model)
    unit = float(values.max() / model(np.zeros(1), USUAL_SPREAD)[0])

    def departure(guess: Array) -> Array:
        scale, shift, spread = guess
        return np.asarray(scale * model(places - shift, float(spread)) - values / unit, dtype=float)

    start = np.array([1.0, float(places[np.argmax(values)]) / 2, USUAL_SPREAD])
    reach = float(np.ptp(places))
    bounds = ([0.0, -reach, LOWEST_SPREAD], [np.inf, reach, HIGHEST_SPREAD])
    precise = {"x_scale": np.array([1.0, 10.0, 0.1]), "xtol": 1e-12, "ftol": 1e-12, "gtol": 1e-12}
    fit = least_squares(departure, start, bounds=bounds, **precise)
    scale, shift, spread = (float(number) for number in fit.x)
    if min(spread - LOWEST_SPREAD, HIGHEST_SPREAD - spread) < 1e-3:
        raise OutsideValidity(
            f"no foil spread between {LOWEST_SPREAD:g} and {HIGHEST_SPREAD:g} fits the profile: "
            + " ".join(
                [
                    "are distance, degrader, energy and units those of the measurement?",
                    *plateau_remarks(places, values, "cm"),
                ]
            )
        )
    variance = 2 * fit.cost / (len(places) - 3)
    sds = np.sqrt(np.diag(np.linalg.inv(fit.jac.T @ fit.jac) * variance))
    result = FoilSpreadFit(
        foil_spread=Uncertain(spread, float(sds[2])),
        centre_shift_cm=Uncertain(shift, float(sds[1])),
        scale=scale * unit,
        residual_percent=100 * float(np.sqrt(2 * fit.cost / len(places)) * unit / values.max()),
        points=len(places),
        remarks=(),
    )
    remarks = (*usable.remarks, *_remarks(result, places, values))
    return FoilSpreadFit(**{**vars(result), "remarks": remarks})


def foil_spread_of_profile(
    *,
    positions_cm: ArrayLike,
    readings: ArrayLike,
    normalisation: str,
    direction: str,
    setup: FieldSetup,
    plane_distance_cm: float,
    tilt_deg: float,
) -> FoilSpreadFit:
    """
    Return the foil spread that makes the model of a set-up fit its measured single-field profile.

    Args:
        positions_cm: Heights from the isocentre, or places across from the beam's vertical plane, (n,). [cm]
        readings: Relative readings, any normalisation, (n,). [1]
        normalisation: Where the file says that readings are 1; only compared with them.
        direction: "vertical" or "horizontal".
        setup: Beam and room of the measurement, from field_setup; its foil spread is not used.
        plane_distance_cm: Plane distance of the measurement. [cm]
        tilt_deg: Tilt of the field during the measurement, negative for the one aimed at the feet. [deg]

    Returns:
        Foil spread and shift of the centre with standard deviations, and remarks.

    Raises:
        ValueError: If lengths differ or a number or the direction is impossible.
        OutsideValidity: If the readings cannot be used or the set-up lies outside the model.

    Valid for: the range of the model in field_at_plane.
    Assumes: energy, degrader and distance are those of the measurement; their uncertainty is not included.
    Source: own-fit (fit) for the model; least squares (derived).
    """
    if direction not in ("vertical", "horizontal"):
        raise ValueError(f"a profile is vertical or horizontal, not {direction!r}")

    def model(places: Array, spread: float) -> Array:
        """Return the dose along the line relative to the field's dose at its middle."""
        wanted = np.concatenate([[0.0], np.sign(tilt_deg or 1.0) * places])
        along = (wanted, np.zeros(1)) if direction == "vertical" else (np.zeros(1), wanted)
        doses = tilted_fields(
            setup.but(foil_spread=spread), np.array([abs(tilt_deg)]), plane_distance_cm, *along
        ).ravel()
        return np.asarray(doses[1:] / doses[0], dtype=float)

    return fit_foil_spread(
        positions_cm=positions_cm, readings=readings, normalisation=normalisation, model=model
    )


def _refuse_other_unit(places: Array, readings: Array, model: Model) -> None:
    """Refuse a profile whose width is that of the model in another unit."""
    width = _half_width(places, readings)
    grid = np.linspace(-1000.0, 1000.0, 4001)
    expected = _half_width(grid, np.asarray(model(grid, USUAL_SPREAD), dtype=float))
    if width is None or expected is None:
        return
    for unit, factor in OTHER_UNIT:
        if abs(width / expected / factor - 1) <= UNIT_WITHIN:
            raise OutsideValidity(
                f"the profile is {printed(width, 3)} cm wide at half height where about "
                f"{printed(expected, 3)} cm are expected: are the positions {unit} under a column in cm?"
            )


def _half_width(places: Array, readings: Array) -> float | None:
    """Return the full width at half of the highest reading, or None if a side does not fall that far."""
    half, top = readings.max() / 2, int(np.argmax(readings))
    below = np.flatnonzero(readings <= half)
    left, right = below[below < top], below[below > top]
    if not len(left) or not len(right):
        return None
    low, high = int(left[-1]), int(right[0])
    start = np.interp(half, readings[[low, low + 1]], places[[low, low + 1]])
    end = np.interp(half, readings[[high, high - 1]], places[[high, high - 1]])
    return float(end - start)


def _remarks(fit: FoilSpreadFit, places: Array, readings: Array) -> list[str]:
    """Return what must be said about a fit."""
    said = []
    if fit.points < FEW_POINTS:
        said.append(f"Only {fit.points} readings; {FEW_POINTS} or more make a fit trustworthy.")
    ends = max(readings[0], readings[-1]) / readings.max()
    if ends > 0.5:
        said.append(
            f"The profile ends at {printed(float(places[0]))} and {printed(float(places[-1]))} cm, where it "
            "has not fallen to half on both sides; the spread rests on its middle."
        )
    shift = fit.centre_shift_cm
    if abs(shift.value) > SHIFT_WORTH_SAYING_CM and abs(shift.value) > 2 * shift.sd:
        said.append(
            f"The profile is centred at {printed(shift.value, 2)} cm (sd {printed(shift.sd, 2)} cm), "
            "not at 0: "
            "look at the detector's position and the zero of the gantry."
        )
    if fit.foil_spread.sd > UNCERTAIN_SPREAD:
        said.append(f"The spread is known only within {printed(fit.foil_spread.sd, 2)}; measure farther out.")
    if fit.residual_percent > POOR_RESIDUAL_PERCENT:
        said.append(
            f"The readings depart from the fitted curve by {printed(fit.residual_percent, 2)} % on average: "
            "saturation, a shifted detector or another set-up would look like this."
        )
    return said
