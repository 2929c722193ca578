"""What is expected of the arrangement's room and beam, for the meeting: a few lines of the study (4.9)."""

from readiness.assessment.records import Assessment, Value
from readiness.outputs.words import with_unit

# value -> what it says; lines whose value is not known are left out
_LINES = {
    "arrangement.study_distance_cm": "Plane studied",
    "arrangement.farthest_plane_distance_cm": "Farthest plane as the room is",
    "arrangement.plane_limited_by": "Limited by",
    "arrangement.farthest_when_cleared_cm": "Farthest plane with everything movable out of the way",
    "arrangement.likely_lowest_tilt_deg": "Evenest tilt expected from",
    "arrangement.likely_highest_tilt_deg": "and up to",
    "arrangement.expected_vertical_percent": "Vertical unevenness to expect",
    "arrangement.expected_horizontal_percent": "Horizontal unevenness to expect",
    "arrangement.study_reason": "For both directions to keep their limits",
    "arrangement.lowest_dose_to_patient_percent": "Lowest dose from soles to raised hands, of mid-height",
    "arrangement.depth_rules_forecast": "Rules on dose at 4 and 20 mm",
    "arrangement.degraders_in_words": "Degrader",
    "arrangement.helpful_measurement": "Measurement that would make this surer than any other",
    "arrangement.source_to_couch_cm": "Source to the surface of the couch",
    "arrangement.couch_run_limited_by": "Run of the couch limited by",
    "arrangement.couch_across_deviation_percent": "Unevenness across a lying patient to expect",
    "arrangement.couch_peak_rate_cgy_per_min": "Highest dose rate at the couch",
}


def study_rows(assessment: Assessment) -> tuple[tuple[str, str, str], ...]:
    """Return the lines of the arrangement that the page is for: what, how much, basis."""
    found = {
        value.name: value for value in assessment.values if value.item.id == assessment.verdict.arrangement
    }
    return tuple(
        (words, _number(found[name]), found[name].basis) for name, words in _LINES.items() if name in found
    )


def _number(value: Value) -> str:
    text = with_unit(value.name, value.value)
    return text if value.sd is None else f"{text} ± {with_unit(value.name, value.sd)}"
