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


def has_tolerance(
    *, tolerance_percent: float | None, tolerance_mm: float | None, tolerance_deg: float | None
) -> bool:
    """Return whether a test has a tolerance in any unit."""
    return any(each is not None for each in (tolerance_percent, tolerance_mm, tolerance_deg))


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
        "periodic_test.has_tolerance",
        "It has a tolerance.",
        has_tolerance,
        {
            "tolerance_percent": "periodic_test.tolerance_percent?",
            "tolerance_mm": "periodic_test.tolerance_mm?",
            "tolerance_deg": "periodic_test.tolerance_deg?",
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
