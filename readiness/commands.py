"""
One function a command: what it reads, what it makes, what it answers. Nothing here prints or exits.

Heavy layers are imported inside the functions, so that ``check`` stays quick.
"""

from collections.abc import Callable
from dataclasses import dataclass
from datetime import date
from functools import partial
from pathlib import Path

from readiness.errors import Problem, UsageError

NOTHING_OPEN, OPEN, WRONG, OUR_DEFECT = 0, 1, 2, 3
Say = Callable[[str], None]  # progress, for a person who waits


@dataclass(frozen=True)
class Answer:
    """What a command answers: text for standard output, problems for standard error, exit status."""

    text: str
    status: int
    problems: tuple[str, ...] = ()


def new(folder: Path) -> Answer:
    """Write a commented starter."""
    from readiness.program.fields import schemas
    from readiness.program.starter import write_starter

    names = write_starter(folder, schemas())
    lines = [f"{folder}: {len(names)} files written."]
    lines.append(f"Fill in what you know, then: readiness check {folder}")
    return Answer("\n".join(lines) + "\n", NOTHING_OPEN)


def check(folder: Path, *, as_json: bool) -> Answer:
    """Read everything and list every problem."""
    from readiness.errors import ProgramProblems
    from readiness.program.reading import questions, read_folder

    try:
        program = read_folder(folder)
        _check_local_rules(program)
    except ProgramProblems as found:
        return _problems(found.problems, as_json)
    asked = tuple(str(question) for question in questions(program))
    text = f"{folder}: {len(program.files)} files read, no problem found.\n"
    if asked:
        text = f"{folder}: {len(program.files)} files read, no problem found, {len(asked)} to look at.\n"
    if as_json:
        text = _as_json([], NOTHING_OPEN)
    return Answer(text, NOTHING_OPEN, asked)


def _check_local_rules(program: object) -> None:
    from readiness.program.items import Program

    assert isinstance(program, Program)  # noqa: S101 - read_folder returns one
    own, limits = program.by_kind.get("local_rule"), program.by_kind.get("local_limit")
    if limits and not own:
        from readiness.assessment.local_rules import check_limits
        from readiness.assessment.ruleset import shipped_rules

        check_limits(shipped_rules(), program)
    elif own:
        from readiness.assessment.catalogue import catalogue
        from readiness.assessment.local_rules import with_local
        from readiness.assessment.ruleset import load_rules

        with_local(load_rules(catalogue()), program, catalogue())


def _problems(problems: tuple[Problem, ...], as_json: bool) -> Answer:
    lines = tuple(str(problem) for problem in problems)
    count = f"{len(lines)} problem{'s' if len(lines) != 1 else ''} found; nothing was assessed or written."
    text = _as_json(list(problems), WRONG) if as_json else ""
    return Answer(text, WRONG, (*lines, count))


def _as_json(problems: list[Problem], status: int) -> str:
    import json

    listed = [
        {"file": each.place.file, "line": each.place.line, "column": each.place.column,
         "message": each.message, "kind": each.kind}
        for each in problems
    ]  # fmt: skip
    return json.dumps({"problems": listed, "status": status}, ensure_ascii=False, indent=1) + "\n"


def assess(folder: Path, *, as_of: date, as_json: bool, width: int) -> Answer:
    """Assess the program and answer in a summary or as JSON."""
    from readiness.errors import ProgramProblems
    from readiness.outputs.contract import to_json
    from readiness.outputs.making import assessed
    from readiness.outputs.terminal import summary
    from readiness.program.reading import read_folder

    try:
        program = read_folder(folder)
        assessment = assessed(program, as_of)
    except ProgramProblems as found:
        return _problems(found.problems, as_json)
    text = to_json(assessment) if as_json else summary(assessment, width)
    return Answer(text, NOTHING_OPEN if assessment.verdict.words == "ready" else OPEN)


def binder(
    folder: Path, out: Path, *, as_of: date, width: int, say: Say, use_cache: bool = True
) -> Answer:
    """Assess and write everything in all formats."""
    from readiness.errors import ProgramProblems
    from readiness.outputs.folder import write_outputs
    from readiness.outputs.making import assessed, make_all
    from readiness.outputs.press_cache import user_cache
    from readiness.program.reading import read_folder

    say("reading the program folder")
    try:
        program = read_folder(folder)
        say("judging")
        assessment = assessed(program, as_of)
    except ProgramProblems as found:
        return _problems(found.problems, False)
    made = make_all(assessment, program, as_of, say, user_cache() if use_cache else None)
    write_outputs(out, made.files)
    lines = [f"Written to {out}:"]
    lines += [f"  {name}" for name in _main_files(made.files)]
    singles = [name for name in made.files if name.startswith("documents/") and name.endswith(".pdf")]
    if singles:
        lines.append(f"  documents/ ({len(singles)} documents, each as PDF and HTML)")
    lines.append(f"Verdict: {assessment.verdict.words}. {' '.join(assessment.verdict.reasons)}".rstrip())
    status = NOTHING_OPEN if assessment.verdict.words == "ready" else OPEN
    return Answer("\n".join(lines) + "\n", WRONG if made.not_written else status, made.not_written)


def _main_files(files: dict[str, bytes]) -> list[str]:
    return sorted(name for name in files if "/" not in name)


def rules(rule_id: str | None, folder: Path | None, *, as_of: date, as_json: bool, width: int,
          topic: str | None, strength: str | None) -> Answer:  # fmt: skip
    """List the rules, or show one whole, with a program's own value if a folder is given."""
    from readiness.outputs.rules_view import list_rules, show_rule

    if rule_id is None:
        return Answer(list_rules(topic, strength, width, as_json), NOTHING_OPEN)
    assessment = _assessed_or_none(folder, as_of)
    return Answer(show_rule(rule_id, assessment, width, as_json), NOTHING_OPEN)


def explain(
    name: str, folder: Path, *, item: str | None, as_of: date, width: int, depth: int
) -> Answer:
    """Show a value with its descent."""
    from readiness.assessment.assessment import why_absent
    from readiness.outputs.explanation import explain_value
    from readiness.program.reading import read_folder

    assessment = _assessed_or_none(folder, as_of)
    assert assessment is not None  # noqa: S101 - a folder was given
    why = partial(why_absent, read_folder(folder), as_of)
    return Answer(explain_value(name, assessment, item, width, why, depth), NOTHING_OPEN)


def review(
    path: Path, *, as_of: date, as_json: bool, width: int, say: Say, page: Path | None = None,
    quick: bool = False,
) -> Answer:  # fmt: skip
    """Say whether a folder is complete, or whether a binder agrees with the inputs inside it."""
    if path.is_dir():
        return _review_folder(path, as_of, as_json, width, page)
    if not path.exists():
        raise UsageError(f"{path} does not exist; name a program folder or a binder.pdf")
    if not path.is_file():
        raise UsageError(f"{path} is neither a folder nor a file; name a program folder or a binder.pdf")
    if page is not None:
        raise UsageError("a page is written of a folder only; a binder's review is read here or with --json")
    from readiness.outputs.binder_reading import open_binder
    from readiness.outputs.binder_review import AGREES, review_binder
    from readiness.outputs.binder_review_view import review_json, review_text

    say("opening the binder")
    found = review_binder(open_binder(path), quick=quick, say=say)
    text = review_json(found, str(path)) if as_json else review_text(found, str(path), width)
    return Answer(text, NOTHING_OPEN if found.outcome == AGREES else OPEN)


def _review_folder(path: Path, as_of: date, as_json: bool, width: int, page: Path | None) -> Answer:
    from readiness.assessment.completeness import completeness
    from readiness.assessment.evidence import evidence_register
    from readiness.errors import ProgramProblems
    from readiness.outputs.completeness_view import completeness_json, completeness_page, completeness_text
    from readiness.outputs.making import assessed
    from readiness.program.reading import read_folder

    try:
        program = read_folder(path)
        assessment = assessed(program, as_of)
    except ProgramProblems as wrong:
        return _problems(wrong.problems, as_json)
    found = completeness(program, assessment, evidence_register(program, assessment, as_of))
    invented = assessment.invented
    if as_json:
        text = completeness_json(found, invented=invented)
    else:
        text = completeness_text(found, str(path), width)
    notes = _page_written(page, lambda: completeness_page(found, invented=invented))
    return Answer(text, NOTHING_OPEN if found.is_complete else OPEN, notes)


def compare(
    first: Path, second: Path, *, as_of: date, as_json: bool, width: int, page: Path | None = None
) -> Answer:
    """Say what differs between two folders, assessments or binders."""
    from readiness.assessment.difference import difference
    from readiness.outputs.difference_view import difference_json, difference_page, difference_text

    found = difference(_any_assessment(first, as_of), _any_assessment(second, as_of))
    names = str(first), str(second)
    text = difference_json(found) if as_json else difference_text(found, *names, width)
    notes = _page_written(page, lambda: difference_page(found, *names))
    return Answer(text, NOTHING_OPEN if found.is_none else OPEN, notes)


def _page_written(path: Path | None, make: Callable[[], bytes]) -> tuple[str, ...]:
    from readiness.outputs.folder import write_one

    if path is None:
        return ()
    write_one(path, make())
    return (f"written to {path}",)


def _any_assessment(path: Path, as_of: date):  # type: ignore[no-untyped-def]
    from readiness.outputs.binder_reading import assessment_in
    from readiness.outputs.contract import from_json

    if path.is_dir():
        return _assessed_or_none(path, as_of)
    if not path.exists():
        raise UsageError(f"{path} does not exist; name a program folder, an assessment.json or a binder.pdf")
    with path.open("rb") as stream:
        is_pdf = stream.read(5) == b"%PDF-"
    if is_pdf:
        return assessment_in(path)
    return from_json(path.read_text(encoding="utf-8", errors="replace"))


def approve(folder: Path, number: str, *, role: str, name: str, as_of: date) -> Answer:
    """Record that a person in a role approves the body of a document as it is on a day."""
    from readiness.outputs.approval import approval_entry
    from readiness.outputs.documents import render_bodies
    from readiness.program.appending import append_entry
    from readiness.program.reading import read_folder

    assessment = _assessed_or_none(folder, as_of)
    assert assessment is not None  # noqa: S101 - a folder was given
    program = read_folder(folder)
    bodies = render_bodies(assessment, program.texts, {})
    earlier = [
        (str(item.get("revision")), str(item.get("body_sha256")))
        for item in program.of_kind("approval")
        if item.get("document") == number
    ]
    entry = approval_entry(assessment, bodies, earlier, number, role=role, name=name, as_of=as_of)
    append_entry(folder / "approvals.yaml", "approvals", entry)
    text = (
        f"Document {number} approved by {name}, {role}, on {as_of.isoformat()}; written to approvals.yaml.\n"
        "This is a record of approval, not a signature. A change of the document's body voids it.\n"
    )
    return Answer(text, NOTHING_OPEN)


def _assessed_or_none(folder: Path | None, as_of: date):  # type: ignore[no-untyped-def]
    from readiness.errors import ProgramProblems
    from readiness.outputs.making import assessed
    from readiness.program.reading import read_folder

    if folder is None:
        return None
    try:
        return assessed(read_folder(folder), as_of)
    except ProgramProblems as found:
        listed = "\n".join(str(problem) for problem in found.problems)
        raise UsageError(f"{listed}\nthe folder cannot be used as it is; mend the problems above") from found
