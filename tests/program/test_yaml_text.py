"""A YAML file becomes located text, unchanged, or problems."""

import pytest
import yaml
from hypothesis import given, settings
from hypothesis import strategies as st

from readiness.errors import Place
from readiness.program import yaml_text
from readiness.program.decoding import MOST_PROBLEMS
from readiness.program.nodes import Mapping, Scalar, Sequence
from readiness.program.yaml_text import DEEPEST, parse_yaml


def parse(text: str):
    """Return node and problems of a text."""
    return parse_yaml("rooms.yaml", text.encode("utf-8", "surrogatepass"))


def plain(node):
    """Return nodes as simple lists, pairs and texts."""
    if isinstance(node, Scalar):
        return node.text
    if isinstance(node, Sequence):
        return [plain(entry) for entry in node.entries]
    return {key.text: plain(entry) for key, entry in node.entries}


def test_nodes_stand_at_their_places():
    """Every key, list and entry carries line and column, counted from 1."""
    node, problems = parse("rooms:\n  - id: vault-a\n    floor: [[0, 1]]\n")
    assert [] == problems
    room = node.get("rooms").entries[0]
    assert Place("rooms.yaml", 1, 1) == node.place
    assert Place("rooms.yaml", 2, 3) == node.get("rooms").place
    assert Scalar("vault-a", Place("rooms.yaml", 2, 9)) == room.get("id")
    assert Place("rooms.yaml", 3, 17) == room.get("floor").entries[0].entries[1].place


def test_columns_count_characters():
    """Letters beyond ASCII and a mark at the start of the file do not move a place."""
    node, _ = parse("\ufeffTür: {µ: 1}\n")
    assert Place("rooms.yaml", 1, 10) == node.get("Tür").get("µ").place


def test_scalars_stay_text_as_written():
    """No number, date, yes or no is made out of a text."""
    written = ["1", "1.0", "010", "1_000", "1e3", "12:30", "no", "off", "2026-02-30", ".nan", "~", "null", "0x1F", "9" * 5000]
    node, problems = parse("values:\n" + "".join(f"  - {text}\n" for text in written))
    assert (written, []) == (plain(node.get("values")), problems)


def test_keys_that_equal_each_other_as_numbers_stay_apart():
    """1, 1.0 and true are three keys."""
    node, problems = parse("1: a\n1.0: b\ntrue: c\n")
    assert ({"1": "a", "1.0": "b", "true": "c"}, []) == (plain(node), problems)


@pytest.mark.parametrize(
    ("quoted", "text"), [(False, "a: no"), (True, "a: 'no'"), (True, 'a: "no"'), (True, "a: |\n  no\n"), (True, "a: >\n  no\n")]
)
def test_quotes_are_remembered(quoted, text):
    """A text in quotes, or set off as a passage, is told from a bare word."""
    assert quoted is parse(text)[0].get("a").quoted


def test_nothing_written_differs_from_an_empty_text():
    """A key without value and a key with empty quotes are told apart."""
    node, problems = parse('a:\nb: ""\n')
    assert [("", False), ("", True)] == [(entry.text, entry.quoted) for _, entry in node.entries]
    assert [] == problems


@pytest.mark.parametrize("text", ["# nothing yet\n", "---\n", "---\n# nothing yet\n...\n"])
def test_comments_alone_state_nothing(text):
    """A file with comments only is read as stating nothing."""
    node, problems = parse(text)
    assert ((), []) == (node.entries, problems)


@pytest.mark.parametrize("text", ["", " \n\n", "\ufeff"])
def test_empty_file_is_told(text):
    """A file with nothing in it is told."""
    node, problems = parse(text)
    assert (None, ["the file is empty; fill it or delete it"]) == (node, [problem.message for problem in problems])


@pytest.mark.parametrize("ending", ["\n", "\r\n", "\r"])
def test_line_ends_of_every_system_are_read(ending):
    """The same file is read the same with the line ends of any system."""
    text = "rooms:\n  - id: a\n    note: |\n      one\n      two\n"
    assert parse(text) == parse(text.replace("\n", ending))


@pytest.mark.parametrize(
    "text",
    [
        "a: 350  # measured",
        "a: 350 # 3 m and the stand",
        "a: vault-a   # see rooms.yaml",
        "a: x ## note",
        "a: x #--- note",
        'a: "Room #2" #checked',
        "a: Room#2",
        "a: #\n",
        "a:  # 2 rooms\n  - b",
        "# 2\na: b",
        "a: |\n  Room #2\n",
        "a: [b, c] #fff",
    ],
)
def test_comments_that_cut_nothing_are_welcome(text):
    """A comment set off by a space, or after quotes, is no problem."""
    assert [] == parse(text)[1]


@pytest.mark.parametrize("text", ["a: Room #2", "a: Room # 2", "a: bay # 12b", "a: #fff", "- x #2", "a: [Room #2\n  , b]", "a: 3 #old"])
def test_comment_that_cuts_a_text_is_told(text):
    """A sign followed at once by text, or by a number alone, looks like part of the entry."""
    text = text if text[0] == "a" else f"a:\n  {text}"
    assert ["comment"] == [problem.kind for problem in parse(text)[1]]


@pytest.mark.parametrize("text", ["a: the door\n  opens left\n", "see: http://example.org", "a: b:2", "a: 12:30"])
def test_harmless_colons_and_lines_are_read(text):
    """Texts over two lines, addresses and times of day are no problem."""
    assert [] == parse(text)[1]


def test_duplicate_keeps_the_first_and_names_both_places():
    """A key written twice is one problem at the second, which names the first; the first is kept."""
    node, problems = parse("rooms:\n  - id: a\n    id: b\n")
    expected = 'rooms.yaml:3:5: "id" is written twice, first in line 2, column 5; keep one [duplicate]'
    assert ([expected], {"rooms": [{"id": "a"}]}) == ([str(problem) for problem in problems], plain(node))


def test_what_is_refused_is_left_out():
    """An entry that stands for another is absent, not empty."""
    node, problems = parse("a: &x 1\nb: *x\nc: 2\n")
    assert ({"a": "1", "c": "2"}, ["alias", "alias"]) == (plain(node), [problem.kind for problem in problems])


def test_depth_up_to_the_limit_is_read():
    """The deepest structure that is read, and one level more."""
    inside = DEEPEST - 1
    assert [] == parse("a: " + "[" * inside + "]" * inside)[1]
    assert ["size"] == [problem.kind for problem in parse("a: [" + "[" * inside + "]" * inside + "]")[1]]


def test_thousands_of_levels_are_refused():
    """Depth beyond what the library bears is refused too."""
    node, problems = parse("a: " + "[" * 5000)
    assert (None, 1) == (node, len(problems))
    assert "levels inside each other" in problems[0].message


def test_too_many_entries_are_refused(monkeypatch):
    """A file with as many entries as the limit is read, one more is refused at the entry that is too many."""
    monkeypatch.setattr(yaml_text, "MOST_NODES", 10)
    assert [] == parse("a:\n" + "- 1\n" * 7)[1]
    node, problems = parse("a:\n" + "- 1\n" * 8)
    assert (None, "rooms.yaml:9:3: the file holds more than 10 entries [size]") == (node, str(problems[0]))


@pytest.mark.parametrize(
    ("at", "text"), [("1:1", "room:2\nname: vault\n"), ("2:5", "rooms:\n  - room:2\n"), ("2:3", "note: x\n  room:2\n"), ("1:5", "a: {room:2}\n")]
)
def test_missing_space_after_a_colon_is_told_once(at, text):
    """A name and its value written together are told wherever they would pass for a text."""
    (problem,) = parse(text)[1]
    assert f"rooms.yaml:{at}: a space is missing after the colon; write \"room: 2\"" == str(problem).removesuffix(" [syntax]").removesuffix(", or put it in quotes")


def test_one_slip_repeated_does_not_fill_the_screen():
    """Problems past a limit are counted."""
    _, problems = parse("a:\n" + "  - b #c\n" * (MOST_PROBLEMS + 7))
    expected = f"rooms.yaml:{MOST_PROBLEMS + 2}:7: 7 more problems in this file from here on; mend the first ones first [more]"
    assert expected == str(problems[-1])
    assert MOST_PROBLEMS + 1 == len(problems)


def test_tab_between_name_and_value_is_read():
    """A tab that indents nothing is no problem."""
    node, problems = parse("a:\tb\n")
    assert ({"a": "b"}, []) == (plain(node), problems)


def test_an_error_of_the_library_without_place_is_told(monkeypatch):
    """Whatever the library raises becomes a problem of the file."""

    def broken(*_args, **_kwargs):
        raise OverflowError("inside")
        yield

    monkeypatch.setattr(yaml, "parse", broken)
    node, problems = parse("a: b")
    assert (None, "rooms.yaml: the file cannot be read as YAML; save it again as plain UTF-8 text [syntax]") == (node, str(problems[0]))


PIECES = st.lists(
    st.sampled_from(
        ["a", "b: ", ": ", "- ", "\n", "\n  ", "\n\t", "[", "]", "{", "}", ", ", "#", " #", '"', "'", "|", ">", "&x ", "*x", "!t ",
         "<<", "? ", "%", "@", "`", "---\n", "...", "\\", "\\U00110000", "\\ud800", "\u00a0", "\ufeff", "\r", "é", "1", "=", "\x07"]
    ),
    max_size=25,
).map("".join)  # fmt: skip


@pytest.mark.parametrize("loader", [yaml.SafeLoader, getattr(yaml, "CSafeLoader", yaml.SafeLoader)])
@given(text=PIECES)
@settings(max_examples=150)
def test_any_pieces_of_yaml_are_read_or_told(loader, text):
    """Whatever is put together from pieces of YAML gives nodes or located problems, with either parser."""
    kept, yaml_text.LOADER = yaml_text.LOADER, loader
    try:
        node, problems = parse(text)
    finally:
        yaml_text.LOADER = kept
    assert isinstance(node, Mapping) or problems
    for problem in problems:
        assert "rooms.yaml" == problem.place.file
        assert 0 <= problem.place.line <= text.count("\n") + text.count("\r") + 1
        assert "\n" not in problem.message


@given(content=st.binary(max_size=300))
@settings(max_examples=200)
def test_any_bytes_are_read_or_told(content):
    """Whatever the bytes, there are nodes or problems, and no exception."""
    node, problems = parse_yaml("rooms.yaml", content)
    assert node is not None or problems


@given(
    st.dictionaries(
        st.from_regex(r"[a-z][a-z_]{0,12}", fullmatch=True),
        st.one_of(st.from_regex(r"[a-zA-Z0-9][a-zA-Z0-9 .-]{0,20}[a-z0-9]", fullmatch=True), st.lists(st.from_regex(r"[a-z0-9]{1,5}", fullmatch=True), max_size=4)),
        min_size=1,
        max_size=6,
    )
)  # fmt: skip
def test_what_the_library_writes_is_read_back(data):
    """Plain data dumped by the library comes back as the same texts."""
    node, problems = parse(yaml.safe_dump(data, default_flow_style=None))
    assert (data, []) == (plain(node), problems)
