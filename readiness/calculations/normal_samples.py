"""Normal samples without chance, so that the same inputs give the same answer on every machine."""

import numpy as np
from numpy.typing import NDArray
from scipy.special import ndtri

Array = NDArray[np.float64]

SAMPLES = 512


def normal_samples(*, inputs: int) -> Array:
    """
    Return evenly spread samples of independent standard normal numbers.

    u_ij = frac(1/2 + i g^-j), g the root of g^(n+1) = g + 1; each sample and its mirror image

    Args:
        inputs: How many independent numbers a sample has. [1]

    Returns:
        Array of shape (512, inputs). [1]

    Raises:
        ValueError: If there is no input.

    Valid for: up to about ten inputs.
    Assumes: nothing: mirrored samples have a mean of exactly zero.
    Source: additive recurrence with the generalised golden ratio (practice); derived.
    """
    if inputs < 1:
        raise ValueError("samples need at least one input")
    ratio = 2.0
    for _ in range(60):
        ratio = (1 + ratio) ** (1 / (inputs + 1))
    shifts = ratio ** -np.arange(1.0, inputs + 1)
    places = (0.5 + np.arange(1, SAMPLES // 2 + 1)[:, None] * shifts) % 1.0
    half = ndtri(np.clip(places, 1e-9, 1 - 1e-9))
    result: Array = np.concatenate([half, -half])
    return result
