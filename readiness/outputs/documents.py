"""
The controlled documents: our templates, the department's numbers, and its own wording where it has one.

A document's body is what people approve: its hash changes with every word and number in it, and with
nothing else. Revision, dates, approvals and versions stand around the body and are not part of it.
"""

import hashlib
import re
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cache
from typing import Any

from jinja2 import Environment, StrictUndefined, Template
from markupsafe import Markup

from readiness.assessment.catalogue import catalogue
from readiness.assessment.document_heads import DocumentHead, Section, document_heads, split
from readiness.assessment.records import Assessment
from readiness.errors import CatalogueError, UsageError
from readiness.outputs.critical import CRITICAL
from readiness.outputs.form_fields import FormFields
from readiness.outputs.holes import Holes, plain, to_html, without_holes
from readiness.outputs.lookup import Lookup
from readiness.outputs.showing import Blank, Showing
from readiness.resources import template_file

_NAME_HOLE = re.compile(r"\{\{\s*([a-z_]+\.[a-z0-9_]+)\s*\}\}")
Texts = Mapping[tuple[str, str], str]  # (document number, part) -> the department's own Markdown


@dataclass(frozen=True)
class RenderedDocument:
    """
    One document as it will be printed, without what is around its body.

    Attributes:
        html_body: HTML of its parts; links into the binder begin with ``binder:``.
        body_sha256: Hash of that body.
        values: Names of the values it shows.
        missing: What stands as a blank in it, and what fills it.
        own_wording: Headings of the parts that are in the department's own words.
        fields: Names of its form fields.
    """

    number: str
    title: str
    part: str
    kind: str
    owner: str
    approvers: tuple[str, ...]
    purpose: str
    html_body: str
    body_sha256: str
    values: tuple[str, ...]
    missing: tuple[Blank, ...]
    own_wording: tuple[str, ...]
    fields: tuple[str, ...]


def render_bodies(
    assessment: Assessment, texts: Texts | None = None, pictures: Mapping[str, str] | None = None
) -> tuple[RenderedDocument, ...]:
    """
    Return every document that belongs to the technique of the assessment, by number.

    Args:
        assessment: What the documents show.
        texts: The department's own wording of some parts.
        pictures: Drawings by name, as SVG.

    Raises:
        UsageError: If the department's wording names a document, part or value that does not exist.
    """
    _check(texts or {})
    lookup = Lookup(assessment)
    heads = [head for head in document_heads() if head.shown_for(lookup.technique)]
    return tuple(_render(head, lookup, texts or {}, pictures or {}) for head in heads)


def wording_problems(texts: Texts) -> tuple[str, ...]:
    """Return what is wrong with the department's own wording, one sentence each."""
    heads = {head.number: head for head in document_heads()}
    found = []
    for (number, part), text in sorted(texts.items()):
        where = f"texts/{number}/{part}.md"
        if number not in heads:
            found.append(f"{where}: there is no document {number}")
        elif part not in heads[number].sections:
            known = ", ".join(heads[number].sections)
            found.append(f"{where}: document {number} has no part {part}; its parts are {known}")
        names = dict.fromkeys(_NAME_HOLE.findall(text))
        found += [f"{where}: there is no value {name}" for name in names if not catalogue().has(name)]
        if "{" + "%" in text or "{{" in _NAME_HOLE.sub("", text):
            found.append(f"{where}: only {{{{ value.name }}}} is filled in, nothing else in braces")
    return tuple(found)


def _check(texts: Texts) -> None:
    problems = wording_problems(texts)
    if problems:
        raise UsageError("the department's own wording cannot be used: " + "; ".join(problems))


def _render(
    head: DocumentHead, lookup: Lookup, texts: Texts, pictures: Mapping[str, str]
) -> RenderedDocument:
    holes = Holes()
    showing, forms = Showing(lookup, pictures, holes), FormFields(head.number, holes)
    functions = _functions(showing, forms, lookup)
    _, sections = split(template_file("documents", head.file))
    parts, hashed, own = [], [], []
    for section in sections:
        if lookup.technique and section.shown_when and lookup.technique not in section.shown_when:
            continue
        wording = texts.get((head.number, section.key))
        if wording is not None:
            own.append(section.heading)
        markdown = _ours(functions, section, head) if wording is None else _department(wording, showing)
        html = _section(head.number, section, to_html(markdown), wording is not None)
        parts.append(holes.fill(html))
        hashed.append(holes.fill(html, for_hash=True))
    digest = hashlib.sha256("\n".join(hashed).encode()).hexdigest()
    return RenderedDocument(
        number=head.number, title=head.title, part=head.part, kind=head.kind, owner=head.owner,
        approvers=head.approvers, purpose=head.purpose, html_body="\n".join(parts), body_sha256=digest,
        values=tuple(showing.shown),
        missing=tuple(showing.missing.values()), own_wording=tuple(own), fields=tuple(forms.names),
    )  # fmt: skip


def _functions(showing: Showing, forms: FormFields, lookup: Lookup) -> dict[str, Any]:
    """Return what a template may ask for; nothing else is known to it."""
    return {
        "show": showing.show, "critical": showing.critical, "table": showing.table,
        "rows": showing.rows, "tables": showing.tables, "listing": showing.listing,
        "picture": showing.picture, "source": showing.source,
        "failure_modes": showing.failure_modes, "score_scale": showing.score_scale,
        "lines": forms.lines, "line": forms.line, "ticks": forms.ticks, "area": forms.area,
        "sheet": forms.sheet, "worksheet": forms.worksheet, "signatures": forms.signatures,
        "technique": lambda *names: not lookup.technique or lookup.technique in names,
    }  # fmt: skip


@cache
def _compiled(text: str) -> Template:
    """Return template text ready to be filled in, compiled once."""
    environment = Environment(
        undefined=StrictUndefined,
        autoescape=True,
        finalize=_refuse_none,
        trim_blocks=True,
        lstrip_blocks=True,
    )
    environment.globals.clear()
    return environment.from_string(text)


def _refuse_none(value: Any) -> Any:
    if value is None:
        raise CatalogueError("a template prints nothing at all where a value should be")
    return value


def _ours(functions: Mapping[str, Any], section: Section, head: DocumentHead) -> str:
    try:
        return _compiled(section.text).render(functions)
    except CatalogueError as error:
        raise CatalogueError(f"{head.file}, {section.heading}: {error}") from error


def _department(wording: str, showing: Showing) -> str:
    def fill(name: str) -> Markup:
        return showing.critical(name) if name in CRITICAL else showing.show(name)

    return _NAME_HOLE.sub(lambda found: str(fill(found[1])), without_holes(wording))


def _section(number: str, section: Section, html: str, own: bool) -> str:
    anchor = f"d{number.replace('.', '-')}-{section.key}"
    note = '<p class="own-wording">The department\'s own wording.</p>' if own else ""
    heading = f"<h2>{plain(section.heading)}</h2>"
    return f'<section id="{anchor}" class="part-{section.key}">{heading}\n{html}{note}</section>'
