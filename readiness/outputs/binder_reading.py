"""Opens a binder again; a file that is damaged, locked or not ours is refused in one sentence."""

from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path

from readiness.assessment.records import Assessment
from readiness.errors import UsageError
from readiness.outputs.contract import from_json

ASSESSMENT = "assessment.json"
INPUTS = "program/"


@dataclass(frozen=True)
class OpenedBinder:
    """What a binder holds: attached files, the text of each page, filled form fields, signatures."""

    attachments: Mapping[str, bytes]
    pages: tuple[str, ...]
    filled: tuple[str, ...]
    signatures: int

    @property
    def assessment(self) -> Assessment:
        """Return the attached assessment; raise UsageError if it is not one of ours."""
        return from_json(self.attachments[ASSESSMENT].decode("utf-8", errors="replace"))

    @property
    def inputs(self) -> dict[str, bytes]:
        """Return the program's files as they were put in."""
        found = self.attachments.items()
        return {name.removeprefix(INPUTS): content for name, content in found if name.startswith(INPUTS)}


def open_binder(path: Path, *, with_pages: bool = True) -> OpenedBinder:
    """
    Return what a binder holds.

    Raises:
        UsageError: If the file cannot be read, is locked, or carries no assessment of ours.
    """
    from pypdf import PdfReader
    from pypdf.errors import PyPdfError

    try:
        reader = PdfReader(path)
        if reader.is_encrypted:
            raise UsageError(f"{path} is locked with a password; unlock a copy first")
        attached = {name: contents[-1] for name, contents in reader.attachments.items()}
        pages = tuple(_words(page.extract_text()) for page in reader.pages) if with_pages else ()
        fields = reader.get_fields() or {}
    except (PyPdfError, ValueError, KeyError, IndexError, TypeError, AttributeError, RecursionError) as error:
        raise UsageError(f"{path} cannot be read as a PDF: {error}") from error
    if ASSESSMENT not in attached:
        raise UsageError(f"{path} carries no {ASSESSMENT}; it is not a binder written by this tool")
    filled = tuple(
        sorted(name for name, field in fields.items() if field.get("/V") not in (None, "", "/Off"))
    )
    signatures = sum(1 for field in fields.values() if field.get("/FT") == "/Sig" and field.get("/V"))
    return OpenedBinder(attached, pages, filled, signatures)


def _words(text: str) -> str:
    return " ".join(text.split())


def assessment_in(path: Path) -> Assessment:
    """Return the assessment attached to a binder; raise UsageError as open_binder."""
    return open_binder(path, with_pages=False).assessment
