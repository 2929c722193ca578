"""
Ranking of failure modes by the team's scores: occurrence, severity, lack of detection, each from 1 to 10.

A blank score stays blank: a mode without all three has no product and no rank, and is a thing to do. The
product orders the team's work. It is no measure of safety, and a severe mode deserves a look at any product.
"""

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from difflib import get_close_matches

from readiness.calculations.failure_modes import FailureMode
from readiness.quantities import Scalar, Table

LOWEST, HIGHEST = 1, 10
SEVERE = 9  # looked at whatever the product; practice
WORST = 10
RANKING_COLUMNS = ("rank", "id", "step", "failure", "occurrence", "severity", "lack_of_detection", "product")
WORST_COLUMNS = ("rank", "id", "failure", "cause", "effect", "product", "controls", "documents")
OPEN_COLUMNS = ("id", "step", "failure", "missing")


@dataclass(frozen=True)
class Scores:
    """The team's scores of one mode on scales from 1 (least) to 10 (worst); None while not given."""

    occurrence: int | None = None
    severity: int | None = None
    lack_of_detection: int | None = None

    def __post_init__(self) -> None:
        """Refuse a score that does not stand on its scale."""
        for name in ("occurrence", "severity", "lack_of_detection"):
            number = getattr(self, name)
            if number is None:
                continue
            if isinstance(number, bool) or not isinstance(number, int) or not LOWEST <= number <= HIGHEST:
                words = name.replace("_", " ")
                raise ValueError(f"{words} is a whole number from {LOWEST} to {HIGHEST}, not {number!r}")

    @property
    def blanks(self) -> tuple[str, ...]:
        """Return the scores that have not been given."""
        names = ("occurrence", "severity", "lack_of_detection")
        return tuple(name.replace("_", " ") for name in names if getattr(self, name) is None)

    @property
    def product(self) -> int | None:
        """Return occurrence times severity times lack of detection, or None while one is blank."""
        if self.occurrence is None or self.severity is None or self.lack_of_detection is None:
            return None
        return self.occurrence * self.severity * self.lack_of_detection


def failure_mode_ranking(*, modes: Sequence[FailureMode], scores: Mapping[str, Scores]) -> Table:
    """
    Return all failure modes, the worst first and those without all scores last.

    product = O S D

    Args:
        modes: The failure modes of the program.
        scores: The team's scores by the mode's id; a mode that is absent has none.

    Returns:
        One row per mode. Equal products share a rank and stand in order of severity, then of the process;
        modes without all three scores have neither product nor rank.

    Raises:
        ValueError: If two modes share an id, or a score belongs to no mode.

    Valid for: scores of one team on one scale.
    Assumes: nothing about blanks; they are never filled.
    Source: tg-100 (memory) for the product of three scores from 1 to 10.
    """
    places = _places(modes, scores)
    scored = {mode.id: scores.get(mode.id, Scores()) for mode in modes}
    products = {name: given.product for name, given in scored.items()}

    def order(mode: FailureMode) -> tuple[int, int, int]:
        product = products[mode.id]
        if product is None:
            return 1, 0, places[mode.id]
        return -product, -(scored[mode.id].severity or 0), places[mode.id]

    rows: list[tuple[Scalar, ...]] = []
    for mode in sorted(modes, key=order):
        given, product = scored[mode.id], products[mode.id]
        rank = None
        if product is not None:
            rank = 1 + sum(other > product for other in products.values() if other is not None)
        parts = (given.occurrence, given.severity, given.lack_of_detection, product)
        rows.append((rank, mode.id, mode.step, mode.failure, *parts))
    return Table.of(RANKING_COLUMNS, rows)


def worst_failure_modes(
    *, modes: Sequence[FailureMode], scores: Mapping[str, Scores], count: int = WORST
) -> Table:
    """
    Return the worst failure modes with their controls and the documents that hold them.

    Args:
        modes: The failure modes of the program.
        scores: The team's scores by the mode's id.
        count: How many to return. [1]

    Returns:
        At most that many scored modes, the worst first; fewer when fewer have all their scores.

    Raises:
        ValueError: If two modes share an id, a score belongs to no mode, or the count is below 1.

    Valid for: scores of one team on one scale.
    Assumes: nothing about modes without scores; they are listed by the open modes.
    Source: tg-100 (memory) for the ranking; ten is our choice.
    """
    if count < 1:
        raise ValueError(f"at least one mode is asked for, not {count}")
    by_id = {mode.id: mode for mode in modes}
    rows: list[tuple[Scalar, ...]] = []
    for row in failure_mode_ranking(modes=modes, scores=scores).records():
        if row["rank"] is not None and len(rows) < count:
            mode = by_id[str(row["id"])]
            held = ("; ".join(mode.controls), ", ".join(mode.documents))
            rows.append((row["rank"], mode.id, mode.failure, mode.cause, mode.effect, row["product"], *held))
    return Table.of(WORST_COLUMNS, rows)


def open_failure_modes(*, modes: Sequence[FailureMode], scores: Mapping[str, Scores]) -> Table:
    """
    Return the modes that lack a control, a document or a score: each is a thing to do.

    Args:
        modes: The failure modes of the program.
        scores: The team's scores by the mode's id.

    Returns:
        One row per mode with what is missing, in the order of the process.

    Raises:
        ValueError: If two modes share an id, or a score belongs to no mode.

    Valid for: any list of modes.
    Assumes: nothing.
    Source: definition (derived).
    """
    _places(modes, scores)
    rows = []
    for mode in modes:
        missing = [] if any(control.strip() for control in mode.controls) else ["control"]
        missing += [] if mode.documents else ["document that holds the controls"]
        missing += scores.get(mode.id, Scores()).blanks
        if missing:
            rows.append((mode.id, mode.step, mode.failure, ", ".join(missing)))
    return Table.of(OPEN_COLUMNS, rows)


def severe_failure_modes(*, modes: Sequence[FailureMode], scores: Mapping[str, Scores]) -> tuple[str, ...]:
    """
    Return the modes of severity 9 or 10, whatever their product.

    Args:
        modes: The failure modes of the program.
        scores: The team's scores by the mode's id.

    Returns:
        Their ids, in the order of the process.

    Raises:
        ValueError: If two modes share an id, or a score belongs to no mode.

    Valid for: scores of one team on one scale.
    Assumes: nothing about blanks.
    Source: practice.
    """
    _places(modes, scores)
    return tuple(mode.id for mode in modes if (scores.get(mode.id, Scores()).severity or 0) >= SEVERE)


def _places(modes: Sequence[FailureMode], scores: Mapping[str, Scores]) -> dict[str, int]:
    """Return the place of each mode in the process; refuse double ids and scores without a mode."""
    places: dict[str, int] = {}
    for place, mode in enumerate(modes):
        if mode.id in places:
            raise ValueError(f"two failure modes have the id {mode.id!r}")
        places[mode.id] = place
    for name in scores:
        if name not in places:
            near = get_close_matches(name, places, n=1)
            hint = f" (did you mean {near[0]!r}?)" if near else ""
            raise ValueError(f"there are scores for {name!r}, which is no failure mode{hint}")
    return places
