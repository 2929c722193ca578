"""The program's own choices: courses, plans, the chosen arrangement and costs."""

from collections.abc import Iterator, Mapping
from functools import cache

from readiness.errors import Problem
from readiness.program.items import Item, Program
from readiness.program.plausibility.stated import (
    Check,
    day,
    days,
    impossible,
    number,
    question,
    table,
    word,
)
from readiness.quantities import Scalar
from readiness.units import printed

CHOSEN = "chosen_arrangement"
LYING = "moving-couch"
DOSE_TOLERANCE_GY = 0.01  # doses are written to a centigray
_TEXTS_OF_DOSE = ("title", "prescription_point", "scope")


def course_doses(program: Program) -> Iterator[Problem]:
    """The cycles of a course make its dose."""
    for course in program.of_kind("course"):
        total, each = number(course, "total_dose_gy"), number(course, "dose_per_cycle_gy")
        cycles = number(course, "cycles")
        if total is None or each is None or cycles is None:
            continue
        if abs(each * cycles - total) > DOSE_TOLERANCE_GY:
            made = f"{printed(int(cycles))} cycles of {printed(each)} Gy make {printed(each * cycles)} Gy"
            yield impossible(course, "cycles", f"{made}, not {printed(total)} Gy{_sessions(course, total)}")


def _sessions(course: Item, total: float) -> str:
    """Return a hint if cycles and sessions were mistaken for each other."""
    each, cycles = number(course, "dose_per_cycle_gy"), number(course, "cycles")
    sessions = number(course, "sessions_per_cycle")
    if each is None or cycles is None or sessions is None:
        return ""
    if abs(each * cycles / sessions - total) > DOSE_TOLERANCE_GY:
        return ""
    return "; were sessions counted instead of cycles?"


def course_breaks(program: Program) -> Iterator[Problem]:
    """A planned break lies between two cycles and has a length."""
    for course in program.of_kind("course"):
        after, weeks = number(course, "break_after_cycle"), number(course, "break_weeks")
        cycles = number(course, "cycles")
        if after and cycles is not None and after >= cycles:
            message = f"a break after cycle {printed(int(after))} of {printed(int(cycles))} breaks nothing"
            yield impossible(course, "break_after_cycle", message)
        if after == 0 and weeks:
            message = f"a break of {printed(weeks)} weeks has no cycle after which it begins"
            yield impossible(course, "break_weeks", message)


def fractions(program: Program) -> Iterator[Problem]:
    """A fraction may mean a cycle, a session or a field, so the word settles nothing here."""
    for kind in ("program", "course"):
        for item in program.of_kind(kind):
            for name in _TEXTS_OF_DOSE:
                if "fraction" in (word(item, name) or "").casefold():
                    message = "fraction may mean a cycle or a session; say which of them"
                    yield question(item, name, message)


def patient_sizes(program: Program) -> Iterator[Problem]:
    """The shortest patient is not taller than the tallest one."""
    for item in program.of_kind("program"):
        low, high = number(item, "shortest_patient_cm"), number(item, "tallest_patient_cm")
        if low is not None and high is not None and low > high:
            message = f"the shortest patient ({printed(low)} cm) exceeds the tallest ({printed(high)} cm)"
            yield impossible(item, "shortest_patient_cm", message)


def closed_dates(program: Program) -> Iterator[Problem]:
    """The days off cover the time in which the program begins, and the first patient does not come on one."""
    for item in program.of_kind("program"):
        closed, target = days(item, "closed_dates") or (), day(item, "target_first_patient_date")
        twice = [each for at, each in enumerate(closed) if each in closed[:at]]
        if twice:
            yield impossible(item, "closed_dates", f"{twice[0]} is written twice")
        if target is None:
            continue
        if target in closed or target in (days(item, "service_dates") or ()):
            yield question(item, "target_first_patient_date", f"{target} is a day on which nobody is treated")
        elif target.weekday() >= 5:
            name = "Saturday" if target.weekday() == 5 else "Sunday"
            yield question(item, "target_first_patient_date", f"{target} is a {name}")
        if closed and not any(each.year in (target.year - 1, target.year) for each in closed):
            years = ", ".join(sorted({str(each.year) for each in closed}))
            message = f"all closed days are in {years}, but the first patient comes in {target.year}"
            yield question(item, "closed_dates", message)


def countries(program: Program) -> Iterator[Problem]:
    """A country has a code of two letters whose public holidays are known."""
    for item in program.of_kind("program"):
        code = word(item, "holidays_country")
        if code is None:
            continue
        if not (len(code) == 2 and code.isalpha() and code.isascii()):
            message = f"write the two-letter code of the country, not {code}"
            yield impossible(item, "holidays_country", message)
        elif code not in _known_countries():
            hint = f" (did you mean {code.upper()}?)" if code.upper() in _known_countries() else ""
            message = (
                f"the public holidays of {code} are not known{hint}; write the two letters of ISO 3166-1 in "
                "capitals, or leave the country out and list the days under closed_dates"
            )
            yield impossible(item, "holidays_country", message)


@cache
def _known_countries() -> frozenset[str]:
    import holidays  # here, because few programs name a country and the import costs time

    return frozenset(holidays.list_supported_countries())


def arrangements(program: Program) -> Iterator[Problem]:
    """A plan or choice has a machine that stands in its room, and what its technique needs."""
    for plan in program.of_kind("plan"):
        parts = {name: stated.value for name, stated in plan.fields.items()}
        texts = {name: value for name, value in parts.items() if isinstance(value, str | int | float)}
        yield from _arrangement(program, plan, texts, "")
    for item in program.of_kind("program"):
        chosen = table(item, CHOSEN)
        for row in chosen.records() if chosen is not None else ():
            yield from _arrangement(program, item, row, CHOSEN)


def _arrangement(program: Program, item: Item, parts: Mapping[str, Scalar], at: str) -> Iterator[Problem]:
    machine = program.find("machine", str(parts.get("machine")))
    stands_in = word(machine, "room") if machine is not None else None
    if parts.get("room") is not None and stands_in is not None and parts["room"] != stands_in:
        message = f"{parts['machine']} stands in {stands_in}, not in {parts['room']}"
        yield impossible(item, at or "machine", message)
    technique, lying = parts.get("technique"), parts.get("technique") == LYING
    wrong = "stand" if lying else "couch"
    if technique is not None and parts.get(wrong) is not None:
        posture = "lies" if lying else "stands"
        message = f"with {technique} the patient {posture}: leave out {wrong} {parts[wrong]}"
        yield impossible(item, at or wrong, message)


def gaps(program: Program) -> Iterator[Problem]:
    """A degrader hangs between the machine's head and the patient."""
    for plan in program.of_kind("plan"):
        gap, distance = number(plan, "degrader_gap_cm"), number(plan, "plane_distance_cm")
        if gap is not None and distance is not None and gap >= distance:
            message = f"a gap of {printed(gap)} cm reaches the source, {printed(distance)} cm away"
            yield impossible(plan, "degrader_gap_cm", message)


def costs(program: Program) -> Iterator[Problem]:
    """A low figure is not above the likely one, nor that above the high one."""
    for cost in program.of_kind("cost"):
        for low_name, high_name in (("low", "likely"), ("likely", "high"), ("low", "high")):
            low, high = number(cost, low_name), number(cost, high_name)
            if low is not None and high is not None and low > high:
                message = f"the {low_name} figure {printed(low)} exceeds the {high_name} one, {printed(high)}"
                yield impossible(cost, low_name, message)
                break


CHECKS: tuple[Check, ...] = (
    course_doses,
    course_breaks,
    fractions,
    patient_sizes,
    closed_dates,
    countries,
    arrangements,
    gaps,
    costs,
)
