"""Hours, places and money on the page."""

from datetime import date
from pathlib import Path

import pytest

from readiness.assessment.records import Assessment
from readiness.outputs.making import assessed
from readiness.outputs.page_tables import TABLES, people_and_money
from readiness.program.reading import read_folder

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"


@pytest.fixture(scope="module")
def sample() -> Assessment:
    """Return the assessment of the sample."""
    return assessed(read_folder(SAMPLE), date(2026, 12, 1))


def test_every_table_of_the_sample_is_shown(sample: Assessment) -> None:
    """Hours, cover, waits, sensitivity and costs, in this order, each with its basis."""
    found = people_and_money(sample)
    assert len(TABLES) == len(found)
    assert ["stated", "stated", "predicted", "predicted", "stated"] == [basis for _, _, basis in found]
    assert found[-1][0].endswith("in invented crowns")


def test_low_likely_and_high_stand_beside_each_other(sample: Assessment) -> None:
    """The stand costs 9,000 to 16,000 once; what has no amount is blank and counted."""
    rows = {(row["remedy"], row["paid"]): row for row in people_and_money(sample)[-1][1].records()}
    assert (9000, 11000, 16000) == tuple(rows[("buy-stand", "once")][name] for name in ("low", "likely", "high"))
    assert (None, 1) == tuple(rows[("install-cameras", "once")][name] for name in ("likely", "lines_without_amount"))


def test_course_choice_and_session_minutes_change_what_is_borne(sample: Assessment) -> None:
    """Longer sessions leave fewer patients, shorter courses more."""
    rows = {row["change"]: float(str(row["patients_borne_per_year"])) for row in people_and_money(sample)[3][1].records()}
    assert rows["sessions 10 min longer"] < rows["as stated"] < rows["every patient on course low-dose"]
