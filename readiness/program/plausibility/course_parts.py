"""What a course names lies inside it: measured cycles, boosts, shields, and the week that holds a cycle."""

from collections.abc import Iterator

from readiness.errors import Problem
from readiness.program.items import Item, Program
from readiness.program.plausibility.stated import (
    Check,
    cell,
    impossible,
    number,
    numbers,
    question,
    table,
    words,
)

WEEK = ("monday", "tuesday", "wednesday", "thursday", "friday", "saturday", "sunday")


def week_of_a_cycle(program: Program) -> Iterator[Problem]:
    """A week has the sessions of a cycle, on days in a row, since a cycle is not split over a weekend."""
    days = next((words(item, "treatment_weekdays") for item in program.of_kind("program")), None)
    for course in program.of_kind("course"):
        cycle, week = number(course, "sessions_per_cycle"), number(course, "sessions_per_week")
        if cycle is None:
            continue
        if week is not None and week < cycle:
            message = (
                f"a cycle takes {cycle:g} sessions and a week has {week:g}; "
                "a cycle is not split over a weekend"
            )
            yield impossible(course, "sessions_per_week", message)
        elif days is not None and _longest_run(days) < cycle:
            message = (
                f"a cycle takes {cycle:g} days in a row, and the treatment weekdays have {_longest_run(days)}"
            )
            yield question(course, "sessions_per_cycle", message)


def _longest_run(days: tuple[str, ...]) -> int:
    """Return the most treatment weekdays in a row within one week."""
    longest = run = 0
    for day in WEEK:
        run = run + 1 if day in days else 0
        longest = max(longest, run)
    return longest


def cycles_named(program: Program) -> Iterator[Problem]:
    """Cycles that are measured, boosted or shielded are cycles of the course."""
    for course in program.of_kind("course"):
        cycles = number(course, "cycles")
        if cycles is None:
            continue
        beyond = [each for each in numbers(course, "measured_cycles") or () if each > cycles]
        if beyond:
            message = f"cycle {beyond[0]:g} is measured in a course of {cycles:g} cycles"
            yield impossible(course, "measured_cycles", message)
        yield from _rows(course, "boosts", "site", cycles)
        yield from _rows(course, "shields", "organ", cycles)


def _rows(course: Item, name: str, what: str, cycles: float) -> Iterator[Problem]:
    stated = table(course, name)
    for row in stated.records() if stated is not None else ():
        first, last = cell(row, "first_cycle"), cell(row, "last_cycle") if what == "organ" else None
        if first is not None and first > cycles:
            message = f"{row[what]} begins with cycle {first:g} of a course of {cycles:g} cycles"
            yield impossible(course, name, message)
        elif first is not None and last is not None and last < first:
            message = f"{row[what]} ends with cycle {last:g}, before it begins ({first:g})"
            yield impossible(course, name, message)


CHECKS: tuple[Check, ...] = (week_of_a_cycle, cycles_named)
