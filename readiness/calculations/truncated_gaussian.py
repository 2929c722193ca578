"""One axis of a field: a Gaussian cut at two edges and blurred, in closed form."""

import numpy as np
from numpy.typing import ArrayLike, NDArray
from scipy.special import erf

Array = NDArray[np.float64]


def blurred_gaussian(
    *,
    position_cm: ArrayLike,
    spread_cm: ArrayLike,
    lower_cm: ArrayLike,
    upper_cm: ArrayLike,
    blur_cm: ArrayLike,
) -> Array:
    """
    Return a Gaussian of height 1 at 0, cut at two edges, folded with a Gaussian of area 1.

    f(y) = s/S exp(-y^2/2S^2) 1/2 [erf((u - m)/(k sqrt2)) - erf((l - m)/(k sqrt2))],
    S^2 = s^2 + b^2, m = y s^2/S^2, k = s b/S

    Args:
        position_cm: Where the result is wanted, y. [cm]
        spread_cm: Standard deviation s of the cut Gaussian. [cm]
        lower_cm: Lower edge l. [cm]
        upper_cm: Upper edge u. [cm]
        blur_cm: Standard deviation b of the blur, above zero. [cm]

    Returns:
        Array of the common shape, relative to the uncut, unblurred centre. [1]

    Raises:
        ValueError: If a spread or blur is not positive or the edges are exchanged.

    Valid for: any widths; a spread far above the edges is a flat field with soft edges.
    Assumes: nothing: the integral is exact.
    Source: derived.
    """
    places = [np.asarray(part, dtype=float) for part in (position_cm, spread_cm, lower_cm, upper_cm, blur_cm)]
    y, spread, lower, upper, blur = places
    if (spread <= 0).any() or (blur <= 0).any():
        raise ValueError("spread and blur must be positive")
    if (np.asarray(lower > upper)).any():
        raise ValueError("the lower edge lies above the upper")
    total = np.hypot(spread, blur)
    middle = y * (spread / total) ** 2
    width = np.sqrt(2.0) * spread * blur / total
    part = 0.5 * (erf((upper - middle) / width) - erf((lower - middle) / width))
    result: Array = spread / total * np.exp(-0.5 * (y / total) ** 2) * part
    return result
