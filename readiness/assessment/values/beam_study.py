"""The study of an arrangement over distances and tilts, and what would have to change where it fails."""

from functools import lru_cache

from readiness.assessment.definition import Definition
from readiness.assessment.values.beam_field import LENGTHS, LIMITS, PREDICTION, upper_share
from readiness.calculations.beam_study import (
    FARTHEST_CM,
    NEAREST_CM,
    ArrangementStudy,
    arrangement_study,
)
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.unequal_tilts import UnequalTilts, best_unequal_tilts
from readiness.errors import OutsideValidity
from readiness.quantities import Table

MAP_TILT_STEP_DEG = 1.0
OVERVIEW_STEP_CM = 25.0
FARTHEST = "arrangement.farthest_when_cleared_cm"
TRIED_TILTS_DEG = tuple(8.0 + 0.5 * step for step in range(33))


@lru_cache(maxsize=32)
def study_of_arrangement(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    farthest_cm: float | None,
    mu_share_upper: float | None,
    metric: str,
    vertical_limit_percent: float,
    horizontal_limit_percent: float,
    half_length_cm: float,
    half_width_cm: float,
    field_length_cm: float,
    field_width_cm: float,
) -> ArrangementStudy:
    """Return the study up to the farthest plane of the cleared room, or the chosen one if that is unknown."""
    farthest = plane_distance_cm if farthest_cm is None else farthest_cm
    if farthest < NEAREST_CM:
        raise OutsideValidity(
            f"the room reaches no plane that a study covers, which begins at {NEAREST_CM:g} cm"
        )
    return arrangement_study(
        setup=setup,
        plane_distance_cm=plane_distance_cm,
        nearest_reachable_cm=NEAREST_CM,
        farthest_reachable_cm=min(farthest, FARTHEST_CM),
        mid_height_cm=0.0,
        mu_share_upper=upper_share(mu_share_upper),
        uniformity_half_length_cm=half_length_cm,
        uniformity_half_width_cm=half_width_cm,
        field_length_cm=field_length_cm,
        field_width_cm=field_width_cm,
        metric=metric,
        vertical_limit_percent=vertical_limit_percent,
        horizontal_limit_percent=horizontal_limit_percent,
    )


def map_of_study(*, study: ArrangementStudy) -> Table:
    """Return the map over distances and whole degrees."""
    whole = study.by_distance_and_tilt
    at = whole.columns.index("tilt_deg")
    kept = tuple(row for row in whole.rows if float(row[at] or 0) % MAP_TILT_STEP_DEG == 0)
    return Table(whole.columns, kept)


def overview_of_study(*, tilt_band: Table) -> Table:
    """Return what the study found at every quarter of a metre, with the columns that a reader compares."""
    columns = ("distance_cm", "best_tilt_deg", "lowest_passing_tilt_deg", "highest_passing_tilt_deg",
               "vertical_percent", "horizontal_percent", "map_half_range_percent")  # fmt: skip
    at = [tilt_band.columns.index(name) for name in columns]
    rows = (row for row in tilt_band.rows if float(row[0] or 0) % OVERVIEW_STEP_CM == 0)
    return Table.of(columns, [[row[place] for place in at] for row in rows])


def remedy_in_words(*, study: ArrangementStudy, farthest_cm: float | None) -> str:
    """Return what would have to change for both profiles to keep their limits."""
    if not study.remedy:
        return "At the evenest tilt both profiles are predicted to keep their limits at this plane."
    needed = study.distance_for_both_limits_cm
    if farthest_cm is None and needed is not None:
        return (
            "At the evenest tilt both profiles are predicted to keep their limits with the plane at"
            f" {needed:.0f} cm; how far the room reaches is not known."
        )
    return study.remedy


@lru_cache(maxsize=32)
def unequal_tilts_of_arrangement(
    *,
    setup: FieldSetup,
    plane_distance_cm: float,
    mu_share_upper: float | None,
    metric: str,
    half_length_cm: float,
    stand_height_cm: float,
    isocentre_height_cm: float,
    tallest_cm: float,
    shortest_cm: float,
) -> UnequalTilts:
    """Return the two tilts that suit patients whose mid-height stands off the beam axis."""
    middle = stand_height_cm + (tallest_cm + shortest_cm) / 4 - isocentre_height_cm
    return best_unequal_tilts(
        setup=setup,
        plane_distance_cm=plane_distance_cm,
        mid_height_cm=middle,
        mu_share_upper=upper_share(mu_share_upper),
        uniformity_half_length_cm=half_length_cm,
        metric=metric,
        tilts_deg=TRIED_TILTS_DEG,
    )


def recommended_distance(*, study: ArrangementStudy, farthest_cm: float) -> float:
    """Return the nearest plane that keeps both limits, else the farthest; only where the reach is known."""
    return min(study.recommended_distance_cm, farthest_cm)


def _of(name: str, meaning: str, of: str, part: str) -> Definition:
    """Return a part of one of the records."""
    name, of = f"arrangement.{name}", f"arrangement.{of}"
    return Definition(name, meaning, of=of, part=part, source="own-fit", known="fit")


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.study",
        "Uniformity both ways over distances and tilts, as predicted.",
        by=study_of_arrangement,
        takes={
            **PREDICTION,
            **LIMITS,
            **LENGTHS,
            "farthest_cm": f"{FARTHEST}?",
        },
        model=True,
        internal=True,
        source="own-fit",
        known="fit",
    ),
    _of(
        "tilt_band",
        "Best tilt and the tilts that keep the vertical limit at every distance, as predicted.",
        "study",
        "by_distance",
    ),
    Definition(
        "arrangement.tilt_overview",
        "Best tilt, tilts that keep the vertical limit, and evenness at the best tilt, as predicted.",
        by=overview_of_study,
        takes={"tilt_band": "arrangement.tilt_band"},
        source="own-fit",
        known="fit",
    ),
    Definition(
        "arrangement.uniformity_map",
        "Uniformity both ways over distance and tilt, as predicted.",
        by=map_of_study,
        takes={"study": "arrangement.study"},
        source="own-fit",
        known="fit",
    ),
    Definition(
        "arrangement.recommended_distance_cm",
        "Nearest plane in the cleared room that is predicted to keep both limits, else the farthest.",
        by=recommended_distance,
        takes={"study": "arrangement.study", "farthest_cm": FARTHEST},
        source="own-fit",
        known="fit",
    ),
    _of(
        "tilt_at_recommended_distance_deg",
        "Best tilt at the recommended distance, as predicted.",
        "study",
        "tilt_at_recommended_distance_deg",
    ),
    _of(
        "distance_for_both_limits_cm",
        "Nearest plane at which both profiles are predicted to keep their limits, in reach or not.",
        "study",
        "distance_for_both_limits_cm",
    ),
    Definition(
        "arrangement.study_reason",
        "What would have to change for both profiles to keep their limits, as predicted.",
        by=remedy_in_words,
        takes={"study": "arrangement.study", "farthest_cm": f"{FARTHEST}?"},
        source="own-fit",
        known="fit",
    ),
    Definition(
        "arrangement.unequal_tilts",
        "Two tilts that suit patients whose mid-height stands off the beam axis, as predicted.",
        by=unequal_tilts_of_arrangement,
        takes={
            **PREDICTION,
            "metric": "program.uniformity_metric",
            "half_length_cm": "criterion.uniformity_half_length_cm",
            "stand_height_cm": "stand.height_cm",
            "isocentre_height_cm": "room.isocentre_height_cm",
            "tallest_cm": "program.tallest_patient_cm",
            "shortest_cm": "program.shortest_patient_cm",
        },
        model=True,
        internal=True,
        source="own-fit",
        known="fit",
    ),
    _of(
        "unequal_tilt_toward_head_deg",
        "Tilt toward the head of the evenest pair about the patients' mean mid-height, as predicted.",
        "unequal_tilts",
        "tilt_toward_head_deg",
    ),
    _of(
        "unequal_tilt_toward_feet_deg",
        "Tilt toward the feet of the evenest pair about the patients' mean mid-height, as predicted.",
        "unequal_tilts",
        "tilt_toward_feet_deg",
    ),
    _of(
        "unequal_vertical_percent",
        "Vertical uniformity of that pair, as predicted.",
        "unequal_tilts",
        "vertical_percent",
    ),
    _of(
        "equal_tilt_deg",
        "Tilt of the evenest pair of equal tilts about the same mid-height, as predicted.",
        "unequal_tilts",
        "equal_tilt_deg",
    ),
    _of(
        "equal_vertical_percent",
        "Vertical uniformity of that pair of equal tilts, as predicted.",
        "unequal_tilts",
        "vertical_percent_of_equal",
    ),
)
