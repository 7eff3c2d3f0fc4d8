"""Oxygen that feeds supply and need, against equations of combustion and sums by hand.

Atomic weights, g/mol (IUPAC 2021, abridged): H 1.008, C 12.011, O 15.999, S 32.06.
"""

import pytest
from hypothesis import given
from hypothesis import strategies as st

from gibbsmin.practice.feeds.ratios import oxygen_need, supply_and_need

SHARE = st.floats(0.0, 1.0)


def gas(**parts):
    """Atoms of a gas made of CH4, CO, O2, N2, N2O, CO2 and H2O."""
    made_of = {
        "CH4": {"C": 1, "H": 4},
        "CO": {"C": 1, "O": 1},
        "O2": {"O": 2},
        "N2": {"N": 2},
        "N2O": {"N": 2, "O": 1},
        "CO2": {"C": 1, "O": 2},
        "H2O": {"H": 2, "O": 1},
    }
    atoms = {}
    for name, n in parts.items():
        for element, count in made_of[name].items():
            atoms[element] = atoms.get(element, 0.0) + n * count
    return atoms


@pytest.mark.parametrize(
    ("parts", "supply", "need"),
    [
        ({"O2": 0.21, "N2": 0.79}, 0.21, 0.0),  # air
        ({"O2": 0.21, "CH4": 0.01, "N2": 0.78}, 0.21, 0.02),  # an oxidant with something to burn in it
        ({"CH4": 0.5, "CO2": 0.4, "O2": 0.02, "N2": 0.08}, 0.0, 0.98),  # a fuel gas with air in it
        ({"CH4": 1.0, "O2": 2.0}, 0.0, 0.0),  # a mixture that just suffices to itself
        ({"CO": 1.0}, 0.0, 0.5),
        ({"N2O": 1.0}, 0.0, -0.5),  # oxygen that is not free
        ({"H2O": 1.0}, 0.0, 0.0),
        ({"O2": 0.03, "CO2": 0.12, "N2": 0.85}, 0.03, 0.0),  # flue gas
    ],
)
def test_supply_and_need(parts, supply, need):
    assert supply_and_need(gas(**parts), parts.get("O2", 0.0)) == pytest.approx((supply, need))


@given(SHARE, SHARE, SHARE, SHARE)
def test_supply_less_need_is_the_oxygen_balance(methane, oxygen, steam, laughing_gas):
    parts = {"CH4": methane, "O2": oxygen, "H2O": steam, "N2O": laughing_gas}
    supply, need = supply_and_need(gas(**parts), oxygen)
    balance = oxygen + 0.5 * laughing_gas - 2.0 * methane
    assert supply - need == pytest.approx(balance, abs=1e-12)
    assert supply in (0.0, oxygen)
    assert (supply > 0.0) == (oxygen > 0.0 and balance > 1e-15) or abs(balance) < 1e-12


@pytest.mark.parametrize(
    ("atoms", "need"),
    [
        ({"C": 1, "H": 3, "Cl": 1}, 1.5),  # CH3Cl + 3/2 O2 = CO2 + H2O + HCl
        ({"C": 1, "H": 3, "Br": 1}, 1.5),  # CH3Br + 3/2 O2 = CO2 + H2O + HBr
        ({"C": 1, "H": 3, "I": 1}, 1.5),
        ({"C": 1, "H": 2, "F": 2}, 1.0),  # CH2F2 + O2 = CO2 + 2 HF
    ],
)
def test_halogens_take_hydrogen(atoms, need):
    assert oxygen_need(atoms) == pytest.approx(need)


@pytest.mark.parametrize(
    ("percent", "need"),
    [
        # 750/12.011 + 50/4.032 + 10/32.06 - 80/31.998 mol O2 a kg of dry coal
        ({"C": 75.0, "H": 5.0, "O": 8.0, "S": 1.0}, 72.655),
        # 500/12.011 + 60/4.032 + 0.5/32.06 - 430/31.998 of dry wood
        ({"C": 50.0, "H": 6.0, "O": 43.0, "S": 0.05}, 43.087),
    ],
)
def test_oxygen_for_solid_fuels_by_hand(percent, need):
    weight = {"C": 12.011, "H": 1.008, "O": 15.999, "S": 32.06}
    atoms = {element: 10.0 * share / weight[element] for element, share in percent.items()}
    assert oxygen_need(atoms) == pytest.approx(need, abs=2e-3)


@pytest.mark.parametrize(
    "oxide",
    [
        {"Zn": 1, "O": 1},
        {"Pb": 1, "O": 1},
        {"Cu": 1, "O": 1},
        {"Ni": 1, "O": 1},
        {"Ba": 1, "O": 1},
        {"Sr": 1, "O": 1},
        {"Cr": 2, "O": 3},
        {"V": 2, "O": 5},
        {"Fe": 2, "O": 3},
        {"P": 2, "O": 5},
    ],
)
def test_oxides_of_an_ash_analysis_need_nothing(oxide):
    assert oxygen_need(oxide) == 0.0
