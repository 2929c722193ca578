"""A new folder holds every field, and nothing in it is known."""

import json
import re

import pytest

from readiness.errors import ProgramProblems, UsageError
from readiness.program.fields import schemas
from readiness.program.files import from_mapping
from readiness.program.measurement_kinds import measurement_kind, measurement_kinds
from readiness.program.reading import known_yaml, questions, read_folder, read_program
from readiness.program.starter import EDITOR_FOLDER, starter_files, write_starter

FILES = starter_files(schemas())
YAML = {name: text for name, text in FILES.items() if name.endswith(".yaml")}


def uncommented(text: str) -> str:
    """Return a starter as it is when somebody takes away the first # of every line."""
    return "".join(re.sub(r"^# ?", "", line) + "\n" for line in text.splitlines() if not line.startswith("# ") or live(line))


def live(line: str) -> bool:
    """Return whether a comment line holds a key, or a comment of one, rather than an explanation."""
    return re.match(r"# +(#|- |[a-z0-9_]+:)", line) is not None and "$schema" not in line


def test_an_untouched_starter_is_read(tmp_path):
    """A new folder has no problems and no questions, and states nothing but its format."""
    write_starter(tmp_path / "new", schemas())
    program = read_folder(tmp_path / "new")
    assert questions(program) == ()
    assert program.known_lists == frozenset()
    assert [(item.id, list(item.fields)) for item in program.items] == [("program", ["format"])]


@pytest.mark.parametrize("name", YAML)
def test_every_field_stands_in_the_starter(name):
    """Every key that may be written in a file stands in its starter with its meaning."""
    words = " ".join(YAML[name].replace("# ", "").split())
    for kind in schemas().files[name].top.with_inner():
        for key in kind.keys:
            assert re.search(rf"(^|[ -]){key}:", YAML[name], re.MULTILINE), key
        for field in kind.fields.values():
            assert field.meaning in words or field.required, field.value_name
            assert all(word in words for word in field.words), field.value_name
            for column in field.columns.values():
                assert f"{column.name}:" in words, column.value_name
                assert column.meaning in words, column.value_name


@pytest.mark.parametrize("name", [name for name in YAML if name != "program.yaml"])
def test_an_uncommented_starter_asks_for_every_value(name):
    """With all # taken away every key is known and stands where it belongs; only its value is missing."""
    files = {name: uncommented(YAML[name]).encode(), "program.yaml": b"format: 1\n"}
    contents, found = from_mapping(files, {}, known_yaml())
    with pytest.raises(ProgramProblems) as refused:
        read_program(contents, found)
    assert {problem.kind for problem in refused.value.problems} == {"empty"}
    fields = [field for kind in schemas().files[name].top.with_inner() for field in kind.fields.values()]
    leaves = [len(field.columns) or 1 for field in fields]
    ids = sum(kind.form == "list" for kind in schemas().files[name].top.with_inner())
    assert len(refused.value.problems) == sum(leaves) + ids


def test_an_editor_is_told_its_schema():
    """Each YAML file names its schema in its first line, and that schema is written beside it."""
    for name, text in YAML.items():
        first = text.splitlines()[0]
        schema = re.fullmatch(r"# yaml-language-server: \$schema=(.+)", first)
        assert schema is not None
        assert json.loads(FILES[schema[1]])["title"] == schemas().files[name].title


def test_every_measurement_kind_is_described():
    """Every header line and column of every kind stands in the description beside the starter."""
    text = FILES[f"{EDITOR_FOLDER}/measurements.md"]
    for name in measurement_kinds():
        section = text.split(f"## {name}\n")[1].split("\n## ")[0]
        kind = measurement_kind(name)
        assert all(f"`# {field}:`" in section for field in kind.header)
        assert all(f"`{column}`" in section for column in kind.columns)


def test_every_file_stands_in_the_readme():
    """The README of a new folder names every file, also progress.csv with its columns."""
    for name in schemas().files:
        assert f"`{name}`" in FILES["README.md"]
    assert "`task,started_on,finished_on`" in FILES["README.md"]


def test_an_empty_folder_is_filled(tmp_path):
    """An empty folder may be the one in which somebody stands: it is filled, not replaced."""
    inode = tmp_path.stat().st_ino
    names = write_starter(tmp_path, schemas())
    assert tmp_path.stat().st_ino == inode
    assert {path.relative_to(tmp_path).as_posix() for path in tmp_path.rglob("*") if path.is_file()} == set(names)


def test_nothing_is_left_beside_a_new_folder(tmp_path):
    """The temporary folder is gone afterwards."""
    write_starter(tmp_path / "new", schemas())
    assert [path.name for path in tmp_path.iterdir()] == ["new"]


@pytest.mark.parametrize(
    ("make", "words"),
    [
        (lambda path: (path.mkdir(), (path / "notes.txt").write_text("x")), "is not empty; nothing was written"),
        (lambda path: path.write_text("x"), "is a file; name a new or empty folder"),
    ],
)
def test_nothing_is_overwritten(tmp_path, make, words):
    """A folder that holds something, or a file, is left as it is."""
    target = tmp_path / "taken"
    make(target)
    before = sorted(tmp_path.rglob("*"))
    with pytest.raises(UsageError, match=words):
        write_starter(target, schemas())
    assert sorted(tmp_path.rglob("*")) == before


def test_a_parent_must_exist(tmp_path):
    """A path with a slip in it makes no chain of folders."""
    with pytest.raises(UsageError, match="does not exist; make that folder first"):
        write_starter(tmp_path / "slip" / "new", schemas())


def test_a_failed_write_leaves_nothing(tmp_path, monkeypatch):
    """If writing fails half-way, neither the folder nor a temporary one remains."""
    monkeypatch.setattr("os.fsync", lambda descriptor: (_ for _ in ()).throw(OSError(28, "No space left on device")))
    with pytest.raises(UsageError, match="cannot be written: No space left on device"):
        write_starter(tmp_path / "new", schemas())
    assert list(tmp_path.iterdir()) == []


def test_a_failed_move_leaves_an_empty_folder_empty(tmp_path, monkeypatch):
    """If a file cannot be moved in, those moved before it are taken out again."""
    from pathlib import Path

    move = Path.rename

    def fail_late(path: Path, target: Path) -> Path:
        if path.name == "program.yaml":
            raise OSError(5, "Input/output error")
        return move(path, target)

    monkeypatch.setattr(Path, "rename", fail_late)
    empty = tmp_path / "empty"
    empty.mkdir()
    with pytest.raises(UsageError, match="Input/output error"):
        write_starter(empty, schemas())
    assert list(empty.iterdir()) == []
