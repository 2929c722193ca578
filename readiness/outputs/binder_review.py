"""
What a reviewer is told of a binder: whether it is as it was written, and whether what it says follows from
the inputs inside it.

This finds accident and careless edits. It does not prove who made it: somebody who changes the inputs and
makes the binder again leaves no trace. Only a certificate signature proves that.
"""

from collections.abc import Callable, Iterator
from dataclasses import dataclass, replace
from typing import Any, TypeVar

from readiness import __version__
from readiness.assessment.assessment import CONTRACT, rules_version
from readiness.assessment.difference import Difference, difference
from readiness.assessment.records import Assessment, DocumentState, Finding, Gap, Value, Versions
from readiness.assessment.unaltered import Integrity, Manifest, integrity
from readiness.errors import ProgramProblems, UsageError
from readiness.outputs import press
from readiness.outputs.binder_reading import OpenedBinder
from readiness.outputs.form_fields import document_of
from readiness.outputs.recomputing import Recomputed, manifest_again, recompute

AGREES, DISAGREES, CANNOT_TELL = "agrees", "does not agree", "cannot tell"
_Found = TypeVar("_Found")


@dataclass(frozen=True)
class Agreement:
    """How many of one kind of result are the same when worked out again, and how many are not."""

    what: str
    same: int
    different: int


@dataclass(frozen=True)
class BinderReview:
    """
    Everything that was found.

    Attributes:
        written_by: Versions that wrote the binder; None if it does not say.
        integrity: What is there against what was written; None without a list of contents.
        no_integrity: Why there is no such comparison.
        agreements: Results worked out again from the inputs inside, counted.
        recomputed: From the results in the binder to those worked out again; None if that was not possible.
        not_recomputed: Why it was not possible.
        pages_again: The pages in the binder against those made again; None if that was not done.
        remarks: What was added or not done; nothing here speaks against the binder.
    """

    ours: Versions
    written_by: Versions | None = None
    integrity: Integrity | None = None
    no_integrity: str = ""
    agreements: tuple[Agreement, ...] = ()
    recomputed: Difference | None = None
    not_recomputed: tuple[str, ...] = ()
    pages_again: Integrity | None = None
    remarks: tuple[str, ...] = ()

    @property
    def same_version(self) -> bool:
        """Return whether this version wrote it, as far as it says."""
        return self.written_by is None or self.written_by == self.ours

    @property
    def results_agree(self) -> bool:
        """Return whether the results worked out again are those in the binder."""
        found = self.recomputed
        return found is not None and replace(found, versions=()).is_none and not found.elsewhere

    @property
    def is_as_written(self) -> bool:
        """Return whether everything is there as the binder's own list says."""
        return self.integrity is not None and self.integrity.holds

    @property
    def outcome(self) -> str:
        """Return one of AGREES, DISAGREES and CANNOT_TELL."""
        if not self.is_as_written or (self.pages_again is not None and not self.pages_again.holds):
            return DISAGREES
        if self.results_agree:
            return AGREES
        return DISAGREES if self.same_version else CANNOT_TELL


def review_binder(
    found: OpenedBinder, *, quick: bool, say: Callable[[str], None] = lambda words: None
) -> BinderReview:
    """
    Return the review of an opened binder.

    Args:
        found: The binder, with its pages.
        quick: Leave out making its pages again.
        say: Told what is being done.
    """
    review = BinderReview(Versions(__version__, rules_version(), CONTRACT), remarks=tuple(_added(found)))
    manifest, why = _had(lambda: found.manifest)
    if manifest is None:
        review = replace(review, no_integrity=why)
    else:
        whole = integrity(manifest, found.held)
        review = replace(review, written_by=manifest.versions, integrity=whole)
    stored, why = _had(lambda: found.assessment)
    if stored is None:
        return replace(review, not_recomputed=(why,))
    review = replace(review, written_by=review.written_by or stored.versions)
    say("working the results out again from the inputs inside")
    try:
        again = recompute(found, stored)
    except ProgramProblems as wrong:
        said = ("The inputs inside cannot be read by this version.", *map(str, wrong.problems))
        return replace(review, not_recomputed=said)
    recomputed = difference(stored, again.assessment)
    agreements = tuple(_agreements(stored, again.assessment, recomputed))
    review = replace(review, agreements=agreements, recomputed=recomputed)
    return _with_pages(review, found, manifest, again, quick, say)


def _had(get: Callable[[], _Found]) -> tuple[_Found | None, str]:
    try:
        return get(), ""
    except UsageError as wrong:
        return None, f"{str(wrong)[:1].upper()}{str(wrong)[1:]}."


def _added(found: OpenedBinder) -> Iterator[str]:
    if found.filled:
        documents = ", ".join(dict.fromkeys(map(document_of, found.filled)))
        yield f"Filled-in form fields: {len(found.filled)} ({documents}); that is no alteration."
    for signature in found.signatures:
        yield f"The file was {signature}; that is no alteration, and whose it is was not checked here."
    for note in found.notes:
        yield f"A note or comment was added on {note}; look what lies under it."


def _agreements(stored: Assessment, again: Assessment, found: Difference) -> Iterator[Agreement]:
    differ = {
        "values": len(found.values),
        "findings": len(found.findings),
        "gaps": len(found.gaps_opened) + len(found.gaps_closed),
        "documents": len(found.documents),
    }
    for what, different in differ.items():
        total = len({_key(each) for each in (*getattr(stored, what), *getattr(again, what))})
        yield Agreement(what, total - different, different)


def _key(entry: Value | Finding | Gap | DocumentState) -> tuple[str, Any]:
    """Return by what an entry of an assessment is known."""
    if isinstance(entry, Value):
        return entry.name, entry.item
    if isinstance(entry, Finding):
        return entry.rule, entry.item
    return (entry.id if isinstance(entry, Gap) else entry.number), None


def _with_pages(
    review: BinderReview, found: OpenedBinder, manifest: Manifest | None, again: Recomputed, quick: bool,
    say: Callable[[str], None],
) -> BinderReview:  # fmt: skip
    """Return the review with the pages made again, or with the reason why that was left out."""
    if review.outcome != AGREES or not review.same_version or manifest is None:
        return review
    if quick:
        reason = "Its pages were compared with its own list only (--quick)."
        return replace(review, remarks=(*review.remarks, reason))
    try:
        ours = press.made_by()
        if ours != manifest.press:
            reason = (
                f"Its pages were laid out by {manifest.press}; this machine has {ours}, which may break "
                "lines elsewhere: they were compared with its own list only."
            )
            return replace(review, remarks=(*review.remarks, reason))
        made = manifest_again(again, say)
    except (press.PressMissing, UsageError) as missing:
        reason = f"Its pages were compared with its own list only. {missing}"
        return replace(review, remarks=(*review.remarks, reason))
    return replace(review, pages_again=integrity(made, found.held))
