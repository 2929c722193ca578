"""What an editor accepts is what cerberus accepts."""

from datetime import date

import jsonschema
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from readiness.program.editor_schema import editor_schema, field_rules, kind_schema
from readiness.program.field_schema import FieldSchema
from readiness.program.fields import schemas
from readiness.program.limits import _Checker, cerberus_schema

KINDS = list(schemas().kinds.values())
numbers = st.one_of(st.integers(-(10**4), 10**4), st.floats(-1e4, 1e4).filter(lambda number: number != int(number)))
scalars = st.one_of(numbers, st.booleans(), st.text(max_size=5), st.dates(date(1990, 1, 1), date(2100, 1, 1)))


def values(field: FieldSchema) -> st.SearchStrategy[object]:
    """Return plain data for a field, right and wrong."""
    bounds = [each for each in (field.minimum, field.maximum, field.above) if each is not None]
    near = st.sampled_from([each + step for each in bounds for step in (-1, 0, 1)]) if bounds else numbers
    words = st.sampled_from([*field.words, "something else"])
    single = st.one_of(near, words, scalars)
    if field.columns:
        row = st.fixed_dictionaries({}, optional={name: values(column) for name, column in field.columns.items()})
        return st.one_of(row, st.lists(row, max_size=2), single)
    if field.type == "points":
        return st.lists(st.one_of(st.lists(near, max_size=3), single), max_size=3)
    return st.one_of(single, st.lists(single, max_size=3))


def for_editor(data: object) -> object:
    """Return plain data as an editor sees it: dates are texts in its YAML."""
    if isinstance(data, dict):
        return {key: for_editor(value) for key, value in data.items()}
    if isinstance(data, list):
        return [for_editor(value) for value in data]
    return data.isoformat() if isinstance(data, date) else data


def cerberus_accepts(field: FieldSchema, value: object) -> bool:
    return bool(_Checker(cerberus_schema({field.name: field})).validate({field.name: value}, normalize=False))


def editor_accepts(field: FieldSchema, value: object) -> bool:
    return jsonschema.Draft7Validator(field_rules(field)).is_valid(for_editor(value))


FIELDS = {}
for _field in schemas().fields.values():  # one field of each shape is enough
    _shape = (_field.type, _field.above is None, _field.minimum is None, len(_field.words) > 3, bool(_field.columns))
    FIELDS.setdefault(_shape, _field)


@pytest.mark.parametrize("field", FIELDS.values(), ids=lambda field: field.value_name)
def test_editor_and_cerberus_agree(field):
    """Any data that one of them accepts for a field, the other accepts too, apart from dates as texts."""

    @settings(max_examples=60, deadline=None, derandomize=True, database=None)
    @given(values(field))
    def agree(value: object) -> None:
        if not _mixes_dates_and_texts(field, value):
            assert cerberus_accepts(field, value) == editor_accepts(field, value), value

    agree()


def _mixes_dates_and_texts(field: FieldSchema, value: object) -> bool:
    """Return whether a date stands where a text is right, or the reverse: an editor sees no difference."""
    if isinstance(value, dict):
        return any(_mixes_dates_and_texts(field.columns[name], each) for name, each in value.items())
    if isinstance(value, list):
        return any(_mixes_dates_and_texts(field, each) for each in value)
    dates = field.type in {"date", "dates"}
    return isinstance(value, str) if dates else isinstance(value, date)


def test_the_one_known_difference():
    """4.0 is a whole number for an editor and none for cerberus; the reader refuses it as written."""
    cycles = schemas().field("course.cycles")
    assert cycles is not None
    assert editor_accepts(cycles, 4.0)
    assert not cerberus_accepts(cycles, 4.0)


def test_dates_are_texts_of_a_pattern():
    """An editor accepts year-month-day and marks anything else."""
    changed = schemas().field("room.changed_on")
    assert changed is not None
    assert editor_accepts(changed, "2026-02-01")
    assert not editor_accepts(changed, "01.02.2026")


@pytest.mark.parametrize("word", ["yes", "no", True, False])
def test_yes_and_no_are_accepted(word):
    """An editor accepts yes and no, which are texts to it."""
    light = schemas().field("room.beam_on_light")
    assert light is not None
    assert editor_accepts(light, word)


@pytest.mark.parametrize("file", schemas().files.values(), ids=lambda file: file.file)
def test_every_field_stands_in_the_editor_schema(file):
    """The schema of a file is a valid one and holds every key with its meaning, and no others."""
    schema = editor_schema(file)
    jsonschema.Draft7Validator.check_schema(schema)
    for kind in file.top.with_inner():
        found = kind_schema(kind)
        assert set(found["properties"]) == set(kind.keys)
        assert found["additionalProperties"] is False
        for name, field in kind.fields.items():
            assert field.meaning in found["properties"][name]["description"]


def test_nested_kinds_stand_inside_their_owner():
    """The beams stand inside a machine in the schema of equipment.yaml."""
    schema = editor_schema(schemas().files["equipment.yaml"])
    machine = schema["properties"]["machines"]["items"]
    assert machine["required"] == ["id"]
    assert "r50_cm" in machine["properties"]["beams"]["items"]["properties"]


def test_an_editor_marks_what_the_reader_refuses():
    """A room with an unknown key, a number as text and a missing id is marked three times."""
    schema = editor_schema(schemas().files["rooms.yaml"])
    data = {"rooms": [{"celing": 3, "ceiling_height_cm": "3 m"}]}
    errors = {error.validator for error in jsonschema.Draft7Validator(schema).iter_errors(data)}
    assert errors == {"additionalProperties", "type", "required"}
