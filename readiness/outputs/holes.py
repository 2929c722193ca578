"""
Markdown whose values are put in after it has become HTML.

While Markdown is read each value is a pair of private-use characters with a number between them, so that
nothing in a value is ever taken for Markdown or HTML, and nothing in Markdown for HTML of ours.
"""

import re
from functools import cache
from html import escape

from markdown_it import MarkdownIt

OPEN, CLOSE = "\ue000", "\ue001"
_HOLE = re.compile(f"{OPEN}([0-9]+){CLOSE}")
_ALONE = re.compile(f"<p>((?:{OPEN}[0-9]+{CLOSE}\\s*)+)</p>")
_LINK = re.compile(r'<a href="([^"]*)"')
_HEADER_CELL = re.compile(r"<th(?=[ >])")
_ALLOWED_LINK = re.compile(r"binder:[a-z0-9./-]+|https?://\S+|mailto:\S+", re.IGNORECASE)


class Holes:
    """Keeps the HTML that belongs into each hole."""

    def __init__(self) -> None:
        """Start without a hole."""
        self._html: list[tuple[str, bool, str | None]] = []

    def put(self, html: str, block: bool = False, hashed: str | None = None) -> str:
        """
        Keep some HTML and return the hole that stands for it.

        Args:
            html: What is printed.
            block: It stands on a line of its own.
            hashed: What stands for it where the text is hashed; a drawing by its name.
        """
        self._html.append((html, block, hashed))
        return f"{OPEN}{len(self._html) - 1}{CLOSE}"

    def fill(self, html: str, for_hash: bool = False) -> str:
        """Return HTML with every hole filled; a paragraph that holds nothing but blocks is no paragraph."""

        def filled(found: re.Match[str]) -> str:
            kept, _, hashed = self._html[int(found[1])]
            return hashed if for_hash and hashed is not None else kept

        return _HOLE.sub(filled, _ALONE.sub(self._without_paragraph, html))

    def _without_paragraph(self, found: re.Match[str]) -> str:
        numbers = [int(each) for each in _HOLE.findall(found[1])]
        return found[1] if all(self._html[number][1] for number in numbers) else found[0]


@cache
def _markdown() -> MarkdownIt:
    reader = MarkdownIt("commonmark", {"html": False, "typographer": False}).enable(
        ["table", "strikethrough"]
    )
    return reader.disable(["image", "html_block", "html_inline"])


def to_html(markdown: str) -> str:
    """Return Markdown as HTML: no raw HTML, no images, links only inside the binder or to the web."""
    html: str = _markdown().render(markdown)
    return _HEADER_CELL.sub('<th scope="col"', _LINK.sub(_checked_link, html))


def _checked_link(found: re.Match[str]) -> str:
    return found[0] if _ALLOWED_LINK.fullmatch(found[1]) else "<a"


def without_holes(text: str) -> str:
    """Return a text of the department's without the two characters that mark a hole."""
    return text.replace(OPEN, "").replace(CLOSE, "")


def plain(text: object) -> str:
    """Return anything as text inside HTML."""
    return escape(str(text), quote=True)
