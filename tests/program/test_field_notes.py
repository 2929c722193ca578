"""A note tells what a person must know to fill in a field."""

import pytest

from readiness.program.entry_words import field_at, meaning_of, one, unknown_key, words_at
from readiness.program.field_notes import field_note
from readiness.program.fields import schemas
from readiness.program.measurement_kinds import measurement_kind


@pytest.mark.parametrize(
    ("name", "note"),
    [
        ("room.title", "text"),
        ("room.isocentre_height_cm", "number, cm, above 0 to 300"),
        ("room.air_changes_per_h", "number, per hour, from 0 to 60"),
        ("room.camera_shows_feet", "yes or no"),
        ("room.intercom", "one of two-way, one-way, none"),
        ("room.floor_polygon_cm", "list of points: [[x, y], [x, y], [x, y]], cm"),
        ("room.changed_on", "year-month-day"),
        ("program.format", "whole number, always 1, required"),
        ("plan.beam", "id of a beam of that machine"),
        ("barrier.room", "id of a room, required"),
        ("barrier.layers", "a list, each entry with the keys below"),
        ("in_vivo.detector", "id of an instrument"),
        ("evidence.file", "path under evidence/"),
        ("cost.low", "number, from 0"),
    ],
)
def test_a_note_tells_form_unit_and_range(name, note):
    """The note of a field holds its form, unit, range and whether it must be there."""
    field = schemas().field(name)
    assert field is not None
    assert field_note(field) == note


def test_words_with_meanings_keep_them():
    """Allowed words that need an explanation have it in brackets."""
    protocol = schemas().field("program.protocol")
    assert protocol is not None
    assert "trs-398 (IAEA TRS-398)" in field_note(protocol)


def test_a_measurement_may_name_none():
    """A degrader in a header may be none; a side is one of three angles."""
    header = measurement_kind("dual-profile").header
    assert field_note(header["degrader"]) == "id of a degrader, or none, required"
    assert field_note(header["side_deg"]) == "number, °, 0 or 90 or 270, required"


def test_a_place_is_named_in_words():
    """What stands in a row, list or point is named from the inside out."""
    barrier, room = schemas().kinds["barrier"].fields, schemas().kinds["room"].fields
    program = schemas().kinds["program"].fields
    assert words_at(barrier, ("layers", 1, "thickness_cm")) == "thickness in row 2 of layers"
    assert words_at(barrier, ("layers", 0)) == "row 1 of layers"
    assert words_at(room, ("floor_polygon_cm", 2, 1)) == "y of point 3 of floor polygon"
    assert words_at(program, ("closed_dates", 3)) == "entry 4 of closed dates"
    assert words_at(program, ("chosen_arrangement", "side_deg")) == "side of chosen arrangement"
    assert field_at(barrier, ("layers", 1, "thickness_cm")).unit == "cm"


def test_an_unknown_key_is_explained():
    """A key that is not known is compared with those that are, or explained."""
    assert unknown_key("celing", ["ceiling", "floor"]) == '"celing" is not known: did you mean ceiling?'
    assert unknown_key("zz", ["ceiling"], " in row 1") == '"zz" is not known in row 1; known are ceiling'
    assert unknown_key("zz", [], elsewhere=": it is elsewhere") == '"zz" is not known: it is elsewhere'
    assert "write cycles and sessions_per_cycle" in unknown_key("fractions", ["cycles"])


def test_entries_are_named_with_their_unit():
    """What is expected is named in full."""
    assert one("number", "cm") == "a number in centimetres"
    assert one("whole number") == "a whole number"
    assert one("yes or no") == "yes or no"
    assert one("date") == "a date"


def test_a_meaning_fits_into_a_sentence():
    """A meaning loses its capital and its full stop, but an abbreviation keeps its letters."""
    field = schemas().field("room.title")
    assert field is not None
    assert meaning_of(field) == "name in words"
    assert meaning_of(measurement_kind("dual-profile").header["mu_ratio"]).startswith("MU of the field")
