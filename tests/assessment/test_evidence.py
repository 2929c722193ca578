"""The evidence register: which paper is there, in force and approved, and what it answers."""

from dataclasses import replace
from datetime import date

from readiness.assessment.evidence import Register, evidence_register, papers_for
from readiness.assessment.records import Assessment, Finding, Ref
from readiness.program.items import InputFile, Item
from tests.assessment.small import DAY, item, program, rule
from tests.outputs.fakes import empty

ROOM = Ref("room", "vault-a")
RULE = rule(evidence=("room-survey-drawing",), documents=("4.1",))
SOUND = {
    "title": "Drawing of vault A", "type": "room-survey-drawing", "file": "evidence/a.txt", "revision": "1",
    "owner": "medical physicist", "dated_on": date(2026, 10, 6), "approved_by": "chief physicist",
    "approved_on": date(2026, 10, 8), "covers": ("vault-a",),
}  # fmt: skip


def paper(name: str = "drawing-a", **changes: object) -> Item:
    """Return an entry of the register, sound but for what is changed; None takes a field away."""
    fields = {key: value for key, value in {**SOUND, **changes}.items() if value is not None}
    return item("evidence", name, **fields)


def judged() -> Assessment:
    """Return an assessment with one rule that applies to one room."""
    return replace(empty(), rules=(RULE,), findings=(Finding("ceiling", ROOM, "met", basis="stated"),))


def register(*papers: Item, files: tuple[str, ...] = ("evidence/a.txt",), as_of: date = DAY) -> Register:
    """Return the register of a program with these papers and files."""
    held = tuple(InputFile(name, "ab" * 32, 12) for name in files)
    return evidence_register(replace(program(*papers, lists=("evidence",)), files=held), judged(), as_of)


def test_a_sound_paper_has_hash_and_no_fault() -> None:
    """File, hash, revision, owner, approval and date stand in its row."""
    (row,) = register(paper()).rows
    assert ("ab" * 32, True, (), ()) == (row.sha256, row.present, row.faults, row.remarks)
    assert ("ceiling",) == row.rules


def test_a_paper_whose_file_is_missing_is_no_evidence() -> None:
    """The entry alone shows nothing."""
    found = register(paper(), files=())
    assert ("the file evidence/a.txt is not there",) == found.rows[0].faults
    assert (("ceiling", "room-survey-drawing"),) == found.rules_without_evidence


def test_a_paper_without_file_is_no_evidence() -> None:
    """An entry that names no file says so."""
    assert ("no file is named",) == register(paper(file=None)).rows[0].faults


def test_a_paper_that_ran_out_is_no_evidence_from_the_next_day() -> None:
    """On its last day it still holds."""
    last = date(2026, 12, 1)
    assert () == register(paper(expires_on=last)).rows[0].faults
    assert ("ran out on 2026-12-01",) == register(paper(expires_on=last), as_of=date(2026, 12, 2)).rows[0].faults


def test_what_runs_out_within_sixty_days_is_told() -> None:
    """The sixtieth day is inside, the next is not."""
    inside, outside = date(2027, 1, 30), date(2027, 1, 31)
    assert ("runs out on 2027-01-30, within 60 days",) == register(paper(expires_on=inside)).rows[0].remarks
    assert () == register(paper(expires_on=outside)).rows[0].remarks


def test_a_review_that_is_due_or_was_missed_is_told() -> None:
    """A coming review and one that is overdue read differently."""
    assert ("review due on 2027-01-15, within 60 days",) == register(
        paper(next_review_on=date(2027, 1, 15))
    ).rows[0].remarks
    assert ("review was due on 2026-11-30",) == register(paper(next_review_on=date(2026, 11, 30))).rows[0].remarks


def test_an_approval_needs_role_and_date() -> None:
    """A name without a day approves nothing."""
    for missing in ({"approved_by": None}, {"approved_on": None}):
        assert ("no approval with role and date",) == register(paper(**missing)).rows[0].faults


def test_an_approval_before_the_paper_or_after_the_review_is_a_fault() -> None:
    """Nobody approves what is not yet written, and nothing counts that is not yet approved."""
    early = register(paper(approved_on=date(2026, 10, 5))).rows[0].faults
    assert ("approved on 2026-10-05, before its own date 2026-10-06",) == early
    late = register(paper(approved_on=date(2026, 12, 2))).rows[0].faults
    assert ("approved on 2026-12-02, after the day of this review",) == late


def test_a_file_in_no_entry_is_an_orphan() -> None:
    """A file under evidence/ that the register does not name is told."""
    found = register(paper(), files=("evidence/a.txt", "evidence/b.txt", "rooms.yaml"))
    assert ("evidence/b.txt",) == found.orphans
    assert "The file evidence/b.txt is in no entry of the register." in list(found.faults)


def test_a_paper_of_a_type_that_no_rule_asks_for_is_told() -> None:
    """It may still be worth keeping."""
    assert ("odd",) == register(paper(), paper("odd", type="menu")).answering_no_rule


def test_documents_and_rules_that_miss_each_other_are_told() -> None:
    """Documents without a rule, and rules without a document among those shown."""
    found = register(paper())
    assert found.documents_without_rule
    assert () == found.rules_without_document
    unshown = replace(judged(), rules=(replace(RULE, documents=("9.9",)),))
    assert ("ceiling",) == evidence_register(program(paper()), unshown, DAY).rules_without_document


def test_a_paper_answers_only_for_what_it_covers() -> None:
    """A drawing of vault A says nothing of vault B; a rule on the whole program takes any."""
    found = register(paper())
    assert 1 == len(papers_for(Finding("ceiling", ROOM, "met"), RULE, found))
    assert () == papers_for(Finding("ceiling", Ref("room", "vault-b"), "met"), RULE, found)
    assert 1 == len(papers_for(Finding("ceiling", Ref("program", "program"), "met"), RULE, found))
    beam = Finding("ceiling", Ref("exposure", "a-west/vault-a/linac-1"), "met")
    assert 1 == len(papers_for(beam, RULE, found))


def test_a_folder_without_register_is_not_an_empty_one() -> None:
    """That nothing is registered is known only if the list is there."""
    assert register().registered
    assert not evidence_register(program(), judged(), DAY).registered
