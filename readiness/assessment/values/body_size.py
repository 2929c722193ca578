"""How the multiple-field factor changes with the size of the body."""

from readiness.assessment.definition import Definition
from readiness.calculations.composite_depth_dose import b_factor_of_radius
from readiness.quantities import Table

USUAL_RADIUS_CM = 15.0
BODY_RADII_CM = (2.5, 5.0, 10.0, 15.0, 20.0)


def b_by_diameter(*, b_factor: float) -> Table:
    """Return the factor for thinner and thicker bodies, scaled from that of the usual cylinder."""
    usual = b_factor_of_radius(radius_cm=USUAL_RADIUS_CM).value
    factors = {radius: b_factor_of_radius(radius_cm=radius).value / usual for radius in BODY_RADII_CM}
    rows = [(2 * radius, b_factor * relative) for radius, relative in factors.items()]
    return Table.of(["body_diameter_cm", "factor"], rows)


DEFINITIONS: tuple[Definition, ...] = (
    Definition(
        "arrangement.b_by_diameter",
        "Multiple-field factor of thinner and thicker bodies, scaled from that of a 30 cm cylinder.",
        by=b_by_diameter,
        takes={"b_factor": "arrangement.b_factor"},
        model=True,
        source="own-monte-carlo",
        known="mc",
    ),
)
