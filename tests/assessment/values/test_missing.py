"""What is asked for together: the answer names what is missing, and nothing is assumed of what is not stated."""

from typing import Any

import pytest

from readiness.assessment.records import Gone, Ref, Value
from readiness.assessment.values import missing
from readiness.program.items import Program
from tests.assessment.small import graph, item, program


def got(of: Program, name: str) -> Any:
    """Return a value, or why there is none."""
    kind = name.partition(".")[0]
    others = (each for each in missing.DEFINITIONS if each.kind != "stand")
    found = graph(of, *others).get(name, Ref(kind, kind))
    return found.value if isinstance(found, Value) else found


def yes_or_no(name: str) -> list[str]:
    """Return the fields of a list that are answered with yes or no."""
    takes = next(each for each in missing.DEFINITIONS if each.name == name).takes
    return [entry.partition(".")[2] for entry in takes.values()]


FLAGS = [
    "room.safety_devices_missing", "patient_safety.stop_rule_missing", "patient_safety.dignity_missing",
    "clinical.course_record_missing", "clinical.physicians_part_missing", "patient_safety.session_checks_missing",
    "in_vivo.occasions_missing", "in_vivo.holds_missing",
    "records_security.measures_missing", "quality.chart_checks_missing",
]  # fmt: skip


@pytest.mark.parametrize("name", FLAGS)
def test_each_no_is_named_and_each_gap_is_a_cause(name: str) -> None:
    """All yes is nothing missing; one no gives one phrase; one left out beside yes is unknown and named."""
    kind, fields = name.partition(".")[0], yes_or_no(name)
    assert "nothing" == got(program(item(kind, **dict.fromkeys(fields, True))), name)
    phrases = {got(program(item(kind, **{**dict.fromkeys(fields, True), field: False})), name) for field in fields}
    assert len(fields) == len(phrases)
    for field in fields:
        rest = {each: True for each in fields if each != field}
        found = got(program(item(kind, **rest)), name)
        assert isinstance(found, Gone)
        assert [f"{kind}.{field}"] == [cause.what for cause in found.causes]


@pytest.mark.parametrize("name", FLAGS)
def test_a_known_no_decides_and_what_is_not_stated_is_said(name: str) -> None:
    """What is known to be missing is not met, whatever else nobody has stated; nothing turns to met."""
    kind, (first, *others) = name.partition(".")[0], yes_or_no(name)
    alone = got(program(item(kind, **{first: False})), name)
    complete = got(program(item(kind, **{first: False, **dict.fromkeys(others, True)})), name)
    assert alone.startswith(f"{complete}; not stated: ")


def test_a_stand_against_falls() -> None:
    """Rails, grip, surface and steps are looked at one by one; one step where two are needed is said so."""
    good = {"rails": True, "grip": True, "non_slip": True, "steps": 2, "steps_needed": 2}
    assert "nothing" == missing.against_falls(**good)  # type: ignore[arg-type]
    assert "rails, steps (1 of 2)" == missing.against_falls(**{**good, "rails": False, "steps": 1})  # type: ignore[arg-type]


def test_the_rules_for_the_day_when_something_fails() -> None:
    """A missing rule is named; a program that never said after how many days it lapses is asked for it."""
    rules = {"interrupted_cycle_rule": True, "machine_down_rule": False, "physicist_absent_rule": True}
    name = "contingency.rules_missing"
    assert "a machine that fails between the days of a cycle" == got(
        program(item("contingency", **rules), lapse_days=60.0), name
    )
    assert "a machine that fails between the days of a cycle; not stated: a lapse" == got(
        program(item("contingency", **rules)), name
    )
    rules["machine_down_rule"] = True
    assert isinstance(got(program(item("contingency", **rules)), name), Gone)


def test_documents_reviewed_every_three_years_are_not_kept_current() -> None:
    """The interval is held against the criterion of 12 months."""
    control = {"retention_years": 30.0, "read_and_understood": True, "withdrawn_copies_removed": True}
    name = "document_control.rules_missing"
    assert "nothing" == got(program(item("document_control", review_interval_months=12.0, **control)), name)
    assert "review every 12 months" == got(
        program(item("document_control", review_interval_months=36.0, **control)), name
    )


def test_sound_must_go_both_ways_and_the_feet_be_seen() -> None:
    """One-way sound and a view without feet are both named."""
    assert "nothing" == missing.feet_and_sound(camera_shows_feet=True, intercom="two-way")
    assert "a view of the feet, two-way sound" == missing.feet_and_sound(camera_shows_feet=False, intercom="one-way")


def test_a_mode_without_its_own_key_can_be_entered_by_mistake() -> None:
    """The key is asked for, and who enables the mode must be known."""
    assert "nothing" == got(program(item("beam", mode_own_key=True, mode_enabled_by="physicist")), "beam.mode_control_missing")
    assert "a key or code of its own" == missing.control_of_mode(own_key=False, enabled_by="physicist")
    assert isinstance(got(program(item("beam", mode_own_key=True)), "beam.mode_control_missing"), Gone)


def test_fit_fall_risk_and_dressings_come_from_two_sections() -> None:
    """The rule on fit asks clinical practice and safety of the patient at once."""
    safe = item("patient_safety", fall_risk_check=False, dressings_rule=True)
    found = got(program(item("clinical", patient_fit_check=True), safe), "clinical.fit_missing")
    assert "risk of a fall, before the course and before each session" == found
