"""A survey is predicted point by point and compared when it comes back."""

import pytest

from readiness.calculations.barrier_dose import weekly_dose
from readiness.calculations.survey_comparison import (
    compare_survey,
    predicted_readings,
    weekly_dose_from_survey,
)
from readiness.quantities import Table

DOSE = weekly_dose(
    layers=Table.of(("material", "thickness_cm", "density_g_per_cm3"), [("concrete", 110.0, 2.35)]),
    role="secondary",
    occupancy=0.2,
    recess_depth_cm=0.0,
    existing=Table.of(
        ("energy_mv", "kind", "workload_gy_per_week", "use_factor"), [(6, "leakage", 200.0, None)]
    ),
    primary_distance_m=None,
    isocentre_distance_m=4.45,
    beam_energy_mv=6.0,
    xray_workload_gy_m2_per_week=6.0,
    xray_distance_m=5.45,
    leakage_workload_gy_m2_per_week=800.0,
    leakage_percent=0.1,
    head_distance_m=5.45,
    plane_distance_cm=340.0,
    patient_area_m2=0.72,
    scatter_distance_m=2.05,
    scatter_angle_deg=20.0,
)
CASE = {
    "barrier": "east wall",
    "contributions": DOSE.contributions,
    "occupancy": 0.2,
    "spot": "head",
    "toward_head_deg": 254.0,
    "toward_feet_deg": 286.0,
    "own_field_share": 0.75,
    "mu_per_week": 80000.0,
    "rate_mu_per_min": 1000.0,
}
LINES = {row["contribution"]: row["dose_usv_per_week"] / 0.2 for row in DOSE.contributions.records()}
PER_H = 60000.0 / 80000.0


def predict(**changes):
    return predicted_readings(**{**CASE, **changes})


def reading(table, field, patient):
    return next(
        row["predicted_usv_per_h"]
        for row in table.records()
        if (row["field"], row["patient"]) == (field, patient)
    )


def test_own_field_and_other_field():
    """At the head's spot its own field gives three quarters of the x rays in half of the MU, the other the rest."""
    xrays, leakage = LINES["added x rays"] * PER_H, LINES["added leakage"] * PER_H
    table = predict()
    assert reading(table, "head", "empty") == pytest.approx(2 * 0.75 * xrays + leakage)
    assert reading(table, "feet", "empty") == pytest.approx(2 * 0.25 * xrays + leakage)


def test_occupied_adds_the_scatter():
    """With the patient's place occupied the patient's scatter is added, nothing is taken away."""
    table = predict()
    scatter = LINES["added scatter by the patient"] * PER_H
    assert reading(table, "head", "occupied") - reading(table, "head", "empty") == pytest.approx(scatter)


def test_unknown_share_is_an_upper_bound():
    """If only a fraction is known, either field may give all x rays, and the remark says so."""
    table = predict(own_field_share=None)
    assert reading(table, "head", "empty") == reading(table, "feet", "empty")
    assert reading(table, "head", "empty") > reading(predict(), "head", "empty")
    assert {"upper bound"} == set(table.column("remark"))


def test_a_survey_as_predicted_gives_the_weekly_dose_back():
    """Readings as predicted, both fields, empty and summed over the week, are the added weekly dose."""
    table = predict()
    back = weekly_dose_from_survey(
        head_usv_per_h=reading(table, "head", "empty"),
        feet_usv_per_h=reading(table, "feet", "empty"),
        mu_per_week=80000.0,
        rate_mu_per_min=1000.0,
        occupancy=0.2,
    )
    assert 0.2 * (LINES["added x rays"] + LINES["added leakage"]) == pytest.approx(back)


def measured(*rows):
    return Table.of(("barrier", "gantry_deg", "reading_usv_per_h"), rows)


def compare(table, patient="empty", background=0.1, rate=1000.0):
    return compare_survey(
        predicted=predict(),
        predicted_at_mu_per_min=1000.0,
        measured=table,
        measured_at_mu_per_min=rate,
        background_usv_per_h=background,
        patient=patient,
    )


def test_comparison_finds_the_worst():
    """Twice the predicted reading is a ratio of two after the background is taken off."""
    head, feet = (reading(predict(), field, "empty") for field in ("head", "feet"))
    found = compare(measured(("east wall", 254.2, 2 * head + 0.1), ("east wall", 286.0, feet + 0.1)))
    assert (2, "east wall", (), ()) == (
        found.compared_readings,
        found.worst_barrier,
        found.missing,
        found.not_predicted,
    )
    assert 2.0 == pytest.approx(found.largest_ratio)
    assert 2 * head == pytest.approx(found.largest_reading_usv_per_h)


def test_predictions_follow_the_mu_rate():
    """A survey at half the MU rate is compared with half the prediction."""
    head = reading(predict(), "head", "empty")
    found = compare(measured(("east wall", 254.0, head / 2)), background=0.0, rate=500.0)
    assert 1.0 == pytest.approx(found.largest_ratio)


def test_missing_and_unknown_places():
    """What was not measured and what had not been predicted are both named."""
    found = compare(measured(("west wall", 254.0, 1.0)))
    assert ("east wall at gantry 254", "east wall at gantry 286") == found.missing
    assert ("west wall at gantry 254.0",) == found.not_predicted
    assert (None, None, 0) == (found.largest_ratio, found.largest_reading_usv_per_h, found.compared_readings)


def test_below_background_counts_as_zero():
    """A reading below the background is no negative dose."""
    found = compare(measured(("east wall", 254.0, 0.05)))
    assert 0.0 == found.largest_ratio


def test_impossible():
    """The same place twice, unknown words and impossible numbers are refused."""
    with pytest.raises(ValueError, match="measured twice"):
        compare(measured(("east wall", 254.0, 1.0), ("east wall", 254.5, 1.0)))
    with pytest.raises(ValueError, match="empty or occupied"):
        compare(measured(), patient="phantom")
    with pytest.raises(ValueError, match="background"):
        compare(measured(), background=-1.0)
    with pytest.raises(ValueError, match="MU rate"):
        compare(measured(), rate=0.0)
    with pytest.raises(ValueError, match="a spot is one of"):
        predict(spot="wall")
    with pytest.raises(ValueError, match="a share lies"):
        predict(own_field_share=1.5)
    with pytest.raises(ValueError, match="above zero"):
        predict(mu_per_week=0.0)
    with pytest.raises(ValueError, match="readings and MU"):
        weekly_dose_from_survey(
            head_usv_per_h=-1.0, feet_usv_per_h=0.0, mu_per_week=1.0, rate_mu_per_min=1.0, occupancy=1.0
        )
    with pytest.raises(ValueError, match="MU rate and occupancy"):
        weekly_dose_from_survey(
            head_usv_per_h=1.0, feet_usv_per_h=0.0, mu_per_week=1.0, rate_mu_per_min=1.0, occupancy=0.0
        )
