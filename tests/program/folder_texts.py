"""Program folders written down in tests: name of a file -> its text."""

from readiness.errors import Problem, ProgramProblems
from readiness.program.files import from_mapping
from readiness.program.items import Program
from readiness.program.reading import known_yaml, questions, read_program


def read(**texts: str) -> Program:
    """Return the program of these YAML files (``rooms=...``); program.yaml holds the format if not given."""
    files = {f"{name}.yaml": text.encode() for name, text in {"program": "format: 1\n", **texts}.items()}
    contents, found = from_mapping(files, {}, known_yaml())
    return read_program(contents, found)


def problems(**texts: str) -> list[str]:
    """Return everything that is told about these YAML files, questions too, one line each."""
    try:
        return lines(questions(read(**texts)))
    except ProgramProblems as refused:
        return lines(refused.problems)


def lines(found: tuple[Problem, ...]) -> list[str]:
    """Return problems as they are shown."""
    return [str(problem) for problem in found]


def room(**fields: object) -> str:
    """Return rooms.yaml with one room, vault-a, with these fields."""
    return "rooms:\n  - id: vault-a\n" + "".join(f"    {name}: {value}\n" for name, value in fields.items())
