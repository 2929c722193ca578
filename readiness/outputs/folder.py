"""All outputs go in whole or not at all: made beside the target, moved in with a manifest."""

import hashlib
import json
import os
import shutil
import tempfile
from collections.abc import Mapping
from pathlib import Path

from readiness.errors import UsageError

MANIFEST = "manifest.json"


def write_outputs(target: Path, files: Mapping[str, bytes]) -> None:
    """
    Write files into a target folder.

    An existing folder is replaced only if it is empty or holds our manifest and nothing that we did not
    write; otherwise UsageError says what stands in the way.
    """
    _may_replace(target)
    target.parent.mkdir(parents=True, exist_ok=True)
    temporary = Path(tempfile.mkdtemp(prefix=f".{target.name}.", dir=target.parent))
    try:
        for name, content in {**files, MANIFEST: manifest(files)}.items():
            path = temporary / name
            path.parent.mkdir(parents=True, exist_ok=True)
            with path.open("wb") as stream:
                stream.write(content)
                stream.flush()
                os.fsync(stream.fileno())
        temporary.chmod(0o755)
        _move_in(temporary, target)
    finally:
        shutil.rmtree(temporary, ignore_errors=True)


def write_one(target: Path, content: bytes) -> None:
    """Write one new file, whole or not at all; raise UsageError if something stands there already."""
    if target.exists() or target.is_symlink():
        raise UsageError(f"{target} exists; name a file that does not, or delete it first")
    if not target.parent.is_dir():
        raise UsageError(f"{target.parent} is not a folder; make it first")
    handle, name = tempfile.mkstemp(prefix=f".{target.name}.", dir=target.parent)
    temporary = Path(name)
    try:
        with os.fdopen(handle, "wb") as stream:
            stream.write(content)
            stream.flush()
            os.fsync(stream.fileno())
        temporary.chmod(0o644)
        temporary.replace(target)
    finally:
        temporary.unlink(missing_ok=True)


def manifest(files: Mapping[str, bytes]) -> bytes:
    """Return the list of files with their hashes, by which we know our own folder again."""
    listed = {name: hashlib.sha256(content).hexdigest() for name, content in sorted(files.items())}
    return (json.dumps({"written_by": "readiness", "files": listed}, indent=1) + "\n").encode()


def _may_replace(target: Path) -> None:
    if not target.exists() and not target.is_symlink():
        return
    if not target.is_dir() or target.is_symlink():
        raise UsageError(f"{target} exists and is not a folder; choose another --out")
    present = {str(path.relative_to(target)) for path in target.rglob("*") if not path.is_dir()}
    if not present:
        return
    try:
        ours = json.loads((target / MANIFEST).read_text(encoding="utf-8"))
        listed = set(ours["files"]) | {MANIFEST} if ours["written_by"] == "readiness" else set()
    except (OSError, ValueError, KeyError, TypeError):
        listed = set()
    foreign = sorted(present - listed)
    if not listed or foreign:
        example = foreign[0] if foreign else MANIFEST
        raise UsageError(
            f"{target} holds files that this tool did not write ({example}); choose another --out or empty it"
        )


def _move_in(temporary: Path, target: Path) -> None:
    old = None
    if target.exists():
        old = temporary.parent / f"{temporary.name}.old"
        target.rename(old)
    try:
        temporary.rename(target)
    except OSError:
        if old is not None:
            old.rename(target)
        raise
    if old is not None:
        shutil.rmtree(old, ignore_errors=True)
