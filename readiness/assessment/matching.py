"""
Which measurement stands for which item, and why another one does not.

A measurement attaches only when what it was made with agrees with the choices: ids exactly, distance and
gap within 1 cm, tilt within 0.2 degrees, opening and collimator angle, MU ratio; when it is newer than the
last change of room, machine or stand; and when its instrument can measure it and was in calibration that day.
"""

from collections.abc import Callable, Mapping
from datetime import date
from typing import Any

from readiness.assessment.records import Ref, Value
from readiness.program.calibration import calibration_fault
from readiness.program.items import Item, Program
from readiness.program.measurement_kinds import measurement_kind
from readiness.units import printed, unit_of, words_of

# header key -> (value it is compared with, largest difference)
_COMPARED: Mapping[str, tuple[str, float | None]] = {
    "side_deg": ("arrangement.side_deg", 0.0),
    "distance_cm": ("arrangement.plane_distance_cm", 1.0),
    "gap_cm": ("arrangement.degrader_gap_cm", 1.0),
    "tilt_deg": ("arrangement.tilt_deg", 0.2),
    "collimator_opening_cm": ("beam.opening_cm", 0.1),
    "collimator_angle_deg": ("beam.collimator_deg", 0.5),
    "mu_ratio": ("arrangement.mu_ratio", 0.02),
    "technique": ("arrangement.technique", None),
}
_OWNED = ("room", "machine", "beam", "degrader", "stand", "couch", "shield")
_KINDS = {"shield": "patient_shield"}  # header key -> kind, where they differ
_OPTIONAL = ("collimator_opening_cm", "collimator_angle_deg", "mu_ratio", "stand", "couch", "side_deg")

Lookup = Callable[[str, Ref], Any]


def disagreements(
    measurement: Item, owners: Mapping[str, str], item: Ref, get: Lookup, ignores: tuple[str, ...]
) -> tuple[str, ...]:
    """Return, in words, every choice with which a measurement of the right kind does not agree."""
    kind = measurement_kind(str(measurement.get("kind")))
    found: list[str] = []
    for key in kind.agrees_on:
        if key in ignores:
            continue
        found += _disagreement(key, measurement, owners, item, get)
    return tuple(found)


def _disagreement(
    key: str, measurement: Item, owners: Mapping[str, str], item: Ref, get: Lookup
) -> list[str]:
    stated = measurement.get(key)
    if key in _OWNED:
        kind_of = _KINDS.get(key, key)
        if stated is None or kind_of not in owners:
            return []
        wanted = owners[kind_of]
        given = measurement.owners.get(kind_of, str(stated))
        return (
            [] if given == wanted else [f"measured with {key} {_short(given)}, the plan is {_short(wanted)}"]
        )
    if key == "mode":
        return _other_mode(stated, item, owners, get)
    if key not in _COMPARED or stated is None:
        return []
    name, allowed = _COMPARED[key]
    if name.partition(".")[0] not in {item.kind, *owners}:
        return []
    value = get(name, item)
    if not isinstance(value, Value):
        if key == "tilt_deg" and stated == 0 and measurement.get("side_deg") == 0:
            return []  # a vertical beam has no tilt to state
        return [] if key in _OPTIONAL else [f"the plan states no {words_of(key)} to compare with"]
    if allowed is None:
        return [] if value.value == stated else [f"measured as {stated}, the plan is {value.value}"]
    if abs(float(value.value) - float(stated)) <= allowed + 1e-9:  # type: ignore[arg-type]
        return []
    unit = unit_of(key)
    return [
        f"measured at {words_of(key)} {printed(float(stated))} {unit},"  # type: ignore[arg-type]
        f" the plan is {printed(float(value.value))} {unit}"
    ]


def _other_mode(stated: object, item: Ref, owners: Mapping[str, str], get: Lookup) -> list[str]:
    """Return that a measurement was made in another mode than the one that the beam is."""
    value = get("beam.high_rate", item) if "beam" in {item.kind, *owners} else None
    if stated is None or not isinstance(value, Value):
        return []
    planned = "high-rate" if value.value else "ordinary"
    return (
        []
        if stated == planned
        else [f"measured in the {stated} mode, not in the {planned} mode of this beam"]
    )


def _short(item_id: str) -> str:
    return item_id.rpartition("/")[2]


def required_header(kind: str) -> tuple[str, ...]:
    """Return the header keys that a measurement file of a kind must have."""
    return tuple(key for key, field in measurement_kind(kind).header.items() if field.required)


def void(measurement: Item, program: Program, as_of: date) -> str:
    """Return why a measurement does not count at all on a day, or "" if it does."""
    done = measurement.get("date")
    if not isinstance(done, date):
        return "it has no date"
    if done > as_of:
        return f"it is dated {done}, later than {as_of}"
    instrument = program.find("instrument", measurement.owners.get("instrument", ""))
    if instrument is not None:
        types, given = measurement_kind(str(measurement.get("kind"))).instruments, instrument.get("type")
        if types and given is not None and given not in types:
            return f"instrument {instrument.id} is of type {given}, not {' or '.join(types)}"
        reason = calibration_fault(instrument, program, done)
        if reason:
            return reason
    for kind in ("room", "machine", "stand"):
        part = program.find(kind, measurement.owners.get(kind, ""))
        changed = part.get("changed_on") if part else None
        if isinstance(changed, date) and changed > done:
            return f"the {kind} was changed on {changed}, after the measurement of {done}"
    return _outdated(measurement, program, done)


def _outdated(measurement: Item, program: Program, done: date) -> str:
    for name in measurement_kind(str(measurement.get("kind"))).outdated_by:
        kind, _, field = name.partition(".")
        section = program.find(kind, kind)
        changed = section.get(field) if section else None
        if isinstance(changed, date) and changed > done:
            return f"{words_of(name)} {changed} is later than the measurement of {done}"
    return ""
