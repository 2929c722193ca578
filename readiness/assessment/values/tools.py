"""Instruments and phantoms: which calibrations hold today, how long they were given for, what is at hand."""

from collections.abc import Callable, Collection
from datetime import date, timedelta

from readiness.assessment.definition import Definition, derived
from readiness.quantities import Scalar, Table

# counted together -> types that count
IN_CALIBRATION = {
    "reference_chambers": (
        "ionisation chambers for reference dosimetry", ("cylindrical-chamber", "plane-parallel-chamber"),
    ),
    "electrometers": ("electrometers", ("electrometer",)),
    "survey_meters": ("survey meters", ("survey-meter",)),
    "barometers": ("barometers", ("barometer", "barometer-with-thermometer")),
    "thermometers": ("thermometers", ("thermometer", "barometer-with-thermometer")),
    "readers": ("readers and scanners of detectors", ("osld-reader", "tld-reader", "film-scanner")),
}  # fmt: skip
AT_HAND = {
    "distance_meters": ("distance meters", ("distance-meter",)),
    "inclinometers": ("inclinometers", ("inclinometer",)),
    "thickness_gauges": ("thickness gauges", ("thickness-gauge",)),
}  # fmt: skip
PHANTOMS = {
    "cylinders": ("cylinders", ("cylinder",)),
    "anthropomorphic_phantoms": ("anthropomorphic phantoms", ("anthropomorphic",)),
    "water_phantoms": ("water tanks and slab phantoms", ("water-tank", "slab")),
}  # fmt: skip
IN_VIVO = ("film", "osld", "tld", "diode", "mosfet")


def holds_today(*, calibrated_on: date, calibration_due_on: date, as_of_date: date) -> bool:
    """Return whether a calibration holds."""
    return calibrated_on <= as_of_date <= calibration_due_on


def given_for(*, calibrated_on: date, calibration_due_on: date) -> int:
    """Return for how many days a calibration was given."""
    return (calibration_due_on - calibrated_on).days


def due_soon(*, calibration_due_on: date, as_of_date: date, notice_days: float) -> bool:
    """Return whether a calibration that holds today runs out within the notice."""
    return as_of_date <= calibration_due_on <= as_of_date + timedelta(days=notice_days)


def in_calibration(*, instruments: Table, types: Collection[str], as_of_date: date) -> int:
    """Return how many instruments of some types are in calibration; one without dates is not."""
    return sum(
        row["type"] in types and _holds(row, as_of_date) for row in instruments.records()
    )


def _holds(row: dict[str, Scalar], as_of_date: date) -> bool:
    since, until = row["calibrated_on"], row["calibration_due_on"]
    return isinstance(since, date) and isinstance(until, date) and since <= as_of_date <= until


def in_vivo_detector_types(*, instruments: Table) -> int:
    """Return with how many kinds of detector dose on the skin can be measured."""
    return len({row["type"] for row in instruments.records()} & set(IN_VIVO))


def off_usual(*, diameter_cm: float, usual_cm: float) -> float:
    """Return how far the diameter of a cylinder is from the usual one."""
    return abs(diameter_cm - usual_cm)


def _calibrated(types: Collection[str]) -> Callable[..., int]:
    def count(*, instruments: Table, as_of_date: date) -> int:
        """Return how many of them are in calibration."""
        return in_calibration(instruments=instruments, types=types, as_of_date=as_of_date)

    return count


def _listed(types: Collection[str]) -> Callable[..., int]:
    def count(*, instruments: Table) -> int:
        """Return how many of them are listed."""
        return sum(row["type"] in types for row in instruments.records())

    return count


def _owned(types: Collection[str]) -> Callable[..., int]:
    def count(*, phantoms: Table) -> int:
        """Return how many of them the department has."""
        return sum(row["type"] in types and row["owned"] is True for row in phantoms.records())

    return count


_DATES = {
    "calibrated_on": "instrument.calibrated_on",
    "calibration_due_on": "instrument.calibration_due_on",
}
_TODAY = {"as_of_date": "program.as_of_date"}

DEFINITIONS: tuple[Definition, ...] = (
    derived(
        "instrument.calibration_holds", "Its calibration holds today.", holds_today, {**_DATES, **_TODAY}
    ),
    derived(
        "instrument.calibration_interval_days", "Days for which its calibration was given.", given_for, _DATES
    ),
    derived(
        "instrument.calibration_due_soon",
        "Its calibration holds today and runs out within the notice.",
        due_soon,
        {
            "calibration_due_on": "instrument.calibration_due_on",
            "notice_days": "criterion.expiry_notice_days",
            **_TODAY,
        },
    ),
    *(
        derived(
            f"program.{name}_in_calibration",
            f"Number of {words} whose calibration holds today.",
            _calibrated(types),
            {"instruments": "rows instrument: type calibrated_on? calibration_due_on?", **_TODAY},
        )
        for name, (words, types) in IN_CALIBRATION.items()
    ),
    *(
        derived(
            f"program.{name}",
            f"Number of {words} that are listed.",
            _listed(types),
            {"instruments": "rows instrument: type"},
        )
        for name, (words, types) in AT_HAND.items()
    ),
    derived(
        "program.in_vivo_detector_types",
        "Number of kinds of detector with which dose on the skin can be measured.",
        in_vivo_detector_types,
        {"instruments": "rows instrument: type"},
    ),
    *(
        derived(
            f"program.{name}",
            f"Number of {words} that the department has or has the use of.",
            _owned(types),
            {"phantoms": "rows phantom: type owned"},
        )
        for name, (words, types) in PHANTOMS.items()
    ),
    derived(
        "phantom.off_usual_diameter_cm",
        "Difference of its diameter from that for which the usual multiple-field factors hold.",
        off_usual,
        {"diameter_cm": "phantom.diameter_cm", "usual_cm": "criterion.cylinder_diameter_cm"},
    ),
)
