"""
What the binder costs against WeasyPrint alone on the same pages: prints ratios, asserts nothing.

Run with: python -m tests.benchmarks.press
"""

import tempfile
import time
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import Any

from readiness.outputs import binder, press
from readiness.outputs.documents import render_bodies
from readiness.outputs.frame import article, page, resolved, style
from readiness.outputs.press_cache import PrintCache
from tests.outputs import fakes


def _seconds(work: Callable[[], Any]) -> tuple[float, Any]:
    start = time.process_time()
    made = work()
    return time.process_time() - start, made


def main() -> None:
    """Print the time of one layout of everything, of the joined layouts, and of the single files."""
    press.ready()
    assessment = fakes.full()
    rendered = render_bodies(assessment)
    css = style(assessment)
    articles = [resolved(article(document, assessment), lambda name: None) for document in rendered]

    def alone() -> int:
        layout = press.lay_out(page("all", "\n".join(articles)), [css], "all")
        press.write([layout], "all", "", fakes.AS_OF)
        return layout.pages

    def joined() -> tuple[list[press.Layout], int]:
        layouts = [press.lay_out(page("one", each), [css], "one") for each in articles]
        press.write(layouts, "all", "", fakes.AS_OF)
        return layouts, sum(layout.pages for layout in layouts)

    def single(layouts: list[press.Layout]) -> None:
        for layout in layouts:
            press.write([layout], "one", "", fakes.AS_OF)

    alone()  # fonts and style sheets are read once
    base, pages_alone = _seconds(alone)
    together, (layouts, pages) = _seconds(joined)
    singles, _ = _seconds(lambda: single(layouts))
    whole, _ = _seconds(lambda: binder.make(assessment, rendered, {}, fakes.AS_OF))
    changed = [replace(each, html_body=each.html_body + "<p>x</p>") if each.number == "4.1" else each for each in rendered]
    with tempfile.TemporaryDirectory() as folder:
        kept = PrintCache(Path(folder))
        binder.make(assessment, rendered, {}, fakes.AS_OF, kept=kept)
        same, _ = _seconds(lambda: binder.make(assessment, rendered, {}, fakes.AS_OF, kept=kept))
        one, _ = _seconds(lambda: binder.make(assessment, changed, {}, fakes.AS_OF, kept=kept))
    print(
        f"WeasyPrint alone, one layout:      {base:6.1f} s, {pages_alone} pages, {1000 * base / pages_alone:.0f} ms a page"
    )
    print(f"documents one by one, joined:      {together:6.1f} s, {pages} pages, ratio {together / base:.2f}")
    print(
        f"each document also as its own PDF: {singles:6.1f} s, {len(layouts)} files, ratio {singles / base:.2f}"
    )
    print(f"whole binder with assessment part: {whole:6.1f} s, ratio {whole / base:.2f}")
    print(f"the same binder once more:         {same:6.1f} s, {same / whole:.3f} of the whole")
    print(f"one document changed:              {one:6.1f} s, {one / whole:.2f} of the whole")


if __name__ == "__main__":
    main()
