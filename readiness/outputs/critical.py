"""
Treatment-critical numbers and the rules that must be met before a document prints one of them.

A number is printed only if every rule named here has been judged for it and is met, and at least one of
them rests on a measurement. In every other case the document has a blank with the unit and the rule.
"""

from collections.abc import Mapping

from readiness.assessment.records import Finding, Ref
from readiness.outputs.lookup import Lookup

# value -> rules; the first one compares the choice with the as-built record
CRITICAL: Mapping[str, tuple[str, ...]] = {
    "arrangement.plane_distance_cm": ("as-built-record", "plane-distance"),
    "arrangement.tilt_deg": ("as-built-record", "vertical-uniformity"),
    "arrangement.degrader_gap_cm": ("as-built-record", "degrader-clears-patient"),
    "degrader.thickness_cm": ("as-built-record", "dose-at-4-mm"),
    "plan.pair_output_cgy_per_mu": ("pair-output",),
    "plan.b_factor": ("b-factor",),
    "patient_shield.thickness_mm": ("shield-thickness", "shield-transmission"),
}


def open_rules(name: str, lookup: Lookup, item: Ref | None = None) -> tuple[str, ...]:
    """Return the rules that keep a critical number from being printed, none if it may be."""
    findings = {rule: lookup.findings(rule, item) for rule in CRITICAL[name]}
    unmet = tuple(rule for rule, found in findings.items() if not _is_met(found))
    measured = any(finding.basis == "measured" for found in findings.values() for finding in found)
    return unmet if unmet or measured else CRITICAL[name][:1]


def _is_met(findings: tuple[Finding, ...]) -> bool:
    return bool(findings) and all(finding.outcome == "met" for finding in findings)
