"""Ranges and words are checked by cerberus, whose own schema check agrees with our descriptions."""

import pytest
from cerberus import Validator
from hypothesis import given
from hypothesis import strategies as st

from readiness.errors import Place
from readiness.program.field_schema import FieldSchema
from readiness.program.fields import schemas
from readiness.program.limits import (
    _Checker,
    cerberus_schema,
    check_limits,
    meant_in_another_unit,
    other_unit,
)

HERE = Place("x.yaml", 1, 1)


def field(name: str = "height_cm", **said: object) -> FieldSchema:
    return FieldSchema(kind="room", name=name, meaning="A number.", **{"type": "number", **said})


def told(value: float, **said: object) -> list[str]:
    """Return what is told about one number."""
    schema = field(**said)
    places = {(schema.name,): HERE}
    return [problem.message for _, problem in check_limits({schema.name: value}, {schema.name: schema}, places, HERE)]


@pytest.mark.parametrize("kind", schemas().kinds.values(), ids=lambda kind: kind.kind)
def test_cerberus_accepts_every_description(kind):
    """The schema made of the fields of a kind is a valid cerberus schema; reading skips this slow check."""
    assert _Checker(cerberus_schema(kind.fields)).schema is not None


def test_the_lower_limit_itself_may_be_excluded():
    """A height above 0 is not 0; a limit given with min is allowed."""
    assert told(0, above=0) == ["height must be above 0 cm, not 0"]
    assert told(0, minimum=0) == []
    assert told(-0.001, minimum=0) == ["height must be at least 0 cm, not -0.001"]


def test_the_upper_limit_is_allowed():
    """A number may reach its upper limit and not exceed it."""
    assert told(900, maximum=900) == []
    assert told(900.1, maximum=900) == ["height must be at most 900 cm, not 900.1"]


@given(st.floats(allow_nan=False, allow_infinity=False), st.floats(-1e6, 1e6), st.floats(0, 1e6))
def test_cerberus_and_comparison_agree(value, low, span):
    """A number is refused exactly when it lies outside its limits."""
    assert bool(told(value, minimum=low, maximum=low + span)) == (not low <= value <= low + span)
    assert bool(told(value, above=low)) == (not value > low)


def test_a_number_that_fits_in_metres_is_recognised():
    """1.3 under a name in cm is taken for 1.3 m when 130 cm is plausible."""
    height = field(above=0, maximum=300, plausible=(90, 160))
    assert meant_in_another_unit(1.3, height) == 130
    assert meant_in_another_unit(1300, height) == 130
    assert meant_in_another_unit(20, height) is None


def test_a_suspicion_is_told_where_no_unit_fits():
    """A measurement's own suspicion stands in the message when no other unit explains the number."""
    reading = field("relative_dose", maximum=3, if_outside="per cent where a fraction is expected")
    assert other_unit(98, reading) == ": this looks like per cent where a fraction is expected"


def test_the_checker_is_cerberus():
    """What checks is a cerberus validator with one rule more."""
    assert issubclass(_Checker, Validator)
