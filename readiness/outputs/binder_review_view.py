"""The review of a binder in words and as JSON."""

import json
import textwrap
from collections.abc import Iterator

from readiness.outputs.binder_review import AGREES, CANNOT_TELL, BinderReview
from readiness.outputs.contract import CAUTION, plain
from readiness.outputs.difference_view import groups

PROVES = (
    "This finds accident and careless edits. It does not prove who made the file, nor that its inputs are "
    "true: whoever changes the inputs and makes the binder again leaves no trace. Only a certificate "
    "signature shows who made it and that nothing was changed since."
)
_MOST = 40


def review_text(review: BinderReview, name: str, width: int) -> str:
    """Return the review in words, the answer first."""
    lines = [textwrap.fill(verdict_words(review, name), width)]
    for heading, said in _parts(review):
        lines += ["", heading, *(_wrapped(each, width) for each in said)]
    lines += ["", textwrap.fill(PROVES, width), textwrap.fill(CAUTION, width)]
    return "\n".join(lines) + "\n"


def review_json(review: BinderReview, name: str) -> str:
    """Return the review for programs."""
    data = {
        "caution": CAUTION, "proves": PROVES, "outcome": review.outcome,
        "words": verdict_words(review, name), **plain(review),
    }  # fmt: skip
    return json.dumps(data, ensure_ascii=False, indent=1) + "\n"


def verdict_words(review: BinderReview, name: str) -> str:
    """Return the answer in a sentence or two."""
    if review.outcome == AGREES:
        said = f"{name} agrees with the inputs inside it."
        return said if review.same_version else f"{said} {_other_version(review)}"
    if review.outcome == CANNOT_TELL:
        return (
            f"{name} is as it was written, but {_lowered(_other_version(review))} What differs came by "
            f"version or by hand: cannot tell. To tell, install version {_theirs(review)}."
        )
    what = "the inputs inside it" if review.is_as_written else "what was written"
    said = f"{name} does not agree with {what}."
    return said if review.same_version else f"{said} {_other_version(review)}"


def _theirs(review: BinderReview) -> str:
    written = review.written_by
    if written is None:
        return "unknown"
    return (
        written.product if written.product != review.ours.product else f"{written.product} with its own rules"
    )


def _other_version(review: BinderReview) -> str:
    written, ours = review.written_by, review.ours
    if written is not None and written.product == ours.product:
        return f"It was written with other rules ({written.rules}) than this version has ({ours.rules})."
    return f"It was written by version {_theirs(review)}; this is version {ours.product}."


def _lowered(sentence: str) -> str:
    return sentence[:1].lower() + sentence[1:]


def _parts(review: BinderReview) -> Iterator[tuple[str, list[str]]]:
    yield "AS IT WAS WRITTEN", list(_integrity(review))
    yield "WORKED OUT AGAIN FROM THE INPUTS INSIDE", list(_recomputed(review))
    if review.pages_again is not None:
        again = review.pages_again
        said = [each.words for each in again.alterations] or ["Pages and attachments: all the same."]
        yield "MADE AGAIN FROM THE INPUTS INSIDE", said[:_MOST]
    if review.remarks:
        yield "REMARKS", list(review.remarks)


def _integrity(review: BinderReview) -> Iterator[str]:
    whole = review.integrity
    if whole is None:
        yield f"{review.no_integrity} Whether pages or attachments were changed cannot be seen."
        return
    for each in whole.alterations[:_MOST]:
        yield each.words
    if len(whole.alterations) > _MOST:
        yield f"and {len(whole.alterations) - _MOST} more (--json lists them all)"
    if whole.holds:
        yield "Pages and attachments: all as written."
    if whole.drawn_anew:
        yield (
            "Every page was saved anew by another program: words could be compared, drawings could not. Look "
            "at the drawings yourself."
        )


def _recomputed(review: BinderReview) -> Iterator[str]:
    yield from review.not_recomputed
    for each in review.agreements:
        differ = f", {each.different} differ" if each.different else ""
        yield f"{each.what}: {each.same} agree{differ}"
    if review.recomputed is None:
        return
    if not review.same_version:
        yield "Differences below came by version or by hand: cannot tell."
    for group in groups(review.recomputed, "worked out again"):
        for line in group.lines[:_MOST]:
            yield f"{group.heading}: {line}"
        if len(group.lines) > _MOST:
            yield f"{group.heading}: {len(group.lines) - _MOST} more (--json lists them all)"


def _wrapped(text: str, width: int) -> str:
    return textwrap.fill(
        text, width, initial_indent="  - ", subsequent_indent="    ", break_on_hyphens=False,
    )  # fmt: skip
