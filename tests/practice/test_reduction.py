"""Reduction: the oxygen potential three ways, published potentials over iron, metallisation by hand."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from settled_from import by_hand, figures, settle

from gibbsmin.constants import R
from gibbsmin.practice.figures.reduction import oxygen_potential, reduction
from gibbsmin.practice.reactions.reactions import reaction
from gibbsmin.states.system import System

IRON = System.from_elements("C H O Fe", exclude=["C(s):graphite", "FeO(l)"])
GAS = System.from_elements("C H O", exclude=["C(s):graphite"])


@settings(max_examples=25)
@given(st.floats(0.02, 0.98), st.floats(0.1, 10.0), st.floats(800.0, 2000.0), st.floats(1e4, 1e7))
def test_the_oxygen_potential_is_that_of_both_gas_pairs(burnt: float, hydrogen: float, T: float, P: float) -> None:
    """RT ln pO2 by H2 + ½ O2 = H2O and by CO + ½ O2 = CO2 (Ellingham 1944), against the potential of oxygen."""
    feed = {"CO": 1.0 - burnt, "CO2": burnt, "H2": hydrogen * (1.0 - burnt), "H2O": hydrogen * burnt}
    settled = settle(GAS, {"gas": feed}, [T], P)
    found = figures(reduction(settled))
    for equation, name in (("H2 + 1/2 O2 = H2O", "h2o_to_h2"), ("CO + 1/2 O2 = CO2", "co2_to_co")):
        expected = 2.0 * (reaction(equation).gibbs_energy(T) + R * T * np.log(found[name]))
        assert oxygen_potential(settled) == pytest.approx(expected, abs=1e-3)
    assert found["log10_po2"] * R * T * np.log(10.0) == pytest.approx(found["oxygen_potential"])


def test_oxygen_of_air_by_its_pressure() -> None:
    air = settle(System.from_species("O2 N2"), {"air": {"O2": 21.0, "N2": 79.0}}, [300.0, 1500.0], 2.0e5)
    assert figures(reduction(air))["log10_po2"] == pytest.approx(np.log10(0.42))


def iron_wustite(T: float) -> float:
    """J/mol of O2: H. St. C. O'Neill, Am. Mineral. 73 (1988) 470 (from memory); log10 pO2 -14.9 at 1000 degC."""
    if T < 1184.0:
        return -519357.0 + 59.427 * T + 8.9276 * T * np.log(T)
    return -551159.0 + 269.404 * T - 16.9484 * T * np.log(T)


@pytest.mark.parametrize("T", [1073.15, 1173.15, 1273.15, 1473.15])
def test_oxygen_over_iron_and_wustite(T: float) -> None:
    """Measured by O'Neill with galvanic cells; the data here take wustite as one compound, Fe0.947O."""
    settled = settle(IRON, {"ore": {"Fe2O3(s)": 1.0}, "gas": {"H2": 4.0, "CO": 1.0}}, [T])
    found = figures(reduction(settled))
    assert 0.01 < found["metallisation_fe"][0] < 0.99
    assert found["oxygen_potential"] == pytest.approx(iron_wustite(T), abs=1000.0)


def test_sulfur_pressure_by_the_gas() -> None:
    settled = settle(System.from_elements("H S", condensed=False), {"gas": {"H2S": 1.0, "H2": 1.0}}, [1100.0], 2.0e5)
    found = figures(reduction(settled))
    assert found["log10_ps2"] == pytest.approx(np.log10(2.0 * settled.wet("S2")))
    assert "oxygen_potential" not in found


def test_gas_ratios_by_hand() -> None:
    gas = {"H2": 3.0, "H2O": 1.0, "CO": 1.0, "CO2": 3.0}
    found = figures(reduction(by_hand(gas, {"gas": {"H2": 3.6, "H2O": 0.4, "CO": 3.0, "CO2": 1.0}})))
    assert found["h2o_to_h2"] == pytest.approx(1.0 / 3.0)
    assert found["co2_to_co"] == pytest.approx(3.0)
    assert found["hydrogen_used"] == pytest.approx(0.25)
    assert found["co_used"] == pytest.approx(0.75)
    assert found["oxidation_degree_fed"] == pytest.approx(1.4 / 8.0)
    assert found["oxidation_degree"] == pytest.approx(0.5)


def test_metallisation_by_hand() -> None:
    """2 Fe, 1 Fe3C and 1 FeO in wustite's place hold 2 + 3 + 0.947 of iron, and 5 of it is metallic."""
    solids = {"Fe(s)": 2.0, "Fe3C(s)": 1.0, "Fe0.947O(s)": 1.0, "Cu2O(s)": 0.5, "Cu(s)": 3.0}
    found = figures(reduction(by_hand({**solids, "Zn": 0.9, "ZnO(s)": 0.1, "CO": 1.0}, {})))
    assert found["metallisation_fe"] == pytest.approx(5.0 / 5.947)
    assert found["fe_as_fe3c_s"] == pytest.approx(3.0 / 5.947)
    assert found["metallisation_cu"] == pytest.approx(3.0 / 4.0)
    assert found["metallisation_zn"] == pytest.approx(0.9)  # the vapour counts: it is reduced
    assert found["zn_in_gas"] == pytest.approx(0.9)


def test_places_of_a_metal_sum_to_one() -> None:
    feeds = {"ore": {"Fe2O3(s)": 1.0}, "gas": {"H2": np.array([0.5, 2.0, 4.0, 20.0]), "CO": 0.3}}
    found = figures(reduction(settle(IRON, feeds, 1173.15)))
    places = [value for name, value in found.items() if name.startswith("fe_")]
    assert sum(places) == pytest.approx(1.0, abs=0.01)  # phases below one per cent everywhere are not named
    assert (np.diff(found["metallisation_fe"]) >= -1e-9).all()


def test_without_metal_there_is_no_metallisation() -> None:
    found = figures(reduction(settle(GAS, {"gas": {"CO": 1.0, "H2O": 1.0}}, [1000.0])))
    assert not any(name.startswith("metallisation") for name in found)
