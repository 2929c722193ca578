"""What is named must exist, as far as the folder says what there is."""

from folder_texts import problems, read, room

MACHINE = "machines:\n  - id: linac-1\n    room: {room}\n    beams: [{{id: e6}}]\n"


def test_a_name_in_an_unknown_list_is_not_wrong():
    """A room that is named while nobody has listed the rooms is neither right nor wrong."""
    assert problems(equipment=MACHINE.format(room="vault-a")) == []


def test_a_name_outside_a_complete_list_is_wrong():
    """An empty list is complete: a room that is named all the same does not exist."""
    found = problems(rooms="rooms: []\n", equipment=MACHINE.format(room="vault-a"))
    assert found == ['equipment.yaml:3:11: room: there is no room "vault-a"; none is described [reference]']


def test_a_nested_name_needs_its_owner_or_its_full_id():
    """A beam named in a plan needs its machine beside it."""
    plans = "format: 1\nplans: [{id: first, beam: e6}]\n"
    found = problems(program=plans, rooms=room(), equipment=MACHINE.format(room="vault-a"))
    assert found == ["program.yaml:2:27: beam needs machine beside it, to say whose it is [reference]"]


def test_the_same_id_may_occur_under_two_owners():
    """Two machines may each have a beam e6."""
    equipment = "machines:\n  - {id: linac-1, beams: [{id: e6}]}\n  - {id: linac-2, beams: [{id: e6}]}\n"
    assert [beam.id for beam in read(equipment=equipment).of_kind("beam")] == ["linac-1/e6", "linac-2/e6"]


def test_a_room_and_a_stand_may_share_an_id():
    """Ids are unique within their kind only."""
    assert problems(rooms="rooms: [{id: one}]\n", equipment="stands: [{id: one}]\n") == []
