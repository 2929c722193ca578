"""The code passes the linter and the strict type checker that pyproject.toml describes."""

import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]


@pytest.mark.parametrize(
    "command", [["ruff", "check", "."], ["mypy", "--no-incremental"]], ids=["ruff", "mypy"]
)
def test_checker_finds_nothing(command: list[str]) -> None:
    """Ruff and mypy have nothing to say."""
    done = subprocess.run([sys.executable, "-m", *command], cwd=ROOT, capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stdout[-3000:] + done.stderr[-1000:]


def test_nothing_unfinished_and_nothing_private_stands_in_the_project() -> None:
    """No stub, no machine path and no placeholder text."""
    names = subprocess.run(["git", "ls-files"], cwd=ROOT, capture_output=True, text=True, check=True).stdout.split("\n")
    forbidden = ["NotImplemented" + "Error", "TO" + "DO", "FIX" + "ME", "lorem " + "ipsum", "/wo" + "rk/"]
    for name in filter(None, names):
        path = ROOT / name
        if not path.is_file():
            continue
        text = path.read_bytes().decode("utf-8", errors="ignore")
        for word in forbidden[-1:] if name.startswith("tests/") else forbidden:
            assert word not in text, f"{name} contains {word}"
