"""Finds the files that ship with the program: schemas/ and templates/."""

from functools import cache
from pathlib import Path

PACKAGE = Path(__file__).resolve().parent


@cache
def folder(name: str) -> Path:
    """
    Return the shipped folder ``schemas`` or ``templates``.

    In a wheel they lie inside the package, in a checkout beside it.
    """
    for parent in (PACKAGE, PACKAGE.parent):
        candidate = parent / name
        if candidate.is_dir():
            return candidate
    raise FileNotFoundError(f"the installation is incomplete: folder {name!r} is missing")


def schema_file(*parts: str) -> Path:
    """Return the path of one file under schemas/."""
    return folder("schemas").joinpath(*parts)


def template_file(*parts: str) -> Path:
    """Return the path of one file under templates/."""
    return folder("templates").joinpath(*parts)
