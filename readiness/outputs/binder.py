"""The binder: cover, contents, assessment part and every controlled document, as one PDF and one by one."""

import re
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
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
from readiness.outputs.press_cache import PrintCache, key

BINDER = "binder.pdf"
_FOLDER = "documents"


def make(
    assessment: Assessment,
    rendered: Sequence[RenderedDocument],
    attachments: Mapping[str, bytes],
    as_of: date,
    say: Callable[[str], None] = lambda words: None,
    kept: PrintCache | None = None,
) -> dict[str, bytes]:
    """
    Return the binder and each document by itself, as PDF and HTML.

    Args:
        assessment: What the binder shows.
        rendered: The documents.
        attachments: Files to put into the binder: inputs, assessment, gap list.
        as_of: The date in the files.
        say: Told which document is being laid out.
        kept: Where printed files are kept between runs; without it everything is laid out.

    Raises:
        PressMissing: If PDFs cannot be written on this machine; html_files() can be had without them.
    """
    press.ready()
    files = html_files(assessment, rendered)
    pieces = _pieces(assessment, rendered)
    found = _found(pieces, assessment, attachments, as_of, kept)
    if BINDER in found and len(found) == len(rendered) + 1:
        say("nothing to lay out: all pages are as they were printed before")
        return files | found
    with press.undisturbed():
        return files | _printed(pieces, assessment, rendered, attachments, as_of, say, kept, found)


@dataclass(frozen=True)
class _Piece:
    """A sheet or document that is laid out by itself; ``file`` names its own PDF, "" for a sheet."""

    title: str
    html: str
    file: str = ""


@dataclass(frozen=True)
class _Pieces:
    """Everything that is laid out, links already leading somewhere or nowhere."""

    css: str
    cover: _Piece
    sheets: tuple[tuple[Sheet, _Piece], ...]
    documents: Mapping[str, _Piece]


def _pieces(assessment: Assessment, rendered: Sequence[RenderedDocument]) -> _Pieces:
    sheets = assessment_sheets(assessment, rendered)
    places = _places(sheets, rendered)

    def piece(title: str, html: str, file: str = "") -> _Piece:
        return _Piece(title, page(title, resolved(html, lambda name: _target(name, places))), file)

    opened: set[str] = set()
    documents = {}
    for document in rendered:
        html = article(document, assessment, first=document.part not in opened)
        opened.add(document.part)
        name = f"{_FOLDER}/{file_stem(document)}.pdf"
        documents[document.number] = piece(_name(document), html, name)
    cover = piece("Cover", cover_sheet(assessment, _unprintable(rendered)).html)
    listed = tuple((sheet, piece(sheet.title, sheet.html)) for sheet in sheets)
    return _Pieces(style(assessment), cover, listed, documents)


def _target(name: str, places: frozenset[str]) -> str | None:
    return f"#{anchor(name)}" if anchor(name) in places else None


def _known_as(piece: _Piece, pieces: _Pieces, assessment: Assessment, as_of: date) -> str:
    return key("document", piece.title, piece.html, pieces.css, assessment.program, as_of.isoformat())


def _binder_known_as(
    pieces: _Pieces, assessment: Assessment, attachments: Mapping[str, bytes], as_of: date
) -> str:
    all_pieces = [pieces.cover, *(piece for _, piece in pieces.sheets), *pieces.documents.values()]
    inside = [part for name, content in sorted(attachments.items()) for part in (name, content)]
    shown = [part for piece in all_pieces for part in (piece.title, piece.html)]
    states = repr([state_words(state) for state in assessment.documents])
    around = (pieces.css, assessment.program, as_of.isoformat(), repr(assessment.versions), states)
    return key("binder", press.made_by(), *around, *shown, *inside)


def _found(
    pieces: _Pieces, assessment: Assessment, attachments: Mapping[str, bytes], as_of: date,
    kept: PrintCache | None,
) -> dict[str, bytes]:  # fmt: skip
    """Return what was printed before and is the same now."""
    if kept is None:
        return {}
    keys = {
        piece.file: _known_as(piece, pieces, assessment, as_of) for piece in pieces.documents.values()
    } | {BINDER: _binder_known_as(pieces, assessment, attachments, as_of)}
    found = {name: kept.get(known_as) for name, known_as in keys.items()}
    return {name: content for name, content in found.items() if content is not None}


def _printed(
    pieces: _Pieces, assessment: Assessment, rendered: Sequence[RenderedDocument],
    attachments: Mapping[str, bytes], as_of: date, say: Callable[[str], None], kept: PrintCache | None,
    found: Mapping[str, bytes],
) -> dict[str, bytes]:  # fmt: skip
    """
    Return the PDFs, those of single documents only where they were not found.

    Every document is laid out for the binder: a layout lives in memory only, and pages joined from finished
    files would lose their tags.
    """
    files = dict(found)
    layouts: dict[str, press.Layout] = {}
    for number, piece in pieces.documents.items():
        say(piece.title)
        layouts[number] = press.lay_out(piece.html, [pieces.css], piece.title)
        if piece.file not in files:
            files[piece.file] = press.write([layouts[number]], piece.title, assessment.program, as_of)
            if kept is not None:
                kept.put(_known_as(piece, pieces, assessment, as_of), files[piece.file])
    say("assessment part")
    front = [press.lay_out(piece.html, [pieces.css], piece.title) for _, piece in pieces.sheets]
    cover = press.lay_out(pieces.cover.html, [pieces.css], pieces.cover.title)
    sheets = [sheet for sheet, _ in pieces.sheets]
    contents = _contents(assessment, rendered, cover, list(zip(sheets, front, strict=True)), layouts)
    say("joining")
    pages = [cover, contents, *front, *layouts.values()]
    files[BINDER] = _joined(pages, assessment, attachments, as_of)
    if kept is not None:
        kept.put(_binder_known_as(pieces, assessment, attachments, as_of), files[BINDER])
    return files


def _joined(
    layouts: Sequence[press.Layout], assessment: Assessment, attachments: Mapping[str, bytes], as_of: date
) -> bytes:
    title = f"Total skin electron program, {assessment.program}"
    described = {name: (content, "Made from this") for name, content in attachments.items()}
    parts = [f"{layout.title}, page {number + 1}" for layout in layouts for number in range(layout.pages)]

    def manifest(drawn: Sequence[tuple[Drawn, int]]) -> bytes:
        marked = [(part, page, fields) for part, (page, fields) in zip(parts, drawn, strict=True)]
        return manifest_bytes(assessment, attachments, marked, press.made_by())

    return press.write(layouts, title, assessment.program, as_of, described, (MANIFEST, manifest))


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
) -> press.Layout:
    """Return the contents with literal page numbers, laid out again if they need another page themselves."""
    places = frozenset(
        {sheet.anchor for sheet, _ in front} | {anchor(document.number) for document in rendered}
    )
    own_pages = 1
    while True:
        entries = _entries(assessment, rendered, cover.pages + own_pages + 1, front, layouts)
        html = resolved(contents_sheet(assessment, entries).html, lambda name: _target(name, places))
        laid_out = press.lay_out(page("Contents", html), [style(assessment)], "Contents")
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
