"""Drawings: to scale, described in words, the same every time, and right about left and right."""

import math
import re
from dataclasses import replace
from datetime import date
from pathlib import Path
from xml.etree import ElementTree

import pytest

from readiness.assessment.records import Assessment
from readiness.outputs.making import assessed
from readiness.outputs.pictures import _POSITIONS, make_pictures
from readiness.program.reading import read_folder
from readiness.quantities import Table

SVG = "{http://www.w3.org/2000/svg}"
SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"


@pytest.fixture(scope="module")
def sample() -> Assessment:
    """Return the assessment of the sample."""
    return assessed(read_folder(SAMPLE), date(2026, 12, 1))


def test_drawings_of_the_sample(sample: Assessment) -> None:
    """Plan, elevation and positions are drawn, each with a title and a description."""
    drawn = make_pictures(sample)
    assert {"room-plan", "room-elevation", "barriers", "in-vivo-body", "six-positions"} == set(drawn)
    for svg in drawn.values():
        root = ElementTree.fromstring(svg)
        assert root.find("{http://www.w3.org/2000/svg}title").text  # type: ignore[union-attr]
        assert root.find("{http://www.w3.org/2000/svg}desc").text  # type: ignore[union-attr]


def test_plan_is_to_scale(sample: Assessment) -> None:
    """Source and plane are 400 cm apart in the drawing's own centimetres; the plane lies at negative x on side 90."""
    svg = make_pictures(sample)["room-plan"]
    source, plane = map(float, re.search(r'<line x1="(-?[\d.]+)" y1="[\d.-]+" x2="(-?[\d.]+)" y2="[\d.-]+" stroke="#000" stroke-width="1.5"/>', svg.split("</defs>")[1]).groups())  # type: ignore[union-attr]
    assert 400 == pytest.approx(source - plane)
    assert plane < 0


def test_degrader_and_free_space_are_to_scale(sample: Assessment) -> None:
    """The sheet's exit face is 45 cm from the plane at x -300, toward the source; 20 cm stay free behind the stand."""
    plan = ElementTree.fromstring(make_pictures(sample)["room-plan"])
    boxes = [{key: float(each.get(key, "")) for key in ("x", "y", "width", "height")} for each in plan.iter(f"{SVG}rect")]
    assert {"x": -255.0, "y": -55.0, "width": 3.0, "height": 110.0} in boxes
    assert {"x": -365.0, "y": -45.0, "width": 20.0, "height": 90.0} in boxes
    side = ElementTree.fromstring(make_pictures(sample)["room-elevation"])
    sheets = [(each.get("x"), each.get("y"), each.get("height")) for each in side.iter(f"{SVG}rect") if each.get("width") == "3"]
    assert [("-255", "-243", "205")] == sheets


def test_elevation_names_heights_and_clearance(sample: Assessment) -> None:
    """Axes, stand and raised hands stand at their heights, with what is left below the ceiling."""
    words = " ".join(each.text or "" for each in ElementTree.fromstring(make_pictures(sample)["room-elevation"]).iter(f"{SVG}text"))
    for said in ("277.5 cm; 22.5 cm to the ceiling", "upper axis, 216 cm", "lower axis, 43.98 cm", "stand, 40 cm"):
        assert said in words


def test_barriers_are_to_scale(sample: Assessment) -> None:
    """Walls are as thick as stated, the room as high; spots of the axes lie on the wall of the beam."""
    root = ElementTree.fromstring(make_pictures(sample)["barriers"])
    boxes = {(each.get("width"), each.get("height")) for each in root.iter(f"{SVG}rect")}
    assert {("215", "690"), ("195", "690"), ("695", "110"), ("695", "300")} <= boxes
    axes = [each for each in root.iter(f"{SVG}circle") if each.get("r") == "7"]
    assert {("-365", "-234.7"), ("-365", "-25.3")} == {(each.get("cx"), each.get("cy")) for each in axes}


def test_bars_are_parts_of_the_goal(sample: Assessment) -> None:
    """The bar of a place is as long as its dose is of the goal; a door has none and says why."""
    root = ElementTree.fromstring(make_pictures(sample)["barriers"])
    bars = [float(each.get("width", "")) for each in root.iter(f"{SVG}rect") if each.get("fill") == "#000"]
    full = 0.3 * float(root.get("viewBox", "").split()[2])
    values = {(each.name, each.item): each.value for each in sample.values}
    arrangement = sample.verdict.arrangement
    ratios = [
        value / values["exposure.goal_msv_per_week", item] / 1000
        for (name, item), value in values.items()
        if name == "exposure.weekly_dose_usv_per_week" and item.id.endswith(arrangement)
    ]
    assert sorted(ratio * full for ratio in ratios) == pytest.approx(sorted(bars), abs=0.06)
    texts = [each.text for each in root.iter(f"{SVG}text")]
    assert 1 == texts.count("no prediction: survey in the mode")
    assert {"Office west of vault A", "Door of vault A"} <= set(texts)


def test_the_body_names_every_site_once(sample: Assessment) -> None:
    """Each planned site has a number on the outline and a line beside it; without readings nothing is found."""
    root = ElementTree.fromstring(make_pictures(sample)["in-vivo-body"])
    (sites,) = [each.value for each in sample.values if each.name == "in_vivo.sites"]
    numbers = [each.text for each in root.iter(f"{SVG}text") if each.get("font-size") == "9"]
    assert sorted(map(str, range(1, len(sites) + 1))) == sorted(numbers)  # type: ignore[type-var]
    spans = [each.text for each in root.iter(f"{SVG}tspan") if each.text]
    assert {"Umbilicus", "93 to 107", "no range"} <= set(spans)
    assert "found" not in root.find(f"{SVG}desc").text  # type: ignore[union-attr, operator]


def test_readings_stand_beside_the_body(sample: Assessment) -> None:
    """Mean, spread and action in words for a site that was read; a site without readings says so."""
    (expected,) = [each for each in sample.values if each.name == "in_vivo.expected_doses"]
    columns = ("site", "prescription_percent", "sd_percent", "outcome")
    table = Table(columns, (("umbilicus", 98.24, 2.31, "no action"), ("sole", 61.0, 4.0, "low: a boost is considered")))
    readings = replace(expected, name="in_vivo.site_results", value=table, basis="measured")
    drawn = make_pictures(replace(sample, values=(*sample.values, readings)))["in-vivo-body"]
    spans = [each.text for each in ElementTree.fromstring(drawn).iter(f"{SVG}tspan")]
    assert {"98.2 ± 2.3; no action", "61 ± 4; low", "no complete reading"} <= set(spans)


def test_same_drawings_every_time(sample: Assessment) -> None:
    """The same assessment gives the same drawings."""
    assert make_pictures(sample) == make_pictures(sample)


@pytest.mark.parametrize(("name", "turn", "day"), _POSITIONS)
def test_the_beam_meets_the_side_that_the_position_names(name: str, turn: int, day: int) -> None:
    """
    Seen from above with the beam coming from below, the surface that faces the beam is the named one.

    Worked from directions alone: the nose points along (sin, -cos) of the turn, the right hand lies a
    quarter turn clockwise of the nose; anterior or right if its direction points toward the beam.
    """
    angle = math.radians(180 + turn)  # compass bearing of the nose: 180 is toward the beam, clockwise
    beam = math.radians(180)
    anterior = math.cos(angle - beam)
    right = math.cos(angle + math.pi / 2 - beam)
    assert ("A" in name) == (anterior > 1e-9) or name == "PA"
    assert (name.startswith("R")) == (right > 1e-9)
    assert (name.startswith("L")) == (right < -1e-9)
    assert day == (1 if name in {"AP", "RPO", "LPO"} else 2)
    if name == "PA":
        assert anterior == pytest.approx(-1)
