"""What a record of approval holds: who, in which role, when, and the hash of the body that was approved."""

import difflib
from collections.abc import Mapping, Sequence
from datetime import date

from readiness.assessment.records import Assessment
from readiness.errors import UsageError
from readiness.outputs.documents import RenderedDocument


def approval_entry(
    assessment: Assessment, bodies: Sequence[RenderedDocument], earlier: Sequence[tuple[str, str]],
    number: str, *, role: str, name: str, as_of: date,
) -> Mapping[str, str]:  # fmt: skip
    """
    Return the entry for approvals.yaml.

    Args:
        assessment: The assessment with its documents' states.
        bodies: The documents as they are now.
        earlier: (revision, hash) of what was approved of this document before; a new body is a new revision.
        number: Number of the document.
        role: Role in which the person approves.
        name: Name of the person.
        as_of: Day of the approval.

    Raises:
        UsageError: If there is no such document, the role does not approve it, the name is blank, or the
            person has approved this body already.
    """
    document = next((each for each in bodies if each.number == number), None)
    if document is None:
        close = difflib.get_close_matches(number, [each.number for each in bodies], n=1)
        hint = f"; did you mean {close[0]}?" if close else ""
        raise UsageError(f"there is no document {number} for the chosen technique{hint}")
    if role not in document.approvers:
        raise UsageError(
            f"document {number} is approved by {' and '.join(document.approvers)}, not by {role}; "
            "write the role as it stands there"
        )
    if not name.strip():
        raise UsageError("the name is blank; write the name of the person who approves")
    state = next((each for each in assessment.documents if each.number == number), None)
    if state is not None and any(role == approved for approved, _, _ in state.approvals):
        raise UsageError(f"document {number} is approved in the role {role} already, as it is now")
    known = {body: int(revision) for revision, body in earlier if revision.isdigit()}
    revision = known.get(document.body_sha256, max(known.values(), default=0) + 1)
    return {
        "id": f"{number}-{role.replace(' ', '-')}-{document.body_sha256[:8]}",
        "document": number,
        "role": role,
        "name": name.strip(),
        "approved_on": as_of.isoformat(),
        "revision": str(revision),
        "body_sha256": document.body_sha256,
    }
