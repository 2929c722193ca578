"""A small department with one room and beam and two degraders, and measurements made of plain numbers."""

from collections.abc import Sequence
from datetime import date
from typing import Any

from readiness.assessment.candidates import arrangements, measurements
from readiness.assessment.catalogue import catalogue
from readiness.assessment.graph import Graph
from readiness.assessment.judge import judge_item
from readiness.assessment.records import Finding, Gone, Got, Ref, Value
from readiness.assessment.ruleset import shipped_rules
from readiness.program.items import Item, Program
from readiness.quantities import Table
from tests.assessment.small import DAY, item, program

MEASURED = date(2026, 10, 21)
ROOM: dict[str, Any] = {
    "isocentre_height_cm": 130.0, "site_pressure_kpa": 98.5, "temperature_celsius": 21.0, "changed_on": date(2025, 8, 18),
}  # fmt: skip
BEAM: dict[str, Any] = {
    "r50_cm": 2.40, "rp_cm": 2.95, "opening_cm": 40.0, "collimator_deg": 0.0, "reference_output_cgy_per_mu": 1.0,
    "high_rate": True, "largest_mu_per_beam_mu": 2000.0,
}  # fmt: skip
PLAN: dict[str, Any] = {
    "plane_distance_cm": 400.0, "tilt_deg": 16.0, "degrader_gap_cm": 45.0, "mu_convention": "total-of-both-beams",
    "mu_share_upper": 0.5,
}  # fmt: skip
STAND: dict[str, Any] = {"height_cm": 40.0, "turning_radius_cm": 40.0}
SHEET: dict[str, Any] = {
    "material": "pmma", "width_cm": 110.0, "height_cm": 205.0, "foot_height_cm": 38.0, "owned": True,
}  # fmt: skip
WHOLE: dict[str, Any] = {
    "techniques": ("six-position",), "tallest_patient_cm": 190.0, "shortest_patient_cm": 150.0, "protocol": "tg-51",
}  # fmt: skip
HEADER: dict[str, Any] = {
    "room": "vault", "machine": "linac", "beam": "linac/e6", "degrader": "thin", "stand": "none", "side_deg": 90,
    "distance_cm": 400.0, "gap_cm": 45.0, "tilt_deg": 16.0, "collimator_opening_cm": 40.0, "collimator_angle_deg": 0.0,
    "mu_ratio": 1.0, "instrument": "film", "date": MEASURED, "medium": "air", "depth_mm": 0.0, "smoothing": "none",
    "normalisation": "mid-height", "technique": "six-position", "mode": "high-rate",
}  # fmt: skip


def known(**fields: Any) -> dict[str, Any]:
    """Return the fields that are not None."""
    return {name: value for name, value in fields.items() if value is not None}


def department(*more: Item, **changes: dict[str, Any]) -> Program:
    """Return the department; a part's fields are changed by the part's name, None leaves a field out."""

    def of(part: str, fields: dict[str, Any]) -> dict[str, Any]:
        return known(**{**fields, **changes.get(part, {})})

    return program(
        item("room", "vault", **of("room", ROOM)),
        item("machine", "linac", {"room": "vault"}, source_axis_distance_cm=100.0),
        item("beam", "linac/e6", {"machine": "linac"}, **of("beam", BEAM)),
        item("degrader", "thick", **of("thick", {**SHEET, "thickness_cm": 1.0})),
        item("degrader", "thin", **of("thin", {**SHEET, "thickness_cm": 0.6})),
        item("stand", "platform", **of("stand", STAND)),
        item("couch", "couch"),
        item("plan", "plan", **of("plan", PLAN)),
        item("instrument", "film", type="film", **of("film", {
            "calibrated_on": date(2026, 1, 1), "calibration_due_on": date(2027, 1, 1)})),
        item("instrument", "chamber", type="plane-parallel-chamber", **of("chamber", {
            "calibrated_on": date(2024, 9, 16), "calibration_due_on": date(2026, 9, 16)})),
        *more,
        **of("program", WHOLE),
    )  # fmt: skip


def measured(kind: str, columns: Sequence[str], rows: Sequence[Sequence[Any]], **header: Any) -> Item:
    """Return a measurement of a kind, its header as planned but for what is given; None leaves a key out."""
    fields = known(**{**HEADER, **header, "kind": kind, "table": Table.of(columns, rows)})
    return item("measurement", header.get("name", kind), **{key: value for key, value in fields.items() if key != "name"})


def vertical(doses: dict[float, float], **header: Any) -> Item:
    """Return a dual profile along the height."""
    rows = [(height, None, dose, None) for height, dose in doses.items()]
    return measured("dual-profile", PROFILE, rows, **{"name": "vertical", **header})


def across(doses: dict[float, float], **header: Any) -> Item:
    """Return a dual profile across."""
    rows = [(0.0, place, dose, None) for place, dose in doses.items()]
    return measured("dual-profile", PROFILE, rows, **{"name": "across", **header})


def sweep(profiles: dict[float, dict[float, float]], **header: Any) -> Item:
    """Return a sweep of tilts, each with a profile along the height."""
    rows = [
        (tilt, None, height, None, dose, None) for tilt, doses in profiles.items() for height, dose in doses.items()
    ]
    columns = ("tilt_deg", "field", "height_cm", "across_cm", "relative_dose", "relative_dose_sd")
    return measured("angle-sweep", columns, rows, **{"tilt_deg": None, **header})


PROFILE = ("height_cm", "across_cm", "relative_dose", "relative_dose_sd")
HEIGHTS = tuple(float(height) for height in range(-110, 111, 10))


def bowl(depth: float) -> dict[float, float]:
    """Return a profile that is 1 in the middle and rises (or falls) by a part at 80 cm, as a square."""
    return {height: 1 + depth * (height / 80) ** 2 for height in HEIGHTS}


def graph_of(of: Program) -> Graph:
    """Return the graph of a program."""
    return Graph(of, (*arrangements(of), *measurements(of)), catalogue(), DAY, {})


def arrangement(degrader: str = "thin", side: int = 90, technique: str = "six-position") -> Ref:
    """Return an arrangement by its degrader and side."""
    if technique == "moving-couch":
        return Ref("arrangement", f"vault/linac/e6/vertical/{technique}/{degrader}/couch")
    return Ref("arrangement", f"vault/linac/e6/side-{side}/{technique}/{degrader}/platform")


def got(of: Program, name: str, degrader: str = "thin") -> Got:
    """Return a value of an arrangement, or of what it belongs to, or why there is none."""
    return graph_of(of).get(name, arrangement(degrader))


def value(of: Program, name: str, degrader: str = "thin") -> Value:
    """Return a value of an arrangement, or of what it belongs to."""
    found = got(of, name, degrader)
    assert isinstance(found, Value), found
    return found


def words(of: Program, name: str, degrader: str = "thin") -> str:
    """Return why a value cannot be had."""
    found = got(of, name, degrader)
    assert isinstance(found, Gone), found
    return " ".join(cause.words for cause in found.causes)


def finding(of: Program, rule: str, degrader: str = "thin") -> Finding:
    """Return what a rule says of an arrangement or of what it belongs to."""
    graph = graph_of(of)
    wanted = next(each for each in shipped_rules() if each.id == rule)
    owner = graph.owners(arrangement(degrader)).get(wanted.kind, wanted.kind)
    return judge_item(wanted, Ref(wanted.kind, owner), graph)
