"""The command line: the only module that prints, exits or asks for today's date."""

import contextlib
import gc
import os
import shutil
import sys
import traceback
from collections.abc import Callable
from datetime import date
from pathlib import Path
from typing import Any

import click

from readiness import __version__, commands
from readiness.errors import CatalogueError, UsageError

_FOLDER = click.Path(path_type=Path)
_CAUTION = (
    "A planning aid. A qualified medical physicist must confirm every number by measurement; local "
    "regulation and licensed practice come first."
)


class _Day(click.ParamType[date]):
    """A date as year-month-day."""

    name = "YYYY-MM-DD"

    def convert(self, value: Any, param: click.Parameter | None, ctx: click.Context | None) -> date:
        """Return the date, or fail with what was expected."""
        if isinstance(value, date):
            return value
        try:
            return date.fromisoformat(value)
        except ValueError:
            self.fail(f"{value!r} is not a date; write it as year-month-day, such as 2026-12-01", param, ctx)


def _as_of(command: Callable[..., None]) -> Callable[..., None]:
    return click.option(
        "--as-of", type=_Day(), default=None, help="Day of the assessment; today if left out."
    )(command)


def _json(command: Callable[..., None]) -> Callable[..., None]:
    return click.option("--json", "as_json", is_flag=True, help="Answer as JSON, for programs.")(command)


def _page(command: Callable[..., None]) -> Callable[..., None]:
    return click.option("--page", type=_FOLDER, help="Write a page (HTML) to this new file too.")(command)


def _day(as_of: date | None) -> date:
    return as_of or date.today()


def _width() -> int:
    return max(40, min(shutil.get_terminal_size((100, 24)).columns, 110))


def _progress(text: str) -> None:
    if sys.stderr.isatty():
        click.echo(f"... {text}", err=True)


def _finish(answer: commands.Answer) -> None:
    for problem in answer.problems:
        click.echo(problem, err=True)
    click.echo(answer.text, nl=False)
    sys.stdout.flush()
    raise SystemExit(answer.status)


@click.group(
    context_settings={"help_option_names": ["-h", "--help"], "max_content_width": 100},
    epilog=f"{_CAUTION}\n\nStart with: readiness new my_program",
)
@click.version_option(__version__, prog_name="readiness")
def readiness() -> None:
    """Find out whether a department can treat with total skin electrons, and prove that it is ready."""


@readiness.command(epilog="Example: readiness new my_program")
@click.argument("folder", type=_FOLDER)
def new(folder: Path) -> None:
    """Write a commented starter into a new or empty FOLDER."""
    _finish(commands.new(folder))


@readiness.command(epilog="Example: readiness check sample_program")
@click.argument("folder", type=_FOLDER)
@_json
def check(folder: Path, as_json: bool) -> None:
    """List every problem of FOLDER with file, line and column."""
    _finish(commands.check(folder, as_json=as_json))


@readiness.command(epilog="Example: readiness assess sample_program --as-of 2026-12-01")
@click.argument("folder", type=_FOLDER)
@_as_of
@_json
def assess(folder: Path, as_of: date | None, as_json: bool) -> None:
    """Say whether FOLDER's program is feasible, in which room, and what is missing."""
    _finish(commands.assess(folder, as_of=_day(as_of), as_json=as_json, width=_width()))


@readiness.command(epilog="Example: readiness binder sample_program --out out --as-of 2026-12-01")
@click.argument("folder", type=_FOLDER)
@click.option("--out", type=_FOLDER, required=True, help="Folder to write into; replaced if it is ours.")
@click.option("--no-cache", is_flag=True, help="Lay out every page, also those printed before.")
@_as_of
def binder(folder: Path, out: Path, no_cache: bool, as_of: date | None) -> None:
    """
    Write the binder, report page, gap list and assessment of FOLDER.

    The page says what would be with another plane distance, beam or number of patients: a whole assessment
    each, made in advance.
    """
    day = _day(as_of)
    _finish(
        commands.binder(folder, out, as_of=day, width=_width(), say=_progress, use_cache=not no_cache)
    )


@readiness.command(epilog="Example: readiness rules plane-distance sample_program")
@click.argument("rule", required=False)
@click.argument("folder", type=_FOLDER, required=False)
@click.option("--topic", help="Only rules whose topic contains this text.")
@click.option("--strength", type=click.Choice(["must", "should", "consider"]), help="Only this strength.")
@_as_of
@_json
def rules(
    rule: str | None, folder: Path | None, topic: str | None, strength: str | None, as_of: date | None,
    as_json: bool,
) -> None:  # fmt: skip
    """List the rules, or show one RULE whole, with FOLDER's own value."""
    _finish(
        commands.rules(
            rule, folder, as_of=_day(as_of), as_json=as_json, width=_width(), topic=topic, strength=strength
        )
    )


@readiness.command(epilog="Example: readiness explain arrangement.farthest_plane_distance_cm sample_program")
@click.argument("value")
@click.argument("folder", type=_FOLDER)
@click.option("--item", help="Id of the item, if not the chosen arrangement's.")
@click.option(
    "--depth", type=click.IntRange(0, 12), default=3, show_default=True, help="Levels of inputs under it."
)
@_as_of
def explain(value: str, folder: Path, item: str | None, depth: int, as_of: date | None) -> None:
    """Show how VALUE was found in FOLDER: formula, inputs with their places, sources, basis."""
    _finish(commands.explain(value, folder, item=item, as_of=_day(as_of), width=_width(), depth=depth))


@readiness.command(
    epilog="Example: readiness approve my_program 3.2 --role 'chief physicist' --name 'A. Person'"
)
@click.argument("folder", type=_FOLDER)
@click.argument("document")
@click.option("--role", required=True, help="Role in which the person approves.")
@click.option("--name", required=True, help="Name as the person writes it.")
@_as_of
def approve(folder: Path, document: str, role: str, name: str, as_of: date | None) -> None:
    """Record an approval of DOCUMENT in FOLDER; a record, not a signature."""
    _finish(commands.approve(folder, document, role=role, name=name, as_of=_day(as_of)))


@readiness.command(epilog="Example: readiness review out/binder.pdf")
@click.argument("path", type=_FOLDER)
@_as_of
@click.option("--quick", is_flag=True, help="Of a binder, do not lay its pages out again.")
@_page
@_json
def review(path: Path, as_of: date | None, quick: bool, page: Path | None, as_json: bool) -> None:
    """
    Review PATH, a program folder or a binder.

    Of a folder: is it complete, and what to look at first. Of a binder, a PDF that this tool wrote: is it as
    it was written, and does it agree with the inputs inside it.
    """
    _finish(
        commands.review(
            path, as_of=_day(as_of), as_json=as_json, width=_width(), say=_progress, page=page, quick=quick
        )
    )


@readiness.command(epilog="Example: readiness compare last_year/binder.pdf my_program")
@click.argument("first", type=_FOLDER)
@click.argument("second", type=_FOLDER)
@_as_of
@_page
@_json
def compare(first: Path, second: Path, as_of: date | None, page: Path | None, as_json: bool) -> None:
    """Say what differs from FIRST to SECOND: folders, assessment.json files or binders."""
    day = _day(as_of)
    _finish(commands.compare(first, second, as_of=day, as_json=as_json, width=_width(), page=page))


def _fail(message: str, status: int) -> int:
    with contextlib.suppress(OSError):
        click.echo(message, err=True)
    return status


def _silence() -> None:
    """Point standard output at nothing, so that Python's own flush at exit cannot fail again."""
    os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())


def run(arguments: list[str] | None = None) -> int:
    """Run one command and return its exit status; the one place where anything that went wrong ends."""
    for stream in (sys.stdout, sys.stderr):
        if hasattr(stream, "reconfigure"):
            stream.reconfigure(errors="replace")
    try:
        readiness.main(arguments, prog_name="readiness", standalone_mode=False)
    except SystemExit as end:
        return int(end.code or 0)
    except click.ClickException as wrong:
        wrong.show()
        return commands.WRONG
    except click.exceptions.Exit as end:
        return end.exit_code
    except click.Abort:
        return _fail("stopped", commands.WRONG)
    except UsageError as wrong:
        return _fail(str(wrong), commands.WRONG)
    except BrokenPipeError:
        _silence()
        return commands.WRONG
    except OSError as wrong:
        _silence()
        name = f"{wrong.filename}: " if wrong.filename else ""
        return _fail(f"{name}{wrong.strerror or wrong}; nothing half-written was left", commands.WRONG)
    except CatalogueError as defect:
        return _fail(f"defect of this tool: {defect}", commands.OUR_DEFECT)
    except Exception:  # the boundary: anything else is our own defect and must not look like an answer
        return _fail(f"{traceback.format_exc()}\nThis is a defect of this tool, not of your input.",
                     commands.OUR_DEFECT)  # fmt: skip
    return commands.NOTHING_OPEN


def main() -> None:
    """Start the program; a run is short and holds what it makes, so that looking for garbage is time lost."""
    gc.disable()
    raise SystemExit(run())
