"""Whether what was installed agrees with what was chosen: distance, gap, tilt and thicknesses."""

from collections.abc import Sequence
from dataclasses import dataclass

from readiness.quantities import Table
from readiness.units import printed

COLUMNS = ("quantity", "unit", "chosen", "found", "difference", "tolerance", "outcome")
AGREES, DIFFERS, NOT_RECORDED, NOT_CHOSEN = "agrees", "differs", "not recorded", "not chosen"
LAST_DIGIT = 1e-9
SAME_NUMBER = 0.02  # relative, apart from a power of ten


_Number = tuple[str, str, float | None, Sequence[float], float]


@dataclass(frozen=True)
class AsBuilt:
    """
    Each treatment-critical number, chosen and found.

    ``agrees`` is true only if every number that was chosen was also recorded and agrees; the others are
    named. ``rows`` has one row per number, its outcome in words.
    """

    rows: Table
    agrees: bool
    differing: tuple[str, ...]
    not_recorded: tuple[str, ...]
    remarks: tuple[str, ...]

    def outcome(self, quantity: str) -> str:
        """Return the outcome of one number, such as "tilt"."""
        names = self.rows.column("quantity")
        return str(self.rows.column("outcome")[names.index(quantity)])


def compare_as_built(
    *,
    chosen_plane_distance_cm: float | None,
    found_plane_distance_cm: Sequence[float],
    chosen_degrader_gap_cm: float | None,
    found_degrader_gap_cm: Sequence[float],
    chosen_tilt_deg: float | None,
    found_tilt_deg: Sequence[float],
    chosen_degrader_thickness_mm: float | None,
    found_degrader_thickness_mm: Sequence[float],
    distance_tolerance_cm: float,
    tilt_tolerance_deg: float,
    thickness_tolerance_mm: float,
) -> AsBuilt:
    """
    Return where an as-built record of an arrangement agrees with the choices, number by number.

    Args:
        chosen_plane_distance_cm: Chosen plane distance, None if none was chosen. [cm]
        found_plane_distance_cm: Plane distances found, one per determination. [cm]
        chosen_degrader_gap_cm: Chosen gap from the degrader's exit face to the plane, or None. [cm]
        found_degrader_gap_cm: Gaps found. [cm]
        chosen_tilt_deg: Chosen tilt, or None. [deg]
        found_tilt_deg: Tilts found, both fields. [deg]
        chosen_degrader_thickness_mm: Chosen thickness of the degrader, or None. [mm]
        found_degrader_thickness_mm: Thicknesses found over the sheet. [mm]
        distance_tolerance_cm: Largest difference of distance and gap that still agrees. [cm]
        tilt_tolerance_deg: Largest difference of the tilt that still agrees. [deg]
        thickness_tolerance_mm: Largest difference of a thickness that still agrees. [mm]

    Returns:
        A row per number, whether all that were chosen agree, and which differ or were not recorded.

    Raises:
        ValueError: If a tolerance is not more than 0.

    Valid for: determinations of one installation.
    Assumes: every determination must agree, not only their mean.
    Source: practice; 1 cm, 0.2 deg and 0.2 mm are this tool's own tolerances.
    """
    cm, mm = distance_tolerance_cm, thickness_tolerance_mm
    return _compared(
        ("plane distance", "cm", chosen_plane_distance_cm, found_plane_distance_cm, cm),
        ("degrader gap", "cm", chosen_degrader_gap_cm, found_degrader_gap_cm, cm),
        ("tilt", "deg", chosen_tilt_deg, found_tilt_deg, tilt_tolerance_deg),
        ("degrader thickness", "mm", chosen_degrader_thickness_mm, found_degrader_thickness_mm, mm),
    )


def _compared(*numbers: _Number) -> AsBuilt:
    """Return the comparison of several numbers."""
    if any(not number[-1] > 0 for number in numbers):
        raise ValueError("a tolerance is more than 0")
    rows = [_row(*number) for number in numbers]
    differing = tuple(str(row[0]) for row in rows if row[-1] == DIFFERS)
    missing = tuple(str(row[0]) for row in rows if row[-1] == NOT_RECORDED)
    chosen = [row for row in rows if row[-1] != NOT_CHOSEN]
    return AsBuilt(
        rows=Table.of(COLUMNS, rows),
        agrees=bool(chosen) and not differing and not missing,
        differing=differing,
        not_recorded=missing,
        remarks=tuple(said for number in numbers for said in _remarks(*number)),
    )


def _row(
    name: str, unit: str, chosen: float | None, found: Sequence[float], tolerance: float
) -> tuple[str, str, float | None, float | None, float | None, float, str]:
    """Return the row of one number: the determination farthest from the choice decides."""
    if chosen is None:
        mean = sum(found) / len(found) if found else None
        return name, unit, None, mean, None, tolerance, NOT_CHOSEN
    if not found:
        return name, unit, chosen, None, None, tolerance, NOT_RECORDED
    farthest = max(found, key=lambda one: abs(one - chosen))
    difference = farthest - chosen
    outcome = AGREES if abs(difference) <= tolerance + LAST_DIGIT * abs(chosen) else DIFFERS
    return name, unit, chosen, farthest, difference, tolerance, outcome


def _remarks(
    name: str, unit: str, chosen: float | None, found: Sequence[float], tolerance: float
) -> list[str]:
    """Return what must be said about the determinations of one number."""
    said = []
    spread = max(found, default=0.0) - min(found, default=0.0)
    if spread > tolerance:
        said.append(
            f"Determinations of the {name} spread over {printed(spread, 3)} {unit}, more than the "
            f"{printed(tolerance)} {unit} that still agree."
        )
    for factor in (0.01, 0.1, 10.0, 100.0):
        if chosen and any(abs(one / chosen / factor - 1) < SAME_NUMBER for one in found):
            said.append(f"The {name} found is {factor:g} times the chosen one: another unit under {unit}?")
    return said
