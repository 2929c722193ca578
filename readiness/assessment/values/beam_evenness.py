"""Uniformity and best tilt of each arrangement: measured, else predicted, always said which."""

from readiness.assessment.definition import Definition, Measured
from readiness.assessment.values.beam_profiles import (
    ANGLE_SWEEP,
    DUAL_PROFILE,
    profile_at_tilt,
)
from readiness.calculations.angle_sweep import AngleSweep
from readiness.calculations.best_tilt import BestTilt
from readiness.calculations.profile_analysis import ProfileEvaluation
from readiness.errors import OutsideValidity

HALF_RANGE, DEVIATION, JUDGED = "half_range", "deviation", "uniformity"
WORDS = {
    HALF_RANGE: "half-range",
    DEVIATION: "largest deviation from mid-height",
    JUDGED: "uniformity in the metric by which it is judged",
}
PARTS = {
    HALF_RANGE: "half_range_percent",
    DEVIATION: "deviation_percent",
    JUDGED: "judged_percent",
}
LENGTHS = {"vertical": "the length that is judged", "horizontal": "the width that is judged"}


def judged(*, half_range_percent: float, deviation_percent: float, metric: str) -> float:
    """Return the metric by which uniformity is judged."""
    if metric == "half-range":
        return half_range_percent
    if metric == "deviation-from-mid-height":
        return deviation_percent
    return max(half_range_percent, deviation_percent)


def in_air(*, profile: ProfileEvaluation, medium: str) -> float:
    """Return the judged metric of a profile measured in air; one in a phantom is another quantity."""
    if medium != "air":
        raise OutsideValidity("it was measured in a phantom, not in air")
    return profile.judged_percent


def in_air_at_tilt(*, sweep: AngleSweep, tilt_deg: float, medium: str) -> float:
    """Return the judged metric that a sweep in air found at the chosen tilt."""
    if medium != "air":
        raise OutsideValidity("it was measured in a phantom, not in air")
    return profile_at_tilt(sweep=sweep, tilt_deg=tilt_deg).judged_percent


def best_of_sweep(*, sweep: AngleSweep) -> BestTilt | None:
    """Return the best tilt between those measured; None if fewer than two have enough readings."""
    return sweep.best


def difference_of_tilts(*, tilt_deg: float, best_tilt_deg: float) -> float:
    """Return how far the chosen tilt is from the best one, either way."""
    return abs(tilt_deg - best_tilt_deg)


def _profile(direction: str) -> str:
    """Return the value of a measurement that evaluates its profile in a direction."""
    return f"measurement.{direction}_profile"


def _predicted(direction: str, metric: str) -> Definition:
    """Return the predicted evenness in a direction."""
    name = f"arrangement.predicted_{direction}_{metric}_percent"
    meaning = f"Predicted {WORDS[metric]} over {LENGTHS[direction]}."
    if metric == JUDGED:
        takes = {
            "half_range_percent": f"arrangement.predicted_{direction}_{HALF_RANGE}_percent",
            "deviation_percent": f"arrangement.predicted_{direction}_{DEVIATION}_percent",
            "metric": "program.uniformity_metric",
        }
        return Definition(name, meaning, by=judged, takes=takes, source="own-fit", known="fit")
    part = f"{direction}_{metric}_percent"
    return Definition(
        name, meaning, of="arrangement.predicted_plane", part=part, source="own-fit", known="fit"
    )


def _in_sweep(metric: str) -> Definition:
    """Return the vertical evenness that a sweep found at the chosen tilt, else the predicted one."""
    return Definition(
        f"arrangement.vertical_{metric}_in_sweep_percent",
        f"Vertical {WORDS[metric]} at the chosen tilt in a sweep of tilts, else predicted.",
        otherwise=f"arrangement.predicted_vertical_{metric}_percent",
        measured=Measured(
            ANGLE_SWEEP,
            by=profile_at_tilt,
            takes={"sweep": "measurement.angle_sweep", "tilt_deg": "arrangement.tilt_deg"},
            part=PARTS[metric],
        ),
        source="aapm-23",
        known="memory",
    )


def _final(direction: str, metric: str) -> Definition:
    """Return the evenness in a direction: of a dual profile, else of a sweep, else predicted."""
    swept = direction == "vertical"
    stands_in = f"vertical_{metric}_in_sweep" if swept else f"predicted_horizontal_{metric}"
    return Definition(
        f"arrangement.{direction}_{metric}_percent",
        f"{direction.capitalize()} {WORDS[metric]} over {LENGTHS[direction]}.",
        otherwise=f"arrangement.{stands_in}_percent",
        measured=Measured(DUAL_PROFILE, takes={"profile": _profile(direction)}, part=PARTS[metric]),
        source="aapm-23",
        known="memory",
    )


def _in_air(direction: str) -> Definition:
    """Return the evenness measured in air, else predicted."""
    swept = direction == "vertical"
    stands_in = "vertical_in_air_in_sweep" if swept else f"predicted_horizontal_{JUDGED}"
    return Definition(
        f"arrangement.{direction}_in_air_percent",
        f"{direction.capitalize()} uniformity in air, in the metric by which it is judged.",
        otherwise=f"arrangement.{stands_in}_percent",
        measured=Measured(
            DUAL_PROFILE,
            by=in_air,
            takes={"profile": _profile(direction), "medium": "measurement.medium"},
        ),
        source="eortc-2002",
        known="memory",
    )


def _swept(name: str, meaning: str, part: str, otherwise: str) -> Definition:
    """Return what a sweep of tilts says, else the prediction."""
    return Definition(
        f"arrangement.{name}",
        meaning,
        otherwise=otherwise,
        measured=Measured(
            ANGLE_SWEEP, by=best_of_sweep, takes={"sweep": "measurement.angle_sweep"}, part=part
        ),
        source="park-2014, yousif-2015",
        known="read",
    )


DEFINITIONS: tuple[Definition, ...] = (
    *(_predicted(direction, metric) for direction in LENGTHS for metric in WORDS),
    *(_in_sweep(metric) for metric in WORDS),
    *(_final(direction, metric) for direction in LENGTHS for metric in WORDS),
    *(_in_air(direction) for direction in LENGTHS),
    Definition(
        "arrangement.vertical_in_air_in_sweep_percent",
        "Vertical uniformity in air at the chosen tilt in a sweep of tilts, else predicted.",
        otherwise=f"arrangement.predicted_vertical_{JUDGED}_percent",
        measured=Measured(
            ANGLE_SWEEP,
            by=in_air_at_tilt,
            takes={
                "sweep": "measurement.angle_sweep",
                "tilt_deg": "arrangement.tilt_deg",
                "medium": "measurement.medium",
            },
        ),
        source="eortc-2002",
        known="memory",
    ),
    Definition(
        "arrangement.map_half_range_percent",
        "Predicted half-range over the whole rectangle of the composite field.",
        of="arrangement.predicted_plane",
        part="map_half_range_percent",
        source="own-fit",
        known="fit",
    ),
    _swept(
        "best_tilt_deg",
        "Tilt with the evenest vertical profile.",
        "tilt_deg",
        "arrangement.predicted_best_tilt_deg",
    ),
    _swept(
        "lowest_passing_tilt_deg",
        "Smallest tilt whose vertical profile keeps its limit.",
        "passes_from_deg",
        "arrangement.predicted_lowest_tilt_deg",
    ),
    _swept(
        "highest_passing_tilt_deg",
        "Largest tilt whose vertical profile keeps its limit.",
        "passes_to_deg",
        "arrangement.predicted_highest_tilt_deg",
    ),
    Definition(
        "arrangement.smallest_measured_tilt_deg",
        "Smallest tilt at which a profile was measured that keeps the vertical limit.",
        measured=Measured(
            ANGLE_SWEEP,
            takes={"sweep": "measurement.angle_sweep"},
            part="smallest_passing_tilt_deg",
        ),
        source="practice",
        known="practice",
    ),
    Definition(
        "arrangement.tilt_difference_deg",
        "How far the chosen tilt is from the best one.",
        by=difference_of_tilts,
        takes={"tilt_deg": "arrangement.tilt_deg", "best_tilt_deg": "arrangement.best_tilt_deg"},
        source="definition",
        known="derived",
    ),
)
