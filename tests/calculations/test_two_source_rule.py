"""The two-source rule against exact addition."""

from math import log10

import pytest

from readiness.calculations.two_source_rule import two_source_thickness_cm


def exact(thicknesses, tvl):
    """Return the thickness that holds the sum of all sources to one goal."""
    return tvl * log10(sum(10 ** (each / tvl) for each in thicknesses))


def test_two_equal_sources_need_one_half_value_layer_more():
    """For two equal sources the rule is exact addition."""
    assert exact((80.0, 80.0), 33.0) == pytest.approx(
        two_source_thickness_cm(thicknesses_cm=(80.0, 80.0), tvl_cm=33.0), abs=0.01
    )


@pytest.mark.parametrize("apart", [0.0, 5.0, 15.0, 32.9])
def test_rule_is_careful_within_one_layer(apart):
    """Within one layer the rule never falls below exact addition."""
    pair = (100.0, 100.0 - apart)
    assert two_source_thickness_cm(thicknesses_cm=pair, tvl_cm=33.0) >= exact(pair, 33.0) - 0.01


def test_rule_falls_a_little_short_just_beyond_one_layer():
    """Just beyond one layer the larger alone is 0.041 layers short of exact addition."""
    pair = (100.0, 66.9)
    short = exact(pair, 33.0) - two_source_thickness_cm(thicknesses_cm=pair, tvl_cm=33.0)
    assert short == pytest.approx(0.041 * 33.0, abs=0.05)


def test_three_equal_sources_show_why_doses_are_added():
    """With three equal sources the rule falls short, which is why standing walls add doses."""
    three = (80.0, 80.0, 80.0)
    assert two_source_thickness_cm(thicknesses_cm=three, tvl_cm=33.0) < exact(three, 33.0)


def test_one_source():
    """One source needs what it needs."""
    assert 80.0 == two_source_thickness_cm(thicknesses_cm=(80.0,), tvl_cm=33.0)


def test_impossible():
    """No thicknesses, thicknesses below zero and a layer of zero are refused."""
    for thicknesses, tvl in (((), 33.0), ((-1.0,), 33.0), ((1.0,), 0.0)):
        with pytest.raises(ValueError, match=r"needs thicknesses|above zero"):
            two_source_thickness_cm(thicknesses_cm=thicknesses, tvl_cm=tvl)
