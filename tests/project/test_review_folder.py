"""The review of a folder as a reviewer runs it: terminal, JSON, page, statuses."""

import json
import shutil
from pathlib import Path

import pytest

from readiness.cli import run

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"
DAY = ["--as-of", "2026-12-01"]


def test_what_to_look_at_first_comes_first(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """Then evidence, counts and the matrix; the page says the same; nothing in it is fetched from elsewhere."""
    page = tmp_path / "review.html"
    assert 1 == run(["review", str(SAMPLE), "--page", str(page), *DAY])
    text = capsys.readouterr().out
    marks = ["Not complete: ", "LOOK AT FIRST", "EVIDENCE REGISTER", "COUNTS BY SUBJECT AND STRENGTH", "Planning aid."]
    places = [text.index(mark) for mark in marks]
    assert sorted(places) == places
    assert "review due on 2027-01-15, within 60 days" in text
    html = page.read_text(encoding="utf-8")
    assert "drawing-a: Room drawing of vault A" in html
    assert "invented" in html
    assert "http://" not in html.replace("http://www.w3.org", "")
    assert 'lang="en"' in html


def test_json_gives_every_finding_with_owner_and_evidence(capsys: pytest.CaptureFixture[str]) -> None:
    """One line for each finding of the assessment, the register beside it."""
    assert 1 == run(["review", str(SAMPLE), "--json", *DAY])
    found = json.loads(capsys.readouterr().out)
    assert 1 == run(["assess", str(SAMPLE), "--json", *DAY])
    assessment = json.loads(capsys.readouterr().out)
    assert len(assessment["findings"]) == len(found["lines"])
    assert all(line["owner"] and line["topic"] for line in found["lines"])
    assert not found["complete"]
    drawing = next(row for row in found["register"]["rows"] if row["id"] == "drawing-a")
    assert 64 == len(drawing["sha256"])


def test_an_orphan_and_a_missing_paper_are_found(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A file that is swapped out and one that nobody registered."""
    folder = tmp_path / "program"
    shutil.copytree(SAMPLE, folder)
    (folder / "evidence" / "room-drawing-vault-a.txt").rename(folder / "evidence" / "old-drawing.txt")
    run(["review", str(folder), *DAY])
    captured = capsys.readouterr()
    assert "evidence/old-drawing.txt" in captured.out + captured.err
    assert "evidence/room-drawing-vault-a.txt" in captured.out + captured.err
    assert "Traceback" not in captured.err


def test_a_page_is_not_written_over_another_file(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """What is there stays there."""
    page = tmp_path / "mine.html"
    page.write_text("mine", encoding="utf-8")
    assert 2 == run(["review", str(SAMPLE), "--page", str(page), *DAY])
    assert "mine" == page.read_text(encoding="utf-8")
    assert "mine.html" in capsys.readouterr().err


def test_a_binder_has_no_page(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """The answer says what can be done instead."""
    path = tmp_path / "b.pdf"
    path.write_bytes(b"%PDF-1.7\n")
    assert 2 == run(["review", str(path), "--page", str(tmp_path / "x.html")])
    assert "of a folder only" in capsys.readouterr().err
