"""Which measurement would make a predicted field surer."""

import pytest

from readiness.calculations.helpful_measurement import HELP, measurement_against, measurement_that_helps_most
from readiness.quantities import Table


def contributions(*rows: tuple[str, float, str]) -> Table:
    """Return contributions of inputs to the vertical uniformity."""
    return Table.of(["input", "vertical_change_percent", "measurement"], rows)


def test_every_input_has_a_measurement_against_it() -> None:
    """Before anything is measured each input has its own measurement."""
    asked = [measurement_against(uncertain_input=one, energy_measured=False) for one in HELP]
    assert len(set(asked)) == len(asked) == 5


def test_measured_depth_dose_leaves_the_question_to_profiles() -> None:
    """A measured depth dose is not asked for again; the other inputs do not notice."""
    assert measurement_against(uncertain_input="energy", energy_measured=True) == "dual-field profiles at several angles"
    for one in HELP.keys() - {"energy"}:
        assert measurement_against(uncertain_input=one, energy_measured=True) == HELP[one]


def test_inputs_with_one_measurement_count_together() -> None:
    """Two inputs of 3 and 4 % that one measurement settles weigh 5 %, more than one of 4.5 %."""
    table = contributions(("a", 3.0, "profiles"), ("b", 4.5, "inclinometer"), ("c", 4.0, "profiles"))
    assert measurement_that_helps_most(contributions=table) == "profiles"


def test_equal_inputs_give_the_first_and_none_gives_nothing() -> None:
    """Of two that weigh the same the first is named; without any there is nothing to say."""
    assert measurement_that_helps_most(contributions=contributions(("a", 2.0, "one"), ("b", 2.0, "two"))) == "one"
    assert measurement_that_helps_most(contributions=contributions()) == ""


def test_unknown_input_is_refused() -> None:
    """Nothing is known to measure against the weather."""
    with pytest.raises(ValueError, match="weather"):
        measurement_against(uncertain_input="weather", energy_measured=False)
