"""The binder: cover, contents, assessment part and every controlled document, as one PDF and one by one."""

import re
from collections.abc import Callable, Mapping, Sequence
from datetime import date

from readiness.assessment.document_heads import PARTS
from readiness.assessment.records import Assessment
from readiness.outputs import press
from readiness.outputs.assessment_part import Entry, Sheet, assessment_sheets, contents_sheet, cover_sheet
from readiness.outputs.binder_manifest import MANIFEST, manifest_bytes
from readiness.outputs.documents import RenderedDocument
from readiness.outputs.fonts import missing_characters
from readiness.outputs.frame import anchor, article, page, resolved, state_words, style
from readiness.outputs.page_words import Drawn

BINDER = "binder.pdf"
_FOLDER = "documents"


def make(
    assessment: Assessment,
    rendered: Sequence[RenderedDocument],
    attachments: Mapping[str, bytes],
    as_of: date,
    say: Callable[[str], None] = lambda words: None,
) -> dict[str, bytes]:
    """
    Return the binder and each document by itself, as PDF and HTML.

    Args:
        assessment: What the binder shows.
        rendered: The documents.
        attachments: Files to put into the binder: inputs, assessment, gap list.
        as_of: The date in the files.
        say: Told which document is being laid out.

    Raises:
        PressMissing: If PDFs cannot be written on this machine; html_files() can be had without them.
    """
    press.ready()
    with press.undisturbed():
        return _made(assessment, rendered, attachments, as_of, say)


def _made(
    assessment: Assessment,
    rendered: Sequence[RenderedDocument],
    attachments: Mapping[str, bytes],
    as_of: date,
    say: Callable[[str], None],
) -> dict[str, bytes]:
    css = style(assessment)
    files = html_files(assessment, rendered)
    sheets = assessment_sheets(assessment, rendered)
    places = _places(sheets, rendered)
    layouts: dict[str, press.Layout] = {}
    opened: set[str] = set()
    for document in rendered:
        say(_name(document))
        html = article(document, assessment, first=document.part not in opened)
        opened.add(document.part)
        layouts[document.number] = _laid_out(html, _name(document), css, places)
        single = press.write([layouts[document.number]], _name(document), assessment.program, as_of)
        files[f"{_FOLDER}/{file_stem(document)}.pdf"] = single
    say("assessment part")
    front = [_laid_out(sheet.html, sheet.title, css, places) for sheet in sheets]
    cover = _laid_out(cover_sheet(assessment, _unprintable(rendered)).html, "Cover", css, places)
    contents = _contents(assessment, rendered, cover, list(zip(sheets, front, strict=True)), layouts, css)
    say("joining")
    pages = [cover, contents, *front, *layouts.values()]
    title = f"Total skin electron program, {assessment.program}"
    described = {name: (content, "Made from this") for name, content in attachments.items()}
    parts = [f"{layout.title}, page {number + 1}" for layout in pages for number in range(layout.pages)]

    def manifest(drawn: Sequence[tuple[Drawn, int]]) -> bytes:
        marked = [(part, page, fields) for part, (page, fields) in zip(parts, drawn, strict=True)]
        return manifest_bytes(assessment, attachments, marked, press.made_by())

    files[BINDER] = press.write(pages, title, assessment.program, as_of, described, (MANIFEST, manifest))
    return files


def html_files(assessment: Assessment, rendered: Sequence[RenderedDocument]) -> dict[str, bytes]:
    """Return each document as an HTML page of its own; nothing is laid out."""
    css = style(assessment)
    stems = {document.number: file_stem(document) for document in rendered}

    def target(name: str) -> str | None:
        return f"{stems[name]}.html" if name in stems else None

    return {
        f"{_FOLDER}/{stems[document.number]}.html": page(
            _name(document), resolved(article(document, assessment), target), css
        ).encode()
        for document in rendered
    }


def file_stem(document: RenderedDocument) -> str:
    """Return the file name of a document without its ending: 3.1-room-set-up."""
    return f"{document.number}-{re.sub(r'[^a-z0-9]+', '-', document.title.lower()).strip('-')}"


def _name(document: RenderedDocument) -> str:
    return f"{document.number} {document.title}"


def _places(sheets: Sequence[Sheet], rendered: Sequence[RenderedDocument]) -> frozenset[str]:
    """Return every place of the binder that a link may lead to."""
    named = {name for sheet in sheets for name in re.findall(r' id="([^"]+)"', sheet.html)}
    return frozenset(named | {anchor(document.number) for document in rendered})


def _laid_out(html: str, title: str, css: str, places: frozenset[str]) -> press.Layout:
    def target(name: str) -> str | None:
        return f"#{anchor(name)}" if anchor(name) in places else None

    return press.lay_out(page(title, resolved(html, target)), [css], title)


def _unprintable(rendered: Sequence[RenderedDocument]) -> tuple[str, ...]:
    """Return the documents that hold characters which the fonts do not have."""
    lacking = {document.number: missing_characters(document.html_body) for document in rendered}
    return tuple(
        f"{number}: {', '.join(f'U+{ord(each):04X}' for each in found)}"
        for number, found in lacking.items()
        if found
    )


def _contents(
    assessment: Assessment,
    rendered: Sequence[RenderedDocument],
    cover: press.Layout,
    front: Sequence[tuple[Sheet, press.Layout]],
    layouts: Mapping[str, press.Layout],
    css: str,
) -> press.Layout:
    """Return the contents with literal page numbers, laid out again if they need another page themselves."""
    places = frozenset(
        {sheet.anchor for sheet, _ in front} | {anchor(document.number) for document in rendered}
    )
    own_pages = 1
    while True:
        entries = _entries(assessment, rendered, cover.pages + own_pages + 1, front, layouts)
        laid_out = _laid_out(contents_sheet(assessment, entries).html, "Contents", css, places)
        if laid_out.pages == own_pages:
            return laid_out
        own_pages = max(own_pages + 1, laid_out.pages)


def _entries(
    assessment: Assessment,
    rendered: Sequence[RenderedDocument],
    first: int,
    front: Sequence[tuple[Sheet, press.Layout]],
    layouts: Mapping[str, press.Layout],
) -> list[Entry]:
    states = {state.number: state for state in assessment.documents}
    entries = [Entry(1, "", "Assessment", "", 0, 0)]
    here = first
    for sheet, layout in front:
        entries.append(Entry(2, sheet.anchor, sheet.title, "", layout.pages, here))
        here += layout.pages
    for part in PARTS:
        inside = [document for document in rendered if document.part == part]
        if inside:
            entries.append(Entry(1, "", part, "", 0, 0))
        for document in inside:
            layout, status = layouts[document.number], state_words(states.get(document.number))
            entries.append(Entry(2, document.number, _name(document), status, layout.pages, here))
            here += layout.pages
    return entries
