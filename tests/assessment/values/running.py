"""A small department with one standing and one lying arrangement, for the values of running a program."""

from datetime import date
from typing import Any

from readiness.assessment.candidates import arrangements
from readiness.assessment.catalogue import catalogue
from readiness.assessment.graph import Graph
from readiness.assessment.records import Ref, Value
from readiness.program.items import Item, Program
from readiness.quantities import Table
from tests.assessment.small import DAY, item, program

PLAN: dict[str, Any] = {
    "pair_output_cgy_per_mu": 0.02, "b_factor": 2.5, "mu_convention": "total-of-both-beams", "mu_share_upper": 0.5,
    "couch_speed_cm_per_s": 2.0, "lying_passes": 2,
}  # fmt: skip
BEAM: dict[str, Any] = {
    "rate_mu_per_min": 1000.0,
    "largest_mu_per_beam_mu": 2500.0,
    "xray_fraction_percent": 0.9,
}
COURSE: dict[str, Any] = {
    "dose_per_cycle_gy": 2.0, "cycles": 18, "sessions_per_cycle": 2, "sessions_per_week": 4, "prescription_depth_mm": 0.0,
}  # fmt: skip
STEPS: dict[str, Any] = {
    "preparation_min": 10.0, "shields_min": 5.0, "in_vivo_placement_min": 60.0, "turning_min": 2.0, "gantry_move_min": 1.0,
    "mode_entry_min": 5.0, "mode_return_min": 5.0, "cleaning_min": 5.0,
}  # fmt: skip
WHOLE: dict[str, Any] = {
    "techniques": ("six-position", "rotating-platform", "moving-couch"), "standing_time_min": 6.0,
    "lying_incidences": ("front", "left", "back", "right"),
}  # fmt: skip


def only_known(**fields: Any) -> dict[str, Any]:
    """Return the fields that are not None."""
    return {name: value for name, value in fields.items() if value is not None}


def department(
    *more: Item,
    plan: dict[str, Any] | None = None,
    beam: dict[str, Any] | None = None,
    course: dict[str, Any] | None = None,
    steps: dict[str, Any] | None = None,
    **changes: Any,
) -> Program:
    """Return the department with fields changed as asked; None leaves a field out."""
    return program(
        item("room", "vault", changed_on=date(2025, 1, 1)),
        item("machine", "linac", {"room": "vault"}, source_axis_distance_cm=100.0),
        item("beam", "linac/e6", {"machine": "linac"}, **only_known(**{**BEAM, **(beam or {})})),
        item("degrader", "sheet", material="pmma", thickness_cm=0.6),
        item("stand", "platform", turn_time_s=20.0),
        item("couch", "couch"),
        item("plan", "plan", **only_known(**{**PLAN, **(plan or {})})),
        item("course", "standard", **only_known(**{**COURSE, **(course or {})})),
        item("session_time", **only_known(**{**STEPS, **(steps or {})})),
        *more,
        **only_known(**{**WHOLE, **changes}),
    )


def arrangement(of: Program, technique: str) -> tuple[Graph, Ref]:
    """Return the graph of a program and its arrangement of a technique, at gantry 90 if it has a side."""
    made = arrangements(of)
    found = next(
        each for each in made if each.get("technique") == technique and each.get("side_deg") in (0, 90)
    )
    return Graph(of, made, catalogue(), DAY, {}), Ref("arrangement", found.id)


def got(of: Program, name: str, technique: str = "six-position") -> Any:
    """Return a value of an arrangement, or why there is none."""
    graph, ref = arrangement(of, technique)
    return graph.get(f"arrangement.{name}", ref)


def value(of: Program, name: str, technique: str = "six-position") -> Any:
    """Return a value of an arrangement."""
    found = got(of, name, technique)
    assert isinstance(found, Value), found
    return found.value


def dose_rates(**changes: Any) -> Item:
    """Return a measured dose rate along the couch's travel: a triangle of 100 cm with 300 cGy/min at its middle."""
    fields = {
        "kind": "couch-dose-rate", "date": date(2026, 11, 2), "rate_mu_per_min": 1000.0, "couch": "couch",
        "beam": "linac/e6", "machine": "linac", "room": "vault", "degrader": "sheet",
        "table": Table.of(("position_cm", "dose_rate_cgy_per_min"), [(-50.0, 0.0), (0.0, 300.0), (50.0, 0.0)]),
        **changes,
    }  # fmt: skip
    owners = {"room": "vault", "machine": "linac", "beam": "linac/e6", "degrader": "sheet", "couch": "couch"}
    return item("measurement", "rates", owners, **fields)
