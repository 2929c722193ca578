"""The starter of a new program folder: every file, every field, commented out: nothing is known yet."""

import json
import os
import shutil
import tempfile
from collections.abc import Iterator, Mapping
from pathlib import Path

from readiness.errors import UsageError
from readiness.program.editor_schema import editor_schema
from readiness.program.field_notes import field_note
from readiness.program.field_schema import FieldSchema, FileSchema, KindSchema
from readiness.program.fields import Schemas
from readiness.program.measurement_kinds import MeasurementKind, measurement_kind, measurement_kinds

EDITOR_FOLDER = ".readiness"
FOLDERS = ("evidence", "measurements", "texts")  # empty at first
WIDTH = 100  # characters of a comment line

_HOW = """\
A line that begins with # is not read. Where something is known, take the # and one blank away from the
lines of that thing and of everything above it that it stands in, and write the value after the colon.
What is left out is unknown. A list that is written is complete: [] says that there are none.
"""
_README = """\
# A total skin electron program

This folder describes one program. Every file is a starter: each field stands in it, commented out, with
its meaning, unit and allowed words. Fill in what is known; what is left out is unknown, and nothing unknown
is ever "met".

- `readiness check .` tells every problem with file, line and column.
- `readiness assess .` tells what follows, what is missing and what to do first.
- `readiness binder . --out OUT` writes every document.

| file | holds |
|---|---|
{files}
| `measurements/NAME.csv` | readings; `{editor}/measurements.md` describes every kind |
| `evidence/` | files that are named in `documents.yaml` |
| `texts/NUMBER/PART.md` | your own wording for a part of a document |

An editor that understands YAML schemas completes and checks the files with those in `{editor}/`.
Write nothing here that could identify a patient; people are named by role.
"""


def write_starter(folder: Path, schemas: Schemas) -> tuple[str, ...]:
    """
    Write the starter into a new or empty folder, whole or not at all, and return the names of its files.

    Raises:
        UsageError: If there is something at that place already, or it cannot be written.
    """
    files = starter_files(schemas)
    try:
        with tempfile.TemporaryDirectory(prefix=".readiness-", dir=_working_place(folder)) as temporary:
            whole = Path(temporary) / "whole"
            _write(whole, files)
            _move(whole, folder)
    except OSError as error:
        raise UsageError(f"{folder} cannot be written: {error.strerror or error}") from error
    return tuple(files)


def starter_files(schemas: Schemas) -> dict[str, str]:
    """Return the text of every file of the starter by its name."""
    files = {}
    for file in schemas.files.values():
        if file.file.endswith(".csv"):
            continue  # has no comments; README.md shows its columns
        schema_name = f"{EDITOR_FOLDER}/{Path(file.file).stem}.schema.json"
        files[file.file] = f"# yaml-language-server: $schema={schema_name}\n{starter_text(file)}"
        files[schema_name] = json.dumps(editor_schema(file), indent=1, ensure_ascii=False) + "\n"
    rows = [_readme_row(file) for file in schemas.files.values()]
    files["README.md"] = _README.format(files="\n".join(rows), editor=EDITOR_FOLDER)
    kinds = [_measurement_text(measurement_kind(kind)) for kind in measurement_kinds()]
    files[f"{EDITOR_FOLDER}/measurements.md"] = "\n".join(["# Kinds of measurement file\n", *kinds])
    return files


def starter_text(file: FileSchema) -> str:
    """Return one file with everything that may be written in it, commented out."""
    head = [f"# {line}" for line in (*_wrapped(f"{file.title}. {file.meaning}"), *_HOW.splitlines())]
    live = [f"{name}: {field.example}" for name, field in file.top.fields.items() if field.required]
    body = []
    for name, field in file.top.fields.items():
        if not field.required:
            body += ["", *_field(name, field, "")]
    for section in file.top.sections.values():
        body += ["", *_comment(section.meaning, ""), f"{section.key}:", *_inside(section, "  ")]
    for listed in file.top.lists.values():
        body += ["", *_list(listed, "")]
    return "\n".join([*head, *live, *(f"# {line}".rstrip() if line else "" for line in body)]) + "\n"


def _list(kind: KindSchema, indent: str) -> Iterator[str]:
    yield from _comment(f"{kind.meaning} One entry each.", indent)
    yield f"{indent}{kind.key}:"
    yield from _comment("Short name of its own: letters, digits, - _ and . [required]", f"{indent}  ")
    yield f"{indent}  - id:"
    yield from _inside(kind, f"{indent}    ")


def _inside(kind: KindSchema, indent: str) -> Iterator[str]:
    for name, field in kind.fields.items():
        yield from _field(name, field, indent)
    for section in kind.sections.values():
        yield from (*_comment(section.meaning, indent), f"{indent}{section.key}:")
        yield from _inside(section, f"{indent}  ")
    for listed in kind.lists.values():
        yield from _list(listed, indent)


def _field(name: str, field: FieldSchema, indent: str) -> Iterator[str]:
    yield from _comment(f"{field.meaning} [{field_note(field)}]", indent)
    yield f"{indent}{name}:"
    if field.columns:
        inner = indent + "  "
        for at, (column_name, column) in enumerate(field.columns.items()):
            yield from _comment(f"{column.meaning} [{field_note(column)}]", inner)
            dash = "" if field.type == "row" else ("- " if at == 0 else "  ")
            yield f"{inner}{dash}{column_name}:"


def _comment(text: str, indent: str) -> list[str]:
    return [f"{indent}# {line}" for line in _wrapped(text, WIDTH - len(indent))]


def _wrapped(text: str, width: int = WIDTH) -> list[str]:
    lines = [""]
    for word in text.split():
        if lines[-1] and len(lines[-1]) + 1 + len(word) > width:
            lines.append("")
        lines[-1] = f"{lines[-1]} {word}".lstrip()
    return lines


def _readme_row(file: FileSchema) -> str:
    columns = ""
    if file.file.endswith(".csv"):
        names = [name for kind in file.top.lists.values() for name in kind.fields]
        columns = f" First line: `{','.join(names)}`"
    return f"| `{file.file}` | {file.meaning}{columns} |"


def _measurement_text(kind: MeasurementKind) -> str:
    head = [f"## {kind.kind}", "", f"{kind.title}. {kind.meaning} {kind.min_rows} rows or more.", ""]
    lines = _described(kind.header, "# {}:")
    columns = _described(kind.columns, "{}")
    return "\n".join([*head, "Header lines:", "", *lines, "", "Columns:", "", *columns, ""])


def _described(fields: Mapping[str, FieldSchema], form: str) -> list[str]:
    return [f"- `{form.format(name)}` {each.meaning} [{field_note(each)}]" for name, each in fields.items()]


def _working_place(folder: Path) -> Path:
    """Return where to write before moving: inside an empty folder, or beside one that does not exist yet."""
    if folder.is_dir():
        if any(folder.iterdir()):
            raise UsageError(f"{folder} is not empty; nothing was written. Name a new or empty folder")
        return folder
    if folder.exists():
        raise UsageError(f"{folder} is a file; name a new or empty folder")
    beside = folder.resolve().parent
    if not beside.is_dir():
        raise UsageError(f"{beside} does not exist; make that folder first")
    return beside


def _write(folder: Path, files: Mapping[str, str]) -> None:
    folder.mkdir()
    for name in FOLDERS:
        (folder / name).mkdir()
    for name, text in files.items():
        target = folder / name
        target.parent.mkdir(exist_ok=True)
        with target.open("w", encoding="utf-8", newline="\n") as stream:
            stream.write(text)
            stream.flush()
            os.fsync(stream.fileno())


def _move(temporary: Path, folder: Path) -> None:
    """Move what was written to its place; program.yaml, which makes it a program folder, comes last."""
    if not folder.exists():
        temporary.rename(folder)
        return
    moved: list[Path] = []
    try:
        for each in sorted(temporary.iterdir(), key=lambda path: path.name == "program.yaml"):
            target = folder / each.name
            each.rename(target)
            moved.append(target)
    except OSError:
        for target in moved:
            if target.is_dir():
                shutil.rmtree(target)
            else:
                target.unlink()
        raise
