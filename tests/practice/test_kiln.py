"""Kilns: moduli and carbon dioxide by hand, calcination against published pressures and against the solver."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from settled_from import by_hand, figures, settle

from gibbsmin.elements import molar_mass, parse_formula
from gibbsmin.practice.figures.kiln import calcination_temperature, kiln
from gibbsmin.states.system import System

OXIDE = {"CaO(s)": 65.5, "SiO2(s)": 21.5, "Al2O3(s):alpha": 5.2, "Fe2O3(s)": 2.8}
LIMESTONE = System.from_elements("Ca Mg C O N", exclude=["C(s):graphite"])


def moles(masses: dict[str, float]) -> dict[str, float]:
    return {name: mass / 1e3 / molar_mass(parse_formula(name.split("(")[0])[0]) for name, mass in masses.items()}


def test_moduli_of_a_meal_by_hand() -> None:
    """65.5 CaO, 21.5 SiO2, 5.2 Al2O3, 2.8 Fe2O3: 6550/68.156, 21.5/8.0, 5.2/2.8, worked by hand."""
    meal = moles(OXIDE)
    found = figures(kiln(by_hand(meal, {"meal": meal})))
    assert found["lime_saturation_fed"] == pytest.approx(6550.0 / 68.156, rel=1e-4)
    assert found["silica_modulus_fed"] == pytest.approx(21.5 / 8.0)
    assert found["alumina_modulus_fed"] == pytest.approx(5.2 / 2.8)


def test_alkali_to_sulfur_by_hand() -> None:
    """1.0 K2O, 0.15 Na2O, 0.02 Cl, 0.8 SO3 mass %: (1.0/94.2 + 0.15/62.0 - 0.02/70.9)/(0.8/80.06) = 1.28."""
    K2O, Na2O, Cl2, SO3 = 1.0 / 94.2, 0.15 / 61.98, 0.02 / 70.9, 0.8 / 80.06
    feed = {"KCl(s)": 2.0 * Cl2, "K2SO4(s)": K2O - Cl2, "Na2O(s)": Na2O, "SO3": SO3 - (K2O - Cl2)}
    found = figures(kiln(by_hand({"N2": 1.0}, {"meal": feed})))
    assert found["alkali_to_sulfur_fed"] == pytest.approx(1.28, abs=0.005)


def test_carbon_dioxide_of_pure_stone() -> None:
    """0.785 t of CO2 a tonne of lime by stoichiometry: IPCC Guidelines 2006, vol. 3, table 2.4 (from memory)."""
    feeds = {"stone": {"CaCO3(s):calcite": 1.0}, "gas": {"CH4": 0.25, "O2": 0.6, "N2": 2.0}}
    system = System.from_elements("Ca C H O N", exclude=["C(s):graphite"])
    found = figures(kiln(settle(system, feeds, [1300.0])))
    assert found["calcined_ca"] == pytest.approx(1.0)
    assert found["co2_of_stone"] == pytest.approx(0.785, abs=0.001)
    assert found["co2_of_fuel"] == pytest.approx(0.25 * 0.785, rel=2e-3)


def test_half_calcined_by_hand() -> None:
    solids = {"CaCO3(s):calcite": 0.5, "CaO(s)": 0.5, "CO2": 0.5}
    found = figures(kiln(by_hand(solids, {"stone": {"CaCO3(s):calcite": 1.0}})))
    assert found["calcined_ca"] == pytest.approx(0.5)
    assert found["co2_of_stone"] == pytest.approx(0.5 * 44.009 / (0.5 * 100.086 + 0.5 * 56.077), rel=1e-4)


# degC at atm of CO2: 898 is J. Johnston's and F. H. Smyth and L. H. Adams' figure (J. Am. Chem. Soc. 45 (1923) 1167,
# from memory); the others are log10 p = 7.079 - 8308/T, E. H. Baker, J. Chem. Soc. 1962, 464 (from memory).
@pytest.mark.parametrize(("atm", "celsius"), [(1.0, 898.0), (0.25, 808.5), (0.1, 755.1)])
def test_calcination_at_a_pressure(atm: float, celsius: float) -> None:
    gas = by_hand({"CO2": 1.0}, {}, 1000.0, atm * 101325.0)
    assert calcination_temperature(gas) == pytest.approx(celsius + 273.15, abs=6.0)


@settings(max_examples=20)
@given(st.floats(0.05, 1.0))
def test_calcination_depends_on_the_pressure_of_co2_alone(x: float) -> None:
    diluted = by_hand({"CO2": x, "N2": 1.0 - x}, {}, 1000.0, 1e5)
    pure = by_hand({"CO2": 1.0}, {}, 1000.0, x * 1e5)
    assert calcination_temperature(diluted) == pytest.approx(calcination_temperature(pure), abs=1e-6)


def test_the_solver_turns_where_it_says() -> None:
    feeds = {"stone": {"CaCO3(s):calcite": 0.001}, "gas": {"CO2": 25.0, "N2": 75.0}}
    edge = float(calcination_temperature(settle(LIMESTONE, feeds, [1000.0]))[0])
    found = figures(kiln(settle(LIMESTONE, feeds, [edge - 0.05, edge + 0.05])))
    assert found["calcined_ca"] == pytest.approx([0.0, 1.0], abs=1e-6)


def test_volatile_shares_by_hand() -> None:
    found = figures(kiln(by_hand({"KCl": 0.3, "K2SO4(s)": 0.1, "SO2": 0.1, "N2": 1.0}, {})))
    assert found["volatile_k"] == pytest.approx(0.6)
    assert found["volatile_cl"] == pytest.approx(1.0)
    assert found["volatile_s"] == pytest.approx(0.5)
    assert "volatile_na" not in found


def test_a_gas_alone_has_no_numbers_of_a_kiln() -> None:
    assert kiln(by_hand({"CO2": 1.0, "N2": 1.0}, {"gas": {"CO2": 1.0, "N2": 1.0}})) == []


def test_without_carbon_dioxide_there_is_no_calcination_temperature() -> None:
    assert np.isnan(calcination_temperature(by_hand({"N2": 1.0, "CO2": 0.0}, {}))).all()
