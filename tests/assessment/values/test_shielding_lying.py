"""A vertical beam: the floor is what it meets, the head stands a metre below the ceiling."""

from dataclasses import replace
from datetime import date
from typing import Any

import pytest

from readiness.assessment.candidates import arrangements
from readiness.assessment.graph import Graph
from readiness.assessment.records import Gone, Ref, Value
from readiness.errors import Place
from readiness.program.items import Item, Stated
from readiness.program.reading import read_folder
from readiness.quantities import Table
from tests.assessment.values.test_shielding import CHOSEN, SAMPLE
from tests.assessment.values.test_shielding_limits import graph

PLACE = Place("shielding.yaml", 1, 1)
LAYERS = ("material", "thickness_cm", "density_g_per_cm3")
EXISTING = Table(("energy_mv", "kind", "workload_gy_per_week", "use_factor", "distance_m"), ())


def made(what: str, item_id: str, owners: dict[str, str], /, **fields: Any) -> Item:
    """Return an item of the test."""
    return Item(what, item_id, {name: Stated(value, PLACE) for name, value in fields.items()}, owners, PLACE)


def place(item_id: str, surface: str, face_cm: float, role: str, concrete_cm: float) -> Item:
    """Return a place below or above the room."""
    return made(
        "barrier", item_id, {"room": "vault-a"}, title=item_id, room="vault-a", surface=surface, role=role,
        inner_face_cm=face_cm, layers=Table(LAYERS, (("concrete", concrete_cm, 2.35),)), occupancy=1.0,
        area="uncontrolled", existing_workload=EXISTING,
    )  # fmt: skip


def readings(kind: str, **fields: Any) -> Item:
    """Return a measurement under the vertical beam."""
    owners = {
        "room": "vault-a", "machine": "linac-1", "beam": "linac-1/e6-high-rate", "degrader": "sheet-06", "couch": "mat",
        "instrument": "cylindrical-chamber",
    }  # fmt: skip
    same = {"kind": kind, "degrader": "sheet-06", "date": date(2026, 11, 20), "instrument": "cylindrical-chamber"}
    return made("measurement", kind, owners, **{**same, **fields})


@pytest.fixture(scope="module")
def lying() -> tuple[Graph, str]:
    """Return the sample with a moving couch, places above and below, and its measurements (invented)."""
    program = read_folder(SAMPLE)
    items = []
    for item in program.items:
        fields = dict(item.fields)
        if item.kind == "program":
            fields["techniques"] = Stated(("moving-couch",), item.place)
            fields["lying_incidences"] = Stated(("front", "left", "back", "right"), item.place)
        items.append(replace(item, fields=fields))
    rates = Table.of(("position_cm", "dose_rate_cgy_per_min"), [(-60.0, 0.0), (0.0, 300.0), (60.0, 0.0)])
    columns = ("fields", "depth_mm", "height_cm", "across_cm", "xray_percent", "xray_cgy_per_mu")
    xrays = Table(columns, (("one-dual", 50.0, 0.0, None, 0.9, 2.0e-4),))
    more = (
        made("couch", "mat", {}),
        made(
            "plan", "lying", {}, technique="moving-couch", couch_speed_cm_per_s=2.0, lying_passes=2,
            plane_distance_cm=200.0, degrader_gap_cm=45.0,
        ),
        place("Store below", "floor", 0.0, "secondary", 80.0),
        place("Roof", "ceiling", 300.0, "secondary", 80.0),
        readings("couch-dose-rate", rate_mu_per_min=2000.0, couch="mat", table=rates),
        readings("xray-component", side_deg=0, distance_cm=200.0, gap_cm=45.0, tilt_deg=0.0,
                 technique="moving-couch", table=xrays),
    )  # fmt: skip
    found = replace(program, items=(*items, *more))
    wanted = next(each.id for each in arrangements(found) if "linac-1/e6-high-rate" in each.id and "sheet-06" in each.id)
    return graph(found), wanted


def value(found: tuple[Graph, str], name: str, barrier: str = "") -> Any:
    """Return a value of the arrangement, or of a barrier seen from it."""
    ref = Ref("exposure", f"{barrier} from {found[1]}") if barrier else Ref("arrangement", found[1])
    got = found[0].get(name, ref)
    assert isinstance(got, Value), [cause.words for cause in got.causes]
    return got.value


def test_the_floor_is_met_by_the_beam_and_the_ceiling_is_not(lying: tuple[Graph, str]) -> None:
    """X rays reach the place below; built as secondary, it is found."""
    assert value(lying, "exposure.beam_on_secondary", "Store below") is True
    assert value(lying, "exposure.beam_on_secondary", "Roof") is False
    assert value(lying, "exposure.faces_beam", "Store below") is True
    assert value(lying, "exposure.faces_beam", "a-west") is False


def test_distances_are_those_of_a_beam_from_above(lying: tuple[Graph, str]) -> None:
    """Isocentre 130 cm above the floor: source to 0.3 m below 80 cm is 3.4 m; the head stands 1.8 m below the roof."""
    below = {row["contribution"]: row for row in value(lying, "exposure.contributions", "Store below").records()}
    above = {row["contribution"]: row for row in value(lying, "exposure.contributions", "Roof").records()}
    assert 3.4 == pytest.approx(below["added x rays"]["distance_m"])
    assert 3.4 == pytest.approx(below["added leakage"]["distance_m"])
    assert 1.8 == pytest.approx(above["added leakage"]["distance_m"])
    assert "added x rays" not in above


def test_the_workload_counts_all_incidences_and_the_dose_on_the_axis(lying: tuple[Graph, str]) -> None:
    """Four incidences of two passes of 60 s at 2000 MU a minute: 16000 MU a cycle."""
    weeks = value(lying, "arrangement.leakage_workload_gy_m2_per_week") * 100
    cycles = lying[0].get("program.busiest_week_cycles_per_week", Ref("program", "program"))
    assert isinstance(cycles, Value)
    tests = weeks - 16000 * float(cycles.value)
    assert 4000 == pytest.approx(tests, rel=1e-3)
    expected = weeks * 2.0e-4 / 100 * 2.71828 ** (0.058 * 5) * 4
    assert expected == pytest.approx(value(lying, "arrangement.xray_workload_gy_m2_per_week"), rel=1e-3)


def test_the_dose_rate_is_that_of_an_hour_of_beam(lying: tuple[Graph, str]) -> None:
    """Added dose over the MU of the week, times 2000 MU a minute for 60 minutes."""
    weeks = value(lying, "arrangement.leakage_workload_gy_m2_per_week") * 100
    expected = value(lying, "exposure.added_usv_per_week", "Store below") / weeks * 120000
    assert expected == pytest.approx(value(lying, "exposure.instantaneous_usv_per_h", "Store below"), rel=1e-3)


def test_without_x_rays_on_the_axis_nothing_is_calculated(lying: tuple[Graph, str]) -> None:
    """A stated f1 of a dual field says nothing of a vertical one: the measurement is asked for."""
    program = lying[0].program
    less = graph(replace(program, items=tuple(each for each in program.items if each.id != "xray-component")))
    got = less.get("exposure.weekly_dose_usv_per_week", Ref("exposure", f"Store below from {lying[1]}"))
    assert isinstance(got, Gone)
    assert {"measurement"} == {cause.kind for cause in got.causes}


def test_a_standing_arrangement_has_no_vertical_field() -> None:
    """Spots of a vertical beam are not shown for a beam from the side."""
    found = graph(read_folder(SAMPLE))
    assert isinstance(found.get("arrangement.vertical_spots", Ref("arrangement", CHOSEN)), Gone)


def surveyed(lying: tuple[Graph, str], *rows: tuple[str, float, float]) -> tuple[Graph, str]:
    """Return the same with a survey (invented readings, background 0.1)."""
    columns = ("barrier", "gantry_deg", "reading_usv_per_h", "place")
    done = readings(
        "survey", side_deg=0, mode="high-rate", rate_mu_per_min=2000.0, background_usv_per_h=0.1,
        instrument="survey-meter", patient_place="occupied", table=Table(columns, tuple((*row, None) for row in rows)),
    )  # fmt: skip
    done = replace(done, owners={**done.owners, "instrument": "survey-meter"})
    program = lying[0].program
    return graph(replace(program, items=(*program.items, done))), lying[1]


def test_a_survey_under_a_vertical_beam_has_its_expectations(lying: tuple[Graph, str]) -> None:
    """One field straight down; below the floor it is x rays and leakage of all MU."""
    rows = {row["place"]: row for row in value(lying, "arrangement.survey_worksheet").records()}
    below = rows["Store below"]
    assert (0.0, "down", "") == (below["gantry_deg"], below["aimed_at"], below["remark"])
    weeks = value(lying, "arrangement.leakage_workload_gy_m2_per_week") * 100
    lines = value(lying, "exposure.contributions", "Store below").records()
    added = sum(row["dose_usv_per_week"] for row in lines if row["added"] and row["radiation"] != "scatter")
    assert added / weeks * 120000 == pytest.approx(below["empty_usv_per_h"], rel=1e-4)


def test_a_survey_under_a_vertical_beam_gives_the_week(lying: tuple[Graph, str]) -> None:
    """The net reading times the hours of beam; a place without a reading is named once."""
    expected = value(lying, "exposure.instantaneous_usv_per_h", "Store below")
    found = surveyed(lying, ("Store below", 360.0, expected + 0.1), ("Roof", 0.0, 0.1))
    hours = value(lying, "arrangement.leakage_workload_gy_m2_per_week") * 100 / 120000
    assert expected * hours == pytest.approx(value(found, "exposure.surveyed_added_usv_per_week", "Store below"), rel=1e-4)
    assert 1.0 == pytest.approx(value(found, "exposure.survey_over_predicted_ratio", "Store below"), rel=1e-4)
    missing = value(found, "arrangement.survey_places_missing")
    assert 1 == missing.count("Office west of vault A with the gantry at 0 degrees")
    assert "Store below" not in missing
