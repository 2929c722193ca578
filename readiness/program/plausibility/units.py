"""Numbers that smell of another unit than the one their name ends with."""

from collections.abc import Iterator, Mapping

from readiness.errors import Problem
from readiness.program.field_schema import FieldSchema
from readiness.program.fields import Schemas
from readiness.program.items import Item, Program
from readiness.program.limits import meant_in_another_unit
from readiness.program.plausibility.stated import IMPOSSIBLE, cell, impossible, question, table
from readiness.units import printed

MISTAKEN = "unit"
FAR = 5  # times beyond the plausible range, a length that fits in another unit is taken for a mistake
_LENGTHS = {"m", "cm", "mm"}


def mistaken_units(program: Program, schemas: Schemas) -> Iterator[Problem]:
    """A number outside its plausible range is asked about; a length far outside was given in another unit."""
    for item in program.items:
        kind = schemas.kinds.get(item.kind)
        for name, field in kind.fields.items() if kind is not None else ():
            if field.plausible:
                yield from _asked(item, name, field, item.get(name), field.in_words)
            elif field.columns:
                yield from _rows(item, name, field.columns)


def _rows(item: Item, name: str, columns: Mapping[str, FieldSchema]) -> Iterator[Problem]:
    found = table(item, name)
    for number, row in enumerate(found.records() if found is not None else (), 1):
        for column in columns.values():
            if column.plausible:
                what = f"{column.in_words} in row {number}"
                yield from _asked(item, name, column, cell(row, column.name), what)


def _asked(item: Item, name: str, field: FieldSchema, value: object, what: str) -> Iterator[Problem]:
    if not field.plausible or not isinstance(value, int | float) or isinstance(value, bool):
        return
    low, high = field.plausible
    if low <= value <= high:
        return
    unit = f" {field.printed_unit}" if field.printed_unit else ""
    meant = meant_in_another_unit(value, field)
    hint = f": did you mean {printed(meant)} ({field.printed_unit})?" if meant is not None else "; check it"
    message = f"{what} of {printed(value)}{unit} is unusual ({printed(low)} to {printed(high)}{unit}){hint}"
    far = value * FAR < low or value > high * FAR
    mistaken = meant is not None and far and field.unit in _LENGTHS
    problem = (impossible if mistaken else question)(item, name, message)
    yield Problem(problem.place, message, MISTAKEN) if problem.kind == IMPOSSIBLE else problem
