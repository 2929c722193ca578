"""Descriptions of measurement files fit together and fit the rest of the project."""

from functools import cache
from pathlib import Path
from typing import Any

import pytest
import yaml

from readiness.resources import schema_file
from readiness.units import unit_ending

FILES = sorted(Path(schema_file("measurements")).glob("*.yaml"))
KINDS: dict[str, dict[str, Any]] = {path.stem: yaml.safe_load(path.read_text(encoding="utf-8")) for path in FILES}
FIELDS = [
    (kind, part, name, field)
    for kind, described in KINDS.items()
    for part in ("header", "columns")
    for name, field in described[part].items()
]
TYPES = {"text", "word", "number", "whole number", "date", "reference"}
KEYS = {"type", "words", "to", "or_none", "min", "max", "one_of", "if_outside", "required", "meaning"}
WITHOUT_UNIT = {
    "relative_dose", "relative_dose_sd", "mu_ratio", "cycle", "day", "point",
}  # fmt: skip


@cache
def kinds_of_items() -> set[str]:
    """Return every kind of item that the fields of a program folder describe, and arrangements."""
    found = {"arrangement"}

    def walk(node: Any) -> None:
        if isinstance(node, dict):
            if isinstance(node.get("kind"), str):
                found.add(node["kind"])
            for entry in node.values():
                walk(entry)

    for path in Path(schema_file("fields")).glob("*.yaml"):
        walk(yaml.safe_load(path.read_text(encoding="utf-8")))
    return found


def test_every_kind_the_design_names_is_described() -> None:
    """There is one description for each kind of measurement, named as its file."""
    expected = {
        "single-profile", "dual-profile", "angle-sweep", "depth-dose-single", "depth-dose-composite",
        "xray-component", "output-pair", "b-factor", "as-built", "survey", "in-vivo-readings", "end-to-end",
        "shield-transmission", "mode-check", "couch-dose-rate", "couch-profile",
    }  # fmt: skip
    assert expected == KINDS.keys()
    assert all(kind == described["kind"] for kind, described in KINDS.items())


@pytest.mark.parametrize("kind", KINDS)
def test_description_is_whole(kind: str) -> None:
    """A description has its keys, a reachable item to attach to, and agrees only on keys of its own header."""
    described = KINDS[kind]
    keys = ["kind", "title", "meaning", "attaches_to", "agrees_on", "min_rows", "header", "columns"]
    assert keys == [key for key in described if key not in ("outdated_by", "instruments")]
    assert described["attaches_to"] in kinds_of_items()
    assert set(described["agrees_on"]) <= described["header"].keys()
    assert described["min_rows"] >= 1
    assert described["header"]["kind"]["words"] == [kind]


@pytest.mark.parametrize(("kind", "part", "name", "field"), FIELDS, ids=[f"{k} {n}" for k, _, n, _ in FIELDS])
def test_field_is_regular(kind: str, part: str, name: str, field: dict[str, Any]) -> None:
    """A field has a known type with what it needs, a sentence, and a unit at the end of the name of a number."""
    assert field.keys() <= KEYS
    assert field["type"] in TYPES
    assert isinstance(field["required"], bool)
    assert field["meaning"].endswith(".")
    assert (field["type"] == "word") == ("words" in field)
    assert (field["type"] == "reference") == ("to" in field)
    if "to" in field:
        assert field["to"] in kinds_of_items()
    if field["type"] in ("number", "whole number"):
        assert "one_of" in field or field["min"] < field["max"]
        assert (unit_ending(name) == "") == (name in WITHOUT_UNIT)


def test_a_header_key_means_the_same_in_every_file() -> None:
    """A header key that occurs in several files differs in nothing but whether it is required."""
    seen: dict[str, dict[str, Any]] = {}
    for _, part, name, field in FIELDS:
        if part == "header" and name != "kind":
            assert seen.setdefault(name, field) | {"required": 0} == field | {"required": 0}, name


def test_sample_holds_pilot_readings_of_described_kinds() -> None:
    """Each CSV of the sample names a described kind and has its required keys and columns, nothing else."""
    files = sorted((Path(__file__).parents[1] / "sample_program" / "measurements").glob("*.csv"))
    assert len(files) >= 5
    for path in files:
        lines = path.read_text(encoding="utf-8").splitlines()
        header = dict(line[2:].split(": ", 1) for line in lines if line.startswith("# "))
        columns = next(line for line in lines if not line.startswith("#")).split(",")
        described = KINDS[header["kind"]]
        for given, part in ((header.keys(), "header"), (columns, "columns")):
            assert set(given) <= described[part].keys(), path.name
            assert {name for name, field in described[part].items() if field["required"]} <= set(given), path.name
        assert "invented" in header["note"].lower(), path.name
