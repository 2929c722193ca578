"""One choice changed: the whole assessment again, and nothing called measured that was measured elsewhere."""

from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from readiness.assessment.assessment import assess
from readiness.assessment.what_if import DISTANCE_STEPS_CM, PATIENT_FACTORS, Variant, what_ifs
from readiness.program.items import Program, Stated
from readiness.program.reading import read_folder

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"
DAY = date(2026, 12, 1)


@pytest.fixture(scope="module")
def program() -> Program:
    """Return the sample."""
    return read_folder(SAMPLE)


@pytest.fixture(scope="module")
def variants(program: Program) -> tuple[Variant, ...]:
    """Return what would be."""
    return what_ifs(program, DAY)


def figures(variant: Variant) -> dict[str, tuple[object, str]]:
    """Return name -> value, basis."""
    return {name: (value, basis) for name, value, basis in variant.figures}


def of(variants: tuple[Variant, ...], question: str) -> dict[str, Variant]:
    """Return the variants of a question by their answer."""
    return {each.answer: each for each in variants if each.question == question}


def test_the_present_choice_stands_first_and_turns_nothing(variants: tuple[Variant, ...]) -> None:
    """Under each of the three questions."""
    for question in ("plane distance", "beam", "patients a year"):
        first, *others = of(variants, question).values()
        assert first.present
        assert () == first.turned
        assert not any(each.present for each in others)
    assert 1 + len(DISTANCE_STEPS_CM) == len(of(variants, "plane distance"))
    assert 1 + len(PATIENT_FACTORS) == len(of(variants, "patients a year"))


def test_a_variant_is_what_a_folder_with_that_number_gives(program: Program, variants: tuple[Variant, ...]) -> None:
    """375 cm written into the plan gives the same figures, worked out without the memory."""
    items = tuple(
        replace(item, fields={**item.fields, "plane_distance_cm": Stated(375.0, item.place)})
        if (item.kind, item.id) == ("plan", "west-wall")
        else item
        for item in program.items
    )
    written = assess(replace(program, items=items), DAY)
    values = {value.name: (value.value, value.basis) for value in written.values
              if value.item.id in (written.verdict.arrangement, "program")}  # fmt: skip
    found = figures(of(variants, "plane distance")["375 cm"])
    assert found
    assert {name: values[name] for name in found} == found


def test_nothing_is_measured_where_it_was_not_measured(variants: tuple[Variant, ...]) -> None:
    """At another distance or with another beam no figure of the field is called measured, and none is met by one."""
    for question in ("plane distance", "beam"):
        for variant in of(variants, question).values():
            if not variant.present:
                assert "measured" not in {basis for _, basis in figures(variant).values()}
                assert not [each for each in variant.turned if each.rule.endswith("-measured") and each.after == "met"]


def test_distance_evens_the_field_across(variants: tuple[Variant, ...]) -> None:
    """Farther away the horizontal is flatter and a session longer."""
    ordered = sorted(of(variants, "plane distance").values(), key=lambda each: float(each.answer.split()[0]))
    across = [figures(each)["arrangement.horizontal_uniformity_percent"][0] for each in ordered]
    minutes = [figures(each)["arrangement.later_session_min"][0] for each in ordered]
    assert sorted(across, reverse=True) == across  # type: ignore[type-var]
    assert sorted(minutes) == minutes  # type: ignore[type-var]


def test_more_patients_wait_longer(variants: tuple[Variant, ...]) -> None:
    """The wait grows with the number, until it cannot be given at all."""
    waits = [figures(each).get("program.wait_weeks") for each in of(variants, "patients a year").values()]
    present, half, more, *most = waits
    assert None not in (present, half, more)
    assert half[0] < present[0] < more[0]  # type: ignore[index, operator]
    assert [None] * len(most) == most


def test_what_turns_is_named(variants: tuple[Variant, ...]) -> None:
    """Nearer by 25 cm the laser box is no longer in the way."""
    turned = {each.rule: (each.before, each.after) for each in of(variants, "plane distance")["375 cm"].turned}
    assert ("not met", "met") == turned["plane-free"]


def test_without_a_chosen_arrangement_nothing_is_varied(program: Program) -> None:
    """There is no choice to change."""
    items = tuple(
        replace(item, fields={name: each for name, each in item.fields.items() if name != "chosen_arrangement"})
        if item.kind == "program"
        else item
        for item in program.items
    )
    assert () == what_ifs(replace(program, items=items), DAY)
