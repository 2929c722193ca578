"""
Lays out HTML and writes PDF: the only module that imports WeasyPrint.

Each document is laid out by itself, so that it counts its own pages; layouts are joined page by page,
which keeps tags, outline, form fields and links from one document to another.
"""

import copy
import gc
import hashlib
import logging
import re
from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from contextlib import contextmanager
from dataclasses import dataclass
from datetime import date, datetime, timezone
from functools import cache
from typing import Any

from readiness.outputs import fonts
from readiness.outputs.page_words import Drawn
from readiness.outputs.printed_pages import printed_pages

PACKAGES = "libpango-1.0-0 libpangoft2-1.0-0 libharfbuzz-subset0"
_LOGGER = "weasyprint"
Seal = tuple[str, Callable[[Sequence[tuple[Drawn, int]]], bytes]]  # attachment, its content from all pages
# A space before inline markup is given its own box: WeasyPrint 70 breaks a line after its first word when
# only such a space does not fit.
_SPACE_BEFORE_MARKUP = re.compile(r"(?<=[^\s>]) (?=<(?:a|b|em|i|span|strong)\b)")


class PressMissing(Exception):  # noqa: N818 - what is missing is no error of the program
    """PDFs cannot be written on this machine; the text says what to install."""


class PressError(Exception):
    """A page could not be printed as it was written; our own defect."""


@dataclass(frozen=True)
class Layout:
    """One document as pages; the pages belong to WeasyPrint."""

    title: str
    document: Any

    @property
    def pages(self) -> int:
        """Return how many pages it has."""
        return len(self.document.pages)

    @property
    def anchors(self) -> frozenset[str]:
        """Return the places in it that a link can lead to."""
        return frozenset(anchor for page in self.document.pages for anchor in page.anchors)


@cache
def _weasyprint() -> Any:
    """Return WeasyPrint, imported once and after the fonts are settled."""
    fonts.use_only_ours()
    try:
        import weasyprint
        import weasyprint.urls
    except OSError as error:
        raise PressMissing(
            f"PDFs cannot be written: the Pango libraries are missing; on Debian install {PACKAGES}"
        ) from error
    return weasyprint


def made_by() -> str:
    """Return what lays out and writes, with versions: with others, lines may break elsewhere."""
    from weasyprint.text.ffi import pango

    number = int(pango.pango_version())
    shown = f"{number // 10000}.{number // 100 % 100}.{number % 100}"
    return f"WeasyPrint {_weasyprint().__version__}, Pango {shown}"


def ready() -> None:
    """Raise PressMissing if PDFs cannot be written here."""
    _weasyprint()


@cache
def _fetcher() -> Any:
    class DataOnly(_weasyprint().urls.URLFetcher):  # type: ignore[misc]
        """Fetches nothing but what stands inside the page itself."""

        def __init__(self) -> None:
            super().__init__(allowed_protocols={"data"}, fail_on_errors=True, allow_redirects=False)

    return DataOnly()


@cache
def _sheet(style: str) -> Any:
    """Return a style sheet, read once for all documents."""
    return _weasyprint().CSS(string=style, url_fetcher=_fetcher())


def lay_out(html: str, styles: Iterable[str], title: str) -> Layout:
    """Return one document laid out on its own pages; raise PressError at anything it cannot print."""
    press = _weasyprint()
    fetcher = _fetcher()
    with _no_errors(title):
        sheets = [_sheet(style) for style in styles]
        spaced = _SPACE_BEFORE_MARKUP.sub("<span> </span>", html)
        page = press.HTML(string=spaced, url_fetcher=fetcher, base_url=None)
        document = page.render(stylesheets=sheets, pdf_forms=True, pdf_variant="pdf/ua-1")
    return Layout(title, document)


def write(
    layouts: Sequence[Layout],
    title: str,
    author: str,
    day: date,
    attachments: Mapping[str, tuple[bytes, str]] | None = None,
    seal: Seal | None = None,
) -> bytes:
    """
    Return one PDF of all pages: tagged, with outline, fields and attachments, the same bytes every time.

    Args:
        layouts: Documents in their order; links between them lead to each other.
        title: Title of the PDF.
        author: Author of the PDF.
        day: The date in the file and of its attachments.
        attachments: Name -> content and description.
        seal: Name of one more attachment, and what makes its content from the finished pages.
    """
    press = _weasyprint()
    first = layouts[0].document
    with _no_errors(title):
        joined = first.copy(list(_linked(layouts)))
        joined.metadata = copy.copy(first.metadata)
        joined.metadata.title = title
        joined.metadata.authors = [author] if author else []
        joined.metadata.created = joined.metadata.modified = day.isoformat()
        given = dict(attachments or {}) | ({seal[0]: (b"", "What was written, by hash")} if seal else {})
        files = [_attachment(press, name, *each, day) for name, each in sorted(given.items())]

        def finish(document: Any, pdf: Any) -> None:
            _finish(document, pdf)
            if seal is not None:
                _put_in(pdf, seal[0], seal[1](printed_pages(pdf)))

        written: bytes = joined.write_pdf(
            pdf_variant="pdf/ua-1", pdf_forms=True, attachments=files, finisher=finish
        )
    return written


def _linked(layouts: Sequence[Layout]) -> Iterator[Any]:
    """Yield every page, without the links that lead to none of them."""
    anchors = frozenset[str]().union(*(layout.anchors for layout in layouts))
    for layout in layouts:
        for page in layout.document.pages:
            kept = []
            for link in page.links:
                kind, target, _, box = link
                if kind != "internal" or target in anchors:
                    kept.append(link)
                else:
                    box.link_annotation = None  # left from another file that was written from this layout
            shown = copy.copy(page)
            shown.links = kept
            yield shown


def _attachment(press: Any, name: str, content: bytes, description: str, day: date) -> Any:
    moment = datetime(day.year, day.month, day.day, tzinfo=timezone.utc)  # noqa: UP017 - reads better
    return press.Attachment(
        string=content, name=name, description=description, created=moment, modified=moment,
        relationship="Source", url_fetcher=_fetcher(),
    )  # fmt: skip


def _finish(document: Any, pdf: Any) -> None:
    """Say what each table heading stands over, and that the document was made from the attached files."""
    for page in document.pages:
        for box in page._page_box.descendants():
            cell = getattr(box, "mark", None)
            if cell is not None and box.element_tag == "th":
                cell["A"]["Scope"] = "/Row" if box.element.get("scope") == "row" else "/Column"
    _as_sources(pdf)


def _as_sources(pdf: Any) -> None:
    import pydyf  # type: ignore[import-untyped]

    dictionaries = (each for each in pdf.objects if isinstance(each, pydyf.Dictionary))
    files = [each for each in dictionaries if each.get("Type") == "/Filespec"]
    for each in files:
        each["AFRelationship"] = "/Source"
    if files:
        pdf.catalog["AF"] = pydyf.Array([each.reference for each in files])


def _put_in(pdf: Any, name: str, content: bytes) -> None:
    """Fill an attachment that was put in empty."""
    files = (each for each in pdf.objects if isinstance(each, dict) and each.get("Type") == "/Filespec")
    entry = next(each for each in files if each["UF"].string == name)
    stream = pdf.objects[int(entry["EF"]["F"].split()[0])]
    stream.stream = [content]
    checksum = hashlib.md5(content, usedforsecurity=False).hexdigest()
    stream.extra["Params"] |= {"Size": len(content), "CheckSum": f"<{checksum}>"}


@contextmanager
def undisturbed() -> Iterator[None]:
    """Lay out and write without looking for garbage in between: a quarter faster, a third more memory."""
    was_on = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if was_on:
            gc.enable()


class _Collected(logging.Handler):
    """Keeps the errors that WeasyPrint only writes to its log."""

    def __init__(self) -> None:
        super().__init__(logging.ERROR)
        self.records: list[logging.LogRecord] = []

    def emit(self, record: logging.LogRecord) -> None:
        self.records.append(record)


@contextmanager
def _no_errors(title: str) -> Iterator[None]:
    """Raise PressError after the work if WeasyPrint logged an error."""
    logger, collected = logging.getLogger(_LOGGER), _Collected()
    kept, logger.propagate = logger.propagate, False
    handlers, logger.handlers = logger.handlers, [collected]
    try:
        yield
    except _weasyprint().urls.FatalURLFetchingError as error:
        raise PressError(f"{title}: the page asks for something outside itself: {error}") from error
    finally:
        logger.handlers, logger.propagate = handlers, kept
    if collected.records:
        raise PressError(f"{title}: " + "; ".join(record.getMessage() for record in collected.records))
