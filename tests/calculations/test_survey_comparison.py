"""A survey is predicted point by point and compared when it comes back."""

import pytest

from readiness.calculations.barrier_dose import weekly_dose
from readiness.calculations.survey_comparison import (
    compare_survey,
    predicted_readings,
    readings_of_fields,
    weekly_dose_from_survey,
)
from readiness.errors import OutsideValidity
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
    "fields": Table.of(("field", "gantry_deg"), [("head", 254.0), ("feet", 286.0)]),
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
        readings_usv_per_h=(reading(table, "head", "empty"), reading(table, "feet", "empty")),
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


def test_barely_below_background_counts_as_zero():
    """A reading that scatters below the background is no negative dose."""
    found = compare(measured(("east wall", 254.0, 0.09)))
    assert 0.0 == found.largest_ratio


@pytest.mark.parametrize("given", [0.0, 0.05])
def test_a_reading_without_its_background_is_no_zero(given):
    """A reading clearly below the one without beam has lost its background, or the meter was off."""
    with pytest.raises(OutsideValidity, match="taken off already"):
        compare(measured(("east wall", 254.0, given)))
    with pytest.raises(OutsideValidity, match="taken off already"):
        of_fields(("east wall", 254.0, given), ("east wall", 286.0, 5.0))


def of_fields(*rows, fields=CASE["fields"]):
    return readings_of_fields(
        measured=measured(*rows), barrier="east wall", background_usv_per_h=0.1, fields=fields
    )


def test_the_highest_of_several_readings_counts():
    """A joint that leaks decides, in the comparison and in the dose."""
    rows = (("east wall", 254.0, 0.3), ("east wall", 254.5, 9.1), ("east wall", 286.0, 0.3))
    found = compare(measured(*rows))
    assert 9.0 == pytest.approx(found.largest_reading_usv_per_h)
    assert (9.0, 0.2) == pytest.approx(of_fields(*rows))


def test_readings_at_other_angles_are_named():
    """Angles of the other beam side are told beside those that are missing."""
    with pytest.raises(OutsideValidity, match="at gantry 254 .its readings there are at 74, 106."):
        of_fields(("east wall", 74.0, 0.3), ("east wall", 106.0, 0.3))


DOWN = Table.of(("field", "gantry_deg"), [("down", 0.0)])


def test_one_vertical_field_has_all_x_rays_and_all_mu():
    """Its readings over the week give the added dose back; 359.5 degrees is straight down too."""
    table = predict(spot="down", fields=DOWN, own_field_share=None)
    expected = LINES["added x rays"] * PER_H + LINES["added leakage"] * PER_H
    assert expected == pytest.approx(reading(table, "down", "empty"))
    assert {""} == set(table.column("remark"))
    (net,) = of_fields(("east wall", 359.5, expected + 0.1), fields=DOWN)
    week = weekly_dose_from_survey(
        readings_usv_per_h=(net,), mu_per_week=80000.0, rate_mu_per_min=1000.0, occupancy=0.2
    )
    assert 0.2 * (LINES["added x rays"] + LINES["added leakage"]) == pytest.approx(week)


def test_impossible():
    """Unknown words and impossible numbers are refused."""
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
    with pytest.raises(ValueError, match="readings and MU must not"):
        weekly_dose_from_survey(
            readings_usv_per_h=(-1.0, 0.0), mu_per_week=1.0, rate_mu_per_min=1.0, occupancy=1.0
        )
    with pytest.raises(ValueError, match="MU rate and occupancy"):
        weekly_dose_from_survey(
            readings_usv_per_h=(1.0, 0.0), mu_per_week=1.0, rate_mu_per_min=1.0, occupancy=0.0
        )
