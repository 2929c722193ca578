"""Course calendars, read back by the library that others read them with."""

from datetime import date, timedelta
from pathlib import Path

import pytest
from icalendar import Calendar

from readiness.assessment.records import Assessment
from readiness.outputs.calendar_file import calendar_files
from readiness.outputs.making import assessed
from readiness.program.reading import read_folder

SAMPLE = Path(__file__).resolve().parents[2] / "sample_program"


@pytest.fixture(scope="module")
def sample() -> Assessment:
    """Return the assessment of the sample."""
    return assessed(read_folder(SAMPLE), date(2026, 12, 1))


def events(content: bytes) -> list[dict[str, object]]:
    """Return the events of a file."""
    return [dict(each) | {"day": each["dtstart"].dt} for each in Calendar.from_ical(content).walk("VEVENT")]


def test_every_course_has_its_file(sample: Assessment) -> None:
    """Two courses, two files."""
    assert {"calendar-standard.ics", "calendar-low-dose.ics"} == set(calendar_files(sample))


def test_sessions_are_days_of_the_calendar(sample: Assessment) -> None:
    """Each session of the low-dose course is one whole day, in order, on a treatment weekday."""
    found = [each for each in events(calendar_files(sample)["calendar-low-dose.ics"]) if "session" in str(each["SUMMARY"])]
    (table,) = [v.value for v in sample.values if v.name == "course.calendar" and v.item.id == "low-dose"]
    assert [date.fromisoformat(day) for day in table.column("date")] == [each["day"] for each in found]
    assert all(each["DTEND"].dt - each["day"] == timedelta(days=1) for each in found)  # type: ignore[attr-defined, operator]
    assert {0, 1, 2, 3} >= {each["day"].weekday() for each in found}  # type: ignore[attr-defined]


def test_an_event_says_fields_checks_and_dose(sample: Assessment) -> None:
    """The second session completes the first cycle of 2 Gy."""
    second = events(calendar_files(sample)["calendar-low-dose.ics"])[1]
    assert "session 2, cycle 1, day 2 of the cycle (PA, RAO, LAO)" in str(second["SUMMARY"])
    words = str(second["DESCRIPTION"])
    assert "completes the cycle" in words
    assert "in-vivo dosimetry" in words
    assert "complete cycles after this session: 2 Gy" in words


def test_a_measured_cycle_holds_the_next(sample: Assessment) -> None:
    """Cycle 1 is measured: the first session of cycle 2 waits for its readings, and no other does."""
    found = [str(each["DESCRIPTION"]) for each in events(calendar_files(sample)["calendar-low-dose.ics"])]
    assert [2] == [at for at, words in enumerate(found) if "HOLD until the readings of cycle 1" in words]


def test_boosts_stand_on_their_days(sample: Assessment) -> None:
    """The first boost session of the standard course is on 2027-05-25, both sites in one event."""
    boosts = [each for each in events(calendar_files(sample)["calendar-standard.ics"]) if "Boosts" in str(each["SUMMARY"])]
    assert date(2027, 5, 25) == boosts[0]["day"]
    assert "perineum: 1 Gy" in str(boosts[0]["DESCRIPTION"])
    assert "sole: 1 Gy" in str(boosts[0]["DESCRIPTION"])


def test_no_order_no_patient_no_monitor_units(sample: Assessment) -> None:
    """The file says what it is not, and that the data are invented."""
    for content in calendar_files(sample).values():
        text = content.decode().replace("\r\n ", "")
        assert "not a directive" in text
        assert "invented for teaching" in text
        assert " MU" not in text


def test_identities_are_unique_and_the_same_every_time(sample: Assessment) -> None:
    """A diary that takes the file in twice has each day once; bytes depend on the input alone."""
    files = calendar_files(sample)
    uids = [str(each["UID"]) for content in files.values() for each in events(content)]
    assert len(set(uids)) == len(uids)
    assert files == calendar_files(sample)
    assert all(b"DTSTAMP:20261201T000000Z" in content for content in files.values())
