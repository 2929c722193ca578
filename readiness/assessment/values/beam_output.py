"""Output of the pair of fields: stated, measured, and predicted for a check on gross errors."""

from functools import lru_cache

from readiness.assessment.definition import Definition, Measured
from readiness.assessment.values.beam_field import PREDICTION, upper_share
from readiness.assessment.values.readings import numbers, numbers_or
from readiness.calculations.field_setup import FieldSetup
from readiness.calculations.monitor_units import ON_EACH, OutputPlausibility, output_plausibility
from readiness.calculations.output_analysis import PairOutput, analyse_pair_output
from readiness.calculations.pair_output import PredictedPairOutput, predicted_pair_output
from readiness.quantities import Table, Uncertain

OUTPUT_PAIR = "output-pair"


@lru_cache(maxsize=256)
def output_of_arrangement(
    *,
    setup: FieldSetup,
    reference_output_cgy_per_mu: float,
    plane_distance_cm: float,
    tilt_deg: float,
    mu_share_upper: float | None,
) -> PredictedPairOutput:
    """Return the predicted output at the isocentre's height with equal tilts."""
    return predicted_pair_output(
        setup=setup,
        reference_output_cgy_per_mu=reference_output_cgy_per_mu,
        plane_distance_cm=plane_distance_cm,
        tilt_toward_head_deg=tilt_deg,
        tilt_toward_feet_deg=tilt_deg,
        mid_height_cm=0.0,
        mu_share_upper=upper_share(mu_share_upper),
    )


def predicted_with_sd(*, predicted: PredictedPairOutput) -> Uncertain:
    """Return the predicted output with its standard deviation."""
    return Uncertain(predicted.pair_output_cgy_per_mu, predicted.sd_cgy_per_mu)


def stated_output(*, pair_output_cgy_per_mu: float) -> float:
    """Return the output that the plan states."""
    return pair_output_cgy_per_mu


@lru_cache(maxsize=256)
def output_readings(
    *,
    table: Table,
    distance_cm: float,
    measured_tilt_deg: float,
    mu_convention: str,
    plane_distance_cm: float,
    tilt_deg: float,
    predicted_output_cgy_per_mu: float | None,
) -> PairOutput:
    """Return the output at the planned set-up; a reading without its own distance or tilt has the file's."""
    return analyse_pair_output(
        distances_cm=numbers_or(table, "distance_cm", distance_cm),
        tilts_deg=numbers_or(table, "tilt_deg", measured_tilt_deg),
        outputs_cgy_per_mu=numbers(table, "output_cgy_per_mu"),
        mu_convention=mu_convention,
        planned_distance_cm=plane_distance_cm,
        planned_tilt_deg=tilt_deg,
        predicted_output_cgy_per_mu=predicted_output_cgy_per_mu,
    )


def measured_output(
    *,
    table: Table,
    distance_cm: float,
    measured_tilt_deg: float,
    mu_convention: str,
    plane_distance_cm: float,
    tilt_deg: float,
    predicted_output_cgy_per_mu: float | None,
    plan_convention: str,
) -> float | Uncertain:
    """Return the measured output in the plan's convention, with its standard deviation if it is seen."""
    found = output_readings(
        table=table,
        distance_cm=distance_cm,
        measured_tilt_deg=measured_tilt_deg,
        mu_convention=mu_convention,
        plane_distance_cm=plane_distance_cm,
        tilt_deg=tilt_deg,
        predicted_output_cgy_per_mu=predicted_output_cgy_per_mu,
    )
    output = found.total_output_cgy_per_mu * (2 if plan_convention == ON_EACH else 1)
    sd = found.pair_output_sd_cgy_per_mu
    return output if sd is None else Uncertain(output, sd * output / found.pair_output_cgy_per_mu)


def difference_from_prediction(*, output_agreement_ratio: float) -> float:
    """Return how far the output is from its prediction, either way."""
    return 100 * abs(output_agreement_ratio - 1)


def suggestion_in_words(*, comparison: OutputPlausibility) -> str:
    """Return what a disagreement looks like, none if there is none."""
    return comparison.suggestion or "none"


_READINGS = {
    "table": "measurement.table",
    "distance_cm": "measurement.distance_cm",
    "measured_tilt_deg": "measurement.tilt_deg",
    "mu_convention": "measurement.mu_convention",
    "plane_distance_cm": "arrangement.plane_distance_cm",
    "tilt_deg": "arrangement.tilt_deg",
    "predicted_output_cgy_per_mu": "arrangement.predicted_pair_output_cgy_per_mu?",
}


def _from_readings(name: str, meaning: str, part: str) -> Definition:
    """Return a number that only readings of the output give."""
    return Definition(
        f"arrangement.{name}",
        meaning,
        measured=Measured(OUTPUT_PAIR, by=output_readings, takes=_READINGS, part=part),
        source="aapm-23",
        known="memory",
    )


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.predicted_output",
        "Output of the pair as predicted, and its changes with tilt and distance.",
        by=output_of_arrangement,
        takes={
            **PREDICTION,
            "reference_output_cgy_per_mu": "beam.reference_output_cgy_per_mu",
            "tilt_deg": "arrangement.study_tilt_deg",
        },
        model=True,
        internal=True,
        source="own-fit",
        known="fit",
    ),
    Definition(
        "arrangement.predicted_pair_output_cgy_per_mu",
        "Predicted dose at the calibration point per MU, counted as the total of both beams; never for"
        " treatment.",
        by=predicted_with_sd,
        takes={"predicted": "arrangement.predicted_output"},
        source="own-fit",
        known="fit",
        formula="k = k_100 sum of share x dose(plane)/emission x 100^2",
    ),
    Definition(
        "arrangement.predicted_output_change_percent_per_deg",
        "Predicted change of the output for one degree more of both tilts.",
        of="arrangement.predicted_output",
        part="per_degree_percent",
        source="own-fit",
        known="fit",
    ),
    Definition(
        "arrangement.pair_output_cgy_per_mu",
        "Dose per MU of the pair at the calibration point, degrader in place, in the plan's MU convention.",
        by=stated_output,
        takes={"pair_output_cgy_per_mu": "plan.pair_output_cgy_per_mu"},
        measured=Measured(
            OUTPUT_PAIR,
            by=measured_output,
            takes={**_READINGS, "plan_convention": "plan.mu_convention"},
        ),
        source="aapm-23",
        known="memory",
    ),
    _from_readings(
        "output_change_percent_per_cm",
        "Measured change of the output for one centimetre farther.",
        "change_percent_per_cm",
    ),
    _from_readings(
        "output_change_percent_per_deg",
        "Measured change of the output for one degree more of both tilts.",
        "change_percent_per_deg",
    ),
    _from_readings(
        "output_repeat_percent", "Standard deviation of one reading of the output.", "repeat_sd_percent"
    ),
    _from_readings("output_remarks", "What must be said about the readings of the output.", "remarks"),
    Definition(
        "arrangement.output_comparison",
        "How the output compares with its prediction.",
        by=output_plausibility,
        takes={
            "pair_output_cgy_per_mu": "arrangement.pair_output_cgy_per_mu",
            "mu_convention": "plan.mu_convention",
            "predicted_output_cgy_per_mu": "arrangement.predicted_pair_output_cgy_per_mu",
            "allowed_difference_percent": "criterion.gross_output_difference_percent",
        },
        internal=True,
        source="practice",
        known="practice",
    ),
    Definition(
        "arrangement.output_agreement_ratio",
        "Output of the pair divided by its prediction, in one convention; a check for gross errors only.",
        of="arrangement.output_comparison",
        part="ratio",
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.output_difference_percent",
        "Departure of the output from its prediction; a check for gross errors only.",
        by=difference_from_prediction,
        takes={"output_agreement_ratio": "arrangement.output_agreement_ratio"},
        source="definition",
        known="derived",
    ),
    Definition(
        "arrangement.output_suggestion",
        "What a disagreement of output and prediction looks like, none if they agree.",
        by=suggestion_in_words,
        takes={"comparison": "arrangement.output_comparison"},
        source="practice",
        known="practice",
    ),
)
