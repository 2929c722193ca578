"""
What was printed before, kept in the user's cache folder: the same pages need not be laid out twice.

A kept file is known by everything that went into it: HTML, style, date, attachments, this tool's own code and
the versions of what prints. Whatever is wrong with the cache (unwritable, full, altered) costs time and
nothing else: what cannot be read back exactly is printed again.
"""

import contextlib
import hashlib
import os
import sys
import tempfile
from collections.abc import Iterable
from functools import cache
from pathlib import Path

from readiness import __version__
from readiness.resources import folder

_MOST_BYTES = 300_000_000
_DIGEST = hashlib.sha256().digest_size
_ENDING = ".kept"


def key(*parts: str | bytes) -> str:
    """Return by what a printed file is known: everything that went into it, and what prints."""
    digest = hashlib.sha256()
    for part in (_machinery(), *parts):
        content = part.encode() if isinstance(part, str) else part
        digest.update(len(content).to_bytes(8, "big") + content)
    return digest.hexdigest()


@cache
def _machinery() -> bytes:
    """Return the fingerprint of this tool's code that prints, and of the libraries under it."""
    from importlib.metadata import version

    digest = hashlib.sha256()
    for name in ("weasyprint", "pydyf", "fonttools", "tinycss2", "tinyhtml5", "matplotlib"):
        with contextlib.suppress(Exception):  # a library that another version does without
            digest.update(f"{name} {version(name)}\n".encode())
    digest.update(f"readiness {__version__}, Python {sys.version}\n".encode())
    for path in _sources():
        digest.update(path.read_bytes())
    return digest.digest()


def _sources() -> Iterable[Path]:
    yield from sorted(Path(__file__).parent.glob("*.py"))
    for place in ("style", "binder"):
        yield from sorted((folder("templates") / place).glob("*.*"))


class PrintCache:
    """Printed files by their key, the oldest removed when there are too many."""

    def __init__(self, place: Path, most_bytes: int = _MOST_BYTES) -> None:
        """Take the folder; it is made when something is first kept."""
        self._place = place
        self._most = most_bytes

    def get(self, known_as: str) -> bytes | None:
        """Return what was kept, or None if it is not there or not as it was kept."""
        path = self._place / f"{known_as}{_ENDING}"
        try:
            whole = path.read_bytes()
        except OSError:
            return None
        seal, content = whole[:_DIGEST], whole[_DIGEST:]
        if seal != _seal(known_as, content):
            return None
        with contextlib.suppress(OSError):
            os.utime(path)
        return content

    def put(self, known_as: str, content: bytes) -> None:
        """Keep a file, whole or not at all; say nothing if that is not possible."""
        with contextlib.suppress(OSError):
            self._place.mkdir(parents=True, exist_ok=True, mode=0o700)
            handle, name = tempfile.mkstemp(prefix=".being-kept-", dir=self._place)
            temporary = Path(name)
            try:
                with os.fdopen(handle, "wb") as stream:
                    stream.write(_seal(known_as, content) + content)
                temporary.replace(self._place / f"{known_as}{_ENDING}")
            finally:
                temporary.unlink(missing_ok=True)
            self._make_room()

    def _make_room(self) -> None:
        files = [(path, path.stat()) for path in self._place.glob(f"*{_ENDING}")]
        kept = [(stat.st_mtime_ns, stat.st_size, path) for path, stat in files]
        total = sum(size for _, size, _ in kept)
        for _, size, path in sorted(kept):
            if total <= self._most:
                return
            path.unlink(missing_ok=True)
            total -= size


def _seal(known_as: str, content: bytes) -> bytes:
    return hashlib.sha256(known_as.encode() + content).digest()


def user_cache() -> PrintCache:
    """Return the cache of the person who runs the tool."""
    from platformdirs import user_cache_path

    return PrintCache(user_cache_path("readiness", appauthor=False) / "printed")
