"""Spread of the scattering foil, fitted to a single-field profile or assumed, and what decides the field."""

from functools import lru_cache

from readiness.assessment.definition import Definition, Measured
from readiness.assessment.values.readings import numbers, numbers_or
from readiness.calculations.field_setup import FieldSetup, field_setup
from readiness.calculations.foil_spread_fit import FoilSpreadFit, foil_spread_of_profile
from readiness.errors import OutsideValidity
from readiness.quantities import Table

SINGLE_PROFILE = "single-profile"
LARGEST_OFF_LINE_CM = 0.5  # a profile runs along one line
ANY_SPREAD = 0.2  # of the setup that is handed to the fit, which replaces it


def direction_of_profile(*, table: Table) -> str:
    """Return whether a profile runs along the height or across, from the column that varies."""
    heights, across = numbers(table, "height_cm"), numbers_or(table, "across_cm", 0.0)
    spans = [max(column) - min(column) for column in (heights, across)]
    if min(spans) > LARGEST_OFF_LINE_CM:
        raise OutsideValidity("height and position across both vary: a profile runs along one line")
    return "vertical" if spans[0] >= spans[1] else "horizontal"


def fitted_foil_spread(
    *,
    kind: str,
    table: Table,
    normalisation: str,
    distance_cm: float,
    tilt_deg: float,
    setup: FieldSetup,
) -> FoilSpreadFit | None:
    """Return the fit to a single-field profile in its own set-up; None for another kind of measurement."""
    if kind != SINGLE_PROFILE:
        return None
    direction = direction_of_profile(table=table)
    vertical = direction == "vertical"
    return foil_spread_of_profile(
        positions_cm=numbers(table, "height_cm") if vertical else numbers_or(table, "across_cm", 0.0),
        readings=numbers(table, "relative_dose"),
        normalisation=normalisation,
        direction=direction,
        setup=setup,
        plane_distance_cm=distance_cm,
        tilt_deg=tilt_deg,
    )


def setup_of_measurement(
    *,
    gap_cm: float,
    degrader: str,
    material: str | None,
    thickness_cm: float | None,
    opening_cm: float,
    collimator_deg: float,
    energy_at_source_mev: float,
    pressure_kpa: float,
    temperature_celsius: float,
    source_axis_distance_cm: float,
) -> FieldSetup:
    """Return the record of beam, degrader and room of a measurement; its foil spread is a placeholder."""
    behind = degrader != "none"
    if behind and (material is None or thickness_cm is None):
        raise OutsideValidity(f"material or thickness of degrader {degrader} is not known")
    return field_setup(
        energy_at_source_mev=energy_at_source_mev,
        foil_spread=ANY_SPREAD,
        opening_cm=opening_cm,
        collimator_deg=collimator_deg,
        degrader_material=material if behind else None,
        degrader_thickness_cm=thickness_cm if behind else None,
        degrader_gap_cm=gap_cm if behind else None,
        pressure_kpa=pressure_kpa,
        temperature_celsius=temperature_celsius,
        source_axis_distance_cm=source_axis_distance_cm,
    )


def setup_of_arrangement(
    *,
    energy_at_source_mev: float,
    foil_spread: float,
    opening_cm: float,
    collimator_deg: float,
    material: str,
    thickness_cm: float,
    gap_cm: float,
    pressure_kpa: float,
    temperature_celsius: float,
    source_axis_distance_cm: float,
) -> FieldSetup:
    """Return the record of beam and room with which the field of an arrangement is predicted."""
    return field_setup(
        energy_at_source_mev=energy_at_source_mev,
        foil_spread=foil_spread,
        opening_cm=opening_cm,
        collimator_deg=collimator_deg,
        degrader_material=material,
        degrader_thickness_cm=thickness_cm,
        degrader_gap_cm=gap_cm,
        pressure_kpa=pressure_kpa,
        temperature_celsius=temperature_celsius,
        source_axis_distance_cm=source_axis_distance_cm,
    )


_BEAM_AND_ROOM = {
    "opening_cm": "beam.opening_cm",
    "collimator_deg": "beam.collimator_deg",
    "energy_at_source_mev": "beam.energy_at_source_mev",
    "pressure_kpa": "room.site_pressure_kpa",
    "temperature_celsius": "room.temperature_celsius",
    "source_axis_distance_cm": "machine.source_axis_distance_cm",
}

DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "measurement.field_setup",
        "Beam, degrader and air of a measurement.",
        by=setup_of_measurement,
        takes={
            "gap_cm": "measurement.gap_cm",
            "degrader": "measurement.degrader",
            "material": "degrader.material?",
            "thickness_cm": "degrader.thickness_cm?",
            **_BEAM_AND_ROOM,
        },
        internal=True,
    ),
    Definition(
        "measurement.foil_spread_fit",
        "Foil spread and shift of the centre that fit a single-field profile.",
        by=fitted_foil_spread,
        takes={
            "kind": "measurement.kind",
            "table": "measurement.table",
            "normalisation": "measurement.normalisation",
            "distance_cm": "measurement.distance_cm",
            "tilt_deg": "measurement.tilt_deg",
            "setup": "measurement.field_setup",
        },
        internal=True,
        source="own-fit",
        known="derived",
    ),
    Definition(
        "beam.foil_spread_fit",
        "Fit of the foil spread to this beam's own single-field profile.",
        measured=Measured(SINGLE_PROFILE, takes={"fit": "measurement.foil_spread_fit"}),
        internal=True,
    ),
    Definition(
        "beam.foil_spread",
        "Standard deviation of the tangents of the angles at which electrons leave window and foils.",
        measured=Measured(
            SINGLE_PROFILE, takes={"fit": "measurement.foil_spread_fit"}, part="foil_spread"
        ),
        source="own-fit",
        known="derived",
    ),
    Definition(
        "arrangement.field_setup",
        "Beam, degrader and air with which the field is predicted.",
        by=lru_cache(setup_of_arrangement),
        takes={
            "foil_spread": "beam.foil_spread",
            "material": "degrader.material",
            "thickness_cm": "degrader.thickness_cm",
            "gap_cm": "arrangement.study_gap_cm",
            **_BEAM_AND_ROOM,
        },
        internal=True,
    ),
)
