"""Treatment-critical numbers as they were found in the installed set-up, beside what was chosen."""

from collections.abc import Callable
from statistics import mean

from readiness.assessment.definition import Definition, Measured
from readiness.assessment.values.readings import number_or_none
from readiness.errors import OutsideValidity
from readiness.quantities import Table
from readiness.units import words_of

AS_BUILT = "as-built"
MM_PER_CM = 10


def found_mean(table: Table, column: str) -> float:
    """Return the mean of what was found of one number; refuse a record that leaves it out."""
    entries = [number_or_none(entry) for entry in table.column(column)]
    found = [entry for entry in entries if entry is not None]
    if not found:
        raise OutsideValidity(f"the as-built record leaves out the {words_of(column)}")
    return mean(found)


def thickness_found(*, table: Table) -> float:
    """Return the mean thickness of the degrader in cm."""
    return found_mean(table, "degrader_thickness_mm") / MM_PER_CM


def _found(column: str) -> Callable[..., float]:
    def number(*, table: Table) -> float:
        """Return the mean of what was found."""
        return found_mean(table, column)

    return number


def _value(name: str, meaning: str, by: Callable[..., float]) -> Definition:
    """Return one number of the record."""
    return Definition(
        f"arrangement.{name}",
        meaning,
        measured=Measured(AS_BUILT, by=by, takes={"table": "measurement.table"}),
        critical=True,
        source="definition",
        known="derived",
    )


DEFINITIONS: tuple[Definition, ...] = (
    _value(
        "as_built_distance_cm",
        "Plane distance found in the installed set-up, mean of the determinations.",
        _found("plane_distance_cm"),
    ),
    _value(
        "as_built_gap_cm",
        "Degrader gap found in the installed set-up, mean of the determinations.",
        _found("degrader_gap_cm"),
    ),
    _value(
        "as_built_tilt_deg",
        "Tilt found in the installed set-up, mean of the determinations of both fields.",
        _found("tilt_deg"),
    ),
    _value(
        "as_built_degrader_thickness_cm",
        "Thickness of the degrader found, mean over the sheet.",
        thickness_found,
    ),
)
