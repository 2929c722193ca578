"""The calculation of a barrier can be followed by hand from what is printed, and says what it leaves out."""

from typing import Any

import pytest

from readiness.assessment.graph import Graph
from readiness.assessment.records import Ref, Value
from readiness.assessment.values.shielding_record import remark
from readiness.calculations.barrier_dose import WeeklyDose
from readiness.program.reading import read_folder
from readiness.quantities import Table
from tests.assessment.values.test_shielding import CHOSEN, SAMPLE, outcome
from tests.assessment.values.test_shielding_limits import ARRANGEMENT, changed, graph

FLOOR = Table(("surface", "obliquity_deg"), (("floor", 0.0), ("x-min-wall", 19.5)))


@pytest.fixture(scope="module")
def sample() -> Graph:
    """Return the values of the sample."""
    return graph(read_folder(SAMPLE))


def table(found: Graph, name: str, barrier: str = "") -> list[dict[str, Any]]:
    """Return the rows of a table of the arrangement or of a barrier."""
    got = found.get(name, Ref("exposure", f"{barrier} from {CHOSEN}") if barrier else ARRANGEMENT)
    assert isinstance(got, Value), got
    return list(got.value.records())


@pytest.mark.parametrize("barrier", ["a-west", "a-east", "a-control"])
def test_printed_numbers_give_the_printed_dose(sample: Graph, barrier: str) -> None:
    """Workload, factor, occupancy, transmission of the layers and distance multiply to each line, and lines add up."""
    lines = table(sample, "exposure.contributions", barrier)
    layers = {row["contribution"]: row for row in table(sample, "exposure.layer_steps", barrier)}
    for row in lines:
        through = layers[row["contribution"]]["transmission"]
        by_hand = row["workload_gy_m2_per_week"] * row["factor"] * row["occupancy"] * through / row["distance_m"] ** 2
        assert by_hand * 1e6 == pytest.approx(row["dose_usv_per_week"], rel=1e-4)
    judged = {row["symbol"]: row["amount"] for row in table(sample, "exposure.judged_steps", barrier)}
    assert sum(row["dose_usv_per_week"] for row in lines) == pytest.approx(judged["H"], rel=1e-4)
    assert judged["H_before"] + judged["H_added"] == pytest.approx(judged["H"], rel=1e-4)
    assert judged["H"] / judged["P"] == pytest.approx(judged["H/P"], rel=1e-4)
    assert 100 == pytest.approx(sum(row["share_percent"] for row in lines), rel=1e-4)


def test_a_layer_spends_its_first_tenth_once(sample: Graph) -> None:
    """215 cm of concrete at 6 MV: 37 in the first layer, 178 in layers of 33, 6.39 tenths."""
    row = next(
        each for each in table(sample, "exposure.layer_steps", "a-west") if each["contribution"] == "existing 6 MV primary"
    )
    assert (37.0, 33.0, 37.0) == (row["first_tenth_cm"], row["later_tenth_cm"], row["in_first_tenth_cm"])
    assert 1 + 178 / 33 == pytest.approx(row["tenths"], rel=1e-4)


def test_distances_say_what_they_come_from(sample: Graph) -> None:
    """The wall behind the head: a metre nearer than the isocentre; a stated distance is called stated."""
    east = {row["symbol"]: row for row in table(sample, "exposure.distance_steps", "a-east")}
    assert (6.55, "stated") == (east["d"]["amount_m"], east["d"]["comes_from"])
    assert east["d_L"]["amount_m"] == pytest.approx(east["d_iso"]["amount_m"] - 1.0)
    control = {row["symbol"]: row for row in table(sample, "exposure.distance_steps", "a-control")}
    assert "stated" == control["d_L"]["comes_from"]


def test_the_hour_is_the_sum_of_its_parts(sample: Graph) -> None:
    """Photon work of the busiest hour beside the sessions that fit into it."""
    for row in table(sample, "arrangement.barrier_hours"):
        parts = row["photon_hour_usv"] + row["sessions_in_hour"] * row["session_usv"]
        assert parts == pytest.approx(row["any_hour_usv"], rel=1e-4)


def test_steps_of_the_leakage_workload_multiply(sample: Graph) -> None:
    """Dose at 1 m of a cycle times cycles is that of the week; MU are not among the steps."""
    steps = {row["symbol"]: row for row in table(sample, "arrangement.leakage_workload_steps")}
    assert steps["W_1"]["amount"] * steps["N"]["amount"] == pytest.approx(steps["W_L"]["amount"], rel=1e-4)
    assert "MU" not in {row["unit"] for row in steps.values()}


def test_the_three_factors_stand_with_their_own_basis(sample: Graph) -> None:
    """6/B, water and lobe multiply to the whole; the lobe is only assumed."""
    values = [
        sample.get(name, ARRANGEMENT)
        for name in ("arrangement.turned_ratio", "arrangement.water_ratio", "beam.lobe_factor", "arrangement.xray_factor_ratio")
    ]
    assert all(isinstance(each, Value) for each in values)
    turned, water, lobe, whole = (float(each.value) for each in values if isinstance(each, Value))
    assert turned * water * lobe == pytest.approx(whole, rel=1e-4)
    assert ["assumed", "assumed"] == [each.basis for each in values[2:] if isinstance(each, Value)]


def test_a_surface_that_a_field_meets_is_listed_or_found(sample: Graph) -> None:
    """The edges of the sample's fields meet ceiling and floor, which nobody has listed."""
    got = sample.get("arrangement.surfaces_unlisted", ARRANGEMENT)
    assert isinstance(got, Value)
    assert {"ceiling", "floor"} == set(got.value.split(", "))
    assert "x-min-wall" not in got.value


def test_a_beam_wider_than_the_belt_is_found() -> None:
    """A belt of 2 m is too narrow for a beam diagonal of 4 m: rule not met, and said beside the place."""
    narrow = graph(changed("barrier", "a-west", belt_width_cm=200.0))
    assert "not met" == outcome(narrow, "belt-wide-enough", "a-west").outcome
    row = next(each for each in table(narrow, "arrangement.barriers") if each["place"] == "Office west of vault A")
    assert "wider than the thick part" in row["remark"]
    wide = graph(changed("barrier", "a-west", belt_width_cm=600.0))
    assert "met" == outcome(wide, "belt-wide-enough", "a-west").outcome


def test_remarks_of_the_sample(sample: Graph) -> None:
    """Photon part only beside 10 MV work; a door is not assessed; the oblique path is noted."""
    said = {row["place"]: row["remark"] for row in table(sample, "arrangement.barriers")}
    assert "Photon part only (10 MV or more)." in said["Corridor east of vault A"]
    assert "Not assessed: survey in the mode." == said["Door of vault A"]
    assert "20° from straight" in said["Office west of vault A"]


def dose(**changes: Any) -> WeeklyDose:
    """Return a dose of no concern, changed as asked."""
    plain: dict[str, Any] = dict.fromkeys(
        ("before_usv_per_week", "added_usv_per_week", "after_usv_per_week", "before_rate_usv_per_week",
         "added_rate_usv_per_week", "after_rate_usv_per_week"), 1.0
    )  # fmt: skip
    empty = Table((), ())
    words = {"largest_contribution": "", "beam_on_secondary": False, "photon_part_only": False, "contributions": empty}
    return WeeklyDose(**{**plain, **words, **changes})


def said(**changes: Any) -> str:
    """Return the remark of a secondary wall, changed as asked."""
    usual: dict[str, Any] = {
        "survey_only": False, "role": "secondary", "dose": dose(), "ratio": 0.1, "margin": 0.25, "belt_spare_cm": None,
        "spots": None, "surface": "y-min-wall",
    }  # fmt: skip
    return remark(**{**usual, **changes})


def test_a_small_margin_is_named_and_an_exceeded_goal_too() -> None:
    """Above a quarter of the goal the margin is below 4; above the goal no margin is left."""
    assert "none" == said()
    assert "none" == said(ratio=0.25)
    assert "Margin below 4: survey here first." == said(ratio=0.3)
    assert "Above its goal." == said(ratio=1.2)
    assert "built as secondary" in said(dose=dose(beam_on_secondary=True))
    assert "Not calculated" in said(dose=None)


def test_a_ray_that_meets_a_surface_straight_needs_no_remark() -> None:
    """Obliquity is named where it is there."""
    assert "none" == said(spots=FLOOR, surface="floor")
    assert "up to 20°" in said(spots=FLOOR, surface="x-min-wall")
