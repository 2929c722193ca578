"""Two folders, assessments or binders compared: values, findings, gaps, documents."""

import json
import shutil
from pathlib import Path

import pytest

from readiness.cli import run

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"
DAY = ["--as-of", "2026-12-01"]


@pytest.fixture
def changed(tmp_path: Path) -> Path:
    """Return a copy of the sample with a second camera."""
    folder = tmp_path / "changed"
    shutil.copytree(SAMPLE, folder)
    path = folder / "rooms.yaml"
    path.write_text(path.read_text(encoding="utf-8").replace("camera_views: 1", "camera_views: 2"), encoding="utf-8")
    return folder


@pytest.fixture
def stored(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> Path:
    """Return the sample's assessment as a file."""
    assert run(["assess", str(SAMPLE), "--json", *DAY]) == 1
    path = tmp_path / "assessment.json"
    path.write_text(capsys.readouterr().out, encoding="utf-8")
    return path


def test_a_folder_and_its_own_assessment_say_the_same(stored: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Status 0, one sentence."""
    assert run(["compare", str(stored), str(SAMPLE), *DAY]) == 0
    assert "say the same" in capsys.readouterr().out


def test_one_changed_number_shows_what_it_moves(
    stored: Path, changed: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """The value with its change, the finding that turned, the gap that closed."""
    assert run(["compare", str(stored), str(changed), "--json", *DAY]) == 1
    found = json.loads(capsys.readouterr().out)
    value = next(each for each in found["values"] if each["name"] == "room.camera_views")
    assert (1, 2, 1.0) == (value["before"], value["after"], value["change"])
    turned = {each["rule"]: (each["before"], each["after"]) for each in found["findings"]}
    assert turned["two-camera-views"] == ("not met", "met")
    assert any("two-camera-views" in gap["id"] for gap in found["gaps_closed"])
    assert found["inputs"] == ["rooms.yaml"]


def test_words_for_people(stored: Path, changed: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The terminal names the turn in words."""
    assert run(["compare", str(stored), str(changed), *DAY]) == 1
    assert "two-camera-views (must), room vault-a: not met, now met" in capsys.readouterr().out


@pytest.mark.parametrize(
    ("name", "content", "words"),
    [
        ("a.pdf", b"%PDF-1.7\nbroken", "cannot be read as a PDF"),
        ("a.json", b"{}", "not an assessment written by this tool"),
        ("a.json", b"\xff\xfe\x00", "not an assessment written by this tool"),
    ],
)
def test_what_is_not_ours_is_refused(
    tmp_path: Path, capsys: pytest.CaptureFixture[str], name: str, content: bytes, words: str
) -> None:
    """Status 2, one sentence, no traceback."""
    (tmp_path / name).write_bytes(content)
    assert run(["compare", str(tmp_path / name), str(SAMPLE), *DAY]) == 2
    assert words in capsys.readouterr().err


def test_a_path_that_is_not_there_is_named(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Status 2 and what may be named instead."""
    assert run(["compare", str(tmp_path / "none"), str(SAMPLE), *DAY]) == 2
    assert "does not exist" in capsys.readouterr().err
