"""
Times the study of a whole room against straightforward double integration, and prints the ratio.

    python tests/benchmarks/beam_study.py

The room: both sides, three energies, 60 plane distances, 80 tilts, 201 x 41 points each, every dual field judged
along, across and over its rectangle. Straightforward: for every point the dose is a double sum over the rays of
the opening with the same scatter, by the midpoint rule with the fewest rays that reach 0.1 % of the centre; it is
timed on a few fields and multiplied. Both run on one thread.
"""

# ruff: noqa: E402  # the number of threads is set before numpy is loaded

import os

for name in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ[name] = "1"

import sys
import time
from pathlib import Path

import numpy as np

sys.path.insert(0, str(Path(__file__).parents[1] / "calculations"))

from beam_setups import LENGTHS, common_setup

from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.scatter_at_plane import KERNEL, scatter_at_plane
from readiness.calculations.tilt_study import tilt_study
from readiness.calculations.tilted_field import MARGIN_CM, tilted_fields

ENERGIES_MEV = (6.0, 7.5, 9.0)
DISTANCES_CM = np.linspace(255.0, 550.0, 60)
TILTS_DEG = np.linspace(5.0, 24.75, 80)
HEIGHTS_CM, ACROSS_CM = np.linspace(-100, 100, 201), np.linspace(-40, 40, 41)
SIDES = 2
WANTED_ACCURACY = 1e-3
SAMPLED = ((300.0, 18.0), (400.0, 16.0), (500.0, 15.0))


def straightforward(setup: FieldSetup, tilt_deg: float, distance_cm: float, rays: int) -> np.ndarray:
    """Return one single field by summing over rays x rays midpoints of the opening for every point."""
    tilt, half, axis = np.radians(tilt_deg), setup.opening_cm / 200, setup.source_axis_distance_cm
    ahead = distance_cm - axis + axis * np.cos(tilt)
    middles = (np.arange(rays) + 0.5) / rays * 2 * half - half
    a, b = (part.ravel() for part in np.meshgrid(middles, middles))
    forward = np.cos(tilt) - b * np.sin(tilt)
    rise, aside = (np.sin(tilt) + b * np.cos(tilt)) / forward, a / forward
    secant = np.hypot(1.0, rise)
    found = scatter_at_plane(setup, distance_cm - MARGIN_CM, distance_cm).rays(np.array(ahead), secant)
    weight = (2 * half / rays) ** 2 * np.exp(-(a**2 + b**2) / (2 * setup.foil_spread**2))
    weight = weight * found.transmission * secant**2
    up_at, across_at = ahead * rise - axis * np.sin(tilt), ahead * aside
    total = np.zeros((len(HEIGHTS_CM), len(ACROSS_CM)))
    for i, height in enumerate(HEIGHTS_CM):
        away = (ACROSS_CM[:, None] - across_at) ** 2
        for part, width in KERNEL:
            across2 = width**2 * found.air_variance_cm2 + found.degrader_variance_cm2
            up2 = across2 * secant**2
            dose = np.exp(-((height - up_at) ** 2) / (2 * up2) - away / (2 * across2))
            total[i] += part * np.sum(weight * dose / (2 * np.pi * np.sqrt(up2 * across2)), axis=1)
    return total


def rays_needed(setup: FieldSetup) -> int:
    """Return the fewest midpoints a side that reach the accuracy on all sampled fields."""
    for rays in (8, 12, 16, 20, 24, 32, 40, 48, 64):
        worst = 0.0
        for distance, tilt in SAMPLED:
            exact = tilted_fields(setup, np.array([tilt]), distance, HEIGHTS_CM, ACROSS_CM, slices=64)[0]
            rough = straightforward(setup, tilt, distance, rays)
            worst = max(worst, float(np.max(np.abs(rough - exact)) / exact[100, 20]))
        if worst <= WANTED_ACCURACY:
            return rays
    raise RuntimeError("the midpoint rule does not reach the accuracy")


def main() -> None:
    """Time both ways and print the ratio."""
    setups = [common_setup(energy_at_source_mev=energy, degrader_gap_cm=45.0) for energy in ENERGIES_MEV]
    worst = 0.0
    for setup in setups:
        for distance, tilt in SAMPLED:
            exact = tilted_fields(setup, np.array([tilt]), distance, HEIGHTS_CM, ACROSS_CM, slices=64)[0]
            ours = tilted_fields(setup, np.array([tilt]), distance, HEIGHTS_CM, ACROSS_CM)[0]
            worst = max(worst, float(np.max(np.abs(ours - exact)) / exact[100, 20]))
    start = time.perf_counter()
    for _ in range(SIDES):
        for setup in setups:
            tilt_study(
                setup=setup,
                distances_cm=DISTANCES_CM,
                tilts_deg=TILTS_DEG,
                mid_height_cm=0.0,
                mu_share_upper=0.5,
                **LENGTHS,
            )
    study = time.perf_counter() - start
    rays = rays_needed(setups[0])
    start = time.perf_counter()
    for distance, tilt in SAMPLED:
        straightforward(setups[0], tilt, distance, rays)
    one_field = (time.perf_counter() - start) / len(SAMPLED)
    fields = SIDES * len(setups) * len(DISTANCES_CM) * len(TILTS_DEG)
    print(f"study of {fields} dual fields with {len(HEIGHTS_CM)} x {len(ACROSS_CM)} points: {study:.1f} s")
    print(f"largest error of the study: {100 * worst:.4f} % of the centre")
    print(f"straightforward, {rays} x {rays} rays: {one_field:.2f} s a field, {one_field * fields / 3600:.1f} h in all")
    print(f"ratio: {one_field * fields / study:.0f}")


if __name__ == "__main__":
    main()
