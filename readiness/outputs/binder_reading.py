"""Takes the assessment out of a binder; a file that is damaged, locked or not ours is refused."""

from pathlib import Path

from readiness.assessment.records import Assessment
from readiness.errors import UsageError
from readiness.outputs.contract import from_json

ASSESSMENT = "assessment.json"


def assessment_in(path: Path) -> Assessment:
    """
    Return the assessment attached to a binder.

    Raises:
        UsageError: If the file cannot be read, is locked, or carries no assessment of ours.
    """
    from pypdf import PdfReader
    from pypdf.errors import PyPdfError

    try:
        with path.open("rb") as stream:
            reader = PdfReader(stream)
            if reader.is_encrypted:
                raise UsageError(f"{path} is locked with a password; unlock a copy first")
            attached = reader.attachments
            content = attached[ASSESSMENT][0] if ASSESSMENT in attached else None
    except (PyPdfError, ValueError, KeyError, IndexError, TypeError, AttributeError, RecursionError) as error:
        raise UsageError(f"{path} cannot be read as a PDF: {error}") from error
    if content is None:
        raise UsageError(f"{path} carries no {ASSESSMENT}; it is not a binder written by this tool")
    return from_json(content.decode("utf-8", errors="replace"))
