"""Imports point down only: the layer table of DEVELOPERS.md, held."""

import ast
from pathlib import Path

import pytest

PACKAGE = Path(__file__).resolve().parents[2] / "readiness"
BASE = {"errors", "units", "sources", "resources", "quantities"}
MAY_IMPORT = {
    "base": set(),
    "calculations": {"base"},
    "program": {"base"},
    "assessment": {"base", "program", "calculations"},
    "outputs": {"base", "assessment"},
    "commands": {"base", "assessment", "outputs", "program"},
    "cli": {"base", "commands"},
}
# Each departure with its reason.
ALLOWED = {
    ("outputs/recomputing.py", "program"): "reads the program again out of a binder",
    ("outputs/making.py", "program"): "takes the program whose texts and files go into the binder",
}
# The only importers of a library.
ONLY = {
    "shapely": {"calculations/room_plan.py"},
    "weasyprint": {"outputs/press.py"},
    "click": {"cli.py"},
    "jinja2": {"outputs/"},
    "matplotlib": {"outputs/"},
    "pypdf": {"outputs/binder_reading.py"},
    "cerberus": {"program/"},
}


def layer_of(module: str) -> str:
    """Return the layer of a module path under readiness (dots, without the package)."""
    first = module.split(".")[0]
    if first in BASE or first in {"__init__", "__version__", ""}:
        return "base"
    return {"__main__": "cli"}.get(first, first)


def imports(path: Path) -> set[str]:
    """Return every module that a file imports, whether at its top or inside a function."""
    found: set[str] = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            found |= {name.name for name in node.names}
        elif isinstance(node, ast.ImportFrom) and node.module:
            found |= {f"{node.module}.{name.name}" for name in node.names} if node.module == "readiness" else {node.module}
    return found


FILES = sorted(PACKAGE.rglob("*.py"))


@pytest.mark.parametrize("path", FILES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_imports_point_down(path: Path) -> None:
    """No module imports a layer above its own."""
    relative = str(path.relative_to(PACKAGE))
    own = layer_of(relative.removesuffix(".py").replace("/", "."))
    if own == "cli" and relative == "__main__.py":
        return
    for module in imports(path):
        if not module.startswith("readiness."):
            continue
        layer = layer_of(module.removeprefix("readiness."))
        allowed = layer == own or layer in MAY_IMPORT[own] or (relative, layer) in ALLOWED
        assert allowed, f"{relative} ({own}) imports {module} ({layer})"


@pytest.mark.parametrize("path", FILES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_libraries_have_one_place(path: Path) -> None:
    """A library that belongs to one place is imported only there."""
    relative = str(path.relative_to(PACKAGE))
    for module in imports(path):
        places = ONLY.get(module.split(".")[0])
        assert places is None or any(relative.startswith(place) for place in places), f"{relative} imports {module}"


@pytest.mark.parametrize("path", FILES, ids=lambda path: str(path.relative_to(PACKAGE)))
def test_values_and_schedule_are_the_only_bridge_to_calculations(path: Path) -> None:
    """Within the assessment only values/ and schedule.py call calculations."""
    relative = str(path.relative_to(PACKAGE))
    if not relative.startswith("assessment/"):
        return
    calls = any(module.startswith("readiness.calculations") for module in imports(path))
    assert not calls or relative.startswith("assessment/values/") or relative == "assessment/schedule.py"


def test_only_the_command_line_prints() -> None:
    """Nothing but cli.py prints, exits or asks for today's date."""
    for path in FILES:
        if path.name in {"cli.py", "__main__.py"}:
            continue
        for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
            if isinstance(node, ast.Call):
                called = ast.unparse(node.func)
                assert called not in {"print", "sys.exit", "exit", "date.today", "datetime.now"}, f"{path}: {called}"
