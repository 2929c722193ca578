"""Invented assessments for tests of the documents and the press: nothing known, and everything known."""

import re
from datetime import date
from functools import cache

from readiness.assessment.document_heads import document_heads, split
from readiness.assessment.records import (
    ArrangementRow,
    Assessment,
    Cause,
    DocumentState,
    Finding,
    Gap,
    Ref,
    Rule,
    RuleSource,
    Schedule,
    ScheduledTask,
    Value,
    Verdict,
    Versions,
)
from readiness.outputs.critical import CRITICAL
from readiness.program.fields import schemas
from readiness.quantities import Table
from readiness.resources import template_file
from readiness.units import unit_ending, unit_of

AS_OF = date(2026, 12, 1)
PARTS = (
    ("room", "vault-a"), ("machine", "linac-1"), ("beam", "linac-1/e6"), ("side_deg", "90"),
    ("technique", "six-position"), ("degrader", "sheet-06"), ("stand", "turntable-1"),
)  # fmt: skip
ARRANGEMENT = Ref("arrangement", "vault-a/linac-1/e6/side-90/six-position/sheet-06/turntable-1")
_NAMED = re.compile(r'\b(?:show|critical)\("([a-z_]+\.[a-z0-9_]+)"')
_TABLES = re.compile(r'\btable\("([a-z_]+\.[a-z0-9_]+)"(?:, "([a-z0-9_ ]+)")?')
_LISTED = re.compile(r'\blisting\("([a-z_]+)", "([a-z0-9_ ]+)"')


@cache
def template_texts() -> dict[str, str]:
    """Return document number -> everything its template says."""
    return {
        head.number: "\n".join(section.text for section in split(template_file("documents", head.file))[1])
        for head in document_heads()
    }


@cache
def names_in_templates() -> frozenset[str]:
    """Return the name of every value that a template prints."""
    text = "\n".join(template_texts().values())
    listed = {f"{kind}.{field}" for kind, fields in _LISTED.findall(text) for field in fields.split()}
    return frozenset({*_NAMED.findall(text), *(name for name, _ in _TABLES.findall(text)), *listed})


@cache
def _tables_in_templates() -> dict[str, str]:
    return dict(_TABLES.findall("\n".join(template_texts().values())))


def empty() -> Assessment:
    """Return an assessment in which nothing is known."""
    return Assessment(
        program="Department not named", invented=False, as_of=AS_OF, phase="decide",
        versions=Versions("0.1.0", "abc", "1"),
        verdict=Verdict("not enough described", "", "", ("Nothing is described.",)),
        arrangements=(), values=(), findings=(), gaps=(), schedule=None, documents=states("draft"), rules=(),
        inputs=(),
    )  # fmt: skip


def states(status: str, hashes: dict[str, str] | None = None) -> tuple[DocumentState, ...]:
    """Return the state of every document, all alike."""
    approvals = (("chief physicist", "A. Example", "2026-11-20"),) if status == "approved" else ()
    return tuple(
        DocumentState(
            head.number, head.title, head.part, head.kind, head.owner, head.approvers,
            (hashes or {}).get(head.number, ""), (), (), status, "2" if approvals else "", approvals,
        )
        for head in document_heads()
    )  # fmt: skip


def rule(name: str, subject: str, documents: tuple[str, ...] = ("3.1",)) -> Rule:
    """Return a must-rule of that name."""
    return Rule(
        id=name, title=f"Rule of the name {name}", strength="must",
        sources=(RuleSource("aapm-23", "sec. 2.1", "memory"),), applies_when=(), subject=subject,
        condition="present", limit=None, basis="measured", physical=False, exceptable=True,
        message="It is {observed}.", remedy="Measure it.", owner="medical physicist", task="record-as-built",
        phase="commission", evidence=(), documents=documents, topic="geometry",
    )  # fmt: skip


@cache
def full(technique: str = "six-position", status: str = "draft") -> Assessment:
    """Return an assessment in which everything that documents print is known, measured and met."""
    parts = tuple((kind, technique if kind == "technique" else owner) for kind, owner in PARTS)
    row = ArrangementRow(
        ARRANGEMENT, "vault-a, linac-1, e6, side 90, sheet-06", parts, "feasible when gaps close", (), (),
        True, (("arrangement.plane_distance_cm", 400.0, "stated"),), ("It is the only one.",),
    )  # fmt: skip
    values = tuple(value for name in sorted(names_in_templates()) for value in _values(name))
    rules = tuple(rule(name, subject) for name, subject in _critical_rules().items())
    findings = tuple(_met(each) for each in rules)
    cause = Cause("measurement", "survey", Ref("room", "vault-a"), "Measure a survey in the mode.")
    open_rule = rule("survey-in-mode", "room.air_changes_per_h", ("4.7",))
    missing = Finding(
        "survey-in-mode", Ref("room", "vault-a"), "not assessed", causes=(cause,), message=cause.words
    )
    gap = Gap(
        "survey-vault-a", "supply", "Measure a survey in the mode.", Ref("room", "vault-a"),
        (("survey-in-mode", Ref("room", "vault-a")),), "survey-radiation", "radiation protection officer",
        "must", "commission", "shielding", False, earliest=date(2027, 2, 1),
    )  # fmt: skip
    return Assessment(
        program="Example Department", invented=True, as_of=AS_OF, phase="commission",
        versions=Versions("0.1.0", "abc", "1"),
        verdict=Verdict("ready when gaps close", ARRANGEMENT.id, "department", ("One finding is open.",)),
        arrangements=(row,), values=values, findings=(*findings, missing), gaps=(gap,), schedule=_road(),
        documents=states(status), rules=(*rules, open_rule), inputs=(("program.yaml", "ab" * 32, 120),),
    )  # fmt: skip


def _road() -> Schedule:
    task = ScheduledTask(
        "survey-radiation", "Survey around the room", "radiation protection officer", "commission", 2.0, (),
        ("survey-vault-a",), date(2027, 1, 28), date(2027, 2, 1), date(2027, 2, 1), 0.0, True, False,
        "department's own",
    )  # fmt: skip
    return Schedule(
        (task,), date(2027, 2, 2), date(2027, 1, 15), 12, (("survey-radiation", 2.0),), ("One remark.",)
    )


def _critical_rules() -> dict[str, str]:
    subjects = dict.fromkeys(subject for each in CRITICAL.values() for subject in each.subjects)
    return {subject.partition(".")[2].replace("_", "-") + "-rule": subject for subject in subjects}


def _met(each: Rule) -> Finding:
    kind = each.kind
    item = ARRANGEMENT if kind == "arrangement" else Ref(kind, dict(PARTS).get(kind, f"{kind}-1"))
    return Finding(each.id, item, "met", observed=1.0, basis="measured", message="It agrees.")


def _values(name: str) -> tuple[Value, ...]:
    kind = name.partition(".")[0]
    owners = {**dict(PARTS), "arrangement": ARRANGEMENT.id}
    ids = (owners[kind],) if kind in owners else (kind,) if _is_single(kind) else (f"{kind}-1", f"{kind}-2")
    return tuple(Value(name, Ref(kind, each), _invented(name), unit_of(name), "measured") for each in ids)


def _is_single(kind: str) -> bool:
    schema = schemas().kinds.get(kind)
    return schema is None or schema.form != "list" or kind == "plan"


def _invented(name: str) -> object:
    if name in _tables_in_templates():
        columns = tuple(_tables_in_templates()[name].split()) or ("height_cm", "relative_dose")
        return Table.of(columns, [[0.98 + place for place in range(len(columns))]] * 2)
    field = schemas().field(name)
    if name.endswith(".room"):
        return "vault-a"
    if name.endswith(".machine"):
        return "linac-1"
    if field is not None:
        made = {
            "yes or no": True, "date": date(2026, 5, 4), "text": "as *written* <here> & there",
            "word": next(iter(field.words), ""), "words": tuple(field.words)[:2], "texts": ("one", "two"),
            "rows": Table(("material", "thickness_cm"), (("concrete", 110.0),)), "numbers": (70.0, 110.0),
            "whole number": 6,
        }  # fmt: skip
        if field.type in made:
            return made[field.type]
    return 12.5 if unit_ending(name) or field is not None else 2.5
