"""The in-vivo plan in detectors, read-outs and hours, and the table of sites."""

from pathlib import Path

import pytest
import yaml

from readiness.calculations.in_vivo_plan import InVivoPlan, in_vivo_plan
from readiness.calculations.in_vivo_sites import in_vivo_sites
from readiness.resources import schema_file

SITES = tuple(in_vivo_sites())


def planned(**changed: object) -> InVivoPlan:
    """Return the plan of 8 patients a year, all sites once, three at the prescription level, 60 detectors."""
    stated: dict[str, object] = {
        "sites": SITES,
        "readings_per_site": 1,
        "readings_at_prescription_level": 3,
        "sessions_per_cycle": 2,
        "measured_cycles_per_patient": 1,
        "patients_per_year": 8,
        "patients_measured_at_once": 1,
        "control_detectors": 3,
        "pieces": 60,
        "read_out_minutes_per_patient_min": 360,
    }
    return in_vivo_plan(**(stated | changed))  # type: ignore[arg-type]


def test_detectors_and_hours_by_hand() -> None:
    """18 sites once and 3 at the umbilicus are 21 points, 42 read-outs a patient, 336 and 48 h a year."""
    plan = planned()
    assert (plan.points_per_patient, plan.readouts_per_patient, plan.readouts_per_year) == (21, 42, 336)
    assert (plan.reader_h_per_patient, plan.reader_h_per_year) == (6, 48)
    assert (plan.stock_needed, plan.stock_short) == (45, 0)
    assert plan.remarks == ()


def test_two_patients_in_the_same_days_need_more_than_60_detectors() -> None:
    """Two patients measured at once need 87 detectors, 27 more than there are."""
    plan = planned(patients_measured_at_once=2)
    assert (plan.stock_needed, plan.stock_short) == (87, 27)


def test_more_sites_take_more() -> None:
    """Two readings at each site take more detectors than one; no patients take no hours."""
    assert planned(readings_per_site=2).stock_needed > planned().stock_needed
    assert planned(patients_per_year=0).reader_h_per_year == 0


@pytest.mark.parametrize(
    ("changed", "remark"),
    [
        ({"sites": ("umbilicus", "chest")}, "4 points for each patient; 20 to 45 are usual"),
        ({"readings_at_prescription_level": 2}, "only from the mean of 3 or more"),
        ({"measured_cycles_per_patient": 0}, "No cycle is measured"),
        ({"sites": (*SITES, "knee")}, "No expected dose is known for: knee"),
        ({"sites": tuple(site for site in SITES if site != "sole")}, "are not measured: sole"),
    ],
)
def test_what_the_plan_lacks_is_said(changed: dict[str, object], remark: str) -> None:
    """A plan with too few points or without the sites that are often low says so."""
    assert remark in " ".join(planned(**changed).remarks)


@pytest.mark.parametrize(
    "changed", [{"sites": ()}, {"sites": ("chest", "chest")}, {"readings_per_site": 0}, {"pieces": -1}]
)
def test_impossible_plan_is_refused(changed: dict[str, object]) -> None:
    """A plan without sites, with a site twice, or with negative numbers does not exist."""
    with pytest.raises(ValueError, match="a plan"):
        planned(**changed)


def test_each_site_says_where_its_range_comes_from() -> None:
    """Each site has a source and how it is known; a range is derived from the figure that was read."""
    for site in in_vivo_sites().values():
        assert site.source
        assert site.known in {"read", "derived", "practice"}
        if site.expected_low_percent is not None:
            assert site.expected_high_percent is not None
            assert site.expected_low_percent < site.expected_high_percent
            assert site.known == "derived"


@pytest.mark.parametrize("kind", ["in-vivo-readings", "end-to-end"])
def test_files_of_readings_know_the_same_sites(kind: str) -> None:
    """The words for sites in measurement files are those of the table."""
    text = Path(schema_file("measurements", f"{kind}.yaml")).read_text(encoding="utf-8")
    assert tuple(yaml.safe_load(text)["columns"]["site"]["words"]) == SITES
