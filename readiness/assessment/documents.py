"""Controlled documents as items: which are shown, who has approved the body as it is now."""

from collections.abc import Mapping

from readiness.assessment.document_heads import DocumentHead, document_heads
from readiness.assessment.records import ArrangementRow, DocumentState, Rule
from readiness.errors import Place
from readiness.program.items import Item, Program


def document_items() -> tuple[Item, ...]:
    """Return one item for each document that ships with the tool."""
    return tuple(
        Item("document", head.number, {}, {"program": "program"}, Place("documents"))
        for head in document_heads()
    )


def is_shown(head: DocumentHead, chosen: ArrangementRow | None) -> bool:
    """Return whether a document belongs to the chosen technique; all are shown while none is chosen."""
    if not head.shown_when or chosen is None:
        return True
    return dict(chosen.parts)["technique"] in head.shown_when


def document_states(
    program: Program, chosen: ArrangementRow | None, rules: tuple[Rule, ...], bodies: Mapping[str, str]
) -> tuple[DocumentState, ...]:
    """Return every shown document with its rules, approvals and status."""
    return tuple(
        _state(head, program, rules, bodies.get(head.number, ""))
        for head in document_heads()
        if is_shown(head, chosen)
    )


def _state(head: DocumentHead, program: Program, rules: tuple[Rule, ...], body: str) -> DocumentState:
    records = [item for item in program.of_kind("approval") if item.get("document") == head.number]
    current = [item for item in records if body and item.get("body_sha256") == body]
    roles = {str(item.get("role")) for item in current}
    if head.approvers and set(head.approvers) <= roles:
        status = "approved"
    elif records and len(current) < len(records) and not current:
        status = "changed after approval"
    else:
        status = "draft"
    revision = str(current[-1].get("revision") or "") if current else ""
    return DocumentState(
        number=head.number,
        title=head.title,
        part=head.part,
        kind=head.kind,
        owner=head.owner,
        approvers=head.approvers,
        body_sha256=body,
        values=(),
        rules=tuple(rule.id for rule in rules if head.number in rule.documents),
        status=status,
        revision=revision,
        approvals=tuple(
            (str(item.get("role")), str(item.get("name")), str(item.get("approved_on"))) for item in current
        ),
    )
