"""The equations of a barrier: limits, directions, and the chains of published examples."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from readiness.calculations.barrier_equations import (
    hour_from_week_usv,
    leakage_transmission,
    primary_transmission,
    scatter_transmission,
    wall_dose_usv,
    weekly_dose_behind_usv,
)
from readiness.calculations.barrier_transmission import wall_thickness_cm

GOAL = {
    "design_goal_msv_per_week": 0.02,
    "distance_m": 8.3,
    "workload_gy_m2_per_week": 312.5,
    "use_factor": 0.25,
    "occupancy": 1 / 40,
}


def test_published_primary_wall_as_a_chain():
    """The 15 MV wall of the thesis comes out whole: from goal to thickness to the dose of 6 MV behind it."""
    cm = wall_thickness_cm(transmission=primary_transmission(**GOAL), tvl1_cm=44, tvle_cm=41)
    assert cm == pytest.approx(132.2, abs=0.1)
    behind = {key: value for key, value in GOAL.items() if key != "design_goal_msv_per_week"}
    assert 20.0 == pytest.approx(wall_dose_usv(**behind, thickness_cm=cm, tvl1_cm=44, tvle_cm=41))
    assert wall_dose_usv(**behind, thickness_cm=cm, tvl1_cm=37, tvle_cm=33) == pytest.approx(3.7, abs=0.06)


def test_published_homework_leakage_chain():
    """The homework's leakage wall comes out to the last digit."""
    allowed = leakage_transmission(
        design_goal_msv_per_week=0.001,
        distance_m=6.0,
        leakage_workload_gy_m2_per_week=547.16,
        leakage_percent=0.1,
        occupancy=0.2,
    )
    assert wall_thickness_cm(transmission=allowed, tvl1_cm=34, tvle_cm=29) == pytest.approx(
        106.0024, abs=1e-4
    )


def test_published_scatter_wall_is_wrong():
    """The homework squares 400/F: with the equation as it is 63.14 cm come out and never its 73.38."""
    allowed = scatter_transmission(
        design_goal_msv_per_week=0.001,
        source_patient_m=6.0,
        patient_point_m=1.0,
        field_area_cm2=1600.0,
        scatter_fraction=4.26e-4,
        workload_gy_m2_per_week=547.16,
        occupancy=0.2,
    )
    cm = wall_thickness_cm(transmission=allowed, tvl1_cm=17, tvle_cm=17)
    assert cm == pytest.approx(63.14, abs=0.01)
    squared = wall_thickness_cm(transmission=allowed * 400 / 1600, tvl1_cm=17, tvle_cm=17)
    assert squared == pytest.approx(73.378, abs=0.01)


@given(
    distance=st.floats(1.0, 15.0),
    workload=st.floats(1.0, 2000.0),
    use=st.floats(0.05, 1.0),
    occupancy=st.floats(0.02, 1.0),
    goal=st.floats(1e-4, 1.0),
)
def test_barrier_exactly_at_the_goal(distance, workload, use, occupancy, goal):
    """A barrier with the transmission that is allowed lets exactly the design goal through."""
    factors = {
        "distance_m": distance,
        "workload_gy_m2_per_week": workload,
        "use_factor": use,
        "occupancy": occupancy,
    }
    allowed = primary_transmission(**factors, design_goal_msv_per_week=goal)
    assert goal * 1e3 == pytest.approx(weekly_dose_behind_usv(**factors, transmission=allowed))


def test_doubling_the_distance_quarters_the_dose():
    """Twice as far means a quarter."""
    near, far = (
        weekly_dose_behind_usv(
            workload_gy_m2_per_week=10.0, use_factor=1.0, occupancy=0.2, transmission=1e-3, distance_m=d
        )
        for d in (4.0, 8.0)
    )
    assert 0.25 == pytest.approx(far / near)


def test_at_the_goal_the_hour_fails_below_m_over_40():
    """A barrier exactly at 20 uSv a week gives more than 20 in an hour whenever T < M/40."""
    for occupancy, ratio, above in ((0.05, 1.5, False), (0.05, 2.5, True), (0.025, 1.1, True)):
        hour = hour_from_week_usv(weekly_rate_usv_per_week=20.0 / occupancy, busiest_hour_ratio=ratio)
        assert above == (hour > 20.0)
        assert hour == pytest.approx(ratio * 20.0 / (40.0 * occupancy))


def test_leakage_and_scatter_equations_by_hand():
    """Leakage and scatter transmissions agree with the dose that they allow."""
    assert leakage_transmission(
        design_goal_msv_per_week=0.1,
        distance_m=10.0,
        leakage_workload_gy_m2_per_week=1000.0,
        leakage_percent=0.1,
        occupancy=1.0,
    ) == pytest.approx(0.01)
    assert scatter_transmission(
        design_goal_msv_per_week=0.1,
        source_patient_m=1.0,
        patient_point_m=5.0,
        field_area_cm2=400.0,
        scatter_fraction=1e-3,
        workload_gy_m2_per_week=250.0,
        occupancy=1.0,
    ) == pytest.approx(0.01)


@pytest.mark.parametrize(
    ("name", "number"),
    [
        ("distance_m", 0.0),
        ("distance_m", float("nan")),
        ("design_goal_msv_per_week", 0.0),
        ("workload_gy_m2_per_week", -1.0),
        ("use_factor", 0.0),
        ("occupancy", 1.2),
    ],
)
def test_impossible_numbers(name, number):
    """A distance of zero, an occupancy of 1.2 and their like are refused."""
    with pytest.raises(ValueError, match="above"):
        primary_transmission(**{**GOAL, name: number})


def test_impossible_hours_and_workloads():
    """The busiest hour is not quieter than the mean, and nothing is below zero."""
    with pytest.raises(ValueError, match="busiest hour"):
        hour_from_week_usv(weekly_rate_usv_per_week=1.0, busiest_hour_ratio=0.9)
    with pytest.raises(ValueError, match="weekly rate"):
        hour_from_week_usv(weekly_rate_usv_per_week=-1.0, busiest_hour_ratio=1.0)
    with pytest.raises(ValueError, match="workload"):
        weekly_dose_behind_usv(
            workload_gy_m2_per_week=-1.0, use_factor=1.0, occupancy=1.0, transmission=0.1, distance_m=1.0
        )
