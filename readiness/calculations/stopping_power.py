"""How fast electrons lose energy, and how far they reach."""

from functools import cache
from typing import overload

import numpy as np
from numpy.typing import NDArray
from scipy.integrate import quad

from readiness.calculations.electron_materials import ElectronMaterial, electron_material
from readiness.errors import OutsideValidity

Array = NDArray[np.float64]

REST_ENERGY_MEV = 0.510999  # of the electron
COLLISION_FACTOR = 0.153536  # 2 pi r_e^2 m c^2 N_A, in MeV cm2/g
RADIATIVE_FACTOR = 3.4896e-4  # alpha r_e^2 N_A, in cm2/g
LOWEST_ENERGY_MEV = 0.01  # below it the formula needs shell corrections
HIGHEST_ENERGY_MEV = 50.0
CURVE_POINTS = 6001


@overload
def collision_stopping_power(*, material: str, energy_mev: float) -> float: ...
@overload
def collision_stopping_power(*, material: str, energy_mev: Array) -> Array: ...
def collision_stopping_power(*, material: str, energy_mev: float | Array) -> float | Array:
    """
    Return the mass collision stopping power for electrons.

    S/rho = 0.153536 (Z/A)/beta^2 [2 ln(E/I) + ln(1 + tau/2) + F - delta], in MeV cm2/g
    F = (1 - beta^2) [1 + tau^2/8 - (2 tau + 1) ln 2],  tau = E/0.510999

    Args:
        material: Name of the material.
        energy_mev: Kinetic energy E. [MeV]

    Returns:
        Mass collision stopping power, in MeV cm2/g.

    Raises:
        ValueError: If an energy is not positive.
        OutsideValidity: If the material is unknown or the energy outside 0.01 to 50 MeV.

    Valid for: 0.01 to 50 MeV; within 0.03 % of estar in air and 0.5 % in water, pmma.
    Assumes: parametrised density effect; in water it departs most from the exact one.
    Source: icru-37 for the formula, sternheimer-1984 for the density effect (memory).
    """
    energy = _energy(energy_mev)
    result = _collision(electron_material(name=material), energy)
    return result if isinstance(energy_mev, np.ndarray) else float(result)


@overload
def total_stopping_power(*, material: str, energy_mev: float) -> float: ...
@overload
def total_stopping_power(*, material: str, energy_mev: Array) -> Array: ...
def total_stopping_power(*, material: str, energy_mev: float | Array) -> float | Array:
    """
    Return the mass stopping power including bremsstrahlung.

    S_rad/rho = alpha r_e^2 N_A sum w Z(Z+1)/A (E + m c^2) (c + s ln(1 + tau))

    Args:
        material: Name of the material.
        energy_mev: Kinetic energy E. [MeV]

    Returns:
        Mass stopping power, in MeV cm2/g.

    Raises:
        ValueError: If an energy is not positive.
        OutsideValidity: If the material is unknown or the energy outside 0.01 to 50 MeV.

    Valid for: 1 to 10 MeV in light materials, within 0.5 % of estar; lead to about 3 %.
    Assumes: c and s are constants of the material, fitted for light ones.
    Source: icru-37 (memory); c and s own-fit to the listed estar values (fit), for lead remembered (memory).
    """
    energy = _energy(energy_mev)
    found = electron_material(name=material)
    result = _collision(found, energy) + _radiative(found, energy)
    return result if isinstance(energy_mev, np.ndarray) else float(result)


def stopping_power_in_steps(*, material: str, energy_mev: Array) -> Array:
    """
    Return the total stopping power read between close-lying energies, for transport in many small steps.

    Args:
        material: Name of the material.
        energy_mev: Kinetic energies. [MeV]

    Returns:
        Mass stopping power, in MeV cm2/g, shape of the energies.

    Raises:
        ValueError: If an energy is not positive.
        OutsideValidity: If the material is unknown or an energy outside 0.01 to 50 MeV.

    Valid for: see total_stopping_power, from which it differs by less than 2e-5 of itself.
    Assumes: straight lines between energies 0.14 % apart.
    Source: total_stopping_power (derived).
    """
    lowest, highest = np.min(energy_mev), np.max(energy_mev)
    if not lowest >= LOWEST_ENERGY_MEV or not highest <= HIGHEST_ENERGY_MEV:
        _energy(energy_mev)
    return np.interp(np.log(energy_mev), *_curve(material))


@cache
def _curve(material: str) -> tuple[Array, Array]:
    """Return logarithms of energies and the total stopping power there."""
    energies = np.geomspace(LOWEST_ENERGY_MEV, HIGHEST_ENERGY_MEV, CURVE_POINTS)
    return np.log(energies), total_stopping_power(material=material, energy_mev=energies)


def csda_range(*, material: str, energy_mev: float) -> float:
    """
    Return the length of an electron's path until it has lost its energy, as mass per area.

    R = integral of dE/(S/rho) up to E

    Args:
        material: Name of the material.
        energy_mev: Kinetic energy E. [MeV]

    Returns:
        Range in the continuous slowing down approximation, in g/cm2.

    Raises:
        ValueError: If the energy is not positive.
        OutsideValidity: If the material is unknown or the energy outside 0.01 to 50 MeV.

    Valid for: 0.1 to 50 MeV, where what is left at 0.01 MeV does not matter.
    Assumes: no straggling.
    Source: icru-37 (memory).
    """
    found = electron_material(name=material)
    highest = float(_energy(energy_mev))

    def per_loss(energy: float) -> float:
        """Return the path per energy lost."""
        place = np.asarray(energy)
        return float(1.0 / (_collision(found, place) + _radiative(found, place)))

    reach, _ = quad(per_loss, LOWEST_ENERGY_MEV, highest, limit=200, epsrel=1e-8)
    return float(reach)


def _energy(energy_mev: float | Array) -> Array:
    """Return energies as an array, refusing what the formula cannot take."""
    energy = np.asarray(energy_mev, dtype=float)
    if not (energy > 0).all():
        raise ValueError("a kinetic energy must be positive")
    if (energy < LOWEST_ENERGY_MEV).any() or (energy > HIGHEST_ENERGY_MEV).any():
        raise OutsideValidity("stopping power is calculated from 0.01 to 50 MeV")
    return energy


def _collision(material: ElectronMaterial, energy: Array) -> Array:
    """Return the collision part."""
    tau = energy / REST_ENERGY_MEV
    beta2 = tau * (tau + 2) / (tau + 1) ** 2
    shape = (1 - beta2) * (1 + tau**2 / 8 - (2 * tau + 1) * np.log(2))
    logarithm = 2 * np.log(energy * 1e6 / material.mean_excitation_ev) + np.log1p(tau / 2)
    bracket = logarithm + shape - _density_effect(material, tau)
    result: Array = COLLISION_FACTOR * material.z_over_a / beta2 * bracket
    return result


def _density_effect(material: ElectronMaterial, tau: Array) -> Array:
    """Return delta: zero or small below x0, the full effect above x1, a power law between."""
    x = np.log10(np.sqrt(tau * (tau + 2)))
    full = 2 * np.log(10) * x - material.effect_c
    between = full + material.effect_a * np.clip(material.effect_x1 - x, 0, None) ** material.effect_m
    conductor = material.effect_delta0 * 10 ** (2 * (np.minimum(x, material.effect_x0) - material.effect_x0))
    return np.where(x >= material.effect_x0, between, conductor)


def _radiative(material: ElectronMaterial, energy: Array) -> Array:
    """Return the radiative part."""
    shape = material.radiative_constant + material.radiative_slope * np.log1p(energy / REST_ENERGY_MEV)
    return RADIATIVE_FACTOR * material.scattering_sum * (energy + REST_ENERGY_MEV) * shape
