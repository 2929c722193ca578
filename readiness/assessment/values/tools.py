"""Instruments and phantoms: which calibrations hold today, how long they were given for, what is at hand."""

from collections.abc import Callable, Collection
from datetime import date, timedelta

from readiness.assessment.definition import Definition, derived
from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table

CHAMBERS = ("cylindrical-chamber", "plane-parallel-chamber")
# what must be in calibration -> types that will do
NEEDED = {
    "ionisation chamber": CHAMBERS,
    "electrometer": ("electrometer",),
    "survey meter": ("survey-meter",),
    "barometer": ("barometer", "barometer-with-thermometer"),
    "thermometer": ("thermometer", "barometer-with-thermometer"),
}  # fmt: skip
AS_BUILT = {
    "distance meter": ("distance-meter",),
    "inclinometer": ("inclinometer",),
    "thickness gauge": ("thickness-gauge",),
}  # fmt: skip
NOTHING = "nothing"
YEARLY = ("survey-meter", "barometer", "thermometer", "barometer-with-thermometer")
PHANTOMS = {
    "cylinders": ("cylinders", ("cylinder",)),
    "anthropomorphic_phantoms": ("anthropomorphic phantoms", ("anthropomorphic",)),
}  # fmt: skip
LUMINESCENT, DELAYED = ("osld", "tld"), ("film", "osld", "tld")
IN_VIVO = ("film", "osld", "tld", "diode", "mosfet")


def holds_today(*, calibrated_on: date, calibration_due_on: date, as_of_date: date) -> bool:
    """Return whether a calibration holds."""
    return calibrated_on <= as_of_date <= calibration_due_on


def periods_of_calibration(
    *, calibrated_on: date | None, calibration_due_on: date | None, earlier: Table
) -> Table:
    """Return the last calibration and the earlier ones: calibrated on, holds until."""
    return Table(("calibrated_on", "holds_until"), ((calibrated_on, calibration_due_on), *earlier.rows))  # type: ignore[arg-type]


def given_for(*, calibrated_on: date, calibration_due_on: date) -> int:
    """Return for how many days a calibration was given."""
    return (calibration_due_on - calibrated_on).days


def due_soon(*, calibration_due_on: date, as_of_date: date, notice_days: float) -> bool:
    """Return whether a calibration that holds today runs out within the notice."""
    return as_of_date <= calibration_due_on <= as_of_date + timedelta(days=notice_days)


def chambers_in_calibration(*, instruments: Table, as_of_date: date) -> int:
    """Return how many ionisation chambers are in calibration; one without dates is not."""
    return sum(row["type"] in CHAMBERS and _holds(row, as_of_date) for row in instruments.records())


def without_calibration(*, instruments: Table, as_of_date: date) -> str:
    """Return the kinds of instrument of which none is in calibration."""
    good = {row["type"] for row in instruments.records() if _holds(row, as_of_date)}
    return ", ".join(kind for kind, types in NEEDED.items() if not good & set(types)) or NOTHING


def as_built_missing(*, instruments: Table) -> str:
    """Return the instruments for an as-built record that are not listed."""
    listed = {row["type"] for row in instruments.records()}
    return ", ".join(kind for kind, types in AS_BUILT.items() if not listed & set(types)) or NOTHING


def _holds(row: dict[str, Scalar], as_of_date: date) -> bool:
    since, until = row["calibrated_on"], row["calibration_due_on"]
    return isinstance(since, date) and isinstance(until, date) and since <= as_of_date <= until


def in_vivo_detector_types(*, instruments: Table) -> int:
    """Return with how many kinds of detector dose on the skin can be measured."""
    return len({row["type"] for row in instruments.records()} & set(IN_VIVO))


def not_characterised(
    *, type_word: str, response_checked: bool, individual_factors: bool | None, readout_delay_h: float | None
) -> str:
    """Return what of a detector for the skin is not characterised; its kind decides what is asked."""
    if type_word in LUMINESCENT and individual_factors is None:
        raise OutsideValidity("state whether each of these detectors has its own factor")
    if type_word in DELAYED and readout_delay_h is None:
        raise OutsideValidity("state the fixed time from irradiation to read-out")
    found = {
        "response in the mode, at the plane and at oblique incidence against a chamber": response_checked,
        "a factor for each detector": type_word not in LUMINESCENT or individual_factors is True,
    }
    return ", ".join(words for words, there in found.items() if not there) or NOTHING


def longest_interval(
    *, type_word: str, purpose: str | None, reference_days: float, yearly_days: float
) -> float | None:
    """Return for how long a calibration may be given; None for what has no such interval."""
    if type_word in (*CHAMBERS, "electrometer"):
        return reference_days if purpose == "reference" else None
    return yearly_days if type_word in YEARLY else None


def has_interval(*, type_word: str, purpose: str | None) -> bool:
    """Return whether there is a longest time between calibrations of an instrument."""
    return type_word in YEARLY or (type_word in (*CHAMBERS, "electrometer") and purpose == "reference")


def phantoms_missing(*, phantoms: Table, usual_cm: float, agreement_cm: float) -> str:
    """Return which phantoms the department has not: a cylinder of a trunk's size, a body with its shape."""
    owned = [row for row in phantoms.records() if row["owned"] is True]
    cylinder = any(
        row["type"] == "cylinder"
        and isinstance(row["diameter_cm"], (int, float))
        and abs(row["diameter_cm"] - usual_cm) <= agreement_cm
        for row in owned
    )
    body = any(row["type"] == "anthropomorphic" for row in owned)
    found = {f"a cylinder of about {usual_cm:g} cm": cylinder, "an anthropomorphic phantom": body}
    return ", ".join(words for words, there in found.items() if not there) or NOTHING


def off_usual(*, diameter_cm: float, usual_cm: float) -> float:
    """Return how far the diameter of a cylinder is from the usual one."""
    return abs(diameter_cm - usual_cm)


def _owned(types: Collection[str]) -> Callable[..., int]:
    def count(*, phantoms: Table) -> int:
        """Return how many of them the department has."""
        return sum(row["type"] in types and row["owned"] is True for row in phantoms.records())

    return count


_DATES = {
    "calibrated_on": "instrument.calibrated_on",
    "calibration_due_on": "instrument.calibration_due_on",
}
_DATED = "rows instrument: type calibrated_on? calibration_due_on?"
_TODAY = {"as_of_date": "program.as_of_date"}

DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "instrument.calibration_periods",
        "Its last calibration and the earlier ones that are listed.",
        by=periods_of_calibration,
        takes={
            "calibrated_on": "instrument.calibrated_on?",
            "calibration_due_on": "instrument.calibration_due_on?",
            "earlier": "rows? earlier_calibration: calibrated_on? calibration_due_on?",
        },
        internal=True,
        source="definition",
        known="derived",
    ),
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
    derived(
        "program.chambers_in_calibration",
        "Number of ionisation chambers whose calibration holds today.",
        chambers_in_calibration,
        {"instruments": _DATED, **_TODAY},
    ),
    derived(
        "program.instruments_without_calibration",
        "Kinds of instrument of which none is in calibration today.",
        without_calibration,
        {"instruments": _DATED, **_TODAY},
    ),
    derived(
        "program.as_built_instruments_missing",
        "Instruments for an as-built record that are not listed.",
        as_built_missing,
        {"instruments": "rows instrument: type"},
    ),
    derived(
        "program.in_vivo_detector_types",
        "Number of kinds of detector with which dose on the skin can be measured.",
        in_vivo_detector_types,
        {"instruments": "rows instrument: type"},
    ),
    derived(
        "instrument.not_characterised",
        "What of a detector for the skin is not characterised.",
        not_characterised,
        {
            "type_word": "instrument.type",
            "response_checked": "instrument.response_checked",
            "individual_factors": "instrument.individual_factors?",
            "readout_delay_h": "instrument.readout_delay_h?",
        },
    ),
    derived(
        "instrument.has_calibration_interval",
        "There is a longest time between calibrations of such an instrument.",
        has_interval,
        {"type_word": "instrument.type", "purpose": "instrument.purpose?"},
    ),
    derived(
        "instrument.longest_interval_days",
        "Longest time between calibrations of such an instrument.",
        longest_interval,
        {
            "type_word": "instrument.type",
            "purpose": "instrument.purpose?",
            "reference_days": "criterion.reference_calibration_interval_days",
            "yearly_days": "criterion.yearly_calibration_interval_days",
        },
    ),
    derived(
        "program.phantoms_missing",
        "Phantoms that the department has not: a cylinder of a trunk's size and a body.",
        phantoms_missing,
        {
            "phantoms": "rows phantom: type owned diameter_cm?",
            "usual_cm": "criterion.cylinder_diameter_cm",
            "agreement_cm": "criterion.cylinder_agreement_cm",
        },
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
