"""Shields on the patient and boosts of a small department."""

from datetime import date
from typing import Any

import pytest

from readiness.assessment.candidates import arrangements
from readiness.assessment.catalogue import catalogue
from readiness.assessment.graph import Graph
from readiness.assessment.records import PROGRAM, Gone, Ref, Value
from readiness.assessment.values.shields import margins_of_shields, shields_too_thin
from readiness.errors import OutsideValidity
from readiness.program.items import Item, Program
from readiness.quantities import Table
from tests.assessment.small import DAY, item
from tests.assessment.values.running import department

GOGGLES = Ref("patient_shield", "goggles")
COURSE = Ref("course", "standard")
WORN = ("organ", "first_cycle", "last_cycle")
OWNED = ("id", "organ", "material", "thickness_mm")


def shield(name: str = "goggles", **changes: Any) -> Item:
    """Return a shield of the department."""
    fields = {"organ": "eyes-external", "material": "lead", "thickness_mm": 4.0, "pieces": 2, **changes}
    return item("patient_shield", name, **{key: value for key, value in fields.items() if value is not None})


def readings(degrader: str = "sheet", name: str = "goggles") -> Item:
    """Return readings behind and before a shield."""
    rows = [("behind", 0.0, 12.0, 100.0), ("behind", 0.0, 9.0, 100.0), ("beam-side", 0.0, 130.0, 100.0)]
    owners = {
        "room": "vault",
        "machine": "linac",
        "beam": "linac/e6",
        "degrader": degrader,
        "patient_shield": name,
    }
    return item(
        "measurement", "behind", owners, kind="shield-transmission", date=date(2026, 11, 2), beam="linac/e6",
        degrader=degrader, shield=name,
        table=Table.of(("place", "depth_mm", "with_shield_cgy", "without_shield_cgy"), rows),
    )  # fmt: skip


def got(of: Program, name: str, ref: Ref = PROGRAM) -> Any:
    """Return a value, or why there is none."""
    return Graph(of, arrangements(of), catalogue(), DAY, {}).get(name, ref)


def value(of: Program, name: str, ref: Ref = PROGRAM) -> Any:
    """Return a value."""
    found = got(of, name, ref)
    assert isinstance(found, Value), found
    return found.value


def test_lead_is_judged_by_the_energy_that_reaches_it() -> None:
    """At 5 MeV 3.5 mm of lead or 4.2 mm of alloy are needed; a tungsten shield has no rule and is blank."""
    rows = [("goggles", "eyes-external", "lead", 4.0), ("plate", "groin", "low-melting-alloy", 4.0),
            ("cup", "eyes-internal", "tungsten", None)]  # fmt: skip
    margins = margins_of_shields(shields=Table.of(OWNED, rows), energy_at_plane_mev=5.0)
    needed, margin = (margins.column(name) for name in ("needed_mm", "margin_mm"))
    assert [3.5, pytest.approx(4.2), None] == list(needed)
    assert [0.5, pytest.approx(-0.2), None] == list(margin)
    assert "plate" == shields_too_thin(margins=margins)


def test_more_energy_needs_more_metal() -> None:
    """The goggles that stop 5 MeV do not stop 7."""
    table = Table.of(OWNED, [("goggles", "eyes-external", "lead", 4.0)])
    assert "none" == shields_too_thin(margins=margins_of_shields(shields=table, energy_at_plane_mev=5.0))
    assert "goggles" == shields_too_thin(margins=margins_of_shields(shields=table, energy_at_plane_mev=7.0))


def test_a_thickness_that_nobody_stated_is_asked_for() -> None:
    """Lead of unknown thickness is neither thick enough nor too thin."""
    table = Table.of(OWNED, [("nails", "nails", "lead", None)])
    with pytest.raises(OutsideValidity, match="State thickness .mm. of patient shield nails"):
        shields_too_thin(margins=margins_of_shields(shields=table, energy_at_plane_mev=5.0))


def test_a_shield_tells_the_energy_that_it_stops() -> None:
    """4 mm of lead stop 6 MeV; tungsten must be measured."""
    assert 6.0 == value(department(shield()), "patient_shield.highest_energy_mev", GOGGLES)
    found = got(department(shield(material="tungsten")), "patient_shield.highest_energy_mev", GOGGLES)
    assert isinstance(found, Gone)
    assert "no thickness rule for tungsten" in found.causes[0].words


def test_the_worst_reading_behind_a_shield_counts() -> None:
    """12 % behind and 30 % more on the side of the beam, both measured."""
    of = department(shield(), readings())
    found = got(of, "patient_shield.transmission_percent", GOGGLES)
    assert (12.0, "measured") == (found.value, found.basis)
    assert pytest.approx(30.0) == value(of, "patient_shield.backscatter_percent", GOGGLES)


@pytest.mark.parametrize(("degrader", "name"), [("none", "goggles"), ("sheet", "other")])
def test_readings_with_another_degrader_or_shield_do_not_count(degrader: str, name: str) -> None:
    """Each shield is measured itself, behind the degrader that is planned."""
    of = department(shield(), shield("other"), readings(degrader, name))
    assert isinstance(got(of, "patient_shield.transmission_percent", GOGGLES), Gone)


def test_the_cover_on_the_lid_is_compared_with_a_millimetre() -> None:
    """Half a millimetre is half too little."""
    assert -0.5 == value(department(shield(cover_mm=0.5)), "patient_shield.cover_margin_mm", GOGGLES)


def test_eye_shields_are_counted_by_kind() -> None:
    """Goggles are no internal shields; pieces that nobody counted are asked for."""
    of = department(shield(), shield("cups", organ="eyes-internal", pieces=1))
    assert (2, 1) == tuple(
        value(of, f"program.{kind}_eye_shield_pieces") for kind in ("external", "internal")
    )
    found = got(department(shield(pieces=None)), "program.external_eye_shield_pieces")
    assert isinstance(found, Gone)
    assert "State pieces of patient shield goggles" in found.causes[0].words


@pytest.mark.parametrize(
    ("worn", "uncovered"),
    [
        ([("eyes-external", 1, None)], 0),
        ([("eyes-internal", 1, 9), ("eyes-external", 10, 18)], 0),
        ([("eyes-internal", 1, 9), ("eyes-external", 11, 18)], 1),
        ([("nails", 1, None)], 18),
    ],
)
def test_eyes_are_covered_by_either_shield_in_every_cycle(
    worn: list[tuple[Any, ...]], uncovered: int
) -> None:
    """Internal and external shields together cover the course, or the open cycles are counted."""
    of = department(shield(), course={"shields": Table.of(WORN, worn)})
    assert uncovered == value(of, "course.cycles_without_eye_shield_count", COURSE)


def test_what_is_worn_is_owned() -> None:
    """A course that shields nails without a nail shield names them."""
    of = department(
        shield(), course={"shields": Table.of(WORN, [("eyes-external", 1, None), ("nails", 1, 9)])}
    )
    assert "nails" == value(of, "course.shields_not_owned", COURSE)


def test_boosted_sites_are_measured() -> None:
    """A boost of the soles needs a detector there; a lesion is seen without."""
    boosts = Table.of(("site", "dose_per_session_gy", "sessions", "first_cycle"),
                      [("sole", 1.0, 6, 4), ("lesion", 2.0, 3, 1)])  # fmt: skip
    without, with_it = (
        department(item("in_vivo", sites=sites), course={"boosts": boosts})
        for sites in (("umbilicus",), ("sole",))
    )
    assert "sole" == value(without, "course.boosts_not_measured", COURSE)
    assert "none" == value(with_it, "course.boosts_not_measured", COURSE)
