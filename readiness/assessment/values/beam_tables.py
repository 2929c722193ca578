"""Measured points as tables, for drawings beside the prediction, and what must be said about each file."""

from readiness.assessment.definition import Definition, Measured
from readiness.assessment.values.beam_energy import COMPOSITE
from readiness.assessment.values.beam_profiles import ANGLE_SWEEP, DUAL_PROFILE, SAME_TILT_DEG, rows_on_line
from readiness.assessment.values.readings import numbers, numbers_or
from readiness.calculations.angle_sweep import AngleSweep
from readiness.calculations.b_factor import BFactor
from readiness.calculations.depth_dose_analysis import DepthDose
from readiness.calculations.foil_spread_fit import FoilSpreadFit
from readiness.calculations.profile_analysis import ProfileEvaluation
from readiness.calculations.xray_component import XrayComponent
from readiness.errors import OutsideValidity
from readiness.quantities import Table
from readiness.units import printed


def points_along_height(*, table: Table) -> Table:
    """Return the measured points of a dual profile along the height."""
    line = rows_on_line(table, "across_cm")
    return _points("height_cm", numbers(line, "height_cm"), numbers(line, "relative_dose"))


def points_across(*, table: Table) -> Table:
    """Return the measured points of a dual profile across."""
    line = rows_on_line(table, "height_cm")
    return _points("across_cm", numbers_or(line, "across_cm", 0.0), numbers(line, "relative_dose"))


def points_at_tilt(*, table: Table, tilt_deg: float) -> Table:
    """Return the points that a sweep of dual fields measured at the chosen tilt."""
    line = rows_on_line(table, "across_cm")
    at, field = line.columns.index("tilt_deg"), line.columns.index("field")
    kept = [
        row
        for row in line.rows
        if abs(float(row[at] or 0) - tilt_deg) <= SAME_TILT_DEG and row[field] in (None, "dual")
    ]
    if not kept:
        raise OutsideValidity(f"the sweep has no dual profile at the chosen tilt of {printed(tilt_deg)} deg")
    chosen = Table(line.columns, tuple(kept))
    return _points("height_cm", numbers(chosen, "height_cm"), numbers(chosen, "relative_dose"))


def half_length_of_points(*, profile: Table) -> float:
    """Return how far either way a vertical profile was measured."""
    return _either_way(numbers(profile, "height_cm"))


def half_width_of_points(*, profile: Table) -> float:
    """Return how far either way a horizontal profile was measured."""
    return _either_way(numbers(profile, "across_cm"))


def _either_way(places: list[float]) -> float:
    """Return the distance from 0 that is covered on both sides."""
    return max(0.0, min(max(places), -min(places)))


def points_with_depth(*, table: Table) -> Table:
    """Return the measured points of a composite depth dose."""
    return _points("depth_mm", numbers(table, "depth_mm"), numbers(table, "relative_dose"))


def _points(name: str, places: list[float], doses: list[float]) -> Table:
    """Return points in rising order of place."""
    return Table.of([name, "relative_dose"], sorted(zip(places, doses, strict=True)))


def remarks_of_file(
    *,
    vertical: ProfileEvaluation | None,
    horizontal: ProfileEvaluation | None,
    sweep: AngleSweep | None,
    foil_spread: FoilSpreadFit | None,
    depth_dose: DepthDose | None,
    b_factor: BFactor | None,
    xrays: XrayComponent | None,
) -> tuple[str, ...] | None:
    """Return what must be said about a file's readings; None if no analysis could use them."""
    found = (vertical, horizontal, sweep, foil_spread, depth_dose, b_factor, xrays)
    if all(analysis is None for analysis in found):
        return None
    said = [remark for analysis in found if analysis is not None for remark in analysis.remarks]
    return tuple(dict.fromkeys(said))


def _measured(name: str, meaning: str, measured: Measured, otherwise: str = "") -> Definition:
    """Return a table of measured points."""
    return Definition(f"arrangement.{name}", meaning, otherwise=otherwise, measured=measured)


_TABLE = {"table": "measurement.table"}

DEFINITIONS: tuple[Definition, ...] = (
    _measured(
        "measured_profile_in_sweep",
        "Points that a sweep measured along the height at the chosen tilt.",
        Measured(ANGLE_SWEEP, by=points_at_tilt, takes={**_TABLE, "tilt_deg": "arrangement.tilt_deg"}),
    ),
    _measured(
        "measured_profile_height",
        "Points measured along the height, of a dual profile or of a sweep at the chosen tilt.",
        Measured(DUAL_PROFILE, by=points_along_height, takes=_TABLE),
        otherwise="arrangement.measured_profile_in_sweep",
    ),
    _measured(
        "measured_profile_width",
        "Points measured across.",
        Measured(DUAL_PROFILE, by=points_across, takes=_TABLE),
    ),
    Definition(
        "arrangement.measured_half_length_cm",
        "How far either way from the beam axis the vertical profile was measured.",
        by=half_length_of_points,
        takes={"profile": "arrangement.measured_profile_height"},
    ),
    Definition(
        "arrangement.measured_half_width_cm",
        "How far either way from the middle the horizontal profile was measured.",
        by=half_width_of_points,
        takes={"profile": "arrangement.measured_profile_width"},
    ),
    _measured(
        "measured_sweep",
        "Evenness of each measured tilt against the vertical limit.",
        Measured(ANGLE_SWEEP, takes={"sweep": "measurement.angle_sweep"}, part="tilts"),
    ),
    _measured(
        "measured_sweep_across",
        "Evenness across of each measured tilt against the horizontal limit.",
        Measured(ANGLE_SWEEP, takes={"sweep": "measurement.angle_sweep_across"}, part="tilts"),
    ),
    _measured(
        "measured_depth_dose",
        "Points measured with depth on a cylinder from all dual fields.",
        Measured(COMPOSITE, by=points_with_depth, takes=_TABLE),
    ),
    Definition(
        "measurement.remarks",
        "What must be said about the readings of a file beside its numbers.",
        by=remarks_of_file,
        takes={
            "vertical": "measurement.vertical_profile?",
            "horizontal": "measurement.horizontal_profile?",
            "sweep": "measurement.angle_sweep?",
            "foil_spread": "measurement.foil_spread_fit?",
            "depth_dose": "measurement.depth_dose?",
            "b_factor": "measurement.b_factor_readings?",
            "xrays": "measurement.xray_readings?",
        },
    ),
)
