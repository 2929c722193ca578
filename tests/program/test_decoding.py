"""Bytes become text, or it is said what they are instead."""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from readiness.program.decoding import decode, place_of


def test_byte_order_mark_at_the_start_is_dropped():
    """The mark that Windows editors put before UTF-8 is harmless."""
    assert ("a: ü", []) == decode("x.yaml", "\ufeffa: ü".encode())


def test_every_printable_text_is_kept():
    """Letters of any script, signs, tabs and line ends are left alone."""
    text = "µSv · Ä é 日本 עברית 👩\u200d⚕️ \t x\r\ny\n"
    assert (text, []) == decode("x.yaml", text.encode())


@pytest.mark.parametrize("codec", ["utf-16-le", "utf-16-be", "utf-32-le", "utf-32-be"])
def test_wide_encodings_are_named_and_still_read(codec):
    """UTF-16 and UTF-32 are named, and the text is read so that its other problems are told too."""
    text, problems = decode("x.yaml", ("\ufeff" + "rooms: []\n").encode(codec))
    assert ("rooms: []\n", 1) == (text, len(problems))
    assert f"written in {codec[:6].upper()}; save it as UTF-8" in problems[0].message


@pytest.mark.parametrize(
    ("message", "content"),
    [
        ('x.yaml:2:3: the file is not UTF-8 but probably Windows-1252 or Latin-1 (here "ü"); save it as UTF-8 [encoding]', b"a\nT-\xfcr \x9620 \xb0C"),
        ("x.yaml:1:2: the file is not UTF-8 (byte A4 here); save it as UTF-8 [encoding]", b"a\xa4\xac\xa8\xfc"),
        ("x.yaml:1:2: the file is not UTF-8 (byte 81 here); save it as UTF-8 [encoding]", b"a\x81"),
    ],
)  # fmt: skip
def test_other_encodings_are_suspected_only_where_they_give_letters(message, content):
    """Windows-1252 is named if it makes letters and usual signs of the bytes."""
    assert [message] == [str(problem) for problem in decode("x.yaml", content)[1]]


def test_character_is_told_once_with_its_count():
    """The same bad character is one problem, at its first place."""
    _, problems = decode("x.yaml", "a\u200bb\nc\u200bd\u200b".encode())
    assert ["x.yaml:1:2: the character U+200B cannot be seen; delete it (3 times in this file) [character]"] == [
        str(problem) for problem in problems
    ]


def test_refused_characters_leave_places_unmoved():
    """A refused character is replaced by one space."""
    assert "a b" == decode("x.yaml", b"a\x00b")[0]


@pytest.mark.parametrize("ending", ["\n", "\r\n", "\r"])
def test_places_count_every_line_end_once(ending):
    """Lines count the same whatever system wrote them."""
    text = f"a{ending}bc{ending}"
    assert "x:2:2" == str(place_of("x", text, text.index("c")))


@given(st.binary(max_size=200))
def test_any_bytes_are_text_or_problems(content):
    """Whatever the bytes, there is a text, and it can be kept as UTF-8; or a problem says why not."""
    text, problems = decode("x.yaml", content)
    assert text is not None or problems
    if text is not None:
        text.encode()
