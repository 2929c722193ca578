"""A folder and a set of files in memory come in by the same door, with the same problems."""

import hashlib
import os
import socket
import subprocess
import sys
import tempfile
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from readiness.program.file_names import LARGEST_CSV, LARGEST_YAML, MOST_FILES
from readiness.program.files import FolderContents, collect, from_mapping
from readiness.program.items import InputFile

KNOWN = ("program.yaml", "rooms.yaml", "equipment.yaml", "documents.yaml")
GOOD = {
    "program.yaml": b"format: 1\n",
    "rooms.yaml": b"rooms: []\n",
    "progress.csv": b"task,done_on\n",
    "measurements/pilot.csv": b"height_cm\n",
    "texts/1.3/purpose.md": b"Our purpose.\n",
    "evidence/survey.pdf": b"%PDF-1.7",
    "evidence/2025/plan.pdf": b"%PDF-1.4",
}


def write(folder: Path, files: dict[str, bytes]) -> Path:
    """Write files into a folder."""
    for name, content in files.items():
        path = folder / name
        path.parent.mkdir(parents=True, exist_ok=True)
        path.write_bytes(content)
    return folder


def told(folder: Path) -> list[str]:
    """Return the problems of a folder as they are shown."""
    return [str(problem) for problem in collect(folder, KNOWN)[1]]


def in_memory(files: dict[str, bytes]) -> tuple[FolderContents, list[str]]:
    """Return what the same files give in memory, with evidence by size and hash only."""
    evidence = {name: (hashlib.sha256(data).hexdigest(), len(data)) for name, data in files.items() if name.startswith("evidence/")}
    contents, problems = from_mapping({name: data for name, data in files.items() if name not in evidence}, evidence, KNOWN)
    return contents, [str(problem) for problem in problems]


def test_folder_is_read_whole(tmp_path):
    """Files come as bytes in order of name, evidence as size and SHA-256."""
    contents, problems = collect(write(tmp_path, GOOD), KNOWN)
    assert [] == problems
    assert {name: data for name, data in GOOD.items() if not name.startswith("evidence/")} == dict(contents.files)
    assert sorted(contents.files) == list(contents.files)
    assert InputFile("evidence/survey.pdf", hashlib.sha256(b"%PDF-1.7").hexdigest(), 8) == contents.evidence["evidence/survey.pdf"]
    assert sorted(GOOD) == [file.name for file in contents.inputs]
    assert ("measurements/pilot.csv",) == contents.measurements
    assert {("1.3", "purpose"): "texts/1.3/purpose.md"} == contents.texts


def test_folder_and_memory_give_the_same(tmp_path):
    """The same files give the same contents from a folder and from memory."""
    assert in_memory(GOOD)[0] == collect(write(tmp_path, GOOD), KNOWN)[0]


@pytest.mark.parametrize(
    "name",
    [".git/config", ".DS_Store", "evidence/.DS_Store", "evidence/Thumbs.db", "README.md", "rooms.schema.json", ".readiness/rooms.json",
     "rooms.yaml~", "measurements/~$pilot.xlsx", "desktop.ini"],
)  # fmt: skip
def test_files_that_are_nobodys_business_are_ignored(tmp_path, name):
    """Hidden files, litter of systems and what the starter writes beside a program are not read and not told."""
    files = {**GOOD, name: b"x"}
    contents, problems = collect(write(tmp_path, files), KNOWN)
    assert ([], sorted(GOOD)) == (problems, [file.name for file in contents.inputs])
    assert (contents, []) == in_memory(files)


UNKNOWN = {
    "room.yaml": "room.yaml: did you mean rooms.yaml? [unknown-file]",
    "rooms.yml": "rooms.yml: did you mean rooms.yaml? [unknown-file]",
    "Rooms.yaml": "Rooms.yaml: did you mean rooms.yaml? [unknown-file]",
    "rooms.yaml.txt": "rooms.yaml.txt: did you mean rooms.yaml? [unknown-file]",
    "equipement.yaml": "equipement.yaml: did you mean equipment.yaml? [unknown-file]",
    "progres.csv": "progres.csv: did you mean progress.csv? [unknown-file]",
    "budget.yaml": "budget.yaml: no such file belongs to a program; known are documents.yaml, equipment.yaml, program.yaml, progress.csv, rooms.yaml [unknown-file]",
    "pilot.csv": "pilot.csv: no such file belongs to a program; put measurements into the folder measurements [unknown-file]",
    "survey.pdf": "survey.pdf: no such file belongs to a program; put supporting files into the folder evidence [unknown-file]",
    "measurements/pilot.xlsx": "measurements/pilot.xlsx: measurements are CSV files; save the sheet as CSV (UTF-8, commas) [unknown-file]",
    "measurements/pilot.CSV": "measurements/pilot.CSV: did you mean pilot.csv? [unknown-file]",
    "measurements/photo.jpg": "measurements/photo.jpg: measurements are files whose name ends with .csv; put other files into the folder evidence [unknown-file]",
    "texts/purpose.md": "texts/purpose.md: texts stand in a folder named by the number of their document, as in texts/1.3/purpose.md [unknown-file]",
    "texts/1.3/Purpose.txt": "texts/1.3/Purpose.txt: a text is named by its part in small letters and ends with .md, as in texts/1.3/purpose.md [unknown-file]",
}


@pytest.mark.parametrize("name", UNKNOWN)
def test_unknown_file_is_told_with_what_was_meant(tmp_path, name):
    """A file that no program has is named, with the near miss or the place where it belongs."""
    files = {**GOOD, name: b"x"}
    assert [UNKNOWN[name]] == told(write(tmp_path, files)) == in_memory(files)[1]


@pytest.mark.parametrize(
    ("name", "message"),
    [
        ("measurement/a.csv", "measurement/: did you mean the folder measurements? [unknown-file]"),
        ("photos/a.jpg", "photos/: no such folder belongs to a program; known are evidence, measurements, texts [unknown-file]"),
        ("measurements/2026/a.csv", "measurements/2026/: the folder measurements holds files only; move them one folder up [unknown-file]"),
        ("texts/purpose/a.md", "texts/purpose/: texts stand in a folder named by the number of their document, as in texts/1.3/purpose.md [unknown-file]"),
    ],
)
def test_unknown_folder_is_told_once(tmp_path, name, message):
    """A folder that no program has is named once and stays closed."""
    assert [message] == told(write(tmp_path, {**GOOD, name: b"x", name + "2": b"x"}))


def test_names_that_differ_in_case_only_are_told(tmp_path):
    """Two files that are one file on other systems are told."""
    files = {**GOOD, "evidence/Survey.pdf": b"x"}
    expected = "evidence/survey.pdf: differs from evidence/Survey.pdf only in capital and small letters; rename or delete one of them [same-name]"
    assert [expected] == told(write(tmp_path, files)) == in_memory(files)[1]


def test_names_that_differ_in_stored_accents_only_are_told(tmp_path):
    """Two files whose names look the same are told; one alone gets the composed name on every system."""
    decomposed = "evidence/Tu\u0308r.pdf"
    assert "evidence/T\u00fcr.pdf" in collect(write(tmp_path, {**GOOD, decomposed: b"x"}), KNOWN)[0].evidence
    (message,) = told(write(tmp_path, {"evidence/T\u00fcr.pdf": b"x"}))
    assert message.endswith("differs from another file only in how accents are stored; rename or delete one of them [same-name]")


@pytest.mark.parametrize("name", ["rooms.yaml", "measurements/pilot.csv", "evidence/survey.pdf", "texts/1.3/purpose.md"])
def test_empty_file_is_told_and_left_out(tmp_path, name):
    """A file without content is a problem, not an empty list."""
    files = {**GOOD, name: b""}
    contents, problems = in_memory(files)
    assert [f"{name}: the file is empty; fill it or delete it [empty]"] == told(write(tmp_path, files)) == problems
    assert name not in [file.name for file in contents.inputs]


@pytest.mark.parametrize(
    ("name", "size", "message"),
    [
        ("rooms.yaml", LARGEST_YAML, "rooms.yaml: the file has 2.0 MB; at most 2 MB are read [size]"),
        ("measurements/pilot.csv", LARGEST_CSV, "measurements/pilot.csv: the file has 5.0 MB; at most 5 MB are read [size]"),
    ],
)
def test_too_large_file_is_told(tmp_path, name, size, message):
    """A file up to the limit is read, one byte more is not; evidence has no limit."""
    assert [] == told(write(tmp_path, {**GOOD, name: b"#" * size, "evidence/scan.pdf": b"x" * (LARGEST_CSV + 1)}))
    files = {**GOOD, name: b"#" * (size + 1)}
    assert [message] == told(write(tmp_path, files)) == in_memory(files)[1]


def test_too_many_files_are_told(tmp_path):
    """Reading stops when a folder holds more files than any program."""
    write(tmp_path, GOOD)
    for number in range(MOST_FILES):
        (tmp_path / "evidence" / f"{number}.pdf").write_bytes(b"x")
    expected = f"{tmp_path}: holds more than 2,000 files; a program folder holds nothing else [size]"
    assert [expected] == told(tmp_path)


def test_missing_folder_is_told(tmp_path):
    """A folder that is not there, and a file in its place, are told with the next step."""
    (tmp_path / "rooms.yaml").write_bytes(b"rooms: []\n")
    missing = tmp_path / "program"
    assert [f"{missing}: there is no such folder; check the spelling, or start one with: readiness new FOLDER [folder]"] == told(missing)
    file = tmp_path / "rooms.yaml"
    assert [f"{file}: is a file, not a folder; name the folder that holds it [folder]"] == told(file)
    assert 1 == len(told(Path("a\0b")))


@pytest.mark.parametrize("files", [{}, {"README.md": b"x"}, {"evidence/survey.pdf": b"x"}])
def test_folder_without_a_program_is_told(tmp_path, files):
    """A folder with none of the files of a program is no program."""
    expected = f"{tmp_path}: holds none of the files of a program; start one with: readiness new {tmp_path} [folder]"
    assert [expected] == told(write(tmp_path, files))


def test_link_that_leaves_the_folder_is_refused(tmp_path):
    """Nothing outside the folder is read, not even its hash."""
    outside = tmp_path / "outside.yaml"
    outside.write_bytes(b"secret: 1\n")
    folder = write(tmp_path / "program", {"program.yaml": b"format: 1\n", "evidence/a.pdf": b"x"})
    (folder / "rooms.yaml").symlink_to(outside)
    (folder / "evidence" / "b.pdf").symlink_to("../../outside.yaml")
    (folder / "equipment.yaml").symlink_to("nowhere.yaml")
    (folder / "documents.yaml").symlink_to("documents.yaml")
    (folder / "measurements").symlink_to(tmp_path)
    contents, _ = collect(folder, KNOWN)
    assert ["evidence/a.pdf", "program.yaml"] == [file.name for file in contents.inputs]
    assert [
        "documents.yaml: is a link that leads nowhere; put the file itself here [link]",
        "equipment.yaml: is a link that leads nowhere; put the file itself here [link]",
        "evidence/b.pdf: is a link that leaves the program folder; put the file itself here [link]",
        "measurements: no such file belongs to a program; put supporting files into the folder evidence [unknown-file]",
        "rooms.yaml: is a link that leaves the program folder; put the file itself here [link]",
    ] == sorted(told(folder))


def test_link_inside_the_folder_is_followed(tmp_path):
    """A link to a file of the same folder is that file; a folder is never entered through a link."""
    write(tmp_path, GOOD)
    (tmp_path / "evidence" / "copy.pdf").symlink_to("survey.pdf")
    (tmp_path / "evidence" / "again").symlink_to(".")
    contents, problems = collect(tmp_path, KNOWN)
    assert contents.evidence["evidence/survey.pdf"].sha256 == contents.evidence["evidence/copy.pdf"].sha256
    assert ["evidence/again: is a link to a folder; put the files themselves here [link]"] == [str(problem) for problem in problems]


@pytest.mark.skipif(not hasattr(os, "mkfifo"), reason="the system has no named pipes")
def test_pipes_and_sockets_are_refused_without_waiting(tmp_path, monkeypatch):
    """What is not an ordinary file is told at once."""
    write(tmp_path, GOOD)
    os.mkfifo(tmp_path / "evidence" / "pipe")
    monkeypatch.chdir(tmp_path / "evidence")
    with socket.socket(socket.AF_UNIX) as listener:
        listener.bind("socket")
        pipe, unix = sorted(told(tmp_path))
    assert "evidence/pipe: is not an ordinary file (a device, pipe or socket); remove it [file]" == pipe
    assert unix.startswith("evidence/socket: the file cannot be read: ")


@pytest.mark.skipif(not hasattr(os, "geteuid"), reason="rights are kept otherwise on this system")
def test_unreadable_file_and_folder_are_told(tmp_path):
    """Files and folders that the user may not read are told by the system's reason."""
    write(tmp_path, GOOD)
    program = (
        "import os, sys\n"
        "from pathlib import Path\n"
        "from readiness.program.files import collect\n"
        "os.chmod('.', 0o755)\n"
        "if os.geteuid() == 0:\n"
        "    os.setgid(65534); os.setuid(65534)\n"
        f"for problem in collect(Path('.'), {KNOWN!r})[1]: print(problem)\n"
    )
    (tmp_path / "rooms.yaml").chmod(0)
    (tmp_path / "measurements").chmod(0)
    temporary = Path(tempfile.gettempdir())
    for parent in tmp_path.parents:
        if parent != temporary and parent.is_relative_to(temporary):
            parent.chmod(0o755)
    try:
        run = subprocess.run([sys.executable, "-c", program], cwd=tmp_path, capture_output=True, text=True, check=True, env={"PYTHONPATH": str(Path(__file__).parents[2])})
    finally:
        (tmp_path / "measurements").chmod(0o755)
    assert [
        "measurements: the folder cannot be read: permission denied [file]",
        "rooms.yaml: the file cannot be read: permission denied; check that it is there and that you may read it [file]",
    ] == sorted(run.stdout.splitlines())


@pytest.mark.parametrize("name", ["../rooms.yaml", "/etc/passwd", "evidence/../../x", "evidence//x", "evidence/a\nb", "texts\\a", "evidence/\u202ex"])
def test_names_that_could_leave_the_folder_are_refused(name):
    """A binder cannot carry a name that means a place elsewhere or cannot be shown."""
    contents, problems = from_mapping({**GOOD, name: b"x"}, {}, KNOWN)
    assert sorted(GOOD) == [file.name for file in contents.inputs]
    assert ["unknown-file"] == [problem.kind for problem in problems]
    assert "cannot be used; rename it" in problems[0].message
    assert "\n" not in str(problems[0])


def test_only_evidence_is_given_by_its_hash():
    """A file whose content matters cannot be given by hash alone."""
    _, problems = from_mapping(GOOD, {"equipment.yaml": ("0" * 64, 3)}, KNOWN)
    assert ["equipment.yaml: the content is missing; only evidence is given by its hash [file]"] == [str(each) for each in problems]


@given(st.dictionaries(st.text(max_size=12), st.binary(max_size=4), max_size=5))
def test_any_names_are_kept_or_told(files):
    """Whatever the names, each file is read, ignored or told, and nothing raises."""
    contents, problems = from_mapping(files, {}, KNOWN)
    assert len(contents.inputs) + len(problems) <= len(files)
