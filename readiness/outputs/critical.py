"""
Treatment-critical numbers and what must be met before a document prints one of them.

Each number has a proof, the value that a measurement or an as-built record gives, and further values. It is
printed only if a rule on the proof is met by measurement and every must-rule on the others is met. In every
other case, also where no such rule has been judged, the document has a blank with the unit and the rule.
"""

from collections.abc import Mapping

from readiness.assessment.records import Ref, Rule
from readiness.outputs.lookup import Lookup

_AS_BUILT = "arrangement.as_built_agrees"
# value -> subjects of the rules that must be met; the first is the proof
CRITICAL: Mapping[str, tuple[str, ...]] = {
    "arrangement.plane_distance_cm": (_AS_BUILT, "arrangement.plane_distance_cm"),
    "arrangement.tilt_deg": (
        _AS_BUILT,
        "arrangement.vertical_uniformity_percent",
        "arrangement.tilt_difference_deg",
    ),
    "arrangement.degrader_gap_cm": (_AS_BUILT, "arrangement.degrader_gap_cm"),
    "degrader.thickness_cm": (
        _AS_BUILT,
        "arrangement.dose_at_4_mm_percent",
        "arrangement.dose_at_20_mm_percent",
    ),
    "arrangement.pair_output_cgy_per_mu": ("arrangement.pair_output_cgy_per_mu",),
    "arrangement.b_factor": ("arrangement.b_factor",),
    "arrangement.rotating_factor": ("arrangement.rotating_factor",),
    "patient_shield.thickness_mm": ("patient_shield.transmission_measured", "patient_shield.thickness_mm"),
}


def open_rules(name: str, lookup: Lookup, item: Ref | None = None) -> tuple[str, ...] | None:
    """Return the rules that keep a critical number from being printed: none, or None if there is no proof."""
    proof, *others = CRITICAL[name]
    proving = lookup.rules_on(proof)
    judged = [rule for subject in others for rule in lookup.rules_on(subject) if rule.strength == "must"]
    unmet = [rule.id for rule in (*proving, *judged) if not _is_met(rule, lookup, item)]
    measured = any(
        finding.outcome == "met" and finding.basis == "measured"
        for rule in proving
        for finding in lookup.findings(rule.id, item)
    )
    if unmet:
        return tuple(dict.fromkeys(unmet))
    return () if measured else None


def _is_met(rule: Rule, lookup: Lookup, item: Ref | None) -> bool:
    findings = lookup.findings(rule.id, item)
    return bool(findings) and all(finding.outcome in {"met", "not applicable"} for finding in findings)
