"""What templates may ask for: values, tables, lists, pictures and sources; nothing is worked out here."""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass

from markupsafe import Markup

from readiness.assessment.catalogue import catalogue
from readiness.assessment.criteria import criteria
from readiness.assessment.records import Ref, Value
from readiness.assessment.wording import in_words
from readiness.errors import CatalogueError
from readiness.outputs.critical import CRITICAL, open_rules
from readiness.outputs.failure_mode_table import modes_html, scale_html
from readiness.outputs.holes import Holes, plain
from readiness.outputs.lookup import Lookup, Missing
from readiness.quantities import Table
from readiness.sources import HOW_KNOWN, publications
from readiness.units import unit_of, words_of

BLANK = "________"
MANY = 9  # columns; from here on they share the width of the page
LONG = 20  # characters; a longer value may be broken over lines
LIMIT, CONVENTION = "limit", "convention"  # what stands beside a criterion, where a value has its basis
KNOWN = "known"  # the column of a table whose rows come from publications
WRITTEN = {"pmma": "PMMA", "xray dose": "X-ray dose"}  # headings that a capital alone does not make right
STATE, WORK_OUT, RULES, LISTS, CAUSES = (
    "To state in the program folder",
    "To measure, or to be worked out once its inputs are stated",
    "Until measured and met",
    "Nothing of its kind is described",
    "What the assessment asks for",
)


@dataclass(frozen=True)
class Blank:
    """Something that a document could not print: its name, why in a word, and what fills it."""

    name: str
    group: str
    words: str


def with_unit(text: str, unit: str) -> str:
    """Return a number with its unit, which never stands on the next line."""
    if not unit:
        return text
    return text + unit if unit == "°" else f"{text}\u00a0{unit}"


class Showing:
    """Answers the questions of one document's template and remembers what it showed and what was missing."""

    def __init__(self, lookup: Lookup, pictures: Mapping[str, str], holes: Holes) -> None:
        """Take where values, pictures and holes are kept."""
        self._lookup = lookup
        self._pictures = pictures
        self._holes = holes
        self.shown: dict[str, None] = {}
        self.missing: dict[tuple[str, int], Blank] = {}

    def show(self, name: str) -> Markup:
        """Return a value with its unit and basis, or a blank line with what to supply."""
        if name in CRITICAL:
            raise CatalogueError(f"{name} is a critical number: a document asks for it with critical()")
        return self._hole(self._one(name, self._lookup.get(name)))

    def critical(self, name: str) -> Markup:
        """Return a critical number if it is measured and its rules are met, else a blank with the rule."""
        return self._hole(self._critical(name, None))

    def table(self, name: str, columns: str = "") -> Markup:
        """Return a value that holds a table, whole or some of its columns."""
        found = self._lookup.get(name)
        if isinstance(found, Missing):
            return self._block(f"<p>{self._blank(found)}</p>")
        if not isinstance(found.value, Table):
            raise CatalogueError(f"{name} holds no table")
        self.shown[name] = None
        wanted = columns.split() or found.value.columns
        entries = [found.value.column(column) for column in wanted]
        rows = [[plain(_cell(entry)) for entry in row] for row in zip(*entries, strict=True)]
        table = html_table([_column_words(column) for column in wanted], rows)
        return self._block(table + _basis_line(found, wanted))

    def rows(self, name: str) -> tuple[tuple[str, ...], ...]:
        """Return the cells of a table as text, for a form that is filled in beside them; none if missing."""
        found = self._lookup.get(name)
        if isinstance(found, Missing):
            return ()
        if not isinstance(found.value, Table):
            raise CatalogueError(f"{name} holds no table")
        self.shown[name] = None
        return tuple(tuple(_cell(entry) for entry in row) for row in found.value.rows)

    def tables(self, name: str, title: str, columns: str = "") -> Markup:
        """Return a table, whole or some columns, of every item in scope that has it, under its title."""
        kind = name.partition(".")[0]
        parts = []
        for item in self._lookup.items(kind):
            found = self._lookup.get(name, item)
            if isinstance(found, Value) and isinstance(found.value, Table):
                self.shown[name] = None
                wanted = columns.split() or found.value.columns
                heads = [_column_words(column) for column in wanted]
                entries = zip(*(found.value.column(column) for column in wanted), strict=True)
                cells = [[plain(_cell(entry)) for entry in row] for row in entries]
                parts.append(f"<h3>{plain(self._lookup.text_of(title, item))}</h3>")
                parts.append(html_table(heads, cells, "list many" if len(heads) >= MANY else "list"))
                parts.append(_basis_line(found, wanted))
        return self._block("".join(parts) or '<p class="need">Nothing could be calculated yet.</p>')

    def listing(self, kind: str, fields: str) -> Markup:
        """Return a table with one row for each item of a kind, some of its fields as columns."""
        names = [f"{kind}.{field}" for field in fields.split()]
        items = self._lookup.items(kind)
        if not items:
            words = f"No {words_of(kind)} is described in the program folder."
            self._note(kind, LISTS, words_of(kind))
            return self._block(f'<p class="need">{plain(words)}</p>')
        heads = [words_of(kind).capitalize(), *(_column_words(name) for name in names)]
        rows = [
            [f"<b>{plain(item.id)}</b>", *(self._one_in_list(name, item) for name in names)] for item in items
        ]
        return self._block(html_table(heads, rows, "list" if len(heads) < MANY else "list many"))

    def picture(self, name: str) -> Markup:
        """Return a drawing, or the sentence that there is none; the hash of the body knows its name only."""
        svg = self._pictures.get(name)
        words = f"Drawing of the {name.replace('-', ' ')}: none yet; what it shows is not described."
        html = f'<p class="need">{words}</p>' if svg is None else f'<figure class="picture">{svg}</figure>'
        return Markup(self._holes.put(html, block=True, hashed=name))  # noqa: S704 - as below

    def failure_modes(self) -> Markup:
        """Return the failure modes with causes, effects, controls and the team's scores."""
        return self._block(modes_html(self._lookup))

    def score_scale(self) -> Markup:
        """Return what the scores of failure modes mean."""
        return self._block(scale_html())

    def source(self, key: str, at: str, known: str) -> Markup:
        """Return a publication with the place in it and how it is known."""
        if known not in HOW_KNOWN or key not in publications():
            raise CatalogueError(f"source {key} ({known}) does not exist")
        words = f'{publications()[key].citation}; {at} <span class="known">[{known}]</span>'
        return self._hole(f'<a href="binder:source-{plain(key)}">{plain(key)}</a>: {words}')

    def _one(self, name: str, found: Value | Missing) -> str:
        if isinstance(found, Missing):
            return self._blank(found)
        if isinstance(found.value, Table):
            raise CatalogueError(f"{name} holds a table: a document asks for it with table()")
        self.shown[name] = None
        return f'{_value_words(found)}<span class="basis">{_basis_words(found)}</span>'

    def _one_in_list(self, name: str, item: Ref) -> str:
        if name in CRITICAL:
            return self._critical(name, item)
        found = self._lookup.get(name, item)
        if isinstance(found, Missing):
            return f'<span class="blank">{with_unit("____", found.unit)}</span>'
        self.shown[name] = None
        basis = "" if found.basis == "stated" else f'<span class="basis">{plain(found.basis)}</span>'
        return plain(spoken(found)) + basis

    def _critical(self, name: str, item: Ref | None) -> str:
        found = self._lookup.get(name, item)
        rules = open_rules(name, self._lookup, item)
        if isinstance(found, Value) and rules == ():
            self.shown[name] = None
            return f'{_value_words(found)}<span class="basis">{CRITICAL[name].words}</span>'
        where = f" of {item}" if item is not None else ""
        links = ", ".join(f'<a href="binder:rule-{plain(rule)}">{plain(rule)}</a>' for rule in rules or ())
        until = f"until rule {links} is met" if links else "until it has been measured here"
        said = f"rule {', '.join(rules)}" if rules else "measured here"
        self._note(f"{name}{where}", RULES, f"{words_of(name)}{where} ({said})")
        return (
            f'<span class="blank">{with_unit(BLANK, unit_of(name))}</span>'
            f'<span class="need"> ({until})</span>'
        )

    def _blank(self, found: Missing) -> str:
        words, kind = words_of(found.name), words_of(found.item.kind)
        is_field = catalogue().kinds.field(found.name) is not None
        group = CAUSES if found.causes else STATE if is_field else WORK_OUT
        for place, said in enumerate(found.causes or (f"{words} ({kind})",)):
            self._note(found.name, group, said, place)
        need = f"to supply: {words}" if is_field else f"{words} not known yet"
        return (
            f'<span class="blank">{plain(with_unit(BLANK, found.unit))}</span>'
            f'<span class="need"> ({plain(need)})</span>'
        )

    def _note(self, name: str, group: str, words: str, place: int = 0) -> None:
        self.missing.setdefault((name, place), Blank(name, group, words))

    def _hole(self, html: str) -> Markup:
        return Markup(self._holes.put(html))  # noqa: S704 - the hole is two characters and a number

    def _block(self, html: str) -> Markup:
        return Markup(self._holes.put(html, block=True))  # noqa: S704 - as above


def html_table(heads: Sequence[str], rows: Sequence[Sequence[str]], css: str = "list") -> str:
    """Return a table; headings are plain words, cells are HTML."""
    head = "".join(f'<th scope="col">{plain(each)}</th>' for each in heads)
    body = "".join("<tr>" + "".join(f"<td>{cell}</td>" for cell in row) + "</tr>" for row in rows)
    return f'<table class="{css}"><thead><tr>{head}</tr></thead><tbody>{body}</tbody></table>'


def spoken(found: Value) -> str:
    """Return a value in words; a word of a field by its meaning, or at least without its hyphens."""
    if isinstance(found.value, Table):
        rows = (_row_words(found.value.columns, row) for row in found.value.rows)
        return "; ".join(rows) or "none"
    field = catalogue().kinds.field(found.name)
    if field is None or field.type not in {"word", "words"}:
        return in_words(found.value)
    chosen = found.value if isinstance(found.value, tuple) else (found.value,)
    return ", ".join(field.words.get(each) or str(each).replace("-", " ") for each in chosen)


def _row_words(columns: Sequence[str], row: Sequence[object]) -> str:
    said = zip(columns, row, strict=True)
    return " ".join(with_unit(in_words(entry), unit_of(name)) for name, entry in said if entry is not None)


def _value_words(found: Value) -> str:
    text = spoken(found)
    if found.sd is not None:
        text = f"{text} ± {in_words(found.sd)}"
    css = "value" if len(text) < LONG else "value long"
    return f'<span class="{css}">{plain(with_unit(text, found.unit))}</span>'


def _basis_words(found: Value) -> str:
    """Return the basis of a value; a criterion is asked for, and nobody of the department has stated it."""
    if found.item.kind == "criterion":
        ours = criteria().get(found.name)
        return LIMIT if ours is None or ours.stricter else CONVENTION
    return plain(found.basis)


def _basis_line(found: Value, columns: Sequence[str]) -> str:
    """Return what stands below a table: its basis, unless each of its rows says how it is known."""
    return "" if KNOWN in columns else f'<p class="basis-line">{plain(found.basis)}</p>'


def _column_words(name: str) -> str:
    """Return a heading, with its unit unless that is the heading already."""
    unit = unit_of(name)
    words = words_of(name).removesuffix(" ratio")
    words = words[:1].upper() + words[1:] if words not in WRITTEN else WRITTEN[words]
    return f"{words} [{unit}]" if unit and unit != words.lower() else words


def _cell(entry: object) -> str:
    return "" if entry is None else in_words(entry)
