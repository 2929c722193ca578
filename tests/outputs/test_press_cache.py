"""Printed files kept between runs: the same bytes as without, and never a reason to fail."""

import os
from dataclasses import replace
from pathlib import Path

import pytest

from readiness.outputs import binder, press, press_cache
from readiness.outputs.documents import RenderedDocument, render_bodies
from readiness.outputs.press_cache import PrintCache, key
from tests.outputs import fakes

SOME = ("1.1", "4.1", "6.2")
ATTACHED = {"assessment.json": b"{}\n"}


def rendered(words: str = "") -> list[RenderedDocument]:
    """Return a few documents, one of them with other words."""
    found = [each for each in render_bodies(fakes.empty()) if each.number in SOME]
    return [replace(each, html_body=each.html_body + words) if each.number == "4.1" else each for each in found]


def printed(kept: PrintCache | None, words: str = "", attached: dict[str, bytes] | None = None) -> dict[str, bytes]:
    """Return everything that is written of these documents."""
    return binder.make(fakes.empty(), rendered(words), attached or ATTACHED, fakes.AS_OF, kept=kept)


@pytest.fixture(scope="module")
def fresh() -> dict[str, bytes]:
    """Return everything as it is written without a cache."""
    return printed(None)


def forbid(monkeypatch: pytest.MonkeyPatch) -> list[str]:
    """Return the titles of what is laid out from now on."""
    seen: list[str] = []
    lay_out = press.lay_out

    def noted(html: str, styles: list[str], title: str) -> press.Layout:
        seen.append(title)
        return lay_out(html, styles, title)

    monkeypatch.setattr(press, "lay_out", noted)
    return seen


def test_an_unchanged_binder_is_not_laid_out_again(
    fresh: dict[str, bytes], tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """The second run lays out nothing; all runs give the same bytes."""
    kept = PrintCache(tmp_path)
    assert fresh == printed(kept)
    seen = forbid(monkeypatch)
    assert fresh == printed(kept)
    assert [] == seen


def test_one_changed_document_is_printed_anew_and_the_others_are_taken(tmp_path: Path) -> None:
    """Bytes are those of a run without a cache, the binder's too."""
    kept = PrintCache(tmp_path)
    printed(kept)
    before = len(list(tmp_path.iterdir()))
    assert printed(None, "<p>Other words.</p>") == printed(kept, "<p>Other words.</p>")
    assert before + 2 == len(list(tmp_path.iterdir()))  # the document and the binder


def test_another_attachment_is_another_binder(fresh: dict[str, bytes], tmp_path: Path) -> None:
    """Pages alike, inputs not: the kept binder is not given out for it."""
    kept = PrintCache(tmp_path)
    printed(kept)
    other = {"assessment.json": b"[]\n"}
    assert printed(None, "", other) == printed(kept, "", other)
    assert fresh["binder.pdf"] != printed(kept, "", other)["binder.pdf"]


def test_what_was_altered_in_the_cache_is_printed_again(fresh: dict[str, bytes], tmp_path: Path) -> None:
    """A byte changed, a file cut, a file of another name: none is believed."""
    kept = PrintCache(tmp_path)
    printed(kept)
    files = sorted(tmp_path.iterdir())
    whole = bytearray(files[0].read_bytes())
    whole[-1] ^= 1
    files[0].write_bytes(whole)
    files[1].write_bytes(files[1].read_bytes()[:100])
    files[2].write_bytes(files[3].read_bytes())
    assert fresh == printed(kept)


@pytest.mark.skipif(os.geteuid() == 0, reason="root may write anywhere")
def test_a_cache_that_cannot_be_written_costs_nothing_but_time(fresh: dict[str, bytes], tmp_path: Path) -> None:
    """No error, the same bytes."""
    tmp_path.chmod(0o500)
    assert fresh == printed(PrintCache(tmp_path / "none"))


def test_a_cache_whose_place_is_a_file_costs_nothing_but_time(fresh: dict[str, bytes], tmp_path: Path) -> None:
    """No error, the same bytes."""
    place = tmp_path / "cache"
    place.write_text("not a folder", encoding="utf-8")
    assert fresh == printed(PrintCache(place))


def test_the_oldest_go_when_there_are_too_many(tmp_path: Path) -> None:
    """What was used last stays."""
    kept = PrintCache(tmp_path, most_bytes=300)
    for number, name in enumerate(("a", "b", "c")):
        kept.put(key(name), b"x" * 100)
        os.utime(tmp_path / f"{key(name)}.kept", ns=(number, number))
    assert kept.get(key("a")) is None or kept.get(key("c")) is not None
    assert kept.get(key("c")) == b"x" * 100
    assert sum(path.stat().st_size for path in tmp_path.iterdir()) <= 300


def test_a_key_knows_where_one_part_ends() -> None:
    """Parts are not run together, and code and libraries are in every key."""
    assert key("ab", "c") != key("a", "bc")
    assert key() != key("")


def test_another_code_is_another_key(monkeypatch: pytest.MonkeyPatch) -> None:
    """A change of what prints makes every kept file unknown."""
    before = key("a")
    monkeypatch.setattr(press_cache, "_machinery", lambda: b"other")
    assert before != key("a")
