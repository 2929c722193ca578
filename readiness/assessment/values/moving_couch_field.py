"""The predicted vertical field over a lying patient: evenness across, dose rate along the travel, speed."""

from functools import lru_cache

from readiness.assessment.definition import Definition, Measured
from readiness.assessment.values.beam_evenness import judged
from readiness.assessment.values.beam_profiles import evaluated
from readiness.assessment.values.readings import numbers
from readiness.calculations.couch_field import CouchField, couch_field
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.moving_couch_dose import couch_pass, couch_speed_needed
from readiness.calculations.profile_analysis import ProfileEvaluation
from readiness.quantities import Table

COUCH_PROFILE = "couch-profile"


@lru_cache(maxsize=64)
def field_over_couch(
    *,
    setup: FieldSetup,
    source_to_couch_cm: float,
    reference_output_cgy_per_mu: float,
    rate_mu_per_min: float,
    half_width_cm: float,
) -> CouchField:
    """Return the predicted field at the height of the couch's surface."""
    return couch_field(
        setup=setup,
        source_to_surface_cm=source_to_couch_cm,
        reference_output_cgy_per_mu=reference_output_cgy_per_mu,
        rate_mu_per_min=rate_mu_per_min,
        uniformity_half_width_cm=half_width_cm,
    )


def predicted_incidence_dose(
    *, rate_profile: Table, couch_speed_cm_per_s: float, lying_passes: int, rate_mu_per_min: float
) -> float:
    """Return the dose of one incidence with the planned speed and passes in the predicted field."""
    return couch_pass(
        dose_rate_profile=rate_profile,
        couch_speed_cm_per_s=couch_speed_cm_per_s,
        passes=lying_passes,
        rate_mu_per_min=rate_mu_per_min,
    ).incidence_dose_cgy


def speed_for_dose(*, rate_profile: Table, incidence_dose_wanted_cgy: float, lying_passes: int) -> float:
    """Return the speed at which the planned passes give the wanted dose of an incidence."""
    return couch_speed_needed(
        dose_rate_profile=rate_profile, incidence_dose_cgy=incidence_dose_wanted_cgy, passes=lying_passes
    )


@lru_cache(maxsize=64)
def measured_across(
    *, kind: str, table: Table, half_width_cm: float, metric: str, normalisation: str, smoothing: str
) -> ProfileEvaluation | None:
    """Return how even a measured pass is across; None for another kind of measurement."""
    if kind != COUCH_PROFILE:
        return None
    return evaluated(table, numbers(table, "across_cm"), half_width_cm, metric, normalisation, smoothing)


def _part(name: str, meaning: str, part: str) -> Definition:
    """Return a part of the predicted field."""
    return Definition(
        f"arrangement.{name}", meaning, of="arrangement.couch_field", part=part, source="own-fit", known="fit"
    )


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.couch_field",
        "The vertical field at the height of the couch's surface, as predicted.",
        by=field_over_couch,
        takes={
            "setup": "arrangement.field_setup",
            "source_to_couch_cm": "arrangement.source_to_couch_cm",
            "reference_output_cgy_per_mu": "beam.reference_output_cgy_per_mu",
            "rate_mu_per_min": "beam.rate_mu_per_min",
            "half_width_cm": "criterion.uniformity_half_width_cm",
        },
        model=True,
        internal=True,
        source="own-fit",
        known="fit",
    ),
    _part(
        "couch_across_half_range_percent",
        "Half-range of a pass's dose across a lying patient, as predicted.",
        "across_half_range_percent",
    ),
    _part(
        "couch_across_deviation_percent",
        "Largest deviation of a pass's dose across a lying patient from the middle, as predicted.",
        "across_deviation_percent",
    ),
    Definition(
        "arrangement.predicted_couch_across_percent",
        "Unevenness of a pass across a lying patient in the metric by which it is judged, as predicted.",
        by=judged,
        takes={
            "half_range_percent": "arrangement.couch_across_half_range_percent",
            "deviation_percent": "arrangement.couch_across_deviation_percent",
            "metric": "program.uniformity_metric",
        },
        source="own-fit",
        known="fit",
    ),
    Definition(
        "measurement.couch_profile",
        "Evenness of a measured pass across a moving couch.",
        by=measured_across,
        takes={
            "kind": "measurement.kind",
            "table": "measurement.table",
            "normalisation": "measurement.normalisation",
            "smoothing": "measurement.smoothing",
            "metric": "program.uniformity_metric",
            "half_width_cm": "criterion.uniformity_half_width_cm",
        },
        internal=True,
    ),
    Definition(
        "arrangement.couch_across_percent",
        "Unevenness of a pass across a lying patient in the metric by which it is judged.",
        otherwise="arrangement.predicted_couch_across_percent",
        measured=Measured(
            COUCH_PROFILE, takes={"profile": "measurement.couch_profile"}, part="judged_percent"
        ),
    ),
    _part("couch_profile_across", "Dose of a pass across a lying patient, as predicted.", "across_profile"),
    _part(
        "couch_rate_profile",
        "Dose rate along the travel at the height of the couch's surface, as predicted.",
        "dose_rate_profile",
    ),
    _part(
        "couch_peak_rate_cgy_per_min",
        "Dose rate below the middle of the field at the height of the couch's surface, as predicted.",
        "peak_dose_rate_cgy_per_min",
    ),
    _part(
        "couch_equivalent_length_cm",
        "Length of travel that collects the dose of a pass at the highest rate, as predicted.",
        "equivalent_length_cm",
    ),
    Definition(
        "arrangement.predicted_incidence_dose_cgy",
        "Dose of one incidence with the planned speed and passes, as predicted; never for treatment.",
        by=predicted_incidence_dose,
        takes={
            "rate_profile": "arrangement.couch_rate_profile",
            "couch_speed_cm_per_s": "plan.couch_speed_cm_per_s",
            "lying_passes": "plan.lying_passes",
            "rate_mu_per_min": "beam.rate_mu_per_min",
        },
        model=True,
        source="definition",
        known="derived",
        formula="D = n (integral of the dose rate along the travel) / v",
    ),
    Definition(
        "arrangement.predicted_couch_speed_cm_per_s",
        "Speed at which the planned passes give the wanted dose of an incidence, as predicted.",
        by=speed_for_dose,
        takes={
            "rate_profile": "arrangement.couch_rate_profile",
            "incidence_dose_wanted_cgy": "plan.incidence_dose_wanted_cgy",
            "lying_passes": "plan.lying_passes",
        },
        model=True,
        source="definition",
        known="derived",
        formula="v = n (integral of the dose rate along the travel) / D",
    ),
)
