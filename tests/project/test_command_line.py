"""The command line at its edges: statuses, streams, hostile terminals and full disks."""

import json
import os
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

from readiness.cli import run

ROOT = Path(__file__).resolve().parents[2]
SAMPLE = ROOT / "sample_program"


def readiness(*arguments: str, **options: object) -> "subprocess.CompletedProcess[str]":
    """Run the program in a process of its own."""
    command = [sys.executable, "-m", "readiness", *arguments]
    return subprocess.run(command, capture_output=True, text=True, check=False, cwd=ROOT, **options)  # type: ignore[call-overload, no-any-return]


def test_check_imports_nothing_heavy() -> None:
    """Checking the sample loads neither arrays, templates nor the press."""
    code = (
        "import sys; from readiness.cli import run; run(['check', 'sample_program']);"
        "print([m for m in ('numpy','scipy','shapely','jinja2','pypdf','weasyprint','matplotlib') if m in sys.modules])"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True, cwd=ROOT)
    assert done.stdout.strip().endswith("[]")


def test_statuses(capsys: pytest.CaptureFixture[str], tmp_path: Path) -> None:
    """0 nothing wrong, 1 gaps, 2 wrong input or use."""
    assert run(["check", str(SAMPLE)]) == 0
    assert run(["assess", str(SAMPLE), "--as-of", "2026-12-01"]) == 1
    assert run(["check", str(tmp_path / "nothing")]) == 2
    assert run(["assess"]) == 2
    assert run(["assess", str(SAMPLE), "--as-of", "31.12.2026"]) == 2
    assert "year-month-day" in capsys.readouterr().err
    assert run(["--help"]) == 0


@pytest.mark.parametrize("command", ["new", "check", "assess", "binder", "rules", "explain", "approve", "review", "compare"])
def test_help_shows_an_example(command: str, capsys: pytest.CaptureFixture[str]) -> None:
    """Help of each command ends with something to type."""
    assert run([command, "--help"]) == 0
    assert f"readiness {command}" in capsys.readouterr().out.split("Example:")[1]


def test_problems_go_to_standard_error_and_are_counted(tmp_path: Path) -> None:
    """A broken folder gives located problems on standard error, nothing on standard output, status 2."""
    folder = tmp_path / "broken"
    shutil.copytree(SAMPLE, folder)
    text = (folder / "rooms.yaml").read_text(encoding="utf-8")
    (folder / "rooms.yaml").write_text(text.replace("ceiling_height_cm: 300", "ceiling_height_cm: 3,0"), encoding="utf-8")
    done = readiness("assess", str(folder))
    assert (2, "") == (done.returncode, done.stdout)
    assert "rooms.yaml:7:24: ceiling height" in done.stderr
    assert "nothing was assessed or written" in done.stderr


def test_json_of_problems(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """A program that reads the answer gets file, line and column."""
    folder = tmp_path / "broken"
    shutil.copytree(SAMPLE, folder)
    (folder / "room.yaml").write_text("rooms: []\n", encoding="utf-8")
    assert run(["check", str(folder), "--json"]) == 2
    answer = json.loads(capsys.readouterr().out)
    assert answer["problems"][0]["file"] == "room.yaml"
    assert "rooms.yaml" in answer["problems"][0]["message"]


def test_a_reader_that_stops_reading_is_no_error_of_ours() -> None:
    """A closed pipe ends quietly."""
    command = f"{sys.executable} -m readiness assess sample_program --as-of 2026-12-01 --json | head -c 10"
    done = subprocess.run(["bash", "-c", command], capture_output=True, text=True, check=False, cwd=ROOT)
    assert "Traceback" not in done.stderr


@pytest.mark.skipif(not Path("/dev/full").exists(), reason="this system has no /dev/full")
def test_a_full_disk_is_said() -> None:
    """Standard output that cannot be written ends with status 2 and one line."""
    command = f"{sys.executable} -m readiness rules > /dev/full"
    done = subprocess.run(["bash", "-c", command], capture_output=True, text=True, check=False, cwd=ROOT)
    assert done.returncode == 2
    assert "Traceback" not in done.stderr
    assert "No space left" in done.stderr


def test_an_ascii_terminal_gets_an_answer() -> None:
    """Signs that the terminal does not know are replaced, not fatal."""
    environment = {**os.environ, "PYTHONIOENCODING": "ascii", "LC_ALL": "C"}
    done = readiness("explain", "arrangement.tilt_deg", "sample_program", "--as-of", "2026-12-01", env=environment)
    assert done.returncode == 0
    assert "Traceback" not in done.stderr


def test_unknown_names_get_the_nearest(capsys: pytest.CaptureFixture[str]) -> None:
    """A misspelt rule or value is answered with the nearest one."""
    assert run(["rules", "plane-distanc"]) == 2
    assert "did you mean plane-distance?" in capsys.readouterr().err
    assert run(["explain", "arrangement.tilt", str(SAMPLE)]) == 2
    assert "did you mean" in capsys.readouterr().err


def test_explain_prints_the_descent(capsys: pytest.CaptureFixture[str]) -> None:
    """A number is shown with its inputs, each with file and line."""
    assert run(["explain", "arrangement.farthest_plane_distance_cm", str(SAMPLE), "--as-of", "2026-12-01"]) == 0
    printed = capsys.readouterr().out
    assert "385 cm" in printed
    assert "rooms.yaml:" in printed


def test_explain_says_why_a_value_is_not_known(tmp_path: Path, capsys: pytest.CaptureFixture[str]) -> None:
    """What no rule asks for is not in the gap list: the cause itself is said, for the chosen arrangement and by item."""
    folder = tmp_path / "program"
    shutil.copytree(SAMPLE, folder)
    rooms = (folder / "rooms.yaml").read_text(encoding="utf-8")
    (folder / "rooms.yaml").write_text(rooms.replace("    temperature_celsius: 21\n", ""), encoding="utf-8")
    assert run(["explain", "arrangement.study_reason", str(folder), "--as-of", "2026-12-01"]) == 0
    assert "Not known. State temperature" in capsys.readouterr().out
    assert run(["explain", "room.temperature_celsius", str(folder), "--item", "vault-b", "--as-of", "2026-12-01"]) == 0
    assert "State temperature (°C) of room vault-b" in capsys.readouterr().out


def test_explain_opens_as_many_levels_as_asked(capsys: pytest.CaptureFixture[str]) -> None:
    """What is not opened is named, so that it can be explained by itself; every level can be had."""
    value = ["explain", "exposure.weekly_dose_usv_per_week", str(SAMPLE), "--as-of", "2026-12-01"]
    lengths = []
    for depth in ("0", "1", "12"):
        assert run([*value, "--depth", depth]) == 0
        lengths.append(len(capsys.readouterr().out.splitlines()))
    assert sorted(set(lengths)) == lengths
    assert run(value) == 0
    printed = capsys.readouterr().out
    assert "... not opened:" in printed
    assert "More levels: --depth N" in printed
    assert run([*value, "--depth", "99"]) == 2


def test_a_rule_is_shown_whole(capsys: pytest.CaptureFixture[str]) -> None:
    """Limit, source with how it is known, and the program's own finding."""
    assert run(["rules", "plane-distance", str(SAMPLE), "--as-of", "2026-12-01"]) == 0
    printed = capsys.readouterr().out
    assert "at least 350" in printed
    assert "memory" in printed
    assert "local" in printed
