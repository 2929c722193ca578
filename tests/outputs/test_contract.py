"""assessment.json says everything, follows its schema, and comes back as it was."""

import json
from datetime import date

import jsonschema
import pytest

from readiness.assessment.assessment import assess
from readiness.assessment.records import Assessment
from readiness.errors import UsageError
from readiness.outputs.contract import CAUTION, from_json, to_json
from readiness.outputs.contract_schema import contract_schema
from readiness.resources import schema_file
from tests.assessment.small import DAY, item, program


@pytest.fixture(scope="module")
def small() -> Assessment:
    """Return the assessment of a program with one room and one due instrument."""
    return assess(
        program(
            item("room", "a", ceiling_height_cm=300.0, floor_polygon_cm=((0.0, 0.0), (1.0, 0.0), (1.0, 1.0))),
            item("instrument", "i", calibrated_on=date(2026, 1, 1)),
            department="Somewhere", invented=True,
        ),
        DAY,
    )  # fmt: skip


def test_round_trip(small: Assessment) -> None:
    """What is written comes back equal."""
    assert small == from_json(to_json(small))


def test_schema_in_the_repository_is_the_schema_of_the_records() -> None:
    """The file under schemas/ has not drifted; regenerate it with contract_schema()."""
    assert schema_file("assessment.schema.json").read_text(encoding="utf-8") == contract_schema()


def test_assessment_follows_its_schema(small: Assessment) -> None:
    """A general-purpose validator accepts what we write."""
    schema = json.loads(contract_schema())
    jsonschema.Draft202012Validator.check_schema(schema)
    jsonschema.validate(json.loads(to_json(small)), schema)


def test_caution_stands_first(small: Assessment) -> None:
    """The caution and the note on invented data stand before every number."""
    head = to_json(small)[:800]
    assert CAUTION in head
    assert "invented for teaching" in head


@pytest.mark.parametrize("text", ["", "[]", "{}", '{"caution": "", "contract": "1"}', "nonsense"])
def test_what_is_not_ours_is_refused(text: str) -> None:
    """Anything else is refused in one sentence."""
    with pytest.raises(UsageError, match="not an assessment written by this tool"):
        from_json(text)
