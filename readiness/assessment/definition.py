"""
One value in one entry: its name, its meaning, the calculation and what that takes.

``takes`` maps each keyword of the calculation to

- ``"room.ceiling_height_cm"``: a value of the item itself or of an item it belongs to,
- ``"room.ceiling_height_cm?"``: the same, None if it cannot be had,
- ``"each instrument.calibration_age_days"``: a tuple over the items listed nearest to this one,
- ``"each instrument.calibration_age_days?"``: the same, None for each that cannot be had,
- ``"rows obstruction: id x_min_cm x_max_cm movable?"``: a table, one row for each such item,
- ``"rows? earlier_calibration: calibrated_on?"``: the same, without a row where the list is not there.
"""

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from typing import Any


@dataclass(frozen=True)
class Measured:
    """
    How a measurement replaces what is claimed or predicted.

    Attributes:
        kind: Kind of measurement file (schemas/measurements).
        by: The analysis; None takes ``part`` from the one value in ``takes``.
        takes: As for a definition; ``measurement.`` names belong to the measurement found.
        part: Attribute of the analysis's result.
        ignores: Header keys that need not agree for this value.
    """

    kind: str
    by: Callable[..., Any] | None = None
    takes: Mapping[str, str] = field(default_factory=dict)
    part: str = ""
    ignores: tuple[str, ...] = ()


@dataclass(frozen=True)
class Definition:
    """
    One value.

    Attributes:
        name: kind.name_unit; the same name as a field lets a measurement or default replace the field.
        meaning: One sentence.
        by: Calculation; None for a part of another value or a field with a measurement.
        takes: Keyword -> value name, see above.
        of, part: Take an attribute of the record that another (internal) value holds.
        otherwise: Value that stands in, with its own basis, where this one cannot be had: a prediction for
            what is neither measured nor stated.
        by_technique: Technique -> value that this one is, for one question asked of all techniques.
        complete: Result that stands only if every input is known, such as that nothing is missing; another
            one stands although some inputs, given as None, cannot be had.
        model: The result is a prediction whatever its inputs.
        critical: A treatment-critical number.
        internal: Holds a record for other values; never shown.
        source, known: Publication or method, and how it is known.
        formula: The formula in symbols, for the calculation record.
    """

    name: str
    meaning: str
    by: Callable[..., Any] | None = None
    takes: Mapping[str, str] = field(default_factory=dict)
    of: str = ""
    part: str = ""
    otherwise: str = ""
    by_technique: Mapping[str, str] = field(default_factory=dict)
    complete: str = ""
    model: bool = False
    critical: bool = False
    internal: bool = False
    measured: Measured | None = None
    source: str = ""
    known: str = ""
    formula: str = ""

    @property
    def kind(self) -> str:
        """Return the kind of item the value belongs to."""
        return self.name.partition(".")[0]


def derived(name: str, meaning: str, by: Callable[..., Any], takes: Mapping[str, str]) -> Definition:
    """Return a value that follows from its inputs by definition, without a source or a model of its own."""
    return Definition(name, meaning, by=by, takes=takes, source="definition", known="derived")


def one_of_techniques(name: str, meaning: str, *, standing: str, lying: str) -> Definition:
    """Return a value that is another one for a standing patient than for a lying one."""
    techniques = {"six-position": standing, "rotating-platform": standing, "moving-couch": lying}
    return Definition(name, meaning, by_technique=techniques, source="definition", known="derived")


@dataclass(frozen=True)
class Take:
    """One parsed entry of ``takes``."""

    form: str  # "one", "each" or "rows"
    name: str  # value name, or kind for rows
    optional: bool
    columns: tuple[tuple[str, bool], ...] = ()

    @property
    def kind(self) -> str:
        """Return the kind of item it is taken from."""
        return self.name.partition(".")[0]

    @property
    def names(self) -> tuple[str, ...]:
        """Return the names of the values that are taken; of rows those of their columns, but for the id."""
        if self.form != "rows":
            return (self.name,)
        return tuple(f"{self.name}.{column}" for column, _ in self.columns if column != "id")


def parse_take(text: str) -> Take:
    """Return what an entry of ``takes`` asks for."""
    if text.startswith(("rows ", "rows? ")):
        form, _, rest = text.partition(" ")
        kind, _, columns = rest.partition(":")
        parsed = tuple((column.rstrip("?"), column.endswith("?")) for column in columns.split())
        return Take("rows", kind.strip(), optional=form.endswith("?"), columns=parsed)
    if text.startswith("each "):
        name = text.removeprefix("each ").strip()
        return Take("each", name.rstrip("?"), optional=name.endswith("?"))
    return Take("one", text.rstrip("?"), optional=text.endswith("?"))
