"""The evidence register: what is in force, what has run out, and which papers speak of which item."""

from collections.abc import Iterator, Mapping
from datetime import date, timedelta

from readiness.assessment.definition import Definition, derived
from readiness.quantities import Scalar, Table

KINDS = (
    "room", "machine", "beam", "degrader", "stand", "couch", "patient_shield", "instrument", "person",
)  # fmt: skip
NOTHING = "nothing"


def papers_about(*, evidence: Table, about: str, as_of_date: date) -> tuple[str, ...]:
    """Return the types of papers in force that name an item under what they cover, in full or its own id."""
    wanted = {about, about.rpartition("/")[2]}
    return _types(row for row in _in_force(evidence, as_of_date) if wanted & set(_names(row["covers"])))


def papers_in_force(*, evidence: Table, as_of_date: date) -> tuple[str, ...]:
    """Return the types of all papers in force."""
    return _types(_in_force(evidence, as_of_date))


def _in_force(evidence: Table, as_of_date: date) -> Iterator[dict[str, Scalar]]:
    """Yield the papers that have a file, are approved, and have not run out."""
    for row in evidence.records():
        approved, expires = row["approved_on"], row["expires_on"]
        approved_by_now = isinstance(approved, date) and approved <= as_of_date
        if row["file"] and approved_by_now and not (isinstance(expires, date) and expires < as_of_date):
            yield row


def _types(rows: Iterator[dict[str, Scalar]]) -> tuple[str, ...]:
    return tuple(sorted({str(row["type"]) for row in rows if row["type"]}))


def _names(covers: object) -> tuple[str, ...]:
    return tuple(str(each) for each in covers) if isinstance(covers, tuple) else ()


def still_in_force(*, expires_on: date | None, as_of_date: date) -> bool:
    """Return whether a paper has not run out; one without an expiry date does not run out."""
    return expires_on is None or expires_on >= as_of_date


def runs_out_soon(*, expires_on: date | None, as_of_date: date, notice_days: float) -> bool:
    """Return whether a paper that holds today runs out within the notice."""
    last = as_of_date + timedelta(days=notice_days)
    return expires_on is not None and as_of_date <= expires_on <= last


def out_of_date(*, expires_on: date | None, next_review_on: date | None, as_of_date: date) -> str:
    """Return what of a paper's dates has passed."""
    found = {"its last day": expires_on, "the date of its review": next_review_on}
    return ", ".join(words for words, day in found.items() if day is not None and day < as_of_date) or NOTHING


def reviewed_in_time(*, next_review_on: date | None, as_of_date: date) -> bool:
    """Return whether the date of a paper's next review, if it has one, has not passed."""
    return next_review_on is None or next_review_on >= as_of_date


def particulars_missing(
    *,
    file: str | None,
    type_word: str | None,
    revision: str | None,
    owner: str | None,
    dated_on: date | None,
    covers: tuple[str, ...] | None,
) -> str:
    """Return which particulars of a paper are not entered."""
    return _missing(
        {
            "file": file,
            "type": type_word,
            "revision": revision,
            "owner": owner,
            "date": dated_on,
            "what it covers": covers,
        }  # fmt: skip
    )


def exception_faults(
    *, reason: str | None, compensation: str | None, approver: str | None, approved_on: date | None,
    expires_on: date | None, as_of_date: date,
) -> str:  # fmt: skip
    """Return why an exception does not hold: what is not entered, not yet granted or run out."""
    found: dict[str, object] = {
        "no reason": reason,
        "no compensation": compensation,
        "no approver": approver,
        "no date granted": approved_on,
        "granted in the future": approved_on is None or approved_on <= as_of_date,
        "no last day": expires_on,
        f"run out on {expires_on}": expires_on is None or expires_on >= as_of_date,
    }
    return _missing(found)


def _missing(particulars: Mapping[str, object]) -> str:
    return ", ".join(name for name, entry in particulars.items() if not entry) or NOTHING


def is_approved(*, approved_by: str, approved_on: date, dated_on: date | None, as_of_date: date) -> bool:
    """Return whether a named role has approved a paper, not before its own date and not in the future."""
    return bool(approved_by) and approved_on <= as_of_date and (dated_on is None or approved_on >= dated_on)


def how_many(*, documents: tuple[str, ...]) -> int:
    """Return how many approvals are on file."""
    return len(documents)


def _about(kind: str) -> Definition:
    """Return the papers that speak of an item of a kind."""
    return derived(
        f"{kind}.papers",
        f"Types of papers in force that name this {kind.replace('_', ' ')} under what they cover.",
        papers_about,
        {"evidence": _EVIDENCE, "about": f"{kind}.id", "as_of_date": "program.as_of_date"},
    )


_EVIDENCE = "rows evidence: type? file? approved_on? expires_on? covers?"
_TODAY = {"as_of_date": "program.as_of_date"}

DEFINITIONS: tuple[Definition, ...] = (
    *(_about(kind) for kind in KINDS),
    derived(
        "program.papers",
        "Types of papers that are on file, approved and in force.",
        papers_in_force,
        {"evidence": _EVIDENCE, **_TODAY},
    ),
    derived(
        "program.approval_count",
        "Number of approvals on file.",
        how_many,
        {"documents": "each approval.document"},
    ),
    derived(
        "evidence.still_in_force",
        "It has not run out.",
        still_in_force,
        {"expires_on": "evidence.expires_on?", **_TODAY},
    ),
    derived(
        "evidence.runs_out_soon",
        "It holds today and runs out within the notice.",
        runs_out_soon,
        {"expires_on": "evidence.expires_on?", "notice_days": "criterion.expiry_notice_days", **_TODAY},
    ),
    derived(
        "evidence.out_of_date",
        "Which of its dates has passed.",
        out_of_date,
        {"expires_on": "evidence.expires_on?", "next_review_on": "evidence.next_review_on?", **_TODAY},
    ),
    derived(
        "evidence.reviewed_in_time",
        "The date of its next review has not passed.",
        reviewed_in_time,
        {"next_review_on": "evidence.next_review_on?", **_TODAY},
    ),
    derived(
        "evidence.particulars_missing",
        "Particulars that are not entered.",
        particulars_missing,
        {
            "file": "evidence.file?",
            "type_word": "evidence.type?",
            "revision": "evidence.revision?",
            "owner": "evidence.owner?",
            "dated_on": "evidence.dated_on?",
            "covers": "evidence.covers?",
        },
    ),
    derived(
        "evidence.approved",
        "A named role has approved it, not before its own date.",
        is_approved,
        {
            "approved_by": "evidence.approved_by",
            "approved_on": "evidence.approved_on",
            "dated_on": "evidence.dated_on?",
            **_TODAY,
        },
    ),
    derived(
        "exception.faults",
        "Why it does not hold: what is not entered, not yet granted or run out.",
        exception_faults,
        {
            "reason": "exception.reason?",
            "compensation": "exception.compensation?",
            "approver": "exception.approver?",
            "approved_on": "exception.approved_on?",
            "expires_on": "exception.expires_on?",
            **_TODAY,
        },
    ),
)
