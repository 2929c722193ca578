"""
Treatment-critical numbers and what must be met before a document prints one of them.

Each number has a proof, the value that a measurement or an as-built record gives, and further values. It is
printed only if a rule on the proof is met by measurement, every rule on it and every must- or should-rule on
the others is met; a should-rule may be covered by an exception, a must-rule may not. In every other case,
also where no rule on the proof has been judged, the document has a blank with the unit and the rule.
"""

from collections.abc import Mapping
from dataclasses import dataclass

from readiness.assessment.records import Finding, Ref, Rule
from readiness.outputs.lookup import Lookup

AS_BUILT, MEASURED = "as built", "measured"
_RECORD = "arrangement.as_built_agrees"


@dataclass(frozen=True)
class Critical:
    """What proves a number, what else must be met, and the words that stand beside it when it is printed."""

    proof: str
    others: tuple[str, ...] = ()
    words: str = MEASURED

    @property
    def subjects(self) -> tuple[str, ...]:
        """Return every value that a rule is looked for on."""
        return (self.proof, *self.others)


CRITICAL: Mapping[str, Critical] = {
    "arrangement.plane_distance_cm": Critical(_RECORD, ("arrangement.plane_distance_cm",), AS_BUILT),
    "arrangement.tilt_deg": Critical(
        _RECORD, ("arrangement.tilt_difference_deg", "arrangement.vertical_uniformity_percent"), AS_BUILT
    ),
    "arrangement.degrader_gap_cm": Critical(_RECORD, ("arrangement.degrader_gap_to_spare_cm",), AS_BUILT),
    "degrader.thickness_cm": Critical(
        _RECORD, ("arrangement.dose_at_4_mm_percent", "arrangement.dose_at_20_mm_percent"), AS_BUILT
    ),
    "arrangement.pair_output_cgy_per_mu": Critical(
        "arrangement.pair_output_cgy_per_mu", ("arrangement.output_difference_percent",)
    ),
    "arrangement.b_factor": Critical("arrangement.b_factor_understood"),
    "arrangement.rotating_factor": Critical("arrangement.b_factor_understood"),
    "patient_shield.thickness_mm": Critical(
        "patient_shield.transmission_percent", ("patient_shield.cover_margin_mm",), "transmission measured"
    ),
}


def open_rules(name: str, lookup: Lookup, item: Ref | None = None) -> tuple[str, ...] | None:
    """Return the rules that keep a critical number from being printed: none, or None if there is no proof."""
    critical = CRITICAL[name]
    proving = lookup.rules_on(critical.proof)
    others = [rule for subject in critical.others for rule in lookup.rules_on(subject)]
    judged = [*proving, *(rule for rule in others if rule.strength != "consider")]
    unmet = [rule.id for rule in judged if not _is_met(rule, _findings(rule, lookup, item))]
    if unmet:
        return tuple(dict.fromkeys(unmet))
    proofs = [finding for rule in proving for finding in _findings(rule, lookup, item)]
    return () if any(each.outcome == "met" and each.basis == MEASURED for each in proofs) else None


def _findings(rule: Rule, lookup: Lookup, item: Ref | None) -> tuple[Finding, ...]:
    return lookup.findings(rule.id, item if item is not None and item.kind == rule.kind else None)


def _is_met(rule: Rule, findings: tuple[Finding, ...]) -> bool:
    good = {"met", "not applicable", "excepted"} if rule.strength == "should" else {"met", "not applicable"}
    return bool(findings) and all(finding.outcome in good for finding in findings)
