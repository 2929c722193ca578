"""Failure modes that ship, and their ranking by a team's scores."""

import re

import pytest
import yaml

from readiness.calculations import failure_modes
from readiness.calculations.failure_mode_ranking import (
    Scores,
    failure_mode_ranking,
    open_failure_modes,
    severe_failure_modes,
    worst_failure_modes,
)
from readiness.calculations.failure_modes import FailureMode, score_scale, shipped_failure_modes
from readiness.errors import CatalogueError
from readiness.resources import schema_file

SCORE_WORDS = ("occurrence", "severity", "lack_of_detection")
BINDER = {
    f"{part}.{number}"
    for part, last in {1: 4, 2: 6, 3: 4, 4: 8, 5: 4}.items()
    for number in range(1, last + 1)
}


def mode(name: str, **changes) -> FailureMode:
    parts = {"id": name, "step": "delivery", "failure": "f", "cause": "c", "effect": "e"}
    return FailureMode(**(parts | {"controls": ("look",), "documents": ("3.2",)} | changes))


MODES = (mode("falls"), mode("shadow"), mode("swapped"), mode("late"), mode("bare", controls=()))
SCORES = {
    "falls": Scores(3, 10, 2),
    "shadow": Scores(6, 5, 8),
    "swapped": Scores(2, 10, 3),
    "late": Scores(4, None, 5),
}


def test_shipped_modes_are_some_fifty_and_cover_the_process() -> None:
    """There are 50 to 60 modes, from referral to the end of the course, each with controls and documents."""
    modes = shipped_failure_modes()
    assert 50 <= len(modes) <= 60
    assert ("referral", "end of course") == (modes[0].step, modes[-1].step)
    assert all(len(entry.controls) >= 2 and entry.documents for entry in modes)
    assert len({entry.failure for entry in modes}) == len(modes)


def test_ids_are_readable_words_and_documents_exist() -> None:
    """Ids are words with hyphens, documents are numbers of the binder, controls are whole phrases."""
    for entry in shipped_failure_modes():
        assert re.fullmatch(r"[a-z]+(-[a-z]+)+", entry.id)
        assert set(entry.documents) <= BINDER
        assert all(control[0].isupper() and len(control) > 12 for control in entry.controls)


def test_no_scores_ship() -> None:
    """The file holds no score: all shipped modes are open until the team has scored them."""
    content = yaml.safe_load(schema_file("failure_modes.yaml").read_text(encoding="utf-8"))
    assert not [entry["id"] for entry in content["modes"] if set(entry) & set(SCORE_WORDS)]
    rows = open_failure_modes(modes=shipped_failure_modes(), scores={}).rows
    assert {"occurrence, severity, lack of detection"} == {row[3] for row in rows}
    assert len(shipped_failure_modes()) == len(rows)


def test_scale_has_anchors_from_one_to_ten() -> None:
    """Each of the three scores has words at its ends."""
    anchors = {(name, number) for name, number, _ in score_scale()}
    assert {(name, number) for name in SCORE_WORDS for number in (1, 10)} <= anchors


def test_ranking_by_hand() -> None:
    """240 stands before 60 and 60; equal products share rank 2 in the order of the process; blanks come last."""
    table = failure_mode_ranking(modes=MODES, scores=SCORES)
    assert ("shadow", "falls", "swapped", "late", "bare") == table.column("id")
    assert (1, 2, 2, None, None) == table.column("rank")
    assert (240, 60, 60, None, None) == table.column("product")


def test_severity_decides_between_equal_products() -> None:
    """Of two products of 60, the one of severity 10 stands first."""
    scores = {"falls": Scores(5, 4, 3), "shadow": Scores(3, 10, 2)}
    assert ("shadow", "falls") == failure_mode_ranking(modes=MODES[:2], scores=scores).column("id")


def test_blank_stays_blank() -> None:
    """Two given scores make no product, and the given ones are shown."""
    row = next(r for r in failure_mode_ranking(modes=MODES, scores=SCORES).records() if r["id"] == "late")
    assert (4, None, 5, None, None) == tuple(row[name] for name in (*SCORE_WORDS, "product", "rank"))


@pytest.mark.parametrize("name", SCORE_WORDS)
def test_higher_score_never_ranks_better(name: str) -> None:
    """Raising one score of a mode moves it up the list or leaves it."""
    given = {"occurrence": 2, "severity": 2, "lack_of_detection": 2}
    ranks = []
    for number in range(1, 11):
        scores = SCORES | {"late": Scores(**(given | {name: number}))}
        rows = failure_mode_ranking(modes=MODES, scores=scores).records()
        ranks.append(next(row["rank"] for row in rows if row["id"] == "late"))
    assert ranks == sorted(ranks, reverse=True)


def test_highest_product_is_a_thousand() -> None:
    """The ends of the scale multiply to 1 and 1,000."""
    assert (1, 1000) == (Scores(1, 1, 1).product, Scores(10, 10, 10).product)


def test_worst_ten_have_their_controls() -> None:
    """Of 12 scored modes the ten worst are shown with controls and documents; unscored ones never are."""
    modes = [mode(f"mode-{letter}") for letter in "abcdefghijkl"] + [mode("unscored-mode")]
    scores = {entry.id: Scores(2, 2, 1 + index % 10) for index, entry in enumerate(modes[:12])}
    table = worst_failure_modes(modes=modes, scores=scores)
    assert 10 == len(table.rows)
    assert "mode-j" == table.rows[0][1]
    assert ("look", "3.2") == table.rows[0][-2:]
    assert () == worst_failure_modes(modes=modes, scores={}).rows
    assert 2 == len(worst_failure_modes(modes=modes, scores=scores, count=2).rows)


def test_open_modes_name_what_is_missing() -> None:
    """A mode without control or document, or with a blank score, is a thing to do."""
    modes = (*MODES, mode("loose", documents=()), mode("void", controls=("  ",)))
    scores = SCORES | {"loose": Scores(1, 1, 1), "void": Scores(1, 1, 1)}
    missing = {row[0]: row[3] for row in open_failure_modes(modes=modes, scores=scores).rows}
    assert {
        "late": "severity",
        "bare": "control, occurrence, severity, lack of detection",
        "loose": "document that holds the controls",
        "void": "control",
    } == missing


def test_severe_modes_show_at_any_product() -> None:
    """Severity 9 or 10 is listed although its product is small; 8 is not."""
    scores = {"falls": Scores(1, 9, 1), "shadow": Scores(10, 8, 10)}
    assert ("falls",) == severe_failure_modes(modes=MODES, scores=scores)


@pytest.mark.parametrize("number", [0, 11, -1, 2.5, True, "3"])
@pytest.mark.parametrize("name", SCORE_WORDS)
def test_scores_off_the_scale_are_refused(name: str, number) -> None:
    """Only whole numbers from 1 to 10 are scores."""
    with pytest.raises(ValueError, match="is a whole number from 1 to 10"):
        Scores(**{name: number})


@pytest.mark.parametrize(
    "call", [failure_mode_ranking, worst_failure_modes, open_failure_modes, severe_failure_modes]
)
def test_scores_belong_to_modes(call) -> None:
    """Scores of a mistyped id are refused with a hint, double ids too."""
    with pytest.raises(ValueError, match=r"'fals', which is no failure mode \(did you mean 'falls'\?\)"):
        call(modes=MODES, scores={"fals": Scores(1, 1, 1)})
    with pytest.raises(ValueError, match="two failure modes have the id 'falls'"):
        call(modes=(*MODES, mode("falls")), scores={})


def test_no_worst_of_none() -> None:
    """The worst zero modes are not asked for."""
    with pytest.raises(ValueError, match="at least one mode"):
        worst_failure_modes(modes=MODES, scores={}, count=0)


def test_no_modes_no_rows() -> None:
    """An empty list ranks to an empty table."""
    assert () == failure_mode_ranking(modes=(), scores={}).rows


GOOD = {
    "id": "a-b", "step": "s", "failure": "f", "cause": "c", "effect": "e",
    "controls": ["Look"], "documents": ["3.2"], "rules": [],
}  # fmt: skip


@pytest.mark.parametrize(
    ("modes", "message"),
    [
        ([GOOD, GOOD], "'a-b' stands twice"),
        ([{key: value for key, value in GOOD.items() if key != "cause"}], "unknown key 'cause'"),
        ([GOOD | {"occurrence": 3}], "unknown key 'occurrence'"),
        ([GOOD | {"effect": " "}], "are words"),
        ([GOOD | {"documents": [3.2]}], "lists of words"),
    ],
)
def test_broken_lists_are_our_own_defect(modes: list, message: str, tmp_path, monkeypatch) -> None:
    """A doubled, incomplete, scored or wordless entry stops the program with what is wrong."""
    file = tmp_path / "failure_modes.yaml"
    file.write_text(yaml.safe_dump({"modes": modes, "scale": {"severity": {11: "x"}}}), encoding="utf-8")
    monkeypatch.setattr(failure_modes, "schema_file", lambda *parts: file)
    with pytest.raises(CatalogueError, match=message):
        shipped_failure_modes.__wrapped__()
    with pytest.raises(CatalogueError, match="leaves 1 to 10"):
        score_scale.__wrapped__()
