"""A program comes in by one door, from a folder or out of a binder."""

import pytest

from readiness.errors import ProgramProblems
from readiness.program.files import from_mapping
from readiness.program.reading import known_yaml, questions, read_folder, read_program

FILES = {
    "program.yaml": b"format: 1\ndepartment: Seebad\n",
    "documents.yaml": b"evidence:\n  - {id: one, file: evidence/a.pdf}\n  - {id: two, file: evidence/a.pdf}\n",
    "texts/1.1/purpose.md": b"Ours.\n",
}


def test_folder_and_memory_give_the_same_program(tmp_path):
    """The same files read from a folder and from memory are the same program."""
    for name, data in {**FILES, "evidence/a.pdf": b"%PDF"}.items():
        (tmp_path / name).parent.mkdir(parents=True, exist_ok=True)
        (tmp_path / name).write_bytes(data)
    contents, found = from_mapping({**FILES, "evidence/a.pdf": b"%PDF"}, {}, known_yaml())
    assert read_folder(tmp_path) == read_program(contents, found)


def test_a_program_knows_its_files():
    """Every file is known with its hash; texts by document and part; evidence without its bytes."""
    contents, found = from_mapping(FILES, {"evidence/a.pdf": ("ab" * 32, 4)}, known_yaml())
    program = read_program(contents, found)
    assert [file.name for file in program.files] == sorted([*FILES, "evidence/a.pdf"])
    assert program.texts == {("1.1", "purpose"): "Ours.\n"}
    assert set(program.contents) == set(FILES)


def test_the_same_file_twice_is_asked_about():
    """A file that is registered twice is odd, and is read all the same."""
    contents, found = from_mapping(FILES, {"evidence/a.pdf": ("ab" * 32, 4)}, known_yaml())
    (question,) = questions(read_program(contents, found))
    assert question.message == "evidence two: evidence/a.pdf is registered twice"


def test_problems_with_files_and_with_what_they_hold_come_together(tmp_path):
    """An unknown file and a wrong entry are told in one go."""
    (tmp_path / "program.yaml").write_text("format: 1\nphase: begin\n")
    (tmp_path / "room.yaml").write_text("rooms: []\n")
    with pytest.raises(ProgramProblems) as refused:
        read_folder(tmp_path)
    assert [problem.place.file for problem in refused.value.problems] == ["program.yaml", "room.yaml"]


def test_a_folder_that_is_not_there_is_told(tmp_path):
    """A folder that does not exist is one problem, not a missing program.yaml too."""
    with pytest.raises(ProgramProblems) as refused:
        read_folder(tmp_path / "nowhere")
    (problem,) = refused.value.problems
    assert "there is no such folder" in problem.message


def test_a_file_that_cannot_be_parsed_gives_no_problems_elsewhere():
    """Names of rooms are not called dangling because rooms.yaml has a slip in its syntax."""
    files = {
        "program.yaml": b"format: 1\n",
        "rooms.yaml": b"rooms: [{id: vault-a\n",
        "equipment.yaml": b"machines: [{id: linac-1, room: vault-a}]\n",
    }
    contents, found = from_mapping(files, {}, known_yaml())
    with pytest.raises(ProgramProblems) as refused:
        read_program(contents, found)
    assert {problem.place.file for problem in refused.value.problems} == {"rooms.yaml"}


def test_questions_come_with_the_problems():
    """What is odd is told together with what is wrong, so that a file is mended once."""
    text = b"rooms:\n  - id: vault-a\n    isocentre_height_cm: 80\n    camera_views: two\n"
    contents, found = from_mapping({"program.yaml": b"format: 1\n", "rooms.yaml": text}, {}, known_yaml())
    with pytest.raises(ProgramProblems) as refused:
        read_program(contents, found)
    assert [problem.kind for problem in refused.value.problems] == ["question", "type"]
