"""
A program folder, or the same files out of a binder, as one set of named contents.

YAML, CSV and texts are held as bytes; of evidence only size and SHA-256. Nothing outside the folder is read.
"""

import hashlib
import os
import stat
from collections.abc import Collection, Iterator, Mapping
from dataclasses import dataclass, field
from pathlib import Path

from readiness.errors import Place, Problem
from readiness.program.file_names import MOST_FILES, Names, is_evidence, is_ignored, largest_bytes
from readiness.program.items import InputFile

_OPEN = os.O_RDONLY | getattr(os, "O_NONBLOCK", 0) | getattr(os, "O_NOFOLLOW", 0) | getattr(os, "O_BINARY", 0)
_CHUNK = 1 << 20


@dataclass(frozen=True)
class FolderContents:
    """
    What a program folder holds.

    Attributes:
        files: Name ("measurements/pilot.csv") -> bytes of each YAML, CSV and text file, in order of name.
        evidence: Name ("evidence/survey.pdf") -> size and hash, in order of name.
    """

    files: Mapping[str, bytes] = field(default_factory=dict)
    evidence: Mapping[str, InputFile] = field(default_factory=dict)

    @property
    def inputs(self) -> tuple[InputFile, ...]:
        """Return every file with hash and size, in order of name."""
        read = [InputFile(name, *_hash(data)) for name, data in self.files.items()]
        return tuple(sorted([*read, *self.evidence.values()], key=lambda file: file.name))

    @property
    def measurements(self) -> tuple[str, ...]:
        """Return the names of the measurement files."""
        return tuple(name for name in self.files if name.startswith("measurements/"))

    @property
    def texts(self) -> Mapping[tuple[str, str], str]:
        """Return (document number, part) -> name of the file that holds the department's wording."""
        names = (name for name in self.files if name.startswith("texts/"))
        return {(name.split("/")[1], name.split("/")[2].removesuffix(".md")): name for name in names}


def collect(folder: Path, known_yaml: Collection[str]) -> tuple[FolderContents, list[Problem]]:
    """
    Return the contents of a program folder and every problem with its files.

    Args:
        folder: The program folder.
        known_yaml: Names of the files that a program may have at its top.

    Returns:
        Contents of the files that can be used, and the problems.
    """
    problem = _not_a_folder(folder)
    if problem:
        return FolderContents(), [Problem(Place(str(folder)), problem, "folder")]
    names = Names(known_yaml)
    root = folder.resolve()
    files: dict[str, bytes] = {}
    evidence: dict[str, InputFile] = {}
    problems: list[Problem] = []
    for path in _walk(root, names, problems):
        name = names.of(path.relative_to(root).as_posix())
        if not names.accept(name):
            continue
        try:
            _read(path, root, name, files, evidence)
        except _FileRefusedError as refused:
            problems.append(Problem(Place(name), str(refused), refused.kind))
        except OSError as error:
            reason = (error.strerror or "unknown reason").lower()
            message = f"the file cannot be read: {reason}; check that it is there and that you may read it"
            problems.append(Problem(Place(name), message, "file"))
    problems += names.problems
    if not problems and not any(name in names.known_top for name in files):
        message = "holds none of the files of a program; start one with: readiness new " + str(folder)
        problems.append(Problem(Place(str(folder)), message, "folder"))
    return _contents(files, evidence), problems


def from_mapping(
    files: Mapping[str, bytes], evidence: Mapping[str, tuple[str, int]], known_yaml: Collection[str]
) -> tuple[FolderContents, list[Problem]]:
    """
    Return the same contents and problems from files held in memory, as a binder carries them.

    Args:
        files: Name -> bytes.
        evidence: Name -> (SHA-256 in hexadecimal, size in bytes).
        known_yaml: Names of the files that a program may have at its top.

    Returns:
        Contents of the files that can be used, and the problems.
    """
    names = Names(known_yaml)
    kept: dict[str, bytes] = {}
    hashes: dict[str, InputFile] = {}
    problems: list[Problem] = []
    for raw in sorted({*files, *evidence}):
        name = names.of(raw)
        if is_ignored(name) or not names.accept(name):
            continue
        try:
            if is_evidence(name):
                _check_size(name, evidence[raw][1] if raw in evidence else len(files[raw]))
                sha256, size = evidence[raw] if raw in evidence else _hash(files[raw])
                hashes[name] = InputFile(name, sha256, size)
            elif raw not in files:
                raise _FileRefusedError("the content is missing; only evidence is given by its hash", "file")
            else:
                _check_size(name, len(files[raw]))
                kept[name] = files[raw]
        except _FileRefusedError as refused:
            problems.append(Problem(Place(name), str(refused), refused.kind))
    return _contents(kept, hashes), problems + names.problems


class _FileRefusedError(Exception):
    """One file is left out; the text says why."""

    def __init__(self, message: str, kind: str) -> None:
        super().__init__(message)
        self.kind = kind


def _contents(files: Mapping[str, bytes], evidence: Mapping[str, InputFile]) -> FolderContents:
    return FolderContents(dict(sorted(files.items())), dict(sorted(evidence.items())))


def _hash(data: bytes) -> tuple[str, int]:
    return hashlib.sha256(data).hexdigest(), len(data)


def _not_a_folder(folder: Path) -> str:
    try:
        if not folder.exists():
            return "there is no such folder; check the spelling, or start one with: readiness new FOLDER"
        if not folder.is_dir():
            return "is a file, not a folder; name the folder that holds it"
        with os.scandir(folder):
            pass
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or "its name cannot be used"
        return f"the folder cannot be read: {reason.lower()}"
    return ""


def _walk(folder: Path, names: Names, problems: list[Problem]) -> Iterator[Path]:
    """Yield the files of the folder in order of name; folders that a program does not have stay closed."""
    pending = [folder]
    seen = 0
    while pending:
        here = pending.pop(0)
        try:
            with os.scandir(here) as listing:
                entries = sorted(listing, key=lambda entry: entry.name)
        except OSError as error:
            inside = here.relative_to(folder).as_posix()
            message = f"the folder cannot be read: {(error.strerror or 'unknown reason').lower()}"
            problems.append(Problem(Place(inside), message, "file"))
            continue
        for entry in entries:
            name = names.of(Path(entry.path).relative_to(folder).as_posix())
            if is_ignored(name):
                continue
            seen += 1
            if seen > MOST_FILES:
                message = f"holds more than {MOST_FILES:,} files; a program folder holds nothing else"
                problems.append(Problem(Place(str(folder)), message, "size"))
                return
            if _is_folder(entry):
                if names.enter(name):
                    pending.append(Path(entry.path))
            else:
                yield Path(entry.path)


def _is_folder(entry: os.DirEntry[str]) -> bool:
    try:
        return entry.is_dir(follow_symlinks=False)
    except OSError:
        return False  # read as a file, which says what is wrong with it


def _read(path: Path, root: Path, name: str, files: dict[str, bytes], evidence: dict[str, InputFile]) -> None:
    descriptor = os.open(_inside(path, root), _OPEN)
    with open(descriptor, "rb") as stream:
        status = os.fstat(descriptor)
        if not stat.S_ISREG(status.st_mode):
            raise _FileRefusedError("is not an ordinary file (a device, pipe or socket); remove it", "file")
        _check_size(name, status.st_size)
        if is_evidence(name):
            digest, size = hashlib.sha256(), 0
            while chunk := stream.read(_CHUNK):
                digest.update(chunk)
                size += len(chunk)
            evidence[name] = InputFile(name, digest.hexdigest(), size)
            return
        data = stream.read(largest_bytes(name) + 1)
        _check_size(name, len(data))
        files[name] = data


def _inside(path: Path, root: Path) -> Path:
    """Return where a file really lies, which must be inside the folder."""
    if not path.is_symlink():
        return path
    try:
        real = path.resolve(strict=True)
    except (OSError, RuntimeError):
        raise _FileRefusedError("is a link that leads nowhere; put the file itself here", "link") from None
    if not real.is_relative_to(root):
        message = "is a link that leaves the program folder; put the file itself here"
        raise _FileRefusedError(message, "link")
    if real.is_dir():
        raise _FileRefusedError("is a link to a folder; put the files themselves here", "link")
    return real


def _check_size(name: str, size: int) -> None:
    if size == 0:
        raise _FileRefusedError("the file is empty; fill it or delete it", "empty")
    limit = largest_bytes(name)
    if size > limit and not is_evidence(name):
        message = f"the file has {size / 1e6:.1f} MB; at most {limit / 1e6:g} MB are read"
        raise _FileRefusedError(message, "size")
