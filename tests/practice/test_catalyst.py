"""Catalysts: sulfur on nickel, sulfides and carbonyls against published energies, poisons by hand."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from settled_from import by_hand, figures, settle

from gibbsmin.practice.figures.catalyst import catalyst, sulfur_coverage
from gibbsmin.states.system import System


def test_coverage_by_the_printed_isotherm() -> None:
    """At 973.15 K and H2S/H2 = 1e-6: 1.45 - 0.092741 - 0.040580 * 13.8155, worked by hand from the isotherm."""
    assert float(sulfur_coverage(1e-6, 973.15)) == pytest.approx(1.45 - 0.092741 - 0.040580 * 13.8155, abs=1e-4)


@given(st.floats(1e-12, 1.0), st.floats(1.1, 100.0), st.floats(500.0, 1300.0))
def test_coverage_grows_with_sulfur_and_stays_a_share(x: float, factor: float, T: float) -> None:
    less, more = float(sulfur_coverage(x, T)), float(sulfur_coverage(min(1.0, factor * x), T))
    assert 0.0 <= less <= more <= 1.0


# J/mol of S2 and of the reaction: E. T. Turkdogan, Physical Chemistry of High Temperature Technology, 1980 (memory):
# 3 Ni + S2 = Ni3S2, 2 Fe + S2 = 2 FeS, 2 H2 + S2 = 2 H2S.
TURKDOGAN = {"ni": (-331540.0, 163.2), "fe": (-300500.0, 105.1)}
SULFIDE = (-180580.0, 98.78)


@pytest.mark.parametrize("T", [800.0, 900.0])
@pytest.mark.parametrize("metal", ["ni", "fe"])
def test_sulfide_edge_by_published_energies(metal: str, T: float) -> None:
    """Within 4.5 kJ/mol of S: published energies of sulfides differ by so much."""
    found = figures(catalyst(by_hand({"H2": 1.0, "H2S": 1e-3}, {}, T)))
    step = (TURKDOGAN[metal][0] - SULFIDE[0]) + (TURKDOGAN[metal][1] - SULFIDE[1]) * T
    edge = np.log(found[f"sulfide_edge_{metal}"][0])
    assert 8.314463 * T * edge == pytest.approx(0.5 * step, abs=4500.0)
    assert found[f"sulfide_saturation_{metal}"] == pytest.approx(1e-3 / np.exp(edge))


def test_the_solver_makes_sulfide_beyond_the_edge() -> None:
    """A little nickel under much gas, on either side of the edge that was told for it."""
    system = System.from_elements("Ni H S")
    edge = float(figures(catalyst(by_hand({"H2": 1.0, "H2S": 1e-3}, {}, 900.0)))["sulfide_edge_ni"][0])
    feeds = {"gas": {"H2": 1e6, "H2S": 1e6 * edge * np.array([0.98, 1.02])}, "catalyst": {"Ni(s)": 1.0}}
    settled = settle(system, feeds, 900.0)
    assert (settled.amount("Ni(s)") > 0.0).tolist() == [True, False]
    assert (settled.amount("Ni3S2(s)") > 0.0).tolist() == [False, True]


def test_nickel_carbonyl_by_printed_values() -> None:
    """Enthalpies and entropies at 298.15 K, CRC Handbook (from memory), heat capacities neglected: a factor of 1.6."""
    T, bar, x = 423.15, 25.0, 0.1
    found = figures(catalyst(by_hand({"CO": x, "H2": 1.0 - x}, {}, T, bar * 1e5)))
    enthalpy, entropy = -602.9e3 + 4 * 110.5e3, 410.6 - 4 * 197.7 - 29.9
    expected = np.exp(-(enthalpy - T * entropy) / (8.314463 * T)) * (x * bar) ** 4 / bar
    assert abs(np.log(found["carbonyl_ni"][0] / expected)) < np.log(1.6)


def test_the_solver_carries_that_much_nickel_away() -> None:
    system = System.from_species(["CO", "H2", "Ni(CO)4", "Ni(s)"])
    feeds = {"gas": {"CO": 10.0, "H2": 90.0}, "catalyst": {"Ni(s)": 1.0}}
    settled = settle(system, feeds, [473.15], 25e5)
    assert figures(catalyst(settled))["carbonyl_ni"] == pytest.approx(settled.wet("Ni(CO)4"), rel=1e-8)


def test_hot_gas_has_no_carbonyl() -> None:
    assert "carbonyl_ni" not in figures(catalyst(by_hand({"CO": 1.0}, {}, 900.0)))


def test_poisons_by_hand() -> None:
    gas = {"H2": 90.0, "H2O": 10.0, "COS": 1.0, "CS2": 0.5, "HCl": 0.2, "PH3": 0.1}
    found = figures(catalyst(by_hand(gas, {})))
    dry = 91.8
    assert found["poison_s_dry"] == pytest.approx(2.0 / dry)
    assert found["poison_cl_dry"] == pytest.approx(0.2 / dry)
    assert found["poison_p_dry"] == pytest.approx(0.1 / dry)
    assert "poison_as_dry" not in found
    assert "sulfur_on_nickel" not in found  # no H2S
