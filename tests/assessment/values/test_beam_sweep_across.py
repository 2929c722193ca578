"""A sweep measured across the patient is judged against the horizontal limit."""

from readiness.assessment.values.beam_profiles import sweep_across
from readiness.quantities import Table


def test_a_sweep_across_is_judged_at_each_tilt() -> None:
    """Two tilts, one even and one falling by a tenth at 30 cm: half-ranges 0 and 5.3 %."""
    places = (-30.0, -20.0, -10.0, 0.0, 10.0, 20.0, 30.0)
    even = [(14.0, None, 0.0, at, 1.0, None) for at in places]
    falling = [(16.0, None, 0.0, at, 1 - 0.1 * abs(at) / 30, None) for at in places]
    columns = ("tilt_deg", "field", "height_cm", "across_cm", "relative_dose", "relative_dose_sd")
    found = sweep_across(
        kind="angle-sweep", table=Table.of(columns, [*even, *falling]), half_width_cm=30.0, limit_percent=4.0,
        metric="half-range", normalisation="mid-height", smoothing="none",
    )  # fmt: skip
    assert found is not None
    ranges = [row["half_range_percent"] for row in found.tilts.records()]
    assert abs(float(ranges[0] or 0)) < 1e-9
    assert abs(float(ranges[1] or 0) - 100 * 0.1 / 1.9) < 0.05
    assert found.smallest_passing_tilt_deg == 14.0


def test_another_kind_of_measurement_is_none_of_its_business() -> None:
    """A profile is not a sweep."""
    assert sweep_across(
        kind="dual-profile", table=Table((), ()), half_width_cm=30.0, limit_percent=4.0, metric="half-range",
        normalisation="mid-height", smoothing="none",
    ) is None  # fmt: skip
