"""Depth dose of all dual fields together: predicted by energy and degrader, else measured on a cylinder."""

from collections.abc import Callable
from functools import lru_cache

from readiness.assessment.definition import Definition, Measured
from readiness.assessment.values.beam_energy import COMPOSITE, SINGLE
from readiness.calculations.composite_depth_dose import (
    CompositeDepthDose,
    composite_depth_dose,
    energy_for_table_mev,
)
from readiness.calculations.degrader_choice import (
    degraders_by_depth_rules,
    depth_rules_in_words,
    pmma_equivalent_cm,
)
from readiness.calculations.published_tables import published_table
from readiness.errors import OutsideValidity
from readiness.quantities import Table

TABLE = "composite_depth_dose"
BOTH_KEPT, TOO_DEEP, TOO_SHALLOW = "both kept", "too deep", "too shallow"


@lru_cache(maxsize=256)
def depth_dose_of_arrangement(
    *, technique: str, energy_for_table_mev: float, material: str, thickness_cm: float
) -> CompositeDepthDose:
    """Return the predicted depth dose of six dual fields behind a degrader of any plastic."""
    if technique == "moving-couch":
        raise OutsideValidity("no depth dose is predicted for a lying patient: measure it")
    pmma = pmma_equivalent_cm(degrader_material=material, degrader_thickness_cm=thickness_cm)
    return composite_depth_dose(energy_at_source_mev=energy_for_table_mev, pmma_cm=pmma)


def least_dose_at_20_mm(*, energy_at_plane_mev: float, most_at_20_mm_percent: float) -> float:
    """Return the dose at 20 mm that an energy above the table's exceeds, where that breaks the rule."""
    energy, _, at_20_mm = _end_of_table(max)
    if energy_at_plane_mev < energy or at_20_mm < most_at_20_mm_percent:
        raise OutsideValidity("the depth-dose table holds no such energy and thickness: measure it")
    return at_20_mm


def most_dose_at_4_mm(*, energy_at_plane_mev: float, least_at_4_mm_percent: float) -> float:
    """Return the dose at 4 mm that an energy below the table's does not reach, where that breaks the rule."""
    energy, at_4_mm, _ = _end_of_table(min)
    if energy_at_plane_mev > energy or at_4_mm >= least_at_4_mm_percent:
        raise OutsideValidity("the depth-dose table holds no such energy and thickness: measure it")
    return at_4_mm


def _end_of_table(end: Callable[..., tuple[float, ...]]) -> tuple[float, float, float]:
    """Return energy at the plane and doses at 4 and 20 mm, in per cent, at an end of the table."""
    table = published_table(TABLE)
    names = ("energy_at_plane_mev", "dose_at_4_mm", "dose_at_20_mm")
    columns = ([float(entry or 0) for entry in table.column(name)] for name in names)
    energy, at_4_mm, at_20_mm = end(zip(*columns, strict=True))
    return energy, 100 * at_4_mm, 100 * at_20_mm


def forecast_in_words(
    *,
    at_4_mm_percent: float | None,
    at_20_mm_percent: float | None,
    least_at_4_mm_percent: float,
    most_at_20_mm_percent: float,
) -> str:
    """Return whether both depth rules are predicted to be kept, or which way the dose misses them."""
    if at_20_mm_percent is not None and at_20_mm_percent >= most_at_20_mm_percent:
        return TOO_DEEP
    if at_4_mm_percent is not None and at_4_mm_percent < least_at_4_mm_percent:
        return TOO_SHALLOW
    if at_4_mm_percent is None or at_20_mm_percent is None:
        raise OutsideValidity("the depth-dose table holds no such energy and thickness: measure it")
    return BOTH_KEPT


def degraders_compared(
    *, energy_for_table_mev: float, least_at_4_mm_percent: float, most_at_20_mm_percent: float
) -> Table:
    """Return which thicknesses of PMMA are predicted to keep both depth rules with this beam."""
    return degraders_by_depth_rules(
        energy_at_source_mev=energy_for_table_mev,
        least_at_4_mm_percent=least_at_4_mm_percent,
        most_at_20_mm_percent=most_at_20_mm_percent,
    )


def _measured(part: str) -> Measured:
    """Return how a composite depth dose on a cylinder replaces a prediction."""
    return Measured(COMPOSITE, takes={"depth_dose": "measurement.depth_dose"}, part=part)


def _depth(
    name: str, meaning: str, predicted: str, measured: str, bound: str = ""
) -> tuple[Definition, Definition]:
    """Return a number of the composite depth dose, measured or else predicted, and the prediction."""
    return (
        Definition(
            f"arrangement.predicted_{name}",
            f"{meaning}, as predicted.",
            of="arrangement.predicted_depth_dose",
            part=predicted,
            otherwise=bound,
            source="own-monte-carlo",
            known="mc",
        ),
        Definition(
            f"arrangement.{name}",
            f"{meaning}.",
            otherwise=f"arrangement.predicted_{name}",
            measured=_measured(measured),
            source="own-monte-carlo",
            known="mc",
        ),
    )


def _bound(name: str, meaning: str, by: Callable[..., float], limit: dict[str, str]) -> Definition:
    """Return a bound on a dose beyond the table, given only where it already breaks the rule."""
    return Definition(
        f"arrangement.{name}",
        meaning,
        by=by,
        takes={"energy_at_plane_mev": "arrangement.energy_at_plane_mev", **limit},
        model=True,
        source="own-monte-carlo",
        known="mc",
    )


def _single(name: str, meaning: str, part: str) -> Definition:
    """Return a number of the depth dose of one dual or single field at the plane."""
    return Definition(
        f"arrangement.{name}",
        meaning,
        measured=Measured(SINGLE, takes={"depth_dose": "measurement.depth_dose"}, part=part),
        source="tg-25, icru-35",
        known="memory",
    )


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.energy_for_table_mev",
        "Energy at the source that would arrive alike behind 400 cm of sea-level air.",
        by=lru_cache(energy_for_table_mev),
        takes={
            "energy_at_source_mev": "beam.energy_at_source_mev",
            "plane_distance_cm": "arrangement.study_distance_cm",
            "pressure_kpa": "room.site_pressure_kpa",
            "temperature_celsius": "room.temperature_celsius",
        },
        source="icru-37",
        known="derived",
    ),
    Definition(
        "arrangement.predicted_depth_dose",
        "Depth dose of all six dual fields in a turned cylinder, as predicted.",
        by=depth_dose_of_arrangement,
        takes={
            "technique": "arrangement.technique",
            "energy_for_table_mev": "arrangement.energy_for_table_mev",
            "material": "degrader.material",
            "thickness_cm": "degrader.thickness_cm",
        },
        model=True,
        internal=True,
        source="own-monte-carlo",
        known="mc",
    ),
    _bound(
        "highest_dose_at_4_mm_percent",
        "Dose at 4 mm that the beam cannot reach, its energy at the plane being below the table's.",
        most_dose_at_4_mm,
        {"least_at_4_mm_percent": "criterion.dose_at_4_mm_percent"},
    ),
    _bound(
        "least_dose_at_20_mm_percent",
        "Dose at 20 mm that the beam exceeds, its energy at the plane being above the table's.",
        least_dose_at_20_mm,
        {"most_at_20_mm_percent": "criterion.dose_at_20_mm_percent"},
    ),
    *_depth("r80_mm", "Depth at which the composite dose has fallen to 80 %", "r80_mm", "r80_mm"),
    *_depth(
        "dose_at_4_mm_percent",
        "Composite dose at 4 mm as a part of the skin dose",
        "dose_at_4_mm_percent",
        "at_4_mm_percent",
        "arrangement.highest_dose_at_4_mm_percent",
    ),
    *_depth(
        "dose_at_10_mm_percent",
        "Composite dose at 10 mm as a part of the skin dose",
        "dose_at_10_mm_percent",
        "at_10_mm_percent",
    ),
    *_depth(
        "dose_at_20_mm_percent",
        "Composite dose at 20 mm as a part of the skin dose",
        "dose_at_20_mm_percent",
        "at_20_mm_percent",
        "arrangement.least_dose_at_20_mm_percent",
    ),
    Definition(
        "arrangement.composite_practical_range_mm",
        "Practical range of the composite depth dose.",
        measured=_measured("rp_mm"),
        source="tg-25, icru-35",
        known="memory",
    ),
    Definition(
        "arrangement.composite_xray_tail_percent",
        "Dose behind the electrons' range in the composite depth dose.",
        measured=_measured("xray_tail_percent"),
        source="tg-25, icru-35",
        known="memory",
    ),
    _single("single_r80_mm", "Depth of 80 % of the dose of one field at the plane.", "r80_mm"),
    _single("single_r50_mm", "Half-value depth of one field at the plane.", "r50_mm"),
    _single("single_practical_range_mm", "Practical range of one field at the plane.", "rp_mm"),
    Definition(
        "arrangement.depth_rules_forecast",
        "Whether both depth rules are predicted to be kept, or the dose is too deep or too shallow.",
        by=forecast_in_words,
        takes={
            "at_4_mm_percent": "arrangement.predicted_dose_at_4_mm_percent?",
            "at_20_mm_percent": "arrangement.predicted_dose_at_20_mm_percent?",
            "least_at_4_mm_percent": "criterion.dose_at_4_mm_percent",
            "most_at_20_mm_percent": "criterion.dose_at_20_mm_percent",
        },
        model=True,
        source="own-monte-carlo",
        known="mc",
    ),
    Definition(
        "arrangement.degraders_by_depth_rules",
        "Thicknesses of PMMA with what each is predicted to do to the composite depth dose.",
        by=degraders_compared,
        takes={
            "energy_for_table_mev": "arrangement.energy_for_table_mev",
            "least_at_4_mm_percent": "criterion.dose_at_4_mm_percent",
            "most_at_20_mm_percent": "criterion.dose_at_20_mm_percent",
        },
        model=True,
        source="own-monte-carlo",
        known="mc",
    ),
    Definition(
        "arrangement.degraders_in_words",
        "Which thicknesses of PMMA are predicted to keep both depth rules.",
        by=depth_rules_in_words,
        takes={"degraders": "arrangement.degraders_by_depth_rules"},
        source="own-monte-carlo",
        known="mc",
    ),
)
