"""How fast electrons spread in angle."""

import numpy as np
from numpy.typing import NDArray

from readiness.calculations.electron_materials import electron_material
from readiness.calculations.stopping_power import REST_ENERGY_MEV

Array = NDArray[np.float64]

FINE_STRUCTURE = 1 / 137.036
ELECTRON_RADIUS_CM = 2.81794e-13
AVOGADRO = 6.02214e23


def scattering_power(*, material: str, energy_mev: float | Array, cut_rad: float | Array) -> Array:
    """
    Return the mass scattering power: growth of the mean square angle in space per mass per area.

    T/rho = pi N_A (2 r_e m c^2/(p v))^2 sum w Z(Z+1)/A [ln(1 + q) - 1 + 1/(1 + q)],
    q = (theta_m/theta_mu)^2, theta_mu = 1.13 alpha Z^(1/3) m c/p,
    theta_m = min(2 A^(-1/3) m c/(alpha p), cut)

    The projected scattering power is half of it.

    Args:
        material: Name of the material.
        energy_mev: Kinetic energy. [MeV]
        cut_rad: Largest single deflection that is counted. [rad]

    Returns:
        Mass scattering power, in rad2 cm2/g, shape of the arguments.

    Raises:
        ValueError: If an energy or cut is not positive.
        OutsideValidity: If the material is unknown.

    Valid for: 0.1 to 50 MeV. The cut decides: see the self-consistent cut of the transport.
    Assumes: screened single scattering; Z(Z+1) counts the atom's electrons.
    Source: icru-35 (memory) for the form; summing elements by weight and the cut are own-fit (fit).
    """
    energy, cut = np.asarray(energy_mev, dtype=float), np.asarray(cut_rad, dtype=float)
    if not (energy > 0).all() or not (cut > 0).all():
        raise ValueError("kinetic energy and cut must be positive")
    tau = energy / REST_ENERGY_MEV
    momentum = np.sqrt(tau * (tau + 2))  # p/(m c)
    momentum_speed = tau * (tau + 2) / (tau + 1)  # p v/(m c^2)
    total = np.zeros(np.broadcast(energy, cut).shape)
    for element in electron_material(name=material).elements:
        number, mass = element.atomic_number, element.atomic_mass
        screening = 1.13 * FINE_STRUCTURE * number ** (1 / 3) / momentum
        nucleus = 2 * mass ** (-1 / 3) / (FINE_STRUCTURE * momentum)
        q = (np.minimum(nucleus, cut) / screening) ** 2
        weight = element.weight_fraction * number * (number + 1) / mass
        total = total + weight * (np.log1p(q) - 1 + 1 / (1 + q))
    result: Array = np.pi * AVOGADRO * (2 * ELECTRON_RADIUS_CM / momentum_speed) ** 2 * total
    return result
