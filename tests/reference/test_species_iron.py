"""Iron oxides with gas, against measured equilibria.

Sources: Emmett & Schultz, J. Am. Chem. Soc. 52 (1930) 4268, for hydrogen; Myers & Eugster, Contrib. Mineral. Petrol. 82
(1983) 75, for magnetite and hematite (both as their abstracts print them); O'Neill, Am. Mineral. 73 (1988) 470, from
memory. Wustite has one composition here, Fe0.947O, that next to iron. Next to magnetite it really holds more oxygen, by
which the gas may be more oxidizing: hence the wider and one-sided tolerance there.
"""

from math import exp, log, log10

import pytest

from gibbsmin.constants import R
from gibbsmin.thermo.database import load
from gibbsmin.thermo.making.sources import crc

METAL = 0.947  # iron for each oxygen of wustite


def constant(reaction: dict[str, float], T: float) -> float:
    """Equilibrium constant at ``T`` [K], gases in bar."""
    return exp(-sum(n * float(load().get(name).gibbs_energy(T)) for name, n in reaction.items()) / (R * T))


REDUCTION = {"Fe0.947O(s)": -1.0, "H2": -1.0, "Fe(s)": METAL, "H2O": 1.0}
OXYGEN = 4.0 - 3.0 / METAL  # what one Fe3O4 gives up on the way to wustite
TO_WUSTITE = {"Fe3O4(s)": -1.0 / OXYGEN, "H2": -1.0, "Fe0.947O(s)": 3.0 / METAL / OXYGEN, "H2O": 1.0}


@pytest.mark.parametrize(("celsius", "ratio"), [(600, 0.332), (700, 0.422), (800, 0.499), (900, 0.594), (1000, 0.669)])
def test_water_over_iron_and_wustite(celsius: float, ratio: float) -> None:
    assert constant(REDUCTION, celsius + 273.15) == pytest.approx(ratio, rel=0.025)


@pytest.mark.parametrize("T", [1200.0, 1300.0, 1400.0, 1473.0, 1500.0, 1600.0])
def test_oxygen_over_iron_and_wustite(T: float) -> None:
    # Chemical potential of O2 over iron and wustite [J/mol], O'Neill 1988, 1184 to 1644 K (from memory).
    published = -550915.0 + 269.106 * T - 16.9484 * T * log(T)
    K = constant({"Fe0.947O(s)": -2.0, "Fe(s)": 2.0 * METAL, "O2": 1.0}, T)
    assert R * T * log(K) == pytest.approx(published, abs=900.0)


def to_liquid(T: float) -> float:
    """G of wustite and iron turning into liquid oxide [J/mol of oxygen]."""
    G = {name: float(load().get(name).gibbs_energy(T)) for name in ("FeO(l)", "Fe0.947O(s)", "Fe(s)")}
    return G["FeO(l)"] - G["Fe0.947O(s)"] - (1.0 - METAL) * G["Fe(s)"]


def test_wustite_melts_beside_iron() -> None:
    # 1371 degC, Darken & Gurry 1946 (from memory), which placed the liquid: no liquid before, no wustite after.
    assert to_liquid(1641.0) > 0.0 > to_liquid(1647.0)
    assert all(to_liquid(T) > 500.0 for T in (1150.0, 1273.0, 1373.0, 1473.0, 1573.0))


def test_heat_of_melting() -> None:
    # Published for FeO 24.1 (NIST-JANAF) to 31 kJ/mol (Coughlin, King & Bonnickson 1951, from memory).
    liquid, crystal, iron = (load().get(name) for name in ("FeO(l)", "Fe0.947O(s)", "Fe(s)"))
    H = liquid.enthalpy(1644.0) - crystal.enthalpy(1644.0) - (1.0 - METAL) * iron.enthalpy(1644.0)
    assert 24.1e3 < H < 31.4e3


@pytest.mark.parametrize("T", [1823.0, 1873.0, 1923.0])
def test_oxygen_over_liquid_iron_and_its_oxide(T: float) -> None:
    # Not used to place the liquid: log10 of mass percent O in iron beside its oxide is 2.734 - 6320/T (Taylor &
    # Chipman 1943), and 1/2 O2 = O in iron, at 1 %, has G = -115750 - 4.63 T J/mol (both from memory). The first
    # melt holds a little less iron than FeO.
    published = (2.734 - 6320.0 / T) * log(10.0) * R * T - 115750.0 - 4.63 * T
    K = constant({"FeO(l)": -2.0, "Fe(l)": 2.0, "O2": 1.0}, T)
    assert 0.5 * R * T * log(K) == pytest.approx(published, abs=1600.0)


@pytest.mark.parametrize(("celsius", "ratio"), [(700, 1.18), (800, 2.37)])
def test_water_over_wustite_and_magnetite(celsius: float, ratio: float) -> None:
    assert 0.85 * ratio < constant(TO_WUSTITE, celsius + 273.15) < ratio


@pytest.mark.parametrize(("T", "within"), [(1323.0, 0.1), (1400.0, 0.1), (1500.0, 0.1)])
def test_oxygen_over_magnetite_and_hematite(T: float, within: float) -> None:
    published = -23847.6 / T + 13.480
    K = constant({"Fe2O3(s)": -6.0, "Fe3O4(s)": 4.0, "O2": 1.0}, T)
    assert log10(K) == pytest.approx(published, abs=within)


def test_wustite_decomposes() -> None:
    # Published 843 K, 570 degC (Darken & Gurry 1945, from memory); Eastman 1922 read 560 degC from the lines of others.
    reaction = {"Fe0.947O(s)": -4.0, "Fe3O4(s)": 1.0, "Fe(s)": 4.0 * METAL - 3.0}
    assert constant(reaction, 828.0) > 1.0 > constant(reaction, 853.0)


@pytest.mark.parametrize(("name", "cas"), [("Fe3O4(s)", "1317-61-9"), ("Fe2O3(s)", "1309-37-1")])
def test_enthalpies_are_those_of_the_handbook(name: str, cas: str) -> None:
    species = load().get(name)
    assert species.standard_enthalpy == pytest.approx(crc()[cas]["Hfs"], abs=1.0)
    assert species.standard_entropy == pytest.approx(crc()[cas]["S0s"], abs=1.5)
