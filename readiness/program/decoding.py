"""
Bytes of a file become characters, or it is said which encoding was probably used.

Characters that cannot be seen or that turn the reading direction are refused: what a person reads in the
file must be what the program reads. They are replaced by spaces, so that the rest of the file is read too.
"""

import codecs
import re

from readiness.errors import Place, Problem
from readiness.program.wording import character_name

MOST_PROBLEMS = 50  # told of one file; the rest is usually the same slip again

_LINE_END = re.compile(r"\r\n|\n|\r")
_BINARY = (
    (b"PK\x03\x04", "a workbook or another zip archive"),
    (b"\xd0\xcf\x11\xe0", "an old workbook or word-processor file"),
    (b"%PDF", "a PDF"),
    (b"\x89PNG", "a picture"),
    (b"\xff\xd8\xff", "a picture"),
    (b"\x1f\x8b", "a compressed file"),
)
_WIDE = (
    (codecs.BOM_UTF32_LE, "utf-32-le", "UTF-32"),
    (codecs.BOM_UTF32_BE, "utf-32-be", "UTF-32"),
    (codecs.BOM_UTF16_LE, "utf-16-le", "UTF-16"),
    (codecs.BOM_UTF16_BE, "utf-16-be", "UTF-16"),
)
_TURNING = "\u061c\u200e\u200f\u202a-\u202e\u2066-\u2069"
_UNSEEN = "\u00ad\u180e\u200b\u2060-\u2065\u206a-\u206f\ufeff\ufff9-\ufffb\U000e0000-\U000e007f"
_CONTROL = "\x00-\x08\x0b\x0c\x0e-\x1f\x7f-\x9f\u2028\u2029\ufffe\uffff"
_REFUSED = re.compile(f"[{_CONTROL}{_TURNING}{_UNSEEN}\ufffd\ud800-\udfff]")
_IS_TURNING = re.compile(f"[{_TURNING}]")
_IS_CONTROL = re.compile(f"[{_CONTROL}]")
_SAVE = "save it as UTF-8"


def decode(name: str, content: bytes) -> tuple[str | None, list[Problem]]:
    """
    Return the text of a file, without its byte-order mark, and what is wrong with its characters.

    Text beside problems is only fit for finding further problems; None means that nothing can be read.
    """
    for start, kind in _BINARY:
        if content.startswith(start):
            return None, [Problem(Place(name), f"the file is {kind}, not text", "encoding")]
    text, problems = _characters(name, content)
    return _without_refused(name, text, problems)


def lines_of(text: str) -> list[str]:
    """Return the lines of a text without their ends, whatever system wrote them."""
    return _LINE_END.split(text)


def place_of(name: str, text: str, index: int) -> Place:
    """Return line and column of a character."""
    before = lines_of(text[:index])
    return Place(name, len(before), len(before[-1]) + 1)


def first_problems(problems: list[Problem]) -> list[Problem]:
    """Return the problems of one file in order of place, the many after the first fifty as one."""
    ordered = sorted(problems)
    if len(ordered) <= MOST_PROBLEMS:
        return ordered
    rest = (
        f"{len(ordered) - MOST_PROBLEMS} more problems in this file from here on; mend the first ones first"
    )
    return [*ordered[:MOST_PROBLEMS], Problem(ordered[MOST_PROBLEMS].place, rest, "more")]


def refused_characters(text: str) -> list[str]:
    """Return each character of a text that is refused, once, in the order in which they stand."""
    if text.isascii() and text.isprintable():
        return []
    return list(dict.fromkeys(_REFUSED.findall(text)))


def refusal(character: str) -> str:
    """Return why a character is refused and what to do."""
    called = character_name(character)
    if character == "\ufffd":
        return f"a character was lost when the file was converted ({called}); write it again"
    if character == "\ufeff":
        return f"a byte-order mark ({called}) stands inside the file; delete it"
    if _IS_TURNING.match(character):
        return f"the character {called} turns the reading direction and hides what is written; delete it"
    if _IS_CONTROL.match(character):
        return f"the control character {called} cannot be part of a text; delete it"
    return f"the character {called} cannot be seen; delete it"


def _characters(name: str, content: bytes) -> tuple[str, list[Problem]]:
    for mark, codec, spoken in _WIDE:
        if content.startswith(mark):
            text = content[len(mark) :].decode(codec, errors="replace").replace("\ufffd", " ")
            return text, [Problem(Place(name), f"the file is written in {spoken}; {_SAVE}", "encoding")]
    zeros = content[:400].count(0)
    if zeros > 2 and zeros * 3 >= len(content[:400]):
        codec = "utf-16-le" if content[1:2] == b"\0" else "utf-16-be"
        text = content.decode(codec, errors="replace").replace("\ufffd", " ")
        return text, [Problem(Place(name), f"the file is probably written in UTF-16; {_SAVE}", "encoding")]
    body = content.removeprefix(codecs.BOM_UTF8)
    try:
        return body.decode("utf-8"), []
    except UnicodeDecodeError as error:
        return _not_utf8(name, body, error.start)


def _not_utf8(name: str, body: bytes, start: int) -> tuple[str, list[Problem]]:
    place = place_of(name, body[:start].decode("utf-8", errors="replace"), start)
    if re.match(rb"\xed[\xa0-\xbf]", body[start:]):
        message = "half of a character stands here (a lone surrogate); delete it and write it again"
        text = body.decode("utf-8", errors="replace").replace("\ufffd", " ")
        return text, [Problem(place, message, "encoding")]
    western = body.decode("cp1252", errors="replace")
    high = [character for character in western if ord(character) > 126]
    likely = sum(character.isalpha() or character in "°²³µ±·×½¼–—‘’“”…€§" for character in high)
    read_as = bytes([body[start]]).decode("cp1252", errors="replace")
    if read_as != "\ufffd" and likely >= 0.9 * len(high):
        message = f'the file is not UTF-8 but probably Windows-1252 or Latin-1 (here "{read_as}"); {_SAVE}'
    else:
        message = f"the file is not UTF-8 (byte {body[start]:02X} here); {_SAVE}"
    return western.replace("\ufffd", " "), [Problem(place, message, "encoding")]


def _without_refused(name: str, text: str, problems: list[Problem]) -> tuple[str, list[Problem]]:
    counts: dict[str, int] = {}
    first: dict[str, int] = {}
    for match in _REFUSED.finditer(text):
        counts[match[0]] = counts.get(match[0], 0) + 1
        first.setdefault(match[0], match.start())
    for character, index in first.items():
        more = f" ({counts[character]} times in this file)" if counts[character] > 1 else ""
        place = place_of(name, text, index)
        problems.append(Problem(place, refusal(character) + more, "character"))
    return (_REFUSED.sub(" ", text) if first else text), problems
