"""Which measurement would make a predicted field surer than any other."""

from math import hypot

from readiness.quantities import Table

PROFILES = "dual-field profiles at several angles"
HELP = {
    "foil spread": "single-field profile at the plane with the degrader in place",
    "energy": "depth dose with R50 and Rp at 100 cm, in the mode, without the degrader",
    "scatter model": PROFILES,
    "distance": "as-built distance with a calibrated distance meter",
    "tilt": "gantry angle with a calibrated inclinometer",
}


def measurement_against(*, uncertain_input: str, energy_measured: bool) -> str:
    """
    Return the measurement that would reduce what one input adds to the uncertainty of a predicted field.

    Once a depth dose is measured, what stays open about the energy is which of its energies, mean or most
    probable, the field follows: only profiles tell.

    Args:
        uncertain_input: foil spread, energy, scatter model, distance or tilt.
        energy_measured: Whether this beam's own depth dose at 100 cm is measured.

    Returns:
        The measurement in words.

    Raises:
        ValueError: If the input is another one.

    Valid for: the inputs of prediction_uncertainty.
    Assumes: nothing.
    Source: our own choice (practice).
    """
    if uncertain_input not in HELP:
        raise ValueError(f"no measurement is known against {uncertain_input!r}")
    return PROFILES if uncertain_input == "energy" and energy_measured else HELP[uncertain_input]


def measurement_that_helps_most(*, contributions: Table) -> str:
    """
    Return the measurement whose inputs together move the vertical uniformity most.

    Args:
        contributions: One row an input, with vertical_change_percent and measurement.

    Returns:
        The measurement in words, empty if nothing is uncertain.

    Raises:
        KeyError: If the table is another one.

    Valid for: tables of prediction_uncertainty.
    Assumes: independent inputs, so that changes add in quadrature; ties go to the input named first.
    Source: our own definition.
    """
    together: dict[str, float] = {}
    for row in contributions.records():
        measurement = str(row["measurement"])
        change = float(row["vertical_change_percent"] or 0.0)
        together[measurement] = hypot(together.get(measurement, 0.0), change)
    return max(together, key=lambda one: round(together[one], 6), default="")
