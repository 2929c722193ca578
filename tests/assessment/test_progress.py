"""Actual dates in progress.csv: what they do to the road, and what they cannot do to a gap."""

from dataclasses import replace
from datetime import date
from pathlib import Path
from typing import Any

from readiness.assessment.assessment import assess
from readiness.assessment.records import Assessment
from readiness.program.reading import read_folder
from tests.assessment.small import item

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"
AS_OF = date(2026, 12, 1)


def with_dates(**dates: tuple[date | None, date | None]) -> Assessment:
    """Return the sample assessed with tasks begun and ended."""
    program = read_folder(SAMPLE)
    entries = []
    for task, (started, finished) in dates.items():
        stated: dict[str, Any] = {"task": task.replace("_", "-")}
        stated |= {"started_on": started} if started else {}
        stated |= {"finished_on": finished} if finished else {}
        entries.append(item("progress", task.replace("_", "-"), **stated))
    return assess(replace(program, items=(*program.items, *entries)), AS_OF)


def first_patient(found: Assessment) -> date:
    """Return the day of the first patient."""
    assert found.schedule is not None
    assert found.schedule.first_patient is not None
    return found.schedule.first_patient


def test_a_finished_critical_task_brings_the_date_nearer() -> None:
    """Approval, ten working days on the critical path, is over: the date moves by the ten that were left."""
    before, after = with_dates(), with_dates(approve_program=(date(2026, 11, 9), date(2026, 11, 20)))
    assert first_patient(after) < first_patient(before)
    assert after.schedule is not None
    (task,) = [each for each in after.schedule.tasks if each.id == "approve-program"]
    assert (True, "recorded as done on 2026-11-20") == (task.done, task.state)


def test_a_task_under_way_has_the_days_left() -> None:
    """The stand ordered on 2 November is expected sooner than one ordered today."""
    begun = with_dates(buy_stand=(date(2026, 11, 2), None))
    assert begun.schedule is not None
    (task,) = [each for each in begun.schedule.tasks if each.id == "buy-stand"]
    (planned,) = [each for each in with_dates().schedule.tasks if each.id == "buy-stand"]  # type: ignore[union-attr]
    assert "under way since 2026-11-02" == task.state
    assert task.finish < planned.finish
    assert any("buy-stand has begun although approve-program has not ended" in each for each in begun.schedule.remarks)


def test_a_record_closes_no_gap() -> None:
    """The chamber is out of calibration whatever progress.csv says; the gap stays, without a date, and is named."""
    found = with_dates(recalibrate_instruments=(date(2026, 11, 2), date(2026, 11, 23)))
    gaps = [gap for gap in found.gaps if gap.task == "recalibrate-instruments"]
    assert len(gaps) == len([gap for gap in with_dates().gaps if gap.task == "recalibrate-instruments"])
    assert {(None, "recorded as done on 2026-11-23")} == {(gap.earliest, gap.progress) for gap in gaps}
    assert found.schedule is not None
    (said,) = [each for each in found.schedule.remarks if "yet gaps of it are open" in each]
    assert f"Have instruments calibrated ({len(gaps)})" in said


def test_a_date_that_lies_ahead_is_no_actual_date() -> None:
    """An end planned for January changes nothing in December, and is named."""
    found = with_dates(approve_program=(None, date(2027, 1, 20)))
    assert first_patient(with_dates()) == first_patient(found)
    assert found.schedule is not None
    assert any("are left out: approve-program." in each for each in found.schedule.remarks)
