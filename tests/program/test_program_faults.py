"""Every small broken folder of tests/faults/program gives its problems, at their places and in their words."""

from pathlib import Path

import pytest
import yaml

from readiness.errors import ProgramProblems
from readiness.program.files import from_mapping
from readiness.program.reading import known_yaml, questions, read_program

FOLDER = Path(__file__).parent.parent / "faults" / "program"
FAULTS = sorted(path for path in FOLDER.iterdir() if path.is_dir())


def told(fault: Path) -> list[dict[str, str]]:
    """Return what is told about a broken folder."""
    names = [path for path in fault.rglob("*") if path.is_file() and path.name != "expected.yaml"]
    files = {path.relative_to(fault).as_posix(): path.read_bytes() for path in names}
    contents, found = from_mapping(files, {}, known_yaml())
    try:
        problems = questions(read_program(contents, found))
    except ProgramProblems as refused:
        problems = refused.problems
    return [{"at": str(each.place), "says": each.message, "kind": each.kind} for each in problems]


@pytest.mark.parametrize("fault", FAULTS, ids=lambda path: path.name)
def test_fault_is_told(fault):
    """A broken folder gives exactly the problems that its expected.yaml lists."""
    expected = yaml.safe_load((fault / "expected.yaml").read_text(encoding="utf-8"))
    assert expected == told(fault)
