"""
Shields on the patient: needed thickness, the cover on the lid's side, and their use over the course.

Thickness is a necessary condition only. Under a small external shield scattered electrons arrive from the
side (rustgi-1986 found 5 mm of alloy ineffective at 6 MeV, where the rule of thumb asks for 4.8 mm): the dose
behind every shield is measured in the mode.
"""

from readiness.errors import OutsideValidity
from readiness.quantities import Table

LEAD_MM_PER_MEV = 0.5  # tg-25 (memory)
MARGIN_MM = 1.0  # tg-25 (memory)
AGAINST_LEAD = {"lead": 1.0, "low-melting-alloy": 1.2}  # tg-25 (memory); densities 11.35 / 9.4 agree
HIGHEST_ENERGY_MEV = 20.0
LEAST_COVER_MM = 1.0  # of low atomic number between metal and lid, practice
SCHEDULE_COLUMNS = ("session", "date", "cycle", "fields", "shields", "boosts")
USE_COLUMNS = ("organ", "shielded_cycles", "open_cycles", "open_dose_gy")


def needed_thickness(*, material: str, energy_at_shield_mev: float) -> float:
    """
    Return the thickness of metal that stops the electrons that reach a shield.

    t = E / 2 + 1 in mm of lead; 1.2 times that in low-melting alloy

    Args:
        material: "lead" or "low-melting-alloy".
        energy_at_shield_mev: Most probable energy E where the shield is, after air and degrader. [MeV]

    Returns:
        Needed thickness. [mm]

    Raises:
        ValueError: If the energy is not more than 0.
        OutsideValidity: If the rule does not cover the material or the energy.

    Valid for: lead and low-melting alloy, up to 20 MeV; shields wide against the range.
    Assumes: broad beam from the front; bremsstrahlung and scatter round the edge are measured.
    Source: tg-25 (memory).
    """
    if not energy_at_shield_mev > 0:
        raise ValueError(f"the energy at a shield is more than 0 MeV, not {energy_at_shield_mev}")
    if energy_at_shield_mev > HIGHEST_ENERGY_MEV:
        raise OutsideValidity(f"the thickness rule for shields holds up to {HIGHEST_ENERGY_MEV:g} MeV")
    return (LEAD_MM_PER_MEV * energy_at_shield_mev + MARGIN_MM) * _against_lead(material)


def thickness_margin(*, material: str, thickness_mm: float, energy_at_shield_mev: float) -> float:
    """
    Return how much thicker a shield is than it needs to be.

    Args:
        material: "lead" or "low-melting-alloy".
        thickness_mm: Thickness of metal that is owned. [mm]
        energy_at_shield_mev: Most probable energy where the shield is, after air and degrader. [MeV]

    Returns:
        Owned less needed thickness; negative when the shield is too thin. [mm]

    Raises:
        ValueError: If thickness or energy is not more than 0.
        OutsideValidity: If the rule does not cover the material or the energy.

    Valid for: lead and low-melting alloy, up to 20 MeV.
    Assumes: as for the needed thickness.
    Source: tg-25 (memory).
    """
    if not thickness_mm > 0:
        raise ValueError(f"a shield of {thickness_mm} mm is none")
    return thickness_mm - needed_thickness(material=material, energy_at_shield_mev=energy_at_shield_mev)


def highest_energy(*, material: str, thickness_mm: float) -> float:
    """
    Return the highest energy at the shield for which a thickness suffices.

    E = 2 (t - 1), t in mm of lead

    Args:
        material: "lead" or "low-melting-alloy".
        thickness_mm: Thickness of metal that is owned. [mm]

    Returns:
        Highest most probable energy, at most the 20 MeV to which the rule holds; 0 when the thickness is
        within the margin of the rule. [MeV]

    Raises:
        ValueError: If the thickness is not more than 0.
        OutsideValidity: If the rule does not cover the material.

    Valid for: lead and low-melting alloy.
    Assumes: as for the needed thickness.
    Source: tg-25 (memory), inverted.
    """
    if not thickness_mm > 0:
        raise ValueError(f"a shield of {thickness_mm} mm is none")
    energy = (thickness_mm / _against_lead(material) - MARGIN_MM) / LEAD_MM_PER_MEV
    return min(max(energy, 0.0), HIGHEST_ENERGY_MEV)


def cover_margin(*, cover_mm: float) -> float:
    """
    Return how much thicker the low-Z cover on the lid's side is than the least that is expected.

    Metal throws electrons back into the lid that lies on it; a cover of low atomic number stops them.

    Args:
        cover_mm: Thickness of the cover of low atomic number between metal and lid. [mm]

    Returns:
        Cover less 1 mm; negative when it is too thin. [mm]

    Raises:
        ValueError: If the cover is negative.

    Valid for: internal shields under a lid that is treated.
    Assumes: wax, acrylic or another material of low atomic number; 1 to 2 mm are usual.
    Source: practice.
    """
    if not cover_mm >= 0:
        raise ValueError(f"a cover cannot be {cover_mm} mm thick")
    return cover_mm - LEAST_COVER_MM


def shield_schedule(*, sessions: Table, shields: Table, boosts: Table) -> Table:
    """
    Return which shields are worn and which boosts are given at each session.

    Args:
        sessions: Sessions of a course: columns session, date, cycle, fields.
        shields: Columns organ, first_cycle, last_cycle; no last cycle means to the end of the course.
        boosts: Planned boosts: columns date, site, dose_gy; may have no rows.

    Returns:
        One row per session, then one per boost day after the course.

    Raises:
        ValueError: If a shield is taken off before it is put on.

    Valid for: shields that are worn for complete cycles.
    Assumes: nothing; it brings the three tables together.
    Source: definition (derived).
    """
    worn = _worn(shields)
    given: dict[str, list[str]] = {}
    for boost in boosts.records():
        given.setdefault(str(boost["date"]), []).append(f"{boost['site']} {boost['dose_gy']:g} Gy")
    rows: list[tuple[int | str | None, ...]] = []
    for session in sessions.records():
        cycle, day = int(session["cycle"] or 0), str(session["date"])
        organs = [organ for organ, first, last in worn if first <= cycle and (last is None or cycle <= last)]
        shown = ", ".join(dict.fromkeys(organs))
        number, fields = int(session["session"] or 0), str(session["fields"])
        rows.append((number, day, cycle, fields, shown, ", ".join(given.pop(day, []))))
    rows += [(None, day, None, "", "", ", ".join(given[day])) for day in sorted(given)]
    return Table.of(SCHEDULE_COLUMNS, rows)


def shield_use(*, cycles: int, dose_per_cycle_gy: float, shields: Table) -> Table:
    """
    Return for how many cycles each organ is shielded, and the prescribed dose of the others.

    Args:
        cycles: Cycles of the course. [1]
        dose_per_cycle_gy: Prescribed dose of one complete cycle. [Gy]
        shields: Columns organ, first_cycle, last_cycle; no last cycle means to the end of the course.

    Returns:
        One row per organ in the order of the table: cycles shielded, cycles open, prescribed dose of those.

    Raises:
        ValueError: If a shield is taken off before it is put on, or the course is impossible.

    Valid for: shields that are worn for complete cycles.
    Assumes: what reaches the organ through and round the shield is not counted; it is measured.
    Source: definition (derived).
    """
    if cycles < 1 or not dose_per_cycle_gy > 0:
        raise ValueError(f"a course of {cycles} cycles of {dose_per_cycle_gy} Gy does not exist")
    covered: dict[str, set[int]] = {}
    for organ, first, last in _worn(shields):
        covered.setdefault(organ, set()).update(range(first, min(last or cycles, cycles) + 1))
    rows = [
        (organ, len(shielded), cycles - len(shielded), (cycles - len(shielded)) * dose_per_cycle_gy)
        for organ, shielded in covered.items()
    ]
    return Table.of(USE_COLUMNS, rows)


def _against_lead(material: str) -> float:
    """Return the thickness of a material over that of lead."""
    if material not in AGAINST_LEAD:
        raise OutsideValidity(
            f"there is no thickness rule for {material}: state the measured dose behind the shield instead"
        )
    return AGAINST_LEAD[material]


def _worn(shields: Table) -> list[tuple[str, int, int | None]]:
    """Return organ, first and last cycle of each entry."""
    worn = []
    for shield in shields.records():
        first = int(shield["first_cycle"] or 0)
        last = None if shield["last_cycle"] is None else int(shield["last_cycle"])
        if first < 1 or (last is not None and last < first):
            raise ValueError(f"{shield['organ']}: a shield cannot be worn from cycle {first} to {last}")
        worn.append((str(shield["organ"]), first, last))
    return worn
