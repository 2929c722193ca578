"""The summary for the chief: what is compared, why, what fails and what would do instead."""

from dataclasses import replace
from datetime import date
from pathlib import Path

import pytest

from readiness.assessment.records import Assessment
from readiness.outputs.making import assessed
from readiness.outputs.terminal import summary
from readiness.outputs.words import reason_words, short_titles
from readiness.program.reading import read_folder

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"


@pytest.fixture(scope="module")
def sample() -> Assessment:
    """Return the assessment of the sample."""
    return assessed(read_folder(SAMPLE), date(2026, 12, 1))


def flat(assessment: Assessment) -> str:
    """Return the summary in one line."""
    return " ".join(summary(assessment).split())


def test_the_chosen_arrangement_stands_first_with_its_reasons(sample: Assessment) -> None:
    """What all share is said once; the reason names rules and the next one by what tells it apart."""
    said = flat(sample)
    assert "ARRANGEMENTS COMPARED, the best first; all: six-position, turntable-1 * vault-a" in said
    assert "horizontal-uniformity; the next, vault-a, linac-1, e6-high-rate, side 90, sheet-10, does not keep" in said


def test_a_room_that_fails_says_by_what_and_what_would_do(sample: Assessment) -> None:
    """190 cm with raised hands on a stand of 40 cm do not fit under 255 cm: 172 cm would, or a stand of 18 cm."""
    said = flat(sample)
    assert "vault-b, 4 arrangements: not feasible here." in said
    assert "patients up to 172 cm fit; the tallest would fit on a stand of at most 18 cm" in said
    assert (255 - 40) / 1.25 == 172.0


def test_another_choice_of_the_department_comes_first_and_says_what_precedes_it(sample: Assessment) -> None:
    """Where the department chose otherwise than the comparison, the heading says so."""
    best, second, *others = sample.arrangements
    swapped = replace(
        sample, arrangements=(replace(best, chosen=False), replace(second, chosen=True, reasons=("Why not.",)), *others)
    )
    said = flat(swapped)
    assert "the best first after the one that the department chose" in said
    assert said.index("* vault-a, linac-1, e6-high-rate, side 90, sheet-10") < said.index("vault-a, linac-1, e6-high-rate, side 90, sheet-06: feasible")
    assert "Why not." in said


def test_no_line_is_wider_than_asked(sample: Assessment) -> None:
    """A narrow terminal gets a narrow summary."""
    assert max(map(len, summary(sample, width=72).splitlines())) <= 72


def test_titles_lose_only_what_all_share(sample: Assessment) -> None:
    """A single arrangement keeps its whole title; reasons name others by their short titles."""
    common, titles = short_titles(sample.arrangements)
    assert "six-position, turntable-1" == common
    assert len(set(titles.values())) == len(titles)
    assert short_titles(sample.arrangements[:1]) == ("", {sample.arrangements[0].item: sample.arrangements[0].title})
    assert "turntable" not in reason_words(sample.arrangements[0], sample.arrangements)[0]
