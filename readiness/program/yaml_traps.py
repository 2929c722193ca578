"""Texts that YAML reads without complaint, but other than the person who wrote them meant."""

import re
from typing import NamedTuple, Protocol

import yaml

from readiness.program.wording import character_name, shown

WIDE_SPACES = (
    "\u00a0\u1680\u2000\u2001\u2002\u2003\u2004\u2005\u2006\u2007\u2008\u2009\u200a\u202f\u205f\u3000"
)
_KEY_WITHOUT_SPACE = re.compile(r"\s*(?:- +)*([A-Za-z_][\w-]*):([^\s:/].*)")
_BEGINS_LINE = re.compile(r"[ -]*")
_CUT = re.compile(r"([ \t]+)#(?=[^\s#=*~-]|[ \t]?[0-9]+[a-zA-Z]?\s*$)")

Trap = tuple[int, int, str, str]  # line and column from 0, message, kind


class _Mark(Protocol):
    line: int
    column: int


def position(mark: _Mark | None) -> tuple[int, int]:
    """Return line and column, from 0, of a mark of the library."""
    return (0, 0) if mark is None else (mark.line, mark.column)


class Written(NamedTuple):
    """One entry as it stands in the file: its text, its quotes, where it begins and ends (from 0)."""

    text: str
    style: str
    begun: tuple[int, int]
    ended: tuple[int, int]

    @classmethod
    def of(cls, event: yaml.ScalarEvent) -> "Written":
        """Return the entry behind an event of the library."""
        return cls(event.value, event.style or "", position(event.start_mark), position(event.end_mark))


def traps(lines: list[str], entry: Written) -> Trap | None:
    """Return what is doubtful about an unquoted entry, or None."""
    return (
        _cut_by_comment(lines, entry)
        or _swallowed_line(lines, entry)
        or _space_missing(lines, entry)
        or _odd_space(entry)
    )


def missing_space(line: str) -> str:
    """Return what to write if a line looks like a name and a value with no space between, else nothing."""
    match = _KEY_WITHOUT_SPACE.fullmatch(line)
    if not match:
        return ""
    return f'a space is missing after the colon; write "{match[1]}: {shown(match[2])[1:-1]}"'


def _cut_by_comment(lines: list[str], entry: Written) -> Trap | None:
    """
    Return the trap if a comment seems to cut the text.

    A comment after an entry is welcome when a space follows its sign; "#2", "#fff" or "# 2" alone look like
    text that was meant to be kept.
    """
    line, column = entry.ended
    match = _CUT.match(lines[line], column) if line < len(lines) else None
    if not match:
        return None
    cut = lines[line][match.end() - 1 :].rstrip()
    whole = entry.text + match[1] + cut if entry.text else cut
    message = (
        f'{shown(cut)} is taken for a comment: put the whole text in quotes, "{shown(whole)[1:-1]}",'
        ' if it belongs to it, or a space and words after "#" if it does not'
    )
    return line, column + len(match[1]), message, "comment"


def _swallowed_line(lines: list[str], entry: Written) -> Trap | None:
    """Return the trap if a text that goes on in further lines has taken in what looks like an entry."""
    for number in range(entry.begun[0] + 1, min(entry.ended[0] + 1, len(lines))):
        text = lines[number].lstrip(" ")
        indent = len(lines[number]) - len(text)
        if text.startswith("- "):
            message = (
                "this list entry is read as more of the text above it; begin it under a name with no value"
            )
            return number, indent, message, "syntax"
        if slip := missing_space(lines[number]):
            return number, indent, slip, "syntax"
    return None


def _space_missing(lines: list[str], entry: Written) -> Trap | None:
    line, column = entry.begun
    if ":" not in entry.text or not _BEGINS_LINE.fullmatch(lines[line], 0, column):
        return None
    slip = missing_space(lines[line])
    return (line, column, slip + ", or put it in quotes", "syntax") if slip else None


def _odd_space(entry: Written) -> Trap | None:
    text = entry.text
    if text.strip(WIDE_SPACES) == text:
        return None
    odd = text[0] if text[0] in WIDE_SPACES else text[-1]
    message = f"a space before or after this text is not an ordinary one ({character_name(odd)}); delete it"
    return *entry.begun, message, "character"
