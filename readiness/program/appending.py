"""Adds an entry to a list in a YAML file without touching a byte of what is there, whole or not at all."""

import json
import os
import tempfile
from collections.abc import Mapping
from pathlib import Path

from readiness.errors import UsageError
from readiness.program.nodes import Sequence
from readiness.program.yaml_text import parse_yaml


def append_entry(path: Path, key: str, entry: Mapping[str, str]) -> None:
    """
    Append one entry to the list under a key at the end of a file, which may not exist yet.

    Raises:
        UsageError: If the file holds something else than that one list in block form.
    """
    before = path.read_bytes() if path.exists() else b""
    after = before + _addition(before, path.name, key, entry)
    node, problems = parse_yaml(path.name, after)
    if problems or node is None:
        raise UsageError(
            f"{path.name} cannot be added to as it is; nothing was changed: {problems[0] if problems else ''}"
        )
    _write(path, after)


def _addition(before: bytes, name: str, key: str, entry: Mapping[str, str]) -> bytes:
    node, _ = parse_yaml(name, before) if before.strip() else (None, [])
    listed = node.get(key) if node is not None and hasattr(node, "get") else None
    if listed is not None and not (isinstance(listed, Sequence) and listed.entries):
        raise UsageError(
            f"{name}: write the list under {key} with one entry a line, or delete the empty list"
        )
    lines = [] if listed is not None else [f"{key}:"]
    for index, (field, value) in enumerate(entry.items()):
        lines.append(f"{'  - ' if index == 0 else '    '}{field}: {json.dumps(value, ensure_ascii=False)}")
    gap = b"" if not before or before.endswith(b"\n") else b"\n"
    return gap + ("\n".join(lines) + "\n").encode("utf-8")


def _write(path: Path, content: bytes) -> None:
    handle, name = tempfile.mkstemp(prefix=f".{path.name}.", dir=path.parent)
    temporary = Path(name)
    try:
        with os.fdopen(handle, "wb") as stream:
            stream.write(content)
            stream.flush()
            os.fsync(stream.fileno())
        temporary.chmod(0o644)
        temporary.replace(path)
    finally:
        temporary.unlink(missing_ok=True)
