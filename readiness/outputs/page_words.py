"""
The words on a page of a PDF, read from its drawing instructions: the same for a page that is being written
and for one that is read back, and quick enough to be done for every page of every binder.

Only what text operators show is read, in the order of drawing; spaces and line ends do not count, because
whoever saves a file again may set them anew.
"""

import hashlib
import re
import unicodedata
from collections.abc import Mapping
from dataclasses import dataclass, field

_DEEPEST = 8
_TOKEN = re.compile(
    rb"\((?P<literal>(?:[^()\\]|\\.|\((?:[^()\\]|\\.)*\))*)\)"
    rb"|<(?P<hexadecimal>[0-9A-Fa-f\s]*)>"
    rb"|/(?P<font>[^\s/<>\[\]()]+)\s+[-+.0-9]+\s+Tf\b"
    rb"|/(?P<drawn>[^\s/<>\[\]()]+)\s+Do\b",
    re.DOTALL,
)
_PAIR = re.compile(rb"<([0-9A-Fa-f]+)>\s*<([0-9A-Fa-f]+)>")
_RANGE = re.compile(rb"<([0-9A-Fa-f]+)>\s*<([0-9A-Fa-f]+)>\s*<([0-9A-Fa-f]+)>")
_RANGES = re.compile(rb"beginbfrange(.*?)endbfrange", re.DOTALL)
_PAIRS = re.compile(rb"beginbfchar(.*?)endbfchar", re.DOTALL)
_ESCAPED = re.compile(rb"\\([0-7]{1,3}|\r\n|.)", re.DOTALL)
_LETTERS = {
    b"n": b"\n",
    b"r": b"\r",
    b"t": b"\t",
    b"b": b"\b",
    b"f": b"\f",
    b"\n": b"",
    b"\r\n": b"",
    b"\r": b"",
}
_LONGEST_RANGE = 65536


@dataclass(frozen=True)
class Drawn:
    """
    What a page, or a drawing on it, is made of.

    Attributes:
        content: Its drawing instructions.
        fonts: Name -> table from glyphs to characters, as PDF writes it.
        parts: Name -> a drawing or picture that the instructions put on the page.
    """

    content: bytes
    fonts: Mapping[str, bytes] = field(default_factory=dict)
    parts: Mapping[str, "Drawn"] = field(default_factory=dict)


def words_hash(words: str) -> str:
    """Return the SHA-256 of words without spaces, ligatures taken apart."""
    plain = "".join(unicodedata.normalize("NFKC", words).replace("\u00ad", "").split())
    return hashlib.sha256(plain.encode("utf-8", errors="replace")).hexdigest()


def drawing_hash(page: Drawn, depth: int = 0) -> str:
    """Return the SHA-256 of the drawing instructions of a page and of every drawing that they use."""
    digest = hashlib.sha256(page.content)
    for name in dict.fromkeys(found["drawn"] for found in _TOKEN.finditer(page.content) if found["drawn"]):
        part = page.parts.get(name.decode("latin-1"))
        if part is not None and depth < _DEEPEST:
            digest.update(drawing_hash(part, depth + 1).encode())
    return digest.hexdigest()


class PageWords:
    """Reads words from pages; each font's table is read once."""

    def __init__(self) -> None:
        """Begin with no font known."""
        self._tables: dict[bytes, dict[bytes, str]] = {}

    def of(self, page: Drawn, depth: int = 0) -> str:
        """Return the words of a page in the order in which they are drawn."""
        shown: list[str] = []
        table: Mapping[bytes, str] = {}
        for token in _TOKEN.finditer(page.content):
            if token["font"] is not None:
                table = self._table(page.fonts.get(token["font"].decode("latin-1"), b""))
            elif token["hexadecimal"] is not None:
                shown.append(_read(_bytes(token["hexadecimal"]), table))
            elif token["literal"] is not None:
                shown.append(_read(_unescaped(token["literal"]), table))
            else:
                part = page.parts.get(token["drawn"].decode("latin-1"))
                if part is not None and depth < _DEEPEST:
                    shown.append(self.of(part, depth + 1))
        return "".join(shown)

    def _table(self, cmap: bytes) -> Mapping[bytes, str]:
        if cmap not in self._tables:
            self._tables[cmap] = _glyphs(cmap)
        return self._tables[cmap]


def _glyphs(cmap: bytes) -> dict[bytes, str]:
    """Return code -> characters from a ToUnicode table."""
    table: dict[bytes, str] = {}
    for block in _PAIRS.findall(cmap):
        table |= {_bytes(code): _characters(_bytes(shown)) for code, shown in _PAIR.findall(block)}
    for block in _RANGES.findall(cmap):
        for first, last, shown in _RANGE.findall(block):
            low, high, start = int(first, 16), int(last, 16), int(shown, 16)
            for step in range(min(high - low + 1, _LONGEST_RANGE)):
                code = (low + step).to_bytes(len(_bytes(first)), "big")
                table[code] = _characters((start + step).to_bytes(len(_bytes(shown)), "big"))
    return table


def _read(codes: bytes, table: Mapping[bytes, str]) -> str:
    if not table:
        return codes.decode("latin-1")
    wide = len(next(iter(table)))
    return "".join(table.get(codes[at : at + wide], "\ufffd") for at in range(0, len(codes), wide))


def _bytes(hexadecimal: bytes) -> bytes:
    digits = b"".join(hexadecimal.split())
    return bytes.fromhex((digits + b"0" * (len(digits) % 2)).decode("ascii"))


def _characters(code: bytes) -> str:
    return code.decode("utf-16-be", errors="replace")


def _unescaped(literal: bytes) -> bytes:
    def put(found: re.Match[bytes]) -> bytes:
        code = found[1]
        return (
            bytes([int(code, 8) & 255])
            if code[:1].isdigit() and code[:1] < b"8"
            else _LETTERS.get(code, code)
        )

    return _ESCAPED.sub(put, literal)
