"""The calendar of each course as an iCalendar file (RFC 5545): sessions and boosts as days without a time."""

import hashlib
from collections.abc import Iterator
from datetime import UTC, date, datetime, time, timedelta
from typing import Any

from readiness.assessment.records import Assessment, Ref, Value
from readiness.outputs.contract import CAUTION, INVENTED
from readiness.quantities import Table
from readiness.units import printed

_NOT_AN_ORDER = (
    "A plan for the team's diary, begun with the first treatment day that was planned; not a directive. It "
    "holds no patient and no monitor units."
)


def calendar_files(assessment: Assessment) -> dict[str, bytes]:
    """Return one file for each course that has a calendar: its name, and its content."""
    tables = _tables(assessment)
    return {
        f"calendar-{course.id}.ics": _calendar(assessment, course.id, table, tables.get(("boosts", course)))
        for (what, course), table in tables.items()
        if what == "sessions" and table.rows
    }


def _tables(assessment: Assessment) -> dict[tuple[str, Ref], Table]:
    names = {"course.calendar": "sessions", "course.boost_calendar": "boosts"}
    return {
        (names[value.name], value.item): value.value
        for value in assessment.values
        if isinstance(value, Value) and value.name in names and isinstance(value.value, Table)
    }


def _calendar(assessment: Assessment, course: str, sessions: Table, boosts: Table | None) -> bytes:
    from icalendar import Calendar

    calendar = Calendar()
    calendar.add("prodid", f"-//readiness//course calendar {assessment.versions.product}//EN")
    calendar.add("version", "2.0")
    calendar.add("x-wr-calname", f"Total skin electrons, course {course}")
    said = [CAUTION, _NOT_AN_ORDER, *([INVENTED] if assessment.invented else [])]
    calendar.add("x-wr-caldesc", " ".join(said))
    for row in sessions.records():
        calendar.add_component(_session(assessment, course, row, " ".join(said)))
    for day, lines in _boosts_by_day(boosts):
        calendar.add_component(
            _event(assessment, f"{course}-boost-{day}", day, f"Boosts, course {course}", "\n".join(lines))
        )
    content: bytes = calendar.to_ical()
    return content


def _session(assessment: Assessment, course: str, row: dict[str, Any], caution: str) -> Any:
    marks = [
        *(["completes the cycle"] if row["completes_cycle"] else []),
        *(["made up"] if row["made_up"] else []),
        *(["in-vivo dosimetry"] if row["in_vivo"] else []),
        *([f"chart check: {row['chart_check']}"] if row["chart_check"] else []),
    ]
    lines = [
        *([f"HOLD {row['hold']}"] if row["hold"] else []),
        f"Fields: {row['fields']}",
        *(["; ".join(marks)] if marks else []),
        f"Prescribed skin dose in complete cycles after this session: "
        f"{printed(float(row['complete_cycles_dose_gy']))} Gy",
        caution,
    ]
    title = (
        f"Course {course}: session {row['session']}, cycle {row['cycle']}, day {row['session_of_cycle']}"
        f" of the cycle ({row['fields']})"
    )
    return _event(assessment, f"{course}-{row['session']}", str(row["date"]), title, "\n".join(lines))


def _boosts_by_day(boosts: Table | None) -> Iterator[tuple[str, list[str]]]:
    found: dict[str, list[str]] = {}
    for row in boosts.records() if boosts is not None else ():
        after = printed(float(str(row["site_dose_after_gy"])))
        said = f"{row['site']}: {printed(float(str(row['dose_gy'])))} Gy, {after} Gy of boost after it"
        found.setdefault(str(row["date"]), []).append(said)
    yield from sorted(found.items())


def _event(assessment: Assessment, key: str, day: str, title: str, words: str) -> Any:
    from icalendar import Event

    event = Event()
    digest = hashlib.sha256(f"{assessment.program}\n{key}".encode()).hexdigest()[:24]
    event.add("uid", f"{digest}@readiness.invalid")
    event.add("dtstamp", datetime.combine(assessment.as_of, time(0), UTC))
    first = date.fromisoformat(day)
    event.add("dtstart", first)
    event.add("dtend", first + timedelta(days=1))
    event.add("summary", title)
    event.add("description", words)
    event.add("transp", "TRANSPARENT")
    return event
