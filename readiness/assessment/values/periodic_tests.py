"""Periodic tests: what is tested how often, and whether a test is complete and done in time."""

from collections.abc import Callable
from datetime import date

from readiness.assessment.definition import Definition, derived
from readiness.errors import OutsideValidity
from readiness.quantities import Table

FREQUENCIES = {
    "treatment-day": "each treatment day", "month": "every month", "year": "every year",
    "after-change": "after a change",
}  # fmt: skip


# tests for which guidance or practice gives a tolerance, and its unit
TOLERANCES = {
    ("output", "treatment-day"): "%", ("distance", "treatment-day"): "mm",
    ("output", "month"): "%", ("monitor", "month"): "%", ("profile", "month"): "%", ("energy", "month"): "mm",
    ("output", "year"): "%", ("energy", "year"): "mm", ("stand", "year"): "°", ("degrader", "year"): "mm",
}  # fmt: skip
FUNCTIONAL = ("safety", "audio-visual", "after-change")  # work or do not work: no baseline, no tolerance
NOTHING = "nothing"


def has_tolerance(
    *, tolerance_percent: float | None, tolerance_mm: float | None, tolerance_deg: float | None
) -> bool:
    """Return whether a test has a tolerance in any unit."""
    return any(each is not None for each in (tolerance_percent, tolerance_mm, tolerance_deg))


def particulars_missing(
    *, quantity: str, baseline: str | None, baseline_on: date | None, tolerance_percent: float | None,
    tolerance_mm: float | None, tolerance_deg: float | None, action_level: str | None,
    release_role: str | None, as_of_date: date,
) -> str:  # fmt: skip
    """Return what is not entered for a test: baseline, tolerance where it measures, action, release."""
    toleranced = has_tolerance(
        tolerance_percent=tolerance_percent, tolerance_mm=tolerance_mm, tolerance_deg=tolerance_deg
    )
    found = {
        "baseline": bool(baseline) or quantity in FUNCTIONAL,
        "date of the baseline": quantity in FUNCTIONAL
        or (baseline_on is not None and baseline_on <= as_of_date),
        "tolerance": toleranced or quantity in FUNCTIONAL,
        "what is done beyond it": bool(action_level),
        "who may release": bool(release_role),
    }
    return ", ".join(words for words, there in found.items() if not there) or NOTHING


def tolerance_is_known(*, quantity: str, frequency: str) -> bool:
    """Return whether guidance or practice gives a tolerance for such a test."""
    return (quantity, frequency) in TOLERANCES


def tolerance_over_expected(
    *, quantity: str, frequency: str, tolerance_percent: float | None, tolerance_mm: float | None,
    tolerance_deg: float | None, daily_output_percent: float, monthly_output_percent: float,
    monthly_profile_percent: float, monthly_energy_mm: float, yearly_output_percent: float,
    yearly_depth_mm: float, daily_distance_cm: float, index_deg: float, thickness_mm: float,
) -> float:  # fmt: skip
    """Return a test's tolerance over the one that is expected of such a test."""
    expected = {
        ("output", "treatment-day"): daily_output_percent,
        ("distance", "treatment-day"): 10 * daily_distance_cm,
        ("output", "month"): monthly_output_percent,
        ("monitor", "month"): monthly_output_percent,
        ("profile", "month"): monthly_profile_percent,
        ("energy", "month"): monthly_energy_mm,
        ("output", "year"): yearly_output_percent,
        ("energy", "year"): yearly_depth_mm,
        ("stand", "year"): index_deg,
        ("degrader", "year"): thickness_mm,
    }
    unit = TOLERANCES.get((quantity, frequency))
    if unit is None:
        raise OutsideValidity("no tolerance is known for such a test")
    stated = {"%": tolerance_percent, "mm": tolerance_mm, "°": tolerance_deg}[unit]
    if stated is None:
        raise OutsideValidity(f"state its tolerance in {unit}")
    return stated / expected[quantity, frequency]


def done_in_time(
    *, frequency: str, last_done_on: date, as_of_date: date, month_days: float, year_days: float
) -> bool:
    """Return whether a monthly or yearly test was done within its interval."""
    longest = {"month": month_days, "year": year_days}.get(frequency)
    if longest is None:
        raise OutsideValidity("only monthly and yearly tests have an interval")
    return 0 <= (as_of_date - last_done_on).days <= longest


def days_since_audit(*, external_audit_on: date, as_of_date: date) -> int:
    """Return the days since the external audit."""
    return (as_of_date - external_audit_on).days


def departure(*, external_audit_percent: float) -> float:
    """Return how far the audited output departs from the stated one, either way."""
    return abs(external_audit_percent)


def days_since_patient(*, last_patient_on: date, as_of_date: date) -> int:
    """Return the days since the last total skin session."""
    return (as_of_date - last_patient_on).days


def _tested(frequency: str, *, mode_only: bool) -> Callable[..., tuple[str, ...]]:
    def quantities(*, tests: Table) -> tuple[str, ...]:
        """Return what is tested at a frequency, in order of the alphabet."""
        found = {
            str(row["quantity"])
            for row in tests.records()
            if row["frequency"] == frequency and (not mode_only or row["in_mode"] is True)
        }
        return tuple(sorted(found))

    return quantities


def _words(frequency: str) -> str:
    return frequency.replace("-", "_")


_TESTS = "rows periodic_test: quantity frequency in_mode"
_TODAY = {"as_of_date": "program.as_of_date"}
_TEST = {"quantity": "periodic_test.quantity", "frequency": "periodic_test.frequency"}
_TOLERANCE = {
    "tolerance_percent": "periodic_test.tolerance_percent?",
    "tolerance_mm": "periodic_test.tolerance_mm?",
    "tolerance_deg": "periodic_test.tolerance_deg?",
}

DEFINITIONS: tuple[Definition, ...] = (
    *(
        derived(
            f"program.{_words(frequency)}_tests",
            f"What is tested {words}.",
            _tested(frequency, mode_only=False),
            {"tests": "rows periodic_test: quantity frequency"},
        )
        for frequency, words in FREQUENCIES.items()
    ),
    *(
        derived(
            f"program.{_words(frequency)}_tests_in_mode",
            f"What is tested {words} in the treatment mode and geometry.",
            _tested(frequency, mode_only=True),
            {"tests": _TESTS},
        )
        for frequency, words in FREQUENCIES.items()
    ),
    derived(
        "periodic_test.particulars_missing",
        "What is not entered: baseline with its date, tolerance, action, release.",
        particulars_missing,
        {
            "quantity": "periodic_test.quantity",
            "baseline": "periodic_test.baseline?",
            "baseline_on": "periodic_test.baseline_on?",
            **_TOLERANCE,
            "action_level": "periodic_test.action_level?",
            "release_role": "periodic_test.release_role?",
            **_TODAY,
        },
    ),
    derived(
        "periodic_test.tolerance_is_known",
        "Guidance or practice gives a tolerance for such a test.",
        tolerance_is_known,
        _TEST,
    ),
    derived(
        "periodic_test.tolerance_ratio",
        "Its tolerance over the one that is expected of such a test.",
        tolerance_over_expected,
        {
            **_TEST,
            **_TOLERANCE,
            "daily_output_percent": "criterion.daily_output_percent",
            "monthly_output_percent": "criterion.monthly_output_percent",
            "monthly_profile_percent": "criterion.monthly_profile_percent",
            "monthly_energy_mm": "criterion.monthly_energy_mm",
            "yearly_output_percent": "criterion.yearly_output_percent",
            "yearly_depth_mm": "criterion.yearly_depth_mm",
            "daily_distance_cm": "criterion.daily_distance_cm",
            "index_deg": "criterion.index_tolerance_deg",
            "thickness_mm": "criterion.thickness_agreement_mm",
        },
    ),
    derived(
        "periodic_test.done_in_time",
        "It was last done within its month or year.",
        done_in_time,
        {
            "frequency": "periodic_test.frequency",
            "last_done_on": "periodic_test.last_done_on",
            "month_days": "criterion.month_interval_days",
            "year_days": "criterion.yearly_interval_days",
            **_TODAY,
        },
    ),
    derived(
        "reference_dosimetry.days_since_audit_days",
        "Days since the last external audit of the reference output.",
        days_since_audit,
        {"external_audit_on": "reference_dosimetry.external_audit_on", **_TODAY},
    ),
    derived(
        "reference_dosimetry.audit_departure_percent",
        "Departure found by the external audit, either way.",
        departure,
        {"external_audit_percent": "reference_dosimetry.external_audit_percent"},
    ),
    derived(
        "program.days_since_patient_days",
        "Days since the last total skin session.",
        days_since_patient,
        {"last_patient_on": "program.last_patient_on", **_TODAY},
    ),
)
