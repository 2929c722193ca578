"""What is named must exist, and nothing may be named twice."""

from collections.abc import Collection, Iterable

from readiness.errors import Place, Problem
from readiness.program.entries import Use
from readiness.program.field_schema import PROGRAM
from readiness.program.fields import Schemas
from readiness.program.items import Item
from readiness.program.wording import near_miss, shown

EVIDENCE = "evidence/"
MOST_NAMES = 8  # longer lists of existing ids are not repeated in a message


def doubled(items: Iterable[Item], schemas: Schemas) -> list[Problem]:
    """Return a problem for each item whose kind and id another one has already."""
    first: dict[tuple[str, str], Place] = {}
    problems = []
    for item in items:
        key = (item.kind, item.id)
        if key in first:
            title = _title(item.kind, schemas)
            message = f"{title} {item.id} is described twice; first at {first[key]}"
            problems.append(Problem(item.place, message, "doubled"))
        first.setdefault(key, item.place)
    return problems


def dangling(
    uses: Iterable[Use],
    items: Iterable[Item],
    known_lists: Collection[tuple[str, str]],
    files: Iterable[str],
    schemas: Schemas,
) -> list[Problem]:
    """
    Return a problem for each name that nothing in the folder has.

    A list that is absent is unknown, so that a name in it can be neither right nor wrong; only a list that is
    present, and so complete, makes a name dangling.

    Args:
        uses: Where ids and files are named.
        items: Everything that is described.
        known_lists: (kind, owner id) of each list that is present.
        files: Names of all files of the folder.
        schemas: All that may be written.
    """
    ids: dict[str, list[str]] = {}
    for item in items:
        ids.setdefault(item.kind, []).append(item.id)
    ids["any"] = [each for named in ids.values() for each in named]
    ids["file"] = [name for name in files if name.startswith(EVIDENCE)]
    described = [use for use in uses if _is_complete(use, known_lists, schemas)]
    return [
        Problem(use.place, _not_there(use, ids.get(use.kind, []), schemas), "reference")
        for use in described
        if use.name not in ids.get(use.kind, [])
    ]


def _is_complete(use: Use, known_lists: Collection[tuple[str, str]], schemas: Schemas) -> bool:
    """Return whether the list in which a name must stand is present."""
    if use.kind in {"any", "file"}:
        return True
    owner, _, _ = use.name.rpartition("/")
    described = schemas.kinds.get(use.kind)
    if not owner and described is not None and described.owner != PROGRAM:  # its owner is not named
        return any(kind == use.kind for kind, _ in known_lists)
    return (use.kind, owner or PROGRAM) in known_lists


def _not_there(use: Use, known: list[str], schemas: Schemas) -> str:
    if use.kind == "file":
        if not use.name.startswith(EVIDENCE) or ".." in use.name.split("/"):
            return f"{use.what} must be a path under {EVIDENCE}, not {shown(use.written)}"
        close = near_miss(use.name, known)
        hint = f": did you mean {close}?" if close else ""
        return f"{use.what}: {shown(use.written)} is not in the folder{hint}"
    title = "item" if use.kind == "any" else _title(use.kind, schemas).lower()
    owner = use.name.removesuffix(f"/{use.written}")
    if owner == use.name:
        return f"{use.what}: there is no {title} {shown(use.written)}{_hint(use.written, known)}"
    beside = [each.removeprefix(f"{owner}/") for each in known if each.startswith(f"{owner}/")]
    return f"{use.what}: there is no {title} {shown(use.written)} of {owner}{_hint(use.written, beside)}"


def _hint(written: str, candidates: list[str]) -> str:
    if not candidates:
        return "; none is described"
    close = near_miss(written, candidates)
    if close is not None:
        return f": did you mean {close}?"
    ending = next((each for each in candidates if each.rsplit("/", 1)[-1] == written), None)
    if ending is not None:
        return f": write {ending}"
    if len(candidates) <= MOST_NAMES:
        return f"; there is {', '.join(candidates)}"
    return ""


def _title(kind: str, schemas: Schemas) -> str:
    described = schemas.kinds.get(kind)
    return described.title if described is not None else kind.capitalize()
