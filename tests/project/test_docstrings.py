"""What a calculation's docstring says agrees with its signature and its units."""

import importlib
import inspect
import pkgutil
import re
from collections.abc import Callable
from typing import Any

import pytest

import readiness.calculations as package
from readiness.units import UNITS, unit_ending

PLACES = [name for _, name, _ in pkgutil.iter_modules(package.__path__)]
FUNCTIONS = [
    pytest.param(function, id=f"{module}.{name}")
    for module in PLACES
    for name, function in inspect.getmembers(
        importlib.import_module(f"{package.__name__}.{module}"), inspect.isfunction
    )
    if not name.startswith("_")
    and function.__module__ == f"{package.__name__}.{module}"
    and "Args:" in (function.__doc__ or "")
]
ARGUMENT = re.compile(r"^ {4}(\w+): (.+?)(?=^ {4}\w+: |\Z)", re.MULTILINE | re.DOTALL)
PRINTED = {**UNITS}


def arguments_of(doc: str) -> dict[str, str]:
    """Return name -> text of each documented argument."""
    block = doc.split("Args:\n", 1)[1].split("\n\n", 1)[0]
    return {name: " ".join(text.split()) for name, text in ARGUMENT.findall(block + "\n")}


@pytest.mark.parametrize("function", FUNCTIONS)
def test_docstring_names_every_argument(function: Callable[..., Any]) -> None:
    """Every argument is documented under its own name, and no other."""
    assert set(inspect.signature(function).parameters) == set(arguments_of(inspect.getdoc(function) or ""))


@pytest.mark.parametrize("function", FUNCTIONS)
def test_docstring_repeats_the_unit_of_the_name(function: Callable[..., Any]) -> None:
    """A name that ends with a unit has that unit in brackets in its description."""
    parameters = inspect.signature(function).parameters
    for name, text in arguments_of(inspect.getdoc(function) or "").items():
        ending = unit_ending(name)
        if ending and any(word in str(parameters[name].annotation) for word in ("float", "int", "ndarray")):
            bracketed = re.findall(r"\[([^\]]+)\]", text)
            assert bracketed, f"{name}: no unit in brackets"
            assert PRINTED[ending] in bracketed or ending in " ".join(bracketed).lower().replace("/", "_per_"), (
                f"{name}: [{', '.join(bracketed)}] where {PRINTED[ending]} is expected"
            )


@pytest.mark.parametrize("function", FUNCTIONS)
def test_calculation_takes_keywords_only(function: Callable[..., Any]) -> None:
    """A calculation cannot be called with numbers in the wrong order."""
    kinds = {parameter.kind for parameter in inspect.signature(function).parameters.values()}
    assert kinds <= {inspect.Parameter.KEYWORD_ONLY}


@pytest.mark.parametrize("function", FUNCTIONS)
def test_docstring_says_where_it_holds_and_where_it_comes_from(function: Callable[..., Any]) -> None:
    """Validity and source are stated."""
    doc = inspect.getdoc(function) or ""
    assert "Source:" in doc
    assert "Returns:" in doc
