"""Every small broken file of tests/faults/text gives its problems, at their places and in their words."""

from pathlib import Path

import pytest
import yaml

from readiness.program import yaml_text
from readiness.program.csv_text import parse_csv
from readiness.program.yaml_text import parse_yaml

FOLDER = Path(__file__).parent.parent / "faults" / "text"
EXPECTED = yaml.safe_load((FOLDER / "expected.yaml").read_text(encoding="utf-8"))
LOADERS = sorted({yaml.SafeLoader, getattr(yaml, "CSafeLoader", yaml.SafeLoader)}, key=lambda loader: loader.__name__)
# words of the library and of programmers, which a physicist has no use for
JARGON = (
    "token", "scanner", "scanning", "parser", "parsing", "scalar", "node", "stream", "flow", "block", "mapping",
    "sequence", "dict", "tuple", "string", "float", "int ", "unicode", "codec", "exception", "NoneType", "anchor",
)  # fmt: skip


def told(name: str) -> list[dict[str, str]]:
    """Return what is told about a broken file, in the order of its places."""
    parse = parse_csv if name.endswith(".csv") else parse_yaml
    _, problems = parse(name, (FOLDER / name).read_bytes())
    return [
        {"at": f"{each.place.line}:{each.place.column}", "kind": each.kind, "says": each.message}
        for each in sorted(problems)
    ]


def test_every_fault_is_listed():
    """The index names every broken file and no other."""
    files = {path.name for path in FOLDER.iterdir() if not path.name.startswith(".")} - {"expected.yaml"}
    assert set(EXPECTED) == files


@pytest.mark.parametrize("name", [name for name in EXPECTED if name.endswith(".yaml")])
@pytest.mark.parametrize("loader", LOADERS, ids=lambda loader: loader.__name__)
def test_yaml_fault_is_told(name, loader, monkeypatch):
    """A broken YAML file gives exactly the problems of the index, whichever parser is installed."""
    monkeypatch.setattr(yaml_text, "LOADER", loader)
    assert EXPECTED[name] == told(name)


@pytest.mark.parametrize("name", [name for name in EXPECTED if name.endswith(".csv")])
def test_csv_fault_is_told(name):
    """A broken CSV file gives exactly the problems of the index."""
    assert EXPECTED[name] == told(name)


@pytest.mark.parametrize("name", EXPECTED)
def test_message_is_in_plain_words(name):
    """No message speaks as a parser does."""
    for problem in EXPECTED[name]:
        assert [] == [word for word in JARGON if word.casefold() in problem["says"].casefold()]
