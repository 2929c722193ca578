"""What stands around the body of a document: control block, caution, requirements answered, page heads."""

import re
from collections.abc import Callable, Mapping

from readiness.assessment.records import Assessment, DocumentState, Rule
from readiness.outputs.contract import CAUTION, INVENTED
from readiness.outputs.documents import RenderedDocument
from readiness.outputs.holes import plain
from readiness.outputs.words import chosen_by_words, chosen_row, known_words, shortened
from readiness.resources import template_file

SAFETY = (
    "A number marked predicted or assumed has not been measured: do not use it on a patient. A number marked "
    "stated is the department's own statement, one marked limit is what is asked for. This document states "
    "no monitor units to deliver."
)
SHEET = "patient-sheet"
RECORD = "A record of approval, not a signature."
_BINDER_LINK = re.compile(r'<a href="binder:([^"]*)">(.*?)</a>', re.DOTALL)
_NUMBER = re.compile(r"[0-9]+\.[0-9]+")


def style(assessment: Assessment) -> str:
    """Return the style sheet for the paper of the department."""
    css = template_file("style", "document.css").read_text(encoding="utf-8")
    letter = any(value.name == "program.paper" and value.value == "letter" for value in assessment.values)
    return css.replace("size: A4", "size: letter") if letter else css


def anchor(target: str) -> str:
    """Return the place that a binder link means: a document's number, or a name of ours."""
    return "d" + target.replace(".", "-") if _NUMBER.fullmatch(target) else re.sub(r"[^a-z0-9-]", "-", target)


def resolved(html: str, target_of: Callable[[str], str | None]) -> str:
    """Return HTML with binder links led to their target; a link to nothing becomes its own words."""

    def led(found: re.Match[str]) -> str:
        target = target_of(found[1])
        return found[2] if target is None else f'<a href="{plain(target)}">{found[2]}</a>'

    return _BINDER_LINK.sub(led, html)


def is_approved(state: DocumentState | None) -> bool:
    """Return whether every approver has approved the body as it is now."""
    return state is not None and state.status == "approved"


def state_words(state: DocumentState | None) -> str:
    """Return revision and status for the running head."""
    if state is None or not is_approved(state):
        changed = state is not None and state.status == "changed after approval"
        return "DRAFT, changed after approval" if changed else "DRAFT, not approved"
    latest = max((day for _, _, day in state.approvals), default="")
    return f"revision {state.revision or 'not numbered'}, approved {latest}"


def foot_words(assessment: Assessment) -> str:
    """Return what stands at the foot of every page."""
    first = f"{assessment.program}, {assessment.as_of.isoformat()}. Planning aid; confirm by measurement."
    return f"{first} {INVENTED}" if assessment.invented else first


def page(title: str, article: str, css: str = "") -> str:
    """Return a whole HTML page."""
    inside = f"<style>\n{css}</style>" if css else ""
    return (
        f'<!DOCTYPE html>\n<html lang="en"><head><meta charset="utf-8"><title>{plain(title)}</title>'
        f'<meta name="viewport" content="width=device-width">{inside}</head>\n<body>\n{article}\n</body>'
        "</html>\n"
    )


def article(document: RenderedDocument, assessment: Assessment, first: bool = True) -> str:
    """Return a document whole; the first of a part opens that part in the outline."""
    opens = f'class="docpart first" data-part="{document.part}"' if first else 'class="docpart"'
    state = next((each for each in assessment.documents if each.number == document.number), None)
    name = f"{document.number} {document.title}"
    approved = "" if is_approved(state) else " (draft)"
    return (
        f'<article id="{anchor(document.number)}" class="{document.kind}" data-head="{plain(name)}" '
        f'data-state="{plain(state_words(state))}" data-foot="{plain(foot_words(assessment))}">\n'
        f"<p {opens}>{plain(document.part)}, {document.kind}</p>"
        f'<h1 data-label="{plain(name + approved)}">{plain(name)}</h1>\n'
        f"<p>{plain(document.purpose)}</p>\n{_control(document, state, assessment)}\n"
        f'<p class="caution"><b>Caution.</b> {plain(CAUTION)} {plain(SAFETY)}</p>\n'
        f"{_body_and_around(document, assessment)}</article>"
    )


def _body_and_around(document: RenderedDocument, assessment: Assessment) -> str:
    """Return body and what stands below it; a sheet that a patient takes home comes last, on its own."""
    body, taken_home, sheet = document.html_body.partition(f'<section id="{anchor(document.number)}-{SHEET}"')
    return f"{body}\n{_around(document, assessment)}{taken_home}{sheet}"


def _control(document: RenderedDocument, state: DocumentState | None, assessment: Assessment) -> str:
    row = chosen_row(assessment)
    by = "" if row is None or row.chosen else f" ({chosen_by_words(assessment)})"
    arrangement = f"{row.title}{by}" if row else "none chosen"
    approvals = "; ".join(f"{role}: {who}, {day}" for role, who, day in state.approvals) if state else ""
    rows: Mapping[str, str] = {
        "Department": assessment.program + _invented(assessment),
        "Written for": arrangement,
        "Owner; approvers": f"{document.owner}; {', '.join(document.approvers)}",
        "Revision and status": state_words(state),
        "Approvals": f"{approvals}. {RECORD}" if approvals else "none",
    }
    if document.kind == "form":
        said = [f"<b>{key}</b> {plain(text)}" for key, text in rows.items()]
        links = ", ".join(map(_link, _own_rules(document, assessment)))
        said += [f"<b>Answers</b> {links}"] if links else []
        return f'<p class="control-line">{". ".join(said)}.</p>'
    lines = "".join(
        f'<tr><th scope="row">{key}</th><td>{plain(text)}</td></tr>' for key, text in rows.items()
    )
    return f'<table class="control"><tbody>{lines}</tbody></table>'


def _invented(assessment: Assessment) -> str:
    needed = assessment.invented and "invented" not in assessment.program.lower()
    return " (invented)" if needed else ""


def _own_rules(document: RenderedDocument, assessment: Assessment) -> list[Rule]:
    """Return the rules that name the document and apply here."""
    applying = {each.rule for each in assessment.findings if each.outcome != "not applicable"}
    own = (rule for rule in assessment.rules if document.number in rule.documents)
    return [rule for rule in own if rule.id in applying]


def _link(rule: Rule) -> str:
    return f'<a href="binder:rule-{plain(rule.id)}">{plain(rule.id)}</a>'


def _around(document: RenderedDocument, assessment: Assessment) -> str:
    """Return what stands below a document; a form, meant for one sheet, says at its head what it answers."""
    rules = _own_rules(document, assessment) if document.kind != "form" else []
    lines = "; ".join(
        f"{_link(rule)} ({rule.strength}) {plain(rule.title)} "
        f'<span class="known">[{plain(known_words(rule))}]</span>'
        for rule in rules
    )
    answered = f"<h2>Requirements that this document answers</h2><p>{lines}.</p>" if lines else ""
    groups: dict[str, list[str]] = {}
    for blank in document.missing:
        words = shortened(blank.words, assessment).removesuffix(".")
        groups.setdefault(blank.group, []).append(plain(words))
    blanks = "".join(
        f"<p><b>{group}:</b> {'; '.join(dict.fromkeys(said))}.</p>" for group, said in groups.items()
    )
    still = f"<h2>Blanks in this document, and what fills them</h2>{blanks}" if blanks else ""
    return f'<section class="around">{answered}{still}</section>' if answered or still else ""
