"""What README and DEVELOPERS show is what happens."""

import re
import shlex
from pathlib import Path

import pytest

from readiness.cli import run

ROOT = Path(__file__).resolve().parents[2]
COMMAND = re.compile(r"^\$ readiness (.+)$", re.MULTILINE)
BLOCK = re.compile(r"```console\n(.*?)```", re.DOTALL)


def blocks() -> list[list[tuple[str, str]]]:
    """Return for each shown console its commands with the output shown below each."""
    found = []
    for name in ("README.md", "DEVELOPERS.md"):
        for block in BLOCK.findall((ROOT / name).read_text(encoding="utf-8")):
            pieces = COMMAND.split(block)
            found.append(list(zip(pieces[1::2], pieces[2::2], strict=True)))
    return found


@pytest.mark.parametrize("block", blocks(), ids=[block[0][0] for block in blocks()])
def test_shown_output_is_real(
    block: list[tuple[str, str]], capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch, tmp_path: Path
) -> None:
    """Each command runs and prints what is shown; "..." stands for lines left out."""
    monkeypatch.chdir(ROOT)
    monkeypatch.setenv("COLUMNS", "100")
    for command, shown in block:
        arguments = [str(tmp_path / part) if part in {"out", "my_program"} else part for part in shlex.split(command)]
        status = run(arguments)
        printed = capsys.readouterr()
        assert status in {0, 1}, printed.err
        text = printed.out.replace(str(tmp_path) + "/", "")
        place = 0
        for piece in re.split(r"^\.\.\.\n", shown.strip("\n") + "\n", flags=re.MULTILINE):
            found = text.find(piece.strip("\n"), place)
            assert found >= 0, f"not printed:\n{piece}\nbut:\n{text}"
            place = found + len(piece.strip("\n"))


def test_readme_holds_both_commands() -> None:
    """One command runs the sample, one runs the tests."""
    text = (ROOT / "README.md").read_text(encoding="utf-8")
    assert "<!-- command: run -->" in text
    assert "<!-- command: test -->" in text
