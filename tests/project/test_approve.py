"""Approvals: appended, tied to the body, voided by a change of it."""

import shutil
from datetime import date
from pathlib import Path

import pytest

from readiness.assessment.records import Assessment
from readiness.cli import run
from readiness.outputs.making import assessed
from readiness.program.reading import read_folder

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"
DAY = ["--as-of", "2026-12-01"]


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    """Return a copy of the sample."""
    copy = tmp_path / "program"
    shutil.copytree(SAMPLE, copy)
    return copy


def state(folder: Path, number: str) -> tuple[str, str]:
    """Return status and revision of a document."""
    assessment: Assessment = assessed(read_folder(folder), date(2026, 12, 1))
    document = next(each for each in assessment.documents if each.number == number)
    return document.status, document.revision


def approve(folder: Path, number: str) -> None:
    """Approve a document in every role that approves it."""
    assessment = assessed(read_folder(folder), date(2026, 12, 1))
    for role in next(each for each in assessment.documents if each.number == number).approvers:
        assert run(["approve", str(folder), number, "--role", role, "--name", "A. Person", *DAY]) == 0


def test_all_approvers_make_a_document_approved_until_its_body_changes(
    folder: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    """Approved by every role; one changed number in it voids that, and the next approval is a new revision."""
    approve(folder, "1.1")
    assert "not a signature" in capsys.readouterr().out
    assert state(folder, "1.1") == ("approved", "1")
    path = folder / "program.yaml"
    text = path.read_text(encoding="utf-8")
    path.write_text(text.replace("scope: Adults", "scope: Grown persons"), encoding="utf-8")
    assert state(folder, "1.1")[0] == "changed after approval"
    approve(folder, "1.1")
    assert state(folder, "1.1") == ("approved", "2")


def test_what_was_written_before_stays_byte_for_byte(folder: Path) -> None:
    """The file only grows."""
    approve(folder, "1.3")
    before = (folder / "approvals.yaml").read_bytes()
    approve(folder, "1.1")
    after = (folder / "approvals.yaml").read_bytes()
    assert after.startswith(before)
    assert run(["check", str(folder)]) == 0


def test_comments_of_the_starter_stay(folder: Path) -> None:
    """A file that holds only comments is added to."""
    (folder / "approvals.yaml").write_text("# Written by the tool.\n", encoding="utf-8")
    approve(folder, "1.1")
    assert (folder / "approvals.yaml").read_text(encoding="utf-8").startswith("# Written by the tool.\napprovals:\n")


@pytest.mark.parametrize(
    ("number", "role", "words"),
    [("9.9", "chief physicist", "there is no document 9.9"), ("1.1", "porter", "approved by")],
)
def test_what_cannot_be_approved_is_said(
    folder: Path, capsys: pytest.CaptureFixture[str], number: str, role: str, words: str
) -> None:
    """Unknown document or role: status 2, nothing written."""
    assert run(["approve", str(folder), number, "--role", role, "--name", "A. Person", *DAY]) == 2
    assert words in capsys.readouterr().err
    assert not (folder / "approvals.yaml").exists()


def test_the_same_role_does_not_approve_twice(folder: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A body that is approved in a role already is left alone."""
    approve(folder, "1.1")
    before = (folder / "approvals.yaml").read_bytes()
    role = next(iter({line.split('"')[1] for line in before.decode().splitlines() if "role:" in line}))
    assert run(["approve", str(folder), "1.1", "--role", role, "--name", "A. Person", *DAY]) == 2
    assert "already" in capsys.readouterr().err
    assert (folder / "approvals.yaml").read_bytes() == before
