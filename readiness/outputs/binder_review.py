"""
What a reviewer is told of a binder: whether it agrees with the inputs inside it.

Because the same inputs give the same bytes, the binder is made again from the inputs inside and compared.
This finds accident and careless edits. It does not prove who made it: somebody who changes the inputs and
makes the binder again leaves no trace. Only a certificate signature proves that.
"""

from dataclasses import dataclass

from readiness.assessment.difference import Difference
from readiness.outputs.binder_reading import OpenedBinder
from readiness.outputs.contract import CAUTION

AGREES = "agrees with the inputs inside it"


@dataclass(frozen=True)
class BinderReview:
    """What was found: sentences that speak against the binder, and remarks that do not."""

    against: tuple[str, ...]
    remarks: tuple[str, ...]
    another_version: str

    @property
    def agrees(self) -> bool:
        """Return whether nothing speaks against the binder."""
        return not self.against and not self.another_version


def review_binder(
    found: OpenedBinder, again: OpenedBinder, recomputed: Difference, versions: tuple[str, str]
) -> BinderReview:
    """
    Return how a binder stands to one made again from the inputs inside it.

    Args:
        found: The binder under review.
        again: The binder made again.
        recomputed: From the attached assessment to the recomputed one.
        versions: Version that made the binder, and ours.
    """
    against = _attachments(found, again) + _pages(found, again) + _assessment(recomputed)
    remarks = []
    if found.filled:
        remarks.append(f"{len(found.filled)} form fields are filled in; that is no alteration.")
    if found.signatures:
        remarks.append(f"{found.signatures} signatures were added; that is no alteration.")
    other = versions[0] if versions[0] != versions[1] else ""
    return BinderReview(tuple(against), tuple(remarks), other)


def _attachments(found: OpenedBinder, again: OpenedBinder) -> list[str]:
    said = []
    for name in sorted({*found.attachments, *again.attachments}):
        mine, other = found.attachments.get(name), again.attachments.get(name)
        if mine is None:
            said.append(f"The attachment {name} is missing.")
        elif other is None:
            said.append(f"The attachment {name} was not put in by this tool.")
        elif mine != other:
            said.append(f"The attachment {name} differs from what the inputs inside give.")
    return said


def _pages(found: OpenedBinder, again: OpenedBinder) -> list[str]:
    if len(found.pages) != len(again.pages):
        return [f"It has {len(found.pages)} pages; the inputs inside give {len(again.pages)}."]
    different = [
        str(number)
        for number, (mine, other) in enumerate(zip(found.pages, again.pages, strict=True), 1)
        if mine != other
    ]
    return [f"The text of these pages differs: {', '.join(different)}."] if different else []


def _assessment(recomputed: Difference) -> list[str]:
    if recomputed.is_none:
        return []
    counts = (
        (len(recomputed.values), "values"),
        (len(recomputed.findings), "findings"),
        (len(recomputed.gaps_opened) + len(recomputed.gaps_closed), "gaps"),
        (len(recomputed.documents), "documents"),
    )
    said = ", ".join(f"{number} {what}" for number, what in counts if number)
    return [f"Recomputing from the inputs inside gives other results: {said or 'the verdict'}."]


def review_text(review: BinderReview, name: str, ours: str) -> str:
    """Return the review in words."""
    if review.another_version:
        lines = [
            f"{name} was made by version {review.another_version}, this is version {ours}.",
            f"What differs came by version or by hand: cannot tell. Install version {review.another_version} "
            "to tell.",
            *(f"  - {each}" for each in review.against),
        ]
    elif review.against:
        lines = [
            f"{name} does not agree with the inputs inside it:",
            *(f"  - {each}" for each in review.against),
        ]
    else:
        lines = [f"{name} {AGREES}: pages, attachments and recomputed results."]
    lines += list(review.remarks)
    lines += [
        "This finds accident and careless edits. Only a certificate signature proves who made it.",
        "",
        CAUTION,
    ]
    return "\n".join(lines) + "\n"
