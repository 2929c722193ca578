"""Machines, beams and devices that contradict themselves."""

from collections.abc import Iterator

from readiness.errors import Problem
from readiness.program.items import Item, Program
from readiness.program.plausibility.stated import Check, impossible, number, numbers, question, word
from readiness.units import printed

RANGE_OVER_HALF_DEPTH = (1.1, 1.5)  # practice: clinical electron beams have 1.2 to 1.3


def practical_ranges(program: Program) -> Iterator[Problem]:
    """The practical range of electrons is larger than their half-value depth, by about a quarter."""
    for beam in program.of_kind("beam"):
        r50, rp = number(beam, "r50_cm"), number(beam, "rp_cm")
        if r50 is None or rp is None:
            continue
        if rp <= r50:
            message = f"the practical range ({printed(rp)} cm) must exceed R50 ({printed(r50)} cm)"
            yield impossible(beam, "rp_cm", f"{message}: exchanged?")
        elif not RANGE_OVER_HALF_DEPTH[0] <= rp / r50 <= RANGE_OVER_HALF_DEPTH[1]:
            message = f"the practical range is {printed(rp / r50, 3)} times R50; 1.2 to 1.3 times is usual"
            yield question(beam, "rp_cm", message)


def gantry_ranges(program: Program) -> Iterator[Problem]:
    """A gantry range is a lowest and a highest angle; a mode may have several of them."""
    for machine in program.of_kind("machine"):
        for name in ("gantry_range_deg", "forbidden_photon_gantry_deg"):
            found = numbers(machine, name)
            if found is not None and len(found) != 2:
                message = f"write two numbers, the lowest and the highest angle, not {len(found)}"
                yield impossible(machine, name, message)
            elif found:
                yield from _rising(machine, name, found)
    for beam in program.of_kind("beam"):
        found = numbers(beam, "mode_gantry_range_deg")
        if found is not None and (len(found) % 2 or not found):
            message = f"write pairs of lowest and highest angle, an even count of numbers, not {len(found)}"
            yield impossible(beam, "mode_gantry_range_deg", message)
        elif found:
            yield from _rising(beam, "mode_gantry_range_deg", found)


def _rising(item: Item, name: str, found: tuple[float, ...]) -> Iterator[Problem]:
    for low, high in zip(found[::2], found[1::2], strict=True):
        if low >= high:
            yield impossible(item, name, f"the lowest angle ({printed(low)}) is not below {printed(high)}")
        elif not -360 <= low < high <= 720 or high - low > 400:
            yield impossible(item, name, f"no gantry turns from {printed(low)} to {printed(high)} degrees")


def stops(program: Program) -> Iterator[Problem]:
    """A stand locks at angles of one turn, each of them once."""
    for stand in program.of_kind("stand"):
        found = numbers(stand, "stops_deg") or ()
        outside = [each for each in found if not 0 <= each < 360]
        if outside:
            message = f"a stop lies from 0 to below 360 degrees, not at {printed(outside[0])}"
            yield impossible(stand, "stops_deg", message)
        twice = [each for at, each in enumerate(found) if each in found[:at]]
        if twice:
            yield impossible(stand, "stops_deg", f"the stop at {printed(twice[0])} degrees is written twice")


def heights(program: Program) -> Iterator[Problem]:
    """A degrader in use fits under a ceiling."""
    ceilings = [number(room, "ceiling_height_cm") for room in program.of_kind("room")]
    stated = [ceiling for ceiling in ceilings if ceiling is not None]
    if not stated or len(stated) < len(ceilings):
        return
    highest = max(stated)
    for degrader in program.of_kind("degrader"):
        top = (number(degrader, "foot_height_cm") or 0) + (number(degrader, "height_cm") or 0)
        if top > highest:
            message = f"its top at {printed(top)} cm is above every ceiling (at most {printed(highest)} cm)"
            yield question(degrader, "height_cm", message)


def thin_sheets(program: Program) -> Iterator[Problem]:
    """A degrader is a sheet: far thinner than it is wide."""
    for degrader in program.of_kind("degrader"):
        thickness = number(degrader, "thickness_cm")
        for name in ("width_cm", "height_cm"):
            size = number(degrader, name)
            if thickness is not None and size is not None and size <= thickness:
                message = f"its {name.split('_')[0]} ({printed(size)} cm) is not above its thickness"
                yield impossible(degrader, name, message)


def covers(program: Program) -> Iterator[Problem]:
    """The cover of an internal eye shield is thinner than anything that fits under a lid."""
    for shield in program.of_kind("patient_shield"):
        thickness, cover = number(shield, "thickness_mm"), number(shield, "cover_mm")
        if word(shield, "organ") == "eyes-internal" and (thickness or 0) + (cover or 0) > 10:
            message = "an internal eye shield thicker than 10 mm fits under no lid"
            yield question(shield, "thickness_mm", message)


CHECKS: tuple[Check, ...] = (practical_ranges, gantry_ranges, stops, heights, thin_sheets, covers)
