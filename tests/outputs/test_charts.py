"""Charts: complete, described, with ids of their own, the same every time, with measured points only where measured."""

import re
from dataclasses import replace
from datetime import date
from pathlib import Path
from xml.etree import ElementTree

import pytest

from readiness.assessment.records import Assessment
from readiness.outputs.charts import make_charts
from readiness.outputs.making import assessed
from readiness.program.reading import read_folder

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"


@pytest.fixture(scope="module")
def sample() -> Assessment:
    """Return the assessment of the sample."""
    return assessed(read_folder(SAMPLE), date(2026, 12, 1))


@pytest.fixture(scope="module")
def charts(sample: Assessment) -> dict[str, str]:
    """Return the charts of the sample."""
    return make_charts(sample)


def test_every_chart_is_drawn_and_described(charts: dict[str, str]) -> None:
    """Profiles, map and road, each with title and description, nothing from outside."""
    assert {"profile-over-height", "profile-across", "distance-and-tilt", "plane-map", "road", "session-timeline"} == set(charts)
    for svg in charts.values():
        root = ElementTree.fromstring(svg)
        assert root.find("{http://www.w3.org/2000/svg}title").text  # type: ignore[union-attr]
        assert root.find("{http://www.w3.org/2000/svg}desc").text  # type: ignore[union-attr]
        assert "<metadata" not in svg


def test_no_id_stands_in_two_charts(charts: dict[str, str]) -> None:
    """Charts can stand in one page without their ids meeting."""
    ids = [name for svg in charts.values() for name in re.findall(r'id="([^"]+)"', svg)]
    assert len(ids) == len(set(ids))
    for svg in charts.values():
        for used in re.findall(r'(?:url\(#|href="#)([^)"]+)', svg):
            assert f'id="{used}"' in svg


def test_same_charts_every_time(sample: Assessment, charts: dict[str, str]) -> None:
    """The same assessment gives the same bytes."""
    assert charts == make_charts(sample)


def test_a_chart_without_values_is_left_out(sample: Assessment) -> None:
    """What is not known is not drawn."""
    nothing = replace(sample, values=(), schedule=None)
    assert make_charts(nothing) == {}


def test_a_prediction_has_no_measured_points(charts: dict[str, str]) -> None:
    """The pilot readings of the other sheet do not appear beside this plan's curve."""
    words = ElementTree.fromstring(charts["profile-over-height"]).find("{http://www.w3.org/2000/svg}desc").text  # type: ignore[union-attr]
    assert "predicted" in words
    assert ">measured<" not in charts["profile-over-height"]


def test_measured_points_stand_beside_the_curve(sample: Assessment) -> None:
    """Planned with the sheet that was measured, the pilot readings are drawn."""
    program = read_folder(SAMPLE)
    changed = []
    for item in program.items:
        fields = dict(item.fields)
        if item.kind == "program":
            chosen = fields["chosen_arrangement"]
            row = tuple("sheet-10" if each == "sheet-06" else each for each in chosen.value.rows[0])  # type: ignore[union-attr]
            fields["chosen_arrangement"] = replace(chosen, value=replace(chosen.value, rows=(row,)))  # type: ignore[type-var]
        changed.append(replace(item, fields=fields))
    drawn = make_charts(assessed(replace(program, items=tuple(changed)), date(2026, 12, 1)))
    assert ">measured<" in drawn["profile-over-height"]
    assert ">measured<" in drawn["profile-across"]
