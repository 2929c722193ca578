"""A file becomes typed items with their places."""

from datetime import date

from folder_texts import problems, read, room

from readiness.errors import Place
from readiness.quantities import Table

EQUIPMENT = """
machines:
  - id: linac-1
    room: vault-a
    beams:
      - id: e6
        r50_cm: 2.36
degraders: []
"""


def test_an_entry_becomes_an_item():
    """A listed entry is an item of its kind with its id, fields, places and owner."""
    program = read(rooms=room(ceiling_height_cm="300", camera_views="2", door_interlock="yes", intercom="none"))
    vault = program.find("room", "vault-a")
    assert vault is not None
    assert {name: stated.value for name, stated in vault.fields.items()} == {
        "ceiling_height_cm": 300.0,
        "camera_views": 2,
        "door_interlock": True,
        "intercom": "none",
    }
    assert vault.fields["camera_views"].place == Place("rooms.yaml", 4, 19)
    assert vault.place == Place("rooms.yaml", 2, 5)
    assert vault.owners == {"program": "program"}


def test_the_program_is_an_item():
    """What stands at the top of program.yaml belongs to the item of kind program."""
    program = read(program="format: 1\ndepartment: Seebad\ntarget_first_patient_date: 2027-05-17\n")
    (item,) = program.of_kind("program")
    assert (item.id, item.owners) == ("program", {})
    assert item.get("target_first_patient_date") == date(2027, 5, 17)


def test_a_nested_entry_carries_its_owner():
    """A beam's id begins with its machine's, and both know what they belong to."""
    program = read(rooms=room(), equipment=EQUIPMENT)
    beam, machine = program.find("beam", "linac-1/e6"), program.find("machine", "linac-1")
    assert beam is not None
    assert machine is not None
    assert beam.owners == {"machine": "linac-1"}
    assert machine.owners == {"program": "program", "room": "vault-a"}


def test_a_section_is_one_item():
    """A section is an item whose id is its kind."""
    program = read(program="format: 1\nclinical:\n  lymphoma_board: no\n")
    section = program.find("clinical", "clinical")
    assert section is not None
    assert section.get("lymphoma_board") is False


def test_a_written_list_is_complete():
    """A list that is present is known, even empty; one that is absent is not."""
    program = read(rooms=room(), equipment=EQUIPMENT)
    assert program.known_lists == {("room", "program"), ("machine", "program"), ("degrader", "program"), ("beam", "linac-1")}


def test_rows_become_a_table():
    """Rows are a table with all described columns; what is not written is blank."""
    barrier = "barriers:\n  - id: west\n    room: vault-a\n    layers: [{material: concrete, thickness_cm: 215}]\n"
    item = read(rooms=room(), shielding=barrier).find("barrier", "west")
    assert item is not None
    columns = ("material", "thickness_cm", "density_g_per_cm3")
    assert item.get("layers") == Table(columns, (("concrete", 215.0, None),))


def test_no_rows_are_a_table_too():
    """An empty list of rows says that there are none."""
    barrier = "barriers: [{id: west, room: vault-a, existing_workload: []}]\n"
    item = read(rooms=room(), shielding=barrier).find("barrier", "west")
    assert item is not None
    assert item.get("existing_workload").rows == ()


def test_lists_become_tuples():
    """Points, dates, words and numbers are tuples."""
    floor = "[[-300, -300], [300, -300], [300, 300], [-300, 300]]"
    program = "format: 1\nclosed_dates: [2026-12-24, 2026-12-25]\ntechniques: [six-position]\n"
    found = read(program=program, rooms=room(floor_polygon_cm=floor))
    vault, (item,) = found.find("room", "vault-a"), found.of_kind("program")
    assert vault.get("floor_polygon_cm") == ((-300, -300), (300, -300), (300, 300), (-300, 300))
    assert item.get("closed_dates") == (date(2026, 12, 24), date(2026, 12, 25))
    assert item.get("techniques") == ("six-position",)


def test_the_id_of_a_beam_is_completed_by_its_machine():
    """A beam named beside its machine is kept with its full id, in a field and in a row."""
    chosen = "chosen_arrangement: {room: vault-a, machine: linac-1, beam: e6, side_deg: 90, technique: six-position}"
    plans = "plans: [{id: first, machine: linac-1, beam: e6}, {id: second, machine: linac-1, beam: linac-1/e6}]"
    program = read(rooms=room(), equipment=EQUIPMENT, program=f"format: 1\n{chosen}\n{plans}\n")
    (item,) = program.of_kind("program")
    assert item.get("chosen_arrangement").column("beam") == ("linac-1/e6",)
    assert [plan.get("beam") for plan in program.of_kind("plan")] == ["linac-1/e6", "linac-1/e6"]


def test_a_scalar_keeps_its_own_type():
    """The limit of a local rule is a number, yes or no, a date or a text, as it is written."""
    head = "{strength: must, source: law, subject: room.camera_views, title: t, condition: equals"
    written = {"a": "3", "b": "yes", "c": "2026-01-31", "d": "two-way", "e": '"3"'}
    rules = "".join(f"  - {head}, id: {name}, limit: {limit}}}\n" for name, limit in written.items())
    program = read(local_rules=f"rules:\n{rules}")
    expected = [3.0, True, date(2026, 1, 31), "two-way", "3"]
    assert [rule.get("limit") for rule in program.of_kind("local_rule")] == expected


def test_a_list_in_a_row_is_kept_as_text():
    """A list of words in a row stands in its table as JSON text, so that nothing is lost."""
    when = "[{subject: room.intercom, condition: one_of, limits: [two-way, 3, 2026-01-31]}]"
    rule = f"{{id: r, title: t, strength: must, source: law, subject: s, condition: present, applies_when: {when}}}"
    program = read(local_rules=f"rules: [{rule}]\n")
    (item,) = program.of_kind("local_rule")
    assert item.get("applies_when").column("limits") == ('["two-way", 3.0, "2026-01-31"]',)


def test_a_file_of_comments_states_nothing():
    """A file in which everything is commented out is read, and nothing in it is known."""
    program = read(rooms="# nothing yet\n")
    assert program.known_lists == frozenset()
    assert [item.kind for item in program.items] == ["program"]


def test_a_wrong_entry_is_told_once():
    """An entry that is out of its range is not doubted a second time for what follows from it."""
    found = problems(rooms=room(isocentre_height_cm="1300", ceiling_height_cm="300"))
    assert found == [
        "rooms.yaml:3:26: isocentre height must be at most 300 cm, not 1300: did you mean 130 (cm)? [range]"
    ]


def test_problems_of_all_files_are_told_together():
    """The reader goes on after a problem, through all files."""
    found = problems(program="format: 1\nphase: begin\n", rooms=room(camera_views="two", title="no"), risks="failure: []\n")
    assert [line.split(":")[0] for line in found] == ["program.yaml", "risks.yaml", "rooms.yaml", "rooms.yaml"]


def test_a_required_field_that_cannot_be_read_is_not_missing():
    """A required field with a wrong entry is told as wrong, not as missing too."""
    box = "[{id: b, x_min_cm: wide, x_max_cm: 2, y_min_cm: 0, y_max_cm: 1, bottom_cm: 0, top_cm: 2}]"
    found = problems(rooms=room(obstructions=box))
    assert len(found) == 1
    assert 'x min must be a number in centimetres, not "wide"' in found[0]
