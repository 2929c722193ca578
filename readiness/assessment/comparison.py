"""
How arrangements are compared: one question after the other, in words, never by a score.

Only rules that tell arrangements apart count (``tells_apart`` in the rule): what another beam, side,
degrader or room would answer otherwise, not what a department can buy, repair, measure or write down for any
of them. Silence is no advantage: an answer that is not known yet stands beside one that speaks against it.
"""

from collections.abc import Iterable, Mapping
from dataclasses import replace

from readiness.assessment.graph import Graph
from readiness.assessment.records import FEASIBILITIES, ArrangementRow, Finding, Ref, Rule, Value

BAND_STEP_DEG = 0.5  # bands of tilts closer than this are equally wide: the model is no better
MINUTES_STEP = 1.0  # beam-on times of a session closer than this are equal
_LOWEST_TILT = "arrangement.predicted_lowest_tilt_deg"
_HIGHEST_TILT = "arrangement.predicted_highest_tilt_deg"
_BEAM_MINUTES = "arrangement.session_beam_min"
_SHOWN = ("met", "not applicable", "excepted")


def telling(
    findings: Iterable[Finding], rules: Mapping[str, Rule]
) -> tuple[tuple[str, ...], tuple[str, ...]]:
    """Return the rules that speak against an arrangement, and those without an answer yet, musts first."""
    against: dict[str, Rule] = {}
    unanswered: dict[str, Rule] = {}
    for finding in findings:
        rule = rules[finding.rule]
        if not rule.tells_apart or finding.outcome in _SHOWN or finding.expected == "met":
            continue
        fails = "not met" in (finding.outcome, finding.expected)
        (against if fails else unanswered)[rule.id] = rule
    return _musts_first(against), _musts_first({k: v for k, v in unanswered.items() if k not in against})


def _musts_first(found: Mapping[str, Rule]) -> tuple[str, ...]:
    return tuple(sorted(found, key=lambda key: found[key].strength != "must"))


def ordered(
    rows: Iterable[ArrangementRow], rules: Mapping[str, Rule], graph: Graph
) -> tuple[ArrangementRow, ...]:
    """Return the rows, the best first and with the reasons; what is left equal keeps the folder's order."""
    answers = {row.item: _answers(row, rules, graph) for row in rows}
    best_first = sorted(rows, key=lambda row: tuple(order for order, _ in answers[row.item]))
    return _with_reasons(tuple(best_first), answers)


_Answers = tuple[tuple[float, str], ...]  # by question: what is sorted by, and the same in words


def _answers(row: ArrangementRow, rules: Mapping[str, Rule], graph: Graph) -> _Answers:
    """Return the answers of one arrangement to the questions, in their order."""
    counted = [_counted(row, rules, strength) for strength in ("must", "should")]
    band, minutes = _band(row.item, graph), _number(_BEAM_MINUTES, row.item, graph)
    return (
        (FEASIBILITIES.index(row.feasibility), f"is {row.feasibility}"),
        *(pair for pairs in counted for pair in pairs),
        (-round((band or 0.0) / BAND_STEP_DEG), _band_in_words(band)),
        (float("inf") if minutes is None else round(minutes / MINUTES_STEP), _minutes_in_words(minutes)),
    )


def _counted(row: ArrangementRow, rules: Mapping[str, Rule], strength: str) -> _Answers:
    against = [rule for rule in row.against if rules[rule].strength == strength]
    unanswered = [rule for rule in row.unanswered if rules[rule].strength == strength]
    parts = []
    if against:
        parts.append(f"does not keep, or is not expected to keep, {', '.join(against)}")
    if unanswered:
        parts.append(f"has no answer yet to {', '.join(unanswered)}")
    words = " and ".join(parts) if parts else f"keeps, or is expected to keep, every {strength}-rule compared"
    return (len(against) + len(unanswered), words), (len(against), words)


def _band(ref: Ref, graph: Graph) -> float | None:
    lowest, highest = _number(_LOWEST_TILT, ref, graph), _number(_HIGHEST_TILT, ref, graph)
    return None if lowest is None or highest is None else highest - lowest


def _number(name: str, ref: Ref, graph: Graph) -> float | None:
    got = graph.get(name, ref) if name in graph.catalogue.definitions else None
    if not isinstance(got, Value) or isinstance(got.value, bool) or not isinstance(got.value, (int, float)):
        return None
    return float(got.value)


def _band_in_words(band_deg: float | None) -> str:
    if band_deg is None:
        return "is predicted to keep the vertical limit at no tilt, or nothing can be predicted yet"
    return f"is predicted to keep the vertical limit over {band_deg:.1f} degrees of tilt"


def _minutes_in_words(minutes: float | None) -> str:
    return (
        "does not say how long the beam is on" if minutes is None
        else f"needs {minutes:.0f} minutes of beam in a session"
    )  # fmt: skip


def _with_reasons(
    rows: tuple[ArrangementRow, ...], answers: Mapping[Ref, _Answers]
) -> tuple[ArrangementRow, ...]:
    """Return the rows: the first says why it stands before the next, a chosen one why others precede it."""
    if not rows:
        return rows
    best = rows[0]
    said = "It is the only arrangement described."
    if len(rows) > 1:
        said = _against(best, rows[1], answers)
    made = [replace(best, reasons=(said,)), *rows[1:]]
    for place, row in enumerate(made[1:], 1):
        if row.chosen:
            made[place] = replace(row, reasons=(_chosen_behind(row, best, answers),))
    return tuple(made)


def _against(row: ArrangementRow, following: ArrangementRow, answers: Mapping[Ref, _Answers]) -> str:
    mine, other = _first_difference(row, following, answers)
    if not mine:
        return f"It and the next, {following.title}, stand alike; the folder lists it first."
    return f"It stands first. It {mine}; the next, {following.title}, {other}."


def _chosen_behind(row: ArrangementRow, best: ArrangementRow, answers: Mapping[Ref, _Answers]) -> str:
    mine, other = _first_difference(row, best, answers)
    if not mine:
        return f"The department chose it; {best.title} stands alike and is listed first."
    return f"The department chose it: it {mine}. Compared, {best.title} comes first: that one {other}."


def _first_difference(
    row: ArrangementRow, other: ArrangementRow, answers: Mapping[Ref, _Answers]
) -> tuple[str, str]:
    """Return the first answers in which two arrangements differ, in words; "" twice if in none."""
    for (mine, words), (theirs, other_words) in zip(answers[row.item], answers[other.item], strict=True):
        if mine != theirs:
            return words, other_words
    return "", ""
