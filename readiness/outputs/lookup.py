"""Finds the values of an assessment that a document may print, seen from the chosen arrangement."""

from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

from readiness.assessment.records import (
    PROGRAM,
    ArrangementRow,
    Assessment,
    Cause,
    Finding,
    Ref,
    Rule,
    Value,
)
from readiness.outputs.words import chosen_row
from readiness.quantities import Table
from readiness.units import unit_of

CRITERION = Ref("criterion", "criterion")


@dataclass(frozen=True)
class Missing:
    """A value that the assessment does not have, with what to supply, each once, where a finding says it."""

    name: str
    item: Ref
    causes: tuple[str, ...]

    @property
    def unit(self) -> str:
        """Return the printed unit that the value would have."""
        return unit_of(self.name)


class Lookup:
    """
    Values, items and findings for the chosen arrangement.

    A name is looked for on the arrangement, on its parts, and on what the program has once.
    """

    def __init__(self, assessment: Assessment) -> None:
        """Take an assessment; nothing is worked out."""
        self.assessment = assessment
        self._values: Mapping[tuple[str, Ref], Value] = {
            (value.name, value.item): value for value in assessment.values
        }
        self._rules: Mapping[str, Rule] = {rule.id: rule for rule in assessment.rules}

    @cached_property
    def row(self) -> ArrangementRow | None:
        """
        Return the arrangement that the documents are for, or None.

        Approvals are compared before the verdict is given, with the same arrangement: the department's, else
        the first of the compared ones if it is possible.
        """
        rows = self.assessment.arrangements
        possible = [row for row in rows[:1] if row.feasibility != "not feasible here"]
        chosen = [row for row in rows if row.chosen]
        return chosen_row(self.assessment) or next(iter([*chosen, *possible]), None)

    @cached_property
    def scope(self) -> Mapping[str, Ref]:
        """Return kind -> item for the arrangement and its parts."""
        if self.row is None:
            return {"program": PROGRAM, "criterion": CRITERION}
        found = {kind: Ref(kind, owner) for kind, owner in self.row.parts}
        found |= {"arrangement": self.row.item, "program": PROGRAM, "criterion": CRITERION}
        plan = self._plan()
        if plan is not None:
            found.setdefault("plan", plan)
        return found

    def _plan(self) -> Ref | None:
        """Return the plan that the arrangement's choices came from, read from their descent."""
        plans = (
            each.item
            for value in self.assessment.values
            if self.row is not None and value.item == self.row.item
            for each in value.inputs
            if each.item.kind == "plan"
        )
        return next(plans, None)

    @cached_property
    def technique(self) -> str:
        """Return the technique of the arrangement, or "" where none is known."""
        return dict(self.row.parts).get("technique", "") if self.row is not None else ""

    def item_of(self, name: str) -> Ref:
        """Return the item on which a name is looked for."""
        kind = name.partition(".")[0]
        return self.scope.get(kind, Ref(kind, kind))

    def get(self, name: str, item: Ref | None = None) -> Value | Missing:
        """Return a value of an item, or of the one in scope; or what is missing."""
        where = item or self.item_of(name)
        found = self._values.get((name, where))
        return found if found is not None else Missing(name, where, self._what_to_supply(name, where))

    def table(self, name: str) -> Table | None:
        """Return a value that holds a table, or None where it is missing."""
        found = self.get(name)
        return found.value if isinstance(found, Value) and isinstance(found.value, Table) else None

    def text_of(self, name: str, item: Ref) -> str:
        """Return a value of an item as plain text, "" where it is missing."""
        found = self.get(name, item)
        return str(found.value) if isinstance(found, Value) else ""

    def items(self, kind: str) -> tuple[Ref, ...]:
        """Return the items of a kind that belong to the arrangement's room and machine, or to neither."""
        found = dict.fromkeys(value.item for value in self.assessment.values if value.item.kind == kind)
        return tuple(sorted(item for item in found if self._in_scope(item)))

    def _in_scope(self, item: Ref) -> bool:
        for kind in ("room", "machine", "arrangement"):
            owner = self._values.get((f"{item.kind}.{kind}", item))
            if owner is not None and kind in self.scope and owner.value != self.scope[kind].id:
                return False
        return True

    def rules_on(self, subject: str) -> tuple[Rule, ...]:
        """Return the rules that judge a value."""
        return tuple(rule for rule in self._rules.values() if rule.subject == subject)

    def findings(self, rule: str, item: Ref | None = None) -> tuple[Finding, ...]:
        """Return what a rule says of one item, or of the items in scope."""
        inside = {item} if item is not None else {*self.scope.values()}
        return tuple(
            finding
            for finding in self._findings_by_rule.get(rule, ())
            if finding.item in inside or (item is None and finding.item.id == finding.item.kind)
        )

    @cached_property
    def _findings_by_rule(self) -> Mapping[str, tuple[Finding, ...]]:
        found: dict[str, list[Finding]] = {}
        for finding in self.assessment.findings:
            found.setdefault(finding.rule, []).append(finding)
        return {rule: tuple(findings) for rule, findings in found.items()}

    @cached_property
    def _causes(self) -> Mapping[tuple[str, Ref], tuple[Cause, ...]]:
        """Return why a judged value is missing: (name, item) -> causes."""
        found: dict[tuple[str, Ref], tuple[Cause, ...]] = {}
        for finding in self.assessment.findings:
            rule = self._rules.get(finding.rule)
            if rule is not None and finding.observed is None and finding.causes:
                found.setdefault((rule.subject, finding.item), finding.causes)
        return found

    def _what_to_supply(self, name: str, item: Ref) -> tuple[str, ...]:
        """Return the root causes in words, none where the assessment has not said any."""
        return tuple(dict.fromkeys(cause.words for cause in self._causes.get((name, item), ())))
