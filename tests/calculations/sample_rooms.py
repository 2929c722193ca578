"""Two invented rooms for the tests of room geometry; x and y from the isocentre, heights above the floor, cm."""

from readiness.quantities import Table

COLUMNS = ("name", "x_min_cm", "x_max_cm", "y_min_cm", "y_max_cm", "bottom_cm", "top_cm")


def table(*rows: tuple[str | float, ...]) -> Table:
    """Return a table of obstructions."""
    return Table.of(COLUMNS, rows)


def mirrored_table(obstructions: Table) -> Table:
    """Return obstructions with left and right exchanged."""
    return table(*((name, -right, -left, *rest) for name, left, right, *rest in obstructions.rows))  # type: ignore[operator]


# 695 x 690, asymmetric: 365 to the left of the isocentre, 330 to the right
VAULT_A = ((-365.0, -420.0), (330.0, -420.0), (330.0, 270.0), (-365.0, 270.0))
IN_VAULT_A = table(
    ("gantry stand", -110, 110, 130, 270, 0, 300),
    ("parked couch", -50, 50, -260, -100, 0, 70),
    ("laser box", -365, -350, -8, 8, 122, 138),
    ("cabinet", 290, 330, -60, 60, 0, 210),
)
VAULT_B = ((-253.0, -380.0), (305.0, -380.0), (305.0, 240.0), (-253.0, 240.0))
IN_VAULT_B = table(
    ("gantry stand", -105, 105, 125, 240, 0, 255),
    ("parked couch", -50, 50, -250, -95, 0, 68),
)
EMPTY = table()
