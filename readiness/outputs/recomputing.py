"""From the inputs inside a binder to its results once more, and to its pages once more."""

import io
from collections.abc import Callable
from dataclasses import dataclass

from readiness.assessment.records import Assessment
from readiness.assessment.unaltered import Manifest
from readiness.errors import ProgramProblems, UsageError
from readiness.outputs.binder_reading import OpenedBinder, read_binder
from readiness.outputs.making import assessed, make_all
from readiness.program.files import from_mapping
from readiness.program.items import Program
from readiness.program.reading import known_yaml, read_program


@dataclass(frozen=True)
class Recomputed:
    """The program inside a binder, read again, and its assessment by this version."""

    program: Program
    assessment: Assessment


def recompute(found: OpenedBinder, stored: Assessment) -> Recomputed:
    """
    Return the assessment of the inputs inside a binder, on the day of the stored one.

    Raises:
        ProgramProblems: If the inputs inside cannot be read.
    """
    evidence = {name: (sha, size) for name, sha, size in stored.inputs if name.startswith("evidence/")}
    contents, problems = from_mapping(found.inputs, evidence, known_yaml())
    if not contents.files:
        raise ProgramProblems(problems)
    program = read_program(contents, problems)
    return Recomputed(program, assessed(program, stored.as_of))


def manifest_again(recomputed: Recomputed, say: Callable[[str], None]) -> Manifest:
    """
    Return the list of contents of the binder made once more from the same inputs.

    Raises:
        UsageError: If pages cannot be laid out on this machine.
    """
    made = make_all(
        recomputed.assessment, recomputed.program, recomputed.assessment.as_of, say, with_what_ifs=False
    )
    if made.not_written:
        raise UsageError(made.not_written[0])
    return read_binder(io.BytesIO(made.files["binder.pdf"]), "binder.pdf", with_pages=False).manifest
