"""
What each controlled document says of itself: the front matter of templates/documents, without Jinja.

Rules point at documents by number, the department's own wording at a document's number and part, so
both must be known before anything is rendered.
"""

import re
from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache
from pathlib import Path
from typing import Any

import yaml

from readiness.errors import CatalogueError
from readiness.resources import template_file

PARTS = ("Program", "Clinical", "Treatment", "Physics", "Quality", "Forms")
KINDS = ("policy", "procedure", "record", "form", "plan")
TECHNIQUES = ("six-position", "rotating-platform", "moving-couch")
_REQUIRED = ("number", "title", "part", "kind", "owner", "approvers", "purpose")
_NUMBER = re.compile(r"[1-9][0-9]*\.[1-9][0-9]*")
_FRONT_MATTER = re.compile(r"\A---\n(.*?)\n---\n(.*)\Z", re.DOTALL)
_HEADING = re.compile(r"^## +(.+?)(?: *\{([a-z -]+)\})? *$", re.MULTILINE)  # "## Tilt {six-position}"
_Loader = getattr(yaml, "CSafeLoader", yaml.SafeLoader)


@dataclass(frozen=True)
class DocumentHead:
    """
    One document before it is rendered.

    Attributes:
        number: Plain number, "3.2"; its first figure is the place of its part in PARTS.
        part: Part of the binder.
        kind: One of KINDS.
        purpose: One sentence, for the contents and for readers in a hurry.
        shown_when: Techniques for which the document is shown; empty for all.
        sections: Keys of its parts, in order; the department's own wording names one of them.
        file: Name of its template.
    """

    number: str
    title: str
    part: str
    kind: str
    owner: str
    approvers: tuple[str, ...]
    purpose: str
    shown_when: tuple[str, ...]
    sections: tuple[str, ...]
    file: str

    def shown_for(self, technique: str) -> bool:
        """Return whether the document belongs to a technique; without a technique everything is shown."""
        return not technique or not self.shown_when or technique in self.shown_when


@dataclass(frozen=True)
class Section:
    """One part of a document: key, heading, template text, and the techniques for which it is shown."""

    key: str
    heading: str
    text: str
    shown_when: tuple[str, ...] = ()


@cache
def document_heads() -> tuple[DocumentHead, ...]:
    """Return the head of every document that ships with the tool, by number."""
    return read_heads(template_file("documents").glob("*.md.j2"))


@cache
def document_numbers() -> frozenset[str]:
    """Return the number of every document that ships with the tool."""
    return frozenset(head.number for head in document_heads())


def read_heads(files: Iterable[Path]) -> tuple[DocumentHead, ...]:
    """Return the heads of some templates by number; raise CatalogueError at a double or incomplete one."""
    heads = [_head(path) for path in sorted(files)]
    numbers = [head.number for head in heads]
    for number in numbers:
        if numbers.count(number) > 1:
            raise CatalogueError(f"document {number} stands twice")
    return tuple(sorted(heads, key=lambda head: number_order(head.number)))


def number_order(number: str) -> tuple[int, ...]:
    """Return a document number as what it sorts by: 6.2 before 6.10."""
    return tuple(int(part) for part in number.split("."))


def split(path: Path) -> tuple[dict[str, Any], tuple[Section, ...]]:
    """Return the front matter of a template and its parts."""
    matched = _FRONT_MATTER.match(path.read_text(encoding="utf-8"))
    if matched is None:
        raise CatalogueError(f"{path.name}: the front matter is missing")
    front = yaml.load(matched[1], Loader=_Loader)  # noqa: S506 - a safe loader either way
    if not isinstance(front, dict):
        raise CatalogueError(f"{path.name}: the front matter is not a mapping")
    pieces = _HEADING.split(matched[2])
    if pieces[0].strip():
        raise CatalogueError(f"{path.name}: text stands before the first heading")
    each = zip(pieces[1::3], pieces[2::3], pieces[3::3], strict=True)
    return front, tuple(
        Section(section_key(heading), heading, text.strip(), tuple((techniques or "").split()))
        for heading, techniques, text in each
    )


def section_key(heading: str) -> str:
    """Return the key of a heading: "Sweep of the room" -> "sweep-of-the-room"."""
    return re.sub(r"[^a-z0-9]+", "-", heading.lower()).strip("-")


def _head(path: Path) -> DocumentHead:
    front, sections = split(path)
    _check(path.name, front, sections)
    return DocumentHead(
        number=front["number"],
        title=front["title"],
        part=front["part"],
        kind=front["kind"],
        owner=front["owner"],
        approvers=tuple(front["approvers"]),
        purpose=front["purpose"],
        shown_when=tuple(front.get("shown_when", ())),
        sections=tuple(section.key for section in sections),
        file=path.name,
    )


def _check(name: str, front: dict[str, Any], sections: tuple[Section, ...]) -> None:
    wrong = sorted({*_REQUIRED} - front.keys()) or sorted(front.keys() - {*_REQUIRED, "shown_when"})
    if wrong:
        raise CatalogueError(f"{name}: missing or unknown in the front matter: {', '.join(wrong)}")
    for key in set(_REQUIRED) - {"approvers"}:
        if not isinstance(front[key], str) or not front[key].strip():
            raise CatalogueError(f"{name}: {key} is not text")
    if not _NUMBER.fullmatch(front["number"]):
        raise CatalogueError(f"{name}: {front['number']!r} is not a document number such as 3.2")
    if front["part"] not in PARTS or not front["number"].startswith(f"{PARTS.index(front['part']) + 1}."):
        raise CatalogueError(f"{name}: part {front['part']!r} does not fit number {front['number']}")
    if front["kind"] not in KINDS:
        raise CatalogueError(f"{name}: kind {front['kind']!r} is none of {', '.join(KINDS)}")
    if not front["approvers"] or not all(isinstance(each, str) for each in front["approvers"]):
        raise CatalogueError(f"{name}: nobody approves it")
    shown_when = {
        *front.get("shown_when", ()),
        *(each for section in sections for each in section.shown_when),
    }
    if not shown_when <= set(TECHNIQUES):
        raise CatalogueError(f"{name}: an unknown technique is named")
    keys = [section.key for section in sections]
    if not keys or len(keys) != len(set(keys)):
        raise CatalogueError(f"{name}: no part, or a part stands twice")
