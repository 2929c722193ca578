"""The rule set as a list, and one rule whole, with a program's own finding where there is one."""

import difflib
import json
import textwrap

from readiness.assessment.catalogue import catalogue
from readiness.assessment.conditions import CONDITIONS
from readiness.assessment.criteria import criteria
from readiness.assessment.records import Assessment, Clause, Finding, Rule, Value
from readiness.assessment.ruleset import load_rules
from readiness.errors import UsageError
from readiness.outputs.explanation import lines_of_value
from readiness.outputs.words import how_known, outcome_words, with_unit
from readiness.sources import publications
from readiness.units import unit_of, words_of


def list_rules(topic: str | None, strength: str | None, width: int, as_json: bool) -> str:
    """Return the rules, filtered, a line each under their topics."""
    chosen = [
        rule
        for rule in load_rules(catalogue())
        if (not topic or topic.lower() in rule.topic.lower()) and (not strength or rule.strength == strength)
    ]
    if as_json:
        keys = ("id", "title", "strength", "topic", "subject")
        listed = [{key: getattr(rule, key) for key in keys} for rule in chosen]
        return json.dumps({"rules": listed}, ensure_ascii=False, indent=1) + "\n"
    if not chosen:
        topics = ", ".join(dict.fromkeys(rule.topic for rule in load_rules(catalogue())))
        raise UsageError(f"no rule fits; topics are: {topics}")
    lines: list[str] = []
    for heading in dict.fromkeys(rule.topic for rule in chosen):
        lines += ["", heading.upper()]
        for rule in chosen:
            if rule.topic == heading:
                text = f"{rule.id} ({rule.strength}): {rule.title}"
                lines.append(textwrap.fill(text, width, initial_indent="  ", subsequent_indent="      "))
    lines += ["", f"{len(chosen)} rules. One whole: readiness rules RULE [FOLDER]"]
    return "\n".join(lines).strip("\n") + "\n"


def clause_words(clause: Clause) -> str:
    """Return a condition as a phrase: "technique one of six-position, rotating-platform"."""
    unit = unit_of(clause.subject)
    limit = clause.limit
    if isinstance(limit, str) and "." in limit:
        limit = f"the value {limit}"
    elif isinstance(limit, tuple):
        limit = ", ".join(str(each) for each in limit)
    text = f"{words_of(clause.subject)} {CONDITIONS[clause.condition].words}"
    return (
        text if limit is None else f"{text} {limit} {unit if isinstance(limit, (int, float)) else ''}".strip()
    )


def show_rule(rule_id: str, assessment: Assessment | None, width: int, as_json: bool) -> str:
    """Return one rule whole."""
    rules = assessment.rules if assessment else load_rules(catalogue())
    rule = next((each for each in rules if each.id == rule_id), None)
    if rule is None:
        close = difflib.get_close_matches(rule_id, [each.id for each in rules], n=1)
        hint = f"; did you mean {close[0]}?" if close else "; list them with: readiness rules"
        raise UsageError(f"there is no rule {rule_id}{hint}")
    findings = [each for each in assessment.findings if each.rule == rule_id] if assessment else []
    if as_json:
        return _as_json(rule, findings)
    lines = _rule_lines(rule, assessment, width)
    if assessment is not None:
        lines += _finding_lines(rule, findings, assessment, width)
    return "\n".join(lines) + "\n"


def _as_json(rule: Rule, findings: list[Finding]) -> str:
    from readiness.outputs.contract import plain

    return (
        json.dumps({"rule": plain(rule), "findings": plain(tuple(findings))}, ensure_ascii=False, indent=1)
        + "\n"
    )


def _limit_words(rule: Rule, assessment: Assessment | None) -> str:
    """Return the number behind a limit that is a criterion, with its source; "" for any other limit."""
    criterion = criteria().get(rule.limit) if isinstance(rule.limit, str) else None
    if criterion is None:
        return ""
    used = next((each for each in assessment.values if each.name == rule.limit), None) if assessment else None
    if used is not None and used.known == "local":
        place = f", {used.where}" if used.where else ""
        ours = with_unit(rule.limit, criterion.value)
        return f"{with_unit(rule.limit, used.value)}, by {used.source}{place}; instead of {ours}"
    return f"{with_unit(rule.limit, criterion.value)}; {criterion.source}, {criterion.at} ({criterion.known})"


def _rule_lines(rule: Rule, assessment: Assessment | None, width: int) -> list[str]:
    def wrapped(label: str, text: str) -> str:
        return textwrap.fill(f"{label}: {text}", width, subsequent_indent="    ")

    lines = [f"{rule.id}", textwrap.fill(rule.title, width), ""]
    lines.append(wrapped("Strength", rule.strength + (" (physical)" if rule.physical else "")))
    asked = clause_words(Clause(rule.subject, rule.condition, rule.limit))
    lines.append(
        wrapped("Asks", f"{rule.subject}: {asked}" + ("; measured" if rule.basis == "measured" else ""))
    )
    limit = _limit_words(rule, assessment)
    lines += [wrapped("Limit", limit)] if limit else []
    for clause in rule.applies_when:
        lines.append(wrapped("Applies when", f"{clause.subject}: {clause_words(clause)}"))
    for source in rule.sources:
        citation = publications()[source.key].citation if source.key in publications() else source.key
        lines.append(wrapped("Source", f"{citation}; {source.at}. {source.known}: {how_known(source.known)}"))
    lines.append(wrapped("If not met", rule.remedy))
    if rule.would_do:
        lines.append(wrapped("With numbers", f"{rule.would_do}: {catalogue().meaning(rule.would_do)}"))
    lines.append(wrapped("Owner, task, phase", f"{rule.owner}; {rule.task}; {rule.phase}"))
    lines.append(wrapped("Exception possible", "yes" if rule.exceptable else "no"))
    if rule.documents:
        lines.append(wrapped("Documents", ", ".join(rule.documents)))
    return lines


def _finding_lines(rule: Rule, findings: list[Finding], assessment: Assessment, width: int) -> list[str]:
    lines = ["", f"In {assessment.program}, as of {assessment.as_of.isoformat()}:"]
    values = {(value.name, value.item): value for value in assessment.values}
    for finding in findings:
        lines.append("")
        lines.append(textwrap.fill(f"{finding.item}: {outcome_words(finding)}", width))
        lines.append(textwrap.fill(finding.message, width, initial_indent="  ", subsequent_indent="  "))
        if finding.exception:
            lines.append(f"  exception in force: {finding.exception}")
        value = values.get((rule.subject, finding.item))
        if isinstance(value, Value):
            lines += [f"  {line}" for line in lines_of_value(value, assessment, width - 2)]
    if not findings:
        lines.append("  no finding for the chosen arrangement")
    return lines
