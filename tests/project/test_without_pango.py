"""Without Pango everything but the PDFs is written, and one line names the packages to install."""

from pathlib import Path

import pytest

from readiness.cli import run
from readiness.outputs import press

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"


def test_everything_but_the_pdfs_is_written(
    tmp_path: Path, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
) -> None:
    """Status 2, the packages named, the PDFs listed as not written, the rest there."""

    def missing() -> None:
        raise press.PressMissing("Pango is missing: apt-get install libpango-1.0-0 libpangoft2-1.0-0 libharfbuzz-subset0")

    monkeypatch.setattr(press, "ready", missing)
    assert run(["binder", str(SAMPLE), "--out", str(tmp_path / "out"), "--as-of", "2026-12-01"]) == 2
    told = capsys.readouterr()
    assert "libpango-1.0-0" in told.err
    assert "not written: binder.pdf" in told.err
    written = {path.name for path in (tmp_path / "out").rglob("*")}
    assert {"assessment.json", "gaps.csv", "gaps.xlsx", "report.html"} <= written
    assert any(name.endswith(".html") and name != "report.html" for name in written)
    assert not any(name.endswith(".pdf") for name in written)
