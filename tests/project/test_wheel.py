"""The wheel holds everything that the program needs at run time."""

import subprocess
import sys
import zipfile
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]


def test_wheel_holds_schemas_and_templates(tmp_path: Path) -> None:
    """Every file of schemas/ and templates/ is inside the wheel, beside the package."""
    subprocess.run(
        [sys.executable, "-m", "pip", "wheel", "--no-deps", "--quiet", "--wheel-dir", str(tmp_path), str(ROOT)],
        check=True, capture_output=True,
    )  # fmt: skip
    (wheel,) = tmp_path.glob("*.whl")
    inside = set(zipfile.ZipFile(wheel).namelist())
    for folder in ("schemas", "templates"):
        for path in (ROOT / folder).rglob("*"):
            if path.is_file():
                assert f"readiness/{path.relative_to(ROOT)}" in inside
    assert "readiness/cli.py" in inside
