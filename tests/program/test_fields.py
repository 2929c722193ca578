"""What can be written stands in schemas/fields, and a wrong description is found when it is loaded."""

from pathlib import Path

import pytest
import yaml

from readiness.errors import CatalogueError
from readiness.program.fields import load_folder, schemas
from readiness.resources import schema_file

PROGRAM = """
file: program.yaml
title: Program
meaning: All of it.
root:
  kind: program
  title: Program
  meaning: All of it.
  fields:
    format: {type: whole number, required: true, min: 1, max: 1, meaning: "Format.", example: 1}
"""
ROOMS = """
file: rooms.yaml
title: Rooms
meaning: The rooms.
lists:
  rooms:
    kind: room
    title: Room
    meaning: A room.
    fields:
      height_cm: {type: number, nature: claim, above: 0, max: 900, plausible: [200, 600], meaning: "Its height."}
      door: {type: word, words: {in: "opens inward", out: "opens outward"}, meaning: "Its door."}
    lists:
      boxes:
        kind: box
        title: Box
        meaning: A box.
        fields:
          stands_in: {type: reference, to: room, owner: true, meaning: "Where it stands."}
"""


def load(folder: Path, rooms: str = ROOMS):
    (folder / "program.yaml").write_text(PROGRAM)
    (folder / "rooms.yaml").write_text(rooms)
    return load_folder(folder)


def test_a_field_keeps_all_that_is_said_about_it(tmp_path):
    """A field knows type, unit, range, plausible range, nature and meaning."""
    height = load(tmp_path).field("room.height_cm")
    assert height is not None
    assert (height.type, height.unit, height.printed_unit, height.in_words) == ("number", "cm", "cm", "height")
    assert (height.above, height.maximum, height.plausible) == (0, 900, (200, 600))
    assert (height.nature, height.meaning) == ("claim", "Its height.")


def test_words_may_have_meanings(tmp_path):
    """Allowed words are kept in their order with their meanings."""
    door = load(tmp_path).field("room.door")
    assert door is not None
    assert door.words == {"in": "opens inward", "out": "opens outward"}


def test_the_program_comes_first(tmp_path):
    """program.yaml is read before the other files, so that the program item is the first."""
    assert list(load(tmp_path).files) == ["program.yaml", "rooms.yaml"]


def test_owners_are_direct_and_through_others(tmp_path):
    """A kind belongs to what it is written in, to what its owner field names, and to their owners."""
    known = load(tmp_path)
    assert known.owner_kinds("room") == ("program",)
    assert known.owner_kinds("box") == ("room", "room")
    assert known.all_owner_kinds("box") == ("room", "program")
    assert known.all_owner_kinds("program") == ()


def test_lists_are_known_by_their_owner(tmp_path):
    """The lists of a kind are those written inside it; those at the top of files are the program's."""
    known = load(tmp_path)
    assert known.lists_of("program") == ("room",)
    assert known.lists_of("room") == ("box",)
    assert known.sections_of("program") == ()


@pytest.mark.parametrize(
    ("before", "after", "complaint"),
    [
        ("type: number", "type: nubmer", "room.height_cm: unknown type 'nubmer'"),
        (', meaning: "Its height."', "", "room.height_cm: meaning is missing"),
        ('meaning: "Its height."', "meaning: 7", "room.height_cm: meaning is missing"),
        ("height_cm", "height_inch", "room.height_inch: the unit 'inch' at the end of its name is not known"),
        ("door: {", "door_mm: {", "room.door_mm: a word has no unit, but its name ends with 'mm'"),
        ("nature: claim", "nature: guess", "room.height_cm: unknown nature 'guess'"),
        ("nature: claim", "natur: claim", "room.height_cm: unknown key 'natur'"),
        ("max: 900", "max: -1", "room.height_cm: its smallest value is not below its largest"),
        ("[200, 600]", "[200, 1000]", "its plausible range reaches beyond its allowed range"),
        ("[200, 600]", "[600, 200]", r"room.height_cm: plausible is \[low, high\]"),
        ('words: {in: "opens inward", out: "opens outward"}, ', "", "room.door: the allowed words are missing"),
        ('{in: "opens inward", out: "opens outward"}', "[in, no]", "room.door: every allowed word must be a text"),
        ("type: number, nature", "type: number, to: room, nature", "room.height_cm: only a reference has to"),
        ("to: room, ", "", "box.stands_in: it does not say what it refers to"),
        ("to: room", "to: vault", "box.stands_in refers to kind 'vault', which does not exist"),
        ("to: room", "to: room, within: door", "box.stands_in: there is no field 'door' beside it"),
        ("type: reference", "type: references", "one item cannot have several owners of a kind"),
        ("type: number", "type: rows", "room.height_cm: only numbers have a range"),
        ("kind: box", "kind: room", "kind 'room' is described 2 times"),
        ("boxes:", "door:", "rooms.yaml rooms: 'door' is described twice"),
        ("title: Box", "titel: Box", "rooms.yaml boxes: unknown key 'titel'"),
        ("file: rooms.yaml", "file: room.yaml", "rooms.yaml: describes 'room.yaml'; name it after that file"),
        ("door: {", "id: {", "room: id is understood and is not described again"),
        ("door: {", "Door: {", "room.Door: a name has small letters, digits and underscores"),
        (ROOMS, "- a list", "rooms.yaml: a mapping is expected"),
        (ROOMS, "a: [", "rooms.yaml: while parsing"),
        (
            'max: 900, plausible: [200, 600], meaning: "Its height."',
            'max: 900, meaning: "Its height.", assumed: {value: 300, source: practice, at: x, known: guessed}',
            "room.height_cm: 'guessed' does not say how the assumed value is known",
        ),
    ],
)
def test_a_wrong_description_is_refused(tmp_path, before, after, complaint):
    """A description that does not fit together is named when it is loaded."""
    assert before in ROOMS
    with pytest.raises(CatalogueError, match=complaint):
        load(tmp_path, ROOMS.replace(before, after))


def test_the_program_must_be_described(tmp_path):
    """Without program.yaml nothing says what everything belongs to."""
    (tmp_path / "rooms.yaml").write_text(ROOMS)
    with pytest.raises(CatalogueError, match="no file describes the program itself"):
        load_folder(tmp_path)


def test_the_fields_that_ship_fit_together():
    """Every shipped description loads, and every kind reaches the program."""
    known = schemas()
    assert len(known.files) == len(list(schema_file("fields").glob("*.yaml")))
    for kind in known.kinds:
        assert kind == "program" or known.all_owner_kinds(kind)[-1] == "program"


def test_every_assumed_value_has_a_source():
    """Each assumed value names a publication of schemas/sources.yaml, or practice, and lies in its range."""
    known = yaml.safe_load(schema_file("sources.yaml").read_text(encoding="utf-8"))
    assumed = [field for field in schemas().fields.values() if field.assumed is not None]
    assert assumed
    for field in assumed:
        assert field.assumed.source == "practice" or field.assumed.source in known, field.value_name
        if field.type == "word":
            assert field.assumed.value in field.words, field.value_name
            continue
        low, high = field.plausible or (field.minimum or field.above or 0, field.maximum)
        assert low <= field.assumed.value <= high, field.value_name
