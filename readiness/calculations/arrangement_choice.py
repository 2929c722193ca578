"""
Which arrangement to recommend, and why: compared in words, one question after the other, never by a score.

1. Does anything physical forbid it? 2. How many limits is it predicted to miss? 3. How wide is the band of
tilts? 4. How high is the output (beam minutes)? A later question decides only where earlier ones are equal.
"""

from collections.abc import Sequence
from dataclasses import dataclass
from math import log

from readiness.quantities import Scalar, Table

BAND_STEP_DEG = 0.5  # bands closer than this count as equally wide: the model is no better
OUTPUT_STEP = 0.1  # relative: outputs closer than this count as equal


@dataclass(frozen=True)
class Candidate:
    """
    One arrangement as predicted.

    ``forbidden_by`` names what physically forbids it, empty if nothing does. ``misses`` names the limits that
    it is predicted to miss or for which nothing is known yet; ``change`` says what would help.
    """

    arrangement: str
    forbidden_by: str
    misses: tuple[str, ...]
    band_width_deg: float | None
    output_cgy_per_mu: float | None
    change: str


@dataclass(frozen=True)
class Recommendation:
    """Recommended arrangement (empty if none is possible), the runner-up, and the reasons for every place."""

    recommended: str
    because: str
    runner_up: str
    ranking: Table


def recommended_arrangement(*, candidates: Sequence[Candidate]) -> Recommendation:
    """
    Return the arrangement to recommend, the runner-up, and what decided between each and the next.

    Args:
        candidates: Arrangements as predicted, in any order.

    Returns:
        Recommendation with a table: place, arrangement, against_next, change.

    Raises:
        ValueError: If an arrangement stands twice.

    Valid for: any number of arrangements.
    Assumes: the order of questions above; what is left equal is ordered by name.
    Source: our own judgement, explained in words.
    """
    if len({one.arrangement for one in candidates}) != len(candidates):
        raise ValueError("an arrangement stands twice among the candidates")
    ordered = sorted(candidates, key=_order)
    rows: list[tuple[Scalar, ...]] = []
    for place, one in enumerate(ordered, start=1):
        following = ordered[place] if place < len(ordered) else None
        rows.append((place, one.arrangement, _against(one, following), one.change))
    possible = [one for one in ordered if not one.forbidden_by]
    first = possible[0] if possible else None
    return Recommendation(
        recommended=first.arrangement if first else "",
        because=_because(first, ordered),
        runner_up=possible[1].arrangement if len(possible) > 1 else "",
        ranking=Table.of(["place", "arrangement", "against_next", "change"], rows),
    )


def _order(one: Candidate) -> tuple[bool, int, float, float, str]:
    """Return what sorts the arrangements."""
    return (bool(one.forbidden_by), len(one.misses), -_band(one), -_output(one), one.arrangement)


def _band(one: Candidate) -> float:
    """Return the band of tilts in whole steps."""
    return round((one.band_width_deg or 0.0) / BAND_STEP_DEG)


def _output(one: Candidate) -> float:
    """Return the output in steps of a tenth of itself."""
    if not one.output_cgy_per_mu or one.output_cgy_per_mu <= 0:
        return float("-inf")
    return float(round(log(one.output_cgy_per_mu) / log(1 + OUTPUT_STEP)))


def _against(one: Candidate, following: Candidate | None) -> str:
    """Return the first question that told an arrangement from the next."""
    if one.forbidden_by:
        return f"cannot be used here: {one.forbidden_by}"
    if following is None:
        return _misses(one)
    if following.forbidden_by:
        return f"{_misses(one)}; the next cannot be used: {following.forbidden_by}"
    if len(one.misses) != len(following.misses):
        return f"{_misses(one)}; fewer than the next ({', '.join(following.misses)})"
    if _band(one) != _band(following):
        return (
            f"{_misses(one)}; its band of tilts is wider, {one.band_width_deg or 0:.1f} against "
            f"{following.band_width_deg or 0:.1f} degrees"
        )
    if _output(one) != _output(following):
        return f"{_misses(one)}; its output is higher, so that sessions are shorter"
    return f"{_misses(one)}; equal to the next in all that was compared, ordered by name"


def _misses(one: Candidate) -> str:
    """Return the limits that an arrangement misses, in words."""
    if not one.misses:
        return "is predicted to keep all limits"
    return "is predicted to miss, or does not yet show: " + ", ".join(one.misses)


def _because(first: Candidate | None, ordered: Sequence[Candidate]) -> str:
    """Return the sentence that explains the recommendation."""
    if first is None:
        if not ordered:
            return "No arrangement has been described."
        reasons = "; ".join(f"{one.arrangement}: {one.forbidden_by}" for one in ordered)
        return f"No arrangement is possible. {reasons}."
    place = list(ordered).index(first)
    following = ordered[place + 1] if place + 1 < len(ordered) else None
    return f"{first.arrangement} {_against(first, following)}."
