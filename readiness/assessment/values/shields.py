"""Shields on the patient: thick enough, measured, owned, worn in every cycle; boosts at measured sites."""

from collections.abc import Sequence

from readiness.assessment.definition import Definition, Measured, derived
from readiness.assessment.values.naming import named
from readiness.assessment.values.readings import numbers, words
from readiness.calculations.patient_shields import (
    AGAINST_LEAD,
    USE_COLUMNS,
    cover_margin,
    highest_energy,
    needed_thickness,
    shield_use,
)
from readiness.calculations.shield_transmission import ShieldTransmission, analyse_shield_transmission
from readiness.errors import OutsideValidity
from readiness.quantities import Table

TRANSMISSION = "shield-transmission"
EYES = ("eyes-internal", "eyes-external")
LESION = "lesion"
MARGINS = ("shield", "organ", "material", "thickness_mm", "needed_mm", "margin_mm")


def margins_of_shields(*, shields: Table, energy_at_plane_mev: float) -> Table:
    """Return needed against owned thickness; blank where no rule covers the material."""
    rows: list[tuple[str | float | None, ...]] = []
    for shield in shields.records():
        name, material = str(shield["id"]), str(shield["material"])
        thickness = None if shield["thickness_mm"] is None else float(shield["thickness_mm"])
        needed = None
        if material in AGAINST_LEAD:
            needed = needed_thickness(material=material, energy_at_shield_mev=energy_at_plane_mev)
        margin = None if needed is None or thickness is None else thickness - needed
        rows.append((name, str(shield["organ"] or ""), material, thickness, needed, margin))
    return Table.of(MARGINS, rows)


def shields_too_thin(*, margins: Table) -> str:
    """Return the shields that are thinner than the rule asks; a thickness that is not stated is asked for."""
    found = []
    for row in margins.records():
        if row["needed_mm"] is not None and row["margin_mm"] is None:
            raise OutsideValidity(
                f"State thickness (mm) of patient shield {row['shield']} in equipment.yaml."
            )
        if row["margin_mm"] is not None and float(row["margin_mm"]) < 0:
            found.append(str(row["shield"]))
    return named(found)


def readings_of_shield(
    *,
    table: Table,
    measured_beam: str,
    measured_degrader: str,
    chosen: Sequence[bool],
    beams: Sequence[str],
    degraders: Sequence[str],
) -> ShieldTransmission:
    """Return transmission and backscatter, if measured with beam and degrader as planned."""
    of_all = list(zip(chosen, beams, degraders, strict=True))
    of_chosen = [each for each in of_all if each[0]]
    wanted = {(beam, degrader) for _, beam, degrader in of_chosen or of_all}
    if (measured_beam, measured_degrader) not in wanted:
        planned = " or ".join(sorted(f"{beam} with {degrader}" for beam, degrader in wanted)) or "nothing yet"
        raise OutsideValidity(f"measured with {measured_beam} and {measured_degrader}, planned is {planned}")
    return analyse_shield_transmission(
        places=words(table, "place", ""),
        with_shield_cgy=numbers(table, "with_shield_cgy"),
        without_shield_cgy=numbers(table, "without_shield_cgy"),
    )


def _pieces(shields: Table, organ: str) -> int:
    """Return how many shields for an organ are owned."""
    of_organ = [shield for shield in shields.records() if shield["organ"] == organ]
    for shield in of_organ:
        if shield["pieces"] is None:
            raise OutsideValidity(f"State pieces of patient shield {shield['id']} in equipment.yaml.")
    return sum(int(shield["pieces"] or 0) for shield in of_organ)


def internal_eye_pieces(*, shields: Table) -> int:
    """Return how many internal eye shields are owned."""
    return _pieces(shields, EYES[0])


def external_eye_pieces(*, shields: Table) -> int:
    """Return how many external eye shields are owned."""
    return _pieces(shields, EYES[1])


def cycles_with_open_eyes(*, cycles: int, dose_per_cycle_gy: float, shields: Table) -> int:
    """Return the cycles in which neither kind of eye shield is worn."""
    eyes = [(EYES[0], *row[1:]) for row in shields.rows if row[0] in EYES]
    worn = shield_use(
        cycles=cycles, dose_per_cycle_gy=dose_per_cycle_gy, shields=Table(shields.columns, tuple(eyes))
    )
    if not worn.rows:
        return cycles
    return int(worn.rows[0][USE_COLUMNS.index("open_cycles")] or 0)


def worn_but_not_owned(*, shields: Table, owned: Table) -> str:
    """Return the organs that the course shields and for which no shield is owned."""
    organs = [str(organ) for organ in shields.column("organ")]
    return named(organ for organ in organs if _pieces(owned, organ) == 0)


def boosts_not_measured(*, boosts: Table, measured_sites: Sequence[Sequence[str]]) -> str:
    """Return the boosted sites at which the in-vivo plan has no detector; a lesion needs none."""
    measured = {site for sites in measured_sites for site in sites}
    sites = [str(site) for site in boosts.column("site")]
    return named(site for site in sites if site != LESION and site not in measured)


_READINGS = {
    "table": "measurement.table",
    "measured_beam": "measurement.beam",
    "measured_degrader": "measurement.degrader",
    "chosen": "each arrangement.chosen",
    "beams": "each arrangement.beam",
    "degraders": "each arrangement.degrader",
}
_OWNED = "rows patient_shield: id organ pieces?"

DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "patient_shield.highest_energy_mev",
        "Highest most probable energy at the shield that its thickness stops.",
        by=highest_energy,
        takes={"material": "patient_shield.material", "thickness_mm": "patient_shield.thickness_mm"},
        source="tg-25",
        known="memory",
        formula="E = 2 (t - 1), t in mm of lead",
    ),
    Definition(
        "patient_shield.cover_margin_mm",
        "Cover of low atomic number on the lid's side less the least that is expected.",
        by=cover_margin,
        takes={"cover_mm": "patient_shield.cover_mm"},
        source="practice",
        known="practice",
    ),
    *(
        Definition(
            f"patient_shield.{part}",
            meaning,
            measured=Measured(TRANSMISSION, by=readings_of_shield, takes=_READINGS, part=part),
            source="definition",
            known="derived",
        )
        for part, meaning in (
            ("transmission_percent", "Dose behind the shield over the dose without it, the worst reading."),
            ("backscatter_percent", "Rise of dose on the side of the beam, the worst reading."),
        )
    ),
    Definition(
        "arrangement.shield_margins",
        "Thickness of each shield against what the energy at the plane needs.",
        by=margins_of_shields,
        takes={
            "shields": "rows patient_shield: id organ? material thickness_mm?",
            "energy_at_plane_mev": "arrangement.energy_at_plane_mev",
        },
        source="tg-25",
        known="memory",
        formula="t = E/2 + 1 in mm of lead; 1.2 times that in low-melting alloy",
    ),
    derived(
        "arrangement.shields_too_thin",
        "Shields that are thinner than the energy at the plane needs, or none.",
        shields_too_thin,
        {"margins": "arrangement.shield_margins"},
    ),
    derived(
        "program.internal_eye_shield_pieces",
        "Internal eye shields that are owned.",
        internal_eye_pieces,
        {"shields": _OWNED},
    ),
    derived(
        "program.external_eye_shield_pieces",
        "External eye shields that are owned.",
        external_eye_pieces,
        {"shields": _OWNED},
    ),
    derived(
        "course.cycles_without_eye_shield_count",
        "Cycles in which neither an internal nor an external eye shield is worn.",
        cycles_with_open_eyes,
        {
            "cycles": "course.cycles",
            "dose_per_cycle_gy": "course.dose_per_cycle_gy",
            "shields": "course.shields",
        },
    ),
    derived(
        "course.shields_not_owned",
        "Organs that the course shields and for which no shield is owned, or none.",
        worn_but_not_owned,
        {"shields": "course.shields", "owned": _OWNED},
    ),
    derived(
        "course.boosts_not_measured",
        "Boosted sites at which the in-vivo plan has no detector, or none.",
        boosts_not_measured,
        {"boosts": "course.boosts", "measured_sites": "each in_vivo.sites"},
    ),
)
