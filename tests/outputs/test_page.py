"""The report page: complete, self-contained, usable with keyboard and screen reader, the same every time."""

import re
from collections.abc import Iterator
from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import Any

import pytest

from readiness.assessment.records import Assessment
from readiness.outputs.contract import CAUTION, INVENTED
from readiness.outputs.making import assessed
from readiness.outputs.page import make_page
from readiness.program.reading import read_folder

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"
CHROMIUM = Path("/usr/bin/chromium")


@pytest.fixture(scope="module")
def sample() -> Assessment:
    """Return the assessment of the sample."""
    return assessed(read_folder(SAMPLE), date(2026, 12, 1))


@pytest.fixture(scope="module")
def page(sample: Assessment) -> str:
    """Return the page of the sample."""
    return make_page(sample, {}).decode("utf-8")


def test_caution_and_verdict_stand_first(page: str) -> None:
    """Nobody reaches a number without the caution."""
    head = page[: page.index("Arrangements compared")]
    assert CAUTION in head
    assert INVENTED in head
    assert "Ready when gaps close" in head


def test_page_asks_nothing_of_the_network(page: str) -> None:
    """No script, style, picture or font comes from outside; it stays below 2 MB."""
    assert not re.search(r"""(?:src|href)\s*=\s*["'](?!#)""", page)
    assert not re.search(r"url\((?!#)", page)
    assert "@import" not in page
    assert len(page.encode()) < 2_000_000


def test_every_gap_and_finding_is_there(page: str, sample: Assessment) -> None:
    """Nothing is left out of the tables."""
    assert page.count("<tr data-owner=") == len(sample.gaps)
    for rule in {finding.rule for finding in sample.findings}:
        assert f'id="rule-{rule}"' in page


def test_hostile_names_stay_text(sample: Assessment) -> None:
    """What a department writes is never run."""
    hostile = replace(sample, program="<script>alert(1)</script>")
    assert "<script>alert" not in make_page(hostile, {}).decode("utf-8")


def test_same_page_every_time(sample: Assessment, page: str) -> None:
    """The same assessment gives the same bytes."""
    assert page == make_page(sample, {}).decode("utf-8")


def test_there_is_no_score(page: str) -> None:
    """Outcomes are words; nothing is rated."""
    assert not re.search(r"readiness score|score:|% ready|traffic", page, re.IGNORECASE)


@pytest.fixture(scope="module")
def opened(page: str, tmp_path_factory: pytest.TempPathFactory) -> Iterator[Any]:
    """Open the page in a real Chromium without a network."""
    if not CHROMIUM.exists():
        pytest.skip("there is no Chromium at /usr/bin/chromium")
    from playwright.sync_api import sync_playwright

    path = tmp_path_factory.mktemp("page") / "report.html"
    path.write_text(page, encoding="utf-8")
    with sync_playwright() as playwright:
        browser = playwright.chromium.launch(executable_path=str(CHROMIUM), args=["--no-sandbox", "--disable-gpu"])
        context = browser.new_context(offline=True)
        tab = context.new_page()
        tab.goto(path.as_uri())
        yield tab
        context.close()
        browser.close()


def test_filter_and_sort(opened: Any) -> None:
    """Choosing an owner hides the gaps of others; a click on a heading sorts."""
    everything = opened.locator("#gap-table tbody tr:visible").count()
    opened.select_option("select[name=owner]", "department chief")
    shown = opened.locator("#gap-table tbody tr:visible")
    assert 0 < shown.count() < everything
    assert {"department chief"} == set(opened.locator("#gap-table tbody tr:visible td:nth-child(3)").all_inner_texts())
    opened.select_option("select[name=owner]", "")
    opened.click("#gap-table thead th:nth-child(4) button")
    dates = opened.locator("#gap-table tbody td:nth-child(4)").all_inner_texts()
    assert dates == sorted(dates)
    assert opened.get_attribute("#gap-table thead th:nth-child(4)", "aria-sort") == "ascending"


@pytest.mark.parametrize(("scheme", "width"), [("light", 1280), ("dark", 1280), ("light", 320)])
def test_accessibility_rules_find_nothing(opened: Any, scheme: str, width: int) -> None:
    """Axe finds no violation in light, dark and on a narrow screen."""
    from axe_playwright_python.sync_playwright import Axe

    opened.emulate_media(color_scheme=scheme)
    opened.set_viewport_size({"width": width, "height": 900})
    results = Axe().run(opened)
    assert results.violations_count == 0, results.generate_report()


def test_narrow_screen_does_not_scroll_sideways(opened: Any) -> None:
    """At 320 px only tables scroll, inside their own regions."""
    opened.set_viewport_size({"width": 320, "height": 900})
    assert opened.evaluate("document.documentElement.scrollWidth") <= 320


def test_print_shows_everything(opened: Any) -> None:
    """On paper the closed parts are open and the filters are gone."""
    opened.emulate_media(media="print")
    assert opened.locator("#gap-filter").is_hidden()
    assert len(opened.pdf()) > 10_000
    opened.emulate_media(media="screen")
