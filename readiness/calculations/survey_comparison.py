"""Readings to expect from a survey in the mode, and how a filled survey compares with them."""

from dataclasses import dataclass
from math import isfinite
from typing import cast

from readiness.errors import OutsideValidity
from readiness.quantities import Scalar, Table

PREDICTED_COLUMNS = ("barrier", "gantry_deg", "field", "patient", "predicted_usv_per_h", "remark")
COMPARED_COLUMNS = (
    "barrier",
    "gantry_deg",
    "patient",
    "predicted_usv_per_h",
    "measured_usv_per_h",
    "measured_over_predicted",
)
SAME_GANTRY_DEG = 1.0
SCATTER_OF_METER_RATIO = 0.8  # practice: a reading below this part of the background has lost it already


@dataclass(frozen=True)
class SurveyComparison:
    """How a filled survey stands to what was predicted; ratios are measured / predicted."""

    compared_readings: int
    largest_ratio: float | None
    largest_reading_usv_per_h: float | None
    worst_barrier: str
    missing: tuple[str, ...]
    not_predicted: tuple[str, ...]
    rows: Table


def predicted_readings(
    *,
    barrier: str,
    contributions: Table,
    occupancy: float,
    spot: str,
    fields: Table,
    own_field_share: float | None,
    mu_per_week: float,
    rate_mu_per_min: float,
) -> Table:
    """
    Return the readings to expect behind one barrier: each field, patient's place empty and occupied.

    Rate = weekly contribution without occupancy / MU of the week x MU an hour. The x rays of a spot come by
    its own field in the share x(0)/(x(0) + x(2t)) and by the other one in the rest, each in half of the MU;
    those of a field that has no other one, such as a vertical one, come by it alone.

    Args:
        barrier: Name of the barrier.
        contributions: As ``weekly_dose`` gives them.
        occupancy: The occupancy that they count. [1]
        spot: Field whose axis meets the barrier, ``both`` or ``neither``.
        fields: Each field and its gantry_deg: the pair, or a vertical one alone; they share the MU equally.
        own_field_share: x(0)/(x(0) + x(2t)); None, if only a fraction is known, counts all x rays for either
            field of a pair, an upper bound. [1]
        mu_per_week: All MU that the contributions are of. [MU/week]
        rate_mu_per_min: Of the mode. [MU/min]

    Returns:
        Two rows a field: barrier, gantry, field, patient (empty, occupied), reading, remark.

    Raises:
        ValueError: If a number or word is outside its meaning.

    Assumes: patient scatter only with the patient's place occupied; no shielding by the patient.
    Source: derived.
    """
    aimed = _gantries(fields)
    spots = (*aimed, "both", "neither")
    if spot not in spots:
        raise ValueError(f"a spot is one of {', '.join(spots)}, not {spot!r}")
    if not (0.0 < occupancy <= 1.0 and mu_per_week > 0.0 and rate_mu_per_min > 0.0):
        raise ValueError("occupancy, MU of the week and their rate must be above zero")
    if own_field_share is not None and not 0.0 <= own_field_share <= 1.0:
        raise ValueError(f"a share lies from 0 to 1, not {own_field_share:g}")
    per_h = rate_mu_per_min * 60.0 / mu_per_week / occupancy
    rates = {"primary": 0.0, "leakage": 0.0, "scatter": 0.0}
    for row in contributions.records():
        if row["added"]:
            rates[str(row["radiation"])] += cast(float, row["dose_usv_per_week"]) * per_h
    rows: list[tuple[Scalar, ...]] = []
    bounded = own_field_share is None and len(aimed) > 1 and rates["primary"] > 0.0
    for field, gantry in aimed.items():
        share = 1.0 if len(aimed) == 1 else _share(spot, field, own_field_share)
        xrays = len(aimed) * share * rates["primary"]
        remark = "upper bound" if bounded else ""
        for patient in ("empty", "occupied"):
            scatter = rates["scatter"] if patient == "occupied" else 0.0
            rows.append((barrier, gantry, field, patient, xrays + rates["leakage"] + scatter, remark))
    return Table.of(PREDICTED_COLUMNS, rows)


def compare_survey(
    *,
    predicted: Table,
    predicted_at_mu_per_min: float,
    measured: Table,
    measured_at_mu_per_min: float,
    background_usv_per_h: float,
    patient: str,
) -> SurveyComparison:
    """
    Return how a filled survey compares with the predicted readings.

    Args:
        predicted: Rows of ``predicted_readings`` for all barriers.
        predicted_at_mu_per_min: MU rate for which they were predicted. [MU/min]
        measured: barrier, gantry_deg, reading_usv_per_h with background.
        measured_at_mu_per_min: MU rate during the readings; predictions are brought to it. [MU/min]
        background_usv_per_h: Reading without beam. [µSv/h]
        patient: Whether the patient's place was ``empty`` or ``occupied``.

    Returns:
        The pairs, the largest ratio and reading, what was not measured, and what had not been predicted.

    Raises:
        ValueError: If a word or number is outside its meaning.
        OutsideValidity: If a reading lies clearly below the background that it must contain.

    Assumes: gantry angles within 1 degree are the same; of several readings of a place the highest counts; a
        reading barely below the background counts as zero.
    Source: derived.
    """
    if patient not in ("empty", "occupied"):
        raise ValueError(f"the patient's place is empty or occupied, not {patient!r}")
    if not (isfinite(background_usv_per_h) and background_usv_per_h >= 0.0):
        raise ValueError(f"a background must not be below zero, not {background_usv_per_h:g}")
    if not (predicted_at_mu_per_min > 0.0 and measured_at_mu_per_min > 0.0):
        raise ValueError("an MU rate must be above zero")
    scale = measured_at_mu_per_min / predicted_at_mu_per_min
    wanted = [row for row in predicted.records() if row["patient"] == patient]
    left = list(measured.records())
    rows: list[tuple[Scalar, ...]] = []
    missing: list[str] = []
    for row in wanted:
        gantry = float(cast(float, row["gantry_deg"]))
        here = [
            each
            for each in left
            if each["barrier"] == row["barrier"] and same_gantry(row=each, gantry_deg=gantry)
        ]
        place = f"{row['barrier']} at gantry {gantry:g}"
        if not here:
            missing.append(place)
            continue
        left = [each for each in left if each not in here]
        net = _highest_net(here, background_usv_per_h, place)
        expected = float(cast(float, row["predicted_usv_per_h"])) * scale
        ratio = net / expected if expected > 0.0 else None
        rows.append((row["barrier"], gantry, patient, expected, net, ratio))
    extra = tuple(f"{row['barrier']} at gantry {row['gantry_deg']}" for row in left)
    ratios = [(cast(float, row[5]), str(row[0])) for row in rows if row[5] is not None]
    largest = max(ratios, key=lambda each: each[0], default=None)
    return SurveyComparison(
        compared_readings=len(rows),
        largest_ratio=None if largest is None else largest[0],
        largest_reading_usv_per_h=max((cast(float, row[4]) for row in rows), default=None),
        worst_barrier="" if largest is None else largest[1],
        missing=tuple(missing),
        not_predicted=extra,
        rows=Table.of(COMPARED_COLUMNS, rows),
    )


def readings_of_fields(
    *,
    measured: Table,
    barrier: str,
    background_usv_per_h: float,
    fields: Table,
) -> tuple[float, ...]:
    """
    Return the net readings behind one barrier with each field on, the highest where several were taken.

    Args:
        measured: barrier, gantry_deg, reading_usv_per_h with background.
        barrier: Name of the barrier.
        background_usv_per_h: Reading without beam. [µSv/h]
        fields: Each field and its gantry_deg.

    Returns:
        One for each field. [µSv/h]

    Raises:
        OutsideValidity: If a field has no reading, or one clearly below the background that it must contain.

    Assumes: gantry angles within 1 degree are the same; a reading barely below the background counts as zero.
    Source: derived.
    """
    found = []
    behind = [row for row in measured.records() if row["barrier"] == barrier]
    for gantry in _gantries(fields).values():
        place = f"{barrier} at gantry {gantry:g}"
        here = [row for row in behind if same_gantry(row=row, gantry_deg=gantry)]
        if not here:
            raise OutsideValidity(f"the survey has no reading of {place}{_angles_read(behind)}")
        found.append(_highest_net(here, background_usv_per_h, place))
    return tuple(found)


def weekly_dose_from_survey(
    *,
    readings_usv_per_h: tuple[float, ...],
    mu_per_week: float,
    rate_mu_per_min: float,
    occupancy: float,
) -> float:
    """
    Return the weekly dose that the added program gives according to a survey.

    H = T x mean of the readings of all fields x MU of the week / MU an hour

    Args:
        readings_usv_per_h: Net reading with each field; all give as many MU. [µSv/h]
        mu_per_week: All MU of the week. [MU/week]
        rate_mu_per_min: During the readings. [MU/min]
        occupancy: Part of the time that a person is there, T. [1]

    Returns:
        Weekly dose. [µSv/week]

    Raises:
        ValueError: If a number is outside its meaning.

    Source: derived.
    """
    if not (readings_usv_per_h and min(readings_usv_per_h) >= 0.0 and mu_per_week >= 0.0):
        raise ValueError("there must be a reading, and readings and MU must not be below zero")
    if not (rate_mu_per_min > 0.0 and 0.0 < occupancy <= 1.0):
        raise ValueError("MU rate and occupancy must be above zero, the occupancy at most 1")
    hours = mu_per_week / (rate_mu_per_min * 60.0)
    return occupancy * sum(readings_usv_per_h) / len(readings_usv_per_h) * hours


def same_gantry(*, row: dict[str, Scalar], gantry_deg: float) -> bool:
    """
    Return whether a reading was taken at a gantry angle, within a degree and across 360.

    Args:
        row: A reading with its gantry_deg.
        gantry_deg: Gantry angle. [deg]

    Returns:
        Yes or no.

    Assumes: scales read to a degree.
    Source: practice.
    """
    apart = (float(cast(float, row["gantry_deg"])) - gantry_deg + 180.0) % 360.0 - 180.0
    return abs(apart) <= SAME_GANTRY_DEG


def _gantries(fields: Table) -> dict[str, float]:
    """Return the gantry angle of each field."""
    return {str(row["field"]): float(cast(float, row["gantry_deg"])) for row in fields.records()}


def _share(spot: str, field: str, own_field_share: float | None) -> float:
    """Return which part of the x rays of a spot comes while one field is on; half of the MU belong to it."""
    if own_field_share is None:
        return 1.0
    if spot in ("both", "neither"):
        return 0.5
    return own_field_share if spot == field else 1.0 - own_field_share


def _highest_net(here: list[dict[str, Scalar]], background_usv_per_h: float, place: str) -> float:
    """Return the highest of the readings of a place without the background; refuse one that has lost it."""
    readings = [float(cast(float, row["reading_usv_per_h"])) for row in here]
    if min(readings) < SCATTER_OF_METER_RATIO * background_usv_per_h:
        raise OutsideValidity(
            f"the reading of {place} is {min(readings):g} µSv/h, less than the {background_usv_per_h:g} µSv/h"
            " without beam; was the background taken off already? Readings are written with it"
        )
    return max(0.0, max(readings) - background_usv_per_h)


def _angles_read(behind: list[dict[str, Scalar]]) -> str:
    """Return the gantry angles of readings, in words to add to a sentence; nothing without any."""
    angles = sorted({float(cast(float, row["gantry_deg"])) for row in behind})
    return f" (its readings there are at {', '.join(f'{each:g}' for each in angles)})" if angles else ""
