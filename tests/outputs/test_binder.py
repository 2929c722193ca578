"""The binder from outside: same bytes, valid PDF, links, fields, attachments, running heads."""

import io
import json
import re
import shutil
import subprocess
import sys
from dataclasses import replace
from pathlib import Path

import pdfua
import pytest
from pypdf import PdfReader, PdfWriter

from readiness.assessment.records import Assessment, Ref, Value
from readiness.outputs import binder, press
from readiness.outputs.assessment_part import SHEETS
from readiness.outputs.documents import RenderedDocument, render_bodies
from readiness.outputs.frame import anchor, article, page, resolved, style
from tests.outputs import fakes

ATTACHED = {"program.yaml": b"format: 1\n", "assessment.json": b"{}\n"}
SOME = ("1.1", "3.1", "4.3", "6.1", "6.4")


def _some(assessment: Assessment) -> tuple[RenderedDocument, ...]:
    return tuple(each for each in render_bodies(assessment) if each.number in SOME)


@pytest.fixture(scope="module")
def files() -> dict[str, bytes]:
    """Return a binder of a few documents."""
    assessment = fakes.full()
    return binder.make(assessment, _some(assessment), ATTACHED, fakes.AS_OF)


@pytest.fixture(scope="module")
def reader(files: dict[str, bytes]) -> PdfReader:
    """Return that binder opened."""
    return PdfReader(io.BytesIO(files[binder.BINDER]))


@pytest.fixture(scope="module")
def pages(reader: PdfReader) -> list[str]:
    """Return the text of each of its pages."""
    return _text(reader)


def _text(reader: PdfReader) -> list[str]:
    return [page.extract_text() for page in reader.pages]


def test_each_document_is_there_by_itself_as_pdf_and_html(files: dict[str, bytes]) -> None:
    """A hospital's document system gets each document under its number and title."""
    assert {
        "binder.pdf",
        "documents/1.1-program-charter-and-scope.pdf",
        "documents/1.1-program-charter-and-scope.html",
        "documents/6.4-in-vivo-record.pdf",
        "documents/6.4-in-vivo-record.html",
    } <= set(files)
    assert 2 * len(SOME) + 1 == len(files)


def test_the_same_input_gives_the_same_bytes_in_another_process(
    files: dict[str, bytes], tmp_path: Path
) -> None:
    """Nothing of the machine, the moment or the order of hashing enters a file."""
    program = (
        "import sys; from pathlib import Path; from readiness.outputs import binder\n"
        "from tests.outputs import fakes, test_binder as t\n"
        "a = fakes.full(); made = binder.make(a, t._some(a), t.ATTACHED, fakes.AS_OF)\n"
        "[Path(sys.argv[1], n.replace('/', '_')).write_bytes(c) for n, c in made.items()]\n"
    )
    root = Path(__file__).parents[2]
    environment = {
        "PYTHONHASHSEED": "7",
        "PATH": "/usr/bin:/bin",
        "TZ": "Asia/Tokyo",
        "PYTHONPATH": str(root),
    }
    subprocess.run([sys.executable, "-c", program, str(tmp_path)], cwd=root, env=environment, check=True)
    again = {name: (tmp_path / name.replace("/", "_")).read_bytes() for name in files}
    assert [] == [name for name in files if files[name] != again[name]]


@pytest.mark.skipif(shutil.which("qpdf") is None, reason="qpdf is not on this machine")
def test_qpdf_finds_nothing_wrong(files: dict[str, bytes], tmp_path: Path) -> None:
    """Binder and single documents are sound PDF files."""
    for name in ("binder.pdf", "documents/6.4-in-vivo-record.pdf"):
        path = tmp_path / "x.pdf"
        path.write_bytes(files[name])
        found = subprocess.run(["qpdf", "--check", path], capture_output=True, text=True, check=False)
        assert 0 == found.returncode, found.stdout + found.stderr


@pytest.mark.skipif(shutil.which("pdfinfo") is None, reason="pdfinfo is not on this machine")
def test_pdfinfo_sees_a_tagged_document_with_fixed_dates(files: dict[str, bytes], tmp_path: Path) -> None:
    """The binder is tagged, titled, has a form, and carries the day of the assessment."""
    path = tmp_path / "x.pdf"
    path.write_bytes(files[binder.BINDER])
    found = subprocess.run(["pdfinfo", "-isodates", path], capture_output=True, text=True, check=True).stdout
    said = {key: value.strip() for key, _, value in (line.partition(":") for line in found.splitlines())}
    assert "yes" == said["Tagged"]
    assert "AcroForm" == said["Form"]
    assert "none" != said["Title"]
    assert said["CreationDate"].startswith("2026-12-01")
    assert "no" == said["Encrypted"]


@pytest.mark.parametrize("name", ["documents/6.1-treatment-directive.pdf", "documents/6.4-in-vivo-record.pdf"])
def test_a_whole_form_is_filled_saved_and_read_back(files: dict[str, bytes], name: str) -> None:
    """Every line takes its own words and every box its tick; none of them fills another."""
    writer = PdfWriter(clone_from=io.BytesIO(files[name]))
    fields = PdfReader(io.BytesIO(files[name])).get_fields() or {}
    texts = {field: f"entry {place}" for place, (field, each) in enumerate(fields.items()) if each["/FT"] == "/Tx"}
    boxes = [field for field, each in fields.items() if each["/FT"] == "/Btn"]
    assert texts
    assert boxes
    ticked = {field: next(state for state in fields[field]["/_States_"] if state != "/Off") for field in boxes}
    writer.update_page_form_field_values(None, {**texts, **ticked}, auto_regenerate=False)
    stream = io.BytesIO()
    writer.write(stream)
    again = PdfReader(stream).get_fields() or {}
    assert {**texts, **ticked} == {field: str(again[field]["/V"]) for field in (*texts, *ticked)}


@pytest.mark.parametrize("name", ["binder.pdf", "documents/6.4-in-vivo-record.pdf", "documents/1.1-program-charter-and-scope.pdf"])
def test_a_checker_of_accessible_pdf_finds_nothing(files: dict[str, bytes], tmp_path: Path, name: str) -> None:
    """
    Tags, headings, tables, figures, language and title pass the rules that the pdfua package can check.

    One of its rules fails itself on a nested array in the file and is skipped by the package; a file without
    tags is refused, so that the check can fail.
    """
    path = tmp_path / "x.pdf"
    path.write_bytes(files[name])
    found = pdfua.validate(str(path))
    assert [] == [f"{each.rule_id}: {each.message}" for each in found.findings]
    plain = PdfWriter()
    plain.add_blank_page(595, 842)
    with path.open("wb") as stream:
        plain.write(stream)
    assert pdfua.validate(str(path)).findings


def test_it_says_that_it_is_accessible(reader: PdfReader) -> None:
    """Language, tags, title and the PDF/UA mark are there."""
    root = reader.trailer["/Root"]
    assert "en" == root["/Lang"]
    assert root["/MarkInfo"]["/Marked"] is True or "true" == str(root["/MarkInfo"]["/Marked"]).lower()
    assert "pdfuaid" in root["/Metadata"].get_data().decode()
    assert "Total skin electron program, Example Department" == reader.metadata.title


def test_every_table_heading_says_what_it_stands_over(reader: PdfReader) -> None:
    """A screen reader is told for each heading whether it heads a row or a column."""
    scopes: list[str] = []
    waiting = [reader.trailer["/Root"]["/StructTreeRoot"]["/K"]]
    while waiting:
        node = waiting.pop()
        node = node.get_object() if hasattr(node, "get_object") else node
        if isinstance(node, list):
            waiting += node
        elif isinstance(node, dict):
            if node.get("/S") == "/TH" and "/A" in node:
                scopes.append(str(node["/A"].get("/Scope")))
            waiting.append(node.get("/K", []))
    assert {"/Row", "/Column"} == set(scopes)
    assert len(scopes) > 100


def test_contents_give_the_page_on_which_each_document_begins(pages: list[str]) -> None:
    """The numbers printed in the contents are those of the file."""
    contents = next(text for text in pages if text.startswith("Contents"))
    for number, title in (("1.1", "Program charter and scope"), ("6.4", "In-vivo record")):
        line = next(each for each in contents.splitlines() if each.startswith(f"{number} {title}"))
        page = int(line.split()[-1])
        assert f"{number} {title}" in pages[page - 1]
        assert "page 1 of" in pages[page - 1]


def test_each_document_counts_its_own_pages(pages: list[str]) -> None:
    """Page x of y speaks of the document, not of the binder."""
    first = [text for text in pages if "page 1 of " in text]
    assert 2 + len(SHEETS) + len(SOME) == len(first)


@pytest.mark.parametrize("technique", ["six-position", "moving-couch"])
def test_a_form_keeps_to_one_page(technique: str) -> None:
    """Whoever signs a form sees whose it is: no second page without a name on it."""
    assessment = fakes.full(technique=technique)
    forms = [each for each in render_bodies(assessment) if each.kind == "form"]
    css = style(assessment)
    counts = {each.number: _pages_of(each, assessment, css) for each in forms}
    assert dict.fromkeys(counts, 1) == counts


def _pages_of(document: RenderedDocument, assessment: Assessment, css: str) -> int:
    html = resolved(page(document.title, article(document, assessment)), lambda _: None)
    return press.lay_out(html, [css], document.title).pages


def test_every_page_of_a_draft_says_so(files: dict[str, bytes], pages: list[str]) -> None:
    """No page of a document that is not approved can be taken for an approved one."""
    counts = [len(PdfReader(io.BytesIO(files[name])).pages) for name in files if _is_single(name)]
    documents = pages[-sum(counts) :]
    assert all("DRAFT, not approved" in text for text in documents)
    assert not any("DRAFT, not approved" in text for text in pages[: -sum(counts)] if "Contents" not in text)


def _is_single(name: str) -> bool:
    return name.startswith("documents/") and name.endswith(".pdf")


def test_an_approved_document_shows_revision_and_date() -> None:
    """An approved document names its revision and calls the approval a record."""
    assessment = fakes.full(status="approved")
    document = next(each for each in render_bodies(assessment) if each.number == "1.3")
    made = binder.make(assessment, [document], {}, fakes.AS_OF)
    text = "\n".join(_text(PdfReader(io.BytesIO(made["documents/1.3-document-control.pdf"]))))
    assert "revision 2, approved 2026-11-20" in text
    assert "A record of approval, not a signature." in text
    assert "DRAFT, not approved" not in text


def test_every_document_carries_the_caution_and_that_it_is_invented(files: dict[str, bytes]) -> None:
    """Planning aid, confirm by measurement, invented: on the first page of each document and at every foot."""
    for name, content in files.items():
        if _is_single(name):
            pages = _text(PdfReader(io.BytesIO(content)))
            assert "Caution." in pages[0]
            assert all("confirm by measurement" in text and "invented" in text for text in pages)


def test_links_between_documents_lead_there(reader: PdfReader) -> None:
    """A reference to another document or to a rule can be followed; nothing leads nowhere."""
    names = set(reader.named_destinations)
    targets = {
        str(annotation.get_object()["/Dest"])
        for page in reader.pages
        for annotation in page.get("/Annots", ())
        if annotation.get_object()["/Subtype"] == "/Link" and "/Dest" in annotation.get_object()
    }
    assert targets <= names
    assert {"d3-1", "d4-3", "rule-survey-in-mode", "gap-survey-vault-a", "source-aapm-23"} <= targets


def test_a_link_to_a_document_that_is_not_there_is_plain_words(files: dict[str, bytes]) -> None:
    """The charter names 4.8 also where 4.8 is not in the binder, without a dead link."""
    html = files["documents/1.1-program-charter-and-scope.html"].decode()
    assert "4.8" in html
    assert "binder:" not in html
    assert 'href="4.3-' not in html or "4.3" in SOME


def test_the_outline_has_parts_and_documents(reader: PdfReader) -> None:
    """The outline opens part by part."""
    top = [entry.title for entry in reader.outline if not isinstance(entry, list)]
    assert {"Cover", "Contents", "Program", "Treatment", "Physics", "Forms"} <= set(top)
    inner = [entry.title for each in reader.outline if isinstance(each, list) for entry in each
             if not isinstance(entry, list)]  # fmt: skip
    assert "3.1 Room set-up, sweep and return to ordinary use (draft)" in inner


def test_inputs_are_attached_as_sources(reader: PdfReader) -> None:
    """The files that the binder was made from are inside it, unchanged, marked as its source, with its date."""
    attached = dict(reader.attachments)
    (manifest,) = attached.pop("manifest.json")
    assert {name: [content] for name, content in ATTACHED.items()} == attached
    assert sorted(ATTACHED) == [each["name"] for each in json.loads(manifest)["attachments"]]
    associated = reader.trailer["/Root"]["/AF"]
    assert ["/Source"] * 3 == [each.get_object()["/AFRelationship"] for each in associated]
    dates = {str(each.get_object()["/EF"]["/F"]["/Params"]["/ModDate"]) for each in associated}
    assert {"D:20261201000000Z"} == dates


def test_fields_can_be_filled_saved_and_read_back(files: dict[str, bytes], reader: PdfReader) -> None:
    """A form filled in with another program keeps its entries; every name in the binder is its own."""
    names = list(reader.get_fields() or {})
    widgets = [
        annotation.get_object()
        for page in reader.pages
        for annotation in page.get("/Annots", ())
        if annotation.get_object()["/Subtype"] == "/Widget"
    ]
    assert len(widgets) == len(names) == len({str(each["/T"]) for each in widgets}) > 200
    assert all(str(each.get("/TU", "")) for each in widgets)
    writer = PdfWriter(clone_from=io.BytesIO(files["documents/6.1-treatment-directive.pdf"]))
    writer.update_page_form_field_values(None, {"f6-1-dose-per-cycle-gy": "2"}, auto_regenerate=False)
    stream = io.BytesIO()
    writer.write(stream)
    again = PdfReader(stream).get_fields() or {}
    assert "2" == again["f6-1-dose-per-cycle-gy"]["/V"]


def test_text_is_read_in_order(files: dict[str, bytes]) -> None:
    """Extracted text follows the order in which people read: title, caution, scope, steps."""
    pages = _text(
        PdfReader(io.BytesIO(files["documents/3.1-room-set-up-sweep-and-return-to-ordinary-use.pdf"]))
    )
    text = re.sub(r"\s+", " ", " ".join(pages))
    places = [text.index(each) for each in ("Caution.", "Scope", "End the ordinary session", "Sweep of the room",
                                            "Return to ordinary use Leave")]  # fmt: skip
    assert sorted(places) == places


def test_a_binder_of_an_empty_program_can_be_made() -> None:
    """A folder that says nothing gives a binder of blanks, not an error."""
    assessment = fakes.empty()
    document = next(each for each in render_bodies(assessment) if each.number == "4.1")
    made = binder.make(assessment, [document], {}, fakes.AS_OF)
    text = "\n".join(_text(PdfReader(io.BytesIO(made[binder.BINDER]))))
    assert "No arrangement can be formed" in text
    assert "________" in text


def test_what_the_font_cannot_show_is_told_on_the_cover() -> None:
    """A name in letters that the fonts lack is printed as boxes, and the cover says where."""
    assessment = fakes.full()
    values = tuple(
        replace(value, value="\u0e01\u0e23") if value.name == "program.jurisdiction" else value
        for value in assessment.values
    )
    foreign = replace(assessment, values=values)
    made = binder.make(foreign, _some(foreign)[:1], {}, fakes.AS_OF)
    cover = _text(PdfReader(io.BytesIO(made[binder.BINDER])))[0].replace("\0", "")
    assert "Document 1.1: U+0E01, U+0E23" in cover


def test_the_chief_reads_verdict_gaps_and_date(pages: list[str]) -> None:
    """The chief's page names what blocks, who does it, when the first patient could come, and what moves it."""
    chief = re.sub(r"\s+", " ", next(text for text in pages if text.startswith("For the chief")))
    for words in ("Ready when gaps close", "Measure a survey in the mode.", "radiation protection officer",
                  "2027-02-01", "Earliest first patient: 2027-02-02", "12 working days late"):  # fmt: skip
        assert words in chief
    road = re.sub(r"\s+", " ", next(text for text in pages if text.startswith("The road")))
    for sheet in (chief, road):
        assert re.search(r"What moves the date most: .*survey.* \(by up to 2 working days\)", sheet, re.I)


def test_html_can_be_had_without_the_press() -> None:
    """Where PDFs cannot be written the documents still come as HTML."""
    assessment = fakes.full()
    files = binder.html_files(assessment, _some(assessment))
    assert len(SOME) == len(files)
    assert all(content.startswith(b"<!DOCTYPE html>") for content in files.values())


def test_a_missing_pango_is_told_in_one_line() -> None:
    """The person is told which packages to install, and nothing is half made."""
    program = (
        "import sys, types\n"
        "class Refuse:\n"
        "    def find_spec(self, name, path=None, target=None):\n"
        "        if name == 'weasyprint': raise OSError('cannot load library libpango-1.0-0')\n"
        "sys.meta_path.insert(0, Refuse())\n"
        "from readiness.outputs import press\n"
        "try: press.ready()\n"
        "except press.PressMissing as missing: print(missing)\n"
    )
    root = Path(__file__).parents[2]
    said = subprocess.run(
        [sys.executable, "-c", program], cwd=root, capture_output=True, text=True, check=True
    )
    assert 1 == said.stdout.count("\n")
    assert "libpango-1.0-0 libpangoft2-1.0-0 libharfbuzz-subset0" in said.stdout


@pytest.mark.parametrize(
    "inside",
    [
        '<img alt="x" src="http://localhost/x.png">',
        '<img alt="x" src="file:///etc/passwd">',
        '<link rel="attachment" href="file:///etc/passwd">',
        '<a rel="attachment" href="file:///etc/passwd">x</a>',
        '<p style="background: url(file:///etc/passwd)">x</p>',
    ],
)
def test_a_page_fetches_nothing(inside: str) -> None:
    """Whatever stands in a page, no file of the machine and no address is opened."""
    html = f'<!DOCTYPE html><html lang="en"><head><title>x</title></head><body>{inside}</body></html>'
    with pytest.raises(press.PressError, match="asks for something outside itself"):
        press.write([press.lay_out(html, [""], "x")], "x", "", fakes.AS_OF)


def test_an_error_of_the_library_stops_the_press() -> None:
    """What WeasyPrint only writes to its log is an error here: a figure without a description."""
    picture = "data:image/svg+xml,%3Csvg xmlns='http://www.w3.org/2000/svg' width='9' height='9'/%3E"
    html = f'<!DOCTYPE html><html lang="en"><title>x</title><body><img src="{picture}"></body></html>'
    with pytest.raises(press.PressError, match="alt"):
        press.write([press.lay_out(html, [""], "x")], "x", "", fakes.AS_OF)


def test_letter_paper_is_used_where_the_department_says_so() -> None:
    """A department on letter paper gets letter pages, also the wide ones."""
    assessment = fakes.full()
    values = tuple(value for value in assessment.values if value.name != "program.paper")
    paper = Value("program.paper", Ref("program", "program"), "letter", "", "stated")
    letter = replace(assessment, values=(*values, paper))
    made = binder.make(letter, _some(letter)[:1], {}, fakes.AS_OF)
    pages = PdfReader(io.BytesIO(made["binder.pdf"])).pages
    sizes = {tuple(round(each) for each in page.mediabox[2:]) for page in pages}
    assert {(612, 792), (792, 612)} == sizes


def test_binder_links_are_told_apart() -> None:
    """A document's number, a rule and a source each have their own place."""
    assert "d3-1" == anchor("3.1")
    assert "rule-plane-distance" == anchor("rule-plane-distance")
    assert "source-osha-1910-1000" == anchor("source-osha-1910.1000")
    assert "see 3.1" == resolved('see <a href="binder:3.1">3.1</a>', lambda name: None)
