"""Halogens: fractions and shares by hand, the Deacon balance by its constant."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from settled_from import by_hand, figures, settle

from gibbsmin.practice.figures.halogens import halogens
from gibbsmin.practice.reactions.reactions import reaction
from gibbsmin.states.system import System


def test_by_hand() -> None:
    gas = {"HCl": 3.0, "Cl2": 0.5, "Cl": 1.0, "HBr": 1.0, "Br2": 0.25, "Br": 0.5, "HF": 0.1, "H2O": 10.0, "N2": 80.0}
    found = figures(halogens(by_hand(gas, {"all": {"HCl": 5.0, "HBr": 2.0, "HF": 0.1, "H2O": 10.0, "N2": 80.0}})))
    dry = sum(gas.values()) - 10.0
    assert found["hcl_dry"] == pytest.approx(3.0 / dry)
    assert found["cl_atom_dry"] == pytest.approx(1.0 / dry)
    assert found["hf_dry"] == pytest.approx(0.1 / dry)
    assert found["free_cl"] == pytest.approx(2.0 / 5.0)
    assert found["free_br"] == pytest.approx(1.0 / 2.0)
    assert found["cl2_to_hcl"] == pytest.approx(0.5 / 3.0)
    assert found["h_to_cl_fed"] == pytest.approx(27.1 / 5.0)


def test_the_deacon_balance() -> None:
    """Cl2² H2O² / (HCl⁴ O2) = K of the reaction, and free chlorine grows on cooling."""
    T = np.array([700.0, 900.0, 1200.0])
    system = System.from_elements("H Cl O N", condensed=False)
    settled = settle(system, {"gas": {"HCl": 1.0, "O2": 5.0, "N2": 80.0, "H2O": 10.0}}, T)
    found = figures(halogens(settled))
    K = np.exp(reaction("4 HCl + O2 = 2 Cl2 + 2 H2O").ln_k(T))
    assert found["cl2_to_hcl"] ** 2 == pytest.approx(
        K * settled.wet("HCl") ** 2 * settled.wet("O2") / settled.wet("H2O") ** 2, rel=1e-6
    )
    assert (np.diff(found["cl2_to_hcl"]) < 0.0).all()


# kJ/mol at 298.15 K and 1 bar: CRC Handbook of Chemistry and Physics, 95th ed. (from memory).
CRC_GIBBS = {"HCl": -95.3, "H2O": -228.6}


def test_the_deacon_constant_by_printed_values() -> None:
    settled = settle(
        System.from_species("HCl O2 Cl2 H2O"), {"gas": {"HCl": 1.0, "O2": 1.0, "H2O": 1e6, "Cl2": 1e-3}}, [298.15]
    )
    x = {name: float(settled.wet(name)[0]) for name in ("HCl", "O2", "H2O")}
    step = 2.0 * CRC_GIBBS["H2O"] - 4.0 * CRC_GIBBS["HCl"]
    ln_ratio = 0.5 * (-step * 1e3 / (8.314463 * 298.15) + np.log(x["HCl"] ** 2 * x["O2"] / x["H2O"] ** 2))
    assert np.log(figures(halogens(settled))["cl2_to_hcl"][0]) == pytest.approx(ln_ratio, abs=0.15)


def test_chlorine_counts_in_feeds_that_burn_only() -> None:
    """1.75 kg of chlorine in 100 kg of waste liquid (invented); the salt of the scrubber does not burn."""
    settled = by_hand({"HCl": 0.1, "N2": 1.0}, {"waste": {"CH4": 6.0, "HCl": 0.05}, "spray": {"NaCl(s)": 1.0}})
    waste = replace(settled.feeds["waste"], lower=np.array([5.0e6]))
    found = figures(halogens(replace(settled, feeds={**settled.feeds, "waste": waste})))
    mass = 6.0 * 16.043 + 0.05 * 36.458
    assert found["chlorine_of_fuels"] == pytest.approx(0.05 * 35.45 / mass, rel=1e-4)
    assert "chlorine_of_fuels" not in figures(halogens(settled))


def test_a_gas_without_halogens_has_no_numbers() -> None:
    assert halogens(by_hand({"N2": 1.0, "HCl": 0.0}, {"gas": {"N2": 1.0}})) == []
