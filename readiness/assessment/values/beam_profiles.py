"""Measured profiles and angle sweeps, evaluated once for each file."""

from dataclasses import dataclass
from functools import lru_cache

from readiness.assessment.definition import Definition
from readiness.assessment.values.readings import number_or_none, numbers, numbers_or, words
from readiness.calculations.angle_sweep import AngleSweep, evaluate_angle_sweep
from readiness.calculations.profile_analysis import ProfileEvaluation, evaluate_profile
from readiness.errors import OutsideValidity
from readiness.quantities import Table
from readiness.units import printed

DUAL_PROFILE, ANGLE_SWEEP = "dual-profile", "angle-sweep"
ON_LINE_CM = 0.5  # a reading this near to a line lies on it
FEWEST_ON_LINE = 5
SAME_TILT_DEG = 0.2
NO_LINE = "it holds no profile along the"
METRICS = {"deviation-from-mid-height": "deviation-from-centre"}  # its name in the analyses of readings


@dataclass(frozen=True)
class JudgedProfile:
    """A measured profile's evenness, whichever file it came from."""

    half_range_percent: float
    deviation_percent: float
    judged_percent: float


def rows_on_line(table: Table, constant: str) -> Table:
    """Return the readings on the line through the middle along which the other coordinate runs."""
    beside = numbers_or(table, constant, 0.0)
    kept = tuple(row for row, at in zip(table.rows, beside, strict=True) if abs(at) <= ON_LINE_CM)
    if len(kept) < FEWEST_ON_LINE:
        direction = "height" if constant == "across_cm" else "width"
        raise OutsideValidity(f"{NO_LINE} {direction} through the middle of the plane")
    return Table(table.columns, kept)


def evaluated(
    table: Table, places_cm: list[float], half_length_cm: float, metric: str, normalisation: str,
    smoothing: str,
) -> ProfileEvaluation:  # fmt: skip
    """Return how even the readings of a table are along a line, in the program's metric."""
    return evaluate_profile(
        positions_cm=places_cm,
        readings=numbers(table, "relative_dose"),
        half_length_cm=half_length_cm,
        metric=METRICS.get(metric, metric),
        normalisation=normalisation,
        smoothing=smoothing,
    )


@lru_cache(maxsize=256)
def vertical_profile(
    *, kind: str, table: Table, half_length_cm: float, metric: str, normalisation: str, smoothing: str
) -> ProfileEvaluation | None:
    """Return how even a dual profile is along the height; None for another kind of measurement."""
    if kind != DUAL_PROFILE:
        return None
    line = rows_on_line(table, "across_cm")
    return evaluated(line, numbers(line, "height_cm"), half_length_cm, metric, normalisation, smoothing)


@lru_cache(maxsize=256)
def horizontal_profile(
    *, kind: str, table: Table, half_width_cm: float, metric: str, normalisation: str, smoothing: str
) -> ProfileEvaluation | None:
    """Return how even a dual profile is across; None for another kind of measurement."""
    if kind != DUAL_PROFILE:
        return None
    line = rows_on_line(table, "height_cm")
    places = numbers_or(line, "across_cm", 0.0)
    return evaluated(line, places, half_width_cm, metric, normalisation, smoothing)


@lru_cache(maxsize=256)
def sweep_along_height(
    *,
    kind: str,
    table: Table,
    half_length_cm: float,
    limit_percent: float,
    metric: str,
    normalisation: str,
    smoothing: str,
) -> AngleSweep | None:
    """Return a sweep of tilts against the vertical limit; None for another kind of measurement."""
    if kind != ANGLE_SWEEP:
        return None
    line = rows_on_line(table, "across_cm")
    places = numbers(line, "height_cm")
    return _sweep(line, places, half_length_cm, limit_percent, metric, normalisation, smoothing)


@lru_cache(maxsize=256)
def sweep_across(
    *,
    kind: str,
    table: Table,
    half_width_cm: float,
    limit_percent: float,
    metric: str,
    normalisation: str,
    smoothing: str,
) -> AngleSweep | None:
    """Return a sweep of tilts against the horizontal limit; None for another kind of measurement."""
    if kind != ANGLE_SWEEP:
        return None
    line = rows_on_line(table, "height_cm")
    places = numbers_or(line, "across_cm", 0.0)
    return _sweep(line, places, half_width_cm, limit_percent, metric, normalisation, smoothing)


def _sweep(
    line: Table, places_cm: list[float], half_cm: float, limit_percent: float, metric: str,
    normalisation: str, smoothing: str,
) -> AngleSweep:  # fmt: skip
    return evaluate_angle_sweep(
        tilts_deg=numbers(line, "tilt_deg"),
        positions_cm=places_cm,
        readings=numbers(line, "relative_dose"),
        fields=words(line, "field", "dual"),
        half_length_cm=half_cm,
        limit_percent=limit_percent,
        metric=METRICS.get(metric, metric),
        normalisation=normalisation,
        smoothing=smoothing,
    )


def profile_at_tilt(*, sweep: AngleSweep, tilt_deg: float) -> JudgedProfile:
    """Return the evenness that a sweep found at the chosen tilt, never between two tilts."""
    rows = [
        row for row in sweep.tilts.records() if abs(float(row["tilt_deg"] or 0) - tilt_deg) <= SAME_TILT_DEG
    ]
    if not rows:
        raise OutsideValidity(f"the sweep has no profile at the chosen tilt of {printed(tilt_deg)} degrees")
    nearest = min(rows, key=lambda row: abs(float(row["tilt_deg"] or 0) - tilt_deg))
    parts = (number_or_none(nearest[name]) for name in JudgedProfile.__dataclass_fields__)
    return JudgedProfile(*(float(part or 0) for part in parts))


_HEADER = {
    "kind": "measurement.kind",
    "table": "measurement.table",
    "normalisation": "measurement.normalisation",
    "smoothing": "measurement.smoothing",
    "metric": "program.uniformity_metric",
}

DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "measurement.vertical_profile",
        "Evenness of a measured dual profile along the height.",
        by=vertical_profile,
        takes={**_HEADER, "half_length_cm": "criterion.uniformity_half_length_cm"},
        internal=True,
    ),
    Definition(
        "measurement.horizontal_profile",
        "Evenness of a measured dual profile across.",
        by=horizontal_profile,
        takes={**_HEADER, "half_width_cm": "criterion.uniformity_half_width_cm"},
        internal=True,
    ),
    Definition(
        "measurement.angle_sweep",
        "Evenness of each tilt of a sweep, and the best tilt between them.",
        by=sweep_along_height,
        takes={
            **_HEADER,
            "half_length_cm": "criterion.uniformity_half_length_cm",
            "limit_percent": "criterion.vertical_uniformity_percent",
        },
        internal=True,
    ),
    Definition(
        "measurement.angle_sweep_across",
        "Evenness across of each tilt of a sweep.",
        by=sweep_across,
        takes={
            **_HEADER,
            "half_width_cm": "criterion.uniformity_half_width_cm",
            "limit_percent": "criterion.horizontal_uniformity_percent",
        },
        internal=True,
    ),
)
