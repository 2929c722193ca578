"""
Opens a binder again: attached files, pages by their hashes, filled fields, signatures, notes.

The only module that imports pypdf. A file that is damaged, locked or not ours is refused in one sentence:
whatever the reader of somebody else's PDF trips over, it is the file's fault and not a defect of this tool.
"""

import logging
from collections.abc import Callable, Iterator, Mapping
from contextlib import contextmanager, suppress
from dataclasses import dataclass
from pathlib import Path
from typing import Any, BinaryIO, TypeVar

from readiness.assessment.records import Assessment
from readiness.assessment.unaltered import FileMark, Held, Manifest, PageMark
from readiness.errors import UsageError
from readiness.outputs.binder_manifest import ASSESSMENT, MANIFEST, file_marks, read_manifest
from readiness.outputs.contract import from_json
from readiness.outputs.read_pages import added_notes, read_pages

INPUTS = "program/"
_Found = TypeVar("_Found")


@dataclass(frozen=True)
class OpenedBinder:
    """
    What a binder holds.

    Attributes:
        attachments: Name -> content of every attached file.
        doubled: Names that stand twice among them.
        pages: Every page by its hashes; empty if the pages were not read.
        filled: Names of the form fields that are filled in.
        signatures: One line for each signature that was added.
        notes: One line for each page to which a note or comment was added.
    """

    attachments: Mapping[str, bytes]
    doubled: tuple[str, ...] = ()
    pages: tuple[PageMark, ...] = ()
    filled: tuple[str, ...] = ()
    signatures: tuple[str, ...] = ()
    notes: tuple[str, ...] = ()

    @property
    def assessment(self) -> Assessment:
        """Return the attached assessment; raise UsageError if there is none of ours."""
        if ASSESSMENT not in self.attachments:
            raise UsageError(f"{ASSESSMENT} is missing")
        return from_json(self.attachments[ASSESSMENT].decode("utf-8", errors="replace"))

    @property
    def manifest(self) -> Manifest:
        """Return the attached list of contents; raise UsageError if there is none of ours."""
        if MANIFEST not in self.attachments:
            raise UsageError(f"{MANIFEST} is missing")
        return read_manifest(self.attachments[MANIFEST])

    @property
    def inputs(self) -> dict[str, bytes]:
        """Return the program's files as they were put in."""
        found = self.attachments.items()
        return {name.removeprefix(INPUTS): content for name, content in found if name.startswith(INPUTS)}

    @property
    def held(self) -> Held:
        """Return what is in it, to be compared with its list of contents."""
        others = {name: content for name, content in self.attachments.items() if name != MANIFEST}
        marks: tuple[FileMark, ...] = file_marks(others)
        return Held(marks, self.pages, self.doubled)


def open_binder(path: Path, *, with_pages: bool = True) -> OpenedBinder:
    """
    Return what a binder holds.

    Raises:
        UsageError: If the file cannot be read, is locked, or carries nothing of ours.
    """
    with path.open("rb") as stream:
        return read_binder(stream, str(path), with_pages=with_pages)


def read_binder(stream: BinaryIO, path: str, *, with_pages: bool = True) -> OpenedBinder:
    """Return what a binder holds that is open already; raise UsageError as open_binder."""
    from pypdf import PdfReader

    with _quiet():
        if stream.read(5) != b"%PDF-":
            raise UsageError(f"{path} is not a PDF, or its beginning is cut off")
        reader = _tried(path, lambda: PdfReader(stream))
        _unlock(path, reader)
        attached, doubled = _tried(path, lambda: _attachments(reader))
        if not {ASSESSMENT, MANIFEST} & attached.keys():
            raise UsageError(
                f"{path} carries neither {ASSESSMENT} nor {MANIFEST}: it is not a binder written by this "
                "tool, or what was attached to it is lost"
            )
        if not with_pages:
            return OpenedBinder(attached, doubled)
        found = OpenedBinder(attached, doubled)
        known: Mapping[str, str] = {}
        with suppress(UsageError):
            known = {mark.words: mark.part for mark in found.manifest.pages}
        pages = _tried(path, lambda: read_pages(reader, known))
        filled, signatures = _tried(path, lambda: _fields(reader))
        notes = _tried(path, lambda: added_notes(reader))
    return OpenedBinder(attached, doubled, pages, filled, signatures, notes)


def assessment_in(path: Path) -> Assessment:
    """Return the assessment attached to a binder; raise UsageError as open_binder."""
    try:
        return open_binder(path, with_pages=False).assessment
    except UsageError as error:
        raise UsageError(str(error) if str(path) in str(error) else f"{path}: {error}") from error


def _tried(path: str, read: Callable[[], _Found]) -> _Found:
    from pypdf.errors import DependencyError

    try:
        return read()
    except UsageError:
        raise
    except DependencyError as error:
        raise UsageError(
            f"{path} is encrypted in a way that cannot be opened here; save a copy without encryption "
            "and review that"
        ) from error
    except Exception as error:  # any: a broken PDF makes its reader fail in ways that nobody lists
        said = str(error).splitlines()[0][:120] if str(error) else type(error).__name__
        raise UsageError(f"{path} cannot be read as a PDF; it is damaged or cut off ({said})") from error


@contextmanager
def _quiet() -> Iterator[None]:
    """Keep what pypdf says of odd files to ourselves; what matters is said in our own words."""
    logger = logging.getLogger("pypdf")
    level = logger.level
    logger.setLevel(logging.CRITICAL + 1)
    try:
        yield
    finally:
        logger.setLevel(level)


def _unlock(path: str, reader: Any) -> None:
    """Open a file that is only protected against changes; refuse one that asks for a password."""
    if not _tried(path, lambda: reader.is_encrypted):
        return
    opened = False
    with suppress(Exception):  # an unknown cipher is as locked as an unknown password
        opened = bool(reader.decrypt(""))
    if not opened:
        raise UsageError(f"{path} is locked with a password; save a copy without it and review that")


def _attachments(reader: Any) -> tuple[dict[str, bytes], tuple[str, ...]]:
    found: dict[str, bytes] = {}
    doubled = []
    for entry in reader.attachment_list:
        name = str(entry.alternative_name or entry.name)
        if name in found:
            doubled.append(name)
        found[name] = entry.content
    return found, tuple(dict.fromkeys(doubled))


def _fields(reader: Any) -> tuple[tuple[str, ...], tuple[str, ...]]:
    fields = reader.get_fields() or {}
    empty = (None, "", "/Off")
    filled = sorted(
        name
        for name, each in fields.items()
        if each.get("/FT") not in (None, "/Sig") and each.get("/V") not in empty
    )
    signed = [each.get("/V") for each in fields.values() if each.get("/FT") == "/Sig" and each.get("/V")]
    return tuple(filled), tuple(_signed_words(each.get_object()) for each in signed)


def _signed_words(signature: Any) -> str:
    name, day = str(signature.get("/Name") or "").strip(), str(signature.get("/M") or "")
    when = f" on {day[2:6]}-{day[6:8]}-{day[8:10]}" if day.startswith("D:") and day[2:10].isdigit() else ""
    return f"signed by {name or 'somebody whose name is not given'}{when}"
