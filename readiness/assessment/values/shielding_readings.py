"""The survey in the mode: readings to expect, and what a filled survey gives."""

from readiness.assessment.definition import Definition, Measured, derived
from readiness.calculations.survey_comparison import (
    SurveyComparison,
    compare_survey,
    predicted_readings,
    readings_of_fields,
    weekly_dose_from_survey,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table

WORKSHEET = ("place", "gantry_deg", "aimed_at", "empty_usv_per_h", "occupied_usv_per_h", "remark")
COMPARED = ("place", "gantry_deg", "patient_place", "predicted_usv_per_h", "measured_usv_per_h",
            "measured_over_predicted")  # fmt: skip
SURVEY = "no prediction: measure"
_READ = {
    "readings": "measurement.table",
    "rate_mu_per_min": "measurement.rate_mu_per_min",
    "background_usv_per_h": "measurement.background_usv_per_h",
    "phantom": "measurement.phantom?",
    "barrier": "barrier.id",
}


def axis_spot(*, surface: str, spots: Table) -> str:
    """Return the field whose axis meets a surface: head, feet, both or neither."""
    met = {str(row["field"]) for row in spots.records() if row["ray"] == "axis" and row["surface"] == surface}
    return "both" if len(met) == 2 else next(iter(met), "neither")


def gantry_of(spots: Table, field: str) -> float:
    """Return the gantry angle of a field."""
    return float(str(next(row["gantry_deg"] for row in spots.records() if row["field"] == field)))


def readings(
    *, barrier: str, contributions: Table, occupancy: float, surface: str, spots: Table,
    cycles_per_week: float, cycle_mu: int, qa_mu: float | None, rate_mu_per_min: float,
) -> Table:  # fmt: skip
    """Return the readings to expect behind a barrier, both fields, patient's place empty and occupied."""
    return predicted_readings(
        barrier=barrier, contributions=contributions, occupancy=occupancy,
        spot=axis_spot(surface=surface, spots=spots), toward_head_deg=gantry_of(spots, "head"),
        toward_feet_deg=gantry_of(spots, "feet"), own_field_share=None,
        mu_per_week=cycles_per_week * cycle_mu + (qa_mu or 0.0), rate_mu_per_min=rate_mu_per_min,
    )  # fmt: skip


def worksheet(*, places: tuple[str, ...], readings: tuple[Table | None, ...], spots: Table) -> Table:
    """Return every place to survey with the reading to expect; none where only a reading can tell."""
    rows: list[tuple[Scalar, ...]] = []
    for place, expected in zip(places, readings, strict=True):
        for field in ("head", "feet"):
            rates = (
                {row["patient"]: row for row in expected.records() if row["field"] == field}
                if expected is not None
                else {}
            )
            empty, occupied = rates.get("empty", {}), rates.get("occupied", {})
            remark = occupied.get("remark", SURVEY)
            rates_expected = (empty.get("predicted_usv_per_h"), occupied.get("predicted_usv_per_h"))
            rows.append((place, gantry_of(spots, field), field, *rates_expected, remark))
    return Table(WORKSHEET, tuple(rows))


def compared(
    *, expected: Table, expected_mu_per_min: float, readings: Table, rate_mu_per_min: float,
    background_usv_per_h: float, phantom: str | None, barrier: str,
) -> SurveyComparison:  # fmt: skip
    """Return how the readings behind one barrier stand to those expected."""
    here = Table(readings.columns, tuple(row for row in readings.rows if row[0] == barrier))
    found = compare_survey(
        predicted=expected, predicted_at_mu_per_min=expected_mu_per_min, measured=here,
        measured_at_mu_per_min=rate_mu_per_min,
        background_usv_per_h=background_usv_per_h, patient="occupied" if phantom else "empty",
    )  # fmt: skip
    if found.missing:
        raise OutsideValidity(f"the survey has no reading of {', '.join(found.missing)}")
    return found


def surveyed_week(
    *, readings: Table, rate_mu_per_min: float, background_usv_per_h: float, phantom: str | None,
    barrier: str, spots: Table, cycles_per_week: float, cycle_mu: int, qa_mu: float | None, occupancy: float,
) -> float:  # fmt: skip
    """Return what the program adds in the busiest week according to the survey."""
    if not phantom:
        raise OutsideValidity(
            "the survey was made without a scattering body at the plane; the patient's scatter is not in it"
        )
    head, feet = readings_of_fields(
        measured=readings, barrier=barrier, background_usv_per_h=background_usv_per_h,
        toward_head_deg=gantry_of(spots, "head"), toward_feet_deg=gantry_of(spots, "feet"),
    )  # fmt: skip
    return weekly_dose_from_survey(
        head_usv_per_h=head, feet_usv_per_h=feet, rate_mu_per_min=rate_mu_per_min, occupancy=occupancy,
        mu_per_week=cycles_per_week * cycle_mu + (qa_mu or 0.0),
    )  # fmt: skip


def part_of_goal(
    *, added_usv_per_week: float, before_usv_per_week: float | None, goal_msv_per_week: float
) -> float:
    """Return existing dose and surveyed addition as a part of the goal; the addition alone at a door."""
    return (added_usv_per_week + (before_usv_per_week or 0.0)) / (1000 * goal_msv_per_week)


def comparison(*, places: tuple[str, ...], compared: tuple[Table | None, ...]) -> Table:
    """Return every pair of expected and measured reading."""
    rows = [
        (place, *row[1:])
        for place, table in zip(places, compared, strict=True)
        if table is not None
        for row in table.rows
    ]
    if not rows:
        raise OutsideValidity("no survey in the mode is at hand")
    return Table(COMPARED, tuple(rows))


def places_missing(
    *, readings: Table, barriers: tuple[str, ...], titles: tuple[str | None, ...], spots: Table
) -> str:
    """Return the places and fields without a reading, or "none"."""
    missing = []
    for barrier, title in zip(barriers, titles, strict=True):
        for field in ("head", "feet"):
            gantry = gantry_of(spots, field)
            if not any(
                row["barrier"] == barrier and abs(float(str(row["gantry_deg"])) - gantry) <= 1.0
                for row in readings.records()
            ):
                missing.append(f"{title or barrier} with the gantry at {gantry:g} degrees")
    return "; ".join(missing) or "none"


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "exposure.predicted_readings",
        "Dose rates to expect behind the barrier: both fields, patient's place empty and occupied.",
        by=readings,
        takes={
            "barrier": "barrier.id",
            "contributions": "exposure.contributions",
            "occupancy": "barrier.occupancy",
            "surface": "barrier.surface",
            "spots": "arrangement.beam_spots",
            "cycles_per_week": "program.busiest_week_cycles_per_week",
            "cycle_mu": "arrangement.workload_mu",
            "qa_mu": "protection.qa_mu_per_week_mu?",
            "rate_mu_per_min": "beam.rate_mu_per_min",
        },
        model=True,
        source="own-arithmetic",
        known="derived",
        formula="R = H_week / (T MU_week) x MU per minute x 60, x rays of a spot with its own field",
    ),
    derived(
        "arrangement.survey_worksheet",
        "Every place to survey in the mode with the reading to expect.",
        worksheet,
        {
            "places": "each exposure.title",
            "readings": "each exposure.predicted_readings?",
            "spots": "arrangement.beam_spots",
        },
    ),
    Definition(
        "exposure.survey_pairs",
        "Expected and measured readings behind the barrier.",
        measured=Measured(
            "survey",
            compared,
            {
                "expected": "exposure.predicted_readings",
                "expected_mu_per_min": "beam.rate_mu_per_min",
                **_READ,
            },
            part="rows",
        ),
        source="own-arithmetic",
        known="derived",
    ),
    Definition(
        "exposure.survey_over_predicted_ratio",
        "Largest measured reading over the expected one.",
        measured=Measured(
            "survey",
            compared,
            {
                "expected": "exposure.predicted_readings",
                "expected_mu_per_min": "beam.rate_mu_per_min",
                **_READ,
            },
            part="largest_ratio",
        ),
        source="own-arithmetic",
        known="derived",
    ),
    Definition(
        "exposure.surveyed_added_usv_per_week",
        "What the program adds in the busiest week according to the survey.",
        measured=Measured(
            "survey",
            surveyed_week,
            {
                **_READ,
                "spots": "arrangement.beam_spots",
                "cycles_per_week": "program.busiest_week_cycles_per_week",
                "cycle_mu": "arrangement.workload_mu",
                "qa_mu": "protection.qa_mu_per_week_mu?",
                "occupancy": "barrier.occupancy",
            },
        ),
        source="own-arithmetic",
        known="derived",
        formula="H = T (R_head + R_feet)/2 x MU of the week / MU an hour",
    ),
    derived(
        "exposure.surveyed_goal_ratio",
        "Existing dose and surveyed addition as a part of the weekly goal; at a door the addition alone.",
        part_of_goal,
        {
            "added_usv_per_week": "exposure.surveyed_added_usv_per_week",
            "before_usv_per_week": "exposure.before_usv_per_week?",
            "goal_msv_per_week": "barrier.design_goal_msv_per_week",
        },
    ),
    derived(
        "arrangement.survey_compared",
        "Survey in the mode beside what was expected.",
        comparison,
        {"places": "each exposure.title", "compared": "each exposure.survey_pairs?"},
    ),
    Definition(
        "arrangement.survey_places_missing",
        "Places and fields without a reading in the survey of the mode.",
        measured=Measured(
            "survey",
            places_missing,
            {
                "readings": "measurement.table",
                "barriers": "each barrier.id",
                "titles": "each barrier.title?",
                "spots": "arrangement.beam_spots",
            },
        ),
        source="own-arithmetic",
        known="derived",
    ),
)
