"""
What is wrong where a YAML file cannot be read, in the words of somebody who only meant to fill in a form.

The library says where it stopped; what was meant is judged from the lines of the file, so that both of its
parsers lead to the same message.
"""

import re
from collections.abc import Callable

from readiness.errors import Place, Problem
from readiness.program.wording import character_name, shown
from readiness.program.yaml_fault import Fault
from readiness.program.yaml_traps import WIDE_SPACES, Written, missing_space, position

_NO_CHARACTER = re.compile(  # escapes for half characters and for numbers past the last character
    r"\\[uU](?:0000)?[dD][89a-fA-F][0-9a-fA-F]{2}|\\U(?!000|0010)[0-9a-fA-F]{8}"
)

_EQUALS = re.compile(r"\s*(?:- +)*([A-Za-z_][\w-]*) *= *(\S.*)")

Found = tuple[int, int, str]  # line and column from 0, message


def explain(name: str, lines: list[str], error: Exception, last: Written | None) -> Problem:
    """
    Return the problem behind an error of the library.

    Args:
        name: Name of the file.
        lines: Its lines.
        error: What the library raised.
        last: The last entry that was read without fault.
    """
    mark = getattr(error, "problem_mark", None) or getattr(error, "context_mark", None)
    if mark is None:
        return _without_mark(name, lines)
    begun = getattr(error, "context_mark", None)
    fault = Fault(
        lines=lines,
        line=mark.line,
        column=mark.column,
        begun=None if begun is None else position(begun),
        context=str(getattr(error, "context", "") or ""),
        problem=str(getattr(error, "problem", "") or ""),
        last=last,
    )
    line, column, message = next(found for found in (look(fault) for look in _LOOKS) if found)
    return Problem(Place(name, min(line, len(lines) - 1) + 1, column + 1), message, "syntax")


def _without_mark(name: str, lines: list[str]) -> Problem:
    for number, line in enumerate(lines, 1):
        if match := _NO_CHARACTER.search(line):
            return Problem(Place(name, number, match.start() + 1), _escape_message(match[0]), "syntax")
    return Problem(
        Place(name), "the file cannot be read as YAML; save it again as plain UTF-8 text", "syntax"
    )


def _tab(fault: Fault) -> Found | None:
    first = min(fault.line, fault.begun[0]) if fault.begun else fault.line
    numbers = [n for n in range(first, fault.line + 1) if re.match(r"[ -]*\t", fault.text(n))]
    if fault.says("quoted scalar") or not numbers:
        return None
    after = sum(1 for line in fault.lines[numbers[0] + 1 :] if re.match(r" *\t\s*\S", line))
    more = f" (so do {after} more lines)" if after > 1 else " (so does one more line)" if after else ""
    column = fault.text(numbers[0]).index("\t")
    return numbers[0], column, f"this line is indented with a tab; use spaces{more}"


def _wide_space(fault: Fault) -> Found | None:
    for number in (fault.line, fault.line - 1, fault.begun[0] if fault.begun else -1):
        match = re.search(rf"^[ -]*[{WIDE_SPACES}]|:[{WIDE_SPACES}]", fault.text(number))
        if match:
            column = match.end() - 1
            called = character_name(fault.text(number)[column])
            return (
                number,
                column,
                f"this space is not an ordinary one ({called}); write it again with the space bar",
            )
    return None


def _too_deep(fault: Fault) -> Found | None:
    if not fault.says("depth"):
        return None
    return (
        fault.line,
        fault.column,
        "entries stand too many levels inside each other; nothing here goes so deep",
    )


def _escape(fault: Fault) -> Found | None:
    if not fault.says("escape", "hexdecimal", "hexadecimal"):
        return None
    column = fault.text().rfind("\\", 0, fault.column + 1)
    if column < 0:
        return None
    written = re.match(r"\\(?:U\w{0,8}|u\w{0,4}|x\w{0,2}|.)?", fault.text()[column:])
    return fault.line, column, _escape_message(written[0] if written else "\\")


def _escape_message(written: str) -> str:
    return f"{shown(written)} means nothing inside double quotes; use single quotes or double the backslash"


def _open_quote(fault: Fault) -> Found | None:
    if fault.begun and fault.says("quoted scalar", "double-quoted", "single-quoted"):
        return *fault.begun, "the quotation mark that opens here is never closed"
    return None


def _after_quote(fault: Fault) -> Found | None:
    last = fault.last
    if last is None or last.style not in {"'", '"'} or fault.at_end:
        return None
    line, column = last.ended
    if line != fault.line or fault.text()[column : fault.column].strip():
        return None
    if last.begun[0] != line:
        message = f"the quotation mark that opens here is closed only in line {line + 1}"
        return *last.begun, message + "; close it where the text ends"
    if last.style == "'":
        message = (
            "text goes on after the closing quotation mark; put texts with an apostrophe in double quotes"
        )
    else:
        message = 'text goes on after the closing quotation mark; quote the whole text, inner marks as \\"'
    return fault.line, fault.column, message


def _brackets(fault: Fault) -> Found | None:
    if not fault.says("flow sequence", "flow mapping", "flow node"):
        return None
    line, column = fault.begun or (fault.line, fault.column)
    if fault.at_end:
        line, column = fault.last_opening() or (line, column)
    opening = fault.text(line)[column : column + 1]
    closing = {"[": "]", "{": "}"}.get(opening)
    if closing is None:
        return None
    if fault.at_end:
        return line, column, f'"{opening}" opens here and is never closed with "{closing}"'
    where = f"before line {fault.line + 1}, column {fault.column + 1}"
    return line, column, f'after "{opening}" a comma or the closing "{closing}" is missing {where}'


def _starting_character(fault: Fault) -> Found | None:
    starts = {"tag": "!", "anchor": "&", "alias": "*", "block scalar": ">|"}
    for construct, characters in starts.items():
        if fault.begun and fault.says("parsing a " + construct, "scanning a " + construct, "an " + construct):
            line, column = fault.begun
            written = fault.text(line)[column : column + 1]
            if written and written in characters:
                return line, column, f'put a text that begins with "{written}" in quotes'
    if fault.character == "\t":
        return fault.line, fault.column, "a tab stands here; use spaces"
    if fault.character and fault.says("cannot start any token"):
        return fault.line, fault.column, f'put a text that begins with "{fault.character}" in quotes'
    if fault.character in {"]", "}", ",", ":"} and fault.says("node content"):
        return (
            fault.line,
            fault.column,
            f'"{fault.character}" is not expected here; put the text in quotes if it is one',
        )
    if fault.text()[:1] == "%":
        return fault.line, 0, 'lines that begin with "%" are not read; delete it'
    return None


def _second_colon(fault: Fault) -> Found | None:
    if not fault.says("mapping values are not allowed"):
        return None
    before = re.sub(r"^[ -]*", "", fault.before)
    if re.search(r"\S:\s", before):
        return (
            fault.line,
            fault.column,
            "a second colon stands in this line; put the text after the first in quotes",
        )
    return (
        _indentation(fault) if before else (fault.line, fault.column, "the name before the colon is missing")
    )


def _no_colon(fault: Fault) -> Found | None:
    if not fault.says("could not find expected ':'") or not fault.begun:
        return None
    return _line_without_colon(fault.text(fault.begun[0]), *fault.begun)


def _line_without_colon(text: str, line: int, column: int) -> Found:
    written = text[column:].strip()
    if slip := missing_space(text):
        return line, column, slip
    if match := _EQUALS.fullmatch(text):
        return line, column, f'write a colon instead of "=": "{match[1]}: {shown(match[2])[1:-1]}"'
    if "：" in written:
        return line, text.index("："), 'this colon is not the ordinary one; write ":" and a space'
    if match := re.match(r"[^\s#][^#]*?(\s#).*:", written):
        message = '" #" begins a comment and cuts the name before the colon; put the name in quotes'
        return line, column + match.start(1), message
    message = (
        f'{shown(written)} has no colon; write "name: value", or indent it if it belongs to the line above'
    )
    return line, column, message


def _list_in_line(fault: Fault) -> Found | None:
    if not fault.says("sequence entries are not allowed"):
        return None
    if fault.before.strip():
        return fault.line, fault.column, 'a list begins on a line of its own: move "- " to the next line'
    return _indentation(fault)


def _cut_text(fault: Fault) -> Found | None:
    """Return the comment that cuts a text in two, if the line before the fault holds one."""
    above = fault.line_above()
    match = re.match(r"(\s*)#|.*?\S(\s+)#", fault.text(above)) if above is not None else None
    last = fault.last
    if above is None or match is None or last is None or last.style or not last.text:
        return None
    if last.ended[0] < above - 1 or re.match(r"[\w\"'-]+:(\s|$)|- ", fault.rest):
        return None
    message = "a comment stands inside a text that goes on below; move it, or quote the text"
    return above, match.end() - 1, message


def _indentation(fault: Fault) -> Found:
    indent, above = fault.indent(), fault.line_above()
    entry = fault.text()[indent:]
    if entry.startswith(":"):
        return fault.line, indent, "the name before the colon is missing"
    if above is not None:
        begins = len(fault.text(above)) - len(fault.text(above).lstrip(" -"))
        has_colon = re.search(r":(\s|$)", fault.text(above))
        if missing_space(fault.text(above)) or (begins == indent and not has_colon):
            return _line_without_colon(fault.text(above), above, begins)
        if indent > begins and not fault.says("block collection", "block sequence", "'-' indicator"):
            message = "this line is indented farther than the line above it, which already has a value"
            return fault.line, indent, message
    if entry.startswith("- ") and fault.says("block mapping"):
        message = (
            'a list entry "- " stands where a name with a colon is expected; check how far it is indented'
        )
    elif fault.says("block collection", "block sequence", "'-' indicator"):
        message = 'a list entry "- " is expected here; check how far this line is indented'
    else:
        message = "this line is indented unlike the entries above it; begin it below one of them"
    return fault.line, indent, message


def _anything(fault: Fault) -> Found:
    if fault.says("document start"):
        return fault.line, fault.column, "text stands after the end of what the file holds; delete it"
    if fault.before.strip() and not fault.says("block mapping", "block collection"):
        return (
            fault.line,
            fault.column,
            "the line cannot be read from here on; check colons and quotation marks",
        )
    return _indentation(fault)


_LOOKS: tuple[Callable[[Fault], Found | None], ...] = (
    _too_deep,
    _escape,
    _tab,
    _wide_space,
    _open_quote,
    _after_quote,
    _brackets,
    _starting_character,
    _second_colon,
    _no_colon,
    _list_in_line,
    _cut_text,
    _anything,
)
