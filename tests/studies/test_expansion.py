"""Expansion and compression against Cantera, and their efficiency."""

import cantera as ct
import numpy as np
import pytest

from gibbsmin.interop import system_from_cantera
from gibbsmin.studies.expansion import expansion

AIR = {"N2": 0.78084, "O2": 0.209476, "AR": 0.00934}


@pytest.mark.parametrize(
    ("start", "end", "efficiency"), [(288.15, 20.0, 0.88), (1773.15, 0.05, 0.9), (1773.15, 0.05, 1.0)]
)
def test_air_against_cantera(start, end, efficiency):
    """gri30 (packaged with Cantera), equilibrium composition on both sides of the step."""
    gas = ct.Solution("gri30.yaml")
    gas.TPX = start, 1e5, AIR
    gas.equilibrate("TP", rtol=1e-12)
    system = system_from_cantera(gas)
    amounts = gas.X / gas.X.sum()
    elements = (system.element_matrix @ amounts)[None]
    h1, s1 = gas.enthalpy_mole / 1e3, gas.entropy_mole / 1e3  # J/mol
    mass = gas.mean_molecular_weight / 1e3  # kg/mol
    gas.SP = gas.s, end * 1e5
    gas.equilibrate("SP", rtol=1e-12)
    h2s = gas.enthalpy_mass * mass
    h2 = h1 + (h2s - h1) * (efficiency if h2s < h1 else 1.0 / efficiency)
    gas.HP = h2 / mass, end * 1e5
    gas.equilibrate("HP", rtol=1e-12)
    found = expansion(system, elements, *(np.array([value]) for value in (s1, h1, end * 1e5, efficiency)))
    assert found.certified.all()
    assert found.temperature[0] == pytest.approx(gas.T, rel=1e-6)
    assert found.enthalpy[0] == pytest.approx(h2, abs=0.01)


def test_compressor_of_the_textbook():
    """Dry air from 15 degC, pressure ratio 20, 88 %: 443.0 degC and 442.6 kJ/kg (calculated with NIST-JANAF tables)."""
    gas = ct.Solution("gri30.yaml")
    gas.TPX = 288.15, 101325.0, AIR
    system = system_from_cantera(gas)
    elements = (system.element_matrix @ gas.X)[None]
    h1, s1 = gas.enthalpy_mole / 1e3, gas.entropy_mole / 1e3
    found = expansion(system, elements, *(np.array([value]) for value in (s1, h1, 20 * 101325.0, 0.88)))
    assert found.temperature[0] - 273.15 == pytest.approx(443.0, abs=1.0)
    assert (found.enthalpy[0] - h1) / gas.mean_molecular_weight == pytest.approx(442.6, abs=1.0)
