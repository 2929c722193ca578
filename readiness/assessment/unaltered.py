"""
Whether a binder is as it was written: its list of contents against what is found in it.

Pure comparison; who opened the file and how is of no concern here. It finds accident and careless edits.
Somebody who changes a page and writes the list anew leaves no trace in it: against that only making the
binder again from its inputs helps, and against changed inputs only a certificate signature.
"""

from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass
from difflib import SequenceMatcher

from readiness.assessment.records import Versions

_MOST_ALIGNED = 2000  # pages; more are compared one by one


@dataclass(frozen=True)
class FileMark:
    """One attached file by its hash and size."""

    name: str
    sha256: str
    size: int


@dataclass(frozen=True)
class PageMark:
    """
    One page.

    Attributes:
        part: The document it belongs to, and which page of it: "3.1 Room set-up, page 2".
        words: SHA-256 of its words, without spaces.
        drawing: SHA-256 of its drawing instructions.
        fields: Number of form fields on it.
    """

    part: str
    words: str
    drawing: str
    fields: int = 0


@dataclass(frozen=True)
class Manifest:
    """What a binder held when it was written; names are those of manifest.json."""

    program: str
    as_of: str
    versions: Versions
    press: str
    assessment_sha256: str
    attachments: tuple[FileMark, ...]
    pages: tuple[PageMark, ...]


@dataclass(frozen=True)
class Held:
    """What is found in a binder now; ``doubled`` are names that stand twice among the attachments."""

    attachments: tuple[FileMark, ...]
    pages: tuple[PageMark, ...]
    doubled: tuple[str, ...] = ()


@dataclass(frozen=True)
class Alteration:
    """
    One thing that is not as it was written.

    Attributes:
        what: attachment, page or drawing.
        name: Name of the attachment, or number of the page ("12").
        words: One sentence.
    """

    what: str
    name: str
    words: str


@dataclass(frozen=True)
class Integrity:
    """Every alteration, and whether all pages were drawn anew, so that only their words can be compared."""

    alterations: tuple[Alteration, ...]
    drawn_anew: bool

    @property
    def holds(self) -> bool:
        """Return whether nothing was found altered."""
        return not self.alterations


def integrity(written: Manifest, found: Held) -> Integrity:
    """Return how what is found in a binder stands to the list that was written with it."""
    pages, same = _pages(written.pages, found.pages)
    redrawn = [(number, was.part) for number, was, now in same if was.drawing != now.drawing]
    drawn_anew = bool(redrawn) and len(redrawn) == len(same)
    drawings = () if drawn_anew else (_redrawn(number, part) for number, part in redrawn)
    return Integrity((*_attachments(written, found), *pages, *drawings), drawn_anew)


def _attachments(written: Manifest, found: Held) -> Iterator[Alteration]:
    was = {mark.name: mark for mark in written.attachments}
    now = {mark.name: mark for mark in found.attachments}
    for name in found.doubled:
        yield Alteration("attachment", name, f"The attachment {name} is there twice.")
    swapped = _swapped(was, now)
    for name in sorted({*was, *now}):
        before, after = was.get(name), now.get(name)
        if before is None:
            yield Alteration("attachment", name, f"The attachment {name} was added after writing.")
        elif after is None:
            yield Alteration("attachment", name, f"The attachment {name} is missing.")
        elif before.sha256 != after.sha256:
            yield Alteration("attachment", name, _changed(name, before, after, swapped.get(name, "")))


def _swapped(was: Mapping[str, FileMark], now: Mapping[str, FileMark]) -> dict[str, str]:
    """Return name -> name of the other attachment whose content stands under it now."""
    by_hash = {mark.sha256: mark.name for mark in was.values()}
    return {
        name: by_hash[mark.sha256]
        for name, mark in now.items()
        if mark.sha256 in by_hash and name in was and was[name].sha256 != mark.sha256
    }


def _changed(name: str, before: FileMark, after: FileMark, other: str) -> str:
    if other:
        return f"The attachment {name} holds the content of {other}."
    if before.size == after.size:
        return f"The attachment {name} was changed; its size is still {after.size:,} bytes."
    return f"The attachment {name} was changed; it had {before.size:,} bytes and has {after.size:,} now."


_Same = list[tuple[int, PageMark, PageMark]]  # page number now, as written, as found


def _pages(was: Sequence[PageMark], now: Sequence[PageMark]) -> tuple[list[Alteration], _Same]:
    """Return what became of the pages, and those whose words are as they were."""
    said: list[Alteration] = []
    same: _Same = []
    if len(was) != len(now):
        words = f"It has {len(now)} pages; {len(was)} were written."
        said.append(Alteration("page", "", words))
    for kind, first, last, start, end in _blocks(was, now):
        if kind == "equal":
            for before, after in zip(range(first, last), range(start, end), strict=True):
                same.append((after + 1, was[before], now[after]))
            continue
        paired = min(last - first, end - start)
        for step in range(paired):
            words = f"Page {start + step + 1} ({was[first + step].part}) has other words than were written."
            said.append(Alteration("page", str(start + step + 1), words))
        for gone in range(first + paired, last):
            words = f"The page {was[gone].part}, once number {gone + 1}, is missing."
            said.append(Alteration("page", str(gone + 1), words))
        for extra in range(start + paired, end):
            words = f"Page {extra + 1} was added after writing."
            said.append(Alteration("page", str(extra + 1), words))
    said += _lost_fields(same)
    return said, same


def _blocks(was: Sequence[PageMark], now: Sequence[PageMark]) -> list[tuple[str, int, int, int, int]]:
    if max(len(was), len(now)) > _MOST_ALIGNED:
        short = min(len(was), len(now))
        each = [
            ("equal" if was[i].words == now[i].words else "replace", i, i + 1, i, i + 1) for i in range(short)
        ]
        return [*each, ("replace", short, len(was), short, len(now))]
    matcher = SequenceMatcher(None, [p.words for p in was], [p.words for p in now], autojunk=False)
    return list(matcher.get_opcodes())


def _lost_fields(same: _Same) -> Iterator[Alteration]:
    for number, before, after in same:
        if after.fields < before.fields:
            words = (
                f"Page {number} ({before.part}) has {after.fields} form fields; {before.fields} were written."
            )
            yield Alteration("page", str(number), words)


def _redrawn(number: int, part: str) -> Alteration:
    words = f"Page {number} ({part}) has the same words but is drawn otherwise."
    return Alteration("drawing", str(number), words)
