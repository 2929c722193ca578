"""How a value was found: formula, inputs with their places, sources, basis, uncertainty."""

import difflib
import textwrap
from collections.abc import Callable

from readiness.assessment.catalogue import catalogue
from readiness.assessment.records import Assessment, Ref, Value
from readiness.errors import UsageError
from readiness.outputs.contract import CAUTION
from readiness.outputs.words import chosen_row, with_unit
from readiness.quantities import Table
from readiness.sources import HOW_KNOWN
from readiness.units import printed, unit_of, words_of

DEEPEST, USUAL, SHALLOW = 12, 3, 1  # levels of inputs under a value
_MOST_ROWS = 40
WhyAbsent = Callable[[str, Ref | None], tuple[str, ...]]
_CUT = "... not opened:"


def explain_value(
    name: str, assessment: Assessment, item: str | None, width: int, why_absent: WhyAbsent, depth: int = USUAL
) -> str:
    """
    Return a value with its descent, so many levels of inputs deep.

    Args:
        name: Name of the value.
        assessment: Where it is looked for.
        item: Id of the item whose value is wanted; None for the chosen arrangement's, or of all items.
        width: Of the lines.
        why_absent: Says for a name and an item, None for all of its kind, why the value is not known.
        depth: Levels of inputs.

    Raises:
        UsageError: If there is no such value, with the nearest name.
    """
    known = catalogue()
    if not known.has(name):
        close = difflib.get_close_matches(name, known.names(), n=3, cutoff=0.5)
        hint = f"; did you mean {' or '.join(close)}?" if close else ""
        raise UsageError(f"there is no value {name}{hint}")
    found = _values(name, assessment, item)
    lines = [name, textwrap.fill(known.meaning(name), width), ""]
    if not found:
        lines += [_not_known(why_absent(name, _asked(name, assessment, item)), width), ""]
    for value in found:
        lines += lines_of_value(value, assessment, width, depth)
        lines.append("")
    if any(_CUT in line for line in lines):
        lines.append("More levels: --depth N, or explain the value that is not opened.")
    lines.append(textwrap.fill(CAUTION, width))
    return "\n".join(lines) + "\n"


def _values(name: str, assessment: Assessment, item: str | None) -> list[Value]:
    named = [value for value in assessment.values if value.name == name]
    if item is not None:
        named = [value for value in named if value.item.id == item]
    row = chosen_row(assessment)
    if item is None and row is not None and name.startswith("arrangement."):
        named = [value for value in named if value.item == row.item]
    return named


def _asked(name: str, assessment: Assessment, item: str | None) -> Ref | None:
    kind = name.partition(".")[0]
    row = chosen_row(assessment)
    if item is None:
        return row.item if row is not None and kind == "arrangement" else None
    return Ref(kind, item)


def _not_known(causes: tuple[str, ...], width: int) -> str:
    text = "Not known. " + (" ".join(map(_sentence, causes)) or "Nothing that it describes is in the folder.")
    return textwrap.fill(text, width)


def _sentence(cause: str) -> str:
    return cause[:1].upper() + cause[1:].removesuffix(".") + "."


def lines_of_value(value: Value, assessment: Assessment, width: int, depth: int = SHALLOW) -> list[str]:
    """Return a value and what it was worked out from, indented by level, each once, so many levels deep."""
    known = {(each.name, each.item): each for each in assessment.values}
    lines: list[str] = []
    _add(value, known, lines, set(), width, 0, depth)
    return lines


def _add(
    value: Value, known: dict[tuple[str, Ref], Value], lines: list[str], seen: set[tuple[str, Ref]],
    width: int, level: int, depth: int,
) -> None:  # fmt: skip
    indent = "  " * level
    again = (value.name, value.item) in seen
    text = one_line(value) + (" (above)" if again and value.inputs else "")
    if level >= depth and value.inputs and not again:
        text += f" {_CUT} {value.name}"
    lines.append(
        textwrap.fill(text, max(40, width), initial_indent=indent, subsequent_indent=indent + "    ")
    )
    if again or level > depth or (level == depth and value.inputs):
        return
    seen.add((value.name, value.item))
    definition = catalogue().definitions.get(value.name)
    if definition is not None and definition.formula:
        lines.append(f"{indent}    {definition.formula}")
    if isinstance(value.value, Table):
        lines += [f"{indent}    {line}" for line in table_lines(value.value)]
    if value.instead_of is not None:
        lines.append(f"{indent}    instead of {one_line(value.instead_of)}")
    for one in value.inputs:
        source = known.get((one.name, one.item))
        if source is not None:
            _add(source, known, lines, seen, width, level + 1, depth)


def one_line(value: Value) -> str:
    """Return a value with unit, uncertainty, basis, place and source on one line."""
    shown = f"a table of {len(value.value.rows)} rows" if isinstance(value.value, Table) else with_unit(
        value.name, value.value
    )  # fmt: skip
    if value.sd is not None:
        shown += f" +- {printed(value.sd)} {unit_of(value.name)}".rstrip()
    text = f"{words_of(value.name)} of {value.item}: {shown} [{value.basis}"
    if value.where is not None and value.where.file:
        text += f", {value.where}"
    if value.source:
        text += f"; {value.source} ({value.known}: {HOW_KNOWN.get(value.known, value.known)})"
    return text + "]"


def table_lines(table: Table) -> list[str]:
    """Return a table in aligned columns, at most forty rows."""
    heads = [
        f"{words_of(name)} {f'({unit_of(name)})' if unit_of(name) else ''}".strip() for name in table.columns
    ]
    cells = [[_cell(each) for each in row] for row in table.rows[:_MOST_ROWS]]
    widths = [max([len(head), *(len(row[index]) for row in cells)]) for index, head in enumerate(heads)]
    lines = ["  ".join(text.ljust(width) for text, width in zip(row, widths, strict=True)).rstrip()
             for row in [heads, *cells]]  # fmt: skip
    if len(table.rows) > _MOST_ROWS:
        lines.append(f"... and {len(table.rows) - _MOST_ROWS} more rows in assessment.json")
    return lines


def _cell(entry: object) -> str:
    if entry is None:
        return "-"
    if isinstance(entry, bool):
        return "yes" if entry else "no"
    return printed(entry) if isinstance(entry, (int, float)) else str(entry)
