"""The tables of the program that a chief decides by: hours, cover, places, money."""

from readiness.assessment.records import Assessment, Value
from readiness.quantities import Table

COSTS = "program.cost_sums"
TABLES = {
    "program.staffing_balance": "Hours needed and available, by phase and profession",
    "program.staff_cover": "Who is left when one person is away",
    "program.waits_by_places": "Wait for a start, by places",
    "program.capacity_sensitivity": "What would change the number of patients a year",
    COSTS: "Costs by remedy, once and each year, lines without an amount left out",
}


def people_and_money(assessment: Assessment) -> tuple[tuple[str, Table, str], ...]:
    """Return the tables that there are: heading, table, basis."""
    found = {
        value.name: value
        for value in assessment.values
        if isinstance(value, Value) and value.name in TABLES and isinstance(value.value, Table)
    }
    money = next((value.value for value in assessment.values
                  if isinstance(value, Value) and value.name == "program.currency"), "")  # fmt: skip
    return tuple(
        (
            f"{heading}, in {money}" if name == COSTS and money else heading,
            found[name].value,
            found[name].basis,
        )
        for name, heading in TABLES.items()
        if name in found and found[name].value.rows
    )
