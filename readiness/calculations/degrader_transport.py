"""What a degrader does to the beam: less energy, more spread, fewer electrons."""

from typing import NamedTuple

import numpy as np
from numpy.typing import ArrayLike, NDArray

from readiness.calculations.air_transport import (
    CUT_ITERATIONS,
    CUT_PER_RMS_ANGLE,
    CUT_TOLERANCE,
    FIRST_CUT_RAD,
    SLOWEST_MEV,
)
from readiness.calculations.electron_materials import electron_material
from readiness.calculations.scattering_power import scattering_power
from readiness.calculations.stopping_power import csda_range, stopping_power_in_steps, total_stopping_power
from readiness.errors import OutsideValidity

Array = NDArray[np.float64]

STEPS = 24
LARGEST_ANGLE_RAD = 0.6  # projected; beyond it the beam is diffuse and widens no more (own-fit, fit)
WATER_LIKE_BELOW = 10  # mean atomic number
LOW_TRANSMISSION = 0.75  # below it the output falls steeply with small changes of energy (practice)


class DegradedBeams(NamedTuple):
    """Behind a degrader: mean energy, the degrader's own projected angle, part of the electrons left."""

    energy_mev: Array
    own_angle_rad: Array
    transmission: Array


class DegradedBeam(NamedTuple):
    """One beam behind a degrader; ``warning`` is empty when the range left is ample."""

    mean_energy_mev: float
    own_angle_rad: float
    angle_rad: float
    transmission: float
    residual_range_cm: float
    warning: str


def beam_behind_degrader(
    *,
    energy_mev: float,
    incoming_angle_rad: float,
    degrader_material: str | None,
    degrader_thickness_cm: float,
) -> DegradedBeam:
    """
    Return energy, angle, transmission and residual range of a beam behind a degrader.

    Args:
        energy_mev: Mean energy in front of the degrader. [MeV]
        incoming_angle_rad: Projected rms angle of the electrons in front of it. [rad]
        degrader_material: Name of the material, none for no degrader.
        degrader_thickness_cm: Thickness. [cm]

    Returns:
        The beam behind it; the residual range is the csda range left, in water.

    Raises:
        ValueError: If the thickness is negative or a material is missing.
        OutsideValidity: If the degrader stops the beam or its material is unknown.

    Valid for: light materials and 3 to 10 MeV; energy within 0.10 MeV where the slab is less than half of the
        range; where it is six tenths, 0.2 MeV too low, because the slow electrons are gone.
    Assumes: Fermi-Eyges angle in the slab with its own self-consistent cut, at most 0.6 rad.
    Source: eyges-1948, icru-35 (memory); ebert-1969 (memory) for the transmission; the cap is own-fit (fit).
    """
    beams = beams_behind_degrader(
        energy_mev=energy_mev,
        incoming_angle_rad=incoming_angle_rad,
        degrader_material=degrader_material,
        path_cm=degrader_thickness_cm,
    )
    energy, own = float(beams.energy_mev), float(beams.own_angle_rad)
    refuse_stopped_beam(energy_mev=energy)
    transmission = float(beams.transmission)
    total = min(float(np.hypot(own, incoming_angle_rad)), max(LARGEST_ANGLE_RAD, incoming_angle_rad))
    left = csda_range(material="water", energy_mev=energy)
    warning = ""
    if transmission < LOW_TRANSMISSION:
        warning = (
            f"the degrader stops about {100 * (1 - transmission):.0f} % of the electrons and leaves "
            f"{energy:.1f} MeV: output and depth dose will change steeply with small changes of energy"
        )
    return DegradedBeam(energy, own, total, transmission, left, warning)


def beams_behind_degrader(
    *,
    energy_mev: ArrayLike,
    incoming_angle_rad: ArrayLike,
    degrader_material: str | None,
    path_cm: ArrayLike,
) -> DegradedBeams:
    """
    Return energy, own angle and transmission behind paths in a degrader, all at once.

    Args:
        energy_mev: Mean energies in front of the degrader. [MeV]
        incoming_angle_rad: Projected rms angles in front of it. [rad]
        degrader_material: Name of the material, none for no degrader.
        path_cm: Paths through it: thickness, or thickness over the cosine of the slope. [cm]

    Returns:
        Arrays of the common shape.

    Raises:
        ValueError: If a path is negative or a material is missing.
        OutsideValidity: If the material is unknown.

    Valid for: see beam_behind_degrader; a beam that comes to rest is kept at 0.3 MeV, and its transmission
        tells how little is left of it.
    Assumes: see beam_behind_degrader.
    Source: eyges-1948, icru-35, ebert-1969 (memory); own-fit (fit).
    """
    energy, angle, path = np.broadcast_arrays(
        *(np.asarray(part, dtype=float) for part in (energy_mev, incoming_angle_rad, path_cm))
    )
    if (path < 0).any() or (angle < 0).any():
        raise ValueError("a degrader's thickness and an angle cannot be negative")
    if not (path > 0).any():
        return DegradedBeams(energy, np.zeros(energy.shape), np.ones(energy.shape))
    if degrader_material is None:
        raise ValueError("a degrader with a thickness needs a material")
    cut = np.full(energy.shape, FIRST_CUT_RAD)
    for _ in range(CUT_ITERATIONS):
        left, own = _through(degrader_material, energy, angle, path, cut)
        next_cut = np.maximum(CUT_PER_RMS_ANGLE * np.sqrt(2.0) * own, 1e-6)
        settled = bool((np.abs(next_cut - cut) <= CUT_TOLERANCE * next_cut).all())
        cut = next_cut
        if settled:
            break
    found = electron_material(name=degrader_material)
    mass = path * found.density_g_per_cm3 * (1 + np.minimum(angle, LARGEST_ANGLE_RAD) ** 2)
    return DegradedBeams(left, own, _transmission(degrader_material, energy, mass))


def _through(material: str, energy: Array, angle: Array, path: Array, cut: Array) -> tuple[Array, Array]:
    """Return the energy and the degrader's own angle at the end of the paths for a given cut."""
    density = electron_material(name=material).density_g_per_cm3
    step = path / STEPS
    own, left = np.zeros(path.shape), energy
    for _ in range(STEPS):
        slope = np.minimum(np.sqrt(own + angle**2), LARGEST_ANGLE_RAD)
        mass = density * step * (1 + slope**2)
        middle = left - 0.5 * mass * stopping_power_in_steps(material=material, energy_mev=left)
        middle = np.maximum(middle, SLOWEST_MEV)
        own = own + 0.5 * density * step * scattering_power(material=material, energy_mev=middle, cut_rad=cut)
        left = left - mass * stopping_power_in_steps(material=material, energy_mev=middle)
        left = np.maximum(left, SLOWEST_MEV)
    capped = np.minimum(np.sqrt(own), LARGEST_ANGLE_RAD)
    return left.reshape(path.shape), capped.reshape(path.shape)


def _transmission(material: str, energy: Array, mass_g_per_cm2: Array) -> Array:
    """
    Return the part of the electrons that leave a slab: exp(-a (m/Rex)^b).

    b = (387 E/(Z (1 + 7.5e-5 Z E^2)))^(1/4), a = (1 - 1/b)^(1 - b), from ebert-1969 (memory).
    """
    number = _mean_atomic_number(material)
    power = (387 * energy / (number * (1 + 7.5e-5 * number * energy**2))) ** 0.25
    scale = (1 - 1 / power) ** (1 - power)
    result: Array = np.exp(-scale * (mass_g_per_cm2 / _extrapolated_range(material, energy)) ** power)
    return result


def _extrapolated_range(material: str, energy: Array) -> Array:
    """
    Return the extrapolated range as mass per area.

    Water-like: Rp of the range-energy relation (tg-25), scaled by the stopping powers.
    Others: 0.565 (125/(Z + 112)) E - 0.423 (175/(Z + 162)), from ebert-1969 (memory).
    """
    number = _mean_atomic_number(material)
    if number >= WATER_LIKE_BELOW:
        return 0.565 * (125 / (number + 112)) * energy - 0.423 * (175 / (number + 162))
    in_water = (np.sqrt(1.98**2 + 4 * 0.0025 * (energy - 0.22)) - 1.98) / (2 * 0.0025)
    losses = np.atleast_1d(energy)
    scaled: Array = in_water * (
        total_stopping_power(material="water", energy_mev=losses)
        / total_stopping_power(material=material, energy_mev=losses)
    ).reshape(energy.shape)
    return scaled


def _mean_atomic_number(material: str) -> float:
    """Return the atomic number averaged by weight."""
    elements = electron_material(name=material).elements
    return sum(part.weight_fraction * part.atomic_number for part in elements)


def refuse_stopped_beam(*, energy_mev: float) -> None:
    """Refuse a beam whose mean energy behind its degrader is the lowest that is followed."""
    if energy_mev <= SLOWEST_MEV:
        raise OutsideValidity("the degrader stops the beam: it is thicker than the range of the electrons")
