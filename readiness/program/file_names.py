"""Which names a program folder may hold, and what was probably meant by the others."""

import re
import unicodedata
from collections.abc import Collection

from readiness.errors import Place, Problem
from readiness.program.wording import near_miss, shown

MOST_FILES = 2_000
LARGEST_YAML = 2_000_000  # bytes
LARGEST_CSV = 5_000_000
FOLDERS = ("evidence", "measurements", "texts")

_OTHER_TOP = {"progress.csv"}
_LITTER = re.compile(r"(?i)\..*|thumbs\.db|desktop\.ini|~\$.*|.*~|__macosx")
_OURS_AT_TOP = re.compile(r"(?i)readme\.md|.*\.schema\.json")
_DOCUMENT_NUMBER = re.compile(r"[0-9]+(\.[0-9]+)*")
_TEXT_PART = re.compile(r"[a-z0-9][a-z0-9_-]*\.md")
_UNREADABLE = re.compile(r"[\x00-\x1f\x7f-\x9f\u202a-\u202e\u2066-\u2069\ud800-\udfff\\]")


def is_ignored(name: str) -> bool:
    """Return whether a file is not read: hidden, left by the system, or written by the starter."""
    parts = name.split("/")
    if any(_LITTER.fullmatch(part) and part not in {".", ".."} for part in parts):
        return True
    return len(parts) == 1 and _OURS_AT_TOP.fullmatch(name) is not None


def is_evidence(name: str) -> bool:
    """Return whether a file is evidence, of which only size and hash are kept."""
    return name.startswith("evidence/")


def largest_bytes(name: str) -> int:
    """Return how large a file may be; evidence is not limited."""
    return LARGEST_CSV if name.endswith(".csv") else LARGEST_YAML


class Names:
    """Accepts the names of a program folder one by one and collects the problems with the others."""

    def __init__(self, known_yaml: Collection[str]) -> None:
        """Keep the names that may stand at the top."""
        self.known_top = frozenset(known_yaml) | _OTHER_TOP
        self.problems: list[Problem] = []
        self._spelled: dict[str, str] = {}

    @staticmethod
    def of(written: str) -> str:
        """Return a name with composed characters, so that one name is one name on every system."""
        return unicodedata.normalize("NFC", written)

    def accept(self, name: str) -> bool:
        """Return whether a file belongs to a program; if not, note why."""
        return self._note(name, self._refuse(name))

    def enter(self, name: str) -> bool:
        """Return whether a folder belongs to a program; if not, note why."""
        return self._note(name + "/", self._refuse_folder(name))

    def _note(self, name: str, reason: str) -> bool:
        if reason:
            kind = "same-name" if reason.startswith("differs") else "unknown-file"
            self.problems.append(Problem(Place(printable(name)), reason, kind))
        return not reason

    def _refuse(self, name: str) -> str:
        parts = name.split("/")
        if _UNREADABLE.search(name) or any(part in {"", ".", ".."} for part in parts):
            return "the name of this file cannot be used; rename it with letters, digits, hyphens and points"
        reason = self._unknown_top(name) if len(parts) == 1 else self._unknown_inside(parts)
        return reason or self._twin(name)

    def _twin(self, name: str) -> str:
        other = self._spelled.get(name.casefold())
        if other is None:
            self._spelled[name.casefold()] = name
            return ""
        if other == name:
            return "differs from another file only in how accents are stored; rename or delete one of them"
        return f"differs from {other} only in capital and small letters; rename or delete one of them"

    def _unknown_top(self, name: str) -> str:
        if name in self.known_top:
            return ""
        close = near_miss(re.sub(r"(?i)\.(yml|txt|yaml\.txt|yaml\..*)$", ".yaml", name), self.known_top)
        if close:
            return f"did you mean {close}?"
        if name.casefold().endswith(".csv"):
            return "no such file belongs to a program; put measurements into the folder measurements"
        if name.casefold().endswith((".yaml", ".yml")):
            return f"no such file belongs to a program; known are {', '.join(sorted(self.known_top))}"
        return "no such file belongs to a program; put supporting files into the folder evidence"

    def _unknown_inside(self, parts: list[str]) -> str:
        folder, last = parts[0], parts[-1]
        if folder == "evidence":
            return ""
        if folder == "measurements":
            return self._unknown_measurement(last) if len(parts) == 2 else _nested("measurements")
        if folder == "texts":
            return _unknown_text(parts)
        return self._unknown_folder(folder)

    def _unknown_measurement(self, last: str) -> str:
        if last.endswith(".csv"):
            return ""
        if last.casefold().endswith((".xlsx", ".xls", ".ods")):
            return "measurements are CSV files; save the sheet as CSV (UTF-8, commas)"
        if last.casefold().endswith(".csv"):
            return f"did you mean {last[:-4]}.csv?"
        return "measurements are files whose name ends with .csv; put other files into the folder evidence"

    def _refuse_folder(self, name: str) -> str:
        parts = name.split("/")
        if _UNREADABLE.search(name):
            return "the name of this folder cannot be used; rename it with letters, digits and hyphens"
        if len(parts) == 1:
            return "" if name in FOLDERS else self._unknown_folder(name)
        if parts[0] == "measurements":
            return _nested("measurements")
        if parts[0] == "texts":
            return _unknown_text([*parts, "part.md"])
        return ""

    def _unknown_folder(self, name: str) -> str:
        close = near_miss(name, FOLDERS)
        if close:
            return f"did you mean the folder {close}?"
        return f"no such folder belongs to a program; known are {', '.join(FOLDERS)}"


def printable(name: str) -> str:
    """Return a file name fit for a message."""
    return shown(name)[1:-1] if _UNREADABLE.search(name) else name


def _nested(folder: str) -> str:
    return f"the folder {folder} holds files only; move them one folder up"


def _unknown_text(parts: list[str]) -> str:
    if len(parts) != 3 or not _DOCUMENT_NUMBER.fullmatch(parts[1]):
        return "texts stand in a folder named by the number of their document, as in texts/1.3/purpose.md"
    if not _TEXT_PART.fullmatch(parts[2]):
        return "a text is named by its part in small letters and ends with .md, as in texts/1.3/purpose.md"
    return ""
