"""
Text of a YAML file becomes located nodes; nothing is typed here.

The library's events are read one by one, so that size, depth and repetition are bounded before a tree exists;
its rules for numbers, dates and yes/no are never used.
"""

import re
from collections.abc import Iterator

import yaml

from readiness.errors import Place, Problem
from readiness.program.decoding import decode, first_problems, lines_of, refusal, refused_characters
from readiness.program.nodes import Mapping, Node, Scalar, Sequence
from readiness.program.wording import shown
from readiness.program.yaml_syntax import explain
from readiness.program.yaml_traps import Written, missing_space, position, traps

LOADER = getattr(yaml, "CSafeLoader", yaml.SafeLoader)  # the C parser where it is installed
DEEPEST = 20
MOST_NODES = 200_000

_QUOTE = 'put the text in quotes if it begins with "{}"'


def parse_yaml(name: str, content: bytes) -> tuple[Node | None, list[Problem]]:
    """
    Return the nodes of a YAML file and everything that is wrong with its text.

    Args:
        name: Name of the file in the program folder.
        content: Its bytes.

    Returns:
        A mapping, or None if nothing can be made of the file; what was doubtful is left out of it. It is
        complete only when there are no problems.
    """
    text, problems = decode(name, content)
    if text is None:
        return None, problems
    if not text.strip():
        return None, [*problems, Problem(Place(name), "the file is empty; fill it or delete it", "empty")]
    builder = _Builder(name, text, problems)
    root = builder.build()
    return root, first_problems(builder.problems)


class _StopError(Exception):
    """Nothing after this place can be trusted."""


class _Open:
    """A list or mapping whose end has not been read yet."""

    def __init__(self, place: Place, is_mapping: bool) -> None:
        self.place = place
        self.is_mapping = is_mapping
        self.entries: list[Node | None] = []
        self.pairs: dict[str, tuple[Scalar, Node | None]] = {}
        self.key: Scalar | None = None
        self.key_next = is_mapping

    def closed(self) -> Node:
        """Return the finished node, without the entries that could not be read."""
        if self.is_mapping:
            kept = tuple((key, node) for key, node in self.pairs.values() if node is not None)
            return Mapping(kept, self.place)
        return Sequence(tuple(node for node in self.entries if node is not None), self.place)


class _Builder:
    """Takes the events of one file and keeps the open lists and mappings in a stack of its own."""

    def __init__(self, name: str, text: str, problems: list[Problem]) -> None:
        self.name = name
        self.text = text
        self.lines = lines_of(text)
        self.problems = problems
        self.stack: list[_Open] = []
        self.root: Node | None = None
        self.documents = 0
        self.nodes = 0
        self.last: Written | None = None

    def build(self) -> Node | None:
        """Return the root mapping, or None."""
        try:
            for event in self._events():
                self._take(event)
        except _StopError:
            return None
        except (yaml.YAMLError, ValueError, OverflowError, RecursionError) as error:
            stop = explain(self.name, self.lines, error, self.last)
            if not any(problem.place == stop.place for problem in self.problems):
                self.problems.append(stop)
            return None
        if self.documents == 0 or self.root == Scalar("", getattr(self.root, "place", Place(""))):
            return Mapping((), Place(self.name, 1, 1))
        if self.root is not None and not isinstance(self.root, Mapping):
            self._note(self.root.place, self._not_keys(self.root), "syntax")
            return None
        return self.root

    def _events(self) -> Iterator[yaml.Event]:
        yield from yaml.parse(self.text, Loader=LOADER)

    def _take(self, event: yaml.Event) -> None:
        if isinstance(event, yaml.ScalarEvent):
            self._scalar(event)
        elif isinstance(event, yaml.CollectionStartEvent):
            self._opened(event)
        elif isinstance(event, yaml.CollectionEndEvent):
            ended = self.stack.pop()
            self._add(ended.closed())
        elif isinstance(event, yaml.AliasEvent):
            reason = (
                "repeating an entry (*) is refused, so that each entry shows its own value: write it out, or "
            )
            self._note(self._place(event), reason + _QUOTE.format("*"), "alias")
            self._count(event)
            self._add(None)
        elif isinstance(event, yaml.DocumentStartEvent):
            self._document(event)

    def _document(self, event: yaml.DocumentStartEvent) -> None:
        self.documents += 1
        if event.version or event.tags:
            line = next((number for number, line in enumerate(self.lines, 1) if line[:1] == "%"), 1)
            self._note(
                Place(self.name, line, 1), 'lines that begin with "%" are not read; delete it', "syntax"
            )
            raise _StopError
        if self.documents > 1:
            message = 'a second document begins here; keep one in a file and delete the line "---"'
            self._note(self._place(event), message, "syntax")
            raise _StopError

    def _opened(self, event: yaml.CollectionStartEvent) -> None:
        self._count(event)
        self._check_marks(event)
        place = self._place(event)
        if len(self.stack) >= DEEPEST:
            message = f"entries stand more than {DEEPEST} levels inside each other; nothing here goes so deep"
            self._note(place, message, "size")
            raise _StopError
        self.stack.append(_Open(place, isinstance(event, yaml.MappingStartEvent)))

    def _scalar(self, event: yaml.ScalarEvent) -> None:
        self._count(event)
        self._check_marks(event)
        self.last = written = Written.of(event)
        place = self._place(event)
        if written.style:
            self._escaped(event.value, place)
        elif trap := traps(self.lines, written):
            line, column, message, kind = trap
            self._note(Place(self.name, line + 1, column + 1), message, kind)
        self._add(Scalar(event.value, place, bool(written.style)))

    def _escaped(self, text: str, place: Place) -> None:
        """Refuse characters that were written as an escape, like "\\u202e"."""
        for character in refused_characters(text):
            if "\ud800" <= character <= "\udfff":
                raise ValueError("half of a character")
            self._note(place, refusal(character), "character")

    def _add(self, node: Node | None) -> None:
        if not self.stack:
            self.root = node
            return
        parent = self.stack[-1]
        if not parent.is_mapping:
            parent.entries.append(node)
        elif parent.key_next:
            parent.key = self._key(node, parent)
            parent.key_next = False
        else:
            if parent.key is not None:
                parent.pairs[parent.key.text] = (parent.key, node)
            parent.key_next = True

    def _key(self, node: Node | None, parent: _Open) -> Scalar | None:
        """Return a key that can be used, or None so that its value is dropped."""
        if node is None:
            return None
        if not isinstance(node, Scalar):
            message = "a list or braces cannot be the name of an entry; put the text in quotes if it is one"
            self._note(node.place, message, "syntax")
            return None
        if not node.text:
            self._note(node.place, "the name before the colon is missing", "syntax")
            return None
        if node.text == "<<" and not node.quoted:
            message = 'taking over entries with "<<" is refused: write them out, so that each shows its value'
            self._note(node.place, message, "alias")
            return None
        if not node.quoted and (slip := missing_space(node.text)):
            self._note(node.place, slip, "syntax")
            return None
        if node.text in parent.pairs:
            first = parent.pairs[node.text][0].place
            message = (
                f"{shown(node.text)} is written twice, first in line {first.line}, column {first.column}"
            )
            self._note(node.place, message + "; keep one", "duplicate")
            return None
        return node

    def _check_marks(self, event: yaml.NodeEvent) -> None:
        if event.anchor is not None:
            reason = "naming an entry (&) to repeat it is refused; write it out where it is needed, or "
            self._note(self._place(event), reason + _QUOTE.format("&"), "alias")
        tag = getattr(event, "tag", None)
        if tag is not None:
            reason = "types (!) are refused, because the field says what it holds: delete it, or "
            self._note(self._place(event), reason + _QUOTE.format("!"), "tag")

    def _count(self, event: yaml.Event) -> None:
        self.nodes += 1
        if self.nodes > MOST_NODES:
            self._note(self._place(event), f"the file holds more than {MOST_NODES:,} entries", "size")
            raise _StopError

    def _not_keys(self, root: Node) -> str:
        if isinstance(root, Sequence):
            return 'the file must begin with a name and a colon, as in "rooms:", and its list stands under it'
        text = root.text if isinstance(root, Scalar) else ""
        if match := re.match(r"([\w-]{1,40})(:|\s*=\s*)\S", text):
            return f'a colon and a space are missing: write "{match[1]}: …"'
        return f'the file must hold lines "name: value", not only {shown(text)}'

    def _place(self, event: yaml.Event) -> Place:
        line, column = position(event.start_mark)
        return Place(self.name, line + 1, column + 1)

    def _note(self, place: Place, message: str, kind: str) -> None:
        self.problems.append(Problem(place, message, kind))
