"""A binder is compared with one made again from the inputs inside it; damaged or foreign files get one sentence."""

from dataclasses import replace
from pathlib import Path

import pytest
from pypdf import PdfReader, PdfWriter

from readiness.assessment.assessment import assess
from readiness.assessment.difference import difference
from readiness.errors import UsageError
from readiness.outputs.binder_reading import OpenedBinder, open_binder
from readiness.outputs.binder_review import review_binder, review_text
from readiness.outputs.contract import to_json
from tests.assessment.small import DAY, item, program

SMALL = assess(program(item("room", "a", ceiling_height_cm=300.0)), DAY)
OTHER = assess(program(item("room", "a", ceiling_height_cm=301.0)), DAY)
SAME = ("0.1.0", "0.1.0")
OURS = OpenedBinder({"assessment.json": b"{}", "program/rooms.yaml": b"a: 1"}, ("one", "two"), (), 0)


def written(path: Path, password: str = "") -> Path:
    """Write a small PDF with an attached assessment and one form-free page."""
    writer = PdfWriter()
    writer.add_blank_page(100, 100)
    writer.add_attachment("assessment.json", to_json(SMALL).encode())
    writer.add_attachment("program/rooms.yaml", b"rooms: []\n")
    if password:
        writer.encrypt(password)
    with path.open("wb") as stream:
        writer.write(stream)
    return path


def test_a_binder_is_opened(tmp_path: Path) -> None:
    """Attachments, pages and the assessment come out as they went in."""
    found = open_binder(written(tmp_path / "b.pdf"))
    assert found.assessment == SMALL
    assert found.inputs == {"rooms.yaml": b"rooms: []\n"}
    assert len(found.pages) == 1


def test_a_locked_binder_is_refused(tmp_path: Path) -> None:
    """A password is named as the reason."""
    with pytest.raises(UsageError, match="locked"):
        open_binder(written(tmp_path / "b.pdf", "secret"))


@pytest.mark.parametrize("kept", [0, 10, 200, 0.5, 0.95])
def test_a_truncated_binder_is_refused_without_a_crash(tmp_path: Path, kept: float) -> None:
    """Whatever is cut off, the answer is a sentence."""
    whole = written(tmp_path / "b.pdf").read_bytes()
    length = int(kept * len(whole)) if isinstance(kept, float) else kept
    (tmp_path / "cut.pdf").write_bytes(whole[:length])
    with pytest.raises(UsageError):
        open_binder(tmp_path / "cut.pdf").assessment  # noqa: B018 - asking is the test


def test_a_pdf_of_somebody_else_is_refused(tmp_path: Path) -> None:
    """Without our assessment inside it is not ours."""
    writer = PdfWriter()
    writer.add_blank_page(100, 100)
    with (tmp_path / "x.pdf").open("wb") as stream:
        writer.write(stream)
    with pytest.raises(UsageError, match="not a binder written by this tool"):
        open_binder(tmp_path / "x.pdf")


def test_the_same_binder_agrees() -> None:
    """Nothing speaks against it, and the words do not claim more than that."""
    review = review_binder(OURS, OURS, difference(SMALL, SMALL), SAME)
    assert review.agrees
    text = review_text(review, "b.pdf", "0.1.0")
    assert "agrees with the inputs inside it" in text
    assert "Only a certificate signature proves who made it" in text


@pytest.mark.parametrize(
    ("changed", "words"),
    [
        (replace(OURS, attachments={**OURS.attachments, "program/rooms.yaml": b"a: 2"}), "program/rooms.yaml differs"),
        (replace(OURS, attachments={"assessment.json": b"{}"}), "program/rooms.yaml is missing"),
        (replace(OURS, attachments={**OURS.attachments, "x.txt": b""}), "x.txt was not put in"),
        (replace(OURS, pages=("one",)), "has 1 pages"),
        (replace(OURS, pages=("one", "three")), "text of these pages differs: 2"),
    ],
)  # fmt: skip
def test_what_was_changed_is_named(changed: OpenedBinder, words: str) -> None:
    """An attachment changed, missing or added; a page removed or replaced."""
    review = review_binder(changed, OURS, difference(SMALL, SMALL), SAME)
    assert not review.agrees
    assert words in review_text(review, "b.pdf", "0.1.0")


def test_other_results_are_counted() -> None:
    """A changed number inside the assessment is found by recomputing."""
    review = review_binder(OURS, OURS, difference(SMALL, OTHER), SAME)
    assert not review.agrees
    assert "gives other results: 1 values" in " ".join(review.against)


def test_another_version_cannot_tell() -> None:
    """By version or by hand: cannot tell; the version to install is named."""
    review = review_binder(OURS, OURS, difference(SMALL, SMALL), ("0.0.9", "0.1.0"))
    text = review_text(review, "b.pdf", "0.1.0")
    assert not review.agrees
    assert "by version or by hand: cannot tell. Install version 0.0.9" in text


def test_filled_forms_and_signatures_are_no_alteration() -> None:
    """They are reported and do not speak against the binder."""
    review = review_binder(replace(OURS, filled=("6.2-a",), signatures=1), OURS, difference(SMALL, SMALL), SAME)
    assert review.agrees
    assert "1 form fields are filled in; that is no alteration" in review_text(review, "b.pdf", "0.1.0")


def test_pages_are_read_in_words(tmp_path: Path) -> None:
    """Spacing does not matter when pages are compared."""
    path = written(tmp_path / "b.pdf")
    assert len(PdfReader(path).pages) == len(open_binder(path).pages)
