"""Barriers that cannot stand where they are said to, and limits in the wrong unit."""

from collections.abc import Iterator

from readiness.errors import Problem
from readiness.program.items import Item, Program
from readiness.program.plausibility.rooms import usable_floor
from readiness.program.plausibility.shapes import extent
from readiness.program.plausibility.stated import Check, cell, impossible, number, question, table, word
from readiness.units import printed

BEYOND_CM = 30  # the point to protect lies 0.3 m beyond the outer face (ncrp-151, memory)
DISTANCE_TOLERANCE_CM = 30  # practice: what drawings and finishes may differ
FACE_TOLERANCE_CM = 10  # practice: plaster and cladding
SOURCE_AXIS_CM = 100  # practice: isocentric accelerators, where no machine of the room says otherwise
THICKEST_CM = 500  # practice: no wall of a treatment room is thicker
# practice: usual densities in g/cm3 with room for aggregates
_DENSITIES = {
    "concrete": (1.6, 2.6),
    "heavy-concrete": (2.5, 6.0),
    "steel": (7.0, 8.3),
    "lead": (10.5, 11.5),
    "earth": (0.8, 2.4),
}
_ENERGIES_MV = (4, 18)  # where the tables of tenth-value layers hold (ncrp-151, memory)
_RATES_USV_PER_H = (0.1, 1000)  # practice: limits of the dose rate in use lie between 0.5 and 100
_WALLS = {"x-min-wall": (0, -1), "x-max-wall": (2, 1), "y-min-wall": (1, -1), "y-max-wall": (3, 1)}


def layers(program: Program) -> Iterator[Problem]:
    """A barrier is made of something, of a thickness and density that walls have."""
    for barrier in program.of_kind("barrier"):
        found = table(barrier, "layers")
        if found is None:
            continue
        if not found.rows and word(barrier, "role") in {"primary", "secondary"}:
            message = "a barrier without layers stops nothing; leave layers out if they are unknown"
            yield impossible(barrier, "layers", message)
        total = _thickness(barrier)
        recess = number(barrier, "recess_cm")
        if total and recess is not None and recess >= total:
            message = f"a recess of {printed(recess)} cm goes through its {printed(total)} cm"
            yield impossible(barrier, "recess_cm", message)
        if total and total > THICKEST_CM:
            message = f"it is {printed(total)} cm thick; were the layers given in millimetres?"
            yield question(barrier, "layers", message)
        for row in found.records():
            low, high = _DENSITIES.get(str(row.get("material")), (0, 99))
            density = cell(row, "density_g_per_cm3")
            if density is not None and not low <= density <= high:
                message = f"{row['material']} of {printed(density)} g/cm³ is unusual ({low} to {high} g/cm³)"
                yield question(barrier, "layers", message)


def workloads(program: Program) -> Iterator[Problem]:
    """Leakage reaches every barrier: its use factor is 1; tables of layers hold for some energies only."""
    low, high = _ENERGIES_MV
    for barrier in program.of_kind("barrier"):
        found = table(barrier, "existing_workload")
        for row in found.records() if found is not None else ():
            use, energy = cell(row, "use_factor"), cell(row, "energy_mv")
            if energy is not None and not low <= energy <= high:
                message = (
                    f"{printed(energy)} MV lies outside the tables of tenth-value layers ({low} to {high} MV)"
                    ": no dose behind this barrier will be calculated"
                )
                yield question(barrier, "existing_workload", message)
            if row.get("kind") == "leakage" and use is not None and use != 1:
                message = f"leakage has a use factor of 1, not {printed(use)}"
                yield question(barrier, "existing_workload", message)


def faces(program: Program) -> Iterator[Problem]:
    """A wall stands on its own side of the isocentre, where the floor ends."""
    for barrier in program.of_kind("barrier"):
        face, surface = number(barrier, "inner_face_cm"), word(barrier, "surface")
        if face is None or surface not in _WALLS:
            continue
        side, sign = _WALLS[surface]
        if face * sign <= 0:
            direction = "negative" if sign < 0 else "positive"
            message = f"the inner face of {surface} has a {direction} coordinate, not {printed(face)} cm"
            yield impossible(barrier, "inner_face_cm", message)
            continue
        room = program.find("room", barrier.owners.get("room", ""))
        floor = usable_floor(room) if room is not None else None
        end = extent(floor)[side] if floor else face
        if abs(end - face) > FACE_TOLERANCE_CM:
            message = f"its inner face is at {printed(face)} cm, the floor ends at {printed(end)} cm"
            yield question(barrier, "inner_face_cm", message)


def distances(program: Program) -> Iterator[Problem]:
    """The distance along the beam agrees with face and thickness of the walls on its axis."""
    for barrier in program.of_kind("barrier"):
        face, total = number(barrier, "inner_face_cm"), _thickness(barrier)
        if face is None or not total or word(barrier, "surface") not in {"x-min-wall", "x-max-wall"}:
            continue
        from_axis = abs(face) + total + BEYOND_CM
        from_source = _source_axis(program, barrier) + from_axis
        for name, expected in (("distance_m", from_source), ("isocentre_distance_m", from_axis)):
            stated = number(barrier, name)
            if stated is not None and abs(stated * 100 - expected) > DISTANCE_TOLERANCE_CM:
                sum_of_parts = f"face, thickness and 0.3 m add up to {printed(expected / 100)} m"
                yield question(barrier, name, f"{printed(stated)} m, but {sum_of_parts}")


def limits(program: Program) -> Iterator[Problem]:
    """A local limit replaces one thing, and dose limits have the size that dose limits have."""
    for limit in program.of_kind("local_limit"):
        named = [name for name in ("rule", "criterion") if word(limit, name) is not None]
        if len(named) != 1:
            message = "name the rule or the criterion that it replaces" + (", not both" if named else "")
            yield impossible(limit, "criterion", message)
        value, unit = number(limit, "limit"), (word(limit, "unit") or "").replace("μ", "µ")
        if value is None:
            continue
        low, high = _DOSE_LIMITS.get(unit, (value, value))
        if not low <= value <= high:
            message = f"{printed(value)} {unit} is far from usual limits, {low} to {high}: off by 1000?"
            yield question(limit, "limit", message)


def dose_rates(program: Program) -> Iterator[Problem]:
    """A limit of the dose rate has the size that such limits have."""
    low, high = _RATES_USV_PER_H
    for protection in program.of_kind("protection"):
        limit = number(protection, "instantaneous_limit_usv_per_h")
        if limit is not None and not low <= limit <= high:
            message = f"{printed(limit)} µSv/h is far from usual limits, {low} to {high}: off by 1000?"
            yield question(protection, "instantaneous_limit_usv_per_h", message)


# practice: from a tenth of the strictest to ten times the loosest design goals in use
_DOSE_LIMITS = {
    "mSv/week": (0.001, 4),
    "µSv/week": (1, 4000),
    "µSv in any one hour": (1, 1000),
    "mSv/year": (0.05, 200),
}


def local_rules(program: Program) -> Iterator[Problem]:
    """A local rule has the limit that its condition needs."""
    for rule in program.of_kind("local_rule"):
        condition = word(rule, "condition")
        if condition in {"at_least", "at_most", "above", "below", "equals", "on_or_after", "on_or_before"}:
            if rule.get("limit") is None:
                yield impossible(rule, "condition", f"{condition} needs a limit")
        elif condition in {"one_of", "contains"}:
            if rule.get("limits") is None:
                yield impossible(rule, "condition", f"{condition} needs limits, a list")
        elif condition is not None and (rule.get("limit") is not None or rule.get("limits") is not None):
            yield impossible(rule, "condition", f"{condition} has no limit; leave it out")


def _thickness(barrier: Item) -> float:
    found = table(barrier, "layers")
    return sum(cell(row, "thickness_cm") or 0 for row in found.records()) if found is not None else 0


def _source_axis(program: Program, barrier: Item) -> float:
    room = barrier.owners.get("room")
    machines = [each for each in program.of_kind("machine") if each.owners.get("room") == room]
    stated = [number(machine, "source_axis_distance_cm") for machine in machines]
    return next((each for each in stated if each is not None), SOURCE_AXIS_CM)


CHECKS: tuple[Check, ...] = (layers, workloads, faces, distances, limits, dose_rates, local_rules)
