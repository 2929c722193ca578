"""Exceptions that the department has granted: each covers one rule and one item, for a time."""

from collections.abc import Mapping
from dataclasses import replace
from datetime import date

from readiness.assessment.records import Finding, Ref, Rule
from readiness.program.items import Item, Program


def in_force(exception: Item, as_of: date) -> bool:
    """Return whether an exception is signed, dated and not expired."""
    approved, expires = exception.get("approved_on"), exception.get("expires_on")
    return (
        bool(exception.get("approver"))
        and bool(exception.get("reason"))
        and isinstance(approved, date)
        and isinstance(expires, date)
        and approved <= as_of <= expires
    )


def may_be_granted(program: Program, rules: Mapping[str, Rule]) -> Mapping[Ref, bool]:
    """Return for each exception whether its rule exists and is neither physical nor not exceptable."""
    found = {item.id: rules.get(str(item.get("rule"))) for item in program.of_kind("exception")}
    return {Ref("exception", name): rule is not None and rule.exceptable for name, rule in found.items()}


def excepted(
    findings: tuple[Finding, ...], rules: Mapping[str, Rule], program: Program, as_of: date
) -> tuple[tuple[Finding, ...], Mapping[Ref, bool]]:
    """
    Return the findings with exceptions applied, and for each exception whether it answers a finding.

    An exception covers "not met" only, of exactly its rule and item, never of a physical or not
    exceptable rule, and never what is not assessed.
    """
    granted = {(str(item.get("rule")), str(item.get("item"))): item for item in program.of_kind("exception")}
    answers: dict[Ref, bool] = {Ref("exception", item.id): False for item in program.of_kind("exception")}
    changed: list[Finding] = []
    for finding in findings:
        exception = granted.get((finding.rule, finding.item.id))
        if exception is None or finding.outcome != "not met" or not rules[finding.rule].exceptable:
            changed.append(finding)
            continue
        answers[Ref("exception", exception.id)] = True
        if in_force(exception, as_of):
            finding = replace(finding, outcome="excepted", exception=exception.id)
        changed.append(finding)
    return tuple(changed), answers
