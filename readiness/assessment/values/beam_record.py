"""The rest of the commissioning record: the set-up as built, a phantom cycle, the monitor in the mode."""

from functools import lru_cache

from readiness.assessment.definition import Definition, Measured
from readiness.assessment.values.readings import number_or_none, numbers, words
from readiness.calculations.as_built import AsBuilt, compare_as_built
from readiness.calculations.end_to_end import EndToEnd, analyse_end_to_end
from readiness.calculations.mode_check import ModeCheck, analyse_mode_check
from readiness.errors import OutsideValidity
from readiness.quantities import Table

AS_BUILT, END_TO_END, MODE_CHECK = "as-built", "end-to-end", "mode-check"
HIGH_RATE = "high-rate"


@lru_cache(maxsize=256)
def as_built_record(
    *,
    table: Table,
    plane_distance_cm: float | None,
    degrader_gap_cm: float | None,
    tilt_deg: float | None,
    thickness_cm: float | None,
    distance_tolerance_cm: float,
    tilt_tolerance_deg: float,
    thickness_tolerance_mm: float,
) -> AsBuilt:
    """Return where an as-built record agrees with the choices; a choice not made is not compared."""

    def found(name: str) -> tuple[float, ...]:
        """Return what was found of one number."""
        entries = (number_or_none(entry) for entry in table.column(name))
        return tuple(entry for entry in entries if entry is not None)

    return compare_as_built(
        chosen_plane_distance_cm=plane_distance_cm,
        found_plane_distance_cm=found("plane_distance_cm"),
        chosen_degrader_gap_cm=degrader_gap_cm,
        found_degrader_gap_cm=found("degrader_gap_cm"),
        chosen_tilt_deg=tilt_deg,
        found_tilt_deg=found("tilt_deg"),
        chosen_degrader_thickness_mm=None if thickness_cm is None else 10 * thickness_cm,
        found_degrader_thickness_mm=found("degrader_thickness_mm"),
        distance_tolerance_cm=distance_tolerance_cm,
        tilt_tolerance_deg=tilt_tolerance_deg,
        thickness_tolerance_mm=thickness_tolerance_mm,
    )


@lru_cache(maxsize=256)
def phantom_cycle(*, table: Table, prescribed_per_cycle_gy: float) -> EndToEnd:
    """Return what a cycle on a phantom gave."""
    return analyse_end_to_end(
        sites=words(table, "site", ""),
        detectors=words(table, "detector", ""),
        doses_cgy=numbers(table, "dose_cgy"),
        dose_per_cycle_gy=prescribed_per_cycle_gy,
    )


@lru_cache(maxsize=256)
def check_of_mode(
    *, table: Table, mode: str, high_rate: bool | None, largest_planned_mu: float | None
) -> ModeCheck:
    """Return how monitor and dose behave in the beam's own mode."""
    if high_rate and mode != HIGH_RATE:
        raise OutsideValidity(f"it was done in the mode {mode}, not in the high-rate mode of this beam")
    return analyse_mode_check(
        mu=numbers(table, "mu"),
        doses_cgy=numbers(table, "dose_cgy"),
        backup_mu=[number_or_none(entry) for entry in table.column("backup_mu")],
        largest_planned_mu=largest_planned_mu,
    )


def departure_from_prescription(*, prescription_percent: float) -> float:
    """Return how far the dose at the prescription level is from the prescription, either way."""
    return abs(prescription_percent - 100)


_BUILT = {
    "table": "measurement.table",
    "plane_distance_cm": "arrangement.plane_distance_cm?",
    "degrader_gap_cm": "arrangement.degrader_gap_cm?",
    "tilt_deg": "arrangement.tilt_deg?",
    "thickness_cm": "degrader.thickness_cm?",
    "distance_tolerance_cm": "criterion.distance_agreement_cm",
    "tilt_tolerance_deg": "criterion.tilt_agreement_deg",
    "thickness_tolerance_mm": "criterion.thickness_agreement_mm",
}
_CYCLE = {
    "table": "measurement.table",
    "prescribed_per_cycle_gy": "measurement.prescribed_per_cycle_gy",
}
_MODE = {
    "table": "measurement.table",
    "mode": "measurement.mode",
    "high_rate": "beam.high_rate?",
    "largest_planned_mu": "beam.largest_mu_per_beam_mu?",
}


def _built(name: str, meaning: str, part: str) -> Definition:
    """Return a part of the as-built comparison."""
    measured = Measured(AS_BUILT, by=as_built_record, takes=_BUILT, part=part)
    return Definition(f"arrangement.{name}", meaning, measured=measured, source="practice", known="practice")


def _cycle(name: str, meaning: str, part: str) -> Definition:
    """Return a part of the phantom cycle."""
    measured = Measured(END_TO_END, by=phantom_cycle, takes=_CYCLE, part=part)
    return Definition(f"arrangement.{name}", meaning, measured=measured, source="aapm-23", known="memory")


def _mode(name: str, meaning: str, part: str) -> Definition:
    """Return a part of the check of the mode."""
    measured = Measured(MODE_CHECK, by=check_of_mode, takes=_MODE, part=part)
    return Definition(f"beam.{name}", meaning, measured=measured, source="aapm-23", known="memory")


DEFINITIONS: tuple[Definition, ...] = (
    _built(
        "as_built_agrees",
        "Every chosen distance, gap, tilt and thickness was found again in the installed set-up.",
        "agrees",
    ),
    _built("as_built_table", "Each number as chosen and as found in the installed set-up.", "rows"),
    _built("as_built_differing", "Numbers that were found to differ from the choice.", "differing"),
    _built("as_built_not_recorded", "Chosen numbers that the as-built record leaves out.", "not_recorded"),
    _built("as_built_remarks", "What must be said about the as-built record.", "remarks"),
    _cycle(
        "phantom_prescription_percent",
        "Dose of a phantom cycle at the prescription level, in per cent of the prescription.",
        "prescription_percent",
    ),
    Definition(
        "arrangement.phantom_deviation_percent",
        "Departure of a phantom cycle from the prescription at the prescription level, either way.",
        by=departure_from_prescription,
        takes={"prescription_percent": "arrangement.phantom_prescription_percent"},
        source="definition",
        known="derived",
    ),
    _cycle(
        "phantom_detector_difference_percent",
        "Largest difference between two types of detector at one site of the phantom.",
        "largest_difference_percent",
    ),
    _cycle(
        "phantom_detector_types",
        "Number of detector types with which the phantom cycle was read.",
        "detector_types",
    ),
    _cycle("phantom_doses", "Doses of a phantom cycle per site and detector.", "doses"),
    _cycle("phantom_remarks", "What must be said about the phantom cycle.", "remarks"),
    _mode(
        "mode_linearity_percent",
        "Largest departure of dose per MU from that of the largest number of MU.",
        "linearity_percent",
    ),
    _mode("mode_end_effect_mu", "MU delivered beyond those set.", "end_effect_mu"),
    _mode("mode_repeat_percent", "Standard deviation of a repeat in the mode.", "repeat_sd_percent"),
    _mode("mode_backup_percent", "Largest difference between both monitor channels.", "backup_percent"),
    _mode("largest_checked_mu", "Largest number of MU with which the mode was checked.", "largest_mu"),
    _mode("mode_remarks", "What must be said about the check of the mode.", "remarks"),
)
