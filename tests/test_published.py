"""Every published check value is reproduced within its stated tolerance."""

import importlib
from pathlib import Path
from typing import Any

import pytest
import yaml

FOLDER = Path(__file__).parent / "published"
CASES = [
    pytest.param(case, id=f"{path.stem}: {case['id']}")
    for path in sorted(FOLDER.glob("*.yaml"))
    for case in yaml.safe_load(path.read_text(encoding="utf-8"))["checks"]
]


def _tupled(entry: Any) -> Any:
    """Return lists as tuples, as calculations take them."""
    return tuple(_tupled(part) for part in entry) if isinstance(entry, list) else entry


@pytest.mark.parametrize("case", CASES)
def test_published_value(case: dict[str, Any]) -> None:
    """The calculation gives the published number."""
    module, function = case["function"].split(":")
    calculation = getattr(importlib.import_module(f"readiness.calculations.{module}"), function)
    result = calculation(**{key: _tupled(value) for key, value in case["inputs"].items()})
    for attribute in filter(None, case.get("attribute", "").split(".")):
        result = getattr(result, attribute)
    (kind, amount), = case["tolerance"].items()
    allowed = {"absolute": amount, "relative": amount * abs(case["expected"])}[kind]
    assert abs(result - case["expected"]) <= allowed, f"expected {case['expected']}, got {result}"


@pytest.mark.parametrize("case", CASES)
def test_published_check_says_where_it_comes_from(case: dict[str, Any]) -> None:
    """Each check names its source, how the number is known, and why its tolerance is what it is."""
    assert {"source", "at", "known", "why"} <= case.keys()
    assert case["known"] in {"read", "memory", "derived", "mc"}
