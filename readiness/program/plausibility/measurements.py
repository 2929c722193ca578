"""Readings that contradict their own header."""

from collections.abc import Iterator

from readiness.errors import Problem
from readiness.program.items import Program
from readiness.program.plausibility.stated import Check, impossible, number, question, table, word
from readiness.quantities import Scalar
from readiness.units import printed

MEASUREMENT = "measurement"
_PROFILES = {"angle-sweep", "dual-profile", "single-profile", "depth-dose-single", "depth-dose-composite"}
_HUNDREDTH = 0.03  # readings below this part of the prescription were read in another unit
_FASTER = 1.1  # practice: rates differ by less from pulse to pulse
_POSITIONS = ("tilt_deg", "height_cm", "across_cm", "depth_mm", "angle_deg")


def gaps(program: Program) -> Iterator[Problem]:
    """A degrader hangs between source and plane, and without one there is no gap."""
    for item in program.of_kind(MEASUREMENT):
        gap, distance = number(item, "gap_cm"), number(item, "distance_cm")
        if gap is not None and distance is not None and gap >= distance:
            message = f"a gap of {printed(gap)} cm reaches the source, {printed(distance)} cm away"
            yield impossible(item, "gap_cm", message)
        if gap and word(item, "degrader") == "none":
            yield impossible(item, "gap_cm", f"there is no degrader, so the gap is 0, not {printed(gap)} cm")


def media(program: Program) -> Iterator[Problem]:
    """There is no depth in air."""
    for item in program.of_kind(MEASUREMENT):
        depth = number(item, "depth_mm")
        if word(item, "medium") == "air" and depth:
            yield question(item, "depth_mm", f"a depth of {printed(depth)} mm in air; was a phantom used?")


def rooms(program: Program) -> Iterator[Problem]:
    """A machine is measured where it stands."""
    for item in program.of_kind(MEASUREMENT):
        machine = program.find("machine", word(item, "machine") or "")
        stands_in = word(machine, "room") if machine is not None else None
        room = word(item, "room")
        if room is not None and stands_in is not None and room != stands_in:
            message = f"measured in {room}, but {word(item, 'machine')} stands in {stands_in}"
            yield question(item, "room", message)


def positions(program: Program) -> Iterator[Problem]:
    """A profile has one reading at a position."""
    for item in program.of_kind(MEASUREMENT):
        readings = table(item, "table")
        if readings is None or word(item, "kind") not in _PROFILES:
            continue
        at = [readings.columns.index(name) for name in _POSITIONS if name in readings.columns]
        seen: dict[tuple[Scalar, ...], int] = {}
        for number_of_row, row in enumerate(readings.rows, 1):
            position = tuple(row[each] for each in at)
            first = seen.setdefault(position, number_of_row)
            if first != number_of_row:
                message = f"row {number_of_row} has the position of row {first}: which of them counts?"
                yield question(item, "table", message)


def spans(program: Program) -> Iterator[Problem]:
    """A profile in centimetres spans more than a hand: else its unit was mistaken."""
    for item in program.of_kind(MEASUREMENT):
        readings = table(item, "table")
        if readings is None or word(item, "kind") not in {"angle-sweep", "dual-profile", "single-profile"}:
            continue
        widest = 0.0
        for name in ("height_cm", "across_cm"):
            if name in readings.columns:
                found = [each for each in readings.column(name) if isinstance(each, int | float)]
                widest = max(widest, max(found, default=0) - min(found, default=0))
        if 0 < widest < 10:
            message = f"the positions span {printed(widest)} cm; were they read in metres?"
            yield question(item, "table", message)


def in_vivo_units(program: Program) -> Iterator[Problem]:
    """Readings that all lie a hundredfold below or above what was prescribed have another unit."""
    for item in program.of_kind(MEASUREMENT):
        readings, prescribed = table(item, "table"), number(item, "prescribed_per_cycle_gy")
        if word(item, "kind") != "in-vivo-readings" or readings is None or not prescribed:
            continue
        found = (each for each in readings.column("dose_cgy") if isinstance(each, int | float))
        doses = sorted(each for each in found if each > 0)
        if not doses:
            continue
        middle, whole = doses[len(doses) // 2], 100 * prescribed
        said = f"the middle reading is {printed(middle)} cGy of {printed(whole)} cGy a cycle"
        if middle < _HUNDREDTH * whole:
            yield impossible(item, "table", f"{said}; these are gray under a column in cGy")
        elif middle > whole / _HUNDREDTH:
            yield impossible(item, "table", f"{said}; is their unit smaller than cGy?")


def surveyed_barriers(program: Program) -> Iterator[Problem]:
    """A survey of a room has readings behind the barriers of that room."""
    for item in program.of_kind(MEASUREMENT):
        readings, room = table(item, "table"), word(item, "room")
        if word(item, "kind") != "survey" or readings is None:
            continue
        for name in dict.fromkeys(map(str, readings.column("barrier"))):
            barrier = program.find("barrier", name)
            belongs = barrier.owners.get("room") if barrier is not None else None
            if belongs is not None and belongs != room:
                yield impossible(item, "table", f"{name} is a barrier of {belongs}, the survey is of {room}")


def survey_rates(program: Program) -> Iterator[Problem]:
    """A survey is not done at a higher rate than its beam has: its dose of a week would come out too low."""
    for item in program.of_kind(MEASUREMENT):
        rate = number(item, "rate_mu_per_min")
        beam = program.find("beam", item.owners.get("beam", ""))
        most = number(beam, "rate_mu_per_min") if beam is not None else None
        if word(item, "kind") == "survey" and rate and most and rate > _FASTER * most:
            message = (
                f"surveyed at {printed(rate)} MU/min, the beam gives {printed(most)} MU/min; which is right?"
            )
            yield question(item, "rate_mu_per_min", message)


CHECKS: tuple[Check, ...] = (
    gaps,
    media,
    rooms,
    positions,
    spans,
    in_vivo_units,
    surveyed_barriers,
    survey_rates,
)
