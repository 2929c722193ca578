"""The survey in the mode: readings to expect, and what a filled survey gives."""

from readiness.assessment.definition import Definition, Measured, derived
from readiness.calculations.survey_comparison import (
    SurveyComparison,
    compare_survey,
    predicted_readings,
    readings_of_fields,
    same_gantry,
    weekly_dose_from_survey,
)
from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table

WORKSHEET = ("place", "gantry_deg", "aimed_at", "empty_usv_per_h", "occupied_usv_per_h", "remark")
COMPARED = ("place", "gantry_deg", "patient_place", "predicted_usv_per_h", "measured_usv_per_h",
            "measured_over_predicted")  # fmt: skip
SURVEY = "no prediction: measure"
OCCUPIED = "occupied"
_READ = {
    "readings": "measurement.table",
    "rate_mu_per_min": "measurement.rate_mu_per_min",
    "background_usv_per_h": "measurement.background_usv_per_h",
    "patient_place": "measurement.patient_place",
    "barrier": "barrier.id",
}


def axis_spot(*, surface: str, spots: Table) -> str:
    """Return the field whose axis meets a surface, both or neither."""
    met = {str(row["field"]) for row in spots.records() if row["ray"] == "axis" and row["surface"] == surface}
    return "both" if len(met) == 2 else next(iter(met), "neither")


def fields_of(spots: Table) -> Table:
    """Return each field and its gantry angle."""
    return Table(
        ("field", "gantry_deg"),
        tuple(dict.fromkeys((row["field"], row["gantry_deg"]) for row in spots.records())),
    )


def readings(
    *, barrier: str, contributions: Table, occupancy: float, surface: str, spots: Table,
    cycles_per_week: float, cycle_mu: int, qa_mu: float | None, rate_mu_per_min: float,
) -> Table:  # fmt: skip
    """Return the readings to expect behind a barrier, each field, patient's place empty and occupied."""
    return predicted_readings(
        barrier=barrier, contributions=contributions, occupancy=occupancy,
        spot=axis_spot(surface=surface, spots=spots), fields=fields_of(spots), own_field_share=None,
        mu_per_week=cycles_per_week * cycle_mu + (qa_mu or 0.0), rate_mu_per_min=rate_mu_per_min,
    )  # fmt: skip


def worksheet(*, places: tuple[str, ...], readings: tuple[Table | None, ...], spots: Table) -> Table:
    """Return every place to survey with the reading to expect; none where only a reading can tell."""
    rows: list[tuple[Scalar, ...]] = []
    for place, expected in zip(places, readings, strict=True):
        for field, gantry in fields_of(spots).rows:
            rates = (
                {row["patient"]: row for row in expected.records() if row["field"] == field}
                if expected is not None
                else {}
            )
            empty, occupied = rates.get("empty", {}), rates.get("occupied", {})
            remark = occupied.get("remark", SURVEY)
            rates_expected = (empty.get("predicted_usv_per_h"), occupied.get("predicted_usv_per_h"))
            rows.append((place, gantry, field, *rates_expected, remark))
    return Table(WORKSHEET, tuple(rows))


def compared(
    *, expected: Table, expected_mu_per_min: float, readings: Table, rate_mu_per_min: float,
    background_usv_per_h: float, patient_place: str, barrier: str, limit_ratio: float,
) -> SurveyComparison:  # fmt: skip
    """Return how the readings behind one barrier stand to those expected; one too high needs no other."""
    here = Table(readings.columns, tuple(row for row in readings.rows if row[0] == barrier))
    found = compare_survey(
        predicted=expected, predicted_at_mu_per_min=expected_mu_per_min, measured=here,
        measured_at_mu_per_min=rate_mu_per_min,
        background_usv_per_h=background_usv_per_h, patient=patient_place,
    )  # fmt: skip
    if found.missing and not (found.largest_ratio or 0.0) > limit_ratio:
        others = f" (but of {', '.join(found.not_predicted)})" if found.not_predicted else ""
        raise OutsideValidity(f"the survey has no reading of {', '.join(found.missing)}{others}")
    return found


def surveyed_week(
    *, readings: Table, rate_mu_per_min: float, background_usv_per_h: float, patient_place: str,
    barrier: str, spots: Table, cycles_per_week: float, cycle_mu: int, qa_mu: float | None, occupancy: float,
) -> float:  # fmt: skip
    """Return what the program adds in the busiest week according to the survey."""
    if patient_place != OCCUPIED:
        raise OutsideValidity(
            "the survey was made without a scattering body at the plane; the patient's scatter is not in it"
        )
    net = readings_of_fields(
        measured=readings, barrier=barrier, background_usv_per_h=background_usv_per_h,
        fields=fields_of(spots),
    )  # fmt: skip
    return weekly_dose_from_survey(
        readings_usv_per_h=net, rate_mu_per_min=rate_mu_per_min, occupancy=occupancy,
        mu_per_week=cycles_per_week * cycle_mu + (qa_mu or 0.0),
    )  # fmt: skip


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
        for gantry in fields_of(spots).column("gantry_deg"):
            angle = float(str(gantry))
            if not any(
                row["barrier"] == barrier and same_gantry(row=row, gantry_deg=angle)
                for row in readings.records()
            ):
                missing.append(f"{title or barrier} with the gantry at {angle:g} degrees")
    return "; ".join(missing) or "none"


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "exposure.predicted_readings",
        "Dose rates to expect behind the barrier: each field, patient's place empty and occupied.",
        by=readings,
        takes={
            "barrier": "barrier.id",
            "contributions": "exposure.contributions",
            "occupancy": "barrier.occupancy",
            "surface": "barrier.surface",
            "spots": "arrangement.field_spots",
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
            "spots": "arrangement.field_spots",
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
                "limit_ratio": "criterion.survey_over_predicted_ratio",
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
                "limit_ratio": "criterion.survey_over_predicted_ratio",
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
                "spots": "arrangement.field_spots",
                "cycles_per_week": "program.busiest_week_cycles_per_week",
                "cycle_mu": "arrangement.workload_mu",
                "qa_mu": "protection.qa_mu_per_week_mu?",
                "occupancy": "barrier.occupancy",
            },
        ),
        source="own-arithmetic",
        known="derived",
        formula="H = T x mean of the readings of all fields x MU of the week / MU an hour",
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
                "spots": "arrangement.field_spots",
            },
        ),
        source="own-arithmetic",
        known="derived",
    ),
)
