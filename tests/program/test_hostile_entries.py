"""Whatever is written where a field stands, it is either read as what the field asks for, or told."""

import math
from datetime import date

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from readiness.errors import Place
from readiness.program import nodes
from readiness.program.entries import EntryReader, Sink
from readiness.program.field_schema import FieldSchema
from readiness.program.fields import schemas
from readiness.program.limits import check_limits
from readiness.program.typed import field_value
from readiness.quantities import Table

HERE = Place("x.yaml", 1, 1)
TEXTS = [
    "", " ", "~", "null", "none", "yes", "no", "on", "off", "NaN", ".nan", ".inf", "-.inf", "1e400", "-1e-400", "1e3",
    "010", "0x1F", "1_000", "1,5", "1.000,5", "12:30", "3 m", "-1", "0", "-0.0", "1", "1.0", "99999999999999999999",
    "2026-02-30", "2026-02-28", "0000-01-01", "<<", "*a", "&a", "!x", "{{ value.name }}", "../../etc/passwd",
    "evidence/../x", "a" * 5000, "9" * 5000, "\u202e", "\ud800", "é", "１２", "−5", "- 1", "[1, 2]", "{a: 1}", "#", "'",
]  # fmt: skip
FIELDS = {}
for _field in schemas().fields.values():
    FIELDS.setdefault((_field.type, bool(_field.plausible), _field.above is None, bool(_field.within)), _field)

scalars = st.builds(nodes.Scalar, st.one_of(st.sampled_from(TEXTS), st.text(max_size=8)), st.just(HERE), st.booleans())
keys = st.one_of(
    st.sampled_from(sorted({name for field in schemas().fields.values() for name in field.columns})), st.text(max_size=4)
).map(lambda text: nodes.Scalar(text, HERE))
trees = st.recursive(
    scalars,
    lambda inner: st.one_of(
        st.lists(inner, max_size=3).map(lambda entries: nodes.Sequence(tuple(entries), HERE)),
        st.lists(st.tuples(keys, inner), max_size=3, unique_by=lambda pair: pair[0].text).map(
            lambda entries: nodes.Mapping(tuple(entries), HERE)
        ),
    ),
    max_leaves=6,
)


def read(field: FieldSchema, node: nodes.Node) -> tuple[object, list[str]]:
    """Return what is read where a field stands, None if nothing, and what is told."""
    sink = Sink()
    reader = EntryReader({field.name: field}, sink)
    plain = reader.read(nodes.Mapping(((nodes.Scalar(field.name, HERE), node),), HERE))
    found = check_limits(plain, {field.name: field}, reader.places, HERE)
    told = [problem.message for problem in sink.problems] + [problem.message for _, problem in found]
    if told or field.name not in plain:
        return None, told
    return field_value(field, plain[field.name]), told


def is_right(field: FieldSchema, value: object) -> bool:
    """Return whether a value is what a field asks for."""
    if isinstance(value, Table):
        return value.columns == tuple(field.columns)
    if isinstance(value, tuple):
        return all(is_right(field, each) for each in value)
    if field.type in {"number", "numbers", "points"}:
        in_range = field.type != "number" or (
            (field.minimum is None or value >= field.minimum)
            and (field.maximum is None or value <= field.maximum)
            and (field.above is None or value > field.above)
        )
        return isinstance(value, float) and math.isfinite(value) and in_range
    if field.type == "whole number":
        return isinstance(value, int) and not isinstance(value, bool)
    if field.type == "yes or no":
        return isinstance(value, bool)
    if field.type in {"date", "dates"}:
        return isinstance(value, date)
    if field.type in {"word", "words"}:
        return value in field.words
    if field.type in {"scalar", "scalars"}:
        return not isinstance(value, float) or math.isfinite(value)
    return isinstance(value, str) and bool(value.strip())


@pytest.mark.parametrize("field", FIELDS.values(), ids=lambda field: field.value_name)
def test_nothing_wrong_gets_through(field):
    """Any tree of hostile entries is read as the right type and range, or there is a message."""

    @settings(max_examples=80, deadline=None, derandomize=True, database=None)
    @given(trees)
    def hold(node: nodes.Node) -> None:
        value, told = read(field, node)
        assert (value is None) == bool(told)
        assert value is None or is_right(field, value)
        assert all("\n" not in message and "\u202e" not in message for message in told)

    hold()


@pytest.mark.parametrize("field", schemas().fields.values(), ids=lambda field: field.value_name)
def test_no_field_takes_a_hostile_scalar_for_something_else(field):
    """Each hostile text, quoted or not, is read as what the field asks for, or told."""
    for text in TEXTS:
        for quoted in (False, True):
            value, told = read(field, nodes.Scalar(text, HERE, quoted))
            assert (value is None) == bool(told), text
            assert value is None or is_right(field, value), text
