"""Fields that people fill in, on paper or in the PDF; every field of a binder has its own name."""

import re
from collections.abc import Sequence

from markupsafe import Markup

from readiness.errors import CatalogueError
from readiness.outputs.holes import Holes, plain

SIGNED = ("Role", "Name", "Date, time", "Signature")

_MINUS = re.compile(r"(?<![a-z0-9])-(?![a-z])")  # a sign, not a hyphen


_FIELD_NAME = re.compile(r"f(\d+)-(\d+)-")


def field_prefix(number: str) -> str:
    """Return what the names of a document's fields begin with; a dot is not allowed in them."""
    return "f" + number.replace(".", "-")


def document_of(field_name: str) -> str:
    """Return the number of the document whose field it is, or the name itself if it is none of ours."""
    found = _FIELD_NAME.match(field_name)
    return f"{found[1]}.{found[2]}" if found else field_name


class FormFields:
    """
    The fillable fields of one document.

    A label may end with a unit after a bar: "Height|cm". Names are made from the document's number and
    the label, so that they are the same every time and unique in the binder.
    """

    def __init__(self, number: str, holes: Holes) -> None:
        """Take the document's number."""
        self._prefix = field_prefix(number)
        self._holes = holes
        self.names: dict[str, None] = {}

    def lines(self, *labels: str) -> Markup:
        """Return labelled fields, two in a row."""
        return self._fields("half", labels)

    def line(self, *labels: str) -> Markup:
        """Return labelled fields over the full width."""
        return self._fields("full", labels)

    def ticks(self, *labels: str) -> Markup:
        """Return boxes to tick, one a line."""
        return self._block("".join(f'<p class="tick">{self._box(each)} {plain(each)}</p>' for each in labels))

    def area(self, label: str, lines: int = 4) -> Markup:
        """Return a labelled field of several lines."""
        name = self._name(label)
        return self._block(
            f'<div class="area"><p class="label">{plain(label)}</p><textarea name="{name}" '
            f'title="{plain(label)}" aria-label="{plain(label)}" class="rows-{lines}"></textarea></div>'
        )

    def sheet(
        self,
        columns: Sequence[str],
        rows: int | Sequence[str],
        ticked: Sequence[str] = (),
        *,
        half: bool = False,
    ) -> Markup:
        """
        Return a table to fill in.

        Args:
            columns: Headings; a heading may end with a unit after a bar. With named rows the first heading
                stands over their names.
            rows: How many blank rows, or the names of the rows.
            ticked: Headings whose cells are boxes to tick.
            half: Two such sheets, one after the other, stand side by side.
        """
        named = not isinstance(rows, int)
        widths = [_width(each, place, columns, named, ticked) for place, each in enumerate(columns)]
        heads = "".join(
            f'<th scope="col"{width}>{_with_unit(each)}</th>'
            for each, width in zip(columns, widths, strict=True)
        )
        names = [str(count + 1) for count in range(rows)] if isinstance(rows, int) else rows
        body = "".join(self._row(name, columns, named, ticked) for name in names)
        css = ("sheet" if named else "sheet blank-rows") + (" half" if half else "")
        return self._block(
            f'<table class="{css}"><thead><tr>{heads}</tr></thead><tbody>{body}</tbody></table>'
        )

    def worksheet(
        self, shown: Sequence[str], rows: Sequence[Sequence[str]], columns: Sequence[str]
    ) -> Markup:
        """
        Return a table whose first cells are given and whose last cells are filled in.

        Args:
            shown: Headings over the given cells.
            rows: The given cells of each row.
            columns: Headings of the cells to fill in.
        """
        heads = "".join(f'<th scope="col">{_with_unit(each)}</th>' for each in (*shown, *columns))
        body = ""
        for number, row in enumerate(rows, 1):
            given = "".join(f"<td>{plain(cell)}</td>" for cell in row)
            fields = "".join(f"<td>{self._input(f'{number}, {each}')}</td>" for each in columns)
            body += f"<tr>{given}{fields}</tr>"
        return self._block(
            f'<table class="sheet given"><thead><tr>{heads}</tr></thead><tbody>{body}</tbody></table>'
        )

    def signatures(self, *roles: str) -> Markup:
        """Return a table for names, dates and signatures of roles."""
        rows = "".join(
            f'<tr><th scope="row">{plain(role)}</th><td>{self._input(f"{role}, name")}</td>'
            f'<td>{self._input(f"{role}, date")}</td><td class="by-hand"></td></tr>'
            for role in roles
        )
        heads = "".join(f'<th scope="col">{each}</th>' for each in SIGNED)
        return self._block(
            f'<table class="sheet signatures"><thead><tr>{heads}</tr></thead><tbody>{rows}</tbody></table>'
        )

    def _row(self, name: str, columns: Sequence[str], named: bool, ticked: Sequence[str]) -> str:
        first = f'<th scope="row">{_with_unit(name)}</th>' if named else ""
        cells = "".join(
            f"<td>{self._box(f'{name}, {each}') if each in ticked else self._input(f'{name}, {each}')}</td>"
            for each in (columns[1:] if named else columns)
        )
        return f"<tr>{first}{cells}</tr>"

    def _fields(self, width: str, labels: Sequence[str]) -> Markup:
        labelled = [f'<span class="label">{_with_unit(each)}</span>{self._input(each)}' for each in labels]
        fields = "".join(f'<div class="field {width}">{each}</div>' for each in labelled)
        return self._block(f'<div class="fields">{fields}</div>')

    def _input(self, label: str) -> str:
        words = plain(label.replace("|", ", "))
        return f'<input type="text" name="{self._name(label)}" title="{words}" aria-label="{words}">'

    def _box(self, label: str) -> str:
        words = plain(label)
        return f'<input type="checkbox" name="{self._name(label)}" title="{words}" aria-label="{words}">'

    def _name(self, label: str) -> str:
        signs = _MINUS.sub(" minus ", label.lower().replace("+", " plus "))
        key = re.sub(r"[^a-z0-9]+", "-", signs).strip("-")
        name = f"{self._prefix}-{key}"
        if name in self.names:
            raise CatalogueError(f"two fields of one form are called {name}")
        self.names[name] = None
        return name

    def _block(self, html: str) -> Markup:
        return Markup(self._holes.put(html, block=True))  # noqa: S704 - a hole is two characters and a number


def _with_unit(label: str) -> str:
    words, _, unit = label.partition("|")
    return f'{plain(words)} <span class="unit">[{plain(unit)}]</span>' if unit else plain(words)


def _width(heading: str, place: int, columns: Sequence[str], named: bool, ticked: Sequence[str]) -> str:
    """Return the width of a column: names wide, ticks narrow, the rest alike."""
    if named and place == 0:
        return ' class="w28"' if len(columns) < 8 else ' class="w12"'
    return ' class="w10"' if heading in ticked else ""
