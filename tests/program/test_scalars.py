"""A single entry is read as the schema asks, or it is said what to write instead."""

import math
from datetime import date

import pytest
from hypothesis import given
from hypothesis import strategies as st

from readiness.errors import Place, Problem
from readiness.program.nodes import Scalar
from readiness.program.scalars import (
    READERS,
    read_any,
    read_date,
    read_number,
    read_text,
    read_whole_number,
    read_yes_or_no,
)

HERE = Place("rooms.yaml", 14, 3)


def written(text: str, quoted: bool = False) -> Scalar:
    """Return an entry at a known place."""
    return Scalar(text, HERE, quoted)


@pytest.mark.parametrize(
    ("expected", "text"),
    [(350, "350"), (3.5, "3.5"), (-0.5, "-0.5"), (5, "+5"), (0.5, ".5"), (5, "5."), (1000, "1e3"), (0.012, "1.2E-2"), (0, "0"), (0, "0.000")],
)  # fmt: skip
def test_number_is_read(expected, text):
    """Digits with a decimal point, and powers of ten, are a number; quotes make no difference."""
    assert (expected, None) == read_number(written(text), what="distance", unit="cm")
    assert (expected, None) == read_number(written(text, quoted=True), what="distance", unit="cm")


def test_minus_zero_is_zero():
    """Minus nought is nought, so that it is never printed with a sign."""
    value, _ = read_number(written("-0"), what="distance")
    assert 1.0 == math.copysign(1.0, value)


def test_problem_stands_at_its_place_in_the_users_words():
    """The whole line that a user sees for a comma and a unit."""
    _, problem = read_number(written("3,5 m"), what="treatment plane distance", unit="cm")
    expected = 'rooms.yaml:14:3: treatment plane distance must be a number in centimetres, not "3,5 m" (did you mean 350?) [type]'
    assert expected == str(problem)


@pytest.mark.parametrize(
    ("unit", "text", "ending"),
    [
        ("cm", "3,5", '"3,5": write 3.5, with a decimal point instead of the comma'),
        ("cm", "0,500", '"0,500": write 0.5, with a decimal point instead of the comma'),
        ("cm", "1,200", '"1,200": write 1200 if the comma parts thousands, 1.2 if it is a decimal comma'),
        ("cm", "1,200,300", '"1,200,300": write 1200300, without commas'),
        ("cm", "1,200.5", '"1,200.5": write 1200.5, without commas'),
        ("cm", "1.200,5", '"1.200,5": write 1200.5, with a decimal point only'),
        ("cm", "3.5 m", '"3.5 m": write 350, in centimetres'),
        ("cm", "3.5m", '"3.5m": write 350, in centimetres'),
        ("m", "710 cm", '"710 cm": write 7.1, in metres'),
        ("cm", "12 in", '"12 in": write 30.48, in centimetres'),
        ("cm", "350 cm", '"350 cm": write 350 alone, the unit is fixed'),
        ("deg", "16°", '"16°": write 16 alone, the unit is fixed'),
        ("gy", "200 cGy", '"200 cGy": write 2, in Gy'),
        ("msv", "20 µSv", '"20 µSv": write 0.02, in mSv'),
        ("kpa", "985 hPa", '"985 hPa": write 98.5, in kPa'),
        ("cm", "350 Gy", '"350 Gy": write the number alone, in centimetres'),
        ("", "20 %", '"20 %" (did you mean 0.2?)'),
        ("cm", "010", '"010": write 10, without the leading zero'),
        ("cm", "1_000", '"1_000": write 1000, without anything between the digits'),
        ("cm", "1 000", '"1 000": write 1000, without anything between the digits'),
        ("cm", "12:30", '"12:30": it looks like a time of day; write one number'),
        ("h", "12:30", '"12:30": write hours as one number, 12.5'),
        ("min", "1:30", '"1:30": write minutes as one number, 90 if 1:30 means that'),
        ("", "1/5", '"1/5": write it as one number, 0.2'),
        ("cm", "no", '"no": a number is expected here, not yes or no'),
        ("cm", "off", '"off": a number is expected here, not yes or no'),
        ("cm", ".nan", '".nan": a number must be finite; leave it out if it is not known'),
        ("cm", "-.inf", '"-.inf": a number must be finite; leave it out if it is not known'),
        ("cm", "inf", '"inf": a number must be finite; leave it out if it is not known'),
        ("cm", "0x1F", '"0x1F": write it as an ordinary number, 31'),
        ("cm", "0o17", '"0o17": write it as an ordinary number, 15'),
        ("cm", "３５０", '"３５０": write 350 with the digits and signs of the Latin keyboard'),
        ("cm", "−5", '"−5": write -5 with the digits and signs of the Latin keyboard'),
        ("cm", "350-400", '"350-400": write one number'),
        ("cm", "~350", '"~350": write the number alone, without a sign or word before it'),
        ("cm", "unknown", '"unknown": leave it out if it is not known'),
        ("cm", "~", '"~": leave it out if it is not known'),
        ("cm", "1.2.3", '"1.2.3": write digits and a decimal point only, or leave it out if it is not known'),
        ("cm", "1e400", '"1e400": it is too large to be held'),
        ("cm", "1e-400", '"1e-400": it is too near zero to be held; write 0'),
    ],
)  # fmt: skip
def test_what_is_no_number_says_what_to_write(unit, text, ending):
    """Whatever looks like a number but is none is refused with the next step."""
    value, problem = read_number(written(text), what="distance", unit=unit)
    assert (None, ending) == (value, problem.message.split(", not ", 1)[1])


def test_five_thousand_digits_are_not_a_number():
    """A key that stuck is told by its length and does not fill the screen."""
    _, problem = read_number(written("9" * 5000), what="distance", unit="cm")
    assert ": it has 5000 characters, more than any number needed here" in problem.message
    assert len(problem.message) < 200


@pytest.mark.parametrize(
    ("unit", "expected"),
    [
        ("", "a number"),
        ("cm", "a number in centimetres"),
        ("working_days", "a number of working days"),
        ("per_week", "a number per week"),
        ("mev", "a number in MeV"),
    ],
)
def test_empty_entry_says_what_is_expected(unit, expected):
    """An empty entry is told apart from a wrong one."""
    message = f"distance is empty: write {expected}, or leave it out if it is not known"
    assert (None, Problem(HERE, message, "empty")) == read_number(written(""), what="distance", unit=unit)


@pytest.mark.parametrize(("expected", "text"), [(8, "8"), (0, "-0"), (-3, "-3")])
def test_whole_number_is_read(expected, text):
    """Digits alone are a whole number."""
    assert (expected, None) == read_whole_number(written(text), what="patients", unit="patients")


@pytest.mark.parametrize(
    ("text", "ending"),
    [
        ("4.0", '"4.0": write 4'),
        ("1e3", '"1e3": write 1000'),
        ("4.5", '"4.5": it has decimals or is too large'),
        ("1e300", '"1e300": it has decimals or is too large'),
        ("010", '"010": write 10, without the leading zero'),
        ("4 patients", '"4 patients": write 4 alone, the unit is fixed'),
        ("10000000000000000", '"10000000000000000": at most 1000000000000000 can be read'),
    ],
)
def test_what_is_no_whole_number_says_what_to_write(text, ending):
    """Decimals, powers of ten and units are refused with the next step."""
    value, problem = read_whole_number(written(text), what="patients", unit="patients")
    assert (None, f"patients must be a whole number of patients, not {ending}") == (value, problem.message)


@pytest.mark.parametrize(("expected", "text"), [(True, "yes"), (True, "True"), (False, "NO"), (False, "false")])
def test_yes_and_no_are_read(expected, text):
    """Yes, no, true and false are read in any case."""
    assert (expected, None) == read_yes_or_no(written(text), what="two-way intercom")


@pytest.mark.parametrize(
    ("text", "advice"),
    [("on", "write yes"), ("off", "write no"), ("y", "write yes"), ("0", "write no"), ("~", "leave it out if it is not known"),
     ("some", "write yes or no, or leave it out if it is not known")],
)  # fmt: skip
def test_other_words_are_neither_yes_nor_no(text, advice):
    """On, off, letters and digits are refused with the next step."""
    _, problem = read_yes_or_no(written(text), what="two-way intercom")
    assert f'two-way intercom must be yes or no, not "{text}": {advice}' == problem.message


def test_date_is_read():
    """Year-month-day is a date."""
    assert (date(2026, 2, 1), None) == read_date(written("2026-02-01"), what="date")


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("2026-02-30", "calibration: 2026-02-30 does not exist: February 2026 has 28 days, not a day 30"),
        ("2028-02-30", "calibration: 2028-02-30 does not exist: February 2028 has 29 days, not a day 30"),
        ("2026-13-01", "calibration: 2026-13-01 does not exist: there is no month 13; dates are written year-month-day"),
        ("0206-01-01", "calibration: the year of 0206-01-01 lies outside 1900 to 2199; check the year"),
    ],
)
def test_day_that_does_not_exist_is_refused(text, message):
    """A date in the right form that no calendar holds says why."""
    assert message == read_date(written(text), what="calibration")[1].message


@pytest.mark.parametrize(
    ("text", "ending"),
    [
        ("01/02/2026", ": write it year-month-day, 2026-02-01 if the day stands first, 2026-01-02 if the month does"),
        ("13/02/2026", ": write 2026-02-13 (year-month-day)"),
        ("02/13/2026", ": write 2026-02-13 (year-month-day)"),
        ("01.01.2026", ": write 2026-01-01 (year-month-day)"),
        ("1 Feb 2026", ": write 2026-02-01 (year-month-day)"),
        ("February 1, 2026", ": write 2026-02-01 (year-month-day)"),
        ("2026/2/1", ": write 2026-02-01 (year-month-day)"),
        ("20260201", ": write 2026-02-01 (year-month-day)"),
        ("2026-02-01T10:00", ": write the day alone, 2026-02-01"),
        ("today", ": write year-month-day, as in 2026-02-01"),
        ("２０２６-02-01", ": write year-month-day, as in 2026-02-01"),
    ],
)
def test_date_in_another_form_says_how_to_write_it(text, ending):
    """Each usual way to write a day leads to the one that cannot be mistaken; both readings are given."""
    expected = f'calibration must be a date, year-month-day, not "{text}"{ending}'
    assert expected == read_date(written(text), what="calibration")[1].message


@pytest.mark.parametrize("text", ["vault-a", "010", "12:30", "2026-02-30", "y", "1_000", "Room #2"])
def test_text_is_kept_as_written(text):
    """A text is what was written, even if it looks like a number."""
    assert (text, None) == read_text(written(text), what="name")


@pytest.mark.parametrize("text", ["yes", "No", "on", "OFF", "true", "false"])
def test_switch_words_need_quotes_to_be_a_text(text):
    """Unquoted no and off are refused where a text stands, in quotes they are texts."""
    _, problem = read_text(written(text), what="name")
    assert f'name must be a text, not "{text}": put it in quotes, "{text}", if you mean the word' == problem.message
    assert (text, None) == read_text(written(text, quoted=True), what="name")


@pytest.mark.parametrize("text", ["null", "~"])
def test_nothing_words_are_not_texts(text):
    """Unquoted null and ~ are taken for "not known", in quotes they are texts."""
    assert (text, None) == read_text(written(text, quoted=True), what="name")
    _, problem = read_text(written(text), what="name")
    expected = f'name must be a text, not "{text}": leave it out if it is not known, or put it in quotes if you mean the word'
    assert expected == problem.message


@pytest.mark.parametrize(
    ("expected", "text", "quoted"),
    [(350, "350", False), ("350", "350", True), (True, "yes", False), ("yes", "yes", True), (date(2026, 2, 1), "2026-02-01", False),
     ("six-position", "six-position", False), ("12:30", "12:30", False)],
)  # fmt: skip
def test_any_entry_is_read_by_its_look(expected, text, quoted):
    """Where several types may stand, quotes make a text and the look decides otherwise."""
    assert (expected, None) == read_any(written(text, quoted), what="limit")


@pytest.mark.parametrize("text", ["010", "3,5", "1_000", "0x1F", ".inf", "2026-02-30", "off", "~"])
def test_doubtful_entries_are_refused_where_several_types_may_stand(text):
    """What could be taken for two things is refused."""
    value, problem = read_any(written(text), what="limit")
    assert (None, HERE) == (value, problem.place)


@given(text=st.text(max_size=60), quoted=st.booleans(), kind=st.sampled_from(sorted(READERS)))
def test_any_text_is_a_value_or_a_problem(text, quoted, kind):
    """Whatever is written gives a value or one problem on one line, never both, never an exception."""
    value, problem = READERS[kind](written(text, quoted), what="entry")
    assert (value is None) == (problem is not None)
    if problem:
        assert problem.place == HERE
        assert "\n" not in problem.message


@given(st.floats(allow_nan=False, allow_infinity=False))
def test_every_finite_number_that_python_prints_is_read_back(number):
    """The shortest way to write a number leads back to it."""
    value, problem = read_number(written(repr(number)), what="entry")
    assert (number, None) == (value, problem)


@given(st.from_regex(r"[0-9.,:/_+ eExXmMcC%µ°'-]{1,44}", fullmatch=True), st.sampled_from(["", "cm", "h", "min", "gy", "percent"]))
def test_what_resembles_a_number_never_breaks_the_hints(text, unit):
    """Anything made of the characters of numbers and units is a finite number or a problem."""
    value, problem = read_number(written(text), what="entry", unit=unit)
    assert problem is not None or math.isfinite(value)
