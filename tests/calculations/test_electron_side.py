"""Electrons meet low atomic numbers first, and neutrons deserve a remark from 10 MeV."""

import pytest

from readiness.calculations.electron_side import first_layer, needs_neutron_remark
from readiness.errors import OutsideValidity
from readiness.quantities import Table

COLUMNS = ("material", "thickness_cm", "density_g_per_cm3")


def test_concrete_first():
    """Concrete before lead keeps the electrons from the lead."""
    found = first_layer(layers=Table.of(COLUMNS, [("concrete", 30, 2.35), ("lead", 5, None)]))
    assert ("concrete", True, 30.0) == (found.material, found.low_atomic_number, found.low_atomic_number_cm)


def test_lead_first():
    """Lead as the first thing behind the patient is a finding."""
    found = first_layer(layers=Table.of(COLUMNS, [("lead", 5, None), ("concrete", 100, 2.35)]))
    assert ("lead", False, 0.0) == (found.material, found.low_atomic_number, found.low_atomic_number_cm)


@pytest.mark.parametrize(("expected", "energy"), [(False, 6.0), (False, 9.0), (True, 10.0), (True, 12.0)])
def test_neutron_remark(expected, energy):
    """Neutrons are ignored at 4 to 9 MeV and remarked on from 10 MeV."""
    assert expected == needs_neutron_remark(energy_mev=energy)


def test_refusals():
    """No layers and no energy are refused."""
    with pytest.raises(OutsideValidity, match="no layers"):
        first_layer(layers=Table.of(COLUMNS, ()))
    with pytest.raises(ValueError, match="above zero"):
        needs_neutron_remark(energy_mev=0.0)
