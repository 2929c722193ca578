"""Cover: who is left when one person is away, and how many qualified people can stand at the console."""

from collections.abc import Collection

from readiness.quantities import Scalar, Table

SESSION = "session"
FIRST_CYCLE = "first-cycle-session"
COVER = (
    "profession", "away", "qualified_left_persons", "session_persons", "session_covered",
    "first_cycle_persons", "first_cycle_covered", "left_fte", "needed_fte", "hours_covered",
)  # fmt: skip


def qualified_at_console(*, people: Table, console_professions: Collection[str]) -> int:
    """
    Return how many people are qualified and of a profession that may stand at the console.

    Args:
        people: Who there is; columns of staff_hours.PEOPLE.
        console_professions: Professions whose people may operate the mode.

    Returns:
        People. [persons]

    Raises:
        ValueError: If no profession may stand at the console.

    Valid for: the day for which the qualifications were judged.
    Assumes: that an unknown qualification is none; whether two are on duty at once is the rota's matter.
    Source: definition (derived); that two are needed stands in the rules.
    """
    if not console_professions:
        raise ValueError("no profession is stated that may stand at the console")
    qualified = (row for row in people.records() if row["qualified"] is True)
    return sum(row["profession"] in console_professions for row in qualified)


def qualified_at_console_with_one_away(*, people: Table, console_professions: Collection[str]) -> int:
    """
    Return how many qualified people are left for the console when one of them is away.

    Args:
        people: Who there is; columns of staff_hours.PEOPLE.
        console_professions: Professions whose people may operate the mode.

    Returns:
        People. [persons]

    Raises:
        ValueError: If no profession may stand at the console.

    Valid for: one absence at a time.
    Assumes: the worst case, that the absent person is qualified.
    Source: definition (derived).
    """
    return max(0, qualified_at_console(people=people, console_professions=console_professions) - 1)


def persons_at_once(*, tasks: Table, profession: str, per: str) -> int | None:
    """
    Return how many people of a profession one session takes at once.

    Args:
        tasks: What is done, by whom, how often; columns of staff_hours.TASKS.
        profession: The profession.
        per: "session" or "first-cycle-session".

    Returns:
        The largest number of persons among those tasks; 0 if it has none, blank if one of them does not
        state its persons. [persons]

    Raises:
        ValueError: If the persons of a task are not a number.

    Valid for: tasks of one session that run side by side.
    Assumes: that tasks stated for the same kind of session run at the same time.
    Source: definition (derived).
    """
    most = 0
    for row in tasks.records():
        if row["profession"] == profession and row["per"] == per:
            persons = row["persons"]
            if persons is None:
                return None
            if isinstance(persons, str):
                raise ValueError(f"persons of {row['task']!r} is not a number")
            most = max(most, int(persons))
    return most


def cover_with_one_away(*, tasks: Table, people: Table, balance: Table) -> Table:
    """
    Return, for each person in turn, what is left of the profession when that person is away.

    Args:
        tasks: What is done, by whom, how often; columns of staff_hours.TASKS.
        people: Who there is; columns of staff_hours.PEOPLE.
        balance: What staff_hours.staffing_balance returned.

    Returns:
        One row per person of a profession with recurring tasks: qualified people left, whether they suffice
        for a session and for a first-cycle session, FTE left against needed; blank where one is not known.

    Raises:
        ValueError: If the persons of a task are not a number.

    Valid for: one absence at a time.
    Assumes: that a first-cycle session takes at least the people of any session.
    Source: definition (derived).
    """
    needed = {
        row["profession"]: None if row["tasks_without_minutes"] else row["needed_fte"]
        for row in balance.records()
        if row["phase"] == "operate"
    }
    rows: list[tuple[Scalar, ...]] = []
    for away in people.records():
        profession = away["profession"]
        if profession not in needed or away["person"] is None:
            continue
        left = [
            row
            for row in people.records()
            if row["profession"] == profession
            and row["person"] != away["person"]
            and row["qualified"] is True
        ]
        session = persons_at_once(tasks=tasks, profession=str(profession), per=SESSION)
        extra = persons_at_once(tasks=tasks, profession=str(profession), per=FIRST_CYCLE)
        first = None if session is None or extra is None else max(session, extra)
        times = [row["fte"] for row in left]
        fte = None if None in times else sum(float(time or 0.0) for time in times)
        need = needed[profession]
        rows.append((
            profession, away["person"], len(left), session, _covers(len(left), session), first,
            _covers(len(left), first), fte, need, _covers(fte, need),
        ))  # fmt: skip
    return Table.of(COVER, rows)


def _covers(left: float | None, needed: Scalar) -> bool | None:
    """Return whether what is left suffices; None where one of them is not known."""
    return None if needed is None or left is None else left + 1e-9 >= float(needed)
