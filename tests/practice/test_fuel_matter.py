"""The matter of a fuel against substances whose enthalpy, heat capacity and entropy were measured."""

import pytest

from gibbsmin.elements import parse_formula
from gibbsmin.errors import FeedError
from gibbsmin.practice.feeds.fuel_matter import (
    counted_as_element,
    entropy_estimate,
    formation_enthalpy,
    sensible_heat,
)
from gibbsmin.practice.feeds.heating import heating_value
from gibbsmin.thermo.database import load

# Formula, enthalpies of combustion and of formation, kJ/mol (CRC Handbook of Chemistry and Physics, from memory).
MEASURED = [("C6H6", 3267.6, 49.1), ("C2H6O", 1366.8, -277.6), ("C10H8", 5156.3, 77.9), ("CH4N2O", 632.7, -333.1)]


@pytest.mark.parametrize(("formula", "combustion", "formation"), MEASURED)
def test_enthalpy_of_formation_from_that_of_combustion(formula, combustion, formation):
    atoms, _ = parse_formula(formula)
    assert formation_enthalpy(atoms, combustion * 1e3) / 1e3 == pytest.approx(formation, abs=1.0)


@pytest.mark.parametrize("name", ["CH4", "C2H5OH", "CH3Cl", "H2S", "COS", "HCN", "NH3", "CO2", "HCl", "HF"])
def test_a_substance_taken_as_a_fuel_keeps_its_enthalpy(name):
    record = load().get(name)
    higher = heating_value([record], [2.0]).higher
    atoms = {symbol: 2.0 * count for symbol, count in record.elements.items()}
    assert formation_enthalpy(atoms, higher) == pytest.approx(2.0 * record.standard_enthalpy, abs=1.0)


def test_metals_end_as_the_oxides_of_the_ash():
    """K to K2O(s): half of -363 kJ/mol (JANAF) each; mercury counts as it is."""
    assert formation_enthalpy({"K": 1.0, "Hg": 1.0}, 0.0) / 1e3 == pytest.approx(-363.2 / 2.0, abs=0.2)
    assert counted_as_element({"C": 1.0, "K": 1.0, "Cl": 1.0, "Hg": 1.0}) == ["Hg"]


def test_more_halogen_than_hydrogen_is_refused():
    with pytest.raises(FeedError, match="holds 2 mol/kg more Cl, F and Br than H"):
        formation_enthalpy({"C": 1.0, "H": 1.0, "Cl": 3.0}, 1e6)


def test_sensible_heat_of_graphite():
    """H(T) - H(298.15 K) of graphite, kJ/mol, NIST-JANAF: 500 K 2.365, 1000 K 11.795; within 5 %."""
    for T, heat in ((500.0, 2.365), (1000.0, 11.795)):
        assert sensible_heat({"C": 1.0}, T) / 1e3 == pytest.approx(heat, rel=0.05)


def test_sensible_heat_of_coal_wood_and_oil():
    """Means between 25 and 75 degC, kJ/kg/K; 15 % are allowed for wood and oil.

    Coal 1.0 to 1.3 and fuel oil 1.9 to 2.0 (common practice); dry wood 0.1031 + 0.003867 T, which is 1.35 (Wood
    Handbook of the Forest Products Laboratory, from memory).
    """
    coal = {"C": 69.0, "H": 54.8, "O": 5.5, "N": 1.2, "S": 0.3}
    wood = {"C": 41.9, "H": 60.0, "O": 27.1}
    oil = {"C": 71.6, "H": 119.0}
    mean = {name: sensible_heat(atoms, 348.15) / 50e3 for name, atoms in (("coal", coal), ("wood", wood), ("oil", oil))}
    assert 1.0 < mean["coal"] < 1.3
    assert mean["wood"] == pytest.approx(1.35, rel=0.15)
    assert mean["oil"] == pytest.approx(1.95, rel=0.15)
    assert sensible_heat(coal, 298.15) == 0.0
    assert sensible_heat(coal, 273.15) < 0.0


# J/mol/K, solids at 298.15 K (CRC Handbook, from memory; graphite: CODATA key values).
ENTROPIES = [
    ("C", 5.74, 0.02), ("C10H8", 167.4, 0.1), ("C14H10", 207.5, 0.1), ("C12H10", 209.4, 0.1), ("C6H6O", 144.0, 0.1),
    ("C7H6O2", 167.6, 0.1), ("C12H22O11", 392.4, 0.4),
]  # fmt: skip


@pytest.mark.parametrize(("formula", "measured", "within"), ENTROPIES)
def test_estimates_of_entropy(formula, measured, within):
    atoms, _ = parse_formula(formula)
    assert entropy_estimate(atoms, 298.15) == pytest.approx(measured, rel=within)


def test_entropy_and_enthalpy_rise_together():
    """Over a small step dS = dH/T."""
    atoms = {"C": 50.0, "H": 60.0, "O": 25.0, "S": 0.1}
    for T in (280.0, 400.0, 900.0):
        heat = sensible_heat(atoms, T + 0.5) - sensible_heat(atoms, T - 0.5)
        entropy = entropy_estimate(atoms, T + 0.5) - entropy_estimate(atoms, T - 0.5)
        assert entropy == pytest.approx(heat / T, rel=1e-5)
    assert entropy_estimate({"S": 1.0}, 298.15) == 0.0
