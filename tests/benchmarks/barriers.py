"""
How much longer 500 barrier points take than one: computed alone, and in a whole assessment with every rule.

Run it as ``python tests/benchmarks/barriers.py``; it prints times and ratios. The assessment sees every
barrier from every arrangement of its room: the sample, cut down to one beam, has two (either side).
"""

import gc
from dataclasses import replace
from datetime import date
from pathlib import Path
from time import process_time

from readiness.assessment.assessment import assess
from readiness.calculations.barrier_distances import barrier_distances
from readiness.calculations.barrier_dose import WeeklyDose, weekly_dose
from readiness.calculations.dose_limits import any_hour_dose, goal_margin
from readiness.calculations.required_thickness import required_thickness
from readiness.program.items import Program
from readiness.program.reading import read_folder
from readiness.quantities import Table

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"
KEPT = {
    "beam": "linac-1/e6-high-rate", "degrader": "sheet-06", "room": "vault-a", "machine": "linac-1",
    "stand": "turntable-1",
}  # fmt: skip
LEFT_OUT = ("barrier", "couch", "measurement")
POINTS = 500
LAYER_COLUMNS = ("material", "thickness_cm", "density_g_per_cm3")
EXISTING_COLUMNS = ("energy_mv", "kind", "workload_gy_per_week", "use_factor")
EXISTING = Table.of(
    EXISTING_COLUMNS,
    [
        (6, "primary", 300, 0.25),
        (10, "primary", 150, 0.25),
        (6, "leakage", 900, None),
        (10, "leakage", 225, None),
    ],
)


def one_point(number: int) -> WeeklyDose:
    """Return the dose behind one of many different barriers."""
    layers = Table.of(LAYER_COLUMNS, [("concrete", 80.0 + number / 5.0, 2.35), ("steel", 5.0, None)])
    found = barrier_distances(
        surface=("x-min-wall", "x-max-wall", "y-min-wall", "ceiling")[number % 4],
        layers=layers,
        inner_face_cm=None,
        distance_m=None,
        isocentre_distance_m=5.0 + number / 200.0,
        leakage_distance_m=None,
        isocentre_height_cm=130.0,
        side_deg=90.0,
        tilt_deg=16.0,
        source_axis_distance_cm=100.0,
        plane_distance_cm=400.0,
    )
    return weekly_dose(
        layers=layers,
        role="primary" if number % 2 else "secondary",
        occupancy=0.2,
        recess_depth_cm=5.0,
        existing=EXISTING,
        primary_distance_m=found.primary_distance_m,
        isocentre_distance_m=found.isocentre_distance_m,
        beam_energy_mv=6.0,
        xray_workload_gy_m2_per_week=9.0,
        xray_distance_m=found.xray_distance_m,
        leakage_workload_gy_m2_per_week=880.0,
        leakage_percent=0.1,
        head_distance_m=found.head_distance_m,
        plane_distance_cm=400.0,
        patient_area_m2=0.72,
        scatter_distance_m=found.scatter_distance_m,
        scatter_angle_deg=found.scatter_angle_deg,
    )


def judged(number: int) -> None:
    """Compute everything that is asked of one barrier."""
    dose = one_point(number)
    goal_margin(
        dose_usv_per_week=dose.after_usv_per_week, design_goal_msv_per_week=0.02, survey_margin_ratio=0.25
    )
    required_thickness(contributions=dose.contributions, limit_usv_per_week=20.0)
    any_hour_dose(
        before_rate_usv_per_week=dose.before_rate_usv_per_week,
        added_rate_usv_per_week=dose.added_rate_usv_per_week,
        cycles_per_week=4.0,
        sessions_per_cycle=2.0,
        sessions_in_hour=2.0,
        session_room_min=30.0,
        busiest_hour_ratio=1.5,
    )


def seconds(points: int) -> float:
    """Return how long a number of points keeps the processor."""
    start = process_time()
    for number in range(points):
        judged(number)
    return process_time() - start


def program(points: int) -> Program:
    """Return the sample with one beam and so many places behind its west wall."""
    whole = read_folder(SAMPLE)
    west = next(item for item in whole.items if (item.kind, item.id) == ("barrier", "a-west"))
    rest = (
        item
        for item in whole.items
        if item.kind not in LEFT_OUT and item.id == KEPT.get(item.kind, item.id) and "vault-b" not in item.id
    )
    return replace(whole, items=(*rest, *(replace(west, id=f"west-{number}") for number in range(points))))


def assessed(points: int) -> float:
    """Return how long the assessment takes, as the command runs it: without looking for garbage."""
    described = program(points)
    gc.collect()
    gc.disable()
    start = process_time()
    assess(described, date(2026, 12, 1))
    taken = process_time() - start
    gc.enable()
    return taken


def main() -> None:
    """Print the times of one point and of many, and their ratio."""
    assessed(1)
    one, many = min(assessed(1) for _ in range(3)), min(assessed(POINTS) for _ in range(3))
    print(f"assessment with one point: {one:.3f} s; with {POINTS}: {many:.3f} s; ratio {many / one:.1f}")
    print(f"seen from two arrangements {POINTS} points cost {many - one:.3f} s more than one; ", end="")
    print(f"{(many - one) / 2:.3f} s an arrangement")
    first = seconds(1)
    one = min(seconds(1) for _ in range(20))
    many = min(seconds(POINTS) for _ in range(3))
    print(f"first point, tables read: {first * 1e3:.1f} ms")
    print(f"one point: {one * 1e3:.3f} ms; {POINTS} points: {many * 1e3:.1f} ms")
    print(f"ratio {POINTS}:1 = {many / one:.0f}; {POINTS} points cost {many - one:.3f} s more than one")


if __name__ == "__main__":
    main()
