"""The one door through which a program comes in, from a folder or out of a binder: every problem at once."""

from collections.abc import Sequence
from dataclasses import replace
from pathlib import Path

from readiness.errors import Place, Problem, ProgramProblems
from readiness.program import plausibility
from readiness.program.csv_items import read_measurement, read_progress
from readiness.program.csv_text import parse_csv
from readiness.program.decoding import decode
from readiness.program.entries import Sink
from readiness.program.field_schema import PROGRAM, FileSchema
from readiness.program.fields import Schemas, schemas
from readiness.program.files import FolderContents, collect
from readiness.program.items import Item, Program
from readiness.program.references import dangling, doubled
from readiness.program.typed import FileReader
from readiness.program.yaml_text import parse_yaml

PROGRAM_FILE = "program.yaml"


def read_folder(folder: Path) -> Program:
    """
    Return the program that a folder describes.

    Raises:
        ProgramProblems: With everything that is wrong in any file, and every question, if anything is wrong.
    """
    contents, problems = collect(folder, known_yaml())
    if not contents.files:
        raise ProgramProblems(problems)
    return read_program(contents, problems)


def read_program(contents: FolderContents, found: Sequence[Problem] = ()) -> Program:
    """
    Return the program that the contents of a folder or binder describe.

    Args:
        contents: What the files hold.
        found: What was found wrong with the files themselves.

    Raises:
        ProgramProblems: With everything that is wrong in any file, and every question, if anything is wrong.
    """
    return _read(contents, found, schemas())


def questions(program: Program) -> tuple[Problem, ...]:
    """Return what is odd in a program that can be used, in the order of its places."""
    return tuple(sorted(set(plausibility.implausible(program, schemas()))))


def known_yaml() -> tuple[str, ...]:
    """Return the names of the YAML files of a program."""
    return tuple(name for name in schemas().files if name.endswith(".yaml"))


def _read(contents: FolderContents, found: Sequence[Problem], known: Schemas) -> Program:
    sink = Sink([*found])
    reader = FileReader(known, sink)
    if PROGRAM_FILE not in contents.files:
        message = "the file is missing: it holds at least the line format: 1, and marks a program folder"
        sink.add(Place(PROGRAM_FILE), message, "missing")
    for name, file in known.files.items():
        if name in contents.files:
            _read_file(contents.files[name], file, reader)
    for name in contents.measurements:
        _read_measurement(name, contents.files[name], reader)
    texts = {}
    for key, name in contents.texts.items():
        text, unreadable = decode(name, contents.files[name])
        sink.problems.extend(unreadable)
        texts[key] = text or ""
    program = Program(
        items=tuple(reader.items),
        known_lists=frozenset(reader.known_lists),
        files=contents.inputs,
        texts=texts,
        contents=contents.files,
    )
    _raise_problems(program, reader, contents)
    return program


def _read_file(content: bytes, file: FileSchema, reader: FileReader) -> None:
    if file.file.endswith(".csv"):
        kind = next(iter(file.top.lists.values()))
        csv, found = parse_csv(file.file, content)
        reader.sink.problems.extend(found)
        if csv is not None:
            reader.items += read_progress(csv, kind, reader.sink)
            reader.known_lists.add((kind.kind, PROGRAM))
        return
    node, found = parse_yaml(file.file, content)
    reader.sink.problems.extend(found)
    if node is not None:
        reader.read(node, file)


def _read_measurement(name: str, content: bytes, reader: FileReader) -> None:
    csv, found = parse_csv(name, content)
    reader.sink.problems.extend(found)
    item: Item | None = read_measurement(csv, reader.sink) if csv is not None else None
    if item is not None:
        reader.items.append(item)


def _raise_problems(program: Program, reader: FileReader, contents: FolderContents) -> None:
    items, known, sink = program.items, reader.schemas, reader.sink
    names = [*contents.files, *contents.evidence]
    found = [
        *sink.problems,
        *doubled(items, known),
        *dangling(sink.uses, items, program.known_lists, names, known),
        *plausibility.implausible(_without_half_read(program, reader), known),
    ]
    if not all(plausibility.is_question(problem) for problem in found):
        raise ProgramProblems(found)


def _without_half_read(program: Program, reader: FileReader) -> Program:
    """Return the program without items that are judged by what they leave out, if they are half read."""
    kept = [
        item
        for item in program.items
        if item.kind not in plausibility.JUDGED_WHOLE or (item.kind, item.id) not in reader.incomplete
    ]
    return replace(program, items=tuple(kept))
