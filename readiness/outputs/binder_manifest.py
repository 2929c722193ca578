"""manifest.json inside a binder: what was written, by hash, so that a change afterwards can be seen."""

import hashlib
import json
from collections.abc import Mapping, Sequence
from typing import Any

from readiness.assessment.records import Assessment, Versions
from readiness.assessment.unaltered import FileMark, Manifest, PageMark
from readiness.errors import UsageError
from readiness.outputs.contract import plain
from readiness.outputs.page_words import Drawn, PageWords, drawing_hash, words_hash

MANIFEST = "manifest.json"
ASSESSMENT = "assessment.json"
FORMAT = "1"
_MEANING = (
    "SHA-256 of each attached file, of the words of each page (without spaces) and of its drawing "
    "instructions, as they were written. It shows accident and careless edits; only a certificate signature "
    "shows who made the file."
)


def manifest_bytes(
    assessment: Assessment,
    attachments: Mapping[str, bytes],
    pages: Sequence[tuple[str, Drawn, int]],
    press: str,
) -> bytes:
    """
    Return manifest.json of a binder that is being written.

    Args:
        assessment: What the binder shows.
        attachments: Every other file attached to it.
        pages: Part of the binder, what is drawn, and number of form fields, page by page.
        press: Name and version of what laid the pages out.
    """
    reader = PageWords()
    made = Manifest(
        program=assessment.program,
        as_of=assessment.as_of.isoformat(),
        versions=assessment.versions,
        press=press,
        assessment_sha256=hashlib.sha256(attachments.get(ASSESSMENT, b"")).hexdigest(),
        attachments=file_marks(attachments),
        pages=tuple(page_mark(part, drawn, fields, reader) for part, drawn, fields in pages),
    )
    data = {"written_by": "readiness", "format": FORMAT, "meaning": _MEANING, **plain(made)}
    return (json.dumps(data, ensure_ascii=False, indent=1) + "\n").encode("utf-8")


def page_mark(part: str, drawn: Drawn, fields: int, reader: PageWords) -> PageMark:
    """Return a page by its hashes."""
    return PageMark(part, words_hash(reader.of(drawn)), drawing_hash(drawn), fields)


def file_marks(files: Mapping[str, bytes]) -> tuple[FileMark, ...]:
    """Return files by hash and size, in order of name."""
    return tuple(
        FileMark(name, hashlib.sha256(content).hexdigest(), len(content))
        for name, content in sorted(files.items())
    )


def read_manifest(content: bytes) -> Manifest:
    """Return the manifest that a binder carries; raise UsageError if it is not one of ours."""
    try:
        data = json.loads(content)
        if data["written_by"] != "readiness" or data["format"] != FORMAT:
            raise UsageError(f"{MANIFEST} is of a kind that this version does not read")
        return Manifest(
            program=_text(data["program"]),
            as_of=_text(data["as_of"]),
            versions=Versions(*(_text(data["versions"][each]) for each in ("product", "rules", "contract"))),
            press=_text(data["press"]),
            assessment_sha256=_text(data["assessment_sha256"]),
            attachments=tuple(
                FileMark(_text(each["name"]), _text(each["sha256"]), int(each["size"]))
                for each in data["attachments"]
            ),
            pages=tuple(
                PageMark(
                    _text(each["part"]), _text(each["words"]), _text(each["drawing"]), int(each["fields"])
                )
                for each in data["pages"]
            ),
        )
    except (ValueError, KeyError, TypeError, AttributeError, RecursionError) as error:
        raise UsageError(f"{MANIFEST} is damaged") from error


def _text(value: Any) -> str:
    if not isinstance(value, str):
        raise TypeError("text was expected")
    return value
