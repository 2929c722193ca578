"""A binder under review: untouched, altered in every way that happens, filled in, and not ours at all."""

import io
import json
import random
import shutil
import subprocess
from collections.abc import Callable
from dataclasses import dataclass, replace
from datetime import date
from pathlib import Path
from typing import TypeVar

import pytest
from pypdf import PdfReader, PdfWriter
from pypdf.generic import (
    ArrayObject,
    DecodedStreamObject,
    DictionaryObject,
    FloatObject,
    NameObject,
    TextStringObject,
)

from readiness.assessment.records import Assessment, Versions
from readiness.assessment.unaltered import Manifest
from readiness.cli import run
from readiness.errors import UsageError
from readiness.outputs import binder, binder_review, recomputing
from readiness.outputs.binder_reading import OpenedBinder, assessment_in, open_binder
from readiness.outputs.binder_review import AGREES, CANNOT_TELL, DISAGREES, BinderReview, review_binder
from readiness.outputs.binder_review_view import PROVES, review_json, review_text
from readiness.outputs.contract import to_json
from readiness.outputs.documents import render_bodies
from readiness.outputs.making import assessed
from readiness.program.files import from_mapping
from readiness.program.reading import known_yaml, read_program
from tests.outputs import fakes

Found = TypeVar("Found")
DAY = date(2026, 12, 1)
INPUTS = {
    "program.yaml": b"format: 1\ndepartment: Example (invented)\ninvented: true\n",
    "rooms.yaml": b"rooms:\n  - id: vault-a\n    ceiling_height_cm: 300\n",
    "measurements/s\xc3\xa9rie.csv".encode("latin-1").decode("utf-8"): b"",
}
SOME = ("1.1", "4.1", "6.2", "6.10")


@dataclass(frozen=True)
class Made:
    """A binder as it was written, with what it was made from."""

    content: bytes
    assessment: Assessment


def inputs() -> dict[str, bytes]:
    """Return the files of a small program."""
    return {name: content for name, content in INPUTS.items() if content}


def make(versions: Versions | None = None) -> Made:
    """Return a binder of a few documents of the small program."""
    contents, problems = from_mapping(inputs(), {}, known_yaml())
    program = read_program(contents, problems)
    assessment = assessed(program, DAY)
    stored = replace(assessment, versions=versions) if versions else assessment
    rendered = [each for each in render_bodies(stored) if each.number in SOME]
    attached = {f"program/{name}": content for name, content in inputs().items()}
    attached |= {"assessment.json": to_json(stored).encode(), "gaps.csv": b"none\n"}
    return Made(binder.make(stored, rendered, attached, DAY)["binder.pdf"], stored)


@pytest.fixture(scope="module")
def made() -> Made:
    """Return the binder under review."""
    return make()


def opened(content: bytes, tmp_path: Path) -> OpenedBinder:
    """Return a binder opened from bytes."""
    path = tmp_path / "b.pdf"
    path.write_bytes(content)
    return open_binder(path)


def reviewed(content: bytes, tmp_path: Path) -> BinderReview:
    """Return the review of a binder, without its pages made again."""
    return review_binder(opened(content, tmp_path), quick=True)


def edited(content: bytes, edit: Callable[[PdfWriter], None]) -> bytes:
    """Return a binder changed by a PDF editor and saved."""
    writer = PdfWriter(clone_from=io.BytesIO(content))
    edit(writer)
    stream = io.BytesIO()
    writer.write(stream)
    return stream.getvalue()


def attachment(writer: PdfWriter, name: str):  # type: ignore[no-untyped-def]
    """Return an attachment by its name."""
    return next(each for each in writer.attachment_list if (each.alternative_name or each.name) == name)


def said(review: BinderReview) -> str:
    """Return the review as a person reads it, on long lines."""
    return review_text(review, "b.pdf", 1000)


def drawn(writer: PdfWriter, number: int, change: Callable[[bytes], bytes]) -> None:
    """Change the drawing instructions of a page."""
    page = writer.pages[number]
    stream = DecodedStreamObject()
    stream.set_data(change(page["/Contents"].get_object().get_data()))
    page[NameObject("/Contents")] = writer._add_object(stream)


def test_an_untouched_binder_agrees(made: Made, tmp_path: Path) -> None:
    """Pages and attachments are as written, and every result is worked out the same again."""
    review = reviewed(made.content, tmp_path)
    assert AGREES == review.outcome
    text = said(review)
    assert text.startswith("b.pdf agrees with the inputs inside it.")
    assert "Pages and attachments: all as written." in text
    assert all(each.different == 0 for each in review.agreements)
    assert review.agreements[0].same > 0
    assert PROVES in text


def test_only_a_certificate_signature_is_said_to_prove_who_made_it() -> None:
    """The words do not claim that the binder is true."""
    assert "nor that its inputs are true" in PROVES
    assert "Only a certificate signature" in PROVES


def test_the_list_holds_every_page_and_attachment(made: Made, tmp_path: Path) -> None:
    """Each page says which document it belongs to; the list does not list itself."""
    found = opened(made.content, tmp_path)
    assert len(PdfReader(io.BytesIO(made.content)).pages) == len(found.manifest.pages)
    names = {mark.name for mark in found.manifest.attachments}
    assert {"assessment.json", "gaps.csv", "program/program.yaml", "program/rooms.yaml"} == names
    assert any(mark.part.startswith("4.1 Room geometry record, page 1") for mark in found.manifest.pages)
    assert found.manifest.versions == made.assessment.versions
    assert "2026-12-01" == found.manifest.as_of
    assert 0 < sum(mark.fields for mark in found.manifest.pages)


def test_one_digit_changed_in_an_input_is_found_and_followed(made: Made, tmp_path: Path) -> None:
    """The file is named although its size is the same, and so is every value that follows from it."""

    def edit(writer: PdfWriter) -> None:
        entry = attachment(writer, "program/rooms.yaml")
        entry.content = entry.content.replace(b"300", b"310")

    review = reviewed(edited(made.content, edit), tmp_path)
    assert DISAGREES == review.outcome
    text = said(review)
    assert text.startswith("b.pdf does not agree with what was written.")
    assert "The attachment program/rooms.yaml was changed; its size is still" in text
    assert "room.ceiling_height_cm of room vault-a: 300 cm (stated), worked out again 310 cm (stated), by 10 cm" in text


def test_one_digit_changed_in_the_assessment_is_found(made: Made, tmp_path: Path) -> None:
    """The attachment is named, and the value that does not follow from the inputs."""

    def edit(writer: PdfWriter) -> None:
        entry = attachment(writer, "assessment.json")
        data = json.loads(entry.content)
        value = next(each for each in data["values"] if each["name"] == "room.ceiling_height_cm")
        value["value"] = 320.0
        entry.content = json.dumps(data).encode()

    review = reviewed(edited(made.content, edit), tmp_path)
    assert DISAGREES == review.outcome
    assert [("room.ceiling_height_cm", 320.0, 300.0)] == [
        (each.name, each.before, each.after) for each in review.recomputed.values  # type: ignore[union-attr]
    ]


def test_swapped_attachments_are_told_from_changed_ones(made: Made, tmp_path: Path) -> None:
    """Each is said to hold the content of the other."""

    def edit(writer: PdfWriter) -> None:
        first, second = attachment(writer, "program/rooms.yaml"), attachment(writer, "gaps.csv")
        first.content, second.content = second.content, first.content

    text = said(reviewed(edited(made.content, edit), tmp_path))
    assert "The attachment program/rooms.yaml holds the content of gaps.csv." in text
    assert "The attachment gaps.csv holds the content of program/rooms.yaml." in text
    assert "The inputs inside cannot be read by this version." in text


def test_missing_added_and_doubled_attachments_are_named(made: Made, tmp_path: Path) -> None:
    """What is gone, what is new, and what stands there twice."""

    def edit(writer: PdfWriter) -> None:
        attachment(writer, "gaps.csv").delete()
        writer.add_attachment("note.txt", b"x")
        writer.add_attachment("program/rooms.yaml", b"rooms: []\n")

    review = reviewed(edited(made.content, edit), tmp_path)
    text = said(review)
    assert "The attachment gaps.csv is missing." in text
    assert "The attachment note.txt was added after writing." in text
    assert "The attachment program/rooms.yaml is there twice." in text


def test_a_page_removed_is_named_by_its_document(made: Made, tmp_path: Path) -> None:
    """Only the page that is gone is named, not those that moved up."""
    part = opened(made.content, tmp_path).manifest.pages[-1].part
    review = reviewed(edited(made.content, lambda writer: writer.remove_page(len(writer.pages) - 1)), tmp_path)
    assert DISAGREES == review.outcome
    assert f"The page {part}, once number" in said(review)
    assert 2 == len(review.integrity.alterations)  # type: ignore[union-attr]


def test_a_page_replaced_is_named(made: Made, tmp_path: Path) -> None:
    """A blank page in the place of one that was written has other words."""

    def edit(writer: PdfWriter) -> None:
        writer.remove_page(3)
        writer.insert_blank_page(595, 842, 3)

    review = reviewed(edited(made.content, edit), tmp_path)
    assert DISAGREES == review.outcome
    assert "Page 4 (" in said(review)
    assert "has other words than were written" in said(review)


def test_a_page_added_is_named(made: Made, tmp_path: Path) -> None:
    """A page between two others is one alteration, and the count of pages another."""
    review = reviewed(edited(made.content, lambda writer: writer.insert_blank_page(595, 842, 3)), tmp_path)
    assert "Page 4 was added after writing." in said(review)
    assert 2 == len(review.integrity.alterations)  # type: ignore[union-attr]


def test_one_character_changed_on_a_page_is_found(made: Made, tmp_path: Path) -> None:
    """A glyph exchanged in the drawing instructions changes the words."""

    def change(content: bytes) -> bytes:
        start = content.index(b"[<") + 2
        return content[:start] + (b"0014" if content[start : start + 4] != b"0014" else b"0015") + content[start + 4 :]

    review = reviewed(edited(made.content, lambda writer: drawn(writer, 5, change)), tmp_path)
    assert [("page", "6")] == [(each.what, each.name) for each in review.integrity.alterations]  # type: ignore[union-attr]


def test_a_line_drawn_over_a_page_is_found(made: Made, tmp_path: Path) -> None:
    """The words are the same, the drawing is not."""
    line = b"\n0 0 m 595 842 l S"
    review = reviewed(edited(made.content, lambda writer: drawn(writer, 5, lambda old: old + line)), tmp_path)
    assert DISAGREES == review.outcome
    assert "has the same words but is drawn otherwise" in said(review)


def test_a_file_saved_anew_by_another_program_is_judged_by_its_words(made: Made, tmp_path: Path) -> None:
    """If every page is drawn anew, the words decide and the drawings are left to the reader."""

    def edit(writer: PdfWriter) -> None:
        for number in range(len(writer.pages)):
            drawn(writer, number, lambda old: b"q\n" + old + b"\nQ")

    review = reviewed(edited(made.content, edit), tmp_path)
    assert AGREES == review.outcome
    assert "Look at the drawings yourself" in said(review)


def test_filled_forms_are_reported_and_no_alteration(made: Made, tmp_path: Path) -> None:
    """Fields filled in with a PDF program are counted by document."""

    def edit(writer: PdfWriter) -> None:
        for page in writer.pages:
            names = [note.get_object().get("/T") for note in page.get("/Annots", ())]
            texts = [name for name in names if name and str(name).startswith("f6-2-")]
            if texts:
                writer.update_page_form_field_values(page, {texts[0]: "A. Person"}, auto_regenerate=False)
                return

    review = reviewed(edited(made.content, edit), tmp_path)
    assert AGREES == review.outcome
    assert "Filled-in form fields: 1 (6.2)" in said(review)
    assert "that is no alteration" in said(review)


def test_form_fields_that_are_gone_are_an_alteration(made: Made, tmp_path: Path) -> None:
    """A form flattened after signing has no fields any more."""

    def edit(writer: PdfWriter) -> None:
        for page in writer.pages:
            page.pop("/Annots", None)

    assert "form fields;" in said(reviewed(edited(made.content, edit), tmp_path))


def test_an_added_signature_is_reported_and_no_alteration(made: Made, tmp_path: Path) -> None:
    """Who signed and when is told; whether the signature is good is not claimed."""

    def edit(writer: PdfWriter) -> None:
        signature = writer._add_object(
            DictionaryObject(
                {
                    NameObject("/Type"): NameObject("/Sig"),
                    NameObject("/Name"): TextStringObject("A. Person"),
                    NameObject("/M"): TextStringObject("D:20261202101500Z"),
                }
            )
        )
        field = writer._add_object(
            DictionaryObject(
                {
                    NameObject("/Type"): NameObject("/Annot"),
                    NameObject("/Subtype"): NameObject("/Widget"),
                    NameObject("/FT"): NameObject("/Sig"),
                    NameObject("/T"): TextStringObject("signature"),
                    NameObject("/V"): signature,
                    NameObject("/Rect"): ArrayObject([FloatObject(0)] * 4),
                }
            )
        )
        writer._root_object["/AcroForm"].get_object()["/Fields"].get_object().append(field)
        page = writer.pages[0]
        page[NameObject("/Annots")] = ArrayObject([*page.get("/Annots", ()), field])

    review = reviewed(edited(made.content, edit), tmp_path)
    assert AGREES == review.outcome
    assert "signed by A. Person on 2026-12-02; that is no alteration" in said(review)
    assert "was not checked here" in said(review)


def test_a_comment_laid_over_a_page_is_reported(made: Made, tmp_path: Path) -> None:
    """A note may cover what stands under it, so its page is named."""

    def edit(writer: PdfWriter) -> None:
        note = DictionaryObject(
            {
                NameObject("/Type"): NameObject("/Annot"),
                NameObject("/Subtype"): NameObject("/FreeText"),
                NameObject("/Rect"): ArrayObject([FloatObject(each) for each in (0, 0, 50, 50)]),
                NameObject("/Contents"): TextStringObject("310"),
            }
        )
        page = writer.pages[2]
        page[NameObject("/Annots")] = ArrayObject([*page.get("/Annots", ()), writer._add_object(note)])

    assert "A note or comment was added on page 3: FreeText" in said(reviewed(edited(made.content, edit), tmp_path))


def test_a_list_that_is_missing_or_damaged_is_said(made: Made, tmp_path: Path) -> None:
    """Without it the pages cannot be judged, so the binder does not agree."""
    gone = reviewed(edited(made.content, lambda writer: attachment(writer, "manifest.json").delete()), tmp_path)
    assert DISAGREES == gone.outcome
    assert "Manifest.json is missing" in said(gone)

    def damage(writer: PdfWriter) -> None:
        attachment(writer, "manifest.json").content = b'{"written_by": "readiness", "format": "1"}'

    damaged = reviewed(edited(made.content, damage), tmp_path)
    assert DISAGREES == damaged.outcome
    assert "is damaged" in said(damaged)


def test_another_version_with_the_same_results_agrees_and_is_named(tmp_path: Path) -> None:
    """Integrity holds and our results are the same; the version that wrote it is told."""
    other = make(Versions("0.0.9", "abc", "1"))
    review = reviewed(other.content, tmp_path)
    assert AGREES == review.outcome
    assert "It was written by version 0.0.9; this is version" in said(review)


def test_another_version_with_other_results_cannot_tell(
    monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    """By version or by hand: cannot tell; which version to install is named."""
    other = make(Versions("0.0.9", "abc", "1"))
    ours = recomputing.assessed

    def otherwise(program: object, as_of: date) -> Assessment:
        found = ours(program, as_of)  # type: ignore[arg-type]
        return replace(found, values=found.values[1:])

    monkeypatch.setattr(recomputing, "assessed", otherwise)
    review = reviewed(other.content, tmp_path)
    assert CANNOT_TELL == review.outcome
    text = said(review)
    assert "What differs came by version or by hand: cannot tell. To tell, install version 0.0.9." in text
    assert "values:" in text


def test_the_same_version_with_other_results_does_not_agree(
    made: Made, monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    """Nothing was altered by the list, and yet the results do not follow."""
    ours = recomputing.assessed

    def otherwise(program: object, as_of: date) -> Assessment:
        found = ours(program, as_of)  # type: ignore[arg-type]
        return replace(found, values=found.values[1:])

    monkeypatch.setattr(recomputing, "assessed", otherwise)
    review = reviewed(made.content, tmp_path)
    assert DISAGREES == review.outcome
    assert said(review).startswith("b.pdf does not agree with the inputs inside it.")


def _again(content: bytes, tmp_path: Path) -> Callable[..., Manifest]:
    manifest = opened(content, tmp_path).manifest
    return lambda recomputed, say: manifest


def test_pages_are_made_again_and_compared(made: Made, monkeypatch: pytest.MonkeyPatch, tmp_path: Path) -> None:
    """The same pages agree; a page and its list changed together are found only this way."""
    monkeypatch.setattr(binder_review, "manifest_again", _again(made.content, tmp_path))
    review = review_binder(opened(made.content, tmp_path), quick=False)
    assert AGREES == review.outcome
    assert "Pages and attachments: all the same." in said(review)
    honest = opened(made.content, tmp_path)
    page = replace(honest.pages[1], words="0" * 64)
    listed = replace(honest.manifest, pages=(honest.manifest.pages[0], page, *honest.manifest.pages[2:]))
    forged = replace(
        honest,
        pages=(honest.pages[0], page, *honest.pages[2:]),
        attachments={**honest.attachments, "manifest.json": _written(honest, listed)},
    )
    review = review_binder(forged, quick=False)
    assert DISAGREES == review.outcome
    assert "MADE AGAIN FROM THE INPUTS INSIDE" in said(review)
    assert "Page 2 (" in said(review)


def _written(binder_: OpenedBinder, manifest: Manifest) -> bytes:
    data = json.loads(binder_.attachments["manifest.json"])
    for entry, mark in zip(data["pages"], manifest.pages, strict=True):
        entry["words"] = mark.words
    return json.dumps(data).encode()


def test_another_press_leaves_the_pages_to_their_list(
    made: Made, monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    """Other libraries may break lines elsewhere, which is no alteration."""
    monkeypatch.setattr(binder_review.press, "made_by", lambda: "WeasyPrint 99, Pango 2")
    review = review_binder(opened(made.content, tmp_path), quick=False)
    assert AGREES == review.outcome
    assert "which may break lines elsewhere" in said(review)


def test_a_locked_binder_is_refused_and_one_protected_against_changes_is_read(made: Made, tmp_path: Path) -> None:
    """A password is named as the reason; an empty one opens."""
    locked = edited(made.content, lambda writer: writer.encrypt("secret", algorithm="RC4-128"))
    with pytest.raises(UsageError, match="locked with a password"):
        opened(locked, tmp_path)
    protected = edited(made.content, lambda writer: writer.encrypt("", "owner", algorithm="RC4-128"))
    assert AGREES == reviewed(protected, tmp_path).outcome


@pytest.mark.skipif(shutil.which("qpdf") is None, reason="qpdf is not on this machine")
@pytest.mark.parametrize("password", ["", "secret"])
def test_a_cipher_that_cannot_be_opened_is_not_called_damage(made: Made, tmp_path: Path, password: str) -> None:
    """Whoever encrypted the file hears what to do, whether or not a password is needed."""
    plain, path = tmp_path / "plain.pdf", tmp_path / "b.pdf"
    plain.write_bytes(made.content)
    command = ["qpdf", "--encrypt", password, "owner", "256", "--", str(plain), str(path)]
    subprocess.run(command, check=True)  # noqa: S603 - a fixed command
    with pytest.raises(UsageError, match="encrypted in a way that cannot be opened here|locked with a password"):
        open_binder(path)


def answer(read: Callable[[], Found]) -> tuple[Found | None, str]:
    """Return what was read, or the words with which it was refused."""
    try:
        return read(), ""
    except UsageError as refused:
        return None, str(refused)


@pytest.mark.parametrize("kept", [0, 3, 10, 2000, 0.3, 0.5, 0.8, 0.95, 0.999])
def test_a_truncated_binder_never_agrees(made: Made, tmp_path: Path, kept: float) -> None:
    """Whatever is cut off, the answer is a sentence: refused, or altered."""
    length = int(kept * len(made.content)) if isinstance(kept, float) else kept
    review, refused = answer(lambda: reviewed(made.content[:length], tmp_path))
    if review is None:
        assert str(tmp_path) in refused
    else:
        assert DISAGREES == review.outcome or kept > 0.99


def test_broken_bytes_anywhere_never_crash(tmp_path: Path) -> None:
    """A few bytes are overwritten again and again; every time there is an answer."""
    chance = random.Random(6)
    documents = [each for each in render_bodies(fakes.empty()) if each.number in SOME[-2:]]
    attached = {"assessment.json": to_json(fakes.empty()).encode()}
    whole = binder.make(fakes.empty(), documents, attached, DAY)["binder.pdf"]
    for _ in range(12):
        broken = bytearray(whole)
        for _ in range(chance.choice((1, 3, 30))):
            broken[chance.randrange(len(broken))] = chance.randrange(256)
        content = bytes(broken)
        found, refused = answer(lambda content=content: opened(content, tmp_path))
        if found is None:
            assert "b.pdf" in refused
        else:
            assert isinstance(found.held.pages, tuple)


def test_a_pdf_of_somebody_else_is_refused(tmp_path: Path) -> None:
    """Without anything of ours inside it is not ours."""
    writer = PdfWriter()
    writer.add_blank_page(100, 100)
    stream = io.BytesIO()
    writer.write(stream)
    with pytest.raises(UsageError, match="not a binder written by this tool"):
        opened(stream.getvalue(), tmp_path)


def test_somebody_elses_assessment_and_manifest_are_no_crash(tmp_path: Path) -> None:
    """Attachments of our names with foreign content are told for what they are."""
    writer = PdfWriter()
    writer.add_blank_page(100, 100)
    writer.add_attachment("assessment.json", b"[1, 2]")
    writer.add_attachment("manifest.json", b"{}")
    stream = io.BytesIO()
    writer.write(stream)
    review = reviewed(stream.getvalue(), tmp_path)
    assert DISAGREES == review.outcome
    assert "not an assessment written by this tool" in said(review)
    with pytest.raises(UsageError, match=r"b\.pdf"):
        assessment_in(tmp_path / "b.pdf")


def test_json_says_the_same(made: Made, tmp_path: Path) -> None:
    """A program reads outcome, words and every alteration."""
    found = json.loads(review_json(reviewed(made.content, tmp_path), "b.pdf"))
    assert ("agrees", []) == (found["outcome"], found["integrity"]["alterations"])
    assert found["words"] == "b.pdf agrees with the inputs inside it."


def test_statuses(made: Made, tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """0 agrees, 1 does not, 2 unreadable, not ours or not there."""
    path = tmp_path / "b.pdf"
    path.write_bytes(made.content)
    assert 0 == run(["review", str(path), "--quick"])
    assert "agrees with the inputs inside it" in " ".join(capsys.readouterr().out.split())
    path.write_bytes(edited(made.content, lambda writer: writer.remove_page(1)))
    assert 1 == run(["review", str(path), "--quick", "--json"])
    assert "does not agree" == json.loads(capsys.readouterr().out)["outcome"]
    path.write_bytes(b"%PDF-1.7\n%%EOF")
    assert 2 == run(["review", str(path)])
    path.write_bytes(b"hello")
    assert 2 == run(["review", str(path)])
    assert 2 == run(["review", str(tmp_path / "none.pdf")])
    captured = capsys.readouterr()
    assert "" == captured.out
    assert "Traceback" not in captured.err
