"""Outputs arrive whole, replace only what is ours, and leave nothing half-written."""

from pathlib import Path

import pytest

from readiness.errors import UsageError
from readiness.outputs.folder import MANIFEST, write_outputs

FILES = {"a.txt": b"one", "documents/b.txt": b"two"}


def test_files_and_manifest_are_written(tmp_path: Path) -> None:
    """Everything arrives, with a manifest of hashes."""
    write_outputs(tmp_path / "out", FILES)
    assert (tmp_path / "out" / "documents" / "b.txt").read_bytes() == b"two"
    assert "7692c3ad3540bb803c020b3aee66cd8887123234ea0c6e7143c0add73ff431ed" in (tmp_path / "out" / MANIFEST).read_text()


def test_our_own_folder_is_replaced_whole(tmp_path: Path) -> None:
    """A second run leaves nothing of the first."""
    write_outputs(tmp_path / "out", FILES)
    write_outputs(tmp_path / "out", {"c.txt": b"three"})
    assert {"c.txt", MANIFEST} == {path.name for path in (tmp_path / "out").iterdir()}
    assert ["out"] == [path.name for path in tmp_path.iterdir()]


@pytest.mark.parametrize("name", ["mine.txt", "a.txt"])
def test_a_folder_with_other_files_is_left_alone(tmp_path: Path, name: str) -> None:
    """What somebody else put there is never deleted."""
    (tmp_path / "out").mkdir()
    (tmp_path / "out" / name).write_text("precious")
    with pytest.raises(UsageError, match="did not write"):
        write_outputs(tmp_path / "out", FILES)
    assert (tmp_path / "out" / name).read_text() == "precious"


def test_a_note_added_to_our_folder_stops_its_replacement(tmp_path: Path) -> None:
    """A file that somebody added to our output is not lost."""
    write_outputs(tmp_path / "out", FILES)
    (tmp_path / "out" / "note.txt").write_text("keep")
    with pytest.raises(UsageError, match=r"note\.txt"):
        write_outputs(tmp_path / "out", FILES)


def test_a_file_in_the_way_is_named(tmp_path: Path) -> None:
    """A target that is a file is refused."""
    (tmp_path / "out").write_text("x")
    with pytest.raises(UsageError, match="not a folder"):
        write_outputs(tmp_path / "out", FILES)


def test_an_error_while_writing_leaves_the_old_folder(tmp_path: Path) -> None:
    """Nothing half-written stays behind."""
    write_outputs(tmp_path / "out", FILES)
    with pytest.raises(OSError, match="too long"):
        write_outputs(tmp_path / "out", {"x" * 300: b""})
    assert (tmp_path / "out" / "a.txt").read_bytes() == b"one"
    assert ["out"] == [path.name for path in tmp_path.iterdir()]
