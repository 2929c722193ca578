"""The failure modes that ship with the tool beside the team's own scores and modes, as tables."""

from collections.abc import Mapping
from functools import cache
from typing import Any

import yaml

from readiness.assessment.records import Ref, Value
from readiness.assessment.wording import in_words
from readiness.outputs.holes import plain
from readiness.outputs.lookup import Lookup
from readiness.resources import schema_file

SCORES = ("occurrence", "severity", "lack_of_detection")
_TEXTS = ("step", "failure", "cause", "effect")
_Loader = getattr(yaml, "CSafeLoader", yaml.SafeLoader)


@cache
def _shipped() -> Mapping[str, Any]:
    with schema_file("failure_modes.yaml").open("rb") as stream:
        content: Mapping[str, Any] = yaml.load(stream, Loader=_Loader)  # noqa: S506 - safe either way
    return content


def scale_html() -> str:
    """Return the anchors of the three scales as a table."""
    rows = "".join(
        f'<tr><th scope="row">{score.replace("_", " ")}</th><td>{number}</td><td>{plain(words)}</td></tr>'
        for score, anchors in _shipped()["scale"].items()
        for number, words in anchors.items()
    )
    heads = "".join(f'<th scope="col">{each}</th>' for each in ("Score", "Number", "Means"))
    return f'<table class="list"><thead><tr>{heads}</tr></thead><tbody>{rows}</tbody></table>'


def modes_html(lookup: Lookup) -> str:
    """Return every mode, step by step; a score that the team has not given is a blank."""
    shipped = {entry["id"]: entry for entry in _shipped()["modes"]}
    own = {item.id: _own(item, lookup) for item in lookup.items("failure_mode") if item.id not in shipped}
    by_step: dict[str, list[str]] = {}
    for name, entry in {**shipped, **own}.items():
        by_step.setdefault(entry["step"], []).append(_row(name, entry, lookup))
    return "".join(f"<h3>{plain(step.capitalize())}</h3>{_table(rows)}" for step, rows in by_step.items())


def _own(item: Ref, lookup: Lookup) -> dict[str, Any]:
    entry: dict[str, Any] = {text: lookup.text_of(f"failure_mode.{text}", item) for text in _TEXTS}
    controls = lookup.get("failure_mode.controls", item)
    entry["controls"] = controls.value if isinstance(controls, Value) else ()
    entry["step"] = entry["step"] or "added by the department"
    return {**entry, "documents": ()}


def _row(name: str, entry: Mapping[str, Any], lookup: Lookup) -> str:
    controls = "".join(f"<li>{plain(each)}</li>" for each in entry["controls"])
    where = ", ".join(f'<a href="binder:{each}">{each}</a>' for each in entry["documents"])
    cells = [
        f"<b>{plain(entry['failure'])}</b>",
        f"{plain(entry['cause'])}<br><i>{plain(entry['effect'])}</i>",
        f"<ul>{controls}</ul>{where}",
        *(_score(name, score, lookup) for score in SCORES),
    ]
    return "<tr>" + "".join(f"<td>{cell}</td>" for cell in cells) + "</tr>"


def _score(name: str, score: str, lookup: Lookup) -> str:
    found = lookup.get(f"failure_mode.{score}", Ref("failure_mode", name))
    return plain(in_words(found.value)) if isinstance(found, Value) else ""


def _table(rows: list[str]) -> str:
    heads = ("What goes wrong", "Cause, <i>effect</i>", "Controls, and where they are written", "O", "S", "D")
    head = "".join(f'<th scope="col">{each}</th>' for each in heads)
    return f'<table class="modes"><thead><tr>{head}</tr></thead><tbody>{"".join(rows)}</tbody></table>'
