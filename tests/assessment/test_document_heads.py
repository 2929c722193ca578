"""The heads of the documents: what rules and the department's wording may point at."""

from pathlib import Path

import pytest

from readiness.assessment.document_heads import (
    PARTS,
    document_heads,
    document_numbers,
    number_order,
    read_heads,
    section_key,
)
from readiness.errors import CatalogueError

HEAD = """---
number: "1.1"
title: A title
part: Program
kind: policy
owner: somebody
approvers: [somebody else]
purpose: One sentence.
---
## Scope

Words.
"""


def _file(folder: Path, name: str, text: str) -> Path:
    path = folder / name
    path.write_text(text, encoding="utf-8")
    return path


def test_documents_are_sorted_as_people_count() -> None:
    """6.2 stands before 6.10."""
    numbers = [head.number for head in document_heads()]
    assert sorted(numbers, key=number_order) == numbers
    assert numbers.index("6.2") < numbers.index("6.10")


def test_every_part_has_documents() -> None:
    """No part of the binder is empty, and each number begins with the place of its part."""
    assert {PARTS.index(head.part) + 1 for head in document_heads()} == set(range(1, len(PARTS) + 1))
    assert all(head.number.startswith(f"{PARTS.index(head.part) + 1}.") for head in document_heads())


def test_every_document_has_owner_approvers_scope_or_fields() -> None:
    """Each document says who keeps it, who approves it and what it is for."""
    for head in document_heads():
        assert head.approvers
        assert head.owner
        assert head.purpose.endswith(".")
        assert head.kind == "form" or {"scope", "records", "sources"} <= set(head.sections), head.number


def test_documents_of_a_technique_are_shown_for_it_alone() -> None:
    """The procedure for six positions is not shown to who treats on a platform; the charter always is."""
    by_number = {head.number: head for head in document_heads()}
    assert by_number["3.2"].shown_for("six-position")
    assert not by_number["3.2"].shown_for("rotating-platform")
    assert by_number["3.2"].shown_for("")
    assert all(by_number["1.1"].shown_for(each) for each in ("six-position", "moving-couch", ""))


def test_numbers_agree_with_heads() -> None:
    """What rules may point at is exactly what is there."""
    assert {head.number for head in document_heads()} == document_numbers()


def test_a_number_that_stands_twice_is_refused(tmp_path: Path) -> None:
    """Two templates cannot be the same document."""
    files = [_file(tmp_path, "a.md.j2", HEAD), _file(tmp_path, "b.md.j2", HEAD)]
    with pytest.raises(CatalogueError, match=r"document 1\.1 stands twice"):
        read_heads(files)


@pytest.mark.parametrize(
    ("old", "new", "message"),
    [
        ('number: "1.1"', "number: 1.1", "number is not text"),
        ('number: "1.1"', 'number: "2.1"', "does not fit number"),
        ("kind: policy", "kind: poem", "is none of"),
        ("approvers: [somebody else]", "approvers: []", "nobody approves"),
        ("owner: somebody\n", "", "missing or unknown"),
        ("purpose: One sentence.", "purpose: One sentence.\ncolour: red", "missing or unknown"),
        ("purpose: One sentence.", "purpose: One sentence.\nshown_when: [arcs]", "unknown technique"),
        ("## Scope", "## Scope {arcs}", "unknown technique"),
        ("## Scope\n", "", "before the first heading"),
        ("Words.", "Words.\n\n## Scope\n\nAgain.", "stands twice"),
        ("---\nnumber", "number", "front matter is missing"),
    ],
)
def test_an_incomplete_head_is_refused(tmp_path: Path, old: str, new: str, message: str) -> None:
    """A template that does not say what it is stops the program."""
    assert old in HEAD
    with pytest.raises(CatalogueError, match=message):
        read_heads([_file(tmp_path, "a.md.j2", HEAD.replace(old, new, 1))])


def test_a_heading_becomes_a_key_that_can_be_a_file_name() -> None:
    """The department's file for a part is named after its heading."""
    assert section_key("Beam given without degrader, with wrong energy") == (
        "beam-given-without-degrader-with-wrong-energy"
    )
